"""Measuring and breaking text for print. All lengths are points (1/72 inch), as drawn."""

from __future__ import annotations

from dataclasses import replace
from functools import lru_cache

from matplotlib.font_manager import FontProperties, findfont, get_font
from matplotlib.text import Text

FAMILY = "DejaVu Sans"  # comes with matplotlib, so every machine prints the same; has superscripts and ☉
MISSING = "□"
LINE_HEIGHT = 1.2


class Ruler:
    """Measures texts as the figure will draw them; ``font_size`` is the size of axis titles."""

    def __init__(self, figure, font_size):
        self.figure = figure
        self.font_size, self.small, self.tiny = font_size, 0.9 * font_size, 0.8 * font_size
        self._sizes = {}

    def size(self, text, size, weight="normal"):
        """(width, height) of a text that may have several lines."""
        key = (text, size, weight)
        if key not in self._sizes:
            self._sizes[key] = self._measure(*key)
        return self._sizes[key]

    def _measure(self, text, size, weight):
        if not text:
            return 0.0, 0.0
        drawn = Text(0, 0, text, fontsize=size, fontweight=weight, linespacing=LINE_HEIGHT)
        drawn.set_figure(self.figure)
        box = drawn.get_window_extent(self.figure.canvas.get_renderer())
        return box.width * 72 / self.figure.dpi, box.height * 72 / self.figure.dpi

    def wrap(self, text, width, size, weight="normal"):
        """The text in lines no wider than ``width``; words wider than that are broken so that nothing is cut."""
        lines = [""]
        for word in text.split():
            longer = f"{lines[-1]} {word}".strip()
            if self.size(longer, size, weight)[0] <= width:
                lines[-1] = longer
            else:
                lines += self._pieces(word, width, size, weight)
        return "\n".join(line for line in lines if line)

    def fits(self, text, width, size):
        """True when wrapping to this width breaks no word."""
        return all(self.size(word, size)[0] <= width for word in text.split())

    def _pieces(self, word, width, size, weight):
        """A word cut to fit; formulas stay whole, because half a formula is an error."""
        if "$" in word or self.size(word, size, weight)[0] <= width:
            return [word]
        pieces = [""]
        for letter in word:
            if pieces[-1] and self.size(pieces[-1] + letter, size, weight)[0] > width:
                pieces.append("")
            pieces[-1] += letter
        return pieces


@lru_cache(maxsize=1)
def _letters():
    return frozenset(get_font(findfont(FontProperties(family=FAMILY))).get_charmap())


def printable(text):
    """The text with a box for every letter the font lacks (the file's metadata keep the original)."""
    return "".join(c if ord(c) in _letters() or c.isspace() else MISSING for c in str(text))


def printable_chart(chart):
    """The chart with printable texts only, and a note when letters were replaced."""
    marks = tuple(_printable_mark(mark) for mark in chart.marks)
    shown = replace(
        chart,
        title=printable(chart.title),
        x=_printable_axis(chart.x),
        y=_printable_axis(chart.y),
        marks=marks,
        notes=tuple(printable(note) for note in chart.notes),
    )
    if MISSING in "".join([shown.title, *shown.notes, *(getattr(mark, "label", "") for mark in marks)]):
        return replace(shown, notes=(*shown.notes, f"{MISSING} stands for a letter that the print font lacks."))
    return shown


def _printable_mark(mark):
    if hasattr(mark, "label"):
        return replace(mark, label=printable(mark.label))
    return replace(mark, axis=_printable_axis(mark.axis))


def _printable_axis(axis):
    ticks = axis.ticks and tuple((value, printable(text)) for value, text in axis.ticks)
    return replace(axis, label=printable(axis.label), unit=printable(axis.unit), ticks=ticks)
