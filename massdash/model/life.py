"""Opacity, luminosity and lifetimes: the stage after the present state."""

from dataclasses import dataclass

import numpy as np

from massdash.constants import L_SUN, M_SUN, YEAR
from massdash.errors import ComputationError
from massdash.model import pairs, words
from massdash.physics import opacity
from massdash.physics.composition import hydrogen_of_weight
from massdash.physics.evolution import EXHAUSTED, contraction_time, mixed_burning_time, nuclear_timescale
from massdash.physics.relativistic import weight_for

_TIMES = ("nuclear_timescale", "contraction_time", "hydrogen_lifetime", "time_to_onset", "lifetime", "assembly_rate")
_CONTRACTION = "binding energy over luminosity, from a wide start, fixed mass"
_MIXED = "fully mixed star at L_Edd (1 - beta), closed form; ends at exhaustion or when rising mu brings the onset"


@dataclass(frozen=True, eq=False)
class Life:
    """Times in s; ``hydrogen_end`` is X where burning stops, None when there is none; ``onset_reached`` says which."""

    contraction: float | None
    burning: float | None
    hydrogen_end: float | None
    onset_reached: bool


def hydrogen_at_onset(body, temperature, metals):
    """Mass fraction X at which a burning star of fixed central temperature meets the onset; negative when never."""
    try:
        weight = weight_for(body.mass, temperature, body.rotation, body.background)
    except ComputationError:
        weight = np.full(np.shape(body.mass), np.inf)  # the background holds up stars of any weight
    return hydrogen_of_weight(weight, metals)


def life(scenario, matter, stability, state, ledger):
    """Opacity, luminosity and times of the present state."""
    kappa = opacity.surface_opacity(matter.hydrogen)
    eddington = opacity.eddington_luminosity(matter.body.mass, kappa)
    ledger.put("opacity", kappa, "electron scattering in the outer layers", words.SCATTERING_SOURCE)
    ledger.put("eddington_luminosity", eddington / L_SUN, "4 pi G M c/opacity", words.SCATTERING_SOURCE)
    if state is None:
        ledger.leave(["central_opacity", "luminosity", *_TIMES], words.NOT_COVERED)
        return None
    central = opacity.central_opacity(state.density, state.temperature, matter.hydrogen)
    luminosity = float(eddington * (1.0 - state.beta))
    ledger.put("central_opacity", central, "fit to Compton scattering", words.COMPTON_SOURCE)
    ledger.put("luminosity", luminosity / L_SUN, "L_Edd (1 - beta)", words.LIFE_SOURCE)
    times = _times(matter, stability, state, luminosity)
    _put_times(matter, stability, times, luminosity, ledger)
    return times


def _times(matter, stability, state, luminosity):
    body = matter.body
    contraction = float(contraction_time(state.energy, luminosity)) if state.energy < 0 else None
    if not stability.settles or matter.hydrogen <= EXHAUSTED:
        return Life(contraction, None, None, not stability.settles)
    if stability.ignites_with_pairs:
        turn = pairs.hydrogen_at_onset(matter, stability.ignition)
    else:
        turn = float(hydrogen_at_onset(body, stability.ignition, matter.metals))
    end = min(max(turn, EXHAUSTED), matter.hydrogen)
    burning = float(mixed_burning_time(matter.hydrogen, end, state.beta))
    return Life(contraction, burning, end, turn > EXHAUSTED)


def _put_times(matter, stability, times, luminosity, ledger):
    nuclear = nuclear_timescale(matter.body.mass, matter.hydrogen, luminosity)
    ledger.put("nuclear_timescale", nuclear / YEAR, "X Q M/L, Q = 6.398e18 erg/g", words.LIFE_SOURCE)
    _put_contraction(matter, times, ledger)
    _put_hydrogen(stability, times, ledger)
    _put_ends(stability, times, ledger)


def _put_contraction(matter, times, ledger):
    if times.contraction is None:
        note = "with this background or spin the star is not bound, so radiation did not bring it here"
        ledger.leave(["contraction_time", "assembly_rate"], note, _CONTRACTION, words.LIFE_SOURCE)
        return
    ledger.put("contraction_time", times.contraction / YEAR, _CONTRACTION, words.LIFE_SOURCE)
    rate = matter.body.mass / M_SUN / (times.contraction / YEAR)
    note = "infall below this rate gathers a star that contracts while it grows"
    ledger.put("assembly_rate", rate, "mass over contraction time", words.LIFE_SOURCE, note=note)


def _put_hydrogen(stability, times, ledger):
    if times.burning is not None:
        how = "until instability sets in at X" if times.onset_reached else "until exhaustion at X"
        note = f"{how} = {times.hydrogen_end:.3g}"
        ledger.put("hydrogen_lifetime", times.burning / YEAR, _MIXED, words.LIFE_SOURCE, note=note)
    else:
        note = "there is no hydrogen to burn" if stability.settles else "never ignites: collapse sets in first"
        ledger.leave("hydrogen_lifetime", note, _MIXED, words.LIFE_SOURCE)


def _put_ends(stability, times, ledger):
    parts = [times.contraction, times.burning if stability.settles else 0.0]
    if None in parts:
        note = "a part of the life has no value" if stability.settles else "the contraction has no value"
        ledger.leave(["time_to_onset", "lifetime"], note)
        return
    total, method = sum(parts) / YEAR, "contraction plus hydrogen burning"
    if times.onset_reached:
        ledger.put("time_to_onset", total, method, words.LIFE_SOURCE)
        ledger.put("lifetime", total, method, words.LIFE_SOURCE)
        return
    ledger.leave("time_to_onset", "not reached before hydrogen is exhausted; later burning is not built in yet")
    ledger.put("lifetime", total, method, words.LIFE_SOURCE, note="helium burning, not built in yet, adds to it")
