"""Charts on paper: any Chart as a matplotlib figure of exact width. matplotlib starts here, and only on export.

The axes of the figure run from 0 to 1 on both sides (see paper_scale); tick labels carry the chart's own values.
"""

from __future__ import annotations

from contextlib import contextmanager

from matplotlib import style
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.markers import TICKDOWN, TICKLEFT, TICKRIGHT, TICKUP
from matplotlib.transforms import Affine2D

from massdash.charts.chart import Map
from massdash.render import paper_layout, paper_marks, paper_scale
from massdash.render.paper_check import check_chart, check_sizes
from massdash.render.paper_layout import BAR, EDGE, GAP, TICK
from massdash.render.paper_marks import INK
from massdash.render.paper_names import Names
from massdash.render.paper_text import FAMILY, LINE_HEIGHT, Ruler, printable_chart

MM = 72 / 25.4  # points
DPI = 300
INWARD = ((0, TICKUP, TICKRIGHT), (1, TICKDOWN, TICKLEFT))  # minor ticks: edge, marker along x, marker along y
OUTWARD = ((0, TICKDOWN, TICKLEFT),)
LOOK = {
    "font.family": FAMILY,
    "mathtext.fontset": "dejavusans",
    "text.hinting": "none",  # letters as wide on the measuring canvas as in the PDF
    "pdf.fonttype": 42,  # whole TrueType outlines: embedded, searchable, editable
    "svg.fonttype": "path",  # looks the same on machines without the font
    "svg.hashsalt": "massdash",  # equal identifiers in every run
    "lines.scale_dashes": False,
    "hatch.linewidth": 0.4,
    "axes.linewidth": 0.6,
}


@contextmanager
def look():
    """matplotlib's own defaults and ours, whatever the user's settings, and those back again afterwards."""
    with style.context(["default", LOOK]):
        yield


def figure(chart, *, width_mm=88, height_mm=None, font_size=8, title=True):
    """Draw a chart as a matplotlib Figure exactly ``width_mm`` wide.

    ``height_mm`` None takes what the contents need; ``font_size`` (points) is that of axis titles, tick labels have 0.9
    and notes 0.8 of it; ``title=False`` leaves the title to the caption. Labels that find no free place go to a key
    below the axes. Raises InputError for sizes out of range and charts that cannot be drawn.
    """
    check_sizes(width_mm, font_size, height_mm)
    check_chart(chart)
    chart = printable_chart(chart)
    height = None if height_mm is None else height_mm * MM
    keyed = frozenset()
    with look():
        while True:  # ends, because the key only grows and holds no homeless label
            sheet = Sheet(chart, width_mm * MM, height, font_size, keyed, title)
            homeless = sheet.draw()
            if not homeless - keyed:
                return sheet.figure
            keyed |= homeless


class Sheet:
    """One page being drawn; positions are points from its lower left corner."""

    def __init__(self, chart, width, height, font_size, keyed, title):
        self.chart = chart
        self.scales = {which: paper_scale.of_chart(chart, which) for which in ("x", "y")}
        self.figure = Figure(figsize=(width / 72, 1), dpi=DPI)
        FigureCanvasAgg(self.figure)
        self.ruler = Ruler(self.figure, font_size)
        self.layout = paper_layout.plan(chart, self.scales, self.ruler, width, height, keyed=keyed, title=title)
        self.figure.set_size_inches(width / 72, self.layout.height / 72)
        self.points = Affine2D().scale(1 / 72) + self.figure.dpi_scale_trans
        self.keyed = keyed
        self.over_map = bool(chart.of(Map))  # then ticks stand outside, where they can be seen

    def draw(self):
        """Draw everything; returns the keys of marks whose labels found no place."""
        axes = self._axes(self.layout.left, self.layout.axes_width)
        for mark in self._drawable():
            paper_marks.draw(mark, axes, self.scales)
        self._axis_texts(axes)
        if self.layout.bar is not None:
            self._colour_bar()
        self._title_and_notes()
        self._key()
        return Names(self).place()

    def _drawable(self):
        """Marks with a place on the page: points and rules outside the axes stay away (a note says so)."""
        return [mark for mark in self.chart.marks if paper_marks.is_on(mark, self.scales)]

    def text(self, x, y, text, size, **look):
        """A text at (x, y) points."""
        look = {"color": INK, "linespacing": LINE_HEIGHT, **look}
        return self.figure.text(x, y, text, fontsize=size, transform=self.points, **look)

    def _axes(self, left, width):
        page = self.layout
        place = [left / page.width, page.bottom / page.height, width / page.width, page.axes_height / page.height]
        axes = self.figure.add_axes(place)
        axes.set(xlim=(0, 1), ylim=(0, 1))
        direction, length = ("out", 2 * TICK / 3) if self.over_map else ("in", TICK)
        axes.tick_params(direction=direction, length=length, width=0.6, color=INK)
        axes.tick_params(labelsize=self.ruler.small, labelcolor=INK)
        axes.set_axisbelow(False)
        return axes

    def _axis_texts(self, axes):
        page, size = self.layout, self.ruler.font_size
        self._ticks(axes.xaxis, page.x, top=not self.over_map)
        self._ticks(axes.yaxis, page.y, right=not self.over_map)
        for edge, along_x, along_y in OUTWARD if self.over_map else INWARD:
            self._minor_ticks(axes, page.x.ticks.minor, [edge] * len(page.x.ticks.minor), along_x)
            self._minor_ticks(axes, [edge] * len(page.y.ticks.minor), page.y.ticks.minor, along_y)
        middle = page.left + page.axes_width / 2
        self.text(middle, page.bottom - page.x.depth, page.x.title, size, ha="center", va="bottom", ma="center")
        upright = {"rotation": 90, "ha": "left", "va": "center", "ma": "center"}
        self.text(page.left - page.y.depth, page.bottom + page.axes_height / 2, page.y.title, size, **upright)

    def _ticks(self, axis, side, **opposite):
        ticks = side.ticks
        axis.set_ticks(ticks.at, ticks.texts)
        axis.set_tick_params(pad=self._pad(), **opposite)
        for label in axis.get_ticklabels():
            label.set(rotation=ticks.rotation, ma="center", linespacing=LINE_HEIGHT)
            if axis.axis_name == "y":
                label.set_verticalalignment("center")
        if axis.axis_name == "x" and not ticks.rotation and not any("\n" in text for text in ticks.texts):
            self._one_baseline(axis, side)

    def _pad(self):
        """Room between a tick's end and its label."""
        return TICK / 3 if self.over_map else TICK

    def _minor_ticks(self, axes, x, y, marker):
        """One artist for all of them: matplotlib's own take longer than the rest of the figure."""
        look = {"markersize": 0.6 * TICK, "markeredgewidth": 0.4, "color": INK, "zorder": 2.5, "clip_on": False}
        axes.plot(x, y, linestyle="none", marker=marker, **look)

    def _one_baseline(self, axis, side):
        """Powers and plain numbers stand on one line."""
        axis.set_tick_params(pad=self._pad() + side.label_depth - 0.25 * self.ruler.small)
        for label in axis.get_ticklabels():
            label.set_verticalalignment("baseline")

    def _colour_bar(self):
        page = self.layout
        mark = self.chart.of(Map)[0]
        left = page.left + page.axes_width + GAP
        axes = self._axes(left, BAR)
        paper_marks.colour_bar(axes, mark)
        axes.xaxis.set_ticks([])
        axes.yaxis.tick_right()
        self._ticks(axes.yaxis, page.bar)
        upright = {"rotation": 90, "ha": "right", "va": "center", "ma": "center"}
        middle = page.bottom + page.axes_height / 2
        self.text(left + BAR + page.bar.depth, middle, page.bar.title, self.ruler.font_size, **upright)

    def _title_and_notes(self):
        page = self.layout
        size = self.ruler.font_size
        self.text(EDGE, page.height - EDGE, page.title, size, weight="bold", ha="left", va="top")
        self.text(EDGE, EDGE, page.notes, self.ruler.tiny, ha="left", va="bottom")

    def _key(self):
        page = self.layout
        top = page.bottom - page.x.depth - GAP
        for item in page.key:
            middle = EDGE + item.left, top - item.top - item.height / 2
            height = 0.7 * self.ruler.small
            for artist in paper_marks.sample(item.mark, middle[0], middle[1] - height / 2, item.width, height):
                artist.set_transform(self.points)
                self.figure.add_artist(artist)
            self.text(middle[0] + item.width + 4, middle[1], item.text, self.ruler.small, ha="left", va="center")
