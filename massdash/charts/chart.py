"""A figure as data.

A chart holds arrays, labels and positions and knows no drawing library: the live renderer paints it in the browser,
the paper renderer prints it, tables are written from it, and tests read it. Coordinates are plain data values in the
units printed on the axes; a value that is not finite is a gap.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np

SCALES = ("linear", "log", "symlog")


@dataclass(frozen=True)
class Axis:
    """One axis. ``limits`` None means: wide enough for the marks. ``linear_width`` (symlog only) is the value below
    which the scale is linear. ``ticks`` replaces computed ticks by (value, text) pairs."""

    label: str
    unit: str = ""
    scale: str = "linear"
    limits: tuple[float, float] | None = None
    linear_width: float | None = None
    ticks: tuple[tuple[float, str], ...] | None = None

    def __post_init__(self):
        if self.scale not in SCALES:
            raise ValueError(f"scale {self.scale!r} is not one of {SCALES}")
        if self.scale == "symlog" and not (self.linear_width is not None and self.linear_width > 0):
            raise ValueError("a symlog axis needs a positive linear_width")


@dataclass(frozen=True, eq=False)
class Line:
    """A curve through points; ``style`` chooses colour and dash together, so that grey print tells lines apart."""

    key: str
    label: str
    x: np.ndarray
    y: np.ndarray
    style: int = 0
    width: float = 1.6


@dataclass(frozen=True, eq=False)
class Band:
    """The area between two curves, for a spread."""

    key: str
    label: str
    x: np.ndarray
    low: np.ndarray
    high: np.ndarray
    style: int = 0


@dataclass(frozen=True)
class Span:
    """A shaded range of one axis ("x" or "y"), for example where a method does not hold. None is the axis' end."""

    key: str
    label: str
    axis: str
    low: float | None
    high: float | None


@dataclass(frozen=True)
class Rule:
    """A straight line across the plot at one value of one axis; ``handle`` names it when it can be dragged."""

    key: str
    label: str
    axis: str
    at: float
    style: int = 7
    handle: str | None = None


@dataclass(frozen=True)
class Point:
    """One marked position. ``kind``: "present" (the star of this scenario), "stable", "unstable" (equilibria),
    "onset", "end"; each has its own shape. ``handle`` names it when it can be dragged."""

    key: str
    label: str
    x: float
    y: float
    kind: str = "present"
    handle: str | None = None


@dataclass(frozen=True, eq=False)
class Map:
    """A quantity over the plane: ``values[j, i]`` at ``y`` row j (lowest first) and ``x`` column i, cell centres evenly
    spaced in the axes' own scales between the given edges. ``levels`` are contour values, ``palette`` is "sequential"
    or "diverging" (centred on zero)."""

    key: str
    axis: Axis
    x: tuple[float, float]
    y: tuple[float, float]
    values: np.ndarray
    levels: tuple[float, ...] = ()
    palette: str = "sequential"


@dataclass(frozen=True, eq=False)
class Chart:
    """A whole figure.

    ``key`` is a short identifier, used in file names and addresses. ``alt`` is one or two generated sentences that
    say what the figure shows, for those who cannot see it. ``notes`` are printed small below the figure on paper.
    ``sources`` are the papers behind the marks.
    """

    key: str
    title: str
    x: Axis
    y: Axis
    marks: tuple = field(default_factory=tuple)
    alt: str = ""
    notes: tuple[str, ...] = ()
    sources: tuple[str, ...] = ()

    def __post_init__(self):
        keys = [mark.key for mark in self.marks]
        if len(set(keys)) != len(keys):
            raise ValueError(f"chart {self.key}: two marks share a key in {keys}")

    def of(self, kind):
        """All marks of one type, in drawing order."""
        return tuple(mark for mark in self.marks if isinstance(mark, kind))

    def __getitem__(self, key):
        """The mark with this key; KeyError when there is none."""
        for mark in self.marks:
            if mark.key == key:
                return mark
        raise KeyError(key)
