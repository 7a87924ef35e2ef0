"""Scales and tick labels for print: from data values to the fraction of an axis' length, and what stands there.

All drawing happens in fractions of the axes (0 = start, 1 = end), so energies of 1e57 erg, ranges of a millionth and
reversed axes need no special care further on. Tick values are integers times powers of ten: their texts are exact.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal
from math import ceil, floor, isfinite, log10

import numpy as np

from massdash.charts.chart import Axis
from massdash.render import scales

MOST_TICKS = 7  # labels on one axis before the eye starts to count
MOST_MINOR = 60
LONGEST_TEXT = 5  # digits a tick label may have before an offset goes into the axis' title
STRIDES = (1, 2, 3, 4, 5, 10, 20, 50, 100)  # decades from one label to the next


@dataclass(frozen=True)
class Ticks:
    """Labelled and unlabelled positions (fractions); ``power`` of ten and ``offset`` belong into the axis' title."""

    at: tuple[float, ...]
    texts: tuple[str, ...]
    minor: tuple[float, ...] = ()
    power: int = 0
    offset: str = ""
    rotation: int = 0


@dataclass(frozen=True)
class Scale:
    """One axis' road from values to fractions; ``start`` and ``stop`` are its ends in scale coordinates."""

    axis: Axis
    start: float
    stop: float

    @property
    def kind(self):
        return self.axis.scale

    def forward(self, values):
        """Scale coordinates (see ``scales``), where the axis is even."""
        with np.errstate(over="ignore"):  # what overflows has no place
            return scales.forward(values, self.axis)

    def inverse(self, position):
        """The value at a position in scale coordinates (may overflow to infinity, never raises)."""
        with np.errstate(over="ignore"):
            if self.kind == "log":
                return float(np.power(10.0, position))
            if self.kind == "symlog":
                return float(2 * self.axis.linear_width * np.sinh(position * np.log(10)))
            return float(position)

    def fraction(self, values):
        """Fractions of the axis' length, NaN where there is no place; far values stop at 1e4 lengths."""
        with np.errstate(over="ignore"):
            return np.clip((self.forward(values) - self.start) / (self.stop - self.start), -1e4, 1e4)

    def covers(self, value):
        """True for a value inside the axis."""
        return bool(-1e-6 <= self.fraction(value) <= 1 + 1e-6)


def of_chart(chart, which):
    """The Scale of a chart's "x" or "y" axis, as wide as on the screen."""
    with np.errstate(over="ignore"):
        return Scale(getattr(chart, which), *scales.home(chart, which))


def of_map(mark):
    """The Scale of a map's colour bar; diverging ones reach equally far both ways."""
    with np.errstate(over="ignore"):
        return Scale(mark.axis, *scales.map_range(mark))


def candidates(scale: Scale) -> Iterator[Ticks]:
    """Possible tick sets, densest first; the last one has few labels and fits nearly everywhere."""
    if scale.axis.ticks is not None:
        yield _given(scale)
        return
    if scale.kind != "linear":
        yield from _decades(scale)
    yield from _even(scale)


def _given(scale):
    kept = [(float(scale.fraction(v)), text) for v, text in scale.axis.ticks if scale.covers(v)]
    return Ticks(tuple(at for at, _ in kept), tuple(plain(text) for _, text in kept))


def _decades(scale):
    """Powers of ten; between them 2 and 5, or 3, where few decades leave room; nothing when hardly any is in range."""
    decades = len(_inside(scale, _signed(scale, (1,), 1)))
    few = [((1, 2, 5), 1), ((1, 3), 1)] if decades < 4 else []
    for mantissas, stride in [*few, *(((1,), s) for s in STRIDES)]:
        for least in (1.0, 3.0) if scale.kind == "symlog" else (0.0,):
            marks = _inside(scale, _signed(scale, mantissas, stride, least))
            if (2 if mantissas == (1,) else 3) <= len(marks) <= MOST_TICKS + 2:
                yield _decade_ticks(scale, marks, stride)


def _decade_ticks(scale, marks, stride):
    minor = _inside(scale, _signed(scale, range(2, 10) if stride == 1 else (1,), 1, 1.0))
    short = all(-2 <= exponent <= 3 for _, _, exponent in marks)
    return Ticks(
        tuple(at for at, _, _ in marks),
        tuple(_decade_text(mantissa, exponent, short) for _, mantissa, exponent in marks),
        tuple(at for at, _, _ in minor) if len(minor) <= MOST_MINOR else (),
    )


def _signed(scale, mantissas, stride, least=1.0):
    """(forward position, signed mantissa, exponent) near the range; on symlog 0 and nothing below ``least`` widths."""
    low, high = sorted((scale.start, scale.stop))
    if scale.kind == "log":
        exponents = [k for k in range(floor(low), ceil(high) + 1) if k % stride == 0]
        return [(log10(m) + k, m, k) for k in exponents for m in mantissas]
    unit = log10(scale.axis.linear_width)
    first = floor(unit + log10(least) + 1e-9)
    exponents = range(first, ceil(unit + max(abs(low), abs(high))) + 1, stride)
    marks = [(sign * m, k) for k in exponents for m in mantissas for sign in (-1, 1)]
    places = [(float(scale.forward(float(f"{m}e{k}"))), m, k) for m, k in marks]
    nearest = float(scale.forward(least * scale.axis.linear_width)) * (1 - 1e-9)
    return [(0.0, 0, 0), *(place for place in places if abs(place[0]) >= nearest)]


def _inside(scale, places):
    length = scale.stop - scale.start
    fractions = [((t - scale.start) / length, m, k) for t, m, k in places]
    return sorted(mark for mark in fractions if -1e-9 <= mark[0] <= 1 + 1e-9)


def _decade_text(mantissa, exponent, short):
    if mantissa == 0:
        return "0"
    if short:
        return _digits(Decimal(mantissa).scaleb(exponent))
    sign = "-" if mantissa < 0 else ""
    factor = "" if abs(mantissa) == 1 else rf"{abs(mantissa)}\times"
    return rf"${sign}{factor}10^{{{exponent}}}$"


def _even(scale):
    """Even steps in value, at their places on whatever scale."""
    low, high = sorted((scale.inverse(scale.start), scale.inverse(scale.stop)))
    if not (isfinite(high - low) and high > low):
        return
    seen = set()
    for count in range(MOST_TICKS, 0, -1):
        step = _step((high - low) / count)
        if step not in seen:
            seen.add(step)
            yield _labelled(scale, low, high, *step)


def _step(least):
    """(mantissa, exponent) of the smallest 1, 2 or 5 times a power of ten that is not below ``least``."""
    exponent = floor(log10(least))
    for mantissa in (1, 2, 5):
        if float(f"{mantissa}e{exponent}") >= least * (1 - 1e-9):
            return mantissa, exponent
    return 1, exponent + 1


def _labelled(scale, low, high, mantissa, exponent):
    step = float(f"{mantissa}e{exponent}")
    near = max(1e-9, 1e-15 * abs(low / step), 1e-15 * abs(high / step))  # an end that rounding has moved still counts
    multiples = range(ceil(low / step - near), floor(high / step + near) + 1)
    numbers = [n * mantissa for n in multiples if scale.covers(_value(n * mantissa, exponent))]
    offset = _offset(numbers, low, high, exponent)
    rest = [n - offset for n in numbers]
    top = exponent + len(str(max((abs(n) for n in rest), default=0))) - 1
    power = 0 if -3 <= top <= 4 or not any(rest) else top
    return Ticks(
        tuple(float(scale.fraction(_value(n, exponent))) for n in numbers),
        tuple(_digits(Decimal(n).scaleb(exponent - power)) for n in rest),
        power=power,
        offset=_offset_text(offset, exponent),
    )


def _value(number, exponent):
    return float(Decimal(number).scaleb(exponent))


def _offset(numbers, low, high, exponent):
    """What to take off long tick values, in units of 10^exponent; 0 when they are short enough."""
    longest = max((len(str(abs(n))) for n in numbers), default=0)
    if longest <= LONGEST_TEXT:
        return 0
    coarse = 10 ** max(ceil(log10(high - low)) - exponent, 0)
    return round(numbers[0] / coarse) * coarse


def _offset_text(offset, exponent):
    if offset == 0:
        return ""
    number = abs(Decimal(offset).scaleb(exponent).normalize())
    sign = "+" if offset < 0 else "−"
    if -4 <= number.adjusted() <= 6:
        return f"{sign} {number:f}"
    lead = number.scaleb(-number.adjusted())
    return rf"{sign} ${lead:f}\times10^{{{number.adjusted()}}}$"


def _digits(number):
    return "0" if number == 0 else f"{number:f}".replace("-", "−")


def number_text(value, digits=3):
    """A number for print: 0.05, 1234, or 1.2×10⁵⁴ as mathtext; a dash for what is not finite."""
    value = float(value)
    if not isfinite(value):
        return "–"
    if value == 0 or 1e-3 <= abs(value) < 1e5:
        return _digits(Decimal(f"{value:.{max(digits, 5)}g}" if abs(value) >= 1e3 else f"{value:.{digits}g}"))
    mantissa, exponent = f"{value:.{digits - 1}e}".split("e")
    mantissa = f"{float(mantissa):g}"
    factor = {"1": "", "-1": "-"}.get(mantissa, rf"{mantissa}\times")
    return rf"${factor}10^{{{int(exponent)}}}$"


def plain(text):
    """Text that matplotlib takes letter by letter: a dollar sign starts no formula, line breaks are blanks."""
    return " ".join(str(text).split()).replace("$", r"\$")


def unit_text(unit):
    """A unit as printed: "g / cm3" as g cm⁻³, "solMass" as M☉; what is no unit of astropy stays as it is."""
    from astropy import units as u

    try:
        return u.Unit(unit).to_string("unicode")
    except ValueError:
        return unit


def axis_title(axis: Axis, ticks: Ticks):
    """Label, offset, and in brackets the power of ten, the unit and the linear width."""
    label = plain(axis.label) + (f" {ticks.offset}" if ticks.offset else "")
    power = rf"$10^{{{ticks.power}}}$" if ticks.power else ""
    inside = " ".join(part for part in (power, plain(unit_text(axis.unit))) if part)
    if axis.scale == "symlog":
        inside = "; ".join(part for part in (inside, f"linear within ±{number_text(axis.linear_width)}") if part)
    return f"{label} ({inside})" if inside else label
