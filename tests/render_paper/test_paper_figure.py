"""Figures on paper: exact width, all marks, labels in free places, refusals."""

import subprocess
import sys
from dataclasses import replace

import matplotlib
import numpy as np
import pytest
from paper_cases import every_mark, margin_map
from paper_reading import drawn, is_inside, overlaps, texts

from massdash.charts.chart import Axis, Band, Chart, Line, Map, Point, Rule, Span
from massdash.errors import InputError
from massdash.render import paper, paper_labels, paper_marks


def lone(*marks, x=None, y=None, **rest):
    return Chart("lone", "Lone", x or Axis("x"), y or Axis("y"), marks, **rest)


def curve(**changes):
    return replace(Line("curve", "a curve", np.arange(5.0), np.arange(5.0) ** 2), **changes)


@pytest.mark.parametrize("width", [60, 180])
@pytest.mark.parametrize("key", ["energy", "map"])
def test_width_is_exact_and_nothing_is_cut_or_covered(key, width):
    figure = drawn(key, width)
    assert figure.get_figwidth() * 25.4 == pytest.approx(width, abs=1e-9)
    for text, box in texts(figure):
        assert is_inside(box, figure), text
    assert overlaps(texts(figure), room=1.0) == []


def test_a_given_height_is_kept_and_too_little_is_refused():
    figure = paper.figure(every_mark(), height_mm=70)
    assert figure.get_figheight() * 25.4 == pytest.approx(70)
    with pytest.raises(InputError, match="height_mm: 20 is not allowed; give a greater height"):
        paper.figure(every_mark(), height_mm=20)


def test_all_labels_of_all_marks_are_written_once():
    written = " ".join(text.replace("\n", " ") for text, _ in texts(drawn("energy")))
    for mark in every_mark().marks:
        assert mark.label in written


def test_point_kinds_have_shapes_of_their_own():
    shapes = [tuple((layer["marker"], layer["color"]) for layer in layers) for layers in paper_marks.MARKERS.values()]
    assert len(set(shapes)) == 5
    assert [layer["marker"] for layer in paper_marks.MARKERS["unstable"]] == ["^"]
    assert paper_marks.MARKERS["unstable"][0]["color"] == "white"


def test_markers_of_every_kind_are_drawn_where_they_belong():
    chart = lone(*(Point(kind, kind, 1.0, 1.0, kind) for kind in paper_marks.MARKERS), curve())
    markers = [line for line in paper.figure(chart).axes[0].lines if line.get_marker() in tuple("o^Ds")]
    assert sorted(line.get_marker() for line in markers) == sorted("oo" + "o" + "^" + "D" + "s")
    assert len({(line.get_xdata()[0], line.get_ydata()[0]) for line in markers}) == 1


def test_cells_of_a_map_have_the_colours_of_their_values():
    from massdash.render.palette import colour_table

    values = np.array([[-1.0, 0.0], [np.nan, 1.0]])
    chart = lone(Map("z", Axis("z"), (0.0, 1.0), (0.0, 1.0), values, palette="diverging"))
    pixels = paper.figure(chart).axes[0].images[0].get_array()
    table = colour_table("diverging")
    assert (pixels[0, 0, :3] == table[0]).all()
    assert (pixels[1, 1, :3] == table[255]).all()
    assert (pixels[0, 1, :3] == table[127]).all() or (pixels[0, 1, :3] == table[128]).all()
    assert pixels[1, 0, 3] == 0


def test_contours_lie_on_their_level():
    x = np.linspace(0.5, 9.5, 10) / 10
    chart = lone(Map("z", Axis("z"), (0.0, 1.0), (0.0, 1.0), np.tile(x, (10, 1)), levels=(0.42, 7.0)))
    scales = {"x": paper.paper_scale.of_chart(chart, "x"), "y": paper.paper_scale.of_chart(chart, "y")}
    ((level, lines),) = paper_marks.contours(chart["z"], scales)
    assert level == 0.42
    assert np.allclose(lines[0][:, 0], 0.42)


def test_what_lies_outside_the_axes_is_said_and_not_drawn():
    axis = Axis("x", limits=(0.0, 10.0))
    chart = lone(Point("present", "Lantern", 25.0, 1.0), Rule("limit", "limit", "x", -3.0), curve(), x=axis)
    figure = paper.figure(chart)
    written = [text for text, _ in texts(figure)]
    assert "Lantern: outside the axes, at x = 25.\nlimit: outside the axes, at x = -3." in written
    assert not any(line.get_marker() == "o" for line in figure.axes[0].lines)


def test_maps_say_what_the_colours_hide():
    values = np.array([[0.5, 3.0], [np.nan, 0.1]])
    chart = lone(Map("z", Axis("z", limits=(0.0, 1.0)), (0.0, 1.0), (0.0, 1.0), values))
    notes = next(text for text, _ in texts(paper.figure(chart)) if "Hatched" in text)
    assert notes == "Hatched: no value.\nValues beyond the colour bar have the colour of its end."


def test_reversed_axes_run_backwards():
    chart = lone(curve(), x=Axis("Redshift", limits=(4.0, 0.0)))
    x = paper.figure(chart).axes[0].lines[0].get_xdata()
    assert np.allclose(x, [1.0, 0.75, 0.5, 0.25, 0.0])


@pytest.mark.parametrize("text", ["$x_{", "100 % & <b>", r"back\slash $", "a\nb", "星 🚀", "w" * 80, "$$", ""])
def test_any_text_is_taken_letter_by_letter(text):
    chart = lone(curve(label=text), Point("present", text, 2.0, 4.0), notes=(text,))
    figure = paper.figure(replace(chart, title=text, x=Axis(text, "erg")))
    with paper.look():
        figure.canvas.draw()
    assert all(is_inside(box, figure) for _, box in texts(figure))


def test_letters_the_font_lacks_are_marked():
    written = [text for text, _ in texts(paper.figure(replace(lone(curve()), title="Star 星")))]
    assert "Star □" in written
    assert any(text.endswith("□ stands for a letter that the print font lacks.") for text in written)


@pytest.mark.parametrize(
    ("chart", "sentence"),
    [
        (lone(curve(y=np.arange(3.0))), r"chart lone, mark curve, shapes: x \(5,\), y \(3,\) is not allowed"),
        (lone(curve(style=8)), "chart lone, mark curve, style: 8 is not allowed; give 0 to 7"),
        (lone(Band("b", "", np.ones(3), np.ones(3), np.ones((3, 1)))), "mark b, shapes"),
        (lone(Point("p", "", 1.0, 1.0, "moon")), "mark p, kind: 'moon' is not allowed; give present, stable"),
        (lone(Rule("r", "", "z", 1.0)), "mark r, axis: 'z' is not allowed; give 'x' or 'y'"),
        (lone(Span("s", "", "w", 1.0, None)), "mark s, axis: 'w'"),
        (lone(Map("m", Axis("z"), (0.0, 1.0), (0.0, 1.0), np.ones(3))), "mark m, shape of values"),
        (lone(Map("m", Axis("z"), (0.0, 0.0), (0.0, 1.0), np.ones((3, 3)))), "mark m, edges in x"),
        (lone(Map("m", Axis("z"), (0.0, 1.0), (0.0, 1.0), np.ones((3, 3)), palette="bright")), "palette: 'bright'"),
        (lone(curve(), y=Axis("y", scale="log", limits=(0.0, 1.0))), "limits of y: .* two different positive numbers"),
        (lone(curve(), x=Axis("x", limits=(np.nan, 1.0))), "limits of x: .* two different finite numbers"),
        (replace(lone(curve()), key="../up"), "chart key: '../up' is not allowed"),
    ],
)
def test_a_broken_chart_is_refused_in_one_sentence(chart, sentence):
    with pytest.raises(InputError, match=sentence):
        paper.figure(chart)


@pytest.mark.parametrize("width", [39.9, 401, np.nan, np.inf, "88", True, None, -88])
def test_widths_out_of_range_are_refused(width):
    with pytest.raises(InputError, match=r"width_mm: .* is not allowed; give 40 to 400 mm"):
        paper.figure(lone(curve()), width_mm=width)


@pytest.mark.parametrize("size", [4, 25, np.nan, "8"])
def test_font_sizes_out_of_range_are_refused(size):
    with pytest.raises(InputError, match=r"font_size: .* is not allowed; give 5 to 24 points"):
        paper.figure(lone(curve()), font_size=size)


def test_settings_of_the_user_neither_matter_nor_change():
    plain = texts(paper.figure(margin_map(n=20)))
    with matplotlib.rc_context({"font.size": 30, "axes.labelsize": 30, "text.usetex": True, "svg.fonttype": "none"}):
        before = dict(matplotlib.rcParams)
        assert [box.bounds for _, box in texts(paper.figure(margin_map(n=20)))] == [box.bounds for _, box in plain]
        assert dict(matplotlib.rcParams) == before


def test_no_global_plotting_state_is_loaded():
    code = (
        "import sys; sys.path.insert(0, 'tests/render_paper'); import paper_cases; from massdash.render import export\n"
        "assert 'matplotlib' not in sys.modules\n"
        "export.figure_bytes(paper_cases.margin_map(n=5), 'svg', provenance={})\n"
        "assert 'matplotlib.pyplot' not in sys.modules"
    )
    subprocess.run([sys.executable, "-c", code], check=True, cwd=paper.__file__.rsplit("/massdash/", 1)[0])


def test_labels_pushed_apart_keep_their_order_and_stay_inside():
    centres = paper_labels.push_apart([5.0, 5.1, 5.2, 50.0, 99.0], [8.0] * 5, 0.0, 100.0)
    assert (np.diff(centres) >= 8.0 - 1e-9).all()
    assert centres[0] >= 4.0
    assert centres[-1] <= 96.0
    assert centres[3] == pytest.approx(50.0)


def test_a_label_prefers_a_place_that_covers_nothing():
    places = paper_labels.Places(100.0, 100.0)
    places.add_curve([0.0, 100.0], [50.0, 50.0])
    box, leader, covers = places.take(paper_labels.around_point(50.0, 50.0, (20.0, 8.0), 4.0))
    assert not covers
    assert leader is None
    assert box[1] > 51.0 or box[3] < 49.0


def test_a_full_place_takes_no_more():
    places = paper_labels.Places(30.0, 30.0)
    places.add_wall((0.0, 0.0, 30.0, 30.0))
    assert places.take(paper_labels.around_point(15.0, 15.0, (5.0, 5.0), 2.0)) is None
