"""Binding energy against central density: the star's own curve and the locus of equilibria."""

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Point, Rule
from massdash.model import words
from massdash.numerals import numeral
from massdash.physics import relativistic
from massdash.physics.post_newtonian import energy_terms, equilibrium_at_density

POINTS = 160
_SEARCHED = 240  # densities at which the barrier is looked for
# The density axis reaches from _BELOW times the star's to _ABOVE times the onset's or _BEYOND times the barrier's.
_BELOW, _ABOVE, _BEYOND = 1e-2, 12.0, 3.0
_LARGEST_Y = 0.3  # post-Newtonian terms mean nothing beyond
_DEEPEST = -1.8  # lower end of the energy axis, in units of the onset's binding energy; own curves fall on without end
_TERMS = {
    "internal": "internal energy",
    "newtonian": "Newtonian gravity",
    "first_order": "first relativistic term",
    "rotation": "rotation",
    "background": "background",
}


def energy_chart(outcome, *, terms=False, post_newtonian=False):
    """The Chart of E(rho_c) at the scenario's rest mass, with the locus of equilibria in full relativity.

    The star's own curve, E at fixed entropy, exists only in the post-Newtonian approximation: it is drawn for the star
    in balance at the same central density, in its minimum and behind a barrier. With ``terms`` also each part of it,
    with ``post_newtonian`` the locus in that approximation. Where the methods do not cover the scenario the chart is
    empty and says so.
    """
    onset, star = outcome.workings.stability.onset_without_pairs, outcome.workings.present
    density = Axis("Central density", "g / cm3", "log")
    if onset is None or star is None:
        said = {"alt": f"Binding energy: {words.NOT_COVERED}.", "notes": (words.NOT_COVERED,)}
        return Chart("energy", "Binding energy", density, Axis("Energy", "erg"), **said)
    body = outcome.workings.matter.body
    trial = equilibrium_at_density(body, star.density)
    barrier = _barrier(body, trial) if outcome.workings.stability.settles else None
    rho = np.geomspace(_BELOW * star.density, _highest(onset, barrier), POINTS)
    parts = energy_terms(body, trial, rho)
    depth = abs(float(onset.energy))
    marks = [
        Line("locus", "equilibria", rho, _locus(body, rho), 0),
        Line("own", "at its entropy (post-Newtonian)", rho, parts["total"], 1),
        Rule("zero", "", "y", 0.0),
        Point("onset", _onset_label(outcome), float(onset.density), float(onset.energy), "onset"),
    ]
    if post_newtonian:
        approximate = equilibrium_at_density(body, rho).energy
        marks.append(Line("locus_pn", "equilibria (post-Newtonian)", rho, approximate, 6, 1.2))
    top, bottom = max(0.6 * depth, 1.6 * barrier[1] if barrier else 0.0), _DEEPEST * depth
    if terms:
        marks += _term_lines(rho, parts)
        top = 1.5 * max(np.max(np.abs(values)) for values in parts.values())
        bottom = -top
    if barrier:
        marks.append(Point("barrier", "barrier", *barrier, "unstable"))
    marks.append(Point("star", outcome.scenario.label, float(star.density), float(star.energy), "present"))
    energy = Axis("Energy", "erg", "symlog", (bottom, top), linear_width=depth)
    notes = ("Locus and points in full relativity, the curve at fixed entropy post-Newtonian; no pairs.",)
    sources = (words.RELATIVITY_SOURCE, *words.energy_source(outcome.scenario).split("; "))
    alt = _alt(outcome, star, onset)
    return Chart("energy", "Binding energy", density, energy, tuple(marks), alt, notes, sources)


def _onset_label(outcome):
    stability = outcome.workings.stability
    paired = stability.onset is not stability.onset_without_pairs or outcome.number("onset_temperature") is None
    return "onset without pairs" if paired else "onset of collapse"


def _highest(onset, barrier):
    return max(_ABOVE * onset.density, _BEYOND * barrier[0] if barrier else 0.0)


def _locus(body, rho):
    """Energy of the equilibria in full relativity; NaN beyond the table."""
    # twice the density, so that no star at the table's edge has to be integrated while a slider moves
    known = relativistic.covers_density(body.mass, body.mu, 2.0 * rho)
    energy = np.full_like(rho, np.nan)
    energy[known] = relativistic.at_density(body.mass, body.mu, rho[known]).energy
    return energy


def _barrier(body, star):
    """Density and energy of the maximum beyond the star's own minimum; None when there is none."""
    highest = body.density(_LARGEST_Y)
    if not star.density < highest:
        return None
    rho = np.geomspace(star.density, highest, _SEARCHED)
    own = energy_terms(body, star, rho)["total"]
    inner = np.flatnonzero((own[1:-1] > own[:-2]) & (own[1:-1] >= own[2:])) + 1
    if not inner.size:
        return None
    left, top, right = own[inner[0] + np.array([-1, 0, 1])]
    shift = 0.5 * (left - right) / (left - 2.0 * top + right)  # vertex of the parabola through the three points
    return float(rho[inner[0]] * (rho[1] / rho[0]) ** shift), float(top - 0.25 * (left - right) * shift)


def _term_lines(rho, parts):
    return [
        Line(f"term_{name}", label, rho, parts[name], style, 1.2)
        for style, (name, label) in enumerate(_TERMS.items(), 2)
        if np.any(parts[name] != 0)
    ]


def _alt(outcome, star, onset):
    scenario = outcome.scenario
    settled = outcome.workings.stability.settles
    where = "in the minimum of its own curve" if settled else "at the onset of collapse, where no barrier is left"
    sets_in = "would set in without electron-positron pairs" if "without" in _onset_label(outcome) else "sets in"
    return (
        f"Energy against central density for {numeral(scenario.number('mass'))} Msun: {scenario.label} lies {where}, "
        f"at {numeral(float(star.density))} g/cm3 and {numeral(float(star.energy))} erg; the equilibria have their "
        f"lowest energy, {numeral(float(onset.energy))} erg, at {numeral(float(onset.density))} g/cm3, where collapse "
        f"{sets_in}."
    )
