"""1 Part: what is drawn, and the numbers of its holes and of what is selected."""

from __future__ import annotations

from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.features import find, place_name
from screenapp.model.ligaments import Ligament, ligaments
from screenapp.model.mass import mass_of
from screenapp.model.members import all_holes, whole_id
from screenapp.model.part import Corner, Edge, Part
from screenapp.model.regions import shape_with_zones
from screenapp.model.shape import Shape, shape_of
from screenapp.window.sheet import changes
from screenapp.window.sheet.dimension_rows import add_link, dimension_rows
from screenapp.window.sheet.hole_rows import count_of, hole_row
from screenapp.window.sheet.notes import NotesEdit
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import Choice, Link, Piece, Value, Words
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.rows import RowOf

UNITS = {"mm-N-MPa": "mm, N, MPa", "in-lbf-ksi": "in, lbf, ksi"}
SHOWN_HOLES = 12

MOST_LIVE = 3
"""Sentences about a change under way."""


class PartParagraph(Paragraph):
    """Outline and holes."""

    number = 1
    title = "Part"
    fields = ("outline", "holes", "dimensions", "display_units", "formulas", "")

    def build(self) -> None:
        """A summary, the holes, and what is selected."""
        self.summary = self.sentence()
        self.live = self.rows(0)
        self.holes = self.rows(64)
        self.more = self.sentence()
        self.picked = self.rows(76)
        self.dimensions = self.rows(76)
        self.add = self.sentence()
        self.notes = NotesEdit(self.document, self)
        self.body.addWidget(self.notes)
        self._narrowest: tuple[Part, Ligament | None] | None = None
        self.document.selection_changed.connect(self.refresh)
        self.document.live_faults_changed.connect(self._show_live)

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the part."""
        part = self.document.part
        q = Quantities.of(self.document)
        self.summary.set(*self._summary(part, q))
        self.holes.set([hole_row(self.document, h, q) for h in part.holes[:SHOWN_HOLES]])
        rest = len(part.holes) - SHOWN_HOLES
        self.more.set(f"And {rest} more holes: select one to see it." if rest > 0 else "")
        self.more.setVisible(rest > 0)
        self.picked.set(self._picked_rows(part, q))
        self.dimensions.set(dimension_rows(self.document, q))
        self.add.set(add_link(self.document))
        if part.outline is None:
            return ("Nothing is drawn yet: draw a closed outline on the board.",)
        return ()

    def _show_live(self) -> None:
        """The sentences of what is wrong with a change under way on the board."""
        self.live.set(
            [
                RowOf(
                    f"live {i}",
                    (),
                    (
                        Words(
                            f"As drawn now: {fault.cause}; {fault.mend.rstrip('.')}.", colour="bad"
                        ),
                    ),
                )
                for i, fault in enumerate(self.document.live_faults[:MOST_LIVE])
            ]
        )

    def says_already(self, fault: Fault) -> bool:
        """The missing outline is told once."""
        return fault.field == "outline" and self.document.part.outline is None

    def _summary(self, part: Part, q: Quantities) -> tuple[Piece | str, ...]:
        units = Value(
            "units",
            UNITS[part.display_units],
            "Units shown",
            lambda key: changes.set_units(self.document, key),
            lambda: tuple(Choice(k, t) for k, t in UNITS.items()),
            "Anything typed may carry a unit of its own",
        )
        shown: tuple[Piece | str, ...] = (" Shown in ", units, ".")
        if part.outline is None:
            return ("Shown in ", units, ".")
        holes = count_of(len(all_holes(part)), "hole")
        text = f"Outline of {count_of(len(part.outline.edges), 'edge')}, {holes}"
        if part.zones:
            text += f", {count_of(len(part.zones), 'zone')}"
        drawn = ("outline", "holes", "zones")
        sound = not any(f.blocks and f.field.startswith(drawn) for f in self.document.faults)
        try:
            shape = shape_with_zones(part) if sound else shape_of(part)
        except InvalidPartError:
            return (f"{text}.", *shown)
        return (f"{text}; {_size(part, shape, q)}.", *self._ligament(part, shape, q), *shown)

    def _ligament(self, part: Part, shape: Shape, q: Quantities) -> tuple[Piece | str, ...]:
        """The narrowest place; worked out once for each part, and only of a sound boundary."""
        if self._narrowest is None or self._narrowest[0] is not part:
            sound = not any(f.blocks and self.owns(f) for f in self.document.faults)
            found = ligaments(shape, shape.size)[:1] if sound else []
            self._narrowest = (part, found[0] if found else None)
        narrowest = self._narrowest[1]
        if narrowest is None:
            return ()
        one, other = narrowest.between
        place = Link(
            "ligament",
            f"{place_name(part, one)} and {place_name(part, other)}",
            lambda _key: self.document.select(one, other),
            "Show where the part is narrowest",
        )
        return (f" Narrowest ligament {q.show(narrowest.width, 'length')}, between ", place, ".")

    def _picked_rows(self, part: Part, q: Quantities) -> list[RowOf]:
        rows = []
        beyond = {h.id for h in part.holes[SHOWN_HOLES:]}
        for id_ in self.document.selection[:6]:
            found = find(part, id_)
            if found is None:
                continue
            record = found.record
            if found.kind == "hole" and whole_id(id_) in beyond:
                hole = next(h for h in part.holes if h.id == whole_id(id_))
                rows.append(hole_row(self.document, hole, q))
                beyond.discard(hole.id)
            elif isinstance(record, Corner):
                rows.append(self._corner_row(record, found.field, q))
            elif isinstance(record, Edge):
                rows.append(self._edge_row(part, record, q))
        return rows

    def _corner_row(self, corner: Corner, field: str, q: Quantities) -> RowOf:
        change = changes.CornerChange(self.document, corner.id)
        name = f"corner {corner.id}"

        def length(key: str, value: float, what: str, at: str) -> Value:
            full = f"{what} of {name}"
            return q.value(key, value, "length", full, change.setter(key), field=f"{field}.{at}")

        return RowOf(
            corner.id,
            (name,),
            (
                "at ",
                length("x", corner.at[0], "x", "at.0"),
                ", ",
                length("y", corner.at[1], "y", "at.1"),
                *(
                    (", chamfered by ", length("chamfer", corner.chamfer, "Chamfer", "chamfer"))
                    if corner.chamfer
                    else (", rounded by ", length("round", corner.round, "Round", "round"))
                ),
            ),
            lambda: changes.remove(self.document, corner.id),
            f"Remove {name}",
        )

    def _edge_row(self, part: Part, edge: Edge, q: Quantities) -> RowOf:
        long = changes.edge_length(part, edge.id)
        kind = "straight" if edge.through is None else "arc"
        text = f"{kind}, {q.show(long, 'length')} long" if long is not None else kind
        return RowOf(edge.id, (f"edge {edge.id}",), (Words(text),))


def _size(part: Part, shape: Shape, q: Quantities) -> str:
    x0, y0, x1, y1 = shape.bounds
    text = (
        f"{q.bare(x1 - x0, 'length')} × {q.show(y1 - y0, 'length')}, {q.show(shape.area, 'area')}"
    )
    if part.material is not None and (shape.regions or not part.zones):
        text += f", {q.show(mass_of(part, shape), 'mass')}"
    return text
