"""The three axis scales and how wide an axis is when a chart does not say.

A scale maps values to "scale coordinates", in which the axis is even: the value itself (linear), its decimal logarithm
(log), or an inverse hyperbolic sine that is linear near zero and counts decades far from it (symlog; Lupton, Gunn &
Szalay 1999, AJ 118, 1406). What a scale cannot show is NaN, which every drawing routine leaves out.
"""

import numpy as np

from massdash.charts.chart import Band, Line, Map, Point, Rule

MARGIN = 0.04  # of the data's range, left free on both sides
LEAST = 1e-12  # narrowest axis, relative to its larger end: float64 resolves no finer steps
# Double precision ends at 1.8e308 and has all its digits down to 2.2e-308; an axis needs room for its length.
LARGEST, SMALLEST = 8e307, 2e-307


def forward(values, axis):
    """Scale coordinates (float64, shape of ``values``); NaN where the scale shows nothing."""
    values = np.asarray(values, float)
    values = np.where(np.abs(values) <= LARGEST, values, np.nan)
    if axis.scale == "log":
        coordinates = np.log10(np.where(values >= SMALLEST, values, np.nan))
    elif axis.scale == "symlog":
        coordinates = np.arcsinh(values / (2 * axis.linear_width)) / np.log(10)
    else:
        coordinates = values
    return np.where(np.isfinite(coordinates), coordinates, np.nan)


def extent(coordinates):
    """(lowest, highest) of the finite coordinates, or None."""
    finite = np.asarray(coordinates, float)
    finite = finite[np.isfinite(finite)]
    return (float(finite.min()), float(finite.max())) if finite.size else None


def widen(low, high, axis):
    """The range with a margin, as far as double precision goes; a single value gets room on both sides."""
    if high - low > LEAST * max(abs(low), abs(high)):
        room = MARGIN * (high - low)
    elif axis.scale == "linear":
        room = 0.05 * max(abs(low), abs(high)) or 1.0
    else:
        room = 0.5
    least, most = forward([SMALLEST if axis.scale == "log" else -LARGEST, LARGEST], axis)
    return max(low - room, float(least)), min(high + room, float(most))


def _values_along(mark, name):
    """What a mark asks one axis ("x" or "y") to show; spans ask for nothing."""
    if isinstance(mark, Line):
        return getattr(mark, name)
    if isinstance(mark, Band):
        return mark.x if name == "x" else np.concatenate([mark.low, mark.high])
    if isinstance(mark, Point | Map):
        return getattr(mark, name)
    if isinstance(mark, Rule) and mark.axis == name:
        return mark.at
    return ()


def limits_given(axis):
    """The axis' own limits in scale coordinates, or None when it has none that can be shown."""
    if axis.limits is None:
        return None
    low, high = forward(axis.limits, axis)
    return (float(low), float(high)) if abs(high - low) > 0 else None


def home(chart, name):
    """The range (start, end) of the chart's "x" or "y" axis in scale coordinates, always finite and never empty.
    ``start > end`` when the limits ask for a reversed axis."""
    axis = getattr(chart, name)
    given = limits_given(axis)
    if given:
        return given
    found = [extent(forward(_values_along(mark, name), axis)) for mark in chart.marks]
    found = [pair for pair in found if pair]
    if not found:
        return (0.0, 1.0)
    low, high = min(pair[0] for pair in found), max(pair[1] for pair in found)
    if chart.of(Map) and high > low:
        return (low, high)  # a map fills its frame
    return widen(low, high, axis)


def map_range(mark):
    """The range of a map's colours in scale coordinates; symmetric about zero when the palette is diverging."""
    low, high = limits_given(mark.axis) or extent(forward(mark.values, mark.axis)) or (0.0, 1.0)
    low, high = min(low, high), max(low, high)
    if mark.palette == "diverging":
        high = max(abs(low), abs(high))
        low = -high
    return (low, high) if high > low else (low - 0.5, high + 0.5)
