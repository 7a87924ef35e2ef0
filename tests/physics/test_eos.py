"""Gas and radiation. Sources: section 4 of the project's check values (computed), closed forms, thermodynamics."""

import numpy as np
import pytest
from slopes import first

from massdash.constants import K_B, M_E, M_U, RADIATION, H
from massdash.physics import eos
from massdash.physics.composition import mean_molecular_weight

BETAS = np.concatenate([np.geomspace(1e-9, 0.1, 9), np.linspace(0.2, 1.0, 9)])
#: Density, temperature, helium, metals: from almost pure radiation to almost pure gas.
MATTER = [(1e-6, 2e8, 0.247, 0.0), (4.0, 2.1e8, 0.247, 0.0), (1e-3, 1e7, 0.0, 0.1), (10.0, 1e8, 0.9, 0.1)]
MATTER += [(1e3, 1e7, 1, 0)]


@pytest.mark.parametrize(
    ("beta", "gamma"), [(0.1, 1.350228310502), (0.2, 1.367676767677), (0.5, 1.425925925926), (0.8, 1.511111111111)]
)
def test_gamma_1(beta, gamma):
    assert eos.adiabatic_index(beta) == pytest.approx(gamma, abs=6e-13)


def test_gamma_1_in_its_other_form():
    other = BETAS + 2 * (4 - 3 * BETAS) ** 2 / (3 * (8 - 7 * BETAS))
    assert eos.adiabatic_index(BETAS) == pytest.approx(other, rel=4e-15)


@pytest.mark.parametrize("of", [eos.adiabatic_index, eos.gamma_2, eos.gamma_3])
def test_limits_of_pure_radiation_and_pure_gas(of):
    assert of(0.0) == pytest.approx(4 / 3, rel=1e-15)
    assert of(1.0) == pytest.approx(5 / 3, rel=1e-15)


def test_excess_over_four_thirds():
    assert eos.adiabatic_index_excess(0.01) == pytest.approx(1.66876839e-3, rel=2e-9)
    assert eos.adiabatic_index_excess(0.1) == pytest.approx(0.0168949772, rel=2e-9)
    assert eos.adiabatic_index_excess(1e-12) == pytest.approx(1e-12 / 6, rel=1e-12)
    series = BETAS[:4] / 6 + BETAS[:4] ** 2 / 48
    assert eos.adiabatic_index_excess(BETAS[:4]) == pytest.approx(series, rel=1e-9)


def test_other_exponents_at_one_half():
    assert eos.gamma_2(0.5) == pytest.approx(1.35087719, abs=5e-9)
    assert eos.gamma_3(0.5) == pytest.approx(1.37037037, abs=5e-9)


def test_exponents_belong_together():
    assert (eos.gamma_2(BETAS) - 1) / eos.gamma_2(BETAS) == pytest.approx(eos.grad_ad(BETAS), rel=1e-13)
    assert eos.grad_ad(BETAS) * eos.adiabatic_index(BETAS) == pytest.approx(eos.gamma_3(BETAS) - 1, rel=1e-13)


@pytest.mark.parametrize(("rho", "temperature", "helium", "metals"), MATTER)
def test_first_law(rho, temperature, helium, metals):
    """du = T ds - P d(1/rho), by temperature and by density."""
    mu = mean_molecular_weight(helium, metals)

    def heat_along(path):
        return K_B / M_U * temperature * first(lambda t: eos.specific_entropy(*path(t), helium, metals), 0.0)

    def energy_along(path):
        return first(lambda t: eos.internal_energy(*path(t), mu), 0.0)

    def heated(t):
        return rho, temperature * np.exp(t)

    def pressed(t):
        return rho * np.exp(t), temperature

    assert energy_along(heated) == pytest.approx(heat_along(heated), rel=1e-9)
    work = eos.pressure(rho, temperature, mu) / rho
    assert heat_along(pressed) == pytest.approx(energy_along(pressed) - work, rel=1e-9)


@pytest.mark.parametrize(("rho", "temperature", "helium", "metals"), MATTER)
def test_isentrope_keeps_the_entropy(rho, temperature, helium, metals):
    mu = mean_molecular_weight(helium, metals)
    beta = eos.gas_fraction(rho, temperature, mu)
    ratio = np.geomspace(1e-6, 1e6, 25)
    z = eos.isentrope((1 - beta) / beta, ratio)
    moved = np.cbrt(3 * K_B * rho * ratio * z / (RADIATION * mu * M_U))  # without 1 - beta, small where gas prevails
    before = eos.specific_entropy(rho, temperature, helium, metals)
    assert eos.specific_entropy(rho * ratio, moved, helium, metals) == pytest.approx(before, rel=2e-13)


@pytest.mark.parametrize("beta", [1e-3, 0.0228, 0.3, 0.8, 0.99])
def test_gammas_are_slopes_along_the_isentrope(beta):
    def on_isentrope(t):
        z = eos.isentrope((1 - beta) / beta, np.exp(t))
        return eos.temperature(np.exp(t), 1 / (1 + z), 0.59)

    def log_pressure(t):
        return np.log(eos.pressure(np.exp(t), on_isentrope(t), 0.59))

    assert first(log_pressure, 0.0) == pytest.approx(eos.adiabatic_index(beta), rel=1e-9)
    assert first(lambda t: np.log(on_isentrope(t)), 0.0) == pytest.approx(eos.gamma_3(beta) - 1, rel=1e-9)


def test_density_temperature_and_gas_fraction_are_inverses():
    beta = np.array([1e-6, 0.02, 0.5, 0.999])[:, None]
    temperature = np.array([1e6, 1e8, 1e9])
    rho = eos.density(temperature, beta, 0.6)
    assert rho.shape == (4, 3)
    assert eos.gas_fraction(rho, temperature, 0.6) == pytest.approx(np.broadcast_to(beta, (4, 3)), rel=1e-14)
    assert eos.temperature(rho, beta, 0.6) == pytest.approx(np.broadcast_to(temperature, (4, 3)), rel=1e-14)


def test_radiation_entropy_is_the_radiations_part_of_the_whole():
    rho, temperature = 4.0, 2.1e8
    beta = eos.gas_fraction(rho, temperature, 0.59)
    direct = 4 * eos.radiation_pressure(temperature) * M_U / (rho * temperature * K_B)
    assert eos.radiation_entropy(beta, 0.59) == pytest.approx(direct, rel=1e-13)


@pytest.mark.parametrize(
    ("helium", "particles"),
    [
        (0.0, [(1.0, 2, M_U), (1.0, 2, M_E)]),
        (1.0, [(0.25, 1, 4 * M_U), (0.5, 2, M_E)]),
        (0.4, [(0.6, 2, M_U), (0.1, 1, 4 * M_U), (0.8, 2, M_E)]),
    ],
)
def test_entropy_of_gas(helium, particles):
    """Sackur-Tetrode written out (any textbook): 2.5 + ln(g/(n lambda^3)) for each particle."""
    rho, temperature = 1e-4, 1e5
    gas = 0.0
    for number, weight, mass in particles:
        wavelength = H / np.sqrt(2 * np.pi * mass * K_B * temperature)
        gas += number * (2.5 + np.log(weight / (rho / M_U * number * wavelength**3)))
    mu = mean_molecular_weight(helium, 0.0)
    radiation = eos.radiation_entropy(eos.gas_fraction(rho, temperature, mu), mu)
    assert eos.specific_entropy(rho, temperature, helium, 0.0) == pytest.approx(gas + radiation, rel=1e-12)


def test_entropy_where_a_kind_of_particle_is_all_but_absent():
    """n ln n goes to nothing with n: traces, none at all, and what rounding leaves below none."""
    arguments = 4.0, 2.1e8
    none = eos.specific_entropy(*arguments, 0.0, 0.0)
    assert eos.specific_entropy(*arguments, np.array([5e-324, 2e-309, 1e-30]), 0.0) == pytest.approx(none, rel=1e-14)
    without_hydrogen = eos.specific_entropy(*arguments, 1.0, 0.0)
    assert eos.specific_entropy(*arguments, 1.0 + 2.2e-16, 0.0) == pytest.approx(without_hydrogen, rel=1e-14)
