"""Synthetic charts: the sixteen hard axis cases, and one with every kind of mark."""

import numpy as np

from massdash.charts.chart import Axis, Band, Chart, Line, Map, Point, Rule, Span

X = np.linspace(1, 100, 100)
ENERGY = -1e54 * np.cos(X / 12) * np.exp(-X / 20)


def _chart(key, title, curves, scale="log", marks=(), **axis):
    curves = curves if isinstance(curves, list) else [curves]
    names = [title] if len(curves) == 1 else [f"series {j}" for j in range(len(curves))]
    lines = tuple(Line(f"line{j}", names[j], X, y, style=j) for j, y in enumerate(curves))
    return Chart(key, title, Axis("x"), Axis("E", "erg", scale, **axis), lines + tuple(marks), alt=f"{title}.")


def _gaps():
    y = 10 ** (4 * X / 100)
    y[20:25], y[40:43], y[60:64], y[80], y[82] = 0, -5, np.nan, np.inf, 0
    return y


def _crowd():
    events = [Rule(f"event{k}", f"event {k}", "x", 40.0 + 3 * k) for k in range(5)]
    limits = [Rule(f"limit{k}", f"limit {k}", "y", 150 * 1.15**k) for k in range(3)]
    return [*events, *limits]


def hard_cases():
    """The sixteen charts whose axes are hard to get right."""
    nothing = np.full(X.size, np.nan)
    zero = Rule("zero", "E = 0", "y", 0.0)
    bound = [np.where(ENERGY > 0, ENERGY, np.nan), np.where(ENERGY < 0, -ENERGY, np.nan)]
    return (
        _chart("gaps", "zero, negative, NaN and inf are gaps", _gaps()),
        _chart("narrow", "log 2.1 to 2.9", 2.1 + 0.8 * X / 100),
        _chart("tiny", "log 1 to 1 + 1e-6", 1 + 1e-8 * X),
        _chart("decades", "ninety decades", 10 ** (-30 + 0.9 * X)),
        _chart("erg", "1e52 to 1e54", 10 ** (52 + 0.02 * X)),
        _chart("subdecade", "1.2e54 to 1.9e54", (1.2 + 0.007 * X) * 1e54),
        _chart("linear_huge", "linear 0 to 1e54", X * 1e52, "linear"),
        _chart("linear_small", "linear 0 to 1e-30", X * 1e-32, "linear"),
        _chart("offset", "linear 1e6 + 0.001", 1e6 + 1e-5 * X, "linear"),
        _chart("symlog_narrow_core", "linear width 1e48", ENERGY, "symlog", [zero], linear_width=1e48),
        _chart("symlog", "linear width 1e52", ENERGY, "symlog", [zero], linear_width=1e52),
        _chart("symlog_negative", "all negative, narrow", -1e53 * (1 + X / 50), "symlog", linear_width=1e48),
        _chart("magnitude", "size of E on a log axis", bound),
        _chart("all_nan", "all NaN", nothing),
        _chart("constant", "constant", X * 0 + 3e47),
        _chart("crowded", "crowded text", [10 ** (2 + 0.02 * X + 0.03 * j) for j in range(7)], marks=_crowd()),
    )


def every_mark():
    """Curves, band, spans, rules and all five kinds of points on one chart."""
    x = np.logspace(-3, 1, 200)
    energy = 2e54 * (x / 0.3) ** 0.6 * (x - 0.35) / (1 + x**2)
    kinds = ("present", "stable", "unstable", "onset", "end")
    at = [0.05, 0.15, 1.2, 0.35, 6.0]
    points = tuple(
        Point(kind, kind, t, float(np.interp(t, x, energy)), kind) for kind, t in zip(kinds, at, strict=True)
    )
    return Chart(
        "energy",
        "Binding energy of Lantern at its own entropy",
        Axis("Central density", "g cm⁻³", "log"),
        Axis("Binding energy", "erg", "symlog", linear_width=2e52),
        (
            Band("spread", "spread of entropies", x, energy * 0.7 - 1e51, energy * 1.3 + 1e51, style=4),
            Line("own", "at the star's entropy", x, energy),
            Line("locus", "equilibria", x, energy * 0.2 - 3e52, style=1),
            Line("term", "rotation", x, 1e53 * x, style=2),
            Span("degenerate", "electrons degenerate", "x", 3.0, None),
            Rule("zero", "unbound above", "y", 0.0),
            Rule("onset_density", "onset of instability", "x", 0.35, style=6),
            *points,
        ),
        alt="The energy falls, turns at the onset and rises.",
        notes=("Second post-Newtonian order; exact gas fraction.", "Dashed: the locus of equilibria at fixed mass."),
        sources=("An invented source (2031)",),
    )


def margin_map(palette="diverging", n=200):
    """A map over mass and ignition temperature with contours, a curve and the present star."""
    m, t = np.logspace(3, 8, n), np.logspace(6.5, 9, n)[:, None]
    values = np.log10(1e13 / (m * t)) / 3 + 0.05 * np.sin(3 * np.log10(m))
    values[: n // 10, : n // 10] = np.nan
    levels = (-1.0, -0.5, 0.0, 0.5, 1.0)
    return Chart(
        "map",
        "Where a star settles",
        Axis("Mass", "M☉", "log"),
        Axis("Ignition temperature", "K", "log"),
        (
            Map("margin", Axis("Stability margin"), (1e3, 1e8), (10**6.5, 1e9), values, levels, palette),
            Line("closed", "closed form", m, 1e13 / m * 0.8, style=6),
            Point("present", "Lantern", 1.2e5, 1e7),
        ),
        alt="A map.",
    )
