"""Numbers as people read them: examples, and that every number reads back."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from massdash.numerals import duration, numeral

PLAIN = str.maketrans("−⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "--0123456789")


def value_of(text):
    """The number a numeral stands for."""
    head, ten, power = text.replace("×10", "e").replace("10⁻", "1e⁻").partition("e")
    if ten:
        return float(head.translate(PLAIN)) * 10.0 ** int(power.translate(PLAIN))
    for sign, start in ((1, "10"), (-1, "−10")):
        rest = text.removeprefix(start)
        if text.startswith(start) and rest and rest[0] in "⁰¹²³⁴⁵⁶⁷⁸⁹":
            return sign * 10.0 ** int(rest.translate(PLAIN))
    return float(text.translate(PLAIN))


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [
        (0.0, 3, "0"),
        (-0.0, 3, "0"),
        (1.0, 3, "1"),
        (0.2345, 2, "0.23"),
        (12.345, 3, "12.3"),
        (-12.345, 3, "−12.3"),
        (999.6, 3, "1000"),
        (12345.0, 3, "12300"),
        (99949.0, 3, "99900"),
        (99951.0, 3, "10⁵"),
        (1e5, 3, "10⁵"),
        (-1e5, 3, "−10⁵"),
        (1.5e5, 3, "1.5×10⁵"),
        (1.234e54, 2, "1.2×10⁵⁴"),
        (-2.586e54, 3, "−2.59×10⁵⁴"),
        (0.001, 3, "0.001"),
        (0.0009996, 3, "0.001"),
        (0.0009994, 3, "9.99×10⁻⁴"),
        (1e-7, 3, "10⁻⁷"),
        (2.5e-300, 2, "2.5×10⁻³⁰⁰"),
    ],
)
def test_numeral(value, digits, text):
    assert numeral(value, digits) == text


@pytest.mark.parametrize("value", [None, math.nan, math.inf, -math.inf])
def test_no_number_is_a_dash(value):
    assert numeral(value) == "–"
    assert duration(value) == "–"


@given(st.floats(1e-300, 1e300) | st.floats(-1e300, -1e-300) | st.floats(-1e6, 1e6), st.integers(1, 6))
def test_every_numeral_reads_back(value, digits):
    text = numeral(value, digits)
    assert value_of(text) == pytest.approx(value, rel=0.51 * 10.0 ** (1 - digits), abs=1e-320)
    assert "e" not in text
    assert "-" not in text


@pytest.mark.parametrize(
    ("years", "text"),
    [
        (1.4e10, "14 Gyr"),
        (1.43e6, "1.43 Myr"),
        (5800.0, "5800 yr"),
        (1.0, "1 yr"),
        (0.5, "183 days"),
        (12 / 365.25, "12 days"),
        (1e-3, "31600 s"),
        (0.0, "0 s"),
        (0.49956, "182 days"),  # rounded once
        (999_960, "1 Myr"),  # rounds up to the next unit
        (999_400, "9.99×10⁵ yr"),
        (999.9996e6, "1 Gyr"),
        (0.99999, "1 yr"),
    ],
)
def test_duration(years, text):
    assert duration(years) == text
