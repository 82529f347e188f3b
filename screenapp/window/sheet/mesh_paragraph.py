"""6 Mesh: what is asked of it, and what it came to."""

from __future__ import annotations

from screenapp.model.findings import Findings, WallGauge
from screenapp.model.gauge_text import loss_text, stiffness_text, wall_text
from screenapp.model.shape import shape_of
from screenapp.screening.wall_gauge import expected_gauge
from screenapp.window.figure_table import Column, FigureTable, Line
from screenapp.window.sheet import changes
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import Choice, Piece, Value, Words
from screenapp.window.sheet.quantities import Quantities, grouped, percent, power

ELEMENTS = {
    "quad9": Choice("quad9", "nine-node quads", "curved edges, quadratic"),
    "quad8": Choice("quad8", "eight-node quads", "quadratic while undistorted"),
    "quad4-incompatible": Choice(
        "quad4-incompatible", "four-node quads with incompatible modes", "good only as rectangles"
    ),
    "quad4": Choice("quad4", "plain bilinear quads", "too stiff in bending"),
}
PLAIN_WARNING = (
    "Plain bilinear quads are too stiff where the wall bends in its plane: {figure}. Use them only "
    "to see why another mesh was stiff."
)
INCOMPATIBLE_WARNING = (
    "Incompatible modes lose their gain on distorted quads; nine-node quads keep it."
)
GAUGE_TIP = (
    "How many times as stiff plain bilinear quads of that number and aspect are in pure bending of "
    "the wall (closed form)"
)
MOST_WALLS = 4


class MeshParagraph(Paragraph):
    """The mesh."""

    number = 6
    title = "Mesh"
    fields = ("mesh",)

    def build(self) -> None:
        """Wishes, a warning where one is due, and figures after screening."""
        self.wishes = self.sentence()
        self.warning = self.sentence()
        self.figures = self.sentence()
        self.table = FigureTable(self.document, "Thin walls", self, grows=True)
        self.body.addWidget(self.table)
        self.losses = self.sentence()

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the wishes and what came of them."""
        part = self.document.part
        mesh = part.mesh
        q = Quantities.of(self.document)
        element = Value(
            "element",
            ELEMENTS[mesh.element].text if mesh.element in ELEMENTS else mesh.element,
            "Element",
            lambda key: changes.set_mesh(self.document, "element", element=key),
            lambda: tuple(ELEMENTS.values()),
        )
        tolerance = q.value(
            "tolerance",
            mesh.tolerance,
            "share",
            "Tolerance at which a number counts as settled",
            lambda value: changes.set_mesh(self.document, "tolerance", tolerance=value),
            field="mesh.tolerance",
        )
        across = q.value(
            "across",
            float(mesh.across),
            "count",
            "Least number of elements across the thinnest wall",
            lambda value: changes.set_mesh(self.document, "elements across", across=round(value)),
        )
        size = q.optional_value(
            "size",
            mesh.size,
            "length",
            "Largest element side",
            lambda value: changes.set_mesh(self.document, "element size", size=value),
            "as the program chooses",
            "mesh.size",
        )
        self.wishes.set(
            "Made of ",
            element,
            ", settled to ",
            tolerance,
            ", at least ",
            across,
            " across the thinnest wall, sides at most ",
            size,
            ".",
        )
        warning = self._warning()
        self.warning.set(Words(warning, colour="doubt"))
        self.warning.setVisible(bool(warning))
        findings = self.document.findings
        self.figures.set(Words(_figures(findings), quiet=self.outdated()) if findings else "")
        self.figures.setVisible(findings is not None)
        walls = findings.mesh.walls[:MOST_WALLS] if findings else ()
        self.table.show_lines(_columns(q), tuple(_line(q, w) for w in walls), self.outdated())
        losses = _losses(findings) if findings and mesh.element != "quad4" else ""
        self.losses.set(Words(f"{losses}.", quiet=True) if losses else "")
        self.losses.setVisible(bool(losses))
        return ()

    def _warning(self) -> str:
        """What is wrong with the chosen element, with its figure; "" for the better ones."""
        part, findings = self.document.part, self.document.findings
        if part.mesh.element == "quad4-incompatible":
            return INCOMPATIBLE_WARNING
        if part.mesh.element != "quad4":
            return ""
        if findings is not None and self.document.current:
            said = _losses(findings)
            if said:
                return PLAIN_WARNING.format(figure=said.partition(": ")[2])
        wall = None
        if not any(fault.blocks for fault in self.document.faults):
            wall = expected_gauge(part, shape_of(part))
        if wall is None:
            return PLAIN_WARNING.format(figure="they show too little stress and displacement")
        squares = "one square" if wall.layers == 1 else f"{wall.layers} squares"
        return PLAIN_WARNING.format(
            figure=f"with {squares} across the wall between {wall.place}, "
            f"{stiffness_text(wall)} as stiff as it is"
        )

    def outdated(self) -> bool:
        """The figures belong to an older part."""
        return self.document.findings is not None and not self.document.current


def _columns(q: Quantities) -> tuple[Column, ...]:
    return (
        Column("thin wall between"),
        Column(f"width {q.show(1.0, 'length').split()[-1]}", number=True),
        Column("across", number=True, tip="Elements across it on the last mesh"),
        Column("plain quads", number=True, tip=GAUGE_TIP),
    )


def _line(q: Quantities, wall: WallGauge) -> Line:
    one, two = wall.between
    texts = (
        wall.place,
        q.bare(float(f"{wall.width:.4g}"), "length"),
        str(wall.layers),
        stiffness_text(wall),
    )
    return Line(one, texts, f"{wall_text(wall, q.units)}.", also=(two,))


def _losses(findings: Findings) -> str:
    names = {case.case: case.name for case in findings.cases}
    return loss_text(findings.mesh.plain, names)


def _figures(findings: Findings) -> str:
    mesh = findings.mesh
    worst = max(
        (max(case.balance.force, case.balance.moment) for case in findings.cases), default=0.0
    )
    n = len(mesh.passes)
    text = (
        f"{n} pass{'' if n == 1 else 'es'}, {grouped(mesh.elements)} elements, "
        f"{grouped(mesh.unknowns)} unknowns, {mesh.across} across the thinnest wall; estimated "
        f"energy error {percent(mesh.error_estimate)}. "
        f"Loads and reactions balance to {power(worst)}."
    )
    return f"{text} {mesh.note}" if mesh.note else text
