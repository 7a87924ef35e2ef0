"""Scale coordinates and the ranges of axes that do not say their own."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from massdash.charts.chart import Axis, Band, Chart, Line, Map, Point, Rule, Span
from massdash.render.scales import forward, home, map_range

LINEAR, LOG = Axis("v"), Axis("v", scale="log")
SYMLOG = Axis("v", scale="symlog", linear_width=10.0)
DOUBLES = st.floats(allow_nan=True, allow_infinity=True)


def chart(*marks, x=LINEAR, y=LINEAR):
    return Chart("c", "c", x, y, marks)


def test_log_is_the_decimal_logarithm_and_shows_nothing_at_or_below_zero():
    np.testing.assert_array_equal(forward([1e54, 1.0, 0.0, -5.0, np.nan, np.inf], LOG), [54, 0] + 4 * [np.nan])


def test_symlog_is_linear_near_zero_and_counts_decades_far_from_it():
    assert forward(1e-3, SYMLOG) / forward(1e-4, SYMLOG) == pytest.approx(10, rel=1e-6)
    assert forward(1e9, SYMLOG) - forward(1e8, SYMLOG) == pytest.approx(1, rel=1e-9)
    assert forward(-7.0, SYMLOG) == -forward(7.0, SYMLOG)


@pytest.mark.parametrize("axis", [LINEAR, LOG, SYMLOG], ids=lambda axis: axis.scale)
@given(values=st.lists(DOUBLES, max_size=6))
def test_a_range_is_always_finite_and_not_empty(axis, values):
    low, high = home(chart(Line("l", "l", np.arange(len(values), dtype=float), np.array(values)), y=axis), "y")
    assert np.isfinite([low, high]).all()
    assert low < high


def test_a_range_holds_every_mark_but_spans():
    x = np.array([1.0, 2.0])
    marks = [
        Line("l", "l", x, x),
        Band("b", "b", x, low=x - 5, high=x + 5),
        Rule("r", "r", "y", 20.0),
        Point("p", "p", 9.0, 1.0),
        Span("s", "s", "x", 100.0, 200.0),
    ]
    assert home(chart(*marks), "x") == pytest.approx((1 - 0.32, 9 + 0.32))
    assert home(chart(*marks), "y") == pytest.approx((-4 - 0.96, 20 + 0.96))


def test_limits_win_and_may_be_reversed():
    line = Line("l", "l", np.array([1.0, 2.0]), np.array([1.0, 2.0]))
    assert home(chart(line, y=Axis("y", scale="log", limits=(1e3, 1e6))), "y") == (3.0, 6.0)
    assert home(chart(line, y=Axis("magnitude", limits=(30.0, 20.0))), "y") == (30.0, 20.0)


@pytest.mark.parametrize("limits", [(0.0, 1e3), (-1.0, 10.0), (5.0, 5.0), (np.nan, 1.0)])
def test_limits_that_a_log_axis_cannot_show_give_way_to_the_data(limits):
    line = Line("l", "l", np.array([1.0, 2.0]), np.array([10.0, 1000.0]))
    assert home(chart(line, y=Axis("y", scale="log", limits=limits)), "y") == pytest.approx((1 - 0.08, 3 + 0.08))


def test_a_map_fills_its_frame():
    field = Map("m", LINEAR, (1e3, 1e8), (1e6, 1e9), np.zeros((2, 2)))
    assert home(chart(field, x=LOG, y=LOG), "x") == (3.0, 8.0)


def test_a_diverging_map_is_centred_on_zero():
    values = np.array([[-1.0, np.nan], [3.0, 0.5]])
    assert map_range(Map("m", LINEAR, (0, 1), (0, 1), values, palette="diverging")) == (-3.0, 3.0)
    assert map_range(Map("m", LINEAR, (0, 1), (0, 1), values)) == (-1.0, 3.0)


@pytest.mark.parametrize("value", [np.nan, 4.0])
def test_a_map_of_one_value_or_none_still_has_a_range(value):
    low, high = map_range(Map("m", LINEAR, (0, 1), (0, 1), np.full((2, 2), value)))
    assert low < high
