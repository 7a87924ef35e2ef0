"""The onset of collapse with electron-positron pairs as a formula.

At each central temperature there is one star, of given composition, whose lowest pulsation mode has no frequency; the
shipped table (data/builders/pair_onset.py writes it) holds it as a series in temperature, helium and metals. Hotter
onsets belong to lighter stars down to ``least_mass``, where pairs soften the star just enough; beyond that temperature
the gas grows stiff again and the root means no onset. Without spin and background; ``pair_stars`` has those, by direct
integration. Arguments and results in cgs, vectorised.

The coordinate of temperature is asinh((t^(1/2) - t_0^(1/2))/width): in t^(1/2) cold stars are regular, and the
stretch resolves the narrow range around 7e8 K where pairs take over.
"""

from dataclasses import dataclass
from functools import cache
from importlib.resources import files

import numpy as np
from numpy.polynomial import chebyshev

from massdash.constants import M_SUN, C, G
from massdash.errors import ComputationError
from massdash.physics import family, pairs
from massdash.physics.composition import hydrogen_of_weight, mean_molecular_weight
from massdash.physics.series import polynomials

NAMES = ("density", "rest_mass", "compactness", "energy", "stiffness")
HOTTEST = 2.6e9  # K, just beyond the onset of the lightest stars
MOST_METALS = 0.1
_MIDDLE = np.sqrt(7e8 / pairs.ELECTRON_TEMPERATURE)
_WIDTH = 0.15 * _MIDDLE
_LOW, _HIGH = np.arcsinh((np.sqrt(np.array([0.0, HOTTEST]) / pairs.ELECTRON_TEMPERATURE) - _MIDDLE) / _WIDTH)
_GRID = np.linspace(np.log(1e-5), np.log(np.sqrt(HOTTEST / pairs.ELECTRON_TEMPERATURE)), 500)  # ln t^(1/2)
_BLOCK, _MOST, _TOLERANCE = 512, 60, 1e-9


@dataclass(frozen=True, eq=False)
class Table:
    """The series: ``coefficients`` (names, i, j, k) over temperature, weight and metals; ``errors``
    (names,) the measured largest deviations: relative, of the energy in M_sun c^2, of the stiffness over t^(1/2)."""

    coefficients: np.ndarray
    errors: np.ndarray


@cache
def table():
    """The shipped table."""
    with (files("massdash") / "data" / "pair_onset.npz").open("rb") as file, np.load(file) as stored:
        return Table(stored["coefficients"], stored["errors"])


# ------------------------------------------------------------------------------------------------ coordinates
def coordinate(root):
    """-1..1 for t^(1/2) from 0 to that of HOTTEST."""
    return (2.0 * np.arcsinh((root - _MIDDLE) / _WIDTH) - (_LOW + _HIGH)) / (_HIGH - _LOW)


def root_of(coordinate):
    """t^(1/2); inverse of the above."""
    return _MIDDLE + _WIDTH * np.sinh((_LOW + _HIGH) / 2.0 + (_HIGH - _LOW) / 2.0 * coordinate)


def _slopes(log_root):
    """First and second derivative of ``coordinate`` by ln t^(1/2)."""
    root = np.exp(log_root)
    far = (root - _MIDDLE) / _WIDTH
    first = 2.0 / (_HIGH - _LOW) / _WIDTH / np.sqrt(1.0 + far**2) * root
    return first, first * (1.0 - far / (1.0 + far**2) * root / _WIDTH)


def weight_coordinate(helium, metals):
    """-1..1 from no helium to no hydrogen, linear in the logarithm of the mean molecular weight, by which the onset
    is nearly a power law."""
    low, high = mean_molecular_weight(0.0, metals), mean_molecular_weight(1.0 - metals, metals)
    return 2.0 * np.log(mean_molecular_weight(helium, metals) / low) / np.log(high / low) - 1.0


def helium_of(coordinate, metals):
    """Mass fraction of helium; inverse of the above."""
    low, high = mean_molecular_weight(0.0, metals), mean_molecular_weight(1.0 - metals, metals)
    mu = low * (high / low) ** ((coordinate + 1.0) / 2.0)
    return 1.0 - metals - hydrogen_of_weight(mu, metals)


def composition_basis(helium, metals):
    """Chebyshev polynomials (j, N) of the weight and (k, N) of metals."""
    j, k = table().coefficients.shape[2:]
    return polynomials(weight_coordinate(helium, metals), j), polynomials(2.0 * metals / MOST_METALS - 1.0, k)


@cache
def _packed():
    """The coefficients with the first two derivatives of the rest mass by the coordinate, (names + 2, i, j, k)."""
    c = table().coefficients
    slopes = np.zeros((2, *c.shape[1:]))
    for k in (1, 2):
        slopes[k - 1, :-k] = chebyshev.chebder(c[NAMES.index("rest_mass")], k, axis=0)
    return np.concatenate([c, slopes])


@cache
def _grid_basis():
    """Chebyshev polynomials (i, grid) at the grid of temperatures."""
    return polynomials(coordinate(np.exp(_GRID)), table().coefficients.shape[1])


class _Curves:
    """The onsets of N compositions as series in temperature."""

    def __init__(self, helium, metals):
        if not np.all((helium >= 0) & (metals >= 0) & (metals <= MOST_METALS) & (helium + metals <= 1.0 + 1e-12)):
            raise ComputationError("the table of onsets covers metals up to 0.1 and mass fractions that add up to 1")
        by_weight, by_metals = composition_basis(helium, metals)
        found = np.einsum("qijk,jn,kn->qin", _packed(), by_weight, by_metals, optimize=True)
        self._all, mass = found[: len(NAMES)], NAMES.index("rest_mass")
        self._mass = found[[mass, -2, -1]]
        self.on_grid = _grid_basis().T @ self._mass[0] - 2.0 * _GRID[:, None]  # ln(M0/M_sun)

    def values(self, log_root):
        """The quantities of data/builders/pair_onset.py (names, N) at ln t^(1/2) of shape (N,)."""
        return self._sum(self._all, log_root)

    @staticmethod
    def _sum(coefficients, log_root):
        basis = polynomials(coordinate(np.exp(log_root)), coefficients.shape[1])
        return np.einsum("qin,in->qn", coefficients, basis)

    def log_mass(self, log_root):
        """ln(M0/M_sun) and its first two derivatives by ln t^(1/2), each (N,)."""
        value, by_x, by_xx = self._sum(self._mass, log_root)
        first, second = _slopes(log_root)
        return value - 2.0 * log_root, by_x * first - 2.0, by_xx * first**2 + by_x * second

    def turn(self):
        """ln t^(1/2) where the rest mass is least, by Newton's method from the grid."""
        log_root = _GRID[np.argmin(self.on_grid, axis=0)]
        for _ in range(_MOST):
            _, slope, curvature = self.log_mass(log_root)
            move = np.clip(slope / curvature, -0.01, 0.01)
            log_root = np.minimum(log_root - move, _GRID[-1])
            if np.max(np.abs(move), initial=0.0) < _TOLERANCE:
                return log_root
        raise ComputationError("the lightest star with an onset was not found")

    def root_of_mass(self, log_mass):
        """ln t^(1/2) of the onset of stars of given ln(M0/M_sun), by Newton's method from the colder side."""
        if not np.all(log_mass >= self.log_mass(self.turn())[0]):
            raise ComputationError(
                "no onset of collapse: with electron-positron pairs so light a star never becomes soft enough"
            )
        heavier = self.on_grid >= log_mass
        log_root = _GRID[np.maximum(np.argmin(heavier, axis=0) - 1, 0)]
        for _ in range(_MOST):
            value, slope, _ = self.log_mass(log_root)
            move = np.clip((value - log_mass) / slope, -0.5, 0.5)
            log_root = log_root - move
            if np.max(np.abs(move), initial=0.0) < _TOLERANCE:
                return log_root
        raise ComputationError("no onset of collapse was found for this mass")


# ------------------------------------------------------------------------------------------------ for users
def _flat(*arrays):
    arrays = np.broadcast_arrays(*(np.asarray(one, float) for one in arrays))
    return [np.atleast_1d(one).ravel() for one in arrays], arrays[0].shape


def least_mass(helium, metals):
    """Rest mass [g] of the lightest star that meets an onset of collapse."""
    (helium, metals), shape = _flat(helium, metals)
    curves = _Curves(helium, metals)
    return (np.exp(curves.log_mass(curves.turn())[0]) * M_SUN).reshape(shape)


def maximum_mass(helium, metals, temperature):
    """Rest mass [g] of the star that meets the onset of collapse at just ``temperature`` [K].

    ComputationError above the onset of the lightest star, where heavier ones are unstable already.
    """
    (helium, metals, temperature), shape = _flat(helium, metals, temperature)
    curves = _Curves(helium, metals)
    log_root = np.log(temperature / pairs.ELECTRON_TEMPERATURE) / 2.0
    if not np.all(log_root <= curves.turn()):
        raise ComputationError("with pairs no star is stable up to this temperature and unstable beyond it")
    return (np.exp(curves.log_mass(log_root)[0]) * M_SUN).reshape(shape)


def onset(rest_mass, helium, metals):
    """The family.Star of ``rest_mass`` [g] at the onset of collapse; ComputationError below ``least_mass``.

    ``beta`` is ``pairs.gas_fraction`` at the centre. ``stiffness`` equals ``critical``; where it is not positive the
    star would collapse in Newtonian gravity too.
    """
    (rest_mass, helium, metals), shape = _flat(rest_mass, helium, metals)
    parts = [slice(start, start + _BLOCK) for start in range(0, rest_mass.size, _BLOCK)]
    found = np.concatenate([_onset_values(rest_mass[p], helium[p], metals[p]) for p in parts], axis=1)
    star = _star(*found, rest_mass, helium, metals)
    return family.Star(**{name: value.reshape(shape) for name, value in star.items()})


def _onset_values(rest_mass, helium, metals):
    curves = _Curves(helium, metals)
    log_root = curves.root_of_mass(np.log(rest_mass / M_SUN))
    return np.vstack([log_root, curves.values(log_root)])


def _star(log_root, density, _, compactness, energy, stiffness, rest_mass, helium, metals):
    root = np.exp(log_root)
    rho, temperature = np.exp(density + 7.0 * log_root), root**2 * pairs.ELECTRON_TEMPERATURE
    centre = pairs.matter(rho, temperature, helium, metals)
    whole = centre.charge * pairs.composition(helium, metals).heaviness + centre.energy
    mass, compactness = rest_mass + energy * M_SUN, np.exp(compactness) * root
    return {
        "beta": centre.gas_fraction,
        "sigma": centre.pressure / whole,
        "temperature": temperature,
        "density": rho,
        "rest_mass": rest_mass,
        "gravitational_mass": mass,
        "radius": G * mass / (C**2 * compactness),
        "energy": energy * M_SUN * C**2,
        "compactness": compactness,
        "frequency_squared": np.zeros_like(root),
        "stiffness": stiffness * root,
        "critical": stiffness * root,
    }
