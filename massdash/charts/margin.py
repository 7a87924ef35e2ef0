"""The stability margin against mass, at the scenario's ignition temperature and composition."""

from functools import lru_cache

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Point, Rule, Span
from massdash.charts.masses import family, mass_limits
from massdash.model import words
from massdash.numerals import numeral
from massdash.physics.post_newtonian import equilibrium_at_temperature

POINTS = 121
LOWEST = -1.0  # the axis ends here; a star below it is drawn on the edge with its value beside it
_STEP = 0.1  # the axis' upper end is a multiple of it: 1, or more where rotation, background or a light star ask for it


def margin_chart(outcome, *, post_newtonian=False):
    """The Chart of the margin against rest mass; zero is the onset of collapse, no star below it ignites."""
    ignition = outcome.workings.stability.ignition
    masses, margin = _curve(family(outcome), ignition)
    mass = Axis("Mass", "solMass", "log", mass_limits(outcome))
    value = outcome.number("stability_margin")
    axis = Axis("Stability margin", "", "linear", (LOWEST, _top(margin, value)))
    marks = [Span("unstable", "collapses before it ignites", "y", None, 0.0)]
    if masses.size:
        marks.append(Line("margin", f"at {numeral(ignition, 2)} K", masses, margin, 0))
    if masses.size and post_newtonian:
        marks.append(Line("margin_pn", "post-Newtonian", *_approximate(family(outcome), ignition), 1, 1.2))
    largest = outcome.number("maximum_mass")
    if largest is not None and mass.limits[0] <= largest <= mass.limits[1]:
        marks.append(Rule("maximum_mass", f"largest mass {numeral(largest)}", "x", largest, 6))
    if value is not None:
        text = (
            outcome.scenario.label
            if value >= LOWEST
            else f"{outcome.scenario.label}: {numeral(value, 2)}, off the axis"
        )
        marks.append(Point("star", text, outcome.scenario.number("mass"), max(value, LOWEST), "present"))
    sources = tuple(words.stability_source(outcome.scenario).split("; "))
    notes = (f"{words.onset_method(outcome.scenario).capitalize()}.",)
    return Chart("margin", "Stability margin", mass, axis, tuple(marks), _alt(outcome, value, largest), notes, sources)


@lru_cache(maxsize=32)
def _curve(family, ignition):
    """Masses [Msun] and margins; NaN below the axis."""
    masses = family.masses(POINTS, ignition)
    if not masses.size:
        return masses, masses
    return masses, _on_axis(family.margins(masses, ignition))


@lru_cache(maxsize=32)
def _approximate(family, ignition):
    """The same in the post-Newtonian approximation."""
    masses = family.masses(POINTS, ignition)
    if not masses.size:
        return masses, masses
    return masses, _on_axis(np.asarray(equilibrium_at_temperature(family.bodies(masses), ignition).margin))


def _top(margin, value):
    highest = np.max([1.0, *margin[np.isfinite(margin)], value or 0.0])
    return float(np.ceil(highest / _STEP - 1e-9) * _STEP)


def _on_axis(margin):
    return np.where(margin >= LOWEST, margin, np.nan)


def _alt(outcome, value, largest):
    if value is None:
        return f"Stability margin against mass: {words.NOT_COVERED}."
    limit = f"; it vanishes at {numeral(largest)} Msun" if largest is not None else ""
    return (
        f"Stability margin against mass for ignition at {numeral(outcome.workings.stability.ignition)} K: "
        f"{numeral(value, 2)} for {outcome.scenario.label}{limit}."
    )
