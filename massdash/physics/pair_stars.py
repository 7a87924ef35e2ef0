"""Relativistic stars with electron-positron pairs by direct integration: by rest mass and temperature, and their onset.

The counterpart of ``relativistic`` for matter of ``pairs``; tens of milliseconds a star or a batch of a few. Collapse
may come by pairs alone: where the weighted <Gamma_1> is below 4/3 even Newtonian gravity wins, ``stiffness`` is
negative and a stability margin has no meaning. Light stars have no onset at all, see ``pair_onset.least_mass``.
"""

import numpy as np

from massdash.constants import C
from massdash.errors import ComputationError
from massdash.physics import family, pair_onset, pairs, relativistic
from massdash.physics.composition import mean_molecular_weight
from massdash.physics.pair_isentrope import PairIsentrope
from massdash.physics.pulsation import pulsation
from massdash.physics.tov import structure

_MOST = 40
_STEP = 1e-5  # of difference quotients
_ENOUGH = 1e-6  # after a step of this size what is left is _STEP times smaller
_LONGEST = 0.5  # step of ln T, of ln rho/3
_PAIRS = 6e8  # K


def stars(temperature, density, helium, metals, rotation=0.0, background=0.0):
    """The family.Star of each central temperature [K] and density [g cm-3], arrays of one shape; ``beta`` is
    ``pairs.gas_fraction`` at the centre. ``rotation`` and ``background`` as in ``relativistic``."""
    given = np.broadcast_arrays(
        *(np.asarray(one, float) for one in (temperature, density, helium, metals, rotation, background))
    )
    temperature, density, helium, metals, rotation, background = (np.atleast_1d(one).ravel() for one in given)
    matter = PairIsentrope(temperature, density, pairs.composition(helium, metals))
    found = structure(matter)
    mode = pulsation(found)
    length = family.length_unit(matter.sigma, matter.energy_density)
    unit = 4.0 * np.pi * length**3 * matter.energy_density
    size = found.radius * length
    support = relativistic.support(density, rotation, background)
    values = {
        "beta": matter.centre.gas_fraction,
        "sigma": matter.sigma,
        "temperature": temperature,
        "density": density,
        "rest_mass": unit * found.rest_mass,
        "gravitational_mass": unit * found.mass,
        "radius": size,
        "energy": unit * matter.sigma * found.binding * C**2,
        "compactness": found.compactness,
        "frequency_squared": (mode.frequency_squared[0] + support / mode.response) * found.compactness * C**2 / size**2,
        "stiffness": mode.stiffness,
        "critical": mode.critical - support,
    }
    return family.Star(**{name: value.reshape(given[0].shape) for name, value in values.items()})


def _flat(*arrays):
    """The arrays broadcast, as (N,), and their common shape."""
    arrays = np.broadcast_arrays(*(np.asarray(one, float) for one in arrays))
    return [np.atleast_1d(one).ravel() for one in arrays], arrays[0].shape


def _beside(count, *arrays):
    return [np.tile(one, count) for one in arrays]


def at_temperature(rest_mass, helium, metals, temperature, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] with central ``temperature`` [K]; Newton's method for ln rho."""
    (rest_mass, helium, metals, temperature, rotation, background), shape = _flat(
        rest_mass, helium, metals, temperature, rotation, background
    )
    mu = mean_molecular_weight(helium, metals)
    rho = np.log(relativistic.at_temperature(rest_mass, mu, temperature).density)
    rest = _beside(2, helium, metals, rotation, background)
    for _ in range(_MOST):
        trial = np.concatenate([rho, rho + _STEP])
        here, there = np.log(stars(np.tile(temperature, 2), np.exp(trial), *rest).rest_mass).reshape(2, -1)
        move = (np.log(rest_mass) - here) * _STEP / (there - here)
        rho = rho + np.clip(move, -_LONGEST, _LONGEST)
        if np.max(np.abs(move), initial=0.0) < _ENOUGH:
            return stars(
                *(one.reshape(shape) for one in (temperature, np.exp(rho), helium, metals, rotation, background))
            )
    raise ComputationError("no star with pairs of this mass and temperature was found")


def onset(rest_mass, helium, metals, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] at the onset of collapse by direct integration; Newton's method for ln T and ln rho
    together, from the formula of ``pair_onset``. ComputationError where there is none."""
    given, shape = _flat(rest_mass, helium, metals, rotation, background)
    log_t, log_rho = np.log(_start(*given))
    rest = _beside(3, *given[1:])
    for _ in range(_MOST):
        trial_t, trial_rho = np.tile(log_t, (3, 1)), np.tile(log_rho, (3, 1))
        trial_t[1] += _STEP
        trial_rho[2] += _STEP
        star = stars(np.exp(trial_t.ravel()), np.exp(trial_rho.ravel()), *rest)
        mass = np.log(star.rest_mass.reshape(3, -1) / given[0])
        # both sides on one scale, that of the relativistic term, which never vanishes
        balance = ((star.stiffness - star.critical) / star.sigma).reshape(3, -1)
        move_t, move_rho = _newton(mass, balance)
        cut = np.minimum(1.0, _LONGEST / np.maximum(np.maximum(np.abs(move_t), np.abs(move_rho) / 3.0), 1e-300))
        log_t, log_rho = log_t + cut * move_t, log_rho + cut * move_rho
        if max(np.max(np.abs(move_t), initial=0.0), np.max(np.abs(move_rho), initial=0.0)) < _ENOUGH:
            return stars(*(one.reshape(shape) for one in (np.exp(log_t), np.exp(log_rho), *given[1:])))
    raise ComputationError("no onset of collapse with pairs was found for this mass")


def _newton(*residuals):
    """Steps in ln T and ln rho to the common root of two residuals, each (3, N): here, and one _STEP along either."""
    (a, a_t, a_rho), (b, b_t, b_rho) = ((r[0], (r[1] - r[0]) / _STEP, (r[2] - r[0]) / _STEP) for r in residuals)
    determinant = a_t * b_rho - a_rho * b_t
    return (a_rho * b - a * b_rho) / determinant, (a * b_t - a_t * b) / determinant


def _start(rest_mass, helium, metals, rotation, background):
    """Temperature and density of the onset by formula: with pairs alone, or with spin and background alone if these
    make it hotter, but not far beyond the temperature of pairs, where all onsets gather."""
    bare = pair_onset.onset(rest_mass, helium, metals)
    if not np.any(rotation + background):
        return bare.temperature, bare.density
    helped = relativistic.onset(rest_mass, mean_molecular_weight(helium, metals), rotation, background)
    temperature = np.clip(helped.temperature, bare.temperature, np.maximum(bare.temperature, _PAIRS))
    return temperature, bare.density * (temperature / bare.temperature) ** 3
