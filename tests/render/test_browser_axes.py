"""The sixteen hard charts in a real browser: ranges, ticks, labels, gaps and pixels."""

import itertools
import re
from pathlib import Path

import numpy as np
import pytest
from bare import HANG, open_charts, show
from hard_cases import X, hard_cases, one

from massdash.charts.chart import Axis, Chart

pytestmark = pytest.mark.browser
CASES = hard_cases()
SUPERSCRIPTS = str.maketrans("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789")

FACTS = Path(__file__).with_name("facts.js").read_text(encoding="utf-8")


@pytest.fixture(scope="module")
def facts(chromium):
    page = chromium.new_page(viewport={"width": 1100, "height": 900})
    open_charts(page, list(CASES.values()), height=220)
    found = dict(zip(CASES, page.evaluate(FACTS), strict=True))
    page.close()
    return found


each_case = pytest.mark.parametrize("key", CASES)


def labels(axis):
    return [tick for tick in axis["ticks"] if tick["text"]]


def value_of(text, note):
    """The number a label means together with what the axis title says."""
    sign, mantissa, power = re.fullmatch(r"(−?)(?:([\d.]+)(?:×|$))?(?:10([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+))?", text).groups()
    value = float(mantissa or 1) * 10.0 ** int((power or "⁰").translate(SUPERSCRIPTS))
    return note.get("offset", 0) + (-value if sign else value) * 10.0 ** note.get("exponent", 0)


@each_case
def test_ranges_are_finite_and_not_empty(facts, key):
    for name in "xy":
        low, high = facts[key][name]["home"]
        assert np.isfinite([low, high]).all()
        assert low < high


@each_case
def test_each_axis_has_a_readable_number_of_labels(facts, key):
    for name in "xy":
        texts = [tick["text"] for tick in labels(facts[key][name])]
        assert 2 <= len(texts) <= 12
        assert len(set(texts)) == len(texts)


@each_case
def test_labels_do_not_touch(facts, key):
    for name in "xy":
        assert_apart(labels(facts[key][name]))


def test_long_labels_in_a_narrow_chart_are_thinned(page):
    ticks = tuple((float(10 * i), f"a rather long name {i}") for i in range(11))
    page.set_viewport_size({"width": 420, "height": 600})
    open_charts(
        page,
        [
            one("long", "long", X, ticks=ticks),
            Chart("named", "", Axis("x", ticks=ticks), Axis("y"), CASES["gaps"].marks),
        ],
    )
    found = page.evaluate(FACTS)[1]["x"]
    assert 1 <= len(labels(found)) < 11
    assert_apart(labels(found))


def assert_apart(ticks):
    for one_tick, other in itertools.pairwise(ticks):
        assert one_tick["pixel"] + one_tick["half"] < other["pixel"] - other["half"]


@each_case
def test_a_label_stands_at_the_value_it_names(facts, key):
    chart = CASES[key]
    for name, axis in (("x", chart.x), ("y", chart.y)):
        found = facts[key][name]
        low, high = found["home"]
        for tick in labels(found):
            value = value_of(tick["text"], found["note"])
            if axis.scale == "log":
                coordinate = np.log10(value)
            elif axis.scale == "symlog":
                coordinate = np.arcsinh(value / (2 * axis.linear_width)) / np.log(10)
            else:
                coordinate = value
            assert (coordinate - low) / (high - low) == pytest.approx(tick["at"], abs=2e-3)


@each_case
def test_the_curve_is_where_its_values_are(facts, key):
    points = [point for point in facts[key]["points"] if point]
    expected = 0 if key == "nothing" else len(points)
    seen = sum(point["inked"] for point in points)
    assert (seen >= 0.9 * expected > 0) if expected else seen == 0


def test_gaps_stay_gaps(facts):
    found = facts["gaps"]
    absent = [i for i, point in enumerate(found["points"]) if point is None]
    assert absent == [20, 21, 22, 23, 24, 40, 41, 42, 60, 61, 62, 63, 80, 82]
    inner = [21, 22, 23, 41, 61, 62]
    assert not any(found["column"][i] for i in inner)
    assert found["points"][81]["inked"]  # alone between two gaps: a dot


def test_titles_say_what_labels_leave_out(facts):
    assert facts["large"]["y"]["title"] == "E (10⁵⁴ erg)"
    assert facts["tiny"]["y"]["title"] == "E − 1 (10⁻⁷ erg)"
    assert facts["offset"]["y"]["title"] == "E − 10⁶ (10⁻³ erg)"
    assert facts["deep"]["y"]["title"] == "E (erg; linear within ±10⁴⁸)"


@each_case
def test_every_line_and_rule_is_named_inside_the_canvas(facts, key):
    found = facts[key]
    texts = [written["text"] for written in found["written"]]
    for mark in CASES[key].marks:
        assert not mark.label or mark.label in texts or mark.label in found["legend"]
    for written in found["written"]:
        left, top, right, bottom = written["box"]
        assert left >= 0
        assert right <= found["canvas"][0]
        assert top >= 0
        assert bottom <= found["canvas"][1]


@each_case
def test_written_texts_do_not_overlap(facts, key):
    boxes = [written["box"] for written in facts[key]["written"]]
    for i, a in enumerate(boxes):
        for b in boxes[:i]:
            assert a[2] <= b[0] or b[2] <= a[0] or a[3] <= b[1] + 0.5 or b[3] <= a[1] + 0.5


def test_the_alternative_text_is_the_charts_or_made_from_it(facts):
    assert facts["narrow"]["label"] == "log 2.1 to 2.9."
    assert facts["crowded"]["label"] == "crowded text: E against x."


@pytest.mark.slow
def test_all_sixteen_redraw_quickly(page):
    open_charts(page, list(CASES.values()), height=220)
    times = [show(page, list(CASES.values()), number=2 + i) for i in range(12)]
    assert np.median(times) < 500  # a hang or a quadratic step would take seconds


def test_zooming_far_in_and_out_ends(page):
    """Every step at every extreme leaves finite ranges and few ticks, and the page answers in time."""
    open_charts(page, list(CASES.values()), height=220)
    page.evaluate(
        """() => { setTimeout(() => {
            const worst = [];
            for (const factor of [0.3, 1 / 0.3]) for (let step = 0; step < 60; step++) for (const view of views) {
                view.input.zoom({ fx: 0.5, fy: 0.37 }, factor);
                view.paint(220);
                const { scales, picture } = view, count = Math.max(picture.xTicks.length, picture.yTicks.length);
                const ends = [scales.x, scales.y].flatMap((scale) => [scale.value(0), scale.value(1)]);
                if (!ends.every(Number.isFinite) || count > 250) worst.push([view.key, step, count]);
            }
            window.worst = worst;
        }); }"""
    )
    page.wait_for_function("window.worst", timeout=HANG)
    assert page.evaluate("window.worst") == []
