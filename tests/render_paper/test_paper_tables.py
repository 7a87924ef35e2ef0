"""Charts as tables: exact numbers, units, origin; readable by astropy and by anything that reads CSV."""

import csv
from dataclasses import replace

import numpy as np
import pytest
from astropy import units as u
from astropy.table import QTable
from hypothesis import given, settings
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays
from paper_cases import every_mark, hard_cases, margin_map

from massdash.charts.chart import Axis, Chart, Line, Map
from massdash.errors import InputError
from massdash.render.tables import centres, chart_table, ecsv_bytes

ORIGIN = {"program": "massdash 0.0.1", "scenario": "massdash: 1\nlabel: Lantern\n", "sources": ["One", "Two"]}


def read(content):
    return QTable.read(content.decode(), format="ascii.ecsv")


def numbers(table, name):
    return np.asarray(getattr(table[name], "value", table[name]), float)


def test_a_row_a_point_with_units():
    table = chart_table(every_mark())
    own = table[table["mark"] == "own"]
    assert set(own["kind"]) == {"line"}
    assert set(own["label"]) == {"at the star's entropy"}
    assert (own["x"] == every_mark()["own"].x * u.g / u.cm**3).all()
    assert (own["y"] == every_mark()["own"].y * u.erg).all()
    band = table[table["mark"] == "spread"]
    assert (band["y_low"].value == every_mark()["spread"].low).all()
    assert np.isnan(band["y"].value).all()


def test_spans_rules_and_points_have_one_row_each():
    table = chart_table(every_mark())
    span, rule, point = (table[table["mark"] == key] for key in ("degenerate", "zero", "onset"))
    assert (len(span), len(rule), len(point)) == (1, 1, 1)
    assert span["x_low"][0] == 3.0 * u.g / u.cm**3
    assert np.isnan(span["x_high"][0])
    assert rule["y"][0] == 0 * u.erg
    assert np.isnan(rule["x"][0])
    assert point["kind"][0] == "onset"


def test_columns_that_no_mark_fills_are_left_out():
    assert chart_table(hard_cases()[0]).colnames == ["mark", "kind", "label", "x", "y"]


def test_map_cells_stand_at_their_centres():
    chart = replace(margin_map(n=4), marks=margin_map(n=4).marks[:1])
    table = chart_table(chart)
    values = chart["margin"].values
    assert len(table) == 16
    step = 10 ** (5 / 4)
    assert table["x"][:4].to_value(u.solMass) == pytest.approx(1e3 * step ** np.array([0.5, 1.5, 2.5, 3.5]))
    assert (np.diff(table["y"][:4].value) == 0).all()
    assert np.array_equal(numbers(table, "z").reshape(4, 4), values, equal_nan=True)


def test_centres_on_each_scale():
    assert centres(Axis("x"), (0.0, 4.0), 2) == pytest.approx([1.0, 3.0])
    assert centres(Axis("x", scale="log"), (1.0, 1e4), 2) == pytest.approx([10.0, 1e3])
    assert centres(Axis("x", scale="symlog", linear_width=1.0), (-9.0, 9.0), 3)[1] == pytest.approx(0.0, abs=1e-12)


@pytest.mark.parametrize("chart", [every_mark(), margin_map(n=5), *hard_cases()], ids=lambda chart: chart.key)
def test_astropy_reads_back_every_bit(chart):
    before, after = chart_table(chart), read(ecsv_bytes(chart, ORIGIN))
    assert after.colnames == before.colnames
    for name in ("mark", "kind", "label"):
        assert list(after[name]) == list(before[name])
    for name in before.colnames[3:]:
        assert numbers(after, name).tobytes() == numbers(before, name).tobytes()
        assert getattr(after[name], "unit", None) == getattr(before[name], "unit", None)


@given(arrays(np.float64, st.integers(1, 20), elements=st.floats(allow_nan=True, allow_infinity=True, width=64)))
@settings(max_examples=30, deadline=None)
def test_any_float_comes_back(values):
    chart = Chart("any", "Any", Axis("x"), Axis("y", "erg"), (Line("line", "", values, values[::-1]),))
    after = read(ecsv_bytes(chart, ORIGIN))
    assert np.array_equal(numbers(after, "x"), values, equal_nan=True)
    assert np.array_equal(np.signbit(numbers(after, "y")), np.signbit(values[::-1])) or np.isnan(values).any()


def test_metadata_come_back():
    notes, sources = ("A note: with a colon, and a comma.",), ("An invented source (2031)",)
    chart = replace(margin_map(n=3), notes=notes, sources=sources)
    meta = read(ecsv_bytes(chart, ORIGIN)).meta
    assert meta["provenance"] == {**ORIGIN, "scenario": ["massdash: 1", "label: Lantern"]}
    assert meta["title"] == chart.title
    assert meta["alt"] == chart.alt
    assert meta["notes"] == list(chart.notes)
    assert meta["sources"] == list(chart.sources)
    assert meta["axes"]["x"] == {"label": "Mass", "unit": "M☉", "scale": "log"}
    assert meta["axes"]["z"]["label"] == "Stability margin"


def test_a_unit_astropy_does_not_know_stays_in_the_metadata():
    axis = Axis("Length", "league", "symlog", linear_width=0.5, ticks=((0.0, "here"),))
    chart = Chart("far", "Far", axis, Axis("y"), (Line("line", "", np.ones(2), np.ones(2)),))
    table = read(ecsv_bytes(chart, ORIGIN))
    assert getattr(table["x"], "unit", None) is None
    expected = {"label": "Length", "unit": "league", "scale": "symlog", "linear_width": 0.5, "ticks": [[0.0, "here"]]}
    assert table.meta["axes"]["x"] == expected


@pytest.mark.parametrize("label", ['a, "quoted" one', "line\nbreak", "# no comment", " ", "Über ☉", "nan"])
def test_labels_survive_and_plain_csv_readers_agree(label):
    chart = Chart("one", "One", Axis("x"), Axis("y"), (Line("line", label, np.array([0.1]), np.array([0.2])),))
    content = ecsv_bytes(chart, ORIGIN)
    expected = " ".join(label.split()) or "line"
    assert list(read(content)["label"]) == [expected]
    lines = [line for line in content.decode().splitlines() if not line.startswith("#")]
    (row,) = csv.DictReader(lines)
    assert row["label"] == expected
    assert (float(row["x"]), float(row["y"])) == (0.1, 0.2)


def test_an_empty_chart_is_an_empty_table():
    table = read(ecsv_bytes(Chart("none", "None", Axis("x"), Axis("y")), ORIGIN))
    assert len(table) == 0
    assert table.meta["title"] == "None"


def test_a_broken_chart_is_refused():
    chart = Chart("bad", "Bad", Axis("x"), Axis("y"), (Map("m", Axis("z"), (0.0, 1.0), (0.0, 1.0), np.ones(3)),))
    with pytest.raises(InputError, match="chart bad, mark m, shape of values"):
        chart_table(chart)
