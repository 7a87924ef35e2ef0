"""Drawing marks on paper, in fractions of the axes; each mark type has one drawing function and one key sample."""

from __future__ import annotations

from functools import singledispatch

import numpy as np
from contourpy import contour_generator  # what matplotlib itself draws contours with
from matplotlib.lines import Line2D
from matplotlib.patches import Rectangle

from massdash.charts.chart import Band, Line, Map, Point, Rule, Span
from massdash.render import palette, paper_scale

PRINT = 0.75  # widths and dashes are chosen for the screen; print is finer
INK = "#1a1a1a"
REACH = 4.5  # points from a marker's centre to what must keep off
SHADE = {"facecolor": "black", "alpha": 0.06, "linewidth": 0}
HATCH = {"facecolor": "none", "edgecolor": "#a0a0a0", "hatch": "///", "linewidth": 0}
_FILLED = {"color": INK, "markeredgecolor": "white", "markeredgewidth": 0.6}
_OPEN = {"color": "white", "markeredgecolor": INK, "markeredgewidth": 0.9}
MARKERS = {  # layers from the bottom up
    "present": (
        {"marker": "o", "markersize": 8.5, **_OPEN},
        {"marker": "o", "markersize": 5.0, "color": INK, "markeredgewidth": 0},
    ),
    "stable": ({"marker": "o", "markersize": 5.0, **_FILLED},),
    "unstable": ({"marker": "^", "markersize": 5.5, **_OPEN},),
    "onset": ({"marker": "D", "markersize": 4.6, **_FILLED},),
    "end": ({"marker": "s", "markersize": 4.8, **_FILLED},),
}


def stroke(style, width=1.6):
    """Line properties of a style: colour and dash together, so that grey print tells lines apart."""
    look = palette.STYLES[style]
    dash = [PRINT * part for part in look.dash]
    dash *= 1 + len(dash) % 2  # an odd pattern goes round twice
    return {"color": look.light, "linewidth": PRINT * width, "linestyle": (0, dash) if dash else "-"}


def is_on(mark, scales):
    """False for points and rules that have no place inside the axes."""
    if isinstance(mark, Rule):
        return scales[mark.axis].covers(mark.at)
    return not isinstance(mark, Point) or (scales["x"].covers(mark.x) and scales["y"].covers(mark.y))


def path(mark, scales):
    """A line's fractions (x, y); a band's middle."""
    x = scales["x"].fraction(mark.x)
    if isinstance(mark, Band):
        return x, (scales["y"].fraction(mark.low) + scales["y"].fraction(mark.high)) / 2
    return x, scales["y"].fraction(mark.y)


def visible(mark, scales):
    """The part of a line's or band's path that lies inside the axes; gaps elsewhere."""
    x, y = path(mark, scales)
    inside = (x >= -1e-9) & (x <= 1 + 1e-9) & (y >= -1e-9) & (y <= 1 + 1e-9)
    return np.where(inside, x, np.nan), np.where(inside, y, np.nan)


@singledispatch
def draw(mark, ax, scales):
    """Draw one mark into axes whose both sides run from 0 to 1."""
    raise TypeError(f"no drawing for {type(mark).__name__}")


@draw.register
def _(mark: Line, ax, scales):
    x, y = path(mark, scales)
    ax.plot(x, y, zorder=3, solid_capstyle="butt", solid_joinstyle="round", **stroke(mark.style, mark.width))
    whole = np.concatenate([[False], np.isfinite(x + y), [False]])
    alone = whole[1:-1] & ~whole[:-2] & ~whole[2:]
    ax.plot(x[alone], y[alone], ".", color=stroke(mark.style)["color"], markersize=2.2 * mark.width, zorder=3)


@draw.register
def _(mark: Band, ax, scales):
    low, high = scales["y"].fraction(mark.low), scales["y"].fraction(mark.high)
    look = stroke(mark.style, 0.7)
    ax.fill_between(scales["x"].fraction(mark.x), low, high, color=look["color"], alpha=0.25, linewidth=0, zorder=1.5)
    for edge in (low, high):
        ax.plot(scales["x"].fraction(mark.x), edge, zorder=1.6, **look)


@draw.register
def _(mark: Span, ax, scales):
    left, bottom, right, top = span_box(mark, scales)
    for patch in hatched(left, bottom, right - left, top - bottom):
        patch.set_zorder(1.2)
        ax.add_patch(patch)


def hatched(left, bottom, width, height):
    """A shade and lines over it, apart: as one patch their transparency and their lines spoil each other in PDF."""
    return [Rectangle((left, bottom), width, height, **look) for look in (SHADE, HATCH)]


def span_box(mark, scales):
    """(left, bottom, right, top) of a span in fractions, cut at the axes; None is the axis' end."""
    scale = scales[mark.axis]
    own_ends = (0.0, 1.0) if scale.start < scale.stop else (1.0, 0.0)
    given = (mark.low, mark.high)
    low, high = (end if v is None else float(scale.fraction(v)) for v, end in zip(given, own_ends, strict=True))
    low, high = np.clip(sorted((low, high)), 0, 1)
    return (low, 0.0, high, 1.0) if mark.axis == "x" else (0.0, low, 1.0, high)


@draw.register
def _(mark: Rule, ax, scales):
    at = float(scales[mark.axis].fraction(mark.at))
    x, y = ([at, at], [0, 1]) if mark.axis == "x" else ([0, 1], [at, at])
    ax.plot(x, y, zorder=2.5, **stroke(mark.style, 1.1))


@draw.register
def _(mark: Point, ax, scales):
    x, y = float(scales["x"].fraction(mark.x)), float(scales["y"].fraction(mark.y))
    for layer in MARKERS[mark.kind]:
        ax.plot([x], [y], linestyle="none", clip_on=False, zorder=5, **layer)


@draw.register
def _(mark: Map, ax, scales):
    edges = [*scales["x"].fraction(mark.x), *scales["y"].fraction(mark.y)]
    colours = np.clip(paper_scale.of_map(mark).fraction(mark.values), 0, 1)
    if np.isnan(colours).any():
        for patch in hatched(edges[0], edges[2], edges[1] - edges[0], edges[3] - edges[2]):
            patch.set_zorder(0.4)
            ax.add_patch(patch)
    image(ax, colours, edges, mark.palette)
    for level, lines in contours(mark, scales):
        for line in lines:
            ax.plot(*line.T, color="white", linewidth=1.9, alpha=0.7, zorder=2)
            ax.plot(*line.T, color=INK, linewidth=1.4 if level == 0 else 0.8, zorder=2.1)


def image(ax, positions, edges, table):
    """Cells coloured by their position 0..1 in a colour table: one picture in every format, not thousands of shapes."""
    known = np.isfinite(positions)
    pixels = np.zeros((*positions.shape, 4), np.uint8)  # transparent where there is no value
    pixels[known, :3] = palette.colour_table(table)[np.rint(255 * positions[known]).astype(int)]
    pixels[known, 3] = 255
    ax.imshow(pixels, extent=edges, origin="lower", aspect="auto", interpolation="nearest", zorder=0.5)
    ax.set(xlim=(0, 1), ylim=(0, 1))


def colour_bar(axes, mark):
    """Fill upright axes with a map's colours and its contour levels."""
    scale = paper_scale.of_map(mark)
    image(axes, np.linspace(0, 1, 256)[:, None], (0, 1, 0, 1), mark.palette)
    for level in mark.levels:
        if scale.covers(level):
            at = float(scale.fraction(level))
            axes.plot([0, 1], [at, at], color="white", linewidth=1.9, alpha=0.7, solid_capstyle="butt")
            axes.plot([0, 1], [at, at], color=INK, linewidth=1.4 if level == 0 else 0.8, solid_capstyle="butt")


def contours(mark, scales):
    """[(level, [points (n, 2) in fractions])] of the levels that cross the map, found in the colour bar's own scale."""
    rows, columns = np.shape(mark.values)
    if rows < 2 or columns < 2:
        return []
    x, y = (
        _centres(scales[name].fraction(edges), n) for name, edges, n in (("x", mark.x, columns), ("y", mark.y, rows))
    )
    scale = paper_scale.of_map(mark)
    generator = contour_generator(x, y, np.ma.masked_invalid(scale.forward(mark.values)))
    positions = [(level, float(scale.forward(level))) for level in mark.levels]
    found = [(level, generator.lines(position)) for level, position in positions if np.isfinite(position)]
    return [(level, lines) for level, lines in found if lines]


def _centres(edges, count):
    return edges[0] + (np.arange(count) + 0.5) / count * (edges[1] - edges[0])


@singledispatch
def sample(mark, left, bottom, width, height):
    """Artists that show a mark in the key, in points inside the given box."""
    return [Line2D([left, left + width], [bottom + height / 2] * 2, **stroke(mark.style, getattr(mark, "width", 1.1)))]


@sample.register
def _(mark: Band, left, bottom, width, height):
    look = stroke(mark.style, 0.7)
    return [Rectangle((left, bottom), width, height, facecolor=look["color"], alpha=0.25, linewidth=0)]


@sample.register
def _(mark: Span, left, bottom, width, height):
    return hatched(left, bottom, width, height)


@sample.register
def _(mark: Point, left, bottom, width, height):
    x, y = left + width / 2, bottom + height / 2
    return [Line2D([x], [y], linestyle="none", **layer) for layer in MARKERS[mark.kind]]
