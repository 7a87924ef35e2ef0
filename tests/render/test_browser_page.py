"""Frames, sizes, descriptions and colours in a real browser."""

import re

import numpy as np
import pytest
from bare import message, open_charts, show
from plots import CELLS, X, curves, plane

from massdash.charts.chart import Axis, Band, Chart, Line, Map, Point, Rule, Span

pytestmark = pytest.mark.browser


def test_an_older_frame_never_replaces_a_newer_one(plot):
    show(plot.page, [curves(6.0, title="new"), plane()], number=5)
    plot.page.evaluate(
        "(old) => model.fromPython({ frame: withBuffer(JSON.parse(old)) })", message([curves(), plane()], number=4)
    )
    plot.painted()
    assert plot.page.locator(".massdash-heading").first.inner_text() == "new"
    assert plot.page.locator(".massdash-charts").get_attribute("data-frame") == "5"


def test_many_frames_are_one_paint_and_the_newest_shows(plot):
    counted = plot.page.evaluate(
        """async () => {
            let paints = 0, last = 0;
            addEventListener("massdash:painted", ({ detail }) => { paints += 1; last = detail.frame; });
            for (let number = 10; number < 30; number++) model.fromPython({ frame: { ...model.get("frame"), number } });
            await new Promise((done) => setTimeout(done, 200));
            return [paints, last];
        }"""
    )
    assert counted == [1, 29]


def test_a_new_structure_keeps_the_charts_that_stay(plot):
    plot.page.evaluate("views[0].cell.dataset.seen = 'yes'; undefined")
    more = Chart("curves", "more", curves().x, curves().y, (*curves().marks, Span("s", "shaded", "y", None, 50.0)))
    show(plot.page, [more], number=2)
    cells = plot.page.locator(".massdash-cell")
    assert cells.count() == 1
    assert cells.first.get_attribute("data-seen") == "yes"


def test_closing_leaves_nothing_behind(plot):
    plot.page.evaluate("window.end(); model.fromPython({ frame: { number: 99 } }); undefined")
    plot.painted()
    assert plot.page.locator("#host").inner_html() == ""


def test_a_hidden_chart_is_painted_when_it_is_shown(page):
    open_charts(page, [curves()])
    page.evaluate("document.querySelector('#host').style.display = 'none'; undefined")
    page.evaluate("model.fromPython({ frame: { ...model.get('frame'), number: 7 } })")
    page.wait_for_timeout(100)
    assert page.locator(".massdash-charts").get_attribute("data-frame") == "1"
    page.evaluate("document.querySelector('#host').style.display = 'block'; undefined")
    page.wait_for_selector("[data-frame='7']")


def test_the_canvas_follows_the_width_and_stays_bounded(plot):
    plot.page.set_viewport_size({"width": 620, "height": 800})
    plot.page.wait_for_function("views[0].width > 560 && views[0].canvas.width === views[0].width")  # one column now
    plot.page.evaluate(
        "Object.defineProperty(window, 'devicePixelRatio', { value: 40 }); model.fromPython({ height: 2000 })"
    )
    plot.painted()
    assert plot.view("view.canvas.width * view.canvas.height") <= 16.1e6


def test_the_alternative_text_is_that_of_the_moment(plot):
    assert plot.area.get_attribute("role") == "img"
    assert plot.area.get_attribute("aria-label") == "Two curves; the rule is at 4."
    show(plot.page, [curves(5.0), plane()], number=2)
    assert plot.area.get_attribute("aria-label") == "Two curves; the rule is at 5."
    assert plot.area.get_attribute("data-lm-suppress-shortcuts") == "true"


def test_the_keys_are_explained_on_focus(plot):
    help_text = plot.page.locator("[data-chart=curves] .massdash-help")
    assert plot.area.get_attribute("aria-describedby") == help_text.get_attribute("id")
    assert "arrows move the read-out" in help_text.inner_text()


def luminance(rgb):
    rgb = np.array(rgb[:3]) / 255
    return np.where(rgb <= 0.04045, rgb / 12.92, ((rgb + 0.055) / 1.055) ** 2.4) @ [0.2126, 0.7152, 0.0722]


def contrast(one, other):
    low, high = sorted((luminance(one), luminance(other)))
    return (high + 0.05) / (low + 0.05)


def colour(text):
    if text.startswith("#"):
        return [int(text[i : i + 2], 16) for i in (1, 3, 5)]
    return [float(part) for part in re.findall(r"[\d.]+", text)]


@pytest.mark.parametrize("dark", [False, True])
def test_texts_and_lines_stand_out_from_the_page(page, dark):
    open_charts(page, [curves()], dark=dark)
    theme = page.evaluate("views[0].theme")
    assert theme["dark"] is dark
    paper = colour(theme["paper"])
    heading = page.evaluate("getComputedStyle(document.querySelector('.massdash-title')).color")
    for text in [theme["text"], heading, *(style["ink"] for style in theme["styles"])]:
        assert contrast(colour(text), paper) >= 4.5
    for style in theme["styles"]:
        assert contrast(colour(style["line"]), paper) >= 3


@pytest.mark.parametrize("dark", [False, True])
def test_charts_stand_on_the_page_s_own_paper(page, dark):
    open_charts(page, [curves()], dark=dark)
    corner = "Array.from(document.querySelector('canvas').getContext('2d').getImageData(2, 2, 1, 1).data)"
    assert page.evaluate(corner)[:3] == colour(page.evaluate("views[0].theme.paper"))[:3]


def test_the_theme_is_followed_when_the_page_changes_it(page):
    open_charts(page, [curves()])
    page.evaluate("document.body.style.background = '#111'; undefined")
    page.wait_for_function("views[0].theme.dark")


def test_every_kind_of_mark_puts_ink_on_the_page(page):
    """Each mark alone, against the empty chart."""
    marks = (
        Line("m", "", X, X**2),
        Band("m", "", X, X, 5 * X),
        Span("m", "", "x", 2.0, 3.0),
        Rule("m", "", "y", 40.0, handle="h"),
        *(Point("m", "", 5.0, 50.0, kind) for kind in ("present", "stable", "unstable", "onset", "end")),
        Point("m", "", 50.0, 50.0),
        Map("m", Axis("z"), (0.0, 10.0), (0.0, 100.0), CELLS),
    )
    axes = Axis("x", limits=(0, 10)), Axis("y", limits=(0, 100))
    charts = [Chart(f"c{i}", "c", *axes, (mark,)) for i, mark in enumerate(marks)]
    open_charts(page, [Chart("empty", "c", *axes), *charts])
    pictures = page.evaluate("views.map((view) => view.canvas.toDataURL())")
    assert len(set(pictures)) == len(marks) + 1
