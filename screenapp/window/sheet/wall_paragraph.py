"""2 Wall: thickness, material, and what holds across the wall."""

from __future__ import annotations

from typing import get_args

from screenapp.model.errors import Fault, ScreenappError
from screenapp.model.materials import library
from screenapp.model.own_materials import keep_material, own_materials, remove_material
from screenapp.model.part import Material, MaterialFamily
from screenapp.window.sheet import changes
from screenapp.window.sheet.field import capital
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import Choice, Link, Piece, Value, Words
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.sheet_figures import sheet_figures
from screenapp.window.sheet.zone_rows import MINE, zone_rows

OWN, OWN_SHEET = "own", "own sheet"
STATES = {
    "plane stress": ("plane stress", "Free to contract across: "),
    "plane strain": ("plane strain", "Held from contracting across: "),
}


class WallParagraph(Paragraph):
    """The wall and its material."""

    number = 2
    title = "Wall"
    fields = ("wall", "materials", "zones")

    def build(self) -> None:
        """One sentence for the wall, one for the material's figures."""
        self.wall = self.sentence()
        self.figures = self.sentence()
        self.mine = self.sentence()
        self.zones = self.rows(64)

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the wall."""
        problem = own_materials().problem
        self.mine.set(Words(f"My materials cannot be read. {capital(problem)}.", colour="doubt"))
        self.mine.setVisible(bool(problem))
        part = self.document.part
        q = Quantities.of(self.document)
        self.zones.set(zone_rows(self.document, q, self._offered))
        thickness = q.value(
            "thickness",
            part.wall.thickness,
            "length",
            "Wall thickness",
            lambda value: changes.set_wall(self.document, "thickness of the wall", thickness=value),
            field="wall.thickness",
        )
        state, lead = STATES.get(part.wall.state, (part.wall.state, ""))
        across = Value(
            "state",
            state,
            "What holds across the wall",
            lambda key: changes.set_wall(self.document, "state of the wall", state=key),
            lambda: (
                Choice("plane stress", "plane stress", "thin wall, free to contract"),
                Choice("plane strain", "plane strain", "long or thick, held across"),
            ),
        )
        if part.material is None:
            self.wall.set("The wall is ", thickness, " thick. ", lead, across, ".")
            self.figures.hide()
            return (
                "No material is chosen: ",
                Link("choose", "choose a material", self._choose, choices=self._choices),
                ".",
            )
        material = Value(
            "material", part.material.name, "Material", self._choose, choices=self._choices
        )
        turned: tuple[Piece | str, ...] = ()
        if part.material.orthotropic:
            turned = (", its 1-axis at ", self._axis(q), " from x")
        self.wall.set(
            *("The wall is ", thickness, " thick, of ", material, *turned, ". "),
            *(lead, across, "."),
        )
        self.figures.set(*self._figures(part.material, q))
        self.figures.show()
        return ()

    def says_already(self, fault: Fault) -> bool:
        """That no material is chosen is told once."""
        return fault.field == "wall.material" and not self.document.part.wall.material

    def _axis(self, q: Quantities) -> Value:
        return q.value(
            "axis",
            self.document.part.wall.axis or 0.0,
            "angle",
            "Direction of the material's 1-axis",
            lambda value: changes.set_wall(self.document, "1-axis of the wall", axis=value),
            "Counter-clockwise from x",
            field="wall.axis",
        )

    def _figures(self, m: Material, q: Quantities) -> tuple[Piece | str, ...]:
        change = changes.MaterialChange(self.document, m.name)
        if m.orthotropic:
            return (*sheet_figures(m, change, q), *self._source(m, change))
        proof = q.optional_value(
            "proof_stress",
            m.proof_stress,
            "stress",
            "Proof stress",
            change.setter("proof_stress"),
            field=f"materials.{m.name}.proof_stress",
        )
        strength = q.optional_value(
            "strength",
            m.strength,
            "stress",
            "Tensile strength",
            change.setter("strength"),
            field=f"materials.{m.name}.strength",
        )
        return (
            "E ",
            q.value(
                "E",
                m.youngs_modulus,
                "modulus",
                "Young's modulus E",
                change.setter("youngs_modulus"),
            ),
            ", ν ",
            q.value(
                "nu",
                m.poissons_ratio,
                "number",
                "Poisson's ratio",
                change.setter("poissons_ratio"),
                field=f"materials.{m.name}.poissons_ratio",
            ),
            ", density ",
            q.value(
                "density",
                m.density,
                "density",
                "Density",
                change.setter("density"),
                field=f"materials.{m.name}.density",
            ),
            ", proof stress ",
            proof,
            ", strength ",
            strength,
            ".",
            *self._source(m, change),
        )

    def _source(self, m: Material, change: changes.MaterialChange) -> tuple[Piece | str, ...]:
        """Where the figures come from; the name of own ones can be changed."""
        source: tuple[Piece | str, ...] = (f" ({m.source})",) if m.source else ()
        if not m.source.startswith("own"):
            return source
        name = Value("name", m.name, "Name of the material", change.rename)
        if own_materials().named(m.name) == m:
            kept: tuple[Piece | str, ...] = (
                *(" Kept in my materials: ", Link("forget", "remove it there", self._forget), "."),
            )
        else:
            kept = (
                " ",
                Link(
                    "keep",
                    "keep in my materials",
                    self._keep,
                    "Other parts may then be made of it; this one has its own copy",
                ),
            )
        return (*source, " Called ", name, ".", *kept)

    def _keep(self, _key: str) -> None:
        material = self.document.part.material
        if material is not None:
            keep_material(material)
            self.refresh()

    def _forget(self, _key: str) -> None:
        remove_material(self.document.part.wall.material)
        self.refresh()

    def _choices(self) -> tuple[Choice, ...]:
        return (
            *self._offered(),
            Choice("-", ""),
            Choice(OWN, "Own material…", "give its figures"),
            Choice(OWN_SHEET, "Own orthotropic sheet…", "figures along two axes"),
        )

    def _offered(self) -> tuple[Choice, ...]:
        part = self.document.part
        own = {m.name for m in part.materials}
        lines = [Choice(m.name, m.name, self._remark(m)) for m in part.materials]
        if lines:
            lines.insert(0, Choice("-", "In this part"))
        mine = [m for m in own_materials().materials if m not in part.materials]
        if mine:
            lines.append(Choice("-", "My materials"))
            lines += [Choice(MINE + m.name, m.name, self._remark(m)) for m in mine]
        if lines:
            lines.append(Choice("-", "Library"))
        offered = [grade.at(part.wall.thickness) for grade in library()]
        for family in get_args(MaterialFamily):
            kin = [m for m in offered if m.family == family and m.name not in own]
            grades = tuple(Choice(m.name, m.name, self._remark(m)) for m in kin)
            if grades:
                lines.append(Choice(family, f"{family.capitalize()} grades", children=grades))
        return tuple(lines)

    def _remark(self, m: Material) -> str:
        q = Quantities.of(self.document)
        if m.tension_1 is not None and m.tension_2 is not None:
            return f"{q.bare(m.tension_1, 'stress')} / {q.show(m.tension_2, 'stress')}"
        return "" if m.proof_stress is None else q.show(m.proof_stress, "stress")

    def _choose(self, key: str) -> None:
        part = self.document.part
        if key == OWN:
            changes.own_material(self.document)
            return
        if key == OWN_SHEET:
            changes.own_sheet(self.document)
            return
        if key.startswith(MINE):
            kept = own_materials().named(key.removeprefix(MINE))
            if kept is None:
                raise ScreenappError("that material is no longer kept", "choose another one")
            changes.choose_material(self.document, kept)
            return
        known = {grade.name: grade.at(part.wall.thickness) for grade in library()}
        own = next((m for m in part.materials if m.name == key), None)
        if own is None or not own.stands_for(part.wall.thickness):
            own = known.get(key, own)
        assert own is not None
        changes.choose_material(self.document, own)
