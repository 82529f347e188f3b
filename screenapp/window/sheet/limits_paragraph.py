"""5 Limits: what the part must stay under."""

from __future__ import annotations

from screenapp.model.errors import Fault
from screenapp.model.material_axes import RULES
from screenapp.model.part import (
    DisplacementLimit,
    FatigueLimit,
    JointLimit,
    Limit,
    Part,
    StrainLimit,
    StressLimit,
)
from screenapp.window.sheet import changes, limit_changes
from screenapp.window.sheet.limit_sentences import (
    displacement_pieces,
    fatigue_pieces,
    joint_pieces,
    round_holes,
    strain_pieces,
)
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import SEPARATOR, Choice, Link, Piece, Value
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.rows import RowOf

MEASURES = {
    "von_mises": "von Mises stress",
    "tresca": "Tresca stress",
    "sigma_1": "largest tension",
    "tsai_hill": "Tsai–Hill stress",
    "largest_stress": "largest stress in the axes",
}
REMARKS = {
    "von_mises": "what yields",
    "tresca": "what yields, cautious",
    "sigma_1": "brittle",
    "tsai_hill": "orthotropic",
    "largest_stress": "orthotropic, says which way it breaks",
}
AGAINST = {"proof_stress": "proof stress", "strength": "tensile strength"}
AT_RISING = {
    "undecided": "the verdict is undecided",
    "structural": "the stress drawn on from 0.4 and 1.0 walls away counts",
}


class LimitsParagraph(Paragraph):
    """The limits."""

    number = 5
    title = "Limits"
    fields = ("limits",)

    def build(self) -> None:
        """The list and the links that add to it."""
        self.list = self.rows(0)
        self.add = self.sentence()

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the limits."""
        part = self.document.part
        q = Quantities.of(self.document)
        self.list.set([self._row(part, limit, q) for limit in part.limits])
        joint = Link(
            "joint",
            "+ pin or bolt",
            lambda key: limit_changes.add_joint_limit(self.document, key),
            "Bearing, net section, shear-out and edge distances of a hole",
            lambda: round_holes(self.document.part),
        )
        fatigue = Link(
            "fatigue",
            "+ fatigue",
            lambda _key: limit_changes.add_fatigue_limit(self.document),
            "A stress that swings between two cases",
        )
        self.add.set(
            Link(
                "stress",
                "+ stress limit",
                lambda _key: limit_changes.add_stress_limit(self.document),
            ),
            SEPARATOR,
            Link(
                "displacement",
                "+ displacement limit",
                lambda _key: limit_changes.add_displacement_limit(self.document),
            ),
            SEPARATOR,
            Link(
                "strain",
                "+ local strain",
                lambda _key: limit_changes.add_strain_limit(self.document),
                "What a peak strains by where it yields",
            ),
            *((SEPARATOR, fatigue) if part.cases else ()),
            *((SEPARATOR, joint) if round_holes(part) else ()),
        )
        self.add.setVisible(bool(part.limits))
        if part.limits:
            return ()
        return (
            "There is nothing to judge yet: set a ",
            Link(
                "stress", "stress limit", lambda _key: limit_changes.add_stress_limit(self.document)
            ),
            " or a ",
            Link(
                "displacement",
                "displacement limit",
                lambda _key: limit_changes.add_displacement_limit(self.document),
            ),
            ".",
        )

    def says_already(self, fault: Fault) -> bool:
        """That there is no limit is told once."""
        return fault.field == "limits" and not self.document.part.limits

    def _row(self, part: Part, limit: Limit, q: Quantities) -> RowOf:
        change = limit_changes.LimitChange(self.document, limit.id)
        pieces: tuple[Piece | str, ...]
        if isinstance(limit, DisplacementLimit):
            pieces = displacement_pieces(part, limit, change, q)
        elif isinstance(limit, JointLimit):
            pieces = joint_pieces(part, limit, change, q)
        elif isinstance(limit, FatigueLimit):
            pieces = fatigue_pieces(part, limit, change, q)
        elif isinstance(limit, StrainLimit):
            pieces = strain_pieces(limit, change, q)
        else:
            pieces = self._stress(part, limit, change, q)
        return RowOf(
            limit.id,
            (),
            pieces,
            lambda: changes.remove(self.document, limit.id),
            "Remove this limit",
        )

    def _stress(
        self, part: Part, limit: StressLimit, change: limit_changes.LimitChange, q: Quantities
    ) -> tuple[Piece | str, ...]:
        measure = Value(
            "measure",
            MEASURES.get(limit.measure, limit.measure),
            "Which stress",
            lambda key: change.set("measure", key),
            lambda: tuple(Choice(k, t, REMARKS[k]) for k, t in MEASURES.items()),
        )
        against = Value(
            "against",
            AGAINST.get(limit.against, limit.against),
            "Against what",
            lambda key: change.set("against", key),
            lambda: tuple(Choice(k, t) for k, t in AGAINST.items()),
        )
        factor = q.value(
            "factor",
            limit.factor,
            "number",
            "Safety factor",
            change.setter("factor"),
            field=f"limits.{limit.id}.factor",
        )
        if limit.measure in RULES:
            beside: tuple[Piece | str, ...] = (", isotropic zones under the ", against, ".")
            return (
                *(measure, " times ", factor, " stays under the strengths in the material's axes"),
                *(beside if _has_isotropic(part) else (".",)),
                *(" Where it keeps rising, ", self._at_rising(limit, change), "."),
            )
        allowed: tuple[str, ...] = (".",)
        known = part.material and getattr(part.material, limit.against, None)
        if known and limit.factor > 0.0:
            allowed = (f": at most {q.show(known / limit.factor, 'stress')}.",)
        return (
            *(measure, " times ", factor, " stays under the ", against),
            *allowed,
            *(" Where it keeps rising, ", self._at_rising(limit, change), "."),
        )

    def _at_rising(self, limit: StressLimit, change: limit_changes.LimitChange) -> Value:
        return Value(
            "at_rising",
            AT_RISING.get(limit.at_rising, limit.at_rising),
            "What counts where the stress keeps rising",
            lambda key: change.set("at_rising", key),
            lambda: tuple(Choice(k, t) for k, t in AT_RISING.items()),
        )


def _has_isotropic(part: Part) -> bool:
    """Whether the wall or a zone is isotropic."""
    used = (part.material_of(zone) for zone in range(-1, len(part.zones)))
    return any(m is not None and not m.orthotropic for m in used)
