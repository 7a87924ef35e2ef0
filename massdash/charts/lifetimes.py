"""Lifetimes against mass: contraction, hydrogen burning, and how long the fuel would last."""

from functools import lru_cache

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Point, Rule
from massdash.charts.masses import HEAVIEST, family, mass_limits
from massdash.constants import M_SUN, YEAR
from massdash.model import words
from massdash.model.life import hydrogen_at_onset
from massdash.numerals import duration, numeral
from massdash.physics import opacity, relativistic
from massdash.physics.evolution import EXHAUSTED, contraction_time, mixed_burning_time, nuclear_timescale

POINTS = 81
_CLOSE, _NEAREST = 14, 1e-3  # points of the burning line next to the largest mass, the nearest this part below it


def lifetime_chart(outcome):
    """The Chart of times against rest mass, at the scenario's composition and ignition temperature."""
    matter, ignition = outcome.workings.matter, outcome.workings.stability.ignition
    stars, largest = family(outcome), outcome.number("maximum_mass")
    masses, contraction, nuclear = _curves(stars, ignition, matter.hydrogen)
    mass = Axis("Mass", "solMass", "log", mass_limits(outcome))
    time = Axis("Time", "yr", "log")
    marks = []
    if masses.size:
        marks += [
            Line("nuclear", "fuel at full power", masses, nuclear, 2, 1.2),
            Line("burning", "hydrogen burning", *_burning(stars, ignition, matter.hydrogen, matter.metals, largest), 1),
            Line("contraction", "contraction", masses, contraction, 0),
        ]
    star = outcome.scenario.number("mass")
    for name, label in (("contraction_time", ""), ("hydrogen_lifetime", outcome.scenario.label)):
        value = outcome.number(name)
        if value is not None and value > 0:
            marks.append(Point(name, label, star, value, "present"))
    if not any(isinstance(mark, Point) and mark.label for mark in marks):
        marks.append(Rule("star", outcome.scenario.label, "x", star))
    notes = ("Closed forms at L_Edd (1 - beta), fixed mass, fully mixed; helium burning left out.",)
    return Chart("lifetimes", "Lifetimes", mass, time, tuple(marks), _alt(outcome), notes, (words.LIFE_SOURCE,))


@lru_cache(maxsize=32)
def _onsets(family, ignition):
    """Masses [Msun] and the onset temperatures [K] of all of them."""
    masses = family.masses(POINTS, ignition)
    if not masses.size:
        return masses, masses
    return masses, relativistic.onset(masses * M_SUN, family.mu, family.rotation, family.background).temperature


@lru_cache(maxsize=32)
def _curves(family, ignition, hydrogen):
    """Masses [Msun], contraction and nuclear time [yr]; NaN where a star has no such phase."""
    masses, limit = _onsets(family, ignition if family.background > 0 else None)
    if not masses.size:
        return masses, masses, masses
    bodies = family.bodies(masses)
    state = relativistic.at_temperature(bodies.mass, family.mu, np.minimum(ignition, limit))
    luminosity = opacity.eddington_luminosity(bodies.mass, opacity.surface_opacity(hydrogen)) * (1 - state.beta)
    contraction = contraction_time(state.energy, luminosity)
    nuclear = nuclear_timescale(bodies.mass, hydrogen, luminosity)
    return masses, *(_positive(times / YEAR) for times in (contraction, nuclear))


@lru_cache(maxsize=32)
def _burning(family, ignition, hydrogen, metals, largest):
    """Masses [Msun] of the stars that ignite and the time they burn hydrogen [yr]; empty where none does."""
    masses, limit = _onsets(family, ignition if family.background > 0 else None)
    masses = masses[(ignition <= limit) & (hydrogen > EXHAUSTED)]
    if not masses.size:
        return masses, masses
    if largest is not None and masses[-1] < largest < HEAVIEST:
        # burning ends steeply at the largest mass
        masses = np.union1d(masses, largest * (1.0 - np.geomspace(_NEAREST, 0.3, _CLOSE)))
        masses = masses[masses >= family.lightest]
    bodies = family.bodies(masses)
    beta = relativistic.at_temperature(bodies.mass, family.mu, ignition).beta
    end = np.clip(hydrogen_at_onset(bodies, ignition, metals), EXHAUSTED, hydrogen)
    return masses, _positive(mixed_burning_time(hydrogen, end, beta) / YEAR)


def _positive(times):
    return np.where(times > 0, times, np.nan)


def _alt(outcome):
    parts = [
        f"{what} {duration(outcome.number(name), 2)}"
        for what, name in (("contracts for", "contraction_time"), ("burns hydrogen for", "hydrogen_lifetime"))
        if outcome.number(name) is not None
    ]
    if not parts:
        return f"Lifetimes against mass: {words.NOT_COVERED}."
    mass = numeral(outcome.scenario.number("mass"))
    return f"Lifetimes against mass: {outcome.scenario.label}, at {mass} Msun, {' and '.join(parts)}."
