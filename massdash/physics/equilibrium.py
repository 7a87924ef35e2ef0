"""One relativistic isentropic star, sought by its rest mass and what else is known of it, with the matter it is of.

Electron-positron pairs are taken into account where the centre would be hotter than 5e8 K without them, or where they
are asked for.
"""

from dataclasses import dataclass

import numpy as np

from massdash.errors import ComputationError
from massdash.physics import eos, pair_stars, pairs, relativistic
from massdash.physics.barotropes import Isentrope
from massdash.physics.composition import mean_molecular_weight
from massdash.physics.family import Star
from massdash.physics.pair_isentrope import PairIsentrope

_MOST, _STEP, _LONGEST, _ENOUGH = 40, 1e-5, 0.5, 1e-8


@dataclass(frozen=True, eq=False)
class Equilibrium:
    """``star`` with arrays of shape (), the barotrope ``matter`` as a batch of one, ``energy_density`` over c^2 at the
    centre [g cm-3], ``entropy`` per baryon [k_B per m_u], mass fractions, and whether ``with_pairs``."""

    star: Star
    matter: object
    energy_density: float
    entropy: float
    helium: float
    metals: float
    with_pairs: bool


def at_temperature(rest_mass, helium, metals, temperature, with_pairs=None):
    """The equilibrium of ``rest_mass`` [g] with central ``temperature`` [K]; ComputationError where there is none."""
    star = relativistic.at_temperature(rest_mass, mean_molecular_weight(helium, metals), temperature)
    if not _wanted(with_pairs, star):
        return _without_pairs(star, helium, metals)
    return _with_pairs(pair_stars.at_temperature(rest_mass, helium, metals, temperature), helium, metals)


def at_density(rest_mass, helium, metals, density, with_pairs=None):
    """The equilibrium of ``rest_mass`` [g] with central rest-mass ``density`` [g cm-3]."""
    star = relativistic.at_density(rest_mass, mean_molecular_weight(helium, metals), density)
    if not _wanted(with_pairs, star):
        return _without_pairs(star, helium, metals)
    return _with_pairs(_paired_at_density(star, rest_mass, helium, metals, density), helium, metals)


def at_onset(rest_mass, helium, metals, with_pairs=None):
    """The equilibrium of ``rest_mass`` [g] whose lowest pulsation mode has no frequency."""
    star = relativistic.onset(rest_mass, mean_molecular_weight(helium, metals))
    if not _wanted(with_pairs, star):
        return _without_pairs(star, helium, metals)
    return _with_pairs(pair_stars.onset(rest_mass, helium, metals), helium, metals)


def _wanted(with_pairs, star):
    return bool(star.temperature > eos.PAIR_TEMPERATURE) if with_pairs is None else with_pairs


def _without_pairs(star, helium, metals):
    matter = Isentrope(np.atleast_1d(star.beta), np.atleast_1d(star.sigma))
    energy_density = float(star.density / matter.rest_fraction[0])
    entropy = float(eos.specific_entropy(star.density, star.temperature, helium, metals))
    return Equilibrium(star, matter, energy_density, entropy, helium, metals, False)


def _with_pairs(star, helium, metals):
    parts = pairs.composition(np.atleast_1d(helium), np.atleast_1d(metals))
    matter = PairIsentrope(np.atleast_1d(star.temperature), np.atleast_1d(star.density), parts)
    return Equilibrium(star, matter, float(matter.energy_density[0]), float(matter.entropy[0]), helium, metals, True)


def _paired_at_density(start, rest_mass, helium, metals, density):
    """Newton's method for ln T from the star without pairs."""
    log_t = np.log(float(start.temperature))
    for _ in range(_MOST):
        found = pair_stars.stars(np.exp([log_t, log_t + _STEP]), density, helium, metals)
        here, there = np.log(found.rest_mass / rest_mass)
        move = -here * _STEP / (there - here)
        log_t += np.clip(move, -_LONGEST, _LONGEST)
        if abs(move) < _ENOUGH:
            return pair_stars.stars(np.exp(log_t), density, helium, metals)
    raise ComputationError("no star with pairs of this mass and central density was found")
