"""The stability margin over mass and ignition temperature."""

from functools import lru_cache

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Map, Point
from massdash.charts.masses import COLDEST, HEAVIEST, HOTTEST, LIGHTEST_OF_ALL, Family, family, mass_limits
from massdash.constants import M_SUN
from massdash.model import words
from massdash.numerals import numeral
from massdash.physics import eos
from massdash.physics.onset import maximum_mass
from massdash.physics.post_newtonian import eddington_beta

LEVELS = (0.0, 0.5, 0.9)
_CELL_X, _CELL_Y = 0.025, 0.015  # width of a cell in decades of mass and of temperature
_LIGHTEST_MU, _HEAVIEST_MU = 0.5, 2.0


def margin_map(outcome, *, post_newtonian=False):
    """The Chart of the margin, cut at -1, with contours; left of and below the zero contour a star ignites.

    ``post_newtonian`` adds the line of zero margin in that approximation.
    """
    scenario, matter = outcome.scenario, outcome.workings.matter
    limits = mass_limits(outcome)
    x, y, values = _direct(outcome, limits) if matter.body.background > 0 else _rescaled(matter)
    axis = Axis("Stability margin", "", "linear", (-1.0, 1.0))
    ignition = outcome.workings.stability.ignition
    marks = [
        Map("margin", axis, x, y, np.maximum(values, -1.0), LEVELS, "diverging"),
        Point("star", scenario.label, scenario.number("mass"), ignition, "present", handle="star"),
    ]
    if post_newtonian and not matter.body.background > 0:
        temperatures = np.geomspace(COLDEST, HOTTEST, 61)
        masses = maximum_mass(matter.mu, temperatures, matter.body.rotation) / M_SUN
        marks.append(Line("zero_pn", "zero, post-Newtonian", masses, temperatures, 6, 1.2))
    mass, temperature = (
        Axis("Mass", "solMass", "log", limits),
        Axis("Ignition temperature", "K", "log", (COLDEST, HOTTEST)),
    )
    sources = tuple(words.stability_source(scenario).split("; "))
    notes = (f"{words.onset_method(scenario).capitalize()}. Values below -1 are shown as -1.",)
    return Chart(
        "map", "Margin over mass and ignition", mass, temperature, tuple(marks), _alt(outcome, ignition), notes, sources
    )


def _alt(outcome, ignition):
    largest = outcome.number("maximum_mass")
    limit = f", where the largest mass that ignites is {numeral(largest)} Msun" if largest is not None else ""
    return (
        "Map of the stability margin over mass and ignition temperature; it falls towards heavy stars and hot "
        f"ignition. {outcome.scenario.label} is at {numeral(outcome.scenario.number('mass'))} Msun and "
        f"{numeral(ignition)} K{limit}."
    )


def _centres(low, high, cell):
    """Cell centres of a grid of whole cells, in decades, that reaches at least from low to high."""
    first, last = np.floor(np.log10(low) / cell), np.ceil(np.log10(high) / cell)
    return (np.arange(first, last) + 0.5) * cell


@lru_cache(maxsize=8)
def _scaled_plane(rotation):
    """Margin over M mu^2 [Msun] and T/mu [K], on which alone it depends without a background: computed once per
    rotation, so that a change of composition costs no more than a shift of the axes."""
    mass = _centres(LIGHTEST_OF_ALL * _LIGHTEST_MU**2, HEAVIEST * _HEAVIEST_MU**2, _CELL_X)
    temperature = _centres(COLDEST / _HEAVIEST_MU, HOTTEST / _LIGHTEST_MU, _CELL_Y)
    margin = Family(1.0, rotation, 0.0, 0.0).margins(10.0 ** mass[None, :], 10.0 ** temperature[:, None])
    return mass, temperature, np.nan_to_num(margin, nan=-np.inf).astype(np.float32)


def _rescaled(matter):
    """Edges and values of the part of the scaled plane that covers the axes at this composition."""
    mass, temperature, margin = _scaled_plane(float(matter.body.rotation))
    shift_x, shift_y = -2.0 * np.log10(matter.mu), np.log10(matter.mu)
    columns = _covering(mass + shift_x, np.log10(LIGHTEST_OF_ALL), np.log10(HEAVIEST), _CELL_X)
    rows = _covering(temperature + shift_y, np.log10(COLDEST), np.log10(HOTTEST), _CELL_Y)
    x = 10.0 ** ((mass + shift_x)[[columns.start, columns.stop - 1]] + np.array([-0.5, 0.5]) * _CELL_X)
    y = 10.0 ** ((temperature + shift_y)[[rows.start, rows.stop - 1]] + np.array([-0.5, 0.5]) * _CELL_Y)
    return tuple(x.tolist()), tuple(y.tolist()), margin[rows, columns]


def _covering(centres, low, high, cell):
    inside = np.flatnonzero((centres > low - cell) & (centres < high + cell))
    return slice(int(inside[0]), int(inside[-1]) + 1)


def _direct(outcome, limits):
    """The same computed cell by cell, coarser, for stars in a background; cells that are not covered stay empty."""
    matter = outcome.workings.matter
    x, y = np.linspace(*np.log10(limits), 61), np.linspace(np.log10(COLDEST), np.log10(HOTTEST), 61)
    mass, temperature = 10.0 ** ((x[1:] + x[:-1]) / 2)[None, :], 10.0 ** ((y[1:] + y[:-1]) / 2)[:, None]
    margin = np.nan_to_num(family(outcome).margins(mass, temperature), nan=-np.inf)
    density = eos.density(temperature, eddington_beta(mass * M_SUN, matter.mu), matter.mu)
    return tuple(limits), (COLDEST, HOTTEST), np.where(matter.covers(density), margin, np.nan)
