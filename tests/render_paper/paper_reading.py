"""Reading a drawn figure back: where its texts stand and which values its tick labels name."""

import re
from functools import cache
from itertools import combinations

from matplotlib.text import Text
from paper_cases import every_mark, hard_cases, margin_map

from massdash.render import paper

CHARTS = {chart.key: chart for chart in (*hard_cases(), every_mark(), margin_map())}
POWER = re.compile(r"^\$(-?)(?:([\d.]+)\\times)?10\^\{(-?\d+)\}\$$")
MULTIPLE = re.compile(r"\(\$10\^\{(-?\d+)\}\$")
OFFSET = re.compile(r" ([+−]) ([\d.]+)(?: |$)")


@cache
def drawn(key, width_mm=88):
    """A sample chart, drawn once for all tests."""
    return paper.figure(CHARTS[key], width_mm=width_mm)


def texts(figure):
    """(text, box in pixels) of everything written on a figure."""
    with paper.look():
        found = [(text.get_text(), text.get_window_extent()) for text in figure.findobj(Text) if text.get_text()]
    return [(text, box) for text, box in found if box.width > 0]


def is_inside(box, figure):
    """True when nothing of a box is cut by the page's edges."""
    return box.x0 >= 0 and box.y0 >= 0 and box.x1 <= figure.bbox.width and box.y1 <= figure.bbox.height


def overlaps(boxes, room=0.0):
    """Pairs of named boxes that cover common ground by more than ``room`` pixels both ways."""

    def shared(a, b):
        return min(a.x1, b.x1) - max(a.x0, b.x0) > room and min(a.y1, b.y1) - max(a.y0, b.y0) > room

    return [(a, b) for (a, box_a), (b, box_b) in combinations(boxes, 2) if shared(box_a, box_b)]


def tick_labels(axis):
    """(text, fraction of the axis' length, box) of the labelled ticks."""
    with paper.look():
        return [
            (label.get_text(), float(at), label.get_window_extent())
            for label, at in zip(axis.get_ticklabels(), axis.get_ticklocs(), strict=True)
        ]


def named_value(text, title):
    """The value a tick label names, with the power of ten and the offset in the axis' title."""
    if match := POWER.match(text):
        sign, mantissa, exponent = match.groups()
        return float(f"{sign}{mantissa or 1}e{exponent}")
    multiple = MULTIPLE.search(title)
    value = float(text.replace("−", "-")) * (10.0 ** int(multiple[1]) if multiple else 1)
    offset = OFFSET.search(title.split("(")[0])
    return value + (float(offset[2]) * (1 if offset[1] == "−" else -1) if offset else 0)
