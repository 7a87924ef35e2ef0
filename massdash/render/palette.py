"""Colours and dashes, the same on screen and on paper.

Curves use the eight colours of Okabe & Ito (2008, "Color Universal Design", https://jfly.uni-koeln.de/color/), which
people with any common colour vision tell apart, with yellow left to the dark theme and grey added. Where a published
colour is too faint for its background it is moved in lightness alone, in OKLab (Ottosson 2020, "A perceptual color
space for image processing"), until its contrast (WCAG 2.2) suffices: 3 for lines, 4.5 for text. Every style has its own
dash too, so that grey print tells curves apart.
"""

from dataclasses import dataclass
from functools import cache

import numpy as np

LIGHT_PAPER, DARK_PAPER = "#ffffff", "#111111"
LIGHT_TEXT, DARK_TEXT = "#222222", "#e4e4e4"
LINE_CONTRAST, TEXT_CONTRAST = 3.0, 4.5

BLACK, ORANGE, SKY_BLUE, BLUISH_GREEN = "#000000", "#E69F00", "#56B4E9", "#009E73"
YELLOW, BLUE, VERMILLION, REDDISH_PURPLE, GREY = "#F0E442", "#0072B2", "#D55E00", "#CC79A7", "#7A7A7A"

# (colour on light paper, colour on dark paper, dash in points: drawn, left out, ...)
CHOICES = (
    (BLUE, SKY_BLUE, ()),
    (VERMILLION, VERMILLION, (7, 3)),
    (BLUISH_GREEN, BLUISH_GREEN, (2, 2)),
    (REDDISH_PURPLE, REDDISH_PURPLE, (9, 3, 2, 3)),
    (SKY_BLUE, BLUE, (12, 4)),
    (ORANGE, YELLOW, (4, 2)),
    (BLACK, "#ffffff", (6, 2, 2, 2, 2, 2)),
    (GREY, GREY, (1, 3)),
)

# Anchors of the colour tables in OKLCh: lightness, chroma, hue in degrees. Lightness runs evenly, so that equal steps
# of the value look equal and survive in grey.
SEQUENTIAL = (
    (0.22, 0.060, 290.0),
    (0.40, 0.085, 255.0),
    (0.58, 0.090, 205.0),
    (0.76, 0.095, 150.0),
    (0.95, 0.075, 95.0),
)
BELOW = ((0.32, 0.090, 38.0), (0.53, 0.115, 48.0), (0.75, 0.085, 62.0), (0.965, 0.0, 60.0))
ABOVE = ((0.965, 0.0, 235.0), (0.75, 0.075, 235.0), (0.53, 0.110, 245.0), (0.32, 0.090, 255.0))


@dataclass(frozen=True)
class Style:
    """How one curve is drawn: line colours and text colours on light and dark paper, and the dash in points."""

    light: str
    dark: str
    light_ink: str
    dark_ink: str
    dash: tuple[float, ...]


def to_linear(srgb):
    """Linear light from sRGB values in 0..1 (IEC 61966-2-1)."""
    srgb = np.asarray(srgb, float)
    return np.where(srgb <= 0.04045, srgb / 12.92, ((srgb + 0.055) / 1.055) ** 2.4)


def from_linear(linear):
    """sRGB values in 0..1 from linear light; what the screen cannot show is cut to the nearest edge."""
    linear = np.clip(linear, 0.0, 1.0)
    return np.where(linear <= 0.0031308, 12.92 * linear, 1.055 * linear ** (1 / 2.4) - 0.055)


# Ottosson (2020): linear sRGB to cone response, and its cube root to OKLab.
TO_CONES = np.array(
    [
        [0.4122214708, 0.5363325363, 0.0514459929],
        [0.2119034982, 0.6806995451, 0.1073969566],
        [0.0883024619, 0.2817188376, 0.6299787005],
    ]
)
TO_LAB = np.array(
    [
        [0.2104542553, 0.7936177850, -0.0040720468],
        [1.9779984951, -2.4285922050, 0.4505937099],
        [0.0259040371, 0.7827717662, -0.8086757660],
    ]
)
FROM_CONES, FROM_LAB = np.linalg.inv(TO_CONES), np.linalg.inv(TO_LAB)


def oklab(srgb):
    """OKLab coordinates, shape (..., 3), of sRGB values in 0..1."""
    return np.cbrt(to_linear(srgb) @ TO_CONES.T) @ TO_LAB.T


def srgb(lab):
    """sRGB values in 0..1, shape (..., 3), of OKLab coordinates."""
    return from_linear((np.asarray(lab) @ FROM_LAB.T) ** 3 @ FROM_CONES.T)


def rgb_of(hexadecimal):
    return np.array([int(hexadecimal[i : i + 2], 16) for i in (1, 3, 5)]) / 255


def hex_of(rgb):
    return "#" + "".join(f"{round(float(part) * 255):02x}" for part in rgb)


def luminance(hexadecimal):
    """Relative luminance, 0..1 (WCAG 2.2)."""
    return float(to_linear(rgb_of(hexadecimal)) @ [0.2126, 0.7152, 0.0722])


def contrast(one, other):
    """Contrast ratio of two colours, 1..21 (WCAG 2.2)."""
    low, high = sorted((luminance(one), luminance(other)))
    return (high + 0.05) / (low + 0.05)


def readable(colour, paper, least):
    """The colour, or the nearest one in lightness that has at least this contrast on the paper."""
    lab = oklab(rgb_of(colour))
    step = -0.005 if luminance(paper) > 0.5 else 0.005
    for lightness in np.arange(lab[0], 1.0 if step > 0 else 0.0, step):
        candidate = hex_of(srgb([lightness, lab[1], lab[2]]))
        if contrast(candidate, paper) >= least:
            return candidate
    return "#000000" if step < 0 else "#ffffff"


def _style(light, dark, dash):
    return Style(
        light=readable(light, LIGHT_PAPER, LINE_CONTRAST),
        dark=readable(dark, DARK_PAPER, LINE_CONTRAST),
        light_ink=readable(light, LIGHT_PAPER, TEXT_CONTRAST),
        dark_ink=readable(dark, DARK_PAPER, TEXT_CONTRAST),
        dash=dash,
    )


STYLES = tuple(_style(*choice) for choice in CHOICES)


def _between(anchors, count):
    """Evenly spaced colours along the anchors, straight in OKLab, as (count, 3) uint8."""
    lightness, chroma, hue = np.array(anchors).T
    lab = np.stack([lightness, chroma * np.cos(np.radians(hue)), chroma * np.sin(np.radians(hue))])
    place = np.linspace(0, len(anchors) - 1, count)
    lab = np.stack([np.interp(place, np.arange(len(anchors)), part) for part in lab], axis=-1)
    return np.round(srgb(lab) * 255).astype(np.uint8)


@cache
def colour_table(name):
    """256 colours of a map as uint8, shape (256, 3): "sequential" dark to light, or "diverging", warm below and cool
    above a middle without colour."""
    if name == "sequential":
        table = _between(SEQUENTIAL, 256)
    elif name == "diverging":
        table = np.concatenate([_between(BELOW, 128), _between(ABOVE, 128)])
    else:
        raise ValueError(f"colour table {name!r} is neither 'sequential' nor 'diverging'")
    table.flags.writeable = False
    return table
