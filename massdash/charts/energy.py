"""Binding energy against central density: the star's own curve and the locus of equilibria."""

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Point, Rule
from massdash.model import words
from massdash.numerals import numeral
from massdash.physics.post_newtonian import energy_terms, equilibrium_at_density

POINTS = 240
_BELOW, _ABOVE = 1e-3, 40.0  # the density axis reaches this far below the star and above the onset
_TERMS = {
    "internal": "internal energy",
    "newtonian": "Newtonian gravity",
    "first_order": "first relativistic term",
    "rotation": "rotation",
    "background": "background",
}


def energy_chart(outcome, *, terms=False):
    """The Chart of E(rho_c) at the scenario's mass; with ``terms`` also each part of the energy.

    The star sits in the minimum of its own curve, behind a barrier; where the locus of equilibria has its minimum, the
    barrier is gone. Where the methods do not cover the scenario the chart is empty and says so.
    """
    onset, star = outcome.workings.stability.onset, outcome.workings.present
    density = Axis("Central density", "g / cm3", "log")
    if onset is None or star is None:
        return Chart(
            "energy",
            "Binding energy",
            density,
            Axis("Energy", "erg"),
            alt=words.NOT_COVERED,
            notes=(words.NOT_COVERED,),
        )
    body = outcome.workings.matter.body
    span = (_BELOW * min(star.density, onset.density), _ABOVE * onset.density)
    rho = np.geomspace(*span, POINTS)
    parts = energy_terms(body, star, rho)
    locus = equilibrium_at_density(body, rho).energy
    own = parts["total"]
    barrier = _barrier(rho, own, star)
    reach = max(np.max(np.abs(locus)), abs(float(onset.energy)), barrier[1] if barrier else 0.0)
    energy = Axis("Energy", "erg", "symlog", (-1.3 * reach, 1.3 * reach), linear_width=1e-2 * reach)
    marks = [
        Line("locus", "equilibria", rho, locus, 0),
        Line("own", "at its entropy", rho, own, 1),
        Rule("zero", "", "y", 0.0),
        Point("onset", "onset of collapse", float(onset.density), float(onset.energy), "onset"),
    ]
    if terms:
        marks += _term_lines(rho, parts)
        largest = max(np.max(np.abs(values)) for name, values in parts.items() if name != "total")
        energy = Axis("Energy", "erg", "symlog", (-1.3 * largest, 1.3 * largest), linear_width=1e-2 * reach)
    if barrier:
        marks.append(Point("barrier", "barrier", *barrier, "unstable"))
    marks.append(Point("star", outcome.scenario.label, float(star.density), float(star.energy), "present"))
    notes = ("Post-Newtonian, first order, n = 3 shape, at fixed rest mass.",)
    sources = tuple(words.energy_source(outcome.scenario).split("; "))
    alt = _alt(outcome, star, onset, barrier)
    return Chart("energy", "Binding energy", density, energy, tuple(marks), alt, notes, sources)


def _barrier(rho, own, star):
    """Density and energy of the maximum beyond the star's own minimum; None when there is none in the range."""
    inner = np.flatnonzero((own[1:-1] > own[:-2]) & (own[1:-1] >= own[2:]) & (rho[1:-1] > star.density)) + 1
    return (float(rho[inner[0]]), float(own[inner[0]])) if inner.size else None


def _term_lines(rho, parts):
    return [
        Line(f"term_{name}", label, rho, parts[name], style, 1.2)
        for style, (name, label) in enumerate(_TERMS.items(), 2)
        if np.any(parts[name] != 0)
    ]


def _alt(outcome, star, onset, barrier):
    scenario = outcome.scenario
    where = "in the minimum of its own curve" if barrier else "at the onset of collapse, where no barrier is left"
    return (
        f"Energy against central density for {numeral(scenario.number('mass'))} Msun: {scenario.label} lies {where}, "
        f"at {numeral(float(star.density))} g/cm3 and {numeral(float(star.energy))} erg; the equilibria have their "
        f"lowest energy, {numeral(float(onset.energy))} erg, at {numeral(float(onset.density))} g/cm3, where collapse "
        "sets in."
    )
