"""Writing the marks' names on the page: beside the axes, next to the marks, or not at all (then the key takes them)."""

from __future__ import annotations

import numpy as np
from matplotlib.lines import Line2D

from massdash.charts.chart import Band, Line, Map, Point, Rule, Span
from massdash.render import palette, paper_labels, paper_marks
from massdash.render.paper_labels import Places
from massdash.render.paper_layout import LEADER
from massdash.render.paper_marks import INK, REACH
from massdash.render.paper_scale import number_text, plain

HALO = {"facecolor": "white", "edgecolor": "none", "alpha": 0.85, "pad": 0.6}
WIDEST = 0.42  # of the axes' width that a label inside may take before it is wrapped


class Names:
    """All labels of one sheet. ``place`` draws what finds a place and returns the keys of marks that found none."""

    def __init__(self, sheet):
        self.sheet, self.page, self.scales = sheet, sheet.layout, sheet.scales
        self.places = Places(self.page.axes_width, self.page.axes_height)
        self.marks = [mark for mark in sheet.chart.marks if paper_marks.is_on(mark, self.scales)]
        self.over_map = sheet.over_map
        for mark in self.marks:
            self._occupy(mark)

    def place(self):
        """Draw the labels, the most important first."""
        beside = {mark.key for mark, _, _ in self.page.column}
        crowded = self._beside_axes()
        waiting = [mark for mark in self.marks if mark.key not in beside | self.sheet.keyed and self._has_name(mark)]
        order = (Point, Rule, Line, Band, Span)
        waiting.sort(key=lambda mark: order.index(type(mark)))
        homeless = {mark.key for mark in waiting if not self._inside_axes(mark)}
        for mark in self.sheet.chart.of(Map):
            self._contour_labels(mark)
        return frozenset(homeless | crowded)

    def _points(self, x, y):
        return np.asarray(x) * self.page.axes_width, np.asarray(y) * self.page.axes_height

    def _occupy(self, mark):
        """Tell the places what is drawn: curves, rules, contours and markers."""
        if isinstance(mark, Line):
            self.places.add_curve(*self._points(*paper_marks.visible(mark, self.scales)))
        elif isinstance(mark, Rule):
            at = float(self.scales[mark.axis].fraction(mark.at))
            (left, right), (bottom, top) = ((at, at), (0, 1)) if mark.axis == "x" else ((0, 1), (at, at))
            self.places.add_wall((*self._points(left, bottom), *self._points(right, top)))
        elif isinstance(mark, Point):
            x, y = self._position(mark)
            self.places.add_wall((x - REACH, y - REACH, x + REACH, y + REACH))
        elif isinstance(mark, Map):
            for _, lines in paper_marks.contours(mark, self.scales):
                for line in lines:
                    self.places.add_curve(*self._points(*line.T))

    def _position(self, mark):
        return self._points(self.scales["x"].fraction(mark.x), self.scales["y"].fraction(mark.y))

    def _inside_axes(self, mark):
        """Write a label inside the axes; True when it found a place."""
        for text, candidates, rotation in self._offers(mark):
            found = self.places.take(candidates)
            if found is not None:
                box, leader, covers = found
                backed = covers or self.over_map or isinstance(mark, Span)
                self._write(box, text, mark, backed=backed, rotation=rotation)
                if leader is not None:
                    self._leader(*zip(*leader, strict=True), INK)
                return True
        return False

    def _has_name(self, mark):
        """True for marks with a label and something to see."""
        if isinstance(mark, Line | Band) and not np.isfinite(sum(paper_marks.visible(mark, self.scales))).any():
            return False
        return bool(getattr(mark, "label", ""))

    def _offers(self, mark):
        """(text, candidates, rotation), the best way of writing first."""
        if isinstance(mark, Span):
            return self._span_offers(mark)
        if isinstance(mark, Rule):
            return self._rule_offers(mark)
        text, size = self._wrapped(mark.label, WIDEST * self.page.axes_width)
        if isinstance(mark, Point):
            return [(text, paper_labels.around_point(*self._position(mark), size, REACH), 0)]
        path = self._points(*paper_marks.visible(mark, self.scales))
        return [(text, paper_labels.along_path(*path, size), 0)]

    def _wrapped(self, label, width):
        text = self.sheet.ruler.wrap(plain(label), width, self.sheet.ruler.small)
        return text, self.sheet.ruler.size(text, self.sheet.ruler.small)

    def _rule_offers(self, mark):
        page, upright = self.page, mark.axis == "x"
        text, size = self._wrapped(mark.label, page.axes_height if upright else WIDEST * page.axes_width)
        across, along = (page.axes_width, page.axes_height) if upright else (page.axes_height, page.axes_width)
        at = float(self.scales[mark.axis].fraction(mark.at)) * across
        size = size[::-1] if upright else size
        return [(text, paper_labels.beside_rule(at, size, along, upright), 90 if upright else 0)]

    def _span_offers(self, mark):
        left, bottom, right, top = paper_marks.span_box(mark, self.scales)
        box = (*self._points(left, bottom), *self._points(right, top))
        for rotation, length in ((0, box[2] - box[0]), (90, box[3] - box[1])):
            room = length - 2 * paper_labels.GAP
            if self.sheet.ruler.fits(plain(mark.label), room, self.sheet.ruler.small):
                text, size = self._wrapped(mark.label, room)
                yield text, paper_labels.within(*box, size[::-1] if rotation else size), rotation

    def _write(self, box, text, mark, *, backed, rotation=0):
        middle = self.page.left + (box[0] + box[2]) / 2, self.page.bottom + (box[1] + box[3]) / 2
        colour = palette.STYLES[mark.style].light_ink if isinstance(mark, Line | Band) else INK
        look = {"ha": "center", "va": "center", "ma": "center", "rotation": rotation, "color": colour, "zorder": 6}
        self.sheet.text(*middle, text, self.sheet.ruler.small, bbox=HALO if backed else None, **look)

    def _leader(self, x, y, colour):
        left, bottom = self.page.left, self.page.bottom
        line = Line2D([left + v for v in x], [bottom + v for v in y], color=colour, linewidth=0.5, zorder=4)
        line.set_transform(self.sheet.points)
        self.sheet.figure.add_artist(line)

    def _beside_axes(self):
        """Labels of curves that end at the right side; returns the keys of all of them when they do not fit."""
        column, page = self.page.column, self.page
        if not column:
            return frozenset()
        heights = [size[1] + 1 for _, _, size in column]
        if sum(heights) > page.axes_height:
            return frozenset(mark.key for mark, _, _ in column)
        ends = [self._right_end(mark) for mark, _, _ in column]
        middles = paper_labels.push_apart([y for _, y in ends], heights, 0, page.axes_height)
        for (mark, text, _), end, middle in zip(column, ends, middles, strict=True):
            colour = palette.STYLES[mark.style].light
            self._leader(
                [end[0] + 1, page.axes_width + 2, page.axes_width + LEADER - 2], [end[1], end[1], middle], colour
            )
            place = page.left + page.axes_width + LEADER, page.bottom + middle
            look = {"ha": "left", "va": "center", "color": palette.STYLES[mark.style].light_ink}
            self.sheet.text(*place, text, self.sheet.ruler.small, **look)
        return frozenset()

    def _right_end(self, mark):
        x, y = paper_marks.visible(mark, self.scales)
        last = np.nanargmax(np.where(np.isfinite(y), x, np.nan))
        return tuple(float(v) for v in self._points(x[last], y[last]))

    def _contour_labels(self, mark):
        """Values on the contours where there is room; the colour bar shows the levels in any case."""
        size = self.sheet.ruler.tiny
        for level, lines in paper_marks.contours(mark, self.scales):
            line = max(lines, key=len)
            text = number_text(level)
            candidates = paper_labels.on_path(*self._points(*line.T), self.sheet.ruler.size(text, size))
            found = self.places.take(candidates)
            if found is not None:
                box = found[0]
                middle = self.page.left + (box[0] + box[2]) / 2, self.page.bottom + (box[1] + box[3]) / 2
                self.sheet.text(*middle, text, size, ha="center", va="center", bbox=HALO, zorder=6)
