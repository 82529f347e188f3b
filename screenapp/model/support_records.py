"""How a part may be held: one frozen record for each kind of support.

Units are those of `part.py`.  Where a record has `start` and `end` it may stand on part of an edge
only: these are lengths [mm] along it from its first corner (see `edge_parts`), None the edge's own
start and end.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class FixedSupport:
    """Holds an edge, a hole's rim or a sharp corner in both directions."""

    id: str
    on: str
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class RollerSupport:
    """Holds the displacement along one direction and lets the place slide across it.

    `angle` [deg] is the held direction; None means the boundary's own normal (so on a hole it is
    the radial direction: a pin on which the part can turn).  A corner needs an angle.
    """

    id: str
    on: str
    angle: float | None = None
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class PrescribedSupport:
    """Moves a place by a given displacement [mm]; None leaves that direction free."""

    id: str
    on: str
    x: float | None = None
    y: float | None = None
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class SymmetrySupport:
    """A straight edge on which the part is cut in half: it stays on its line and slides along it.

    What is drawn is one half; the other does the same in the mirror.
    """

    id: str
    on: str
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class PinSupport:
    """A rigid pin in a round hole that only pushes.

    It fits without play and without friction, bears on the side that is pressed against it, and
    lets the rim go elsewhere.
    """

    id: str
    on: str


@dataclass(frozen=True)
class ElasticSupport:
    """A bed of springs along an edge or round a hole.

    For every millimetre of the boundary that moves by one millimetre it pushes back with `normal`
    [N/mm²] along the boundary's normal and with `along` [N/mm²] along its tangent; a stiffness of
    zero lets that direction free.  It pulls as well as pushes.
    """

    id: str
    on: str
    normal: float = 0.0
    along: float = 0.0
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class BoltSupport:
    """Bolts in round holes that hold the part together, each fitting its hole without play.

    A bolt holds its rim along the radius, pushing and pulling, and lets it turn.  With a
    `stiffness` [N/mm] its shank gives way by force over stiffness, as a bed of springs round the
    rim; None is a rigid bolt.  The bolts' ground is one rigid thing, so that they share force and
    moment as the part and their stiffness have it.

    Attributes:
        on: a round hole, or all of a pattern.
        also: further holes or patterns.
    """

    id: str
    on: str
    also: tuple[str, ...] = ()
    stiffness: float | None = None


@dataclass(frozen=True)
class WeldSupport:
    """A fillet weld along an edge or round a hole, with a `throat` [mm] (of both sides together
    where both are welded).

    It gives way as a strip of the part's own material as wide as it is thick: E across and G along
    the boundary, N for each mm of its length and mm of movement, whatever its throat.  So the force
    per length stays finite at its ends.
    """

    id: str
    on: str
    throat: float
    start: float | None = None
    end: float | None = None


Support = (
    FixedSupport
    | RollerSupport
    | PrescribedSupport
    | PinSupport
    | SymmetrySupport
    | ElasticSupport
    | BoltSupport
    | WeldSupport
)


def stands_on(support: Support) -> tuple[str, ...]:
    """Ids of all places that a support is on."""
    return (support.on, *support.also) if isinstance(support, BoltSupport) else (support.on,)


def gives_way(support: Support) -> bool:
    """Whether it only pushes back against a movement and holds nothing exactly."""
    if isinstance(support, BoltSupport):
        return support.stiffness is not None
    return isinstance(support, ElasticSupport | WeldSupport)
