"""What hovering, zooming and walking with the keys show, in a real browser."""

import re
from dataclasses import replace

import numpy as np
import pytest
from bare import show
from plots import CELLS, X, curves, plane

from massdash.charts.chart import Chart, Line

pytestmark = pytest.mark.browser


def test_hovering_reads_the_nearest_point_of_the_nearest_curve(plot):
    assert plot.hover(0.303, 0.10) == ["rising", "distance = 3 pc", "light = 9 L☉"]
    assert plot.hover(0.303, 0.90) == ["falling", "distance = 3 pc", "light = 91 L☉"]


def test_hovering_a_marked_point_reads_the_point(plot):
    assert plot.hover(0.705, 0.21) == ["the star", "distance = 7 pc", "light = 20 L☉"]


def test_far_from_everything_the_place_itself_is_read(plot):
    first, second = plot.hover(0.0, 0.5)
    assert first.startswith("distance = ")
    assert re.fullmatch(r"light = (49|50|51)(\.\d+)? L☉", second)


def test_a_settled_map_reads_the_exact_value_of_its_cell(field):
    rows = field.hover(0.5 / 20, 9.5 / 10)
    assert rows == ["mass = 112.2 M☉", "height = 10.5", f"depth = {180 / 199:.4g} m"]


def test_a_map_in_a_drag_says_that_its_value_is_rough(plot, field):
    show(plot.page, [curves(), plane()], number=2)
    assert field.hover(10.5 / 20, 5.5 / 10)[2] == "depth ≈ 0.55 m"
    assert field.hover(19.5 / 20, 9.5 / 10)[2] == "depth ≳ 1 m"


def test_the_read_out_follows_a_new_frame_and_goes_with_the_pointer(plot):
    plot.hover(0.3, 0.1)
    other = Chart("curves", "t", curves().x, curves().y, (Line("up", "rising", X, X), *curves().marks[1:]))
    show(plot.page, [other, plane()], number=2, exact=True)
    assert plot.area.locator(".massdash-read").inner_text().split("\n")[2] == "light = 3 L☉"
    plot.page.mouse.move(1, 1)
    assert not plot.area.locator(".massdash-read").is_visible()


def test_colours_of_the_map_are_the_same_in_a_drag_and_at_rest(plot, field):
    """The rule from value to colour stands twice, in Python and in the browser."""
    colours = """Array.from(view.prepared.image.getContext("2d").getImageData(0, 4, 20, 1).data)"""
    exact = field.view(colours)
    show(plot.page, [curves(), plane()], number=2)
    np.testing.assert_array_equal(field.view(colours), exact)


def test_a_contour_runs_where_the_level_is(field):
    """0.5 is 99.5/199: between cells 99 and 100, the end of the fifth row and the start of the sixth."""
    pieces = np.reshape(field.view("Array.from(view.prepared.lines[0].pieces)"), (-1, 2))
    i, j = pieces.T
    inside = (i > 0.01) & (i < 18.9)
    expected = (99.5 - i) / 20  # the value is (20 j + i) / 199
    np.testing.assert_allclose(j[inside], expected[inside], atol=1e-4)
    assert inside.sum() > 20


def test_the_wheel_scrolls_the_page_unless_the_chart_has_focus(plot):
    before = plot.range("x")
    plot.hover(0.5, 0.5)
    plot.page.mouse.wheel(0, -100)
    plot.painted()
    assert plot.range("x") == before
    plot.area.focus()
    plot.page.mouse.wheel(0, -100)
    plot.page.wait_for_function("views[0].scales.x.view")
    low, high = plot.range("x")
    assert 0 < low < high < 10


def test_a_box_zooms_and_double_click_resets(plot):
    plot.drag((0.2, 0.5), (0.6, 0.9))
    assert plot.area.locator(".massdash-box").is_visible()
    plot.page.mouse.up()
    assert plot.range("x") == pytest.approx([2, 6], abs=0.05)
    assert plot.range("y") == pytest.approx([50, 90], abs=0.5)
    plot.page.mouse.dblclick(*plot.at(0.1, 0.5))
    assert plot.range("x") == [0, 10]
    plot.page.wait_for_timeout(350)
    assert plot.sent() == []  # neither zooming nor resetting is a click


def test_a_flat_box_zooms_one_axis(plot):
    plot.drag((0.2, 0.5), (0.6, 0.51))
    plot.page.mouse.up()
    assert plot.range("x") == pytest.approx([2, 6], abs=0.05)
    assert plot.range("y") == [0, 100]


def test_zoom_stays_while_values_move_and_keys_undo_it(plot):
    plot.area.focus()
    plot.page.keyboard.press("+")
    zoomed = plot.range("x")
    show(plot.page, [curves(5.0), plane()], number=2)
    assert plot.range("x") == zoomed != [0, 10]
    plot.page.keyboard.press("Escape")
    assert plot.range("x") == [0, 10]


def test_a_curve_outside_the_view_is_still_named(plot):
    plot.drag((0.0, 0.0), (0.3, 0.2))
    plot.page.mouse.up()
    plot.painted()
    assert "falling (outside the view)" in plot.page.locator("[data-chart=curves] .massdash-legend").inner_text()


def test_a_map_is_prepared_anew_exactly_when_it_changes(plot, field):
    image = "view.prepared.image"
    plot.page.evaluate(f"window.first = views[1].{image.removeprefix('view.')}; undefined")
    show(plot.page, [curves(), plane()], number=2, exact=True)
    assert field.view(f"{image} === first")
    values = CELLS.copy()
    values[5, 5] = 0.9  # neither the range nor anything else changes with it
    show(
        plot.page, [curves(), replace(plane(), marks=(replace(plane().marks[0], values=values),))], number=3, exact=True
    )
    assert not field.view(f"{image} === first")
