"""What must hold of every part that an edit returns, whatever was done before."""

from __future__ import annotations

from screenapp.model.features import everything, place_name, places_of
from screenapp.model.part import BodyLoad, Part
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.size_faults import id_faults
from screenapp.model.validity import faults_of


def check_record(part: Part) -> str:
    """The part's file, which reads back to the same part and writes the same bytes again.

    Reading checks it against the schema, double ids and all.  Supports and loads stand on places
    that are there, every id has a name, and looking for faults never fails.
    """
    text = part_to_text(part)
    again = part_from_text(text)
    assert part_to_text(again) == text
    assert again == part
    assert id_faults(part) == []
    places = places_of(part)
    for on in [s.on for s in part.supports] + [
        x.on for c in part.cases for x in c.loads if not isinstance(x, BodyLoad)
    ]:
        assert on in places, on
    for found in everything(part):
        assert "“" not in place_name(part, found.record.id)
    for fault in faults_of(part):
        assert fault.cause
        assert fault.mend
    return text
