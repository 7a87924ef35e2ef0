"""What the browser may say to a widget: a few named messages, everything else is dropped."""

import math


def inputs_only(state, names):
    """The part of a browser's state update that Python listens to: dictionaries under one of ``names``. All other
    traits belong to Python, whatever the browser claims."""
    return {name: value for name, value in state.items() if name in names and isinstance(value, dict)}


def is_number(value):
    """Whether a value from the browser is a finite number; booleans, texts and integers beyond a double are not."""
    if type(value) is int:
        return abs(value) <= 2**53
    return type(value) is float and math.isfinite(value)


def sequence_number(message):
    """The count the browser gave its message; 0 when it gave none that can be used."""
    number = message.get("seq")
    return number if type(number) is int and 0 <= number <= 2**53 else 0
