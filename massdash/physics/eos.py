"""Ideal gas of ions and electrons plus radiation, without electron-positron pairs.

Everything follows from beta = P_gas/P (gas over total pressure); exponents are those of Chandrasekhar (1939, ch. II).
All functions take and return arrays in cgs. Pairs, which this file leaves out, matter above about 5e8 K.
"""

import numpy as np
from scipy.special import wrightomega, xlogy

from massdash.constants import HBAR, K_B, M_E, M_U, RADIATION
from massdash.physics.composition import electrons_per_baryon, hydrogen

PAIR_TEMPERATURE = 5e8  # K; above it pairs change the onset of collapse by more than about ten per cent


def gas_pressure(rho, temperature, mu):
    """Pressure of ions and electrons, rho k T/(mu m_u) [dyn cm-2]."""
    return rho * K_B * temperature / (mu * M_U)


def radiation_pressure(temperature):
    """a T^4/3 [dyn cm-2]."""
    return RADIATION / 3.0 * np.asarray(temperature, float) ** 4


def pressure(rho, temperature, mu):
    """Total pressure [dyn cm-2]."""
    return gas_pressure(rho, temperature, mu) + radiation_pressure(temperature)


def internal_energy(rho, temperature, mu):
    """Specific internal energy 3kT/(2 mu m_u) + a T^4/rho [erg g-1]."""
    return 1.5 * K_B * temperature / (mu * M_U) + RADIATION * np.asarray(temperature, float) ** 4 / rho


def gas_fraction(rho, temperature, mu):
    """beta = P_gas/P."""
    return gas_pressure(rho, temperature, mu) / pressure(rho, temperature, mu)


def density(temperature, beta, mu):
    """Density at given temperature and gas fraction [g cm-3]."""
    return RADIATION * np.asarray(temperature, float) ** 3 * mu * M_U * beta / (3.0 * K_B * (1.0 - beta))


def temperature(rho, beta, mu):
    """Temperature at given density and gas fraction [K]."""
    return np.cbrt(3.0 * K_B * rho * (1.0 - beta) / (RADIATION * mu * M_U * beta))


def adiabatic_index_excess(beta):
    """Gamma_1 - 4/3 without loss of digits.

    Gamma_1 = (32 - 24b - 3b^2)/(24 - 21b), hence Gamma_1 - 4/3 = b (4 - 3b)/(24 - 21b) = b/6 + b^2/48 + ...
    """
    beta = np.asarray(beta, float)
    return beta * (4.0 - 3.0 * beta) / (24.0 - 21.0 * beta)


def adiabatic_index(beta):
    """Gamma_1 = (d ln P/d ln rho) at constant entropy, exact in beta."""
    return 4.0 / 3.0 + adiabatic_index_excess(beta)


def gamma_2(beta):
    """Gamma_2, defined by grad_ad = (Gamma_2 - 1)/Gamma_2."""
    beta = np.asarray(beta, float)
    return (32.0 - 24.0 * beta - 3.0 * beta**2) / (24.0 - 18.0 * beta - 3.0 * beta**2)


def gamma_3(beta):
    """Gamma_3 = 1 + (d ln T/d ln rho) at constant entropy."""
    beta = np.asarray(beta, float)
    return (32.0 - 27.0 * beta) / (24.0 - 21.0 * beta)


def grad_ad(beta):
    """Adiabatic temperature gradient (d ln T/d ln P) at constant entropy."""
    beta = np.asarray(beta, float)
    return (8.0 - 6.0 * beta) / (32.0 - 24.0 * beta - 3.0 * beta**2)


def radiation_entropy(beta, mu):
    """Entropy of the radiation, 4(1 - beta)/(mu beta) [k_B per m_u of matter]."""
    return 4.0 * (1.0 - beta) / (mu * beta)


def specific_entropy(rho, temperature, helium, metals):
    """Entropy per baryon of nuclei, electrons and radiation [k_B per m_u].

    Sackur-Tetrode for each kind of particle (spin weights: proton 2, alpha 1, electron 2; non-degenerate), plus
    radiation. Metals count with their electrons only, as in the mean molecular weight, so that
    du = T ds + (P/rho^2) d rho holds exactly with the functions above.
    """
    temperature = np.asarray(temperature, float)
    kinds = (
        (hydrogen(helium, metals), 2.0, M_U),
        (np.asarray(helium, float) / 4.0, 1.0, 4.0 * M_U),
        (electrons_per_baryon(helium, metals), 2.0, M_E),
    )
    thermal = M_U / rho * (K_B * temperature / (2.0 * np.pi * HBAR**2)) ** 1.5
    entropy = 4.0 / 3.0 * RADIATION * temperature**3 * M_U / (rho * K_B)
    for number, weight, mass in kinds:
        number = np.maximum(number, 0.0)  # rounding may leave less than nothing
        entropy = entropy + number * (2.5 + np.log(weight * mass**1.5 * thermal)) - xlogy(number, number)
    return entropy


def isentrope(radiation_to_gas, density_ratio):
    """Ratio z = P_rad/P_gas after moving along an isentrope to ``density_ratio`` times the density.

    Constant entropy means 8z + ln z - ln rho = const (from 4z + ln z - 1.5 ln T = const and rho ~ T^3/z), which the
    Wright omega function solves in closed form: 8z = omega(8 z_0 + ln 8 z_0 + ln(rho/rho_0)).
    """
    start = 8.0 * np.asarray(radiation_to_gas, float)
    return wrightomega(start + np.log(start) + np.log(density_ratio)) / 8.0
