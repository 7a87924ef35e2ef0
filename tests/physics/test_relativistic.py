"""Relativistic stars by mass and temperature, density or entropy; the onset by three roads; the largest mass."""

import numpy as np
import pytest
from stellar_matter import isentrope_by_integration

from massdash.constants import M_SUN, C
from massdash.errors import ComputationError, InputError
from massdash.physics import family, relativistic
from massdash.physics.onset import onset_leading
from massdash.physics.polytrope import standard_model
from massdash.physics.post_newtonian import Body

MU = 0.59
MASSES = np.geomspace(1e3, 1e8, 11) * M_SUN


# ------------------------------------------------------------------------------------------------ the onset
@pytest.mark.parametrize(
    ("mass", "temperature", "density", "beta", "inverse_compactness", "specific"),
    [
        # full TOV turning points at fixed entropy, recomputed for this project; five digits are printed
        (9.7467e4, 2.1208e8, 3.9823, 0.022797, 585.976, 1.4587e-3),
        (9.9142e5, 2.1222e7, 1.24687e-3, 0.0072374, 1858.50, 4.5976e-4),
    ],
)
def test_turning_points_of_the_table(mass, temperature, density, beta, inverse_compactness, specific):
    """At its printed mass each onset has the other figures; P/(rho c^2) follows from sigma."""
    star = relativistic.onset(mass * M_SUN, MU)
    pressure = star.sigma / (star.sigma * star.beta / family.central_theta(star.beta, star.sigma))
    assert star.temperature == pytest.approx(temperature, rel=1e-4)
    assert star.density == pytest.approx(density, rel=1e-4)
    assert star.beta == pytest.approx(beta, rel=1e-4)
    assert 1.0 / star.compactness == pytest.approx(inverse_compactness, rel=1e-4)
    assert pressure == pytest.approx(specific, rel=1e-4)


def test_sigma_and_binding_at_the_turning_point():
    """P/(total energy density) 1.45242e-3 in the first row; (M0 - M)/M 1.4632e-6, 2.592e54 erg in the second."""
    first, second = relativistic.onset(np.array([9.7467e4, 9.9142e5]) * M_SUN, MU).sigma, None
    assert first[0] == pytest.approx(1.45242e-3, rel=1e-4)
    second = relativistic.onset(9.9142e5 * M_SUN, MU)
    assert -second.energy / (second.gravitational_mass * C**2) == pytest.approx(1.4632e-6, rel=1e-4)
    assert -second.energy == pytest.approx(2.592e54, rel=3e-4)


@pytest.mark.parametrize("mass", [1e3, 1e5, 1e7])
def test_rest_mass_turns_where_the_frequency_vanishes(mass):
    """The maximum of the rest mass along fixed entropy, through exact structures that know nothing of the table or of
    pulsation, has the central density of omega^2 = 0."""
    star = relativistic.onset(mass * M_SUN, MU)
    nodes = np.polynomial.chebyshev.chebpts1(17)
    half = 0.4
    log_temperature = np.log(star.temperature) + half * nodes
    constant = relativistic.entropy_constant(star.beta, star.temperature)
    rest, gravitational, density, _ = isentrope_by_integration(constant, log_temperature, MU)

    def fitted(values):
        return np.polynomial.Chebyshev.fit(nodes, values, 16, domain=[-1, 1])

    (turning,) = [x.real for x in fitted(rest / rest[0] - 1.0).deriv().roots() if abs(x) < 0.5 and abs(x.imag) < 1e-9]
    assert np.exp(fitted(np.log(density))(turning)) == pytest.approx(star.density, rel=1e-7)
    # both masses turn at one point
    (other,) = [
        x.real
        for x in fitted(gravitational / gravitational[0] - 1.0).deriv().roots()
        if abs(x) < 0.5 and abs(x.imag) < 1e-9
    ]
    assert other == pytest.approx(turning, abs=1e-6)


@pytest.mark.parametrize("mass", [1e3, 1e5, 1e7])
def test_first_law_along_fixed_entropy(mass):
    """dM/dM0 = (1 - 2GM/(Rc^2))^(1/2), away from the turning point."""
    star = relativistic.onset(mass * M_SUN, MU)
    constant = relativistic.entropy_constant(star.beta, star.temperature)
    nodes = np.polynomial.chebyshev.chebpts1(17)
    for factor in (0.3, 3.0):
        log_temperature = np.log(factor * star.temperature) + 0.3 * nodes
        rest, gravitational, _, compactness = isentrope_by_integration(constant, log_temperature, MU)
        slopes = [
            np.polynomial.Chebyshev.fit(nodes, values / rest[0], 16, domain=[-1, 1]).deriv()(0.0)
            for values in (gravitational, rest)
        ]
        middle = np.polynomial.Chebyshev.fit(nodes, compactness, 16, domain=[-1, 1])(0.0)
        assert slopes[0] / slopes[1] == pytest.approx(np.sqrt(1.0 - 2.0 * middle), rel=1e-7)


def test_turning_point_is_the_onset_of_its_own_mass():
    onset = relativistic.onset(MASSES, MU)
    start = relativistic.along_entropy(onset, MU, onset.temperature * np.geomspace(0.1, 3.0, MASSES.size))
    turning = relativistic.turning_point(start, MU)
    np.testing.assert_allclose(turning.density, onset.density, rtol=1e-9)
    np.testing.assert_allclose(turning.rest_mass, MASSES, rtol=1e-12)
    assert np.all(np.abs(turning.margin) < 1e-11)


def test_large_stars_are_post_newtonian():
    """T_onset = T_PN (1 - 1.13 beta): derived for this project from full structures."""
    star = relativistic.onset(MASSES[5:], MU)
    leading = onset_leading(Body(MASSES[5:], MU))
    shortfall = (1.0 - star.temperature / leading.temperature) / star.beta
    assert shortfall[-1] == pytest.approx(1.13, abs=0.01)
    assert np.all(np.abs(np.diff(shortfall)) < 0.1)
    np.testing.assert_allclose(star.radius / leading.radius, 1.0 + 0.36 * star.beta, atol=0.2 * star.beta.max())


def test_weak_gravity_is_the_standard_model():
    """Without gravity's help and with little gas: R from P_c = 11.0507 G M^2/R^4 and the Eddington quartic."""
    star = relativistic.at_temperature(1e8 * M_SUN, MU, 1e2)
    sphere = standard_model()
    assert star.compactness == pytest.approx(4.0 * star.sigma * sphere.mass / sphere.radius, rel=1e-3)
    quartic = (1.0 - star.beta) / star.beta**4
    assert np.sqrt(quartic) * relativistic.EDDINGTON_MASS == pytest.approx(1e8 * MU**2, rel=2e-3)
    assert star.margin == pytest.approx(1.0, abs=1e-3)


# ------------------------------------------------------------------------------------------------ given what is known
def test_star_has_the_mass_and_temperature_it_was_asked_for():
    mass, temperature = np.meshgrid(np.geomspace(1e2, 1e8, 25) * M_SUN, np.geomspace(1e5, 1e8, 13))
    star = relativistic.at_temperature(mass, MU, temperature)
    np.testing.assert_allclose(star.rest_mass, mass, rtol=2e-12)
    np.testing.assert_allclose(star.temperature, temperature, rtol=1e-14)


def test_star_has_the_mass_and_density_it_was_asked_for():
    onset = relativistic.onset(MASSES, MU)
    for factor in (1e-3, 1.0, 5.0):
        star = relativistic.at_density(MASSES, MU, factor * onset.density)
        np.testing.assert_allclose(star.rest_mass, MASSES, rtol=1e-12)
        np.testing.assert_allclose(star.density, factor * onset.density, rtol=1e-12)


def test_star_has_the_mass_and_entropy_it_was_asked_for():
    onset = relativistic.onset(MASSES, MU)
    star = relativistic.at_entropy(0.9999 * MASSES, onset, MU)
    np.testing.assert_allclose(star.rest_mass, 0.9999 * MASSES, rtol=1e-11)
    before, after = (relativistic.entropy_constant(one.beta, one.temperature) for one in (onset, star))
    np.testing.assert_allclose(after, before, rtol=1e-12)
    assert np.all(star.temperature < onset.temperature)
    assert np.all(star.margin > 0)


def test_brief_is_the_star():
    mass, temperature = np.meshgrid(np.geomspace(1e2, 1e8, 70) * M_SUN, np.geomspace(1e6, 1e8, 60))
    star = relativistic.at_temperature(mass, MU, temperature)
    heavy, radius, binding, square = relativistic.brief(mass, MU, temperature)
    np.testing.assert_allclose(heavy, star.gravitational_mass, rtol=1e-12)
    np.testing.assert_allclose(radius, star.radius, rtol=1e-11)
    np.testing.assert_allclose(binding * mass * C**2, star.energy, rtol=1e-9)
    np.testing.assert_allclose(square, star.frequency_squared, rtol=1e-9)


def test_from_mass_and_temperature_within_1e_8_of_integration():
    """Random stars of the box through their mass and temperature, against integration of the same star."""
    random = np.random.default_rng(11)
    beta = np.exp(random.uniform(np.log(3e-4), np.log(0.6), 200))
    sigma = random.uniform(1e-5, 0.05, 200)
    exact = family.direct(beta, sigma, tolerance=1e-14, panels=16, basis=28)
    rest = family.stars(beta, sigma, MU)
    heavy, radius, binding, square = relativistic.brief(rest.rest_mass, MU, rest.temperature)
    fraction = sigma * exact[3] / exact[1]
    np.testing.assert_allclose(heavy / rest.rest_mass, 1.0 + fraction, rtol=1e-10)
    np.testing.assert_allclose(radius, rest.radius, rtol=1e-10)
    assert np.all(np.abs(binding - fraction) < 1e-8 * sigma * (beta + sigma))
    unit = rest.compactness * C**2 / rest.radius**2
    assert np.all(np.abs(square / unit - exact[4]) < 1e-8 * (6.6 * beta + 17.5 * sigma))


def test_maximum_mass_and_onset_are_inverse():
    temperature = np.geomspace(1e6, 5e8, 12)
    for rotation, background in ((0.0, 0.0), (0.005, 0.0), (0.003, 1e-13)):
        most = relativistic.maximum_mass(MU, temperature, rotation, background)
        onset = relativistic.onset(most, MU, rotation, background)
        np.testing.assert_allclose(onset.temperature, temperature, rtol=1e-11)
        assert np.all(np.abs(onset.margin) < 1e-10)


def test_maximum_masses_of_the_table():
    """mu 0.59 at 6e7, 1e8, 1.5e8, 1.8e8, 2e8 K; +-0.3%, from 1 - 1.13 beta."""
    found = relativistic.maximum_mass(MU, np.array([6e7, 1e8, 1.5e8, 1.8e8, 2e8])) / M_SUN
    np.testing.assert_allclose(found, [3.487e5, 2.083e5, 1.383e5, 1.150e5, 1.034e5], rtol=3e-3)


def test_rotation_and_background_hold_a_star_up():
    """Gamma_1 + (2/3) T/|W| + 4.0831 rho_b/rho_c; beta_eff = beta + 24.498 rho_b/rho_c (n = 3, derived)."""
    assert pytest.approx(4.0831, abs=0.5e-4) == relativistic.BACKGROUND_SHIFT
    assert pytest.approx(24.498, abs=1e-3) == 6.0 * relativistic.BACKGROUND_SHIFT
    assert relativistic.support(2.0, 0.003, 1e-3) == pytest.approx(0.002 + relativistic.BACKGROUND_SHIFT * 5e-4)
    plain = relativistic.onset(1e6 * M_SUN, MU)
    turning = relativistic.onset(1e6 * M_SUN, MU, rotation=0.005)
    held = relativistic.onset(1e6 * M_SUN, MU, background=0.005 * plain.density)
    assert turning.temperature > plain.temperature
    assert held.temperature > plain.temperature
    for star, help_ in ((turning, 2.0 / 3.0 * 0.005), (held, 4.0831 * 0.005 * plain.density / held.density)):
        found = family.stars(star.beta, star.sigma, MU)
        assert found.critical - found.stiffness == pytest.approx(help_, rel=1e-4)


# ------------------------------------------------------------------------------------------------ outside the table
def test_outside_the_table_stars_are_integrated():
    """Far beyond the onset, nearly pure gas, nearly pure radiation: mass, temperature and density are as asked for."""
    hot = relativistic.at_temperature(np.array([1e8, 1e5]) * M_SUN, MU, np.array([1e9, 1e8]))
    assert list(family.table().covers(hot.beta, hot.sigma)) == [False, True]
    np.testing.assert_allclose(hot.rest_mass, np.array([1e8, 1e5]) * M_SUN, rtol=1e-10)
    np.testing.assert_allclose(hot.temperature, [1e9, 1e8], rtol=1e-12)
    small = relativistic.at_temperature(20.0 * M_SUN, MU, 3e7)
    assert small.beta > family.table().beta[1]
    assert small.rest_mass == pytest.approx(20.0 * M_SUN, rel=1e-10)
    vast = relativistic.at_density(3e9 * M_SUN, MU, 1e-18)
    assert vast.beta < family.table().beta[0]
    assert vast.rest_mass == pytest.approx(3e9 * M_SUN, rel=1e-10)
    assert relativistic.onset(10.0 * M_SUN, MU).sigma > family.table().sigma[1]


def test_entropy_of_a_star_of_gas():
    star = relativistic.at_temperature(40.0 * M_SUN, MU, 1e7)
    limit = relativistic.turning_point(star, MU)
    again = relativistic.at_entropy(star.rest_mass, limit, MU)
    assert again.temperature == pytest.approx(star.temperature, rel=1e-5)


# ------------------------------------------------------------------------------------------------ what is refused
@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: relativistic.at_temperature(0.0, MU, 1e7), "rest_mass: 0 is not allowed; give a positive, finite"),
        (lambda: relativistic.at_temperature(1e38, MU, np.nan), "temperature: nan is not allowed"),
        (lambda: relativistic.at_density(1e38, -0.5, 1.0), "mu: -0.5 is not allowed"),
        (lambda: relativistic.onset(np.inf, MU), "rest_mass: inf is not allowed"),
        (lambda: relativistic.onset(1e38, MU, rotation=-0.1), "rotation: -0.1 is not allowed; .* not negative"),
        (lambda: relativistic.maximum_mass(MU, -1.0), "temperature: -1 is not allowed"),
        (lambda: relativistic.brief(1e38, MU, 0.0), "temperature: 0 is not allowed"),
    ],
)
def test_values_no_star_has_are_refused(call, words):
    with pytest.raises(InputError, match=words):
        call()


def test_beyond_the_largest_mass_of_an_entropy_there_is_no_star():
    onset = relativistic.onset(1e5 * M_SUN, MU)
    with pytest.raises(ComputationError, match=r"it is 1\.01 times the largest that is allowed"):
        relativistic.at_entropy(1.01e5 * M_SUN, onset, MU)
    with pytest.raises(ComputationError, match="it is nan times"):
        relativistic.at_entropy(np.nan, onset, MU)


def test_star_too_extreme_to_pulsate_says_so():
    with pytest.raises(ComputationError, match=r"radial pulsation: .* too close to the limit of sigma"):
        relativistic.at_density(1e6 * M_SUN, MU, 1e8)


def test_background_that_holds_everything_up():
    with pytest.raises(ComputationError, match="no maximum mass at this temperature: the background holds up"):
        relativistic.maximum_mass(MU, 1e7, background=1e-2)


# ------------------------------------------------------------------------------------------------ arrays
def test_together_is_the_same_as_one_by_one():
    together = relativistic.onset(MASSES, MU, 0.003, 1e-12)
    for k, mass in enumerate(MASSES):
        alone = relativistic.onset(mass, MU, 0.003, 1e-12)
        assert alone.density.shape == ()
        assert alone.density == pytest.approx(together.density[k], rel=1e-11)
        assert relativistic.maximum_mass(MU, alone.temperature, 0.003, 1e-12) == pytest.approx(mass, rel=1e-10)


def test_arguments_broadcast():
    star = relativistic.at_temperature(np.array([1e4, 1e5])[:, None] * M_SUN, np.array([0.5, 0.6, 0.7]), 1e7)
    assert star.radius.shape == (2, 3)
    assert relativistic.brief(np.array([1e4, 1e5])[:, None] * M_SUN, np.array([0.5, 0.6, 0.7]), 1e7).shape == (4, 2, 3)
    assert relativistic.onset(np.array([]), MU).radius.shape == (0,)


def test_weight_that_brings_the_onset():
    mass, temperature = np.geomspace(1e4, 1e6, 5) * M_SUN, 1e8
    weight = relativistic.weight_for(mass, temperature, 1e-3)
    within = (weight > relativistic.LIGHTEST) & np.isfinite(weight)
    assert np.any(within)
    found = relativistic.onset(mass[within], weight[within], 1e-3).temperature
    np.testing.assert_allclose(found, temperature, rtol=1e-10)


def test_weight_where_none_or_any_will_do():
    """One heavy star among others must not spoil their answers."""
    weight = relativistic.weight_for(np.array([1e3, 1e5, 1.4e7]) * M_SUN, np.array([1e7, 2e8, 5.7e8]))
    assert weight[0] == np.inf
    assert 0.5 < weight[1] < 0.7
    assert weight[2] == relativistic.LIGHTEST
