"""Stars with pairs: the isentrope against the ideal one and its own first law, the onset by roads that must agree."""

import numpy as np
import pytest

from massdash.constants import K_B, M_SUN, M_U, C
from massdash.errors import ComputationError
from massdash.physics import eos, family, pair_onset, pair_stars, pairs, relativistic
from massdash.physics.barotropes import Isentrope
from massdash.physics.composition import mean_molecular_weight
from massdash.physics.pair_isentrope import PairIsentrope
from massdash.physics.pulsation import pulsation
from massdash.physics.tov import structure

HELIUM, METALS = 0.247, 0.0
MU = float(mean_molecular_weight(HELIUM, METALS))
MIXTURE = pairs.composition(np.full(3, HELIUM), np.zeros(3))


def one_mixture(count):
    return MIXTURE.take(np.zeros(count, int))


def pair_star(temperature, beta):
    temperature = np.atleast_1d(temperature).astype(float)
    return PairIsentrope(temperature, eos.density(temperature, beta, MU), one_mixture(temperature.size))


def weight_of(matter, star):
    """Rest mass and gravitational mass [g]."""
    unit = 4.0 * np.pi * family.length_unit(matter.sigma, matter.energy_density) ** 3 * matter.energy_density
    return unit * star.rest_mass, unit * star.mass


def test_a_cold_star_is_the_ideal_isentrope():
    """What differs is of the order of kT/(m_e c^2) = 1.7e-10 here, in matter, structure and pulsation."""
    beta = np.array([0.003, 0.05, 0.4])
    cold = pair_star(np.ones(3), beta)
    theta = K_B / (MU * M_U * C**2)
    ideal = Isentrope(beta, family.sigma_of_theta(beta, theta))
    h = cold.depth * np.array([[1.0], [0.6], [0.01]])
    got, expected = cold.at(h), ideal.at(h)
    assert cold.depth == pytest.approx(ideal.depth, rel=1e-8)
    for name in ("energy", "pressure", "rest", "internal", "excess", "temperature"):
        assert getattr(got, name) == pytest.approx(getattr(expected, name), rel=1e-8), name
    stars = structure(cold), structure(ideal)
    for name in ("radius", "mass", "binding"):
        assert getattr(stars[0], name) == pytest.approx(getattr(stars[1], name), rel=1e-8), name
    squares = [pulsation(star).frequency_squared for star in stars]
    assert squares[0] == pytest.approx(squares[1], rel=1e-8)


def test_the_difference_grows_in_proportion_to_temperature():
    def difference(temperature):
        matter = pair_star(temperature, 0.01)
        ideal = Isentrope(
            np.array([0.01]), family.sigma_of_theta(np.array([0.01]), K_B * temperature / (MU * M_U * C**2))
        )
        return pulsation(structure(matter)).stiffness[0] / pulsation(structure(ideal)).stiffness[0] - 1.0

    assert difference(1e6) / difference(1e5) == pytest.approx(10.0, rel=1e-3)


def test_entropy_is_uniform_and_pressure_balances_enthalpy():
    """dP/dH = epsilon + P along the star, by differences, across the turning-on of pairs."""
    matter = pair_star(np.array([3e8, 8e8, 4e9]), np.array([0.03, 0.06, 0.3]))
    h, step = matter.depth * np.linspace(0.02, 0.98, 25)[:, None], 1e-4
    here, up, down = matter.at(h), matter.at(h * (1 + step)), matter.at(h * (1 - step))
    slope = (up.pressure - down.pressure) / (2.0 * step * h)
    whole = matter.order * (here.energy + matter.sigma * here.pressure)
    assert slope == pytest.approx(whole, rel=1e-6)
    fluid = matter._find(np.expm1(matter.order * matter.sigma * h))
    entropy = fluid.entropy / fluid.charge * matter.composition.electrons
    assert entropy == pytest.approx(np.broadcast_to(matter.entropy, h.shape), rel=1e-12)
    centre = matter.at(matter.depth[None])
    assert centre.energy == pytest.approx(np.ones((1, 3)), rel=1e-12)
    assert centre.temperature == pytest.approx(np.ones((1, 3)), rel=1e-12)


def test_gamma_is_the_slope_of_the_isentrope():
    matter = pair_star(np.array([8e8]), 0.06)
    h, step = matter.depth * np.linspace(0.1, 0.95, 9)[:, None], 1e-4
    here, up, down = matter.at(h), matter.at(h * (1 + step)), matter.at(h * (1 - step))
    gamma = np.log(up.pressure / down.pressure) / np.log(up.rest / down.rest)
    assert gamma - 4 / 3 == pytest.approx(here.excess, abs=1e-6)


def test_taking_stars_of_a_batch():
    matter = pair_star(np.array([1e8, 5e8, 9e8]), np.array([0.02, 0.04, 0.1]))
    one = matter.take(np.array([2]))
    assert one.sigma == pytest.approx(matter.sigma[2:], rel=1e-13)
    assert one.at(one.depth[None] / 2).pressure == pytest.approx(matter.at(matter.depth[None] / 2).pressure[:, 2:])


def test_star_of_given_entropy():
    matter = pair_star(np.array([1e6, 5e8, 3e9]), np.array([0.01, 0.04, 0.4]))
    again = PairIsentrope.of_entropy(matter.temperature, matter.entropy, matter.composition)
    assert again.density == pytest.approx(matter.density, rel=1e-10)


# ------------------------------------------------------------------------------------------------ the onset
def neighbours(onset, count=9, width=0.02):
    """Stars of the entropy of the onset around it: the barotropes and their structures."""
    centre = PairIsentrope(onset.temperature[None], onset.density[None], one_mixture(1))
    temperature = onset.temperature * np.exp(width * np.cos(np.pi * (np.arange(count) + 0.5) / count))
    mixture = one_mixture(count)
    matter = PairIsentrope.of_entropy(temperature, np.repeat(centre.entropy, count), mixture)
    return matter, structure(matter, tolerance=1e-13)


@pytest.mark.parametrize("mass", [3e3, 2.5e4, 1e6])
def test_turning_point_and_pulsation_agree(mass):
    """At constant entropy the rest mass is largest where the lowest mode has no frequency: density to 1e-7."""
    onset = pair_stars.onset(np.float64(mass * M_SUN), HELIUM, METALS)
    matter, star = neighbours(onset)
    x = np.log(matter.temperature / onset.temperature)
    rest = np.log(weight_of(matter, star)[0] / onset.rest_mass)
    curve = np.polynomial.Chebyshev.fit(x, rest, 8)
    roots = curve.deriv().roots()
    turn = roots[np.argmin(np.abs(roots))].real
    slope = np.polynomial.Chebyshev.fit(x, np.log(matter.density), 8).deriv()(0.0)
    assert abs(turn * slope) < 1e-7
    assert curve.deriv(2)(turn) < 0


def test_first_law_along_constant_entropy():
    """dM/dM0 = (1 - 2GM/(R c^2))^(1/2), away from the turning point."""
    onset = pair_stars.onset(np.float64(1e4 * M_SUN), HELIUM, METALS)
    centre = PairIsentrope(onset.temperature[None], onset.density[None], one_mixture(1))
    temperature = onset.temperature * np.exp(-0.3 + 0.05 * np.cos(np.pi * (np.arange(11) + 0.5) / 11))
    matter = PairIsentrope.of_entropy(temperature, np.repeat(centre.entropy, 11), one_mixture(11))
    star = structure(matter, tolerance=1e-13)
    rest, whole = weight_of(matter, star)
    x = np.log(temperature / onset.temperature)
    fits = [np.polynomial.Chebyshev.fit(x, one / rest[0] - 1.0, 10).deriv() for one in (rest, whole)]
    ratio = fits[1](x[3:8]) / fits[0](x[3:8])
    assert ratio == pytest.approx(np.sqrt(1.0 - 2.0 * star.compactness[3:8]), abs=1e-7)


@pytest.mark.parametrize("metals", [0.0, 0.03])
def test_the_formula_is_direct_integration(metals):
    mass = np.array([400.0, 3e3, 1.5e4, 2.5e4, 6e4, 1e6, 1e8]) * M_SUN
    formula, direct = pair_onset.onset(mass, 0.4, metals), pair_stars.onset(mass, 0.4, metals)
    for name in ("temperature", "density", "radius", "compactness", "beta", "sigma", "gravitational_mass"):
        assert getattr(formula, name) == pytest.approx(getattr(direct, name), rel=3e-8), name
    assert formula.energy / (M_SUN * C**2) == pytest.approx(direct.energy / (M_SUN * C**2), abs=1e-8)
    root = np.sqrt(direct.temperature / pairs.ELECTRON_TEMPERATURE)
    assert formula.stiffness / root == pytest.approx(direct.stiffness / root, abs=1e-8)
    assert np.all(pair_onset.table().errors < 1e-8)
    assert np.max(np.abs(direct.margin)) < 1e-6


def test_cold_onsets_are_those_without_pairs():
    mass = np.array([1e7, 1e8]) * M_SUN
    ratio = pair_onset.onset(mass, HELIUM, METALS).temperature / relativistic.onset(mass, MU).temperature - 1.0
    assert ratio == pytest.approx(np.zeros(2), abs=1e-3)
    assert ratio[0] / ratio[1] == pytest.approx(10.0, rel=0.01)  # in proportion to the temperature


def test_pairs_bring_the_onset_earlier():
    """Own baseline: temperature over that without pairs. A few per cent are the electrons' loss of stiffness; below
    3e4 solar masses pairs take over."""
    mass = np.array([1e3, 3e3, 1e4, 2e4, 3e4, 5e4, 1e5]) * M_SUN
    expected = [0.0739, 0.1660, 0.4311, 0.7284, 0.9020, 0.9483, 0.9722]
    ratio = pair_onset.onset(mass, HELIUM, METALS).temperature / relativistic.onset(mass, MU).temperature
    assert ratio == pytest.approx(expected, abs=6e-5)


def test_collapse_by_pairs_alone():
    """Near the lightest onset relativity hardly matters: the weighted <Gamma_1> is 4/3 within the effect of gravity."""
    least = pair_onset.least_mass(HELIUM, METALS)
    onset = pair_onset.onset(1.05 * least, HELIUM, METALS)
    assert abs(onset.stiffness) < 2e-3
    beyond = pair_stars.stars(1.1 * onset.temperature, 1.3 * onset.density, HELIUM, METALS)
    assert beyond.frequency_squared < 0
    assert beyond.stiffness < 0


def test_light_stars_have_no_onset():
    assert pair_onset.least_mass(HELIUM, METALS) / M_SUN == pytest.approx(244.1, abs=0.1)  # own baseline
    assert pair_onset.least_mass(1.0, METALS) / M_SUN == pytest.approx(50.5, abs=0.1)
    for onset in (pair_onset.onset, pair_stars.onset):
        with pytest.raises(ComputationError, match="never becomes soft enough"):
            onset(200 * M_SUN, HELIUM, METALS)


def test_largest_mass_is_the_inverse_of_the_onset():
    temperature = np.array([1e6, 1.5e8, 8e8, 2e9])
    mass = pair_onset.maximum_mass(HELIUM, METALS, temperature)
    assert pair_onset.onset(mass, HELIUM, METALS).temperature == pytest.approx(temperature, rel=1e-9)
    with pytest.raises(ComputationError, match="no star is stable"):
        pair_onset.maximum_mass(HELIUM, METALS, 2.59e9)


@pytest.mark.parametrize(("helium", "metals"), [(0.5, 0.2), (-0.1, 0.0), (np.nan, 0.0), (0.95, 0.06)])
def test_compositions_out_of_range_are_refused(helium, metals):
    with pytest.raises(ComputationError, match=r"metals up to 0\.1 and mass fractions"):
        pair_onset.onset(1e5 * M_SUN, helium, metals)


def test_star_of_given_mass_and_temperature():
    star = pair_stars.at_temperature(np.array([1e4, 1e5]) * M_SUN, HELIUM, METALS, 1.5e8)
    plain = relativistic.at_temperature(np.array([1e4, 1e5]) * M_SUN, MU, 1.5e8)
    assert star.rest_mass / M_SUN == pytest.approx([1e4, 1e5], rel=1e-9)
    assert star.density == pytest.approx(plain.density, rel=1e-3)
    assert np.all(star.margin < plain.margin)
    one = pair_stars.at_temperature(1e4 * M_SUN, HELIUM, METALS, 1.5e8)
    assert one.density.shape == ()
    assert one.density == pytest.approx(star.density[0], rel=1e-10)


def test_spin_and_background_delay_the_onset():
    mass = np.array([1e4, 1e5, 1e6]) * M_SUN
    still = pair_stars.onset(mass, HELIUM, METALS)
    spinning = pair_stars.onset(mass, HELIUM, METALS, rotation=0.0074)
    assert np.all(spinning.temperature > still.temperature)
    assert spinning.rest_mass == pytest.approx(mass, rel=1e-9)
    needed = spinning.critical + relativistic.support(spinning.density, 0.0074)
    without = pair_stars.stars(spinning.temperature, spinning.density, HELIUM, METALS)
    assert without.critical == pytest.approx(needed, rel=1e-12)
    assert spinning.stiffness == pytest.approx(spinning.critical, rel=1e-7)
    size = 2.0 * spinning.radius / C
    assert spinning.frequency_squared * size**2 == pytest.approx(np.zeros(3), abs=1e-10)
    helped = pair_stars.onset(mass[1:], HELIUM, METALS, background=1e-4)
    assert np.all(helped.temperature > still.temperature[1:])
    assert helped.margin == pytest.approx(np.zeros(2), abs=1e-6)
