"""What must hold before a chart is drawn or tabulated: one clear sentence instead of a failure deep in a library."""

from __future__ import annotations

import re

import numpy as np

from massdash.charts.chart import Band, Line, Map, Point, Rule, Span
from massdash.errors import refuse
from massdash.render import palette
from massdash.render.scales import forward

WIDTHS = {"single": 88, "double": 180}  # mm: one and two columns of a journal page; common practice, no source
WIDTH_LIMITS = (40.0, 400.0)  # mm
HEIGHT_LIMITS = (20.0, 600.0)  # mm
FONT_LIMITS = (5.0, 24.0)  # points
POINT_KINDS = ("present", "stable", "unstable", "onset", "end")
PALETTES = ("sequential", "diverging")
KEY = re.compile(r"[A-Za-z0-9][A-Za-z0-9_.-]{0,99}")
CURVES = {Line: ("x", "y"), Band: ("x", "low", "high")}


def check_sizes(width_mm, font_size, height_mm=None):
    """Refuse sizes that are no numbers or out of range."""
    _check_size("width_mm", width_mm, WIDTH_LIMITS, "mm")
    _check_size("font_size", font_size, FONT_LIMITS, "points")
    if height_mm is not None:
        _check_size("height_mm", height_mm, HEIGHT_LIMITS, "mm")


def _check_size(name, value, limits, unit):
    is_number = isinstance(value, int | float | np.number) and not isinstance(value, bool)
    if not (is_number and limits[0] <= value <= limits[1]):
        raise refuse(name, repr(value), f"{limits[0]:g} to {limits[1]:g} {unit}")


def check_chart(chart):
    """Refuse, naming chart and mark, what no renderer could draw."""
    if not KEY.fullmatch(str(chart.key)):
        raise refuse("chart key", repr(chart.key), "letters, digits, '_', '-' and '.', because it becomes a file name")
    for axis, which in ((chart.x, "x"), (chart.y, "y")):
        if axis.limits is not None:
            _check_ends(axis, axis.limits, f"chart {chart.key}, limits of {which}")
    for mark in chart.marks:
        _check_mark(mark, f"chart {chart.key}, mark {getattr(mark, 'key', '?')}")
    for mark in chart.of(Map):
        _check_edges(mark, chart)
    if len(chart.of(Map)) > 1:
        raise refuse(f"chart {chart.key}", f"{len(chart.of(Map))} maps", "at most one, for there is one colour bar")


def _check_mark(mark, name):
    if not isinstance(mark, Line | Band | Span | Rule | Point | Map):
        raise refuse(name, f"a {type(mark).__name__}", "a Line, Band, Span, Rule, Point or Map")
    if isinstance(mark, Line | Band):
        _check_curve(mark, name)
    if isinstance(mark, Line | Band | Rule) and mark.style not in range(len(palette.STYLES)):
        raise refuse(f"{name}, style", mark.style, f"0 to {len(palette.STYLES) - 1}")
    if isinstance(mark, Span | Rule) and mark.axis not in ("x", "y"):
        raise refuse(f"{name}, axis", repr(mark.axis), "'x' or 'y'")
    if isinstance(mark, Point) and mark.kind not in POINT_KINDS:
        raise refuse(f"{name}, kind", repr(mark.kind), ", ".join(POINT_KINDS))
    if isinstance(mark, Map):
        _check_map(mark, name)


def _check_curve(mark, name):
    shapes = [np.shape(getattr(mark, column)) for column in CURVES[type(mark)]]
    if len(set(shapes)) != 1 or len(shapes[0]) != 1:
        listed = ", ".join(f"{c} {s}" for c, s in zip(CURVES[type(mark)], shapes, strict=True))
        raise refuse(f"{name}, shapes", listed, "lists of one dimension and equal length")


def _check_map(mark, name):
    if len(np.shape(mark.values)) != 2 or np.size(mark.values) == 0:
        raise refuse(f"{name}, shape of values", np.shape(mark.values), "a table of rows (y) and columns (x)")
    if mark.palette not in PALETTES:
        raise refuse(f"{name}, palette", repr(mark.palette), " or ".join(PALETTES))
    if mark.axis.limits is not None:
        _check_ends(mark.axis, mark.axis.limits, f"{name}, limits")


def _check_edges(mark, chart):
    for axis, edges, which in ((chart.x, mark.x, "x"), (chart.y, mark.y, "y")):
        _check_ends(axis, edges, f"chart {chart.key}, mark {mark.key}, edges in {which}")


def _check_ends(axis, ends, name):
    """Two ends must stand apart on the axis' scale."""
    with np.errstate(over="ignore"):
        start, stop = forward(ends, axis)
    if not abs(stop - start) > 0:
        sign = "positive" if axis.scale == "log" else "finite"
        raise refuse(name, tuple(ends), f"two different {sign} numbers that double precision can tell apart")
