"""3 Held: where and how the part is held."""

from __future__ import annotations

from screenapp.model.errors import Fault
from screenapp.model.features import find, place_name
from screenapp.model.part import (
    BoltSupport,
    CircleHole,
    Corner,
    Edge,
    ElasticSupport,
    FixedSupport,
    Part,
    PinSupport,
    PrescribedSupport,
    RollerSupport,
    Support,
    SymmetrySupport,
    WeldSupport,
)
from screenapp.model.support_records import stands_on
from screenapp.window.sheet import changes, support_changes
from screenapp.window.sheet.bolt_pieces import bolt_pieces
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import Choice, Link, Piece, Value
from screenapp.window.sheet.places import place_choices
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.rows import RowOf
from screenapp.window.sheet.span_pieces import span_pieces

KINDS = (
    Choice("fixed", "fixed", "held in both directions"),
    Choice("normal", "held across its boundary", "slides along it"),
    Choice("pin", "held by a pin all round", "the part can turn on it"),
    Choice("symmetry", "on a line of symmetry", "only one half is drawn"),
    Choice("pushing", "held by a pin that only pushes", "bears on the side that is pressed"),
    Choice("angle", "held along one direction", "slides across it"),
    Choice("bolts", "held by bolts", "the force in each is told"),
    Choice("weld", "held by a weld", "the force per length is told"),
    Choice("springs", "held by springs", "it gives way in proportion to the force"),
    Choice("moved", "moved by a given amount", "x, y or both"),
)


class HeldParagraph(Paragraph):
    """The supports."""

    number = 3
    title = "Held"
    fields = ("supports",)

    def build(self) -> None:
        """The list and the link that adds to it."""
        self.list = self.rows()
        self.add = self.sentence()

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the supports."""
        part = self.document.part
        q = Quantities.of(self.document)
        self.list.set([self._row(s, q) for s in part.supports])
        add = Link("add", "+ support", self._add, "Hold another place", self._places)
        self.add.set(add)
        self.add.setVisible(bool(part.supports))
        if part.supports:
            return ()
        if part.outline is None:
            return ("Nothing holds it yet.",)
        hold = Link("hold", "hold a place", self._add, choices=self._places)
        return ("Nothing holds the part: ", hold, " or use the board's support tool.")

    def says_already(self, fault: Fault) -> bool:
        """That nothing holds it is told once."""
        return fault.field == "supports" and not self.document.part.supports

    def _places(self) -> tuple[Choice, ...]:
        return place_choices(self.document)

    def _add(self, on: str) -> None:
        support_changes.add_support(self.document, on)

    def _row(self, support: Support, q: Quantities) -> RowOf:
        where = place_name(self.document.part, support.on)
        change = support_changes.SupportChange(self.document, support.id)
        field = f"supports.{support.id}"
        return RowOf(
            support.id,
            (where,),
            (
                *self._pieces(support, where, q),
                *span_pieces(self.document.part, support, where, change.put, q, field),
            ),
            lambda: changes.remove(self.document, support.id),
            f"Remove the support at {where}",
            stands_on(support),
        )

    def _pieces(self, support: Support, where: str, q: Quantities) -> tuple[Piece | str, ...]:
        change = support_changes.SupportChange(self.document, support.id)
        texts = {c.key: c.text for c in KINDS}
        part = self.document.part
        kinds = _kinds(part, support)

        def kind(key: str) -> Value:
            return Value("kind", texts[key], f"How {where} is held", change.kind, lambda: kinds)

        if isinstance(support, FixedSupport):
            return (kind("fixed"), " in both directions")
        if isinstance(support, SymmetrySupport):
            return (kind("symmetry"),)
        if isinstance(support, PinSupport):
            return (kind("pushing"), "; it fits without play and friction")
        if isinstance(support, RollerSupport):
            if support.angle is None:
                if any(c.key == "pin" for c in kinds):
                    return (kind("pin"), ", so that it can turn on it")
                return (kind("normal"), ", free to slide along it")
            angle = q.value(
                "angle",
                support.angle,
                "angle",
                f"Held direction at {where}",
                change.setter("angle"),
                field=f"supports.{support.id}.angle",
            )
            return (kind("angle"), ", at ", angle)
        if isinstance(support, WeldSupport):
            throat = q.value(
                "throat",
                support.throat,
                "length",
                f"Throat of the weld at {where}",
                change.setter("throat"),
                "of both sides together where both are welded",
                f"supports.{support.id}.throat",
            )
            return (kind("weld"), ", throat ", throat)
        if isinstance(support, BoltSupport):
            return (kind("bolts"), *bolt_pieces(part, support, change, q))
        if isinstance(support, ElasticSupport):
            return (kind("springs"), *_spring_pieces(support, where, change, q))
        assert isinstance(support, PrescribedSupport)
        x = q.optional_value(
            "x",
            support.x,
            "displacement",
            f"Movement of {where} along x",
            change.setter("x"),
            "free",
            f"supports.{support.id}.x",
        )
        y = q.optional_value(
            "y",
            support.y,
            "displacement",
            f"Movement of {where} along y",
            change.setter("y"),
            "free",
            f"supports.{support.id}.y",
        )
        return (kind("moved"), ": x ", x, ", y ", y)


def _spring_pieces(
    support: ElasticSupport, where: str, change: support_changes.SupportChange, q: Quantities
) -> tuple[Piece | str, ...]:
    """ ", across it 50 N/mm², along it free"."""
    pieces: list[Piece | str] = []
    for lead, name, stiffness in (
        (", across it ", "normal", support.normal),
        (", along it ", "along", support.along),
    ):
        pieces += [
            lead,
            q.optional_value(
                name,
                stiffness or None,
                "bed_stiffness",
                f"Stiffness {lead.strip(', ')} of the springs at {where}",
                change.setter(name),
                "free",
                f"supports.{support.id}.{name}",
            ),
        ]
    return tuple(pieces)


def _kinds(part: Part, support: Support) -> tuple[Choice, ...]:
    """The ways in which the place of a support may be held."""
    found = find(part, support.on)
    record = found.record if found is not None else None
    if isinstance(record, Edge):
        out = {"pin", "pushing", "bolts", *(() if record.through is None else ("symmetry",))}
    elif isinstance(record, CircleHole):
        out = {"normal", "symmetry", "weld"}
    else:
        out = {
            "pin",
            "pushing",
            "symmetry",
            "bolts",
            *(("springs", "weld") if isinstance(record, Corner) else ()),
        }
    return tuple(c for c in KINDS if c.key not in out)
