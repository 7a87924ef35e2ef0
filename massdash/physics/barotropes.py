"""Matter whose pressure and energy density follow from one variable, as the structure equations take it.

The variable is the logarithmic enthalpy H = int dP/(epsilon + P), 0 at the surface, in which the hydrostatic equation
and the lapse are algebraic (Lindblom 1992, ApJ 398, 569). Every barotrope is a batch of N stars and offers

    ``sigma``   (N,) central pressure over central total energy density,
    ``order``   the n + 1 of its length unit A, A^2 = order sigma c^2/(4 pi G epsilon_c/c^2) (4 for isentropes),
    ``depth``   (N,) H at the centre over order sigma,
    ``at(h)``   the State at h = H/(order sigma), for h of shape (k, N) between 0 and ``depth``,
    ``take(i)`` the batch of the stars ``i`` alone.

Energy densities and rest-mass densities are in units of epsilon_c, pressures in units of P_c.
"""

from dataclasses import dataclass

import numpy as np
from scipy.special import wrightomega

from massdash.errors import ComputationError, refuse
from massdash.physics.eos import adiabatic_index_excess


def demand(name, value, good, allowed):
    """Raise InputError for the first value that is not ``good`` (positively, so that NaN is not)."""
    good = np.asarray(good)
    if not np.all(good):
        raise refuse(name, f"{np.broadcast_to(value, good.shape)[~good].flat[0]:.6g}", allowed)


@dataclass(frozen=True, eq=False)
class State:
    """Matter at given enthalpy, arrays of one shape: ``energy`` epsilon/epsilon_c, ``pressure`` P/P_c, ``rest``
    rho c^2/epsilon_c, ``internal`` their difference energy - rest without cancellation, ``excess`` Gamma_1 - 4/3,
    ``temperature`` T/T_c (NaN where the matter has none)."""

    energy: np.ndarray
    pressure: np.ndarray
    rest: np.ndarray
    internal: np.ndarray
    excess: np.ndarray
    temperature: np.ndarray


@dataclass(frozen=True, eq=False)
class Isentrope:
    """Gas and radiation at uniform entropy, no pairs: two numbers a star, ``beta`` = P_gas/P at the centre and
    ``sigma``.

    Along it 4z + ln z - 1.5 ln T is constant, z = P_rad/P_gas, and with theta = kT/(mu m_u c^2) the enthalpy per rest
    mass is 1 + theta (4z + 5/2), whatever the mean molecular weight.
    """

    beta: np.ndarray
    sigma: np.ndarray
    order: float = 4.0

    def __post_init__(self):
        beta, sigma = self.beta, self.sigma
        demand("beta", beta, (beta > 0) & (beta < 1), "more than 0 and less than 1")
        good = (sigma > 0) & (sigma * (3.0 - 1.5 * beta) < 1)
        demand("sigma", sigma, good, "more than 0 and less than 1/(3 - 1.5 beta)")

    @property
    def z(self):
        """P_rad/P_gas at the centre."""
        return (1.0 - self.beta) / self.beta

    @property
    def theta(self):
        """kT/(mu m_u c^2) at the centre."""
        return self.sigma / (1.0 + self.z - self.sigma * (3.0 * self.z + 1.5))

    @property
    def rest_fraction(self):
        """rho c^2/epsilon at the centre."""
        return 1.0 / (1.0 + self.theta * (3.0 * self.z + 1.5))

    @property
    def depth(self):
        return np.log1p(self.theta * (4.0 * self.z + 2.5)) / (self.order * self.sigma)

    def take(self, chosen):
        return Isentrope(self.beta[chosen], self.sigma[chosen])

    def at(self, h):
        specific = np.expm1(self.order * self.sigma * h)  # enthalpy per rest mass less 1
        z = self._ratio(specific)
        temperature = specific / (self.theta * (4.0 * z + 2.5))
        rest = self.rest_fraction * temperature**3 * self.z / z
        internal = rest * self.theta * temperature * (3.0 * z + 1.5)
        return State(
            energy=rest + internal,
            pressure=rest * self.theta * temperature * (1.0 + z) / self.sigma,
            rest=rest,
            internal=internal,
            excess=adiabatic_index_excess(1.0 / (1.0 + z)),
            temperature=temperature,
        )

    def _ratio(self, specific):
        """z where the enthalpy per rest mass is 1 + ``specific``: Newton's method for ln z, from the temperature that
        pure radiation would have."""
        scaled = np.log(specific / self.theta)
        entropy = 4.0 * self.z + np.log(self.z)
        guess = scaled - np.log(4.0 * self.z + 2.5)  # ln T/T_c if z did not vary
        log_z = np.log(wrightomega(entropy + np.log(4.0) + 1.5 * guess) / 4.0)
        for _ in range(40):
            z = np.exp(log_z)
            value = (4.0 * z + log_z - entropy) / 1.5 + np.log(4.0 * z + 2.5) - scaled
            move = value / ((4.0 * z + 1.0) / 1.5 + 4.0 * z / (4.0 * z + 2.5))
            log_z = log_z - move
            if np.max(np.abs(move), initial=0.0) < 1e-13:
                return np.exp(log_z)
        raise ComputationError("isentrope: no temperature found for an enthalpy")


def _demand_index(polytrope):
    given = polytrope.gamma is not None
    good = polytrope.index > 0 or (polytrope.index == 0 and given)
    demand("index", polytrope.index, good, "a positive number, or 0 when gamma is given")


@dataclass(frozen=True, eq=False)
class EnergyPolytrope:
    """P = K epsilon^(1 + 1/n) (Tooper 1964, ApJ 140, 434); Gamma_1 as for a slow adiabat unless ``gamma`` is given."""

    index: float
    sigma: np.ndarray
    gamma: float | None = None

    def __post_init__(self):
        _demand_index(self)
        demand("sigma", self.sigma, (self.sigma > 0) & np.isfinite(self.sigma), "a positive, finite number")

    @property
    def order(self):
        return self.index + 1.0

    @property
    def depth(self):
        return np.log1p(self.sigma) / self.sigma

    def take(self, chosen):
        return EnergyPolytrope(self.index, self.sigma[chosen], self.gamma)

    def at(self, h):
        theta = np.expm1(self.sigma * h) / self.sigma
        energy, relative = theta**self.index, np.log1p(self.sigma * theta)
        rest = energy * np.exp(-self.index * relative)
        gamma = (1.0 + 1.0 / self.index) * (1.0 + self.sigma * theta) if self.gamma is None else self.gamma + 0.0 * h
        internal = -energy * np.expm1(-self.index * relative)
        return State(energy, energy * theta, rest, internal, gamma - 4.0 / 3.0, np.full_like(theta, np.nan))


@dataclass(frozen=True, eq=False)
class RestPolytrope:
    """P = K rho^(1 + 1/n) with rest-mass density rho and epsilon = rho c^2 + n P (Tooper 1965, ApJ 142, 1541).

    ``sigma`` is P_c/epsilon_c as everywhere here; Tooper's P_c/(rho_c c^2) is sigma/(1 - n sigma).
    """

    index: float
    sigma: np.ndarray
    gamma: float | None = None

    def __post_init__(self):
        _demand_index(self)
        good = (self.sigma > 0) & (self.sigma * self.index < 1)
        demand("sigma", self.sigma, good, "more than 0 and less than 1/n")

    @property
    def order(self):
        return self.index + 1.0

    @property
    def rest_sigma(self):
        """P_c/(rho_c c^2)."""
        return self.sigma / (1.0 - self.index * self.sigma)

    @property
    def depth(self):
        return np.log1p(self.order * self.rest_sigma) / (self.order * self.sigma)

    def take(self, chosen):
        return RestPolytrope(self.index, self.sigma[chosen], self.gamma)

    def at(self, h):
        theta = np.expm1(self.order * self.sigma * h) / (self.order * self.rest_sigma)
        rest = theta**self.index * (1.0 - self.index * self.sigma)
        internal = self.index * self.sigma * theta ** (self.index + 1.0)
        gamma = (1.0 + 1.0 / self.index if self.gamma is None else self.gamma) + 0.0 * h
        pressure = theta ** (self.index + 1.0)
        return State(rest + internal, pressure, rest, internal, gamma - 4.0 / 3.0, np.full_like(theta, np.nan))
