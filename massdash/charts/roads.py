"""Three roads to the onset of collapse compared: post-Newtonian forms, turning point and pulsation, against mass.

The pulsation's onset is the one used everywhere else; here the other roads are held against it. Stars without rotation,
background and pairs, for which everything depends on M mu^2 alone.
"""

from functools import lru_cache
from typing import NamedTuple

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Rule, Span
from massdash.charts.masses import HEAVIEST, LIGHTEST
from massdash.constants import M_SUN
from massdash.model import words
from massdash.numerals import numeral
from massdash.physics import eos, relativistic
from massdash.physics.onset import onset, onset_leading
from massdash.physics.post_newtonian import Body
from massdash.physics.turning import turning_temperature

POINTS = 101
#: Masses at which the turning point is sought by direct integration.
TURNING_POINTS = 11
#: T_PN/T_GR - 1 over beta of the leading order in the limit of large masses.
GUIDE = 1.13

_ROADS = {"leading": "leading order", "exact": "exact β and Γ₁", "second": "second order"}
_NOTES = (
    "Post-Newtonian roads: leading order in β, exact β and Γ₁, and leading order in β with the second in gravity.",
    "Without electron-positron pairs, rotation and background.",
)


class Roads(NamedTuple):
    """Onset temperatures of the post-Newtonian roads over that of the pulsation, less 1, at ``masses`` [Msun] with
    central ``beta``: at ``leading`` order, with the ``second`` post-Newtonian order, and at first order with ``exact``
    beta and Gamma_1."""

    masses: np.ndarray
    beta: np.ndarray
    leading: np.ndarray
    second: np.ndarray
    exact: np.ndarray


def roads_chart(outcome):
    """The Chart of |T_road/T_pulsation - 1| at the onset against rest mass, at the scenario's composition."""
    mu = float(outcome.workings.matter.mu)
    roads, (masses, turning) = differences(mu), _turning(mu)
    marks = [
        *_frame(outcome, mu),
        Line("guide", f"{GUIDE} β", roads.masses, GUIDE * roads.beta, 7, 1.0),
        *_lines(roads, lambda difference: difference),
        Line("turning", "turning point", masses, np.abs(turning), 3),
    ]
    axis = Axis("Relative difference to pulsation", "", "log", (1e-15, 1.0))
    return _chart("roads", "Onset temperature by three roads", axis, marks, _alt(roads, turning))


def roads_over_beta(outcome):
    """The Chart of (T_road/T_pulsation - 1)/beta for the post-Newtonian roads: what is left where all are small."""
    mu = float(outcome.workings.matter.mu)
    roads = differences(mu)
    marks = [
        *_frame(outcome, mu),
        Rule("guide", f"limit {GUIDE}", "y", GUIDE),
        *_lines(roads, lambda difference: difference / roads.beta),
    ]
    axis = Axis("Relative difference to pulsation / β", "", "linear", (0.8, 1.4))
    return _chart("roads_beta", "Post-Newtonian onset temperature", axis, marks, _alt_beta(roads))


@lru_cache(maxsize=8)
def differences(mu):
    """The Roads at mean molecular weight ``mu``."""
    masses = np.geomspace(LIGHTEST, HEAVIEST, POINTS)
    exact = relativistic.onset(masses * M_SUN, mu)
    first, second = (Body(masses * M_SUN, mu, second_order=order) for order in (False, True))
    found = (onset_leading(first), onset_leading(second), onset(first))
    return Roads(masses, exact.beta, *(state.temperature / exact.temperature - 1.0 for state in found))


@lru_cache(maxsize=8)
def _turning(mu):
    """Masses [Msun] and the turning point's temperature over that of the pulsation, less 1."""
    masses = np.geomspace(LIGHTEST, HEAVIEST, TURNING_POINTS)
    marginal = relativistic.onset(masses * M_SUN, mu)
    guess = onset_leading(Body(masses * M_SUN, mu)).temperature
    return masses, turning_temperature(marginal, mu, guess) / marginal.temperature - 1.0


def _lines(roads, scale):
    return [
        Line(key, label, roads.masses, scale(getattr(roads, key)), style, 1.0)
        for style, (key, label) in enumerate(_ROADS.items())
    ]


def _frame(outcome, mu):
    """Where pairs matter, and the scenario's star where it is on the axis."""
    heaviest = relativistic.maximum_mass(mu, eos.PAIR_TEMPERATURE) / M_SUN
    marks = [Span("pairs", "pairs matter", "x", None, float(heaviest))]
    star = outcome.scenario.number("mass")
    return [*marks, Rule("star", outcome.scenario.label, "x", star)] if star >= LIGHTEST else marks


def _chart(key, title, axis, marks, alt):
    mass = Axis("Mass", "solMass", "log", (LIGHTEST, HEAVIEST))
    sources = (words.PULSATION_SOURCE, words.RELATIVITY_SOURCE, *words.ENERGY_SOURCE.split("; "), words.ROTATION_SOURCE)
    return Chart(key, title, mass, axis, tuple(marks), alt, _NOTES, sources)


def _alt(roads, turning):
    light, heavy = (numeral(float(roads.leading[at]), 2) for at in (0, -1))
    return (
        "Relative difference of the onset temperature to that of the pulsation, against mass: the post-Newtonian forms "
        f"fall like beta, at leading order from {light} at {numeral(LIGHTEST)} Msun to {heavy} at {numeral(HEAVIEST)} "
        f"Msun; the turning point differs nowhere by more than {numeral(float(np.max(np.abs(turning))), 1)}."
    )


def _alt_beta(roads):
    heavy = {key: numeral(float(getattr(roads, key)[-1] / roads.beta[-1]), 3) for key in _ROADS}
    return (
        "Post-Newtonian onset temperatures over that of the pulsation, less 1, in units of beta, against mass: at "
        f"{numeral(HEAVIEST)} Msun {heavy['leading']} at leading order, {heavy['exact']} with exact beta and "
        f"Gamma_1, {heavy['second']} with the second post-Newtonian order."
    )
