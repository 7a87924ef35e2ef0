"""A chart's numbers as one table in long form, a row a point, so that every mark can be taken out by its key."""

from __future__ import annotations

from io import StringIO

import numpy as np

from massdash.charts.chart import Band, Line, Map, Point, Rule, Span
from massdash.render.paper_check import check_chart
from massdash.render.paper_scale import Scale
from massdash.render.scales import forward

NUMBERS = ("x", "y", "x_low", "x_high", "y_low", "y_high", "z")


def chart_table(chart, provenance=None):
    """The chart as an astropy QTable.

    Columns: ``mark`` (key), ``kind`` (line, band, span, rule, map, or a point's kind), ``label``; then, as far as the
    chart has them, ``x``, ``y``, the ends ``x_low, x_high, y_low, y_high`` of bands and spans, and ``z``, the map's
    values at its cells' centres. Numbers are float64 in the axes' units, NaN where a mark has no such number. The
    metadata hold title, text alternative, notes, sources, axes and ``provenance`` (texts of several lines, like the
    scenario's file, as lists of lines); there too stand units that astropy does not know.
    """
    from astropy.table import QTable

    check_chart(chart)
    blocks = [_block(mark, chart) for mark in chart.marks]
    lengths = [max((np.size(values) for values in block.values()), default=0) for block in blocks]
    table = QTable(meta=_meta(chart, provenance))
    for name, texts in _texts(chart).items():
        table[name] = np.repeat(np.array(texts, dtype=str), lengths)
    for name in NUMBERS:
        if any(name in block for block in blocks):
            parts = [np.broadcast_to(b.get(name, np.nan), n) for b, n in zip(blocks, lengths, strict=True)]
            table[name] = np.concatenate(parts).astype(float)
            table[name].unit = _unit(_axis_of(chart, name).unit)
    return table


def ecsv_bytes(chart, provenance):
    """The chart's table as an ECSV file (commas, UTF-8); every float64 comes back to the last bit."""
    text = StringIO()
    chart_table(chart, provenance).write(text, format="ascii.ecsv", delimiter=",")
    return text.getvalue().encode()


def _texts(chart):
    """The text columns, one entry a mark."""
    return {
        "mark": [mark.key for mark in chart.marks],
        "kind": [getattr(mark, "kind", type(mark).__name__.lower()) for mark in chart.marks],
        "label": [_label(mark) for mark in chart.marks],
    }


def _label(mark):
    """In one line and never empty, for an empty text is read back as a gap."""
    label = mark.axis.label if isinstance(mark, Map) else mark.label
    return " ".join(label.split()) or mark.key


def _block(mark, chart):
    """Columns of one mark's rows: arrays of equal length, or single numbers."""
    if isinstance(mark, Line | Point):
        return {"x": np.asarray(mark.x, float), "y": np.asarray(mark.y, float)}
    if isinstance(mark, Band):
        return {"x": np.asarray(mark.x, float), "y_low": np.asarray(mark.low), "y_high": np.asarray(mark.high)}
    if isinstance(mark, Rule):
        return {mark.axis: mark.at}
    if isinstance(mark, Span):
        ends = {f"{mark.axis}_low": mark.low, f"{mark.axis}_high": mark.high}
        return {name: np.nan if value is None else value for name, value in ends.items()}
    return _cells(mark, chart)


def _cells(mark: Map, chart):
    """Cell centres, evenly spaced on the axes' own scales, row by row."""
    rows, columns = np.shape(mark.values)
    x, y = centres(chart.x, mark.x, columns), centres(chart.y, mark.y, rows)
    return {"x": np.tile(x, rows), "y": np.repeat(y, columns), "z": np.ravel(mark.values)}


def centres(axis, edges, count):
    """The values at the centres of ``count`` cells between two edges of an axis."""
    start, stop = (float(v) for v in forward(edges, axis))
    scale = Scale(axis, start, stop)
    return np.array([scale.inverse(start + (i + 0.5) / count * (stop - start)) for i in range(count)])


def _axis_of(chart, name):
    return chart.of(Map)[0].axis if name == "z" else getattr(chart, name[0])


def _unit(text):
    """The astropy unit; None for no unit and for what astropy does not know (the metadata keep the text)."""
    from astropy import units as u

    try:
        return u.Unit(text) if text else None
    except ValueError:
        return None


def _meta(chart, provenance):
    axes = {"x": chart.x, "y": chart.y} | ({"z": chart.of(Map)[0].axis} if chart.of(Map) else {})
    meta = {
        "chart": chart.key,
        "title": chart.title,
        "alt": chart.alt,
        "notes": list(chart.notes),
        "sources": list(chart.sources),
        "axes": {name: _axis_meta(axis) for name, axis in axes.items()},
    }
    origin = {name: _in_lines(value) for name, value in (provenance or {}).items()}
    return meta | ({"provenance": origin} if origin else {})


def _in_lines(value):
    """A text of several lines as a list of them, because the header's reader joins lines."""
    return value.splitlines() if isinstance(value, str) and "\n" in value else value


def _axis_meta(axis):
    meta = {"label": axis.label, "unit": axis.unit, "scale": axis.scale}
    if axis.linear_width is not None:
        meta["linear_width"] = float(axis.linear_width)
    if axis.ticks is not None:
        meta["ticks"] = [[float(value), text] for value, text in axis.ticks]
    return meta
