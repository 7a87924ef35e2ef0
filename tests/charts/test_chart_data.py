"""The chart as an object: what it refuses and how marks are found."""

import dataclasses

import numpy as np
import pytest

from massdash.charts.chart import Axis, Chart, Line, Point, Rule

X, Y = Axis("Mass", "solMass", "log", (1e3, 1e8)), Axis("Margin")
LINE, RULE = Line("line", "a line", np.arange(2), np.arange(2)), Rule("zero", "", "y", 0.0)


def test_unknown_scales_are_refused():
    with pytest.raises(ValueError, match="scale 'cubic' is not one of"):
        Axis("Mass", scale="cubic")


@pytest.mark.parametrize("width", [None, 0.0, -1.0, float("nan")])
def test_symlog_needs_a_linear_width(width):
    with pytest.raises(ValueError, match="symlog axis needs a positive linear_width"):
        Axis("Energy", scale="symlog", linear_width=width)


def test_keys_are_unique():
    with pytest.raises(ValueError, match="chart test: two marks share a key"):
        Chart("test", "Test", X, Y, (LINE, Rule("line", "", "x", 1e4)))


def test_marks_by_key_and_by_kind():
    chart = Chart("test", "Test", X, Y, (RULE, LINE, Point("star", "Buoy", 1e5, 0.5)))
    assert chart["line"] is LINE
    assert chart.of(Rule) == (RULE,)
    assert [mark.key for mark in chart.of((Line, Point))] == ["line", "star"]
    with pytest.raises(KeyError):
        chart["missing"]


def test_it_is_frozen():
    with pytest.raises(dataclasses.FrozenInstanceError):
        Chart("test", "Test", X, Y).title = "Other"
