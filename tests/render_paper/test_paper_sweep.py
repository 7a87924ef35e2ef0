"""Every figure of the program, printed."""

from functools import cache

import pytest
from paper_reading import is_inside, texts

import massdash as md
from massdash.charts import PRINTED, all_charts
from massdash.render import export, paper, tables

STARS = {
    "settled": {"mass": "1.2e5 solMass", "ignition_temperature": "1e7 K"},
    "never ignites": {"mass": "5e6 solMass", "ignition_temperature": "1.5e8 K"},
    "light": {"mass": "100 solMass", "metals": 0.02},
}


OTHERS = [name for name in STARS if name != "settled"]


@cache
def outcome(name):
    return md.evaluate(md.Scenario(label=f"Lantern, {name}", **STARS[name]))


@pytest.mark.parametrize("key", PRINTED)
@pytest.mark.parametrize(
    "name", [name if name == "settled" else pytest.param(name, marks=pytest.mark.slow) for name in STARS]
)
def test_every_figure_prints_whole(key, name):
    chart = PRINTED[key](outcome(name))
    figure = paper.figure(chart)
    for text, box in texts(figure):
        assert is_inside(box, figure), text
    assert len(tables.chart_table(chart)) > 0


@pytest.mark.slow
def test_all_figures_are_exported_with_their_origin(tmp_path):
    star = outcome("settled")
    paths = export.export_figures(all_charts(star), tmp_path, provenance=export.provenance(star))
    assert [path.name for path in paths] == [f"{key}.{suffix}" for key in PRINTED for suffix in ("pdf", "ecsv")]
    assert all(path.stat().st_size > 1000 for path in paths)
