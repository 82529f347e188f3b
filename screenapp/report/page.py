"""The record as one self-contained HTML page that reads like a calculation note."""

from __future__ import annotations

from base64 import b64encode
from collections.abc import Sequence
from datetime import datetime

from jinja2 import Environment, StrictUndefined
from markupsafe import Markup

from screenapp import __version__
from screenapp.model.assets import resource
from screenapp.model.cut_figure import cut_figure
from screenapp.model.edge_parts import span_of
from screenapp.model.estimate_text import EstimateKind, estimate_text
from screenapp.model.findings import CutFindings, Estimate, Findings, Peak
from screenapp.model.gauge_text import share_text, stiffness_text
from screenapp.model.history_figure import peak_figure
from screenapp.model.line_force_text import line_force_text
from screenapp.model.part import (
    BodyLoad,
    BoltSupport,
    DisplayUnits,
    ElasticSupport,
    LineLoad,
    Load,
    MisfitLoad,
    Part,
    PointLoad,
    SpinLoad,
    Support,
    TemperatureLoad,
    WeldSupport,
)
from screenapp.model.regions import shape_with_zones
from screenapp.model.support_records import stands_on
from screenapp.model.units import format_quantity
from screenapp.report.balance_rows import balance_heads, balance_rows
from screenapp.report.cut_svg import cut_svg
from screenapp.report.dimensioned import dimensioned_svg
from screenapp.report.drawing import part_svg
from screenapp.report.history_svg import history_svg
from screenapp.report.input_words import (
    combination_words,
    dimension_rows,
    formula_rows,
    hole_words,
    job_words,
    material_words,
    ring_rows,
    rings,
)
from screenapp.report.picture import RecordPicture

CAUTION = (
    "A screening, not an approval: it covers only what is written here, with supports and loads as "
    "assumed. Local codes and a licensed engineer decide."
)


def record_page(
    part: Part, findings: Findings, when: datetime, pictures: Sequence[RecordPicture] = ()
) -> str:
    """The page for a screened part; `when` is printed as its date."""
    template = _environment().from_string(
        resource("report/record.html").read_text(encoding="utf-8")
    )
    units = part.display_units

    def estimate(value: Estimate, kind: EstimateKind) -> str:
        return estimate_text(value, kind, units)

    shape = shape_with_zones(part)
    x0, y0, x1, y1 = shape.bounds
    return template.render(
        part=part,
        units=units,
        findings=findings,
        names={case.case: case.name for case in findings.cases},
        numbered=_numbered(findings),
        cut_drawing=lambda cut: _cut(cut, units),
        history=lambda peak: _history(peak, findings, units),
        estimate=estimate,
        length=lambda v: format_quantity(v, "length", units),
        force=lambda v: format_quantity(v, "force", units),
        stress=lambda v: format_quantity(v, "stress", units),
        stiffness=stiffness_text,
        share=share_text,
        load_words=load_words,
        support_words=support_words,
        line_force_text=lambda force: line_force_text(force, units),
        hole_words=hole_words,
        job_words=job_words,
        material_words=material_words,
        rings=rings(part),
        ring_rows=ring_rows,
        dimension_rows=dimension_rows,
        formula_rows=formula_rows,
        combination_words=combination_words,
        balance_heads=balance_heads(units),
        balance_rows=lambda case: balance_rows(case, units),
        size=(x1 - x0, y1 - y0),
        drawing=Markup(part_svg(part, shape, findings)),  # made here, its texts escaped there
        dimensioned=Markup(dimensioned_svg(part, shape)),
        pictures=[(p.words, b64encode(p.png).decode()) for p in pictures],
        version=__version__,
        when=when.strftime("%Y-%m-%d %H:%M %Z"),
        caution=CAUTION,
    )


def _environment() -> Environment:
    return Environment(
        autoescape=True, undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True
    )


def _numbered(findings: Findings) -> list[tuple[int, str, object]]:
    """Every peak with its number in the drawing and the name of its case."""
    rows = [(case.name, peak) for case in findings.cases for peak in case.peaks]
    return [(i + 1, name, peak) for i, (name, peak) in enumerate(rows)]


def _cut(cut: CutFindings, units: DisplayUnits) -> tuple[Markup, tuple[str, ...]]:
    """Drawing and sentences of a cut."""
    figure = cut_figure(cut, units)
    return Markup(cut_svg(figure)), figure.sentences  # a drawing, its texts escaped there


def _history(peak: Peak, findings: Findings, units: DisplayUnits) -> tuple[Markup, str] | None:
    """Drawing and note of a peak that is not settled, or that governs: largest in its case, or
    where a limit is used most."""
    largest = any(case.peaks and case.peaks[0] is peak for case in findings.cases)
    judged = any(limit.at == peak.at for limit in findings.limits)
    if peak.estimate.trust == "settled" and not largest and not judged:
        return None
    figure = peak_figure(peak, units)
    return None if figure is None else (Markup(history_svg(figure)), figure.note)  # as drawing


def load_words(load: Load) -> str:
    """A load in words with stored units."""
    if isinstance(load, SpinLoad):
        more = "" if load.factor == 1.0 else f", its forces times {load.factor:g}"
        return f"spin at {load.speed:g} rpm about ({load.x:g}, {load.y:g}) mm{more}"
    if isinstance(load, TemperatureLoad):
        what = "the whole part" if load.zone is None else f"zone {load.zone}"
        graded = ""
        if load.x or load.y:
            graded = f", at the origin; gradient ({load.x:g}, {load.y:g}) K/mm"
        return f"{what} warms by {load.change:g} K from {load.start:g} °C{graded}"
    if isinstance(load, MisfitLoad):
        return f"support {load.support} is off by ({load.x:g}, {load.y:g}) mm"
    if isinstance(load, BodyLoad):
        return f"own weight under ({load.x:g}, {load.y:g}) m/s²"
    kind = type(load).__name__
    if kind == "PressureLoad":
        more = "" if load.end_pressure is None else f" to {load.end_pressure:g}"  # type: ignore
        return f"pressure {load.pressure:g}{more} MPa on {load.on}{_span(load)}"  # type: ignore
    if kind == "ShearLoad":
        return f"shear {load.per_length:g} N/mm along {load.on}{_span(load)}"  # type: ignore[union-attr]
    if kind == "MomentLoad":
        return f"moment {load.moment / 1000.0:g} N·m on {load.on}"  # type: ignore[union-attr]
    words = {
        "LineLoad": "({x:g}, {y:g}) N/mm along {on}",
        "ForceLoad": "({x:g}, {y:g}) N spread evenly over {on}",
        "BearingLoad": "a pin bears on {on} with ({x:g}, {y:g}) N",
        "PointLoad": "({x:g}, {y:g}) N at {on}",
    }[kind]
    text = words.format(x=load.x, y=load.y, on=load.on)  # type: ignore[union-attr]
    if isinstance(load, PointLoad):
        return text + point_words(load)
    if isinstance(load, LineLoad) and (load.end_x is not None or load.end_y is not None):
        x = load.x if load.end_x is None else load.end_x
        y = load.y if load.end_y is None else load.end_y
        text += f", varying to ({x:g}, {y:g}) N/mm at its end"
    return text + _span(load)


def point_words(load: PointLoad) -> str:
    """Where on its edge a force at a place is, and whether it is spread, to follow the edge."""
    text = "" if load.along is None else f", {load.along:g} mm along it"
    return text + (", at a point" if load.patch is None else f", over a patch of {load.patch:g} mm")


def _span(record: Load | Support) -> str:
    """Which part of its edge it is on, in words to follow the edge."""
    start, end = span_of(record)
    if (start, end) == (None, None):
        return ""
    first = "its start" if start is None else f"{start:g} mm"
    last = "its end" if end is None else f"{end:g} mm"
    return f", from {first} to {last}"


def support_words(support: Support) -> str:
    """A support in words."""
    kind = type(support).__name__
    on = f"{support.on}{_span(support)}"
    if on != support.on:
        on += ","
    if kind == "FixedSupport":
        return f"{on} is fixed in both directions"
    if kind == "SymmetrySupport":
        return f"{on} is a line of symmetry; only one half of the part is drawn"
    if isinstance(support, ElasticSupport):
        ways = (("across", support.normal), ("along", support.along))
        given = [f"{v:g} N/mm² {way} it" for way, v in ways if v]
        return f"{on} is held by springs of {' and '.join(given)}"
    if isinstance(support, WeldSupport):
        return f"{on} is held by a weld of throat {support.throat:g} mm"
    if isinstance(support, BoltSupport):
        holes = " and ".join(stands_on(support))
        bolts = "rigid bolts"
        if support.stiffness is not None:
            bolts = f"bolts of {support.stiffness / 1000.0:g} kN/mm each"
        return f"{holes}: held by {bolts}, without play, on one rigid ground"
    if kind == "PinSupport":
        return f"{on} sits on a rigid pin without play or friction that only pushes"
    if kind == "RollerSupport":
        angle = getattr(support, "angle", None)
        along = "its normal" if angle is None else f"{angle:g}°"
        return f"{on} is held along {along} and slides across it"
    x, y = getattr(support, "x", None), getattr(support, "y", None)
    moved = [f"{axis} by {v:g} mm" for axis, v in (("x", x), ("y", y)) if v is not None]
    return f"{on} is moved in " + " and ".join(moved) if moved else f"{on} is left free"
