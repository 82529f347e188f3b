"""All edits of a part in one place: pure functions from a part to the next part.

Every edit keeps the ids of what stays, gives new things fresh ids, drops the formula of a number
that it changes, and refuses nonsense with an EditError (cause and mend) instead of returning a
broken record.  Edits that may take more away than was asked return an `Outcome` that says what
was lost; all others return the part.

A part that an edit returns may still have faults (a hole half outside, a round too big): these are
for `validity.faults_of` to tell, since they come and go while something is dragged.
"""

from screenapp.model.edit_booleans import cut, join, ring_meets
from screenapp.model.edit_copies import add_holes, copy_text, holes_of, pasted_holes
from screenapp.model.edit_holding import (
    add_case,
    add_load,
    add_support,
    put_on,
    rename_case,
    replace_load,
    replace_support,
)
from screenapp.model.edit_holes import (
    add_circle_hole,
    add_loop_hole,
    add_slot_hole,
    hole_centre,
    move,
    move_hole,
    resize_hole,
)
from screenapp.model.edit_loops import (
    insert_corner,
    move_corner,
    outline_from_rectangle,
    rectangle_corners,
    remove_corner,
    set_chamfer,
    set_edge_arc,
    set_outline,
    set_round,
    straighten,
)
from screenapp.model.edit_mirror import (
    MirrorLine,
    mirror_half,
    mirror_holes,
    mirror_line_between,
    mirror_line_of,
)
from screenapp.model.edit_offset import offset_edge
from screenapp.model.edit_patterns import break_pattern, change_pattern, set_pattern
from screenapp.model.edit_places import remove_hole, remove_outline
from screenapp.model.edit_readings import (
    add_cut,
    add_probe,
    move_cut,
    move_probe,
    rename_cut,
    rename_probe,
)
from screenapp.model.edit_removal import remove
from screenapp.model.edit_rules import EditError, Outcome, new_id, new_ids
from screenapp.model.edit_settings import (
    add_limit,
    replace_limit,
    set_job_details,
    set_material,
    set_mesh,
    set_mesh_size,
    set_notes,
    set_thickness,
    set_title,
    set_units,
    set_wall_state,
)
from screenapp.model.edit_zones import (
    add_zone,
    hole_to_zone,
    remove_zone,
    reshape_zone,
    set_zone,
    zone_to_hole,
)
from screenapp.model.features import Found, find, place_name

__all__ = [
    "EditError",
    "Found",
    "MirrorLine",
    "Outcome",
    "add_case",
    "add_circle_hole",
    "add_cut",
    "add_holes",
    "add_limit",
    "add_load",
    "add_loop_hole",
    "add_probe",
    "add_slot_hole",
    "add_support",
    "add_zone",
    "break_pattern",
    "change_pattern",
    "copy_text",
    "cut",
    "find",
    "hole_centre",
    "hole_to_zone",
    "holes_of",
    "insert_corner",
    "join",
    "mirror_half",
    "mirror_holes",
    "mirror_line_between",
    "mirror_line_of",
    "move",
    "move_corner",
    "move_cut",
    "move_hole",
    "move_probe",
    "new_id",
    "new_ids",
    "offset_edge",
    "outline_from_rectangle",
    "pasted_holes",
    "place_name",
    "put_on",
    "rectangle_corners",
    "remove",
    "remove_corner",
    "remove_hole",
    "remove_outline",
    "remove_zone",
    "rename_case",
    "rename_cut",
    "rename_probe",
    "replace_limit",
    "replace_load",
    "replace_support",
    "reshape_zone",
    "resize_hole",
    "ring_meets",
    "set_chamfer",
    "set_edge_arc",
    "set_job_details",
    "set_material",
    "set_mesh",
    "set_mesh_size",
    "set_notes",
    "set_outline",
    "set_pattern",
    "set_round",
    "set_thickness",
    "set_title",
    "set_units",
    "set_wall_state",
    "set_zone",
    "straighten",
    "zone_to_hole",
]
