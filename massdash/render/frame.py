"""Charts as one message for the browser: a structure that rarely changes, and a frame of everything else.

The structure holds what is drawn: charts, axes, kinds of marks. The frame holds the moment: numbers, labels and titles
as JSON, and all arrays in one binary buffer, in scale coordinates (see scales). A frame is always complete, so that any
frame may be lost or come late. Columns are named by their place in the frame's list of (type, byte offset, count):

    f4  float32; fine enough for a screen unless the axis is very narrow, and ends at 3.4e38
    f8  float64; where float32 is too coarse, and after a drag, for exact read-out
    u1  colours of a map, 1..255 along its range, 0 where there is no value
"""

import math

import numpy as np

from massdash.charts.chart import Band, Line, Map, Point, Rule, Span
from massdash.render.scales import extent, forward, home, map_range
from massdash.render.units import unit_text

FLOAT32_STEP = 6e-8  # relative
SCREEN_STEP = 1e-4  # of the axis; a tenth of a pixel on a large screen
FLOAT32_SAFE = (1e-30, 1e30)
COLOURS = 254
TYPES = {"f4": "<f4", "f8": "<f8", "u1": "u1"}


class Columns:
    """Arrays on their way into one buffer; an array shared by several curves travels once."""

    def __init__(self):
        self.index, self.parts, self.size, self.places = [], [], 0, {}

    def add(self, array, kind, shared=None):
        """The column's number. ``shared`` identifies an array that may come again."""
        if shared is not None and shared in self.places:
            return self.places[shared]
        raw = np.ascontiguousarray(array, TYPES[kind]).tobytes()
        padding = -self.size % 8  # typed arrays in the browser need aligned offsets
        self.parts += [bytes(padding), raw]
        self.index.append([kind, self.size + padding, int(np.size(array))])
        self.size += padding + len(raw)
        place = len(self.index) - 1
        if shared is not None:
            self.places[shared] = place
        return place

    def buffer(self):
        return b"".join(self.parts)


def float_kind(coordinates, span, exact):
    """The smallest float type that shows these coordinates on an axis of this span."""
    found = extent(coordinates)
    largest = max(map(abs, found)) if found else 0.0
    smallest, safest = FLOAT32_SAFE
    fits = largest == 0 or smallest < largest < safest
    return "f4" if not exact and fits and largest * FLOAT32_STEP <= abs(span) * SCREEN_STEP else "f8"


def finite_or_none(value):
    """JSON has no NaN; None is a gap."""
    return float(value) if value is not None and math.isfinite(value) else None


def structure(charts):
    """The JSON part that stays the same while values change."""
    return {"charts": [_chart_structure(chart) for chart in charts]}


def _chart_structure(chart):
    marks = [_mark_structure(mark) for mark in chart.marks]
    return {"key": chart.key, "x": _axis_structure(chart.x), "y": _axis_structure(chart.y), "marks": marks}


def _axis_structure(axis):
    return {"label": axis.label, "unit": unit_text(axis.unit), "scale": axis.scale}


MARK_STRUCTURE = {
    Line: lambda m: {"kind": "line", "style": m.style, "width": m.width},
    Band: lambda m: {"kind": "band", "style": m.style},
    Span: lambda m: {"kind": "span", "axis": m.axis},
    Rule: lambda m: {"kind": "rule", "axis": m.axis, "style": m.style, "handle": m.handle},
    Point: lambda m: {"kind": "point", "shape": m.kind, "handle": m.handle},
    Map: lambda m: {"kind": "map", "palette": m.palette, "axis": _axis_structure(m.axis)},
}


def _mark_structure(mark):
    return {"key": mark.key} | MARK_STRUCTURE[type(mark)](mark)


def frame(charts, *, exact=False):
    """(JSON part, buffer) of the moment. ``exact``: curves in float64 and maps as floats instead of colours."""
    columns = Columns()
    moments = [_chart_frame(chart, columns, exact) for chart in charts]
    return {"charts": moments, "columns": columns.index}, columns.buffer()


def _chart_frame(chart, columns, exact):
    homes = {name: home(chart, name) for name in ("x", "y")}
    return {
        "title": chart.title,
        "alt": chart.alt,
        "x": _axis_frame(chart.x, homes["x"]),
        "y": _axis_frame(chart.y, homes["y"]),
        "marks": [_mark_frame(mark, chart, homes, columns, exact) for mark in chart.marks],
    }


def _axis_frame(axis, span):
    ticks = axis.ticks and [[float(value), text] for value, text in axis.ticks]
    return {"home": list(span), "width": finite_or_none(axis.linear_width), "ticks": ticks}


def _mark_frame(mark, chart, homes, columns, exact):
    def column(array, name):
        axis, (start, end) = getattr(chart, name), homes[name]
        coordinates = forward(array, axis)
        kind = float_kind(coordinates, end - start, exact)
        return columns.add(coordinates, kind, (id(array), axis.scale, axis.linear_width, kind))

    if isinstance(mark, Line):
        return {"label": mark.label, "x": column(mark.x, "x"), "y": column(mark.y, "y")}
    if isinstance(mark, Band):
        sides = {"low": column(mark.low, "y"), "high": column(mark.high, "y")}
        return {"label": mark.label, "x": column(mark.x, "x")} | sides
    if isinstance(mark, Map):
        return _map_frame(mark, chart, columns, exact)
    names = {Span: ("low", "high"), Rule: ("at",), Point: ("x", "y")}[type(mark)]
    return {"label": mark.label} | {name: finite_or_none(getattr(mark, name)) for name in names}


def _map_frame(mark, chart, columns, exact):
    low, high = map_range(mark)
    coordinates = forward(mark.values, mark.axis)
    if exact:
        place = columns.add(coordinates, float_kind(coordinates, high - low, False))
    else:
        place = columns.add(_colours(coordinates, low, high), "u1")
    rows, cells = mark.values.shape
    return {
        "axis": _axis_frame(mark.axis, (low, high)),
        "values": place,
        "shape": [cells, rows],
        "x": forward(mark.x, chart.x).tolist(),
        "y": forward(mark.y, chart.y).tolist(),
        "levels": [float(level) for level in mark.levels],
    }


def _colours(coordinates, low, high):
    steps = np.rint((coordinates - low) / (high - low) * COLOURS)
    return np.where(np.isnan(steps), 0, 1 + np.clip(steps, 0, COLOURS)).astype(np.uint8)
