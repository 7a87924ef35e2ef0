"""The JavaScript modules of the widgets, joined from their rooms.

A widget's module is loaded from a blob, where relative imports cannot resolve, so the files under ``js`` are joined in
a stated order into one module. They hold plain functions and classes; the last one exports.
"""

import json
from functools import cache
from pathlib import Path

from massdash.render import palette

JS = Path(__file__).with_name("js")

# Each file uses only what stands before it.
CHARTS = (
    "vendor/ticks.js",
    "numbers.js",
    "scales.js",
    "ticks.js",
    "theme.js",
    "text.js",
    "layout.js",
    "paint.js",
    "map.js",
    "marks.js",
    "frame.js",
    "readout.js",
    "chart.js",
    "interaction.js",
    "widget.js",
)
FIELD = ("numbers.js", "field.js")
DOWNLOAD = ("download.js",)


def _join(names):
    parts = [f"// {name}\n{(JS / name).read_text(encoding='utf-8')}" for name in names]
    return "\n".join(parts)


def palette_module():
    """The palette as JavaScript constants."""
    styles = [vars(style) for style in palette.STYLES]
    tables = {name: palette.colour_table(name).ravel().tolist() for name in ("sequential", "diverging")}
    return f"const STYLES = {json.dumps(styles)};\nconst COLOUR_TABLES = {json.dumps(tables)};\n"


@cache
def charts_module():
    """The module that draws charts, as text."""
    return palette_module() + _join(CHARTS)


@cache
def field_module():
    """The module of the number field, as text."""
    return _join(FIELD)


@cache
def download_module():
    """The module that hands over files, as text."""
    return _join(DOWNLOAD)


@cache
def stylesheet(name):
    """A style sheet, as text."""
    return (JS / f"{name}.css").read_text(encoding="utf-8")
