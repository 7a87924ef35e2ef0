"""Charts as files: PDF, SVG and PNG at a journal's column width, and their numbers as ECSV.

Every file carries what it came from, in one JSON text: PDF as Keywords, PNG as the text "massdash", SVG as dc:source.
Equal input gives equal bytes; no file carries a date.
"""

from __future__ import annotations

import json
import os
from io import BytesIO
from pathlib import Path
from xml.sax.saxutils import escape

from massdash import provenance as origin
from massdash.errors import InputError, refuse
from massdash.render.paper_check import WIDTHS, check_chart, check_sizes
from massdash.whole import write_whole

FORMATS = ("pdf", "svg", "png")
PNG_DPI = 600  # line art in print
PICTURE_DPI = 300  # the maps' cells inside PDF and SVG


def provenance(outcome):
    """Program, constants and data with their versions, the scenario as the text of its file, and the sources used."""
    from massdash.scenario import to_text

    return {**origin.provenance(outcome), "scenario": to_text(outcome.scenario)}


def figure_bytes(chart, format, *, width_mm=88, height_mm=None, font_size=8, title=True, provenance):
    """The chart as the bytes of a "pdf", "svg" or "png" file. Sizes as for ``paper.figure``."""
    if format not in FORMATS:
        raise refuse("format", repr(format), ", ".join(FORMATS))
    from massdash.render import paper

    drawn = paper.figure(chart, width_mm=width_mm, height_mm=height_mm, font_size=font_size, title=title)
    return _printed(drawn, chart, format, provenance)


def _printed(drawn, chart, format, provenance):
    """A drawn chart as the bytes of one format."""
    from massdash.render import paper

    buffer = BytesIO()
    with paper.look():
        dpi = PNG_DPI if format == "png" else PICTURE_DPI
        drawn.savefig(buffer, format=format, dpi=dpi, metadata=_metadata(chart, format, provenance))
    return _described(buffer.getvalue(), chart) if format == "svg" else buffer.getvalue()


def save_figure(chart, path, *, width_mm=88, height_mm=None, font_size=8, title=True, provenance):
    """Write one figure whose format is the path's suffix; returns the path."""
    path = Path(path)
    format = path.suffix.lower().removeprefix(".")
    if format not in FORMATS:
        raise refuse("file name", repr(path.name), "a name that ends in " + ", ".join(f".{f}" for f in FORMATS))
    _check_directory(path.parent)
    sizes = {"width_mm": width_mm, "height_mm": height_mm, "font_size": font_size, "title": title}
    return write_file(path, figure_bytes(chart, format, **sizes, provenance=provenance))


def export_figures(charts, directory, *, formats=("pdf",), width_mm=88, font_size=8, provenance, with_data=True):
    """Write every chart in every format, and its numbers as ECSV; returns the paths in order.

    Nothing is written when anything is refused: all files are made first.
    """
    from massdash.render import paper, tables

    directory, charts, formats = Path(directory), tuple(charts), tuple(formats)
    _check_request(charts, directory, formats, width_mm, font_size)
    files = {}
    for chart in charts:
        drawn = paper.figure(chart, width_mm=width_mm, font_size=font_size)
        files |= {f"{chart.key}.{format}": _printed(drawn, chart, format, provenance) for format in formats}
        if with_data:
            files[f"{chart.key}.ecsv"] = tables.ecsv_bytes(chart, provenance)
    return [write_file(directory / name, content) for name, content in files.items()]


def write_file(path, content):
    """Put bytes at a path at once: a reader sees the old file or the whole new one. InputError when that fails."""
    try:
        write_whole({path: content})
    except (OSError, ValueError) as error:
        allowed = f"a place that can be written and has {len(content)} bytes free"
        reason = getattr(error, "strerror", None) or error
        raise InputError(
            f"{path}: cannot be written ({reason}); give {allowed}", name="file", got=str(path), allowed=allowed
        ) from error
    return path


def _check_request(charts, directory, formats, width_mm, font_size):
    for format in formats:
        if format not in FORMATS:
            raise refuse("formats", repr(format), ", ".join(FORMATS))
    check_sizes(width_mm, font_size)
    for chart in charts:
        check_chart(chart)
    keys = [chart.key for chart in charts]
    if len(set(keys)) != len(keys):
        raise refuse("charts", f"{keys}, with a key twice", "charts with different keys, which become file names")
    _check_directory(directory)


def _check_directory(directory):
    if not directory.is_dir():
        raise refuse("directory", f"'{directory}'", "a directory that exists")
    if not os.access(directory, os.W_OK | os.X_OK):
        raise refuse("directory", f"'{directory}', which is write-protected,", "a directory you may write to")


def _metadata(chart, format, provenance):
    """The drawing library's metadata for a format; None takes out its date and its own name."""
    program = provenance.get("program", "massdash")
    record = json.dumps({**provenance, "figure_sources": list(chart.sources)}, ensure_ascii=False)
    if format == "pdf":
        entries = {"Title": chart.title, "Subject": chart.alt, "Creator": program, "Keywords": record}
        return {**entries, "CreationDate": None}
    if format == "svg":
        entries = {"Title": chart.title, "Description": chart.alt, "Creator": program, "Source": record}
        return {**entries, "Date": None}
    return {"Title": chart.title, "Description": chart.alt, "Software": program, "massdash": record}


def _described(svg, chart):
    """The SVG with the chart's text alternative where screen readers look for it."""
    return svg.replace(b" <metadata>", f" <desc>{escape(chart.alt)}</desc>\n <metadata>".encode(), 1)


__all__ = ["FORMATS", "WIDTHS", "export_figures", "figure_bytes", "provenance", "save_figure", "write_file"]
