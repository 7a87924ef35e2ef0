"""Isentropic stars of ions, electrons, positrons and radiation, as ``barotropes`` describes matter.

What ``barotropes.Isentrope`` does with two numbers needs four here: temperature, density and composition at the centre.
Along the star the entropy per baryon is that of the centre, and the enthalpy per rest mass is given; temperature and
density follow by Newton's method with exact derivatives.
"""

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from massdash.constants import M_U
from massdash.errors import ComputationError
from massdash.physics import pairs
from massdash.physics.barotropes import State

_MOST, _TOLERANCE = 60, 1e-7  # exact derivatives: after a step of this size what is left is its square


@dataclass(frozen=True, eq=False)
class PairIsentrope:
    """N stars: central ``temperature`` [K] and rest-mass ``density`` [g cm-3], ``composition`` (pairs.Composition), all
    (N,). Offers what ``barotropes`` asks for; ``excess`` of its states is negative where pairs soften the gas."""

    temperature: np.ndarray
    density: np.ndarray
    composition: pairs.Composition
    order: float = 4.0

    @classmethod
    def of_entropy(cls, temperature, entropy, composition):
        """The stars of given central temperature [K] and ``entropy`` per baryon [k_B per m_u], all (N,), by Newton's
        method for the density; ComputationError where the entropy belongs to no density in range."""
        t = temperature / pairs.ELECTRON_TEMPERATURE
        radiation = 4.0 * np.pi**2 / 45.0 * t**3 / (entropy / composition.electrons)
        log_charge = np.log(radiation)  # as if radiation alone had entropy
        for _ in range(_MOST):
            charge = np.exp(log_charge)
            net = pairs.net_of_density(t, charge)
            fluid = pairs.fluid(t, net, composition.ions, composition.constant)
            missing = entropy / composition.electrons - fluid.entropy / charge
            slope = -fluid.pressure_t / (charge * t)  # Maxwell: (ds/d ln rho) = -(dP/dT)/rho
            move = np.clip(missing / slope, -1.0, 1.0)
            log_charge = log_charge + move
            if np.max(np.abs(move), initial=0.0) < _TOLERANCE:
                density = np.exp(log_charge) * M_U * pairs.COMPTON_DENSITY / composition.electrons
                return cls(temperature, density, composition)
        raise ComputationError("isentrope with pairs: no density found for an entropy")

    @cached_property
    def _net(self):
        t = self.temperature / pairs.ELECTRON_TEMPERATURE
        return pairs.net_of_density(t, self.density * self.composition.electrons / (M_U * pairs.COMPTON_DENSITY))

    @cached_property
    def centre(self):
        """The Fluid at the centre."""
        return self._fluid(self.temperature / pairs.ELECTRON_TEMPERATURE, self._net)

    def _fluid(self, t, net):
        ions, constant = (np.broadcast_to(one, t.shape) for one in (self.composition.ions, self.composition.constant))
        return pairs.fluid(t, net, ions, constant)

    @cached_property
    def _whole(self):
        """Total energy density at the centre in the units of Fluid."""
        return self.centre.charge * self.composition.heaviness + self.centre.energy

    @property
    def entropy(self):
        """Entropy per baryon [k_B per m_u]."""
        return self.centre.entropy / self.centre.charge * self.composition.electrons

    @property
    def sigma(self):
        return self.centre.pressure / self._whole

    @property
    def energy_density(self):
        """Total energy density at the centre over c^2 [g cm-3]."""
        return self.density * self._whole / (self.centre.charge * self.composition.heaviness)

    @property
    def depth(self):
        return np.log1p(self._specific(self.centre)) / (self.order * self.sigma)

    def _specific(self, fluid):
        """Enthalpy per rest mass less 1."""
        return (fluid.energy + fluid.pressure) / (fluid.charge * self.composition.heaviness)

    def take(self, chosen):
        return PairIsentrope(self.temperature[chosen], self.density[chosen], self.composition.take(chosen))

    def at(self, h):
        fluid = self._find(np.expm1(self.order * self.sigma * h))
        rest = fluid.charge * self.composition.heaviness / self._whole
        internal = fluid.energy / self._whole
        return State(
            energy=rest + internal,
            pressure=fluid.pressure / self.centre.pressure,
            rest=rest,
            internal=internal,
            excess=fluid.excess,
            temperature=fluid.t * pairs.ELECTRON_TEMPERATURE / self.temperature,
        )

    def _find(self, specific):
        """The Fluid of the centre's entropy whose enthalpy per rest mass is 1 + ``specific``."""
        cooler = np.log(specific / self._specific(self.centre))
        log_t = np.log(self.centre.t) + cooler
        log_net = np.log(self._net) + 1.5 * cooler
        entropy = self.centre.entropy / self.centre.charge
        for _ in range(_MOST):
            fluid = self._fluid(np.exp(log_t), np.exp(log_net))
            move_t, move_n = _moves(fluid, np.log(specific / self._specific(fluid)), entropy)
            log_net = log_net + pairs.net_step(fluid, np.exp(log_net), move_t, move_n)
            log_t = log_t + move_t
            if max(np.max(np.abs(move_t), initial=0.0), np.max(np.abs(move_n), initial=0.0)) < _TOLERANCE:
                return self._fluid(np.exp(log_t), np.exp(log_net))
        raise ComputationError("isentrope with pairs: no temperature found for an enthalpy")


def _moves(fluid, missing, entropy):
    """Newton steps of ln t and ln charge towards an enthalpy per particle e^missing times larger and an ``entropy`` per
    electron; both equations in logarithms, steps of at most a factor e."""
    enthalpy = fluid.energy + fluid.pressure
    heat = fluid.t * fluid.entropy
    row = (fluid.energy_t + fluid.pressure_t) / enthalpy, (fluid.energy_n + fluid.pressure_n) / enthalpy - 1.0
    other = fluid.energy_t / heat, (fluid.energy_n - enthalpy) / heat  # T ds = du + P dv
    lacking = np.log(entropy * fluid.charge / fluid.entropy)
    determinant = row[0] * other[1] - row[1] * other[0]
    move_t = (missing * other[1] - row[1] * lacking) / determinant
    move_n = (row[0] * lacking - other[0] * missing) / determinant
    return np.clip(move_t, -1.0, 1.0), np.clip(move_n, -3.0, 3.0)
