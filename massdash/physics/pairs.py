"""Ions, electrons, positrons and radiation in equilibrium: pressure, energy, entropy and their derivatives.

Electrons and positrons are exact ideal Fermi gases (``pair_table``), in equilibrium with the radiation, so that
eta_+ = -eta_- - 2 m_e c^2/kT; charge neutrality n_- - n_+ = rho Y_e/m_u fixes eta_-. Ions are a Maxwell-Boltzmann gas.
The rest energy of the electrons that neutralise the ions belongs to rho; that of created pairs to the internal energy.
Metals count with their electrons only, as in ``composition``.

Range: T up to 2.0e10 K with no lowest temperature, electrons up to eta = 6, and down to one electron of the matter for
a million pairs; isentropes of stars of 1e2..1e8 solar masses stay far inside. The fast formulas of ``eos`` agree below
1e7 K but for terms of the order of kT/(m_e c^2) in the gas: electrons lose stiffness slowly, long before there are
pairs, which lowers Gamma_1 - 4/3 by 0.2 per cent at 1e7 K and by 4 per cent at 2e8 K. Pairs themselves begin to count
at 4e8 K.

Functions take and return arrays in cgs; ``Fluid`` holds the units of the electron that ``pair_table`` uses.
"""

from dataclasses import dataclass, fields

import numpy as np
from scipy.special import xlogy

from massdash.constants import HBAR, K_B, M_E, M_U, C
from massdash.errors import ComputationError, refuse
from massdash.physics import pair_table
from massdash.physics.composition import electrons_per_baryon, hydrogen

ELECTRON_TEMPERATURE = M_E * C**2 / K_B  # K
COMPTON_DENSITY = (M_E * C / HBAR) ** 3  # cm-3
COMPTON_PRESSURE = COMPTON_DENSITY * M_E * C**2  # erg cm-3
_RADIATION = np.pi**2 / 45.0  # pressure of radiation over t^4
_FEWEST = 1e-6  # electrons of the matter per pair; below, their number would be a difference without digits
_NEGLIGIBLE = 90.0  # positrons are left out where they are e^-90 of the electrons

# exact derivatives: after a step of this size what is left is its square
_MOST, _TOLERANCE = 80, 1e-8


@dataclass(frozen=True, eq=False)
class Composition:
    """Arrays of one shape: ``electrons`` per baryon, ``ions`` per electron, and ``constant``, the entropy of the ions
    per electron [k_B] less ions (5/2 + 3/2 ln t - ln n_e)."""

    electrons: np.ndarray
    ions: np.ndarray
    constant: np.ndarray

    def take(self, chosen):
        return Composition(*(getattr(self, f.name)[chosen] for f in fields(self)))

    @property
    def heaviness(self):
        """Rest energy of matter per electron [m_e c^2]."""
        return M_U / (M_E * self.electrons)


def composition(helium, metals):
    """The Composition of fully ionised gas of these mass fractions; arrays broadcast."""
    helium, metals = np.broadcast_arrays(np.asarray(helium, float), np.asarray(metals, float))
    electrons = electrons_per_baryon(helium, metals)
    ions, constant = 0.0, 0.0
    for abundance, weight, mass in ((hydrogen(helium, metals), 2.0, M_U), (helium / 4.0, 1.0, 4.0 * M_U)):
        share = np.maximum(abundance, 0.0) / electrons  # what helium and metals leave may miss 0 by a bit
        constant = constant + share * np.log(weight * (mass / (2.0 * np.pi * M_E)) ** 1.5) - xlogy(share, share)
        ions = ions + share
    return Composition(electrons, ions, constant)


@dataclass(frozen=True, eq=False)
class Fluid:
    """Matter in units of the electron; arrays of one shape. ``t``; ``charge`` electrons less positrons, ``positrons``
    [(m_e c/hbar)^3]; ``pressure``, ``energy`` (internal), ``trace`` energy - 3 pressure without cancellation
    [m_e c^2 (m_e c/hbar)^3]; ``entropy`` [k_B (m_e c/hbar)^3]. Names with ``_t`` and ``_n`` are derivatives by ln t at
    fixed charge and by ln charge at fixed t; ``eta`` is the electrons' chemical potential."""

    t: np.ndarray
    charge: np.ndarray
    positrons: np.ndarray
    pressure: np.ndarray
    energy: np.ndarray
    trace: np.ndarray
    entropy: np.ndarray
    pressure_t: np.ndarray
    energy_t: np.ndarray
    trace_t: np.ndarray
    pressure_n: np.ndarray
    energy_n: np.ndarray
    trace_n: np.ndarray
    eta_t: np.ndarray
    eta_n: np.ndarray

    @property
    def heating(self):
        """Gamma_3 - 1 = (d ln T/d ln rho) at constant entropy."""
        return self.pressure_t / self.energy_t

    @property
    def excess(self):
        """Gamma_1 - 4/3 without loss of digits.

        With D = u - 3P the first law du = (u + P) d ln rho reads 3 dP = (4P + D) d ln rho - dD, so that
        Gamma_1 - 4/3 = (D - dD/d ln rho)/(3P); D vanishes for radiation.
        """
        return (self.trace - self.trace_n - self.heating * self.trace_t) / (3.0 * self.pressure)

    @property
    def gas_fraction(self):
        """1 - P_rad/P; pairs count as gas."""
        gas = self.pressure - _RADIATION * self.t**4
        return gas / self.pressure


# ------------------------------------------------------------------------------------------------ two kinds of fermion
def fugacities(t, net):
    """(eta_-, eta_+, n) where e^eta_- - e^eta_+ = ``net``, and n = d eta_-/d ln net.

    ``net`` is the number of electrons less positrons over the thermal one, were the gas not degenerate, so that its
    logarithm is nearly that of the density; no digits are lost where pairs are few or where they are many.
    """
    half, both = net / 2.0, np.exp(-2.0 / t)
    root = np.sqrt(half**2 + both)
    eta = np.log(half + root)
    return eta, -2.0 / t - eta, half / root


def _kinds(t, eta, other, source):
    """Electrons and positrons, each (3, 3, ...): number, pressure and kinetic energy, and for each the value and its
    derivatives by ln t and by the electrons' eta. Positrons are 0 where they are negligible."""
    some = eta - other < _NEGLIGIBLE
    hot = t[some]
    all_t = np.append(t, hot)
    p, p_t, p_e, p_tt, p_te, p_ee = source(all_t, np.append(eta, other[some]))
    number = p_e / all_t, (p_te - p_e) / all_t, p_ee / all_t
    found = np.array([number, (p, p_t, p_e), (p_t - p, p_tt - p_t, p_te - p_e)])
    positrons = np.zeros((3, 3, *t.shape))
    value, by_t, by_e = found[:, :, t.size :].transpose(1, 0, 2)
    positrons[:, :, some] = np.stack([value, by_t + by_e * (2.0 / hot), -by_e], axis=1)
    return found[:, :, : t.size].reshape(3, 3, *t.shape), positrons


def fluid(t, net, ions, constant, source=pair_table.lookup):
    """The Fluid at t = kT/(m_e c^2) and ``net`` (see ``fugacities``); all arrays of one shape.

    ``ions`` and ``constant`` as in Composition; ``source`` is ``pair_table.lookup`` or ``pair_table.by_quadrature``.
    """
    eta, other, _ = fugacities(t, net)
    (number, pressure, kinetic), extra = _kinds(t, eta, other, source)
    charge = number - extra[0]
    energy = kinetic + extra[2] + 2.0 * extra[0]
    entropy = (kinetic[0] + pressure[0] + extra[2, 0] + extra[1, 0]) / t - eta * number[0] - other * extra[0, 0]
    trace = kinetic - 3.0 * pressure + (extra[2] - 3.0 * extra[1]) + 2.0 * extra[0]
    pressure = pressure + extra[1]
    n = charge[0]
    turn = charge[1] / charge[2]  # -(d eta/d ln t) at fixed charge
    thermal, radiation = ions * n * t, _RADIATION * t**4
    at_fixed_charge = [q[1] - q[2] * turn for q in (pressure, energy, trace)]
    by_charge = [q[2] * n / charge[2] for q in (pressure, energy, trace)]
    return Fluid(
        t=t,
        charge=n,
        positrons=extra[0, 0],
        pressure=pressure[0] + thermal + radiation,
        energy=energy[0] + 1.5 * thermal + 3.0 * radiation,
        trace=trace[0] - 1.5 * thermal,
        entropy=entropy + n * (ions * (2.5 + 1.5 * np.log(t) - np.log(n)) + constant) + 4.0 * radiation / t,
        pressure_t=at_fixed_charge[0] + thermal + 4.0 * radiation,
        energy_t=at_fixed_charge[1] + 1.5 * thermal + 12.0 * radiation,
        trace_t=at_fixed_charge[2] - 1.5 * thermal,
        pressure_n=by_charge[0] + thermal,
        energy_n=by_charge[1] + 1.5 * thermal,
        trace_n=by_charge[2] - 1.5 * thermal,
        eta_t=-turn,
        eta_n=n / charge[2],
    )


def net_step(fluid, net, move_t, move_n):
    """How far ln ``net`` moves when ln t of the Fluid moves by ``move_t`` and ln charge by ``move_n``."""
    half, both = net / 2.0, np.exp(-2.0 / fluid.t)
    root = np.sqrt(half**2 + both)
    eta_t_at_net = both / (half + root) / (fluid.t * root)
    return ((fluid.eta_t - eta_t_at_net) * move_t + fluid.eta_n * move_n) * root / half


def net_of_density(t, charge, source=pair_table.lookup):
    """``net`` where electrons less positrons number ``charge`` [(m_e c/hbar)^3]; Newton's method for its logarithm.

    Raises ComputationError outside the range of the table.
    """
    top = pair_table.table().densest
    _demand(pair_table.table().covers(t, top))
    _demand(charge > _FEWEST * source(t, np.maximum(-1.0 / t, -700.0))[2] / t)
    target = np.log(charge)
    u = target + 0.5 * np.log(2.0) + 1.5 * np.log(np.pi / t)  # non-degenerate, non-relativistic
    for _ in range(_MOST):
        eta, other, slope = fugacities(t, np.exp(u))
        bounded = np.minimum(eta, top)
        electrons, positrons = _kinds(t, bounded, other, source)
        number = electrons[0] - positrons[0]
        missing = np.log(number[0]) - target
        _demand((eta <= top) | (missing >= 0))
        move = np.clip(missing * number[0] / (number[2] * slope), -2.0, 2.0)
        u = u - move
        if np.max(np.abs(move), initial=0.0) < _TOLERANCE:
            return np.exp(u)
    raise ComputationError("electron-positron pairs: no chemical potential found for a density")


def _demand(inside):
    if not np.all(inside):
        raise ComputationError(
            "a state lies outside the range of the electron-positron gas: temperatures up to 2.0e10 K, electrons up to "
            "moderate degeneracy (eta = 6), and no more than 1e6 pairs for each electron of the matter"
        )


# ------------------------------------------------------------------------------------------------ in cgs
def matter(rho, temperature, helium, metals, source=pair_table.lookup):
    """The Fluid of ``rho`` [g cm-3] and ``temperature`` [K]; arrays broadcast. ComputationError outside the table."""
    rho, temperature, helium, metals = np.broadcast_arrays(
        *(np.asarray(one, float) for one in (rho, temperature, helium, metals))
    )
    for name, value in (("density", rho), ("temperature", temperature)):
        good = np.isfinite(value) & (value > 0)
        if not np.all(good):
            raise refuse(name, value[~good].flat[0], "a positive finite number")
    parts = composition(helium, metals)
    t = temperature / ELECTRON_TEMPERATURE
    net = net_of_density(t, rho * parts.electrons / (M_U * COMPTON_DENSITY), source)
    return fluid(t, net, parts.ions, parts.constant, source)


def pressure(rho, temperature, helium, metals):
    """Total pressure [dyn cm-2]."""
    return matter(rho, temperature, helium, metals).pressure * COMPTON_PRESSURE


def internal_energy(rho, temperature, helium, metals):
    """Specific internal energy [erg g-1], with the rest energy of created pairs."""
    return matter(rho, temperature, helium, metals).energy * COMPTON_PRESSURE / rho


def specific_entropy(rho, temperature, helium, metals):
    """Entropy per baryon [k_B per m_u], on the scale of ``eos.specific_entropy``."""
    return matter(rho, temperature, helium, metals).entropy * COMPTON_DENSITY * M_U / rho


def adiabatic_index_excess(rho, temperature, helium, metals):
    """Gamma_1 - 4/3, negative where pairs soften the gas; no digits lost."""
    return matter(rho, temperature, helium, metals).excess


def adiabatic_index(rho, temperature, helium, metals):
    """Gamma_1 = (d ln P/d ln rho) at constant entropy."""
    return 4.0 / 3.0 + adiabatic_index_excess(rho, temperature, helium, metals)


def grad_ad(rho, temperature, helium, metals):
    """(d ln T/d ln P) at constant entropy."""
    found = matter(rho, temperature, helium, metals)
    return found.heating / (4.0 / 3.0 + found.excess)


def gas_fraction(rho, temperature, helium, metals):
    """1 - P_rad/P, where P_rad is that of photons alone: pairs count as gas. 7/11 when T >> m_e c^2/k."""
    return matter(rho, temperature, helium, metals).gas_fraction


def positrons_per_electron(rho, temperature, helium, metals):
    """Positrons over the electrons that neutralise the ions."""
    found = matter(rho, temperature, helium, metals)
    return found.positrons / found.charge
