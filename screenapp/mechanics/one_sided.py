"""Pins that only push: which part of a hole's rim they touch is found case by case.

The pin is rigid, without friction and fits without play.  Where it touches, the rim cannot move
into it and it pushes on the rim; elsewhere the rim moves off and nothing acts on it.  Starting from
contact all round, nodes that would be pulled are let go and nodes that would enter the pin are
caught again, until nothing changes (active set; Kikuchi & Oden, Contact Problems in Elasticity,
from memory).  Cases do not add up any more, so each is solved by itself.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.assembly import System
from screenapp.mechanics.constraints import HeldDirections
from screenapp.mechanics.elastic_supports import Springs
from screenapp.mechanics.linear_system import solve_system
from screenapp.model.errors import SolvingError
from screenapp.model.part import Part, PinSupport
from screenapp.model.progress import SILENT, Progress
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

MOST_ROUNDS = 40
"""A contact that has not settled after so many rounds is given up; ten are seldom needed."""

ONE_BY_ONE = 15
"""From this round on only the worst node changes at a time, so that no two take turns for ever."""

NOTHING = 1e-9
"""Share of the case's largest reaction, or displacement, that counts as none."""


def has_pins(part: Part) -> bool:
    """Whether a pin that only pushes holds the part."""
    return any(isinstance(s, PinSupport) for s in part.supports)


def solve_with_pins(
    part: Part,
    system: System,
    held: HeldDirections,
    forces: Floats,
    progress: Progress = SILENT,
    springs: Springs | None = None,
) -> Solution:
    """Solve every case with the contact that it makes.

    Args:
        held: holds of all supports, those of the pins all round their rims.
        forces: nodal forces, (n_cases, n_nodes, 2) [N].

    Raises:
        InvalidPartError, SolvingError, Cancelled: as `solve_system`; and SolvingError where the
            contact does not settle, or the part lifts off its pins and nothing else holds it.
    """
    pushing = np.isin(
        held.owners, [k for k, s in enumerate(part.supports) if isinstance(s, PinSupport)]
    )
    names = " and ".join(s.on for s in part.supports if isinstance(s, PinSupport))
    return _together(
        [
            _one_case(
                system,
                held.of_case(k),
                pushing,
                own[None],
                names,
                progress,
                None if springs is None else springs.of_cases(np.array([k])),
            )
            for k, own in enumerate(forces)
        ]
    )


def _one_case(
    system: System,
    held: HeldDirections,
    pushing: Bools,
    forces: Floats,
    names: str,
    progress: Progress,
    springs: Springs | None,
) -> Solution:
    movable = pushing & (system.index[held.nodes] >= 0)
    touching = np.ones(len(held.nodes), dtype=bool)
    for number in range(MOST_ROUNDS):
        progress.check()
        try:
            found = solve_system(system, held.only(touching), forces, progress, springs)
        except SolvingError as error:
            if number == 0:
                raise
            raise SolvingError(
                f"the part lifts off the pin at {names}, and then {error.cause}",
                "turn the load round, or hold the part elsewhere too",
            ) from error
        wrong = _wrong(held, found, movable, touching)
        if not wrong.any():
            return found
        if number >= ONE_BY_ONE:
            worst = np.zeros(len(wrong), dtype=bool)
            worst[int(np.argmax(wrong))] = True
            wrong = np.where(worst, wrong, 0.0)
        touching = touching ^ (wrong > 0.0)
    raise SolvingError(
        f"where the pin at {names} touches has not settled after {MOST_ROUNDS} rounds",
        "ask for another element size, or let a bearing load stand for the pin",
    )


def _wrong(held: HeldDirections, found: Solution, movable: Bools, touching: Bools) -> Floats:
    """How wrongly each hold touches or not, relative to the largest; 0 where it is right, (k,)."""
    assert found.support_forces is not None
    force = (found.support_forces[0, held.nodes] * held.directions).sum(axis=1)
    into = (found.displacements[0, held.nodes] * held.directions).sum(axis=1) - held.by_case[0]
    most = float(np.abs(found.support_forces[0]).max(initial=0.0)) + 1e-300
    farthest = float(np.abs(found.displacements[0]).max(initial=0.0)) + 1e-300
    pulled = np.where(movable & touching, force / most, 0.0)
    entered = np.where(movable & ~touching, into / farthest, 0.0)
    wrong = np.maximum(pulled, entered)
    return np.where(wrong > NOTHING, wrong, 0.0)


def _together(found: Sequence[Solution]) -> Solution:
    """The solutions of single cases as one of all."""

    def joined(arrays: list[Floats | None]) -> Floats | None:
        given = [a for a in arrays if a is not None]
        return np.concatenate(given) if given else None

    return replace(
        found[0],
        displacements=np.concatenate([s.displacements for s in found]),
        reactions=tuple(s.reactions[0] for s in found),
        balance=tuple(s.balance[0] for s in found),
        residual=max(s.residual for s in found),
        unknowns=max(s.unknowns for s in found),
        internal_modes=joined([s.internal_modes for s in found]),
        support_forces=joined([s.support_forces for s in found]),
    )
