"""Charts as one message: what travels, in which precision, and that nothing in it is NaN in JSON."""

import json

import numpy as np
import pytest

from massdash.charts.chart import Axis, Band, Chart, Line, Map, Point, Rule, Span
from massdash.render.frame import frame, structure

X = np.geomspace(1.0, 1e6, 50)


def read(values, buffer, number):
    kind, offset, count = values["columns"][number]
    dtype = {"f4": "<f4", "f8": "<f8", "u1": "u1"}[kind]
    return np.frombuffer(buffer, dtype, count, offset)


def curve(y, *, x=X, scale="linear", limits=None, width=None):
    axis = Axis("y", scale=scale, limits=limits, linear_width=width)
    return Chart("c", "c", Axis("x", scale="log"), axis, (Line("l", "l", x, np.asarray(y, float)),))


def every_mark(at=2.0):
    marks = (
        Line("line", "line", X, X),
        Band("band", "band", X, X / 2, X * 2),
        Span("span", "span", "x", None, 10.0),
        Rule("rule", f"at {at}", "x", at, handle="mass"),
        Point("point", "here", at, np.nan, "present", handle="state"),
        Map("map", Axis("z"), (1.0, 1e6), (1.0, 1e6), np.array([[0.0, 1.0], [np.nan, 2.0]]), levels=(0.5,)),
    )
    return Chart("all", f"title {at}", Axis("x", scale="log"), Axis("y", scale="log"), marks, alt="All.")


def test_energies_beyond_float32_arrive_exactly_enough():
    y = np.linspace(1e53, 9e54, 50)
    for chart in (curve(y, scale="log"), curve(y), curve(y, scale="symlog", width=1e50)):
        values, buffer = frame([chart])
        found = read(values, buffer, values["charts"][0]["marks"][0]["y"]).astype(float)
        if chart.y.scale == "log":
            back = 10**found
        elif chart.y.scale == "symlog":
            back = 2 * 1e50 * np.sinh(found * np.log(10))
        else:
            back = found
        np.testing.assert_allclose(back, y, rtol=1e-5)


def test_a_narrow_axis_gets_float64_and_a_wide_one_float32():
    narrow, _ = frame([curve(1e6 + 1e-5 * X, limits=(1e6, 1e6 + 10))])
    wide, _ = frame([curve(X)])
    assert [kind for kind, *_ in narrow["columns"]] == ["f4", "f8"]
    assert [kind for kind, *_ in wide["columns"]] == ["f4", "f4"]


def test_infinite_values_are_gaps():
    values, buffer = frame([curve([1, np.inf, -np.inf, np.nan, 2], x=np.arange(1.0, 6.0))])
    found = read(values, buffer, values["charts"][0]["marks"][0]["y"])
    np.testing.assert_array_equal(np.isnan(found), [False, True, True, True, False])


def test_an_array_shared_by_curves_travels_once():
    one = Line("a", "a", X, X)
    charts = [Chart("c", "c", Axis("x"), Axis("y"), (one, Line("b", "b", X, X**2)))]
    values, _ = frame(charts)
    first, second = values["charts"][0]["marks"]
    assert first["x"] == second["x"] == first["y"]
    assert len(values["columns"]) == 2


def test_the_same_array_on_different_scales_travels_twice():
    line = Line("a", "a", X, X)
    charts = [Chart("c", "c", Axis("x", scale="log"), Axis("y"), (line,))]
    values, buffer = frame(charts)
    mark = values["charts"][0]["marks"][0]
    np.testing.assert_allclose(read(values, buffer, mark["x"]), np.log10(X), rtol=1e-6, atol=1e-7)
    np.testing.assert_allclose(read(values, buffer, mark["y"]), X, rtol=1e-6)


def test_map_colours_run_from_1_to_255_and_0_is_no_value():
    z = np.array([[0.0, 1.0, 0.5], [np.nan, -3.0, 9.0]])
    chart = Chart("m", "m", Axis("x"), Axis("y"), (Map("m", Axis("z", limits=(0, 1)), (0, 1), (0, 1), z),))
    values, buffer = frame([chart])
    mark = values["charts"][0]["marks"][0]
    assert mark["shape"] == [3, 2]
    np.testing.assert_array_equal(read(values, buffer, mark["values"]), [1, 255, 128, 0, 1, 255])


def test_exact_maps_are_floats_and_exact_curves_are_doubles():
    values, buffer = frame([every_mark()], exact=True)
    marks = dict(zip(["line", "band", "span", "rule", "point", "map"], values["charts"][0]["marks"], strict=True))
    assert values["columns"][marks["line"]["y"]][0] == "f8"
    np.testing.assert_array_equal(read(values, buffer, marks["map"]["values"]), np.float32([0, 1, np.nan, 2]))
    np.testing.assert_array_equal(read(values, buffer, marks["line"]["y"]), np.log10(X))


def test_the_structure_stays_while_values_labels_and_titles_move():
    first, second = every_mark(2.0), every_mark(3.0)
    assert structure([first]) == structure([second])
    assert frame([first])[0] != frame([second])[0]


def test_the_structure_changes_with_the_marks():
    chart = every_mark()
    fewer = Chart(chart.key, chart.title, chart.x, chart.y, chart.marks[1:])
    assert structure([chart]) != structure([fewer])


def test_both_parts_are_json_without_nan():
    text = json.dumps([structure([every_mark(np.nan)]), frame([every_mark(np.nan)])[0]], allow_nan=False)
    assert '"y": null' in text


@pytest.mark.parametrize("exact", [False, True])
def test_columns_start_at_multiples_of_eight(exact):
    values, buffer = frame([every_mark(), curve(X[:7], x=X[:7])], exact=exact)
    assert all(offset % 8 == 0 for _, offset, _ in values["columns"])
    kind, offset, count = values["columns"][-1]
    assert offset + count * int(kind[1]) == len(buffer)
