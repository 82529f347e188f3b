"""The Trust lens: hatches, marks and the legend that says what they mean."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import pytest
from pytestqt.qtbot import QtBot

from screenapp.model.errors import Fault
from screenapp.model.findings import Estimate, Findings, Peak
from screenapp.window import theme
from tests.window import fabricate as made
from tests.window.test_lenses import MESH, Bench


@pytest.fixture
def bench(qtbot: QtBot) -> Iterator[Bench]:
    theme.choose("paper")
    made_bench = Bench(qtbot)
    made_bench.document.look(lens="Trust")
    yield made_bench
    theme.choose("paper")


def mixed(bench: Bench) -> Findings:
    """One peak of each kind, the rising one in two quantities."""
    found = made.findings(bench.document.part, bench.document.key, MESH)
    first = found.cases[0]
    settled = first.peaks[0]
    rising = replace(
        settled,
        estimate=Estimate(90.0, 90.0, math.inf, "rising"),
        at=(-60.0, -40.0),
        feature="c1",
        place="corner c1",
    )
    loose = replace(
        settled,
        estimate=Estimate(80.0, 70.0, 90.0, "unsettled"),
        at=(60.0, 0.0),
        feature="e2",
        place="edge e2, 50 % from c2 to c3",
    )
    again: Peak = replace(rising, quantity="sigma_1")
    peaks = (settled, rising, loose, again)
    return replace(found, cases=(replace(first, peaks=peaks), *found.cases[1:]))


def test_each_place_has_its_mark_and_the_legend_counts_them(bench: Bench) -> None:
    bench.document.set_findings(mixed(bench))
    assert sorted(trust for _, trust in bench.painter.marks.marks) == [
        "rising",
        "settled",
        "unsettled",
    ]
    legend = bench.painter.heading.legend
    assert legend.isVisible()
    assert [text for _, text in legend.entries] == [
        "1 rising: no finite value",
        "1 not settled yet",
        "1 settled to ± 2 %",
    ]
    assert "1 rising" in legend.accessibleDescription()
    bench.document.look(lens="Stress")
    assert not legend.isVisible()
    assert bench.painter.marks.marks == ()


def test_the_legend_wraps_and_is_never_cut(bench: Bench) -> None:
    bench.document.set_findings(mixed(bench))
    legend = bench.painter.heading.legend
    wide = legend.sizeHint()
    bench.board.resize(420, 420)
    bench.settle()
    narrow = legend.sizeHint()
    assert narrow.height() > wide.height()
    assert legend.height() >= narrow.height()
    assert legend.width() >= narrow.width()


def test_hatch_and_rim_of_swatches_are_those_of_the_part(bench: Bench) -> None:
    bench.document.set_findings(mixed(bench))
    zones = bench.painter.hatch.zones
    assert {(z.colour, z.dashed) for z in zones} == {("bad", False), ("doubt", True)}
    for name in ("paper", "slate"):
        theme.choose(name)
        bench.settle()
        image = bench.painter.heading.legend.grab().toImage()
        for colour in ("bad", "doubt", "ink"):
            wanted = theme.colour(colour)
            found = any(
                abs(image.pixelColor(x, y).red() - wanted.red()) < 24
                and abs(image.pixelColor(x, y).green() - wanted.green()) < 24
                and abs(image.pixelColor(x, y).blue() - wanted.blue()) < 24
                for x in range(image.width())
                for y in range(image.height())
            )
            assert found, (name, colour)


def test_rings_of_cautions_stand_where_nothing_is_judged_yet(bench: Bench) -> None:
    """A dashed ring round a caution would pass for a zone that is not settled."""
    document = bench.document
    caution = Fault("corner c1 is sharp", "round it", ids=("c1",), at=(-60.0, -40.0), blocks=False)
    document._examined = (document.part, (caution,), None)
    canvas = bench.board.canvas
    canvas.show_part()
    assert len(canvas.marked.spots) == 1  # nothing is judged yet
    document.set_findings(mixed(bench))
    assert canvas.marked.spots == []
    document.look(lens="Shape")
    assert len(canvas.marked.spots) == 1


def test_findings_out_of_date_have_a_warning_in_place_of_the_legend(bench: Bench) -> None:
    bench.document.set_findings(mixed(bench))
    part = bench.document.part
    bench.document.apply("wall", replace(part, wall=replace(part.wall, thickness=5.0)))
    assert bench.warning.startswith("Out of date")
    assert not bench.painter.heading.legend.isVisible()
