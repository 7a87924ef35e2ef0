"""The number field without a browser: nothing that is not allowed becomes its value, whatever arrives."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from massdash.errors import InputError
from massdash.render.field import NumberField, middle, read_number


def mass(**changes):
    options = {"label": "mass", "unit": "solMass", "minimum": 1e2, "maximum": 1e8, "default": 1e5, "scale": "log"}
    return NumberField(**(options | changes))


def found(**changes):
    return mass(label="ignition", optional=True, none_label="found from burning", **changes)


def enter(field, kind, value=None, *, dragging=False, seq=1):
    field.set_state({"entry": {"kind": kind, "value": value, "dragging": dragging, "seq": seq}})


@pytest.mark.parametrize(
    ("text", "number"),
    [
        ("1.2e5", 1.2e5),
        ("2.0E6", 2e6),
        (" 300 ", 300.0),
        ("-.5", -0.5),
        ("−3", -3.0),
        ("+4e+2", 400.0),
        ("1e999", math.inf),
    ],
)
def test_typed_numbers_are_read(text, number):
    assert read_number(text) == number


@pytest.mark.parametrize(
    "text", ["", "abc", "1e", "1,2", "1 2", "nan", "inf", "0x10", "1_000", "e5", ".", "1" * 41, "٣"]
)
def test_other_texts_are_not_numbers(text):
    assert read_number(text) is None


def test_it_starts_with_the_default():
    assert mass().value == mass().number == 1e5
    assert found(default=None).value is None
    assert found(default=None).number == pytest.approx(1e5)  # the middle of the range, until there is a better one


@pytest.mark.parametrize(
    ("bounds", "expected"),
    [((1e6, 1e9, "log"), 3.2e7), ((0.0, 1.0, "linear"), 0.5), ((1.001, 1.002, "linear"), 1.0015)],
)
def test_the_middle_is_a_round_number_inside_the_range(bounds, expected):
    assert middle(*bounds) == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(("kind", "value"), [("number", 2e6), ("text", "2.0E6"), ("number", 2_000_000)])
def test_good_entries_become_the_value(kind, value):
    field = mass()
    seen = []
    field.observe_value(seen.append)
    enter(field, kind, value)
    assert (field.value, field.number, field.message, field.answered) == (2e6, 2e6, "", 1)
    assert seen == [2e6]


REFUSED = {
    "below": ("number", 99.0),
    "above": ("number", 1.0000001e8),
    "NaN": ("number", float("nan")),
    "infinite": ("number", float("inf")),
    "typed too large": ("text", "1e999"),
    "word": ("text", "heavy"),
    "boolean": ("number", True),
    "text as number": ("number", "1e5"),
    "number as text": ("text", 1e5),
    "nothing": ("number", None),
    "list": ("number", [1e5]),
    "huge integer": ("number", 10**400),
    "none, though not optional": ("none", None),
    "unknown kind": ("set", 1e5),
    "kind is a list": (["none"], None),
}


@pytest.mark.parametrize(("kind", "value"), REFUSED.values(), ids=REFUSED.keys())
def test_refusals_say_what_is_allowed_and_keep_the_last_value(kind, value):
    field = mass(value=3e4)
    seen = []
    field.observe_value(seen.append)
    enter(field, kind, value, seq=9)
    assert (field.value, field.number, field.answered) == (3e4, 3e4, 9)
    assert field.message.startswith("mass: ")
    assert field.message.endswith("is not allowed; give 100 to 1e8 solMass")
    assert len(field.message) < 200
    assert seen == []


def test_a_good_entry_clears_the_message():
    field = mass()
    enter(field, "text", "heavy", seq=1)
    enter(field, "text", "2e5", seq=2)
    assert (field.message, field.value) == ("", 2e5)


@given(
    st.none() | st.booleans() | st.floats() | st.integers() | st.text(),
    st.sampled_from(["number", "text", "some", "reset"]),
)
def test_the_value_never_leaves_the_range(value, kind):
    field = mass()
    enter(field, kind, value)
    assert 1e2 <= field.value <= 1e8


def test_none_and_back_keeps_the_last_number():
    field = found(value=2e6)
    enter(field, "none", seq=1)
    assert (field.value, field.number) == (None, 2e6)
    enter(field, "some", seq=2)
    assert field.value == 2e6


def test_a_refusal_of_an_optional_field_names_the_choice():
    field = found()
    enter(field, "text", "hot")
    assert field.message.endswith("give 100 to 1e8 solMass, or found from burning")


def test_reset_goes_back_to_the_default():
    field = mass(value=3e4)
    enter(field, "reset")
    assert field.value == 1e5


def test_while_held_dragging_is_true_and_ends_after_the_last_value():
    field, seen = mass(), []
    field.observe(lambda change: seen.append((change["name"], change["new"], field.dragging)), ["value", "dragging"])
    enter(field, "number", 2e5, dragging=True, seq=1)
    enter(field, "number", 3e5, dragging=False, seq=2)
    assert seen == [("dragging", True, True), ("value", 2e5, True), ("value", 3e5, True), ("dragging", False, False)]


def test_the_browser_cannot_widen_the_range_or_set_the_value_itself():
    field = mass()
    field.set_state(
        {"minimum": 0.0, "maximum": 1e30, "value": 5.0, "message": "hello", "dragging": True, "optional": True}
    )
    assert (field.minimum, field.maximum, field.value, field.message) == (1e2, 1e8, 1e5, "")
    assert not field.dragging
    assert not field.optional


@pytest.mark.parametrize("value", [math.nan, math.inf, 1.0, 1e9, None])
def test_python_too_is_refused_what_is_not_allowed(value):
    field = mass()
    with pytest.raises(InputError, match=r"mass: .* is not allowed; give 100 to 1e8 solMass"):
        field.value = value
    assert field.value == 1e5


@pytest.mark.parametrize("bounds", [(1e8, 1e2), (math.nan, 1.0), (0.0, 1.0), (1.0, math.inf)])
def test_a_senseless_range_is_refused_at_once(bounds):
    with pytest.raises(ValueError, match="mass"):
        mass(minimum=bounds[0], maximum=bounds[1], default=None)
