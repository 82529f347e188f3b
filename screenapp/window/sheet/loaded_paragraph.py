"""4 Loaded: the load cases and what acts in each."""

from __future__ import annotations

from typing import NamedTuple

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QVBoxLayout, QWidget

from screenapp.model.errors import Fault
from screenapp.model.features import everything, name_of, place_name
from screenapp.model.part import (
    BearingLoad,
    BodyLoad,
    Case,
    CircleHole,
    Corner,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MisfitLoad,
    MomentLoad,
    Part,
    PointLoad,
    PressureLoad,
    ShearLoad,
    SpinLoad,
    SymmetrySupport,
    TemperatureLoad,
)
from screenapp.window.document import Document
from screenapp.window.sheet import load_changes
from screenapp.window.sheet.body_load_rows import spin_pieces, temperature_pieces
from screenapp.window.sheet.combination_rows import add_link, combination_row
from screenapp.window.sheet.direction import direction_text
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import SEPARATOR, Choice, Link, Piece, Value, Words
from screenapp.window.sheet.point_pieces import point_pieces
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.resultant_words import KEY, load_words, together_rows
from screenapp.window.sheet.rows import RowOf, Rows
from screenapp.window.sheet.sentence import Sentence
from screenapp.window.sheet.span_pieces import span_pieces, varying_pieces

KIND_WORDS = {
    "bearing": "a pin bears on it",
    "force": "a force, spread evenly",
    "line": "a force per length",
    "pressure": "a pressure",
    "shear": "a shear along it",
    "point": "a force at a point, or on a patch",
    "moment": "a moment, sheared round it",
}


BODY_NAMES: dict[type, str] = {
    GravityLoad: "own weight",
    SpinLoad: "spin",
    TemperatureLoad: "change of temperature",
    MisfitLoad: "misfit",
}


class CaseBlock(QWidget):
    """One load case: its name, its loads, and links that add and remove."""

    def __init__(self, document: Document, parent: QWidget) -> None:
        super().__init__(parent)
        self._document = document
        self.head = Sentence(self)
        self.loads = Rows(document, 92, self)
        self.foot = Sentence(self)
        column = QVBoxLayout(self)
        column.setContentsMargins(0, 0, 0, 4)
        column.setSpacing(0)
        for widget in (self.head, self.loads, self.foot):
            column.addWidget(widget)

    def show_case(self, case: Case, number: int) -> None:
        """Show a case."""
        document = self._document
        q = Quantities.of(document)
        change = load_changes.CaseChange(document, case.id)
        name = Value("name", case.name, "Name of the load case", change.rename)
        self.head.set("In case ", name, ":" if case.loads else ": nothing acts yet.")
        self.head.on_delete = change.remove
        rows = [_load_row(document, case, load, q) for load in case.loads]
        self.loads.set([*rows, *together_rows(document, case)])
        add = Link("add", "+ load", change.add, "Add a load to this case", self._choices)
        pieces: list[Piece | str] = [add]
        if len(document.part.cases) > 1:
            gone = Link("remove", "remove the case", lambda _key: change.remove())
            pieces += [SEPARATOR, gone]
        if number != document.view.case and len(document.part.cases) > 1:
            show = Link("view", "show it on the board", lambda _key: document.look(case=number))
            pieces += [SEPARATOR, show]
        self.foot.set(*pieces)

    def _choices(self) -> tuple[Choice, ...]:
        return load_choices(self._document)


class LoadedParagraph(Paragraph):
    """All cases."""

    number = 4
    title = "Loaded"
    fields = ("cases", "combinations")

    def build(self) -> None:
        """A column of case blocks, kept by id."""
        self._blocks: dict[str, CaseBlock] = {}
        self._column = QVBoxLayout()
        self._column.setContentsMargins(0, 0, 0, 0)
        self._column.setSpacing(4)
        self.body.addLayout(self._column)
        self.together = self.sentence()
        self.combinations = self.rows()
        self.add = self.sentence()
        self.key = self.sentence()
        self.document.view_changed.connect(self.refresh)

    def block(self, case_id: str) -> CaseBlock:
        """The block of a case."""
        return self._blocks[case_id]

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the cases."""
        part = self.document.part
        wanted = [case.id for case in part.cases]
        for id_ in [i for i in self._blocks if i not in wanted]:
            gone = self._blocks.pop(id_)
            self._column.removeWidget(gone)
            gone.hide()
            gone.deleteLater()
        for number, case in enumerate(part.cases):
            block = self._blocks.get(case.id)
            if block is None:
                block = self._blocks[case.id] = CaseBlock(self.document, self)
            if self._column.indexOf(block) != number:
                self._column.removeWidget(block)
                self._column.insertWidget(number, block, 0, Qt.AlignmentFlag(0))
            block.show_case(case, number)
        self.together.set("Together:")
        self.together.setVisible(bool(part.combinations))
        self.combinations.set([combination_row(self.document, c) for c in part.combinations])
        new_case = Link(
            "add",
            "+ case",
            lambda _key: load_changes.add_case(self.document),
            "Add a load case",
        )
        self.add.set(new_case)
        if len(part.cases) > 1 or part.combinations:
            self.add.set(new_case, SEPARATOR, add_link(self.document))
        self.add.setVisible(bool(part.cases))
        self.key.set(Words(KEY, quiet=True))
        self.key.setVisible(any(self.document.amounts.loads.values()))
        if part.cases:
            return ()
        if part.outline is None:
            return ("Nothing acts on it yet.",)
        load = Link(
            "load",
            "load a place",
            lambda key: load_changes.add_load(self.document, None, key),
            choices=lambda: load_choices(self.document),
        )
        return ("Nothing acts on the part: ", load, " or use the board's load tool.")

    def says_already(self, fault: Fault) -> bool:
        """That nothing acts is told once."""
        return fault.field == "cases" and not self.document.part.cases


def load_choices(document: Document) -> tuple[Choice, ...]:
    """Kinds of load by place: keys are "kind place"; the part's own weight is "gravity"."""
    groups: dict[str, list[Choice]] = {"Holes": [], "Edges": [], "Sharp corners": []}
    chosen: list[Choice] = []
    for found in everything(document.part):
        record = found.record
        kinds: tuple[str, ...]
        if found.inside:
            continue
        if found.kind == "hole":
            kinds = ("force", "line", "pressure", "shear")
            if isinstance(record, CircleHole):
                kinds = ("bearing", *kinds, "moment")
            title = "Holes"
        elif found.kind == "edge":
            kinds, title = ("force", "line", "pressure", "shear", "point"), "Edges"
        elif isinstance(record, Corner) and record.sharp:
            kinds, title = ("point",), "Sharp corners"
        else:
            continue
        lines = tuple(Choice(f"{kind} {record.id}", KIND_WORDS[kind]) for kind in kinds)
        line = Choice(record.id, name_of(found), children=lines)
        groups[title].append(line)
        if record.id in document.selection:
            chosen.append(line)
    made: list[Choice] = [Choice("-", "Selected"), *chosen] if chosen else []
    for title, lines_of in groups.items():
        if lines_of:
            made += [Choice("-", title), *lines_of]
    off = [
        Choice(f"misfit {s.id}", f"{s.id} is off at {place_name(document.part, s.on)}")
        for s in document.part.supports
        if not isinstance(s, SymmetrySupport)
    ]
    if off:
        made += [Choice("-", "Supports"), *off]
    return (
        *made,
        Choice("-", ""),
        Choice("gravity", "the part's own weight", "or any acceleration"),
        Choice("spin", "spin about a point"),
        Choice("temperature", "a change of temperature"),
    )


def _load_row(document: Document, case: Case, load: Load, q: Quantities) -> RowOf:
    change = load_changes.LoadChange(document, load.id)
    also: tuple[str, ...]
    if isinstance(load, BodyLoad):
        where, also, name = "everywhere", (), BODY_NAMES[type(load)]
        if isinstance(load, TemperatureLoad) and load.zone is not None:
            where, also = f"zone {load.zone}", (load.zone,)
        if isinstance(load, MisfitLoad):
            where, also = f"support {load.support}", (load.support,)
            name = f"misfit of support {load.support}"
    else:
        where, also = place_name(document.part, load.on), (load.on,)
        name = f"load at {where}"
    field = f"cases.{case.id}.loads.{load.id}"
    return RowOf(
        load.id,
        (where,),
        (
            *_load_pieces(document.part, load, name, change, q, field),
            *varying_pieces(document.part, load, where, change.put, q, field),
            *span_pieces(document.part, load, where, change.put, q, field),
            *point_pieces(document.part, load, where, change.put, q, field),
            *load_words(document, case.id, load.id),
        ),
        change.remove,
        f"Remove the {name} from {case.name}",
        also,
    )


class _Single(NamedTuple):
    """How a load of one number is told."""

    lead: str
    attribute: str
    kind: str
    noun: str
    hint: str


SINGLE: dict[type, _Single] = {
    PressureLoad: _Single(
        "pressed by ", "pressure", "stress", "Pressure", "positive presses on the material"
    ),
    ShearLoad: _Single(
        "sheared along by ",
        "per_length",
        "line load",
        "Shear",
        "positive runs with the material on its left",
    ),
    MomentLoad: _Single(
        "turned by ", "moment", "moment", "Moment", "positive turns counter-clockwise"
    ),
}


def _load_pieces(
    part: Part, load: Load, name: str, change: load_changes.LoadChange, q: Quantities, field: str
) -> tuple[Piece | str, ...]:
    if isinstance(load, PressureLoad | ShearLoad | MomentLoad):
        one = SINGLE[type(load)]
        value = q.value(
            one.attribute,
            getattr(load, one.attribute),
            one.kind,
            f"{one.noun} of {name}",
            change.setter(one.attribute),
            one.hint,
            f"{field}.{one.attribute}",
        )
        return (one.lead, value)
    if isinstance(load, SpinLoad):
        return spin_pieces(load, change, q, field)
    if isinstance(load, TemperatureLoad):
        return temperature_pieces(part, load, change, q, field)
    kinds = {
        BearingLoad: ("a pin bears with ", "force"),
        ForceLoad: ("pulled by ", "force"),
        PointLoad: ("pulled at the point by ", "force"),
        LineLoad: ("pulled by ", "line load"),
        GravityLoad: ("own weight under ", "acceleration"),
        MisfitLoad: ("off by ", "displacement"),
    }
    lead, kind = kinds[type(load)]
    if isinstance(load, PointLoad) and load.along is not None:
        lead = "pulled by "
    parts = f"x {q.show(load.x, kind)}, y {q.show(load.y, kind)}"
    way = Value(
        "way",
        direction_text(load.x, load.y),
        f"Direction of {name}",
        lambda text: change.direct(text, field),
        hint=f"right, up, left, down, or an angle from +x; now {parts}",
    )
    amount = q.size_value(
        (load.x, load.y), kind, f"Size of {name}", change.resize, change.set_vector, field
    )
    return (lead, amount, " at " if way.text.endswith("°") else ", ", way)
