"""Every acceptable star can be drawn: marks have a place, axes a range, and the words numbers."""

import re
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given, settings
from random_stars import scenarios

from massdash import builtin, builtin_names, evaluate
from massdash.charts import CHARTS, energy_chart
from massdash.charts.chart import Line, Map, Point, Rule, Span


def check_axis(axis):
    if axis.limits is not None:
        low, high = axis.limits
        assert np.isfinite([low, high]).all()
        assert low < high
        assert axis.scale != "log" or low > 0
    assert axis.linear_width is None or (np.isfinite(axis.linear_width) and axis.linear_width > 0)


def check_marks(chart):
    for mark in chart.of(Point):
        assert np.isfinite([mark.x, mark.y]).all(), mark
    for mark in chart.of(Rule):
        assert np.isfinite(mark.at), mark
    for mark in chart.of(Span):
        assert all(end is None or np.isfinite(end) for end in (mark.low, mark.high)), mark
    for mark in chart.of(Line):
        assert mark.x.shape == mark.y.shape
        assert np.isfinite(mark.x).all()
        assert not np.isinf(mark.y).any(), mark.key
    for mark in chart.of(Map):
        assert not np.isinf(mark.values).any()
        assert 0 < mark.x[0] < mark.x[1]
        assert 0 < mark.y[0] < mark.y[1]


def check(chart):
    check_axis(chart.x)
    check_axis(chart.y)
    check_marks(chart)
    assert chart.alt.endswith(".")
    assert not re.search(r"\b(nan|None|inf)\b|–", chart.alt)
    assert re.search(r"\d", chart.alt), chart.alt


def check_all(scenario):
    outcome = evaluate(scenario)
    charts = [make(outcome) for make in CHARTS.values()]
    for chart in [*charts, energy_chart(outcome, terms=True)]:
        check(chart)
    energy = charts[0]
    for low, high in pairwise(["star", "barrier"]):
        keys = {mark.key for mark in energy.marks}
        assert not {low, high} <= keys or energy[low].x <= energy[high].x * (1 + 1e-6)


@pytest.mark.parametrize("name", builtin_names())
def test_built_in_scenarios(name):
    check_all(builtin(name))


@given(scenarios())
@settings(deadline=None, max_examples=40)
def test_any_star(scenario):
    check_all(scenario)
