"""The widget without a browser: what it takes from one, and the order of its frames."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from massdash.charts.chart import Axis, Chart, Line, Point, Rule
from massdash.render.live import LiveCharts, checked_event, handles_of

X = np.array([1.0, 2.0, 3.0])
GOOD = {"kind": "drag", "chart": "margin", "handle": "mass", "x": 1e5, "y": 2, "seq": 4}


def charts(at=2.0):
    marks = (Line("l", "l", X, X), Rule("r", "r", "x", at, handle="mass"), Point("p", "p", at, at, handle="state"))
    return [Chart("margin", "Margin", Axis("x"), Axis("y"), marks), Chart("plain", "Plain", Axis("x"), Axis("y"))]


def from_browser(widget, **event):
    widget.set_state({"event": event})


@pytest.fixture
def widget():
    widget = LiveCharts()
    widget.show(charts())
    widget.heard = []
    widget.on_event(lambda *event: widget.heard.append(event))
    return widget


def test_handles_are_listed_by_chart():
    assert handles_of(charts()) == {"margin": {"mass", "state"}, "plain": set()}


def test_events_arrive_as_plain_values(widget):
    from_browser(widget, **GOOD)
    from_browser(widget, kind="click", chart="plain", handle=None, x=-1.5, y=0, seq=5)
    assert widget.heard == [("drag", "margin", "mass", 1e5, 2.0), ("click", "plain", None, -1.5, 0.0)]
    assert all(type(value) is float for event in widget.heard for value in event[3:])


WRONG = {
    "unknown kind": {"kind": "press"},
    "unknown chart": {"chart": "other"},
    "chart is a list": {"chart": ["margin"]},
    "handle of no chart": {"handle": "temperature"},
    "drag without a handle": {"handle": None},
    "handle is a dict": {"handle": {}},
    "NaN": {"x": float("nan")},
    "infinite": {"y": float("inf")},
    "text": {"x": "1e5"},
    "boolean": {"x": True},
    "nothing": {"y": None},
    "beyond double precision": {"x": 10**400},
}


@pytest.mark.parametrize("change", WRONG.values(), ids=WRONG.keys())
def test_malformed_events_are_dropped(widget, change):
    from_browser(widget, **(GOOD | change))
    assert widget.heard == []
    assert checked_event(GOOD | change, handles_of(charts())) is None


JSON = st.recursive(st.none() | st.booleans() | st.floats() | st.integers() | st.text(), st.lists, max_leaves=3)


@given(st.fixed_dictionaries({}, optional=dict.fromkeys(GOOD, JSON)))
def test_no_message_raises(message):
    assert checked_event(message, handles_of(charts())) is None or message["kind"] in ("click", "drag", "drop")


@pytest.mark.parametrize("event", [None, 5, "drag", ["drag"]])
def test_an_event_that_is_no_dictionary_is_dropped(widget, event):
    widget.set_state({"event": event})
    assert widget.heard == []


def test_the_browser_cannot_write_what_python_owns(widget):
    before = widget.structure, widget.frame
    widget.set_state({"structure": {}, "frame": {"number": 99}, "columns": 1, "height": 2000, "_esm": "alert(1)"})
    assert (widget.structure, widget.frame) == before
    assert (widget.columns, widget.height) == (2, 300)
    assert "alert" not in widget._esm


def test_frames_are_numbered_upwards_and_say_which_event_they_answer(widget):
    assert (widget.frame["number"], widget.frame["answers"]) == (1, 0)
    from_browser(widget, **GOOD)
    widget.settle(charts(2.5))
    assert (widget.frame["number"], widget.frame["answers"]) == (2, 4)


def test_a_drop_that_changes_nothing_is_answered_with_the_same_picture(widget):
    before = widget.frame
    from_browser(widget, **(GOOD | {"kind": "drop", "seq": 7}))
    assert (widget.frame["number"], widget.frame["answers"]) == (2, 7)
    assert widget.frame["buffer"] == before["buffer"]


def test_a_drop_that_was_shown_is_not_shown_twice(widget):
    widget.on_event(lambda *event: widget.show(charts(2.2)))
    from_browser(widget, **(GOOD | {"kind": "drop", "seq": 8}))
    assert widget.frame["number"] == 2


def test_only_one_or_two_columns():
    with pytest.raises(Exception, match="columns"):
        LiveCharts(columns=3)
