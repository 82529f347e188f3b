"""What an engineer should know about a part that can be screened all the same."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from screenapp.model.crossings import piece_name
from screenapp.model.curve_table import CurveTable
from screenapp.model.edge_parts import pieces_under, point_of
from screenapp.model.errors import Fault
from screenapp.model.extents import FARTHEST
from screenapp.model.features import place_name
from screenapp.model.ligaments import Ligament, ligaments
from screenapp.model.part import DisplacementLimit, Material, Part, PointLoad, SymmetrySupport
from screenapp.model.shape import Shape

RE_ENTERS = 185.0
"""Sharp corners with a larger angle within the material [deg] are pointed out."""

NARROW = 2.0
"""Ligaments narrower than this [mm] are pointed out."""

SHORT = 1e-3
"""Edges shorter than this share of the part's size are pointed out."""

SOFT, STIFF = 1.0, 1.3e6
"""Young's moduli outside these [MPa] are pointed out: softer than foam, stiffer than diamond
(1.05e6 to 1.2e6 MPa, from memory)."""

ENTERING = (
    "these corners re-enter the material and are sharp, so that the stress there has no finite "
    "value; round them, or read the stress at a distance from them"
)

MOST = 20
"""No more cautions of one kind are listed."""


def cautions_of(part: Part, shape: Shape, table: CurveTable) -> list[Fault]:
    """All cautions; none of them blocks."""
    return [
        *_corner_cautions(shape, table),
        *_ligament_cautions(part, shape, table),
        *_piece_cautions(shape, table),
        *_wall_cautions(part, shape),
        *_orthotropic_cautions(part, shape),
        *_point_cautions(part, shape),
        *_limit_cautions(part),
        *_place_cautions(part, shape, table),
    ]


def material_angles(
    shape: Shape, table: CurveTable
) -> list[tuple[str, tuple[float, float], float]]:
    """Id, place [mm] and angle within the material [deg] of each sharp corner; 270 re-enters."""
    n = len(table)
    before = np.arange(-1, n - 1)
    for first, last in shape.loops:
        before[first] = last - 1
    u, v = table.ways_out[before], table.ways_in
    turn = np.degrees(np.arctan2(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0], np.sum(u * v, axis=1)))
    bent = np.flatnonzero(np.abs(turn) > 1e-9)
    starts = zip(
        np.round(table.start[bent], 9).tolist(), (180.0 - turn[bent]).tolist(), strict=True
    )
    at_start = {(x, y): angle for (x, y), angle in starts}
    places = np.round([at for _, at in shape.sharp_corners], 9).reshape(-1, 2).tolist()
    return [
        (id_, at, at_start.get((x, y), 180.0))
        for (id_, at), (x, y) in zip(shape.sharp_corners, places, strict=True)
    ]


def _corner_cautions(shape: Shape, table: CurveTable) -> Iterator[Fault]:
    entering = [found for found in material_angles(shape, table) if found[2] > RE_ENTERS]
    for id_, at, angle in entering[:MOST]:
        yield Fault(
            f"corner {id_} re-enters the material at {angle:.0f}° and is sharp: "
            "the stress there has no finite value",
            "round it, or read the stress at a distance from it",
            "",
            (id_,),
            at,
            blocks=False,
            alike=ENTERING,
        )
    if len(entering) > MOST:
        yield Fault(
            f"{len(entering) - MOST} more corners re-enter the material and are sharp",
            "round them, or read the stress at a distance from them",
            "outline",
            tuple(id_ for id_, _, _ in entering[MOST:]),
            blocks=False,
            alike=ENTERING,
        )


def _ligament_cautions(part: Part, shape: Shape, table: CurveTable) -> Iterator[Fault]:
    """Narrow places: under 2 mm anywhere, under the wall's thickness beside a hole."""
    thickness = part.wall.thickness if math.isfinite(part.wall.thickness) else 0.0
    below = min(max(NARROW, thickness), shape.size)
    said: list[Ligament] = []
    for ligament in ligaments(shape, below, table):
        holes = [f for f in ligament.between if f in shape.hole_ids]
        if ligament.width >= NARROW and not holes:
            continue
        if any(_beside(ligament, other) for other in said):
            continue
        said.append(ligament)
        if len(said) > MOST:
            return
        one, two = (place_name(part, f) for f in ligament.between)
        yield Fault(
            f"only {ligament.width:.3g} mm of material stands between {one} and {two}",
            "move them apart unless it is meant",
            "",
            ligament.between,
            ligament.at,
            blocks=False,
            span=ligament.ends,
        )


def _beside(one: Ligament, other: Ligament) -> bool:
    """Whether two ligaments are the same narrow place, seen from neighbouring pieces."""
    return math.dist(one.at, other.at) < one.width


def _piece_cautions(shape: Shape, table: CurveTable) -> Iterator[Fault]:
    """Edges and fillets so short that the mesh must be very fine there."""
    lengths = table.lengths
    drawn = np.array([c.kind != "hole" for c in shape.curves])
    for k in np.flatnonzero(drawn & (lengths < SHORT * shape.size))[:MOST]:
        piece = shape.curves[k]
        x, y = piece.curve.point(0.5)
        yield Fault(
            f"{piece_name(piece)} is only {lengths[k]:.2g} mm long",
            "remove it unless it is meant: it makes the mesh very fine there",
            "",
            (piece.feature,),
            (float(x), float(y)),
            blocks=False,
            span=(piece.curve.start, piece.curve.end),
        )


def _zone_range_cautions(part: Part) -> Iterator[Fault]:
    """Zones so thick or thin that the figures of their material do not stand for them."""
    for number, zone in enumerate(part.zones):
        material, thickness = part.material_of(number), part.wall_of(number).thickness
        if material is not None and not material.stands_for(thickness):
            yield Fault(
                f"the figures of “{material.name}” stand for walls {_range_words(material)}, "
                f"zone {zone.id} has {thickness:g} mm",
                "choose a material of its own for the zone, or give figures of your own",
                f"zones.{zone.id}.thickness",
                (zone.id,),
                blocks=False,
            )


def _wall_cautions(part: Part, shape: Shape) -> Iterator[Fault]:
    if part.wall.thickness > shape.size / 3.0:
        yield Fault(
            f"the wall is {part.wall.thickness:g} mm thick and the part only "
            f"{shape.size:.3g} mm across: it is not thin",
            "check the thickness; stresses across the wall are left out",
            "wall.thickness",
            blocks=False,
        )
    yield from _zone_range_cautions(part)
    material = part.material
    if material is None:
        return
    if not material.stands_for(part.wall.thickness):
        yield Fault(
            f"the figures of “{material.name}” stand for walls {_range_words(material)}, "
            f"this one has {part.wall.thickness:g} mm",
            "choose the material anew, or give figures of your own",
            "wall.material",
            blocks=False,
        )
    modulus, proof, strength = material.youngs_modulus, material.proof_stress, material.strength
    if not SOFT <= modulus <= STIFF:
        yield Fault(
            f"the Young's modulus of “{material.name}” is {modulus:g} MPa",
            "check its unit: metals have 40 000 to 210 000 MPa, plastics 1000 to 20 000 MPa",
            f"materials.{material.name}.youngs_modulus",
            blocks=False,
        )
    if proof is not None and strength is not None and proof > strength:
        yield Fault(
            f"the proof stress of “{material.name}” is above its strength",
            "check both figures",
            f"materials.{material.name}.proof_stress",
            blocks=False,
        )


def _orthotropic_cautions(part: Part, shape: Shape) -> Iterator[Fault]:
    """What is not seen of a layered sheet, and lines of symmetry that are none."""
    used: dict[str, Material] = {}
    for zone in range(-1, len(part.zones)):
        material = part.material_of(zone)
        if material is not None and material.orthotropic:
            used[material.name] = material
    for name in used:
        yield Fault(
            f"“{name}” counts as one even sheet: what its layers carry, and whether they come "
            "apart at edges and holes, is not seen",
            "judge holes and cut edges by tests, or by the maker's own rules",
            "wall.material",
            blocks=False,
        )
    for support in part.supports:
        if not isinstance(support, SymmetrySupport):
            continue
        for i in pieces_under(part, shape, support):
            zone = shape.zone_behind(i)
            material, along = part.material_of(zone), shape.curves[i].curve.tangent(0.5)
            heading = math.degrees(math.atan2(float(along[1]), float(along[0])))
            askew = math.sin(2.0 * math.radians(heading - (part.wall_of(zone).axis or 0.0)))
            if material is not None and material.orthotropic and abs(askew) > 1e-6:
                yield Fault(
                    f"{place_name(part, support.on)} is a line of symmetry, but “{material.name}” "
                    "meets it askew to its axes: the other half is taken to have them mirrored",
                    "draw the whole part, or turn the 1-axis along the line or across it",
                    f"supports.{support.id}",
                    (support.id,),
                    blocks=False,
                )
                break


def _range_words(m: Material) -> str:
    """The walls that a material's figures stand for, e.g. "from 3 mm to 16 mm"."""
    low = f"from {m.thickness_from:g} mm" if m.thickness_from is not None else ""
    high = f"up to {m.thickness_upto:g} mm" if m.thickness_upto is not None else ""
    return " ".join(words for words in (low, high) if words)


def _point_cautions(part: Part, shape: Shape) -> Iterator[Fault]:
    sharp = dict(shape.sharp_corners)
    for case in part.cases:
        for load in case.loads:
            if not isinstance(load, PointLoad) or load.patch is not None:
                continue
            at = point_of(part, shape, load)
            if at is not None:
                edge = f"on edge {load.on}" if load.along is not None else f"at corner {load.on}"
                yield Fault(
                    f"point load {load.id} {edge}: the stress under it has no finite value",
                    "spread it over a patch of an edge, or do not judge the stress near it",
                    f"cases.{case.id}.loads.{load.id}",
                    (load.id, load.on),
                    at,
                    blocks=False,
                )
    for support in part.supports:
        if support.on in sharp:
            yield Fault(
                f"support {support.id} holds the single point of corner {support.on}: "
                "the stress there has no finite value if it carries a force",
                "hold an edge or a hole, or do not judge the stress near it",
                f"supports.{support.id}",
                (support.id, support.on),
                sharp[support.on],
                blocks=False,
            )


def _limit_cautions(part: Part) -> Iterator[Fault]:
    if not part.limits:
        yield Fault(
            "no limit is set, so there is nothing to judge",
            "add a limit on stress or displacement",
            "limits",
            blocks=False,
        )


def _place_cautions(part: Part, shape: Shape, table: CurveTable) -> Iterator[Fault]:
    """Probes, and limits at a place, that lie outside the part."""
    places = [("probe", p.id, p.at, f"readings.{p.id}.at") for p in part.readings]
    places += [
        ("the place of limit", limit.id, limit.at, f"limits.{limit.id}.at")
        for limit in part.limits
        if isinstance(limit, DisplacementLimit) and limit.at is not None
    ]
    places = [p for p in places if np.abs(p[2]).max() <= FARTHEST]  # NaN compares false
    if not places:
        return
    points = np.array([at for _, _, at, _ in places], dtype=float)
    inside = table.inside(0, points)
    boxes = table.loop_boxes(shape)
    for loop in range(1, len(shape.loops)):
        near = np.flatnonzero(
            np.all((points > boxes[loop, :2]) & (points < boxes[loop, 2:]), axis=1)
        )
        if len(near):
            inside[near] &= ~table.inside(loop, points[near])
    everyone = np.arange(len(table))
    for (what, id_, at, field), point, ok in zip(places, points, inside, strict=True):
        if ok:
            continue
        t = table.nearest(everyone, np.broadcast_to(point, (len(table), 2)))
        gap = float(np.hypot(*(table.points(everyone, t) - point).T).min())
        if gap > 1e-3 * shape.size:
            yield Fault(
                f"{what} {id_} lies outside the part, {gap:.3g} mm from its boundary",
                "move it onto the part or remove it",
                field,
                (id_,),
                at,
                blocks=False,
            )
