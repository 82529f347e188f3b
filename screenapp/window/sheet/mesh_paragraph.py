"""6 Mesh: what is asked of it, and what it came to."""

from __future__ import annotations

from screenapp.model.findings import Findings
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
    "Plain bilinear quads are too stiff where the wall bends in its plane: they show too little "
    "stress and displacement. Use them only to see why another mesh was stiff."
)
INCOMPATIBLE_WARNING = (
    "Incompatible modes lose their gain on distorted quads; nine-node quads keep it."
)
COARSE = {"quad4": PLAIN_WARNING, "quad4-incompatible": INCOMPATIBLE_WARNING}


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

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the wishes and what came of them."""
        part = self.document.part
        mesh = part.mesh
        q = Quantities(part.display_units)
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
        warning = COARSE.get(mesh.element, "")
        self.warning.set(Words(warning, colour="doubt"))
        self.warning.setVisible(bool(warning))
        findings = self.document.findings
        self.figures.set(Words(_figures(findings), quiet=self.outdated()) if findings else "")
        self.figures.setVisible(findings is not None)
        return ()

    def outdated(self) -> bool:
        """The figures belong to an older part."""
        return self.document.findings is not None and not self.document.current


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
