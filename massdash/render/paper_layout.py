"""Where everything on a printed figure stands: measured texts first, then the axes get what is left of the page.

All lengths are points. From the top: title, axes, tick labels, axis title, key, notes; from the left: axis title, tick
labels, axes, then line labels or the colour bar.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np

from massdash.charts.chart import Band, Line, Map, Point, Rule
from massdash.errors import refuse
from massdash.render import paper_marks, paper_scale
from massdash.render.paper_scale import Ticks, axis_title, number_text, plain

EDGE = 2.0  # free rim of the page
SLACK = 0.97  # for letters that another renderer draws a little wider
GAP = 3.0
TICK = 3.0  # between the axes and their labels; ticks go inwards, or outwards by two thirds of it
BAR = 8.0  # width of a colour bar
LEADER = 9.0  # room for the lines from curve ends to their labels
MARGIN_SHARE = 0.22  # of the page's width that line labels may take
NEAR_END = 0.95  # a curve that reaches this far right is labelled beside the axes
SMALLEST = (36.0, 24.0)  # axes narrower or lower than this show nothing


@dataclass(frozen=True)
class Side:
    """One axis' texts: its ticks, its wrapped title, and the room they take across the axis."""

    ticks: Ticks
    title: str
    title_depth: float
    label_depth: float

    @property
    def depth(self):
        return TICK + self.label_depth + (GAP + self.title_depth if self.title else 0.0)


@dataclass(frozen=True)
class KeyItem:
    """One entry of the key: a mark, its wrapped label, and its lower left corner and size within the key."""

    mark: object
    text: str
    left: float
    top: float
    width: float
    height: float


@dataclass(frozen=True)
class Layout:
    """The whole page; ``left, bottom, axes_width, axes_height`` place the axes, ``column`` labels line ends."""

    width: float
    height: float
    left: float
    bottom: float
    axes_width: float
    axes_height: float
    x: Side
    y: Side
    bar: Side | None
    title: str
    notes: str
    key: tuple[KeyItem, ...]
    column: tuple  # (mark, wrapped label, (width, height))


def plan(chart, scales, ruler, width, height, *, keyed, title):
    """Lay out a page of ``width`` and ``height`` (None: as needed); the labels of marks ``keyed`` go to the key."""
    inner = SLACK * (width - 2 * EDGE)
    heading = ruler.wrap(plain(chart.title), inner, ruler.font_size, "bold") if title else ""
    notes = "\n".join(ruler.wrap(plain(note), inner, ruler.tiny) for note in (*chart.notes, *remarks(chart, scales)))
    key = key_items([m for m in chart.marks if m.key in keyed], ruler, inner)
    column = _column(chart, scales, ruler, width, keyed)
    stacked = _height(ruler.size(notes, ruler.tiny)) + _height((0, max((i.top + i.height for i in key), default=0)))
    above = EDGE + _height(ruler.size(heading, ruler.font_size, "bold")) + 0.5 * ruler.small
    axes_width, axes_height = 0.7 * width, 0.7 * (height or width)
    for _ in range(5):  # tick labels depend on the axes' size and the other way round; this settles in two or three
        x = _side(scales["x"], ruler, axes_width, horizontal=True)
        y = _side(scales["y"], ruler, axes_height, horizontal=False, cap=0.3 * width)
        bar = _bar(chart, ruler, axes_height, cap=0.2 * width)
        left = max(EDGE + y.depth, EDGE + _overhang(x, ruler, axes_width)[0])
        right = _right(column, bar, _overhang(x, ruler, axes_width)[1])
        bottom = EDGE + stacked + x.depth
        axes_width = width - left - right
        axes_height = _nominal_height(width, bar) if height is None else height - bottom - above
        _need_room(axes_width, axes_height, width, height)
    page_height = bottom + axes_height + above
    return Layout(width, page_height, left, bottom, axes_width, axes_height, x, y, bar, heading, notes, key, column)


def remarks(chart, scales):
    """Notes on what the axes cannot show, so that nothing vanishes silently."""
    found = [text for mark in chart.marks for text in _absent(mark, scales)]
    for mark in chart.of(Map):
        found += _map_remarks(mark)
    return found


def _absent(mark, scales):
    name = getattr(mark, "label", "") or mark.key
    if isinstance(mark, Line | Band):
        x, y = paper_marks.visible(mark, scales)
        return [] if np.isfinite(x + y).any() else [f"{name}: no values within the axes."]
    outside = [(a, v) for a, v in _places(mark) if np.isfinite(v) and not scales[a].covers(v)]
    return [f"{name}: outside the axes, at {a} = {v:.4g}." for a, v in outside]


def _places(mark):
    """(axis, value) of a rule or a point."""
    if isinstance(mark, Rule):
        return [(mark.axis, mark.at)]
    return [("x", mark.x), ("y", mark.y)] if isinstance(mark, Point) else []


def _map_remarks(mark):
    positions = paper_scale.of_map(mark).fraction(mark.values)
    if not np.isfinite(positions).any():
        return ["The map has no values."]
    found = ["Hatched: no value."] if np.isnan(positions).any() else []
    if (positions > 1 + 1e-9).any() or (positions < -1e-9).any():
        found.append("Values beyond the colour bar have the colour of its end.")
    return found


def key_items(marks, ruler, width):
    """Samples with labels, in rows no wider than ``width``; ``top`` counts down from the key's upper edge."""
    sample, items, x, y, row = 2.6 * ruler.font_size, [], 0.0, 0.0, 0.0
    for mark in marks:
        text = ruler.wrap(_key_text(mark), width - sample - 4, ruler.small)
        w, h = ruler.size(text, ruler.small)
        if x > 0 and x + sample + 4 + w > width:
            x, y, row = 0.0, y + row + 1, 0.0
        items.append(KeyItem(mark, text, x, y, sample, h))
        x, row = x + sample + 4 + w + 10, max(row, h)
    return tuple(items)


def _key_text(mark):
    """The label; a rule's value too, for several rules may look alike."""
    return f"{plain(mark.label)} (at {number_text(mark.at)})" if isinstance(mark, Rule) else plain(mark.label)


def _column(chart, scales, ruler, width, keyed):
    """Labels beside the axes for curves that end at their right side; none with a colour bar there."""
    if chart.of(Map):
        return ()
    found = []
    for mark in chart.of(Line | Band):
        x, y = paper_marks.visible(mark, scales)
        if not mark.label or mark.key in keyed or not np.isfinite(x + y).any() or np.nanmax(x) < NEAR_END:
            continue
        if ruler.fits(plain(mark.label), MARGIN_SHARE * width, ruler.small):
            text = ruler.wrap(plain(mark.label), MARGIN_SHARE * width, ruler.small)
            found.append((mark, text, ruler.size(text, ruler.small)))
    return tuple(found)


def _side(scale, ruler, length, *, horizontal, cap=0.0):
    ticks = _chosen(scale, ruler, length, horizontal, cap)
    title = _wrapped_title(scale.axis, ticks, ruler, length)
    sizes = [ruler.size(text, ruler.small) for text in ticks.texts]
    across = 1 if horizontal and not ticks.rotation else 0
    return Side(ticks, title, ruler.size(title, ruler.font_size)[1], max((s[across] for s in sizes), default=0.0))


def _wrapped_title(axis, ticks, ruler, length):
    """In one line where it fits, else broken before the brackets first."""
    title = axis_title(axis, ticks)
    if ruler.size(title, ruler.font_size)[0] <= length:
        return title
    label, bracket, inside = title.partition(" (")
    return "\n".join(ruler.wrap(part, length, ruler.font_size) for part in (label, (bracket + inside).strip()) if part)


def _bar(chart, ruler, length, cap):
    maps = chart.of(Map)
    if not maps:
        return None
    return _side(paper_scale.of_map(maps[0]), ruler, length, horizontal=False, cap=cap)


def _chosen(scale, ruler, length, horizontal, cap):
    """The densest tick set whose labels stand apart; named ticks are wrapped, and turned when even that is too wide."""
    options = list(paper_scale.candidates(scale))
    if scale.axis.ticks is not None:
        width = 0.9 * length / max(len(scale.axis.ticks), 1) if horizontal else cap
        options = _wrapped_ticks(options[0], ruler, width, horizontal)
    fitting = (t for t in options if (len(t.at) > 1 or scale.axis.ticks) and _apart(t, ruler, length, horizontal))
    return next(fitting, options[-1] if options else Ticks((), ()))


def _wrapped_ticks(ticks, ruler, width, horizontal):
    """Named ticks in lines of this width; horizontal ones rather upright than with broken words."""
    wrapped = replace(ticks, texts=tuple(ruler.wrap(text, width, ruler.small) for text in ticks.texts))
    if not horizontal:
        return [wrapped]
    upright = replace(ticks, rotation=90)
    return [wrapped, upright] if all(ruler.fits(text, width, ruler.small) for text in ticks.texts) else [upright]


def _apart(ticks, ruler, length, horizontal):
    along = 0 if horizontal and not ticks.rotation else 1
    gap = (0.7 if along == 0 else 0.3) * ruler.small
    sizes = [ruler.size(text, ruler.small)[along] for text in ticks.texts]
    spans = sorted((at * length, size) for at, size in zip(ticks.at, sizes, strict=True))
    return all(a + wa / 2 + gap <= b - wb / 2 for (a, wa), (b, wb) in pairwise(spans))


def _overhang(side, ruler, length):
    """How far horizontal tick labels stick out of the axes to the left and to the right."""
    widths = [0.5 * ruler.size(text, ruler.small)[1 if side.ticks.rotation else 0] for text in side.ticks.texts]
    left = max((w - at * length for at, w in zip(side.ticks.at, widths, strict=True)), default=0.0)
    right = max((w - (1 - at) * length for at, w in zip(side.ticks.at, widths, strict=True)), default=0.0)
    return max(left, 0.0), max(right, 0.0)


def _right(column, bar, overhang):
    if bar is not None:
        return EDGE + GAP + BAR + bar.depth
    labels = max((LEADER + size[0] for _, _, size in column), default=0.0)
    return EDGE + max(labels, overhang, GAP)


def _height(size):
    return size[1] + GAP if size[1] else 0.0


def _nominal_height(width, bar):
    """About 3:2 in one column, flatter over two; maps are higher."""
    return (70 + 0.35 * width) * (1.15 if bar else 1.0)


def _need_room(axes_width, axes_height, width, height):
    if not axes_width >= SMALLEST[0]:
        raise refuse(
            "width_mm",
            f"{width / 72 * 25.4:.4g}",
            "a greater width or a smaller font: this chart's labels leave no room",
        )
    if not axes_height >= SMALLEST[1]:
        allowed = "a greater height, a smaller font, or None for as high as needed: this chart's labels leave no room"
        raise refuse("height_mm", f"{height / 72 * 25.4:.4g}", allowed)
