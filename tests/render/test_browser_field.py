"""The number field in a real browser: what it shows, what it sends, what assistive tools hear."""

import pytest
from bare import open_field

from massdash.render.field import NumberField

pytestmark = pytest.mark.browser


def state(**changes):
    """The state Python would send."""
    options = {"label": "Mass", "unit": "solMass", "minimum": 1e2, "maximum": 1e8, "default": 1e5, "scale": "log"}
    field = NumberField(**(options | changes))
    return {name: value for name, value in field.get_state().items() if not name.startswith("_") and name != "layout"}


class Field:
    def __init__(self, page, **changes):
        open_field(page, state(**changes))
        self.page = page
        self.slider, self.text = page.locator("input[type=range]"), page.locator("input[type=text]")

    def sent(self):
        return [saved["entry"] for saved in self.page.evaluate("model.saved")]

    def answer(self, **values):
        """Python's reply to the last entry."""
        self.page.evaluate("(values) => model.fromPython(values)", {"answered": len(self.sent())} | values)

    def press(self):
        """Holds the slider's thumb; returns the place of the slider's right end."""
        box = self.slider.bounding_box()
        at = float(self.slider.input_value()) / float(self.slider.get_attribute("max"))
        y = box["y"] + box["height"] / 2
        self.page.mouse.move(box["x"] + 8 + at * (box["width"] - 16), y)
        self.page.mouse.down()
        return box["x"] + box["width"], y


@pytest.fixture
def mass(page):
    return Field(page)


@pytest.fixture
def ignition(page):
    return Field(
        page, label="Ignition", unit="K", optional=True, none_label="found from burning", value=None, default=None
    )


def node(page, role, name):
    """What assistive tools are told: the node of the page's accessibility tree."""
    session = page.context.new_cdp_session(page)
    for found in session.send("Accessibility.getFullAXTree")["nodes"]:
        if found.get("role", {}).get("value") == role and found.get("name", {}).get("value") == name:
            return {part["name"]: part["value"].get("value") for part in found["properties"]} | {
                "value": found.get("value", {}).get("value")
            }
    raise AssertionError(f"no {role} named {name}")


def test_it_shows_label_unit_range_and_value(mass):
    words = mass.page.locator(".massdash-field").inner_text()
    assert "Mass" in words
    assert "100 to 10⁸ M☉" in words
    assert mass.text.input_value() == "100000"
    assert float(mass.slider.input_value()) == pytest.approx(500)


def test_a_logarithmic_slider_tells_its_value_and_not_its_position(mass):
    told = node(mass.page, "slider", "Mass in M☉")
    assert (told["value"], told["valuemin"], told["valuemax"]) == (1e5, 1e2, 1e8)
    mass.slider.press("ArrowRight")
    assert node(mass.page, "slider", "Mass in M☉")["value"] == 1.15e5
    assert mass.slider.get_attribute("aria-valuetext") == "1.15×10⁵ M☉"


def test_the_entry_has_a_name_and_a_description(mass):
    told = node(mass.page, "textbox", "Mass")
    assert told["value"] == "100000"
    assert mass.text.get_attribute("aria-describedby").split()[0] == mass.page.locator(
        ".massdash-field-range"
    ).get_attribute("id")


def test_typing_sends_the_text_as_it_is_once(mass):
    mass.text.fill("2.0E6")
    mass.text.press("Enter")
    mass.text.blur()
    assert [(entry["kind"], entry["value"]) for entry in mass.sent()] == [("text", "2.0E6")]
    mass.answer(value=2e6, number=2e6)
    assert mass.text.input_value() == "2e6"


def test_a_refusal_shows_the_sentence_and_the_last_good_value(mass):
    mass.text.fill("heavy")
    mass.text.press("Enter")
    mass.answer(message="Mass: 'heavy' is not allowed; give 100 to 1e8 solMass")
    assert mass.page.locator("[role=status]").inner_text() == "Mass: 'heavy' is not allowed; give 100 to 1e8 solMass"
    assert mass.text.input_value() == "100000"
    assert mass.text.get_attribute("aria-invalid") == "true"
    mass.text.fill("3e4")
    mass.text.press("Enter")
    mass.answer(message="", value=3e4, number=3e4)
    assert mass.text.get_attribute("aria-invalid") == "false"


def test_the_same_refused_text_twice_is_sent_twice(mass):
    for _ in range(2):
        mass.text.fill("heavy")
        mass.text.press("Enter")
        mass.answer(message="no")
    assert [entry["seq"] for entry in mass.sent()] == [1, 2]


def test_dragging_sends_round_values_and_ends_with_a_release(mass):
    right, y = mass.press()
    mass.page.mouse.move(right - 60, y, steps=4)
    mass.page.mouse.up()
    entries = mass.sent()
    assert [entry["dragging"] for entry in entries][-2:] == [True, False]
    assert entries[-1]["value"] == entries[-2]["value"] > 1e6
    assert all(entry["value"] == float(f"{entry['value']:.2e}") for entry in entries)


def test_an_older_answer_does_not_pull_the_thumb_back(mass):
    right, y = mass.press()
    mass.page.mouse.move(right - 60, y, steps=3)
    shown, sent = mass.text.input_value(), len(mass.sent())
    mass.page.evaluate("(answered) => model.fromPython({ answered, value: 2e5, number: 2e5 })", sent - 1)
    assert mass.text.input_value() == shown
    mass.page.mouse.up()
    last = mass.sent()[-1]["value"]
    mass.answer(value=last, number=last)
    assert float(mass.text.input_value()) == last


def test_the_ends_of_the_slider_are_the_ends_of_the_range(page):
    field = Field(page, minimum=123.456, maximum=98765.4, default=1e3, digits=2)
    field.slider.fill(field.slider.get_attribute("max"))
    field.slider.fill("0")
    assert [entry["value"] for entry in field.sent()] == [98765.4, 123.456]
    for position in (1, 999):  # 124 and 98 100, in two digits outside the range
        field.slider.fill(str(position))
    low, high = [entry["value"] for entry in field.sent()][-2:]
    assert 123.456 <= low < high <= 98765.4


def test_a_linear_slider_goes_in_steps(page):
    field = Field(page, label="Helium", unit="", minimum=0.0, maximum=1.0, default=0.247, scale="linear", step=0.05)
    field.slider.press("ArrowRight")
    field.slider.press("ArrowRight")
    assert [entry["value"] for entry in field.sent()] == pytest.approx([0.3, 0.35])


def test_keys_move_a_logarithmic_slider_by_a_hundredth_or_with_shift_a_thousandth(mass):
    for key in ("ArrowRight", "ArrowLeft", "PageUp", "Shift+ArrowRight"):
        mass.slider.press(key)
    values = [entry["value"] for entry in mass.sent()]
    assert values == [1.15e5, 1.0e5, 3.98e5, 4.04e5]
    assert not any(entry["dragging"] for entry in mass.sent())


def test_none_is_a_tick_that_switches_the_slider_off_and_keeps_the_number(ignition):
    tick = ignition.page.get_by_role("checkbox", name="found from burning")
    assert tick.is_checked()
    assert ignition.slider.is_disabled()
    assert ignition.text.input_value() == "100000"
    tick.uncheck()
    assert ignition.sent()[-1]["kind"] == "some"
    ignition.answer(value=1e5, number=1e5)
    assert ignition.slider.is_enabled()
    tick.check()
    assert ignition.sent()[-1]["kind"] == "none"


def test_a_field_that_needs_a_value_has_no_tick(mass):
    assert not mass.page.locator("input[type=checkbox]").is_visible()


def test_reset_names_where_it_goes_and_is_off_when_there(mass):
    button = mass.page.get_by_role("button", name="Mass: back to 10⁵ M☉")
    assert button.is_disabled()
    mass.answer(value=3e4, number=3e4)
    button.click()
    assert mass.sent()[-1]["kind"] == "reset"


def test_the_browser_writes_nothing_but_entries(mass):
    mass.slider.press("ArrowRight")
    mass.text.fill("5")
    mass.text.press("Enter")
    assert {name for saved in mass.page.evaluate("model.saved") for name in saved} == {"entry"}


def test_escape_gives_the_value_back(mass):
    mass.text.fill("12")
    mass.text.press("Escape")
    mass.text.blur()
    assert mass.text.input_value() == "100000"
    assert mass.sent() == []


def test_what_python_writes_is_shown_as_text(page):
    field = Field(page, label="<b>Mass</b>", help="<img src=x>", none_label="<i>none</i>", optional=True)
    assert field.page.locator(".massdash-field-label").inner_text() == "<b>Mass</b>"
    assert field.page.locator(".massdash-field img, .massdash-field b, .massdash-field i").count() == 0
