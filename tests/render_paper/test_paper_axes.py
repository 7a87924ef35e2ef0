"""The sixteen hard axes on paper: labels say what stands there, are few, and nothing overlaps or is cut."""

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from paper_cases import hard_cases
from paper_reading import CHARTS, drawn, is_inside, named_value, overlaps, texts, tick_labels

from massdash.charts.chart import Axis
from massdash.render import paper_layout, paper_scale, scales
from massdash.render.paper_text import Ruler

KEYS = [chart.key for chart in hard_cases()]


def axes_of(key):
    figure = drawn(key)
    return figure.axes[0].xaxis, figure.axes[0].yaxis


@pytest.mark.parametrize("key", KEYS)
def test_between_two_and_nine_labels_on_each_axis_and_none_twice(key):
    for axis in axes_of(key):
        labels = [text for text, _, _ in tick_labels(axis)]
        assert 2 <= len(labels) <= 9
        assert len(set(labels)) == len(labels)


@pytest.mark.parametrize("key", KEYS)
def test_tick_labels_do_not_overlap(key):
    labels = [(text, box) for axis in axes_of(key) for text, _, box in tick_labels(axis)]
    assert overlaps(labels) == []


@pytest.mark.parametrize("key", KEYS)
def test_a_label_stands_at_the_value_it_names(key):
    chart, axis = CHARTS[key], axes_of(key)[1]
    title = next(text for text, _ in texts(drawn(key)) if text.startswith("E"))
    start, stop = scales.home(chart, "y")
    for text, at, _ in tick_labels(axis):
        value = named_value(text, title)
        assert (float(scales.forward(value, chart.y)) - start) / (stop - start) == pytest.approx(at, abs=1e-6)


@pytest.mark.parametrize("key", KEYS)
def test_everything_written_is_inside_the_page(key):
    figure = drawn(key)
    for text, box in texts(figure):
        assert is_inside(box, figure), text


@pytest.mark.parametrize("key", KEYS)
def test_no_two_texts_overlap(key):
    assert overlaps(texts(drawn(key)), room=1.0) == []


@pytest.mark.parametrize("key", ["symlog", "symlog_narrow_core", "symlog_negative"])
def test_the_linear_width_is_printed(key):
    width = CHARTS[key].y.linear_width
    exponent = round(np.log10(width))
    assert any(f"linear within ±$10^{{{exponent}}}$" in text for text, _ in texts(drawn(key)))


def test_gaps_stay_gaps_and_a_lone_point_shows():
    curve, alone = drawn("gaps").axes[0].lines[:2]
    y = np.asarray(curve.get_ydata())
    assert np.isnan(y[[20, 24, 40, 42, 60, 63, 80, 82]]).all()
    assert np.isfinite(y[[19, 25, 39, 43, 81]]).all()
    assert len(alone.get_xdata()) == 1


def test_a_curve_without_values_is_mentioned():
    assert any(text == "all NaN: no values within the axes." for text, _ in texts(drawn("all_nan")))


def test_a_narrow_range_names_its_offset():
    assert any(text.startswith("E − 1000000 (") for text, _ in texts(drawn("offset")))


def test_labels_without_a_place_go_to_the_key_with_their_values():
    written = [text for text, _ in texts(drawn("crowded"))]
    names = [*(f"series {k}" for k in range(7)), *(f"event {k}" for k in range(5)), *(f"limit {k}" for k in range(3))]
    for name in names:
        assert sum(text == name or text.startswith(f"{name} (at ") for text in written) == 1, name
    assert "event 2 (at 46)" in written


def any_axis():
    """Axes of all kinds, with ends from 1e-300 to 1e300 and from hair's breadth to hundreds of decades."""
    size = st.floats(-300, 300).map(lambda t: 10.0**t)
    ends = st.tuples(size, st.one_of(size, st.floats(1e-9, 1).map(lambda share: -share)), st.sampled_from([1, -1]))

    def build(scale, given_ends, width):
        low, high, sign = given_ends
        high = low * (1 - high) if high < 0 else high  # a share: just above the low end
        low = low if scale == "log" else sign * low
        return Axis("E", "erg", scale, (low, high), linear_width=width if scale == "symlog" else None)

    return st.builds(build, st.sampled_from(["linear", "log", "symlog"]), ends, size)


@given(any_axis())
@settings(max_examples=150, deadline=None)
def test_ticks_of_any_axis_are_few_inside_and_different(axis):
    with np.errstate(over="ignore"):
        start, stop = scales.forward(axis.limits, axis)
    assume(abs(stop - start) > 1e-11 * max(abs(start), abs(stop)))  # others are refused before ticks are asked for
    for ticks in paper_scale.candidates(paper_scale.Scale(axis, float(start), float(stop))):
        assert len(ticks.at) == len(ticks.texts) <= 15
        assert all(-1e-6 <= at <= 1 + 1e-6 for at in (*ticks.at, *ticks.minor))
        assert len(set(ticks.texts)) == len(ticks.texts)


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0, "0"),
        (0.05, "0.05"),
        (-1234.5, "−1234.5"),
        (1e54, "$10^{54}$"),
        (-1e54, "$-10^{54}$"),
        (1.26e53, r"$1.26\times10^{53}$"),
        (float("nan"), "–"),
        (float("inf"), "–"),
    ],
)
def test_numbers_as_text(value, text):
    assert paper_scale.number_text(value) == text


@pytest.mark.parametrize(("unit", "text"), [("g / cm3", "g cm⁻³"), ("solMass", "M☉"), ("", ""), ("kroner", "kroner")])
def test_units_as_text(unit, text):
    assert paper_scale.unit_text(unit) == text


def test_named_ticks_are_wrapped_or_turned():
    names = ("quiet phase", "bright flare", "slow decay", "afterglow")
    scale = paper_scale.Scale(Axis("Phase", ticks=tuple(enumerate(names))), -0.5, 3.5)
    ruler = Ruler(drawn("erg"), 8)
    wide = paper_layout._chosen(scale, ruler, 160.0, True, 0.0)
    narrow = paper_layout._chosen(scale, ruler, 80.0, True, 0.0)
    assert wide.texts[0] == "quiet\nphase"
    assert wide.rotation == 0
    assert narrow.rotation == 90
