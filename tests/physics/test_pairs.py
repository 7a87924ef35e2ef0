"""The gas of electrons, positrons, ions and radiation against integrals, limits and thermodynamics."""

import mpmath as mp
import numpy as np
import pytest
from scipy.special import kve

from massdash.constants import K_B, M_U, RADIATION
from massdash.errors import ComputationError, InputError
from massdash.physics import eos, pair_table, pairs
from massdash.physics.composition import mean_molecular_weight

HELIUM, METALS = 0.247, 0.0
MU = float(mean_molecular_weight(HELIUM, METALS))


def integrals(t, eta):
    """Number, pressure and kinetic energy of one kind and their derivatives by ln t and eta, by the double exponential
    rule over momentum in 30 digits; from the textbook integrals (Cox & Giuli 1968, ch. 24), not from a potential."""
    sums = [[mp.mpf(0)] * 3 for _ in range(3)]
    middle, step = mp.sqrt(t * (t + 2)), mp.mpf(1) / 48
    for k in range(-144, 145):
        u = k * step
        p = middle * mp.exp(mp.pi / 2 * mp.sinh(u))
        energy = mp.sqrt(1 + p * p)
        kinetic = p * p / (energy + 1)
        if kinetic / t > eta + 90 or p < middle * mp.mpf(10) ** -14:
            continue  # beyond 30 digits
        filled = 1 / (mp.exp(kinetic / t - eta) + 1)
        weight = step * mp.pi / 2 * mp.cosh(u) * p**3 / mp.pi**2
        slope = filled * (1 - filled)
        for row, what in zip(sums, (mp.mpf(1), p * p / energy / 3, kinetic), strict=True):
            for i, share in enumerate((filled, slope * kinetic / t, slope)):
                row[i] += weight * what * share
    return sums


def reference(t, eta, ions):
    """Net electrons, pressure, energy, entropy of electrons, positrons and radiation plus ions (without the constant),
    and Gamma_1 from (rho/P)(dP/drho)_T + (dP/dT)^2 T/(rho P c_v)."""
    t, eta = mp.mpf(t), mp.mpf(eta)
    other = -eta - 2 / t
    minus, plus = integrals(t, eta), integrals(t, other)
    for row in plus:  # derivatives by ln t and by the electrons' eta
        row[1] += row[2] * 2 / t
        row[2] = -row[2]
    n = [a - b for a, b in zip(minus[0], plus[0], strict=True)]
    gas = [a + b for a, b in zip(minus[1], plus[1], strict=True)]
    heat = [a + b + 2 * c for a, b, c in zip(minus[2], plus[2], plus[0], strict=True)]
    light = mp.pi**2 / 45 * t**4
    pressure = gas[0] + light + ions * n[0] * t
    energy = heat[0] + 3 * light + mp.mpf(1.5) * ions * n[0] * t
    entropy = (heat[0] - 2 * plus[0][0] + gas[0]) / t - eta * minus[0][0] - other * plus[0][0] + 4 * light / t
    entropy += n[0] * ions * (mp.mpf(2.5) + mp.mpf(1.5) * mp.log(t) - mp.log(n[0]))
    turn = n[1] / n[2]
    p_t = gas[1] - gas[2] * turn + 4 * light + ions * n[0] * t
    u_t = heat[1] - heat[2] * turn + 12 * light + mp.mpf(1.5) * ions * n[0] * t
    p_n = gas[2] * n[0] / n[2] + ions * n[0] * t
    return n[0], pressure, energy, entropy, p_n / pressure + p_t**2 / (u_t * pressure)


def states(count):
    """Random states of the whole table where matter is present: t and eta."""
    random = np.random.default_rng(7)
    found = []
    while len(found) < count:
        t, eta = np.exp(random.uniform(np.log(1e-4), np.log(3.37))), random.uniform(-16.0, 6.0)
        if eta + 1.0 / t > 1e-4:  # more electrons than positrons
            found.append((t, eta))
    return found


@pytest.mark.parametrize(("t", "eta"), states(50))
def test_against_integrals_in_thirty_digits(t, eta):
    parts = pairs.composition(HELIUM, METALS)
    ions, electrons = float(parts.ions), float(parts.electrons)
    with mp.workdps(30):
        charge, pressure, energy, entropy, gamma = (float(one) for one in reference(t, eta, ions))
    rho = charge * M_U * pairs.COMPTON_DENSITY / electrons
    temperature = t * pairs.ELECTRON_TEMPERATURE
    state = rho, temperature, HELIUM, METALS
    assert pairs.pressure(*state) == pytest.approx(pressure * pairs.COMPTON_PRESSURE, rel=1e-10)
    assert pairs.internal_energy(*state) == pytest.approx(energy * pairs.COMPTON_PRESSURE / rho, rel=1e-10)
    whole = (entropy / charge + float(parts.constant)) * electrons
    assert pairs.specific_entropy(*state) == pytest.approx(whole, rel=1e-10)
    assert pairs.adiabatic_index(*state) == pytest.approx(gamma, rel=1e-10)


def test_the_series_against_quadrature():
    random = np.random.default_rng(3)
    t, eta = np.exp(random.uniform(-16, np.log(3.4), 400)), random.uniform(-50, 6, 400)
    exact = pair_table.by_quadrature(t, eta)
    deviation = np.abs(pair_table.lookup(t, eta) / exact - 1.0).max(axis=1)
    assert np.all(deviation < [1e-13, 1e-12, 1e-12, 1e-11, 1e-11, 1e-10])
    assert np.all(pair_table.table().errors < [1e-13, 1e-12, 1e-12, 1e-11, 1e-11, 1e-10])


@pytest.mark.parametrize("temperature", [1e3, 1e5, 1e7, 1e8])
def test_cold_limit_is_the_ideal_gas(temperature):
    """At fixed gas fraction: the pressure to (kT/m_e c^2)^(3/2), which is degeneracy; all else to kT/m_e c^2."""
    beta, t = 0.01, temperature / pairs.ELECTRON_TEMPERATURE
    rho = eos.density(temperature, beta, MU)
    state = rho, temperature, HELIUM, METALS
    assert pairs.pressure(*state) == pytest.approx(eos.pressure(rho, temperature, MU), rel=1e-5 * t**1.5 + 1e-14)
    assert pairs.gas_fraction(*state) == pytest.approx(beta, rel=1e-3 * t**1.5 + 1e-13)
    assert pairs.internal_energy(*state) == pytest.approx(
        eos.internal_energy(rho, temperature, MU), rel=4 * beta * t + 1e-14
    )
    ideal = eos.specific_entropy(rho, temperature, HELIUM, METALS)
    assert pairs.specific_entropy(*state) == pytest.approx(ideal, abs=4 * t + 1e-12)
    assert pairs.adiabatic_index_excess(*state) == pytest.approx(eos.adiabatic_index_excess(beta), rel=1.4 * t + 1e-12)
    assert pairs.grad_ad(*state) == pytest.approx(eos.grad_ad(beta), rel=1e-2 * t + 1e-13)


def test_electrons_lose_stiffness_in_proportion_to_temperature():
    """Electrons with the specific heat 3/2 + 15/4 t lower Gamma_1 - 4/3 = beta/9 (3 - c_v) by 5/2 t times their share
    of the gas pressure; leading order in beta and t."""
    beta, temperature = 1e-5, 1e6
    t = temperature / pairs.ELECTRON_TEMPERATURE
    rho = eos.density(temperature, beta, MU)
    ratio = pairs.adiabatic_index_excess(rho, temperature, HELIUM, METALS) / eos.adiabatic_index_excess(beta)
    share = float(pairs.composition(HELIUM, METALS).electrons) * MU
    assert (1.0 - ratio) / t == pytest.approx(2.5 * share, rel=2e-3)


def test_few_pairs_follow_the_law_of_mass_action():
    """n_- n_+ = (t K_2(1/t)/pi^2)^2 where nothing is degenerate."""
    rho, temperature = 1.0, 2.5e8
    t = temperature / pairs.ELECTRON_TEMPERATURE
    found = pairs.matter(rho, temperature, HELIUM, METALS)
    product = (t * kve(2, 1.0 / t) / np.pi**2) ** 2 * np.exp(-2.0 / t)
    assert found.positrons * (found.charge + found.positrons) == pytest.approx(product, rel=1e-4)
    assert pairs.positrons_per_electron(rho, temperature, HELIUM, METALS) == found.positrons / found.charge


def test_hot_limit_is_eleven_quarters_of_radiation():
    """u/(a T^4) = 11/4 - 5/(4 pi^2 t^2) + ... from the expansion of the massive Fermi gas in 1/t; gas 7/11 of P."""
    for temperature in (1e10, 2e10):
        t = temperature / pairs.ELECTRON_TEMPERATURE
        u = pairs.internal_energy(1e3, temperature, HELIUM, METALS) * 1e3
        expected = 2.75 - 5.0 / (4.0 * np.pi**2 * t**2)
        assert u / (RADIATION * temperature**4) == pytest.approx(expected, abs=0.1 * t**-4)
    assert pairs.gas_fraction(1e3, 2e10, HELIUM, METALS) == pytest.approx(7 / 11, rel=0.01)
    assert pairs.adiabatic_index(1e3, 2e10, HELIUM, METALS) == pytest.approx(4 / 3, abs=0.01)


def grid():
    random = np.random.default_rng(11)
    temperature = 10 ** random.uniform(5, 10.3, 400)
    return eos.density(temperature, random.uniform(1e-4, 0.7, 400), MU), temperature


def test_maxwell_relations_to_rounding():
    """rho (du/drho)_T = u + P - T (dP/dT)_rho per volume, whose two sides come from different derivatives."""
    found = pairs.matter(*grid(), HELIUM, METALS)
    lost = found.energy_n - (found.energy + found.pressure - found.pressure_t)
    assert np.max(np.abs(lost) / found.energy) < 1e-13


def test_entropy_is_the_integral_of_heat():
    """T ds = du + P d(1/rho) along both directions, by central differences."""
    rho, temperature = grid()
    found, step = pairs.matter(rho, temperature, HELIUM, METALS), 1e-4
    heat = temperature * K_B / M_U

    def slope(name, up, down):
        values = [getattr(pairs, name)(*point, HELIUM, METALS) for point in (up, down)]
        return (values[0] - values[1]) / (2.0 * np.sinh(step))

    warm = (rho, temperature * np.exp(step)), (rho, temperature * np.exp(-step))
    dense = (rho * np.exp(step), temperature), (rho * np.exp(-step), temperature)
    specific = found.energy * pairs.COMPTON_PRESSURE / rho
    assert heat * slope("specific_entropy", *warm) == pytest.approx(slope("internal_energy", *warm), rel=1e-6)
    work = found.pressure * pairs.COMPTON_PRESSURE / rho
    gained = slope("internal_energy", *dense) - work
    assert np.max(np.abs(heat * slope("specific_entropy", *dense) - gained) / specific) < 1e-6


def test_gamma_has_all_its_digits():
    """Gamma_1 - 4/3 without cancellation agrees with the plain formula."""
    found = pairs.matter(*grid(), HELIUM, METALS)
    plain = (found.pressure_n + found.heating * found.pressure_t) / found.pressure
    assert np.max(np.abs(plain - 4 / 3 - found.excess)) < 1e-13


def test_pairs_soften_the_gas_below_four_thirds():
    """The band of instability: soft near 1e9 K, stiff again when pairs are relativistic."""
    temperature = np.array([3e8, 1e9, 2e9, 8e9])
    excess = pairs.adiabatic_index_excess(eos.density(temperature, 0.05, MU), temperature, HELIUM, METALS)
    assert np.array_equal(excess > 0, [True, False, False, True])


def test_charge_is_that_of_the_matter():
    rho, temperature = grid()
    found = pairs.matter(rho, temperature, HELIUM, METALS)
    electrons = float(pairs.composition(HELIUM, METALS).electrons)
    assert found.charge == pytest.approx(rho * electrons / (M_U * pairs.COMPTON_DENSITY), rel=1e-11)


def test_pure_hydrogen_and_pure_helium_have_the_entropy_of_the_ideal_gas():
    for helium in (0.0, 1.0):
        got = pairs.specific_entropy(1e-9, 1e5, helium, 0.0)
        assert got == pytest.approx(eos.specific_entropy(1e-9, 1e5, helium, 0.0), abs=1e-4)


@pytest.mark.parametrize(
    ("rho", "temperature"), [(1e7, 1e8), (1.0, 1e11), (1e-8, 1e10), (1e-30, 1e9)], ids=["dense", "hot", "thin", "empty"]
)
def test_states_out_of_range_are_refused(rho, temperature):
    with pytest.raises(ComputationError, match="outside the range of the electron-positron gas"):
        pairs.matter(rho, temperature, HELIUM, METALS)


@pytest.mark.parametrize(("rho", "temperature", "name"), [(np.nan, 1e8, "density"), (1.0, -1.0, "temperature")])
def test_bad_numbers_are_refused(rho, temperature, name):
    with pytest.raises(InputError, match=f"{name}: .* is not allowed"):
        pairs.matter(rho, temperature, HELIUM, METALS)
