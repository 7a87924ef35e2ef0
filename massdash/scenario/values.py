"""From what people give (quantities, text, numbers) to what a scenario holds, and back to text.

Every refusal is one sentence with the name of the field, what was given and what is allowed.
"""

import re
from numbers import Real

import numpy as np
from astropy import units as u

from massdash.errors import refuse
from massdash.scenario.fields import short

_NUMBER_AND_UNIT = re.compile(r"\s*([+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?)\s*(.*)", re.DOTALL)
_LONGEST_TEXT = 100  # of a number with its unit; longer ones only keep the unit parser busy
_LONGEST_SHOWN = 60


def accept(field, value):
    """The value as a scenario holds it: text, float, read-only Quantity in the canonical unit, or None.

    Raises InputError for a wrong type or unit, NaN, infinity, and what lies outside the field's own range.
    """
    if value is None:
        return _none(field)
    if field.unit is None:
        return _text(field, value)
    number = _number(field, value)
    if not field.low <= number <= field.high:
        raise refuse(field.name, shown(value), field.allowed)
    return field.with_unit(number)


def shown(value):
    """Anything given, on one line and not too long, for a sentence."""
    return one_line(str(value) if isinstance(value, u.Quantity | Real) else repr(value))


def one_line(text):
    """The text without line breaks, cut when it is too long for a sentence."""
    text = " ".join(text.split())
    return text if len(text) <= _LONGEST_SHOWN else text[: _LONGEST_SHOWN - 3] + "..."


def written(field, value):
    """The value as files hold it: a quantity as text with its unit, exact to the last bit; others as they are."""
    return f"{float(value.value)!r} {field.unit}" if isinstance(value, u.Quantity) else value


def _none(field):
    if not field.optional:
        raise refuse(field.name, "None", field.allowed)
    return None


def _text(field, value):
    if not (isinstance(value, str) and value.isprintable() and field.low <= len(value) <= field.high):
        raise refuse(field.name, shown(value), field.allowed)
    return str(value)


def _number(field, value):
    """A float in the field's canonical unit, not yet checked against the range."""
    if isinstance(value, str):
        value = _from_text(field, value)
    if isinstance(value, u.Quantity):
        return _in_unit(field, value)
    if not isinstance(value, Real) or isinstance(value, bool | np.bool_):
        raise refuse(field.name, f"{shown(value)} ({type(value).__name__})", field.allowed)
    if field.unit:
        _refuse_bare(field, value)
    return _as_float(field, value)


def _from_text(field, text):
    """A Quantity, or a float when the text has no unit."""
    match = _NUMBER_AND_UNIT.fullmatch(text)
    if not (match and len(text) <= _LONGEST_TEXT):
        raise refuse(field.name, shown(text), _with_example(field))
    number, unit = float(match[1]), match[2].strip()
    if not unit and field.unit:
        _refuse_bare(field, text)
    if not unit:
        return number
    try:
        return u.Quantity(number, u.Unit(unit))
    except (ValueError, TypeError, ArithmeticError):
        raise refuse(field.name, f"{shown(text)} (unknown unit)", _with_example(field)) from None


def _in_unit(field, quantity):
    if quantity.shape != ():
        raise refuse(field.name, f"an array of shape {quantity.shape}", field.allowed)
    if quantity.dtype.kind not in "iuf":
        raise refuse(field.name, f"{shown(quantity)} ({quantity.dtype})", field.allowed)
    if field.also and str(quantity.unit) in field.also:
        return float(quantity.value)
    try:
        with np.errstate(over="ignore"):  # an infinite result is refused with the field's range
            return float(quantity.to_value(field.astropy_unit))
    except (u.UnitsError, TypeError):
        raise refuse(field.name, f"{shown(quantity)} (wrong unit)", _with_example(field)) from None


def _refuse_bare(field, value):
    raise refuse(field.name, f"{shown(value)} without a unit", _with_example(field))


def _as_float(field, value):
    try:
        return float(value)
    except OverflowError:
        raise refuse(field.name, shown(value), field.allowed) from None


def _with_example(field):
    """What is allowed; for a quantity also how one is written."""
    example = field.low if field.default is None else field.default
    return f'{field.allowed}, such as "{short(example)} {field.unit}"' if field.unit else field.allowed
