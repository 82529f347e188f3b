"""The sentences that tell what was done to a drawing, each with the places it speaks of."""

from __future__ import annotations

from screenapp.exchange.drawing import Drawing, Remark
from screenapp.exchange.joining import Joined
from screenapp.exchange.overlaps import Removed
from screenapp.model.part import CircleHole, LoopHole, Part, Point, SlotHole

MOST = 12
"""Open chains told one by one; the rest is told by its number."""

MOST_PLACES = 200
"""Places kept for one sentence."""


def place(at: Point) -> str:
    """A place [mm] in words."""
    return f"({_figure(at[0])}, {_figure(at[1])})"


def extent(bounds: tuple[float, float, float, float]) -> str:
    """Width and height [mm] in words."""
    x0, y0, x1, y1 = bounds
    return f"{x1 - x0:.4g} × {y1 - y0:.4g} mm"


def of_reading(drawing: Drawing) -> list[Remark]:
    """What was mended and what was passed over while reading."""
    remarks = [Remark("note", f"{_capital(text)}.") for text in drawing.repaired]
    if drawing.ignored:
        listed = ", ".join(f"{n} {_one(word) if n == 1 else word}" for word, n in drawing.ignored)
        remarks.append(Remark("ignored", f"Passed over: {listed}."))
    return remarks


def of_extent(wide: float, tall: float) -> Remark:
    """How large the drawing is in its own unit, to tell which that is."""
    return Remark("note", f"The lines cover {wide:.4g} × {tall:.4g} of the drawing's own units.")


def of_layers(drawing: Drawing, left_out: list[str]) -> list[Remark]:
    """The layers that are not used."""
    if not left_out:
        return []
    counts = {layer.name: layer.curves for layer in drawing.layers}
    shown = ", ".join(f"“{name}” ({_lines(counts[name])})" for name in left_out[:MOST])
    more = f" and {len(left_out) - MOST} more" if len(left_out) > MOST else ""
    word = "Layer" if len(left_out) == 1 else "Layers"
    return [Remark("ignored", f"{word} left out: {shown}{more}.")]


def of_fitting(fitted: int, arcs: int, specks: int, tolerance: float) -> list[Remark]:
    """Splines and ellipses that became arcs."""
    remarks = []
    if fitted:
        what = "1 spline or ellipse" if fitted == 1 else f"{fitted} splines and ellipses"
        text = f"{what} fitted by {_count(arcs, 'arc')} within {tolerance:g} mm."
        remarks.append(Remark("note", text))
    if specks:
        remarks.append(Remark("ignored", f"Passed over: {_lines(specks)} without length."))
    return remarks


def of_shift(shift: Point) -> Remark:
    """A drawing far from the origin was moved."""
    far = place((-shift[0], -shift[1]))
    return Remark("note", f"The drawing lay far from the origin; {far} is the new origin.")


def of_removed(removed: Removed) -> list[Remark]:
    """Lines that were there twice."""
    n = len(removed.places)
    if not n:
        return []
    verb = "line was" if n == 1 else "lines were"
    text = f"{n} {verb} drawn twice or covered by another, and taken once."
    return [Remark("twice", text, removed.places[:MOST_PLACES])]


def of_joining(joined: Joined) -> list[Remark]:
    """Gaps closed, branches, and chains that stay open."""
    remarks = []
    if joined.gaps:
        n = len(joined.gaps)
        worst = max(joined.gaps, key=lambda gap: gap.size)
        text = (
            f"1 gap of {worst.size:.2g} mm was closed at {place(worst.at)}."
            if n == 1
            else f"{n} gaps were closed, the largest {worst.size:.2g} mm at {place(worst.at)}."
        )
        at = tuple(g.at for g in sorted(joined.gaps, key=lambda gap: -gap.size))
        remarks.append(Remark("gap", text, at[:MOST_PLACES]))
    if joined.branches:
        n = len(joined.branches)
        where = place(joined.branches[0]) + (f" and {n - 1} other places" if n > 1 else "")
        left = len(joined.inner)
        tail = f"; {_lines(left)} inside {'was' if left == 1 else 'were'} left out" if left else ""
        text = f"More than two lines meet at {where}: the way round the outside was taken{tail}."
        remarks.append(Remark("branch", text, joined.branches[:MOST_PLACES]))
    for chain in joined.open_chains[:MOST]:
        begin, end = (place(p) for p in chain.ends)
        text = f"A chain of {_lines(len(chain.curves))} is open at {begin} and {end}: left out."
        remarks.append(Remark("open", text, chain.ends))
    rest = joined.open_chains[MOST:]
    if rest:
        at = tuple(p for chain in rest for p in chain.ends)
        verb = "is" if len(rest) == 1 else "are"
        text = f"{_count(len(rest), 'more chain')} of lines {verb} open."
        remarks.append(Remark("open", text, at[:MOST_PLACES]))
    return remarks


def of_part(part: Part, others: int) -> list[Remark]:
    """What the part is made of."""
    kinds = {
        "round hole": sum(isinstance(h, CircleHole) for h in part.holes),
        "slot": sum(isinstance(h, SlotHole) for h in part.holes),
        "other hole": sum(isinstance(h, LoopHole) for h in part.holes),
    }
    loops = [h.loop for h in part.holes if isinstance(h, LoopHole)]
    loops += [part.outline] if part.outline is not None else []
    rounds = sum(corner.round > 0.0 for loop in loops for corner in loop.corners)
    edges = len(part.outline.edges) if part.outline is not None else 0
    listed = [f"an outline of {_count(edges, 'edge')}"]
    listed += [_count(rounds, "rounded corner")] if rounds else []
    listed += [_count(n, word) for word, n in kinds.items() if n]
    listed += [_count(len(part.zones), "zone")] if part.zones else []
    remarks = [Remark("note", f"The part has {_and(listed)}.")]
    if part.zones:
        text = "Each zone begins as a pad of twice the wall: give it its own thickness."
        remarks.append(Remark("note", text))
    if others:
        word = "Another outline is" if others == 1 else f"{others} other outlines are"
        remarks.append(Remark("ignored", f"{word} in the drawing and left out."))
    return remarks


def _and(words: list[str]) -> str:
    return words[0] if len(words) == 1 else f"{', '.join(words[:-1])} and {words[-1]}"


def _lines(n: int) -> str:
    return _count(n, "line")


def _count(n: int, word: str) -> str:
    return f"{n} {word}" if n == 1 else f"{n} {word}s"


def _one(word: str) -> str:
    """The singular of a word of the report.

    Example:
        >>> _one("hatches"), _one("3D bodies"), _one("texts")
        ('hatch', '3D body', 'text')
    """
    if word.endswith("ies"):
        return word[:-3] + "y"
    if word.endswith("ches"):
        return word[:-2]
    return word.removesuffix("s")


def _capital(text: str) -> str:
    return text[:1].upper() + text[1:]


def _figure(value: float) -> str:
    text = f"{value:.3f}".rstrip("0").rstrip(".")
    return "0" if text in ("-0", "") else text.replace("-", "−")
