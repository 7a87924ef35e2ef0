"""Charts that are hard to draw: gaps, narrow and huge ranges, signed energies, crowded texts."""

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Rule

X = np.linspace(1.0, 100.0, 100)
SIGNED = -1e54 * np.cos(X / 12) * np.exp(-X / 20)  # binding energies in erg that change sign


def with_gaps():
    y = 10 ** (4 * X / 100)
    y[20:25] = 0
    y[40:43] = -5
    y[60:64] = np.nan
    y[80], y[82] = np.inf, 0  # 81 stands alone
    return y


def one(key, title, y, *, scale="log", marks=(), **axis):
    line = Line("curve", "curve", X, np.asarray(y, float))
    return Chart(key, title, Axis("x"), Axis("E", "erg", scale, **axis), (line, *marks), alt=f"{title}.")


def zero(label=""):
    return Rule("zero", label, "y", 0.0)


def crowded():
    lines = [Line(f"s{j}", f"series {j}", X, 10 ** (2 + 0.02 * X + 0.03 * j), style=j) for j in range(7)]
    events = [Rule(f"e{k}", f"event {k}", "x", 40.0 + 3 * k) for k in range(5)]
    limits = [Rule(f"l{k}", f"limit {k}", "y", 150 * 1.15**k) for k in range(3)]
    return Chart("crowded", "crowded text", Axis("x"), Axis("E", "erg", "log"), (*lines, *events, *limits))


def magnitudes():
    free, bound = np.where(SIGNED > 0, SIGNED, np.nan), np.where(SIGNED < 0, -SIGNED, np.nan)
    lines = (Line("free", "free", X, free), Line("bound", "bound", X, bound, style=1))
    return Chart("magnitudes", "size of E, dashed where bound", Axis("x"), Axis("|E|", "erg", "log"), lines)


def hard_cases():
    """The sixteen charts, by key."""
    charts = [
        one("gaps", "zero, negative, NaN, infinite: gaps; one lone point", with_gaps()),
        one("narrow", "log 2.1 to 2.9", 2.1 + 0.8 * X / 100),
        one("tiny", "log 1 to 1 + 1e-6", 1 + 1e-8 * X),
        one("ninety", "log 1e-30 to 1e60", 10 ** (-30 + 0.9 * X)),
        one("two", "log 1e52 to 1e54", 10 ** (52 + 0.02 * X)),
        one("within", "log 1.2e54 to 1.9e54", (1.2 + 0.007 * X) * 1e54),
        one("large", "linear 0 to 1e54", X * 1e52, scale="linear"),
        one("small", "linear 0 to 1e-30", X * 1e-32, scale="linear"),
        one("offset", "linear 1e6 + 0.001", 1e6 + 1e-5 * X, scale="linear"),
        one("deep", "symlog, linear within 1e48", SIGNED, scale="symlog", linear_width=1e48, marks=[zero("E = 0")]),
        one("shallow", "symlog, linear within 1e52", SIGNED, scale="symlog", linear_width=1e52, marks=[zero()]),
        one("bound", "symlog, all negative, narrow", -1e53 * (1 + X / 50), scale="symlog", linear_width=1e48),
        magnitudes(),
        one("nothing", "all NaN", X * np.nan),
        one("constant", "constant 3e47", 0 * X + 3e47),
        crowded(),
    ]
    return {chart.key: chart for chart in charts}
