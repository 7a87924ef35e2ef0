"""Keys, clicks and dragged marks in a real browser: what Python hears."""

import pytest
from bare import show
from plots import curves, plane

pytestmark = pytest.mark.browser


def test_arrows_walk_along_a_curve_and_to_the_next(plot):
    plot.area.focus()
    plot.page.keyboard.press("ArrowRight")
    first = plot.area.locator(".massdash-read").inner_text().split("\n")
    plot.page.keyboard.press("ArrowDown")
    second = plot.area.locator(".massdash-read").inner_text().split("\n")
    assert [first[0], second[0]] == ["rising", "falling"]
    assert first[1] == second[1] != "distance = 5 pc"
    plot.page.wait_for_function("views[0].spoken.textContent.startsWith('falling')")


def test_arrows_go_freely_over_a_map_and_enter_clicks(field):
    field.area.focus()
    field.page.keyboard.press("ArrowUp")
    field.page.keyboard.press("Enter")
    (event,) = field.sent()
    assert (event["kind"], event["chart"], event["handle"]) == ("click", "plane", None)
    assert event["x"] == pytest.approx(1e3)
    assert event["y"] == pytest.approx(6 + 10 / 60)


def test_shift_and_arrows_move_a_handle_and_letting_go_drops_it(plot):
    plot.area.focus()
    plot.page.keyboard.down("Shift")
    plot.page.keyboard.press("ArrowRight")
    plot.page.keyboard.press("ArrowRight")
    plot.page.keyboard.up("Shift")
    events = plot.sent()
    assert [event["kind"] for event in events] == ["drag", "drag", "drop"]
    assert {event["handle"] for event in events} == {"mass"}
    assert [event["x"] for event in events] == pytest.approx([4.1, 4.2, 4.2])


def test_h_picks_the_next_handle(plot):
    plot.area.focus()
    plot.page.keyboard.press("h")
    plot.page.wait_for_function("views[0].spoken.textContent === 'Shift and arrows move the star.'")
    plot.page.keyboard.press("Shift+ArrowUp")
    assert plot.sent()[0]["handle"] == "star"
    assert plot.sent()[0]["y"] == pytest.approx(21)


def test_other_keys_are_left_to_the_page(plot):
    plot.page.evaluate("window.heard = []; addEventListener('keydown', (event) => heard.push(event.key)); undefined")
    plot.area.focus()
    for key in ("a", "Tab", "ArrowLeft"):
        plot.area.press(key)
    assert plot.page.evaluate("heard") == ["a", "Tab"]


def test_a_click_tells_where_in_data_values(plot, field):
    plot.page.mouse.click(*plot.at(0.5, 0.6))
    field.page.mouse.click(*field.at(0.5, 0.5))
    first, second = plot.sent()
    assert (first["kind"], first["chart"], first["handle"]) == ("click", "curves", None)
    assert (first["x"], first["y"]) == (pytest.approx(5, abs=0.03), pytest.approx(60, abs=0.5))
    assert (second["chart"], second["x"]) == ("plane", pytest.approx(1e3, rel=0.02))
    assert second["seq"] > first["seq"]


def test_a_dragged_rule_follows_at_once_and_python_hears_it(plot):
    plot.drag((0.4, 0.7), (0.55, 0.7), steps=3)
    plot.painted()
    assert plot.view("view.held({ handle: 'mass' }).x") == pytest.approx(5.5, abs=0.03)
    plot.page.mouse.up()
    events = plot.sent()
    assert [event["kind"] for event in events] == ["drag"] * 3 + ["drop"]
    assert {event["handle"] for event in events} == {"mass"}
    assert events[-1]["x"] == pytest.approx(5.5, abs=0.03)


def test_a_handle_stays_in_the_plot(plot):
    plot.drag((0.4, 0.7), (1.4, 1.9))
    assert plot.view("view.held({ handle: 'mass' }).x") == 10
    plot.page.mouse.up()
    assert (plot.sent()[-1]["x"], plot.sent()[-1]["y"]) == (10, 100)


def test_answers_to_earlier_steps_do_not_pull_a_dropped_handle_back(plot):
    held = "view.holds.size"
    plot.drag((0.7, 0.2), (0.8, 0.3), steps=2)
    plot.page.mouse.up()
    drop = plot.sent()[-1]["seq"]
    show(plot.page, [curves(), plane()], number=2, answers=drop - 1)
    assert plot.view(held) == 1
    show(plot.page, [curves(), plane()], number=3, answers=drop)
    assert plot.view(held) == 0


def test_an_unanswered_drop_ends_by_itself(plot):
    plot.drag((0.7, 0.2), (0.8, 0.3), steps=2)
    plot.page.mouse.up()
    assert plot.view("view.holds.size") == 1
    plot.page.wait_for_function("views[0].holds.size === 0", timeout=3000)
