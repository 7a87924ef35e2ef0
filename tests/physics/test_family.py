"""The formula of the isentropic family against direct integration, and its scaling."""

import numpy as np
import pytest

from massdash.constants import K_B, M_U, C, G
from massdash.data.builders import family as builder
from massdash.errors import InputError
from massdash.physics import eos, family

RANDOM = np.random.default_rng(7)
COUNT = 400


def anywhere(count=COUNT):
    """Random stars of the whole box, small sigma as often as large ones."""
    beta = np.exp(RANDOM.uniform(*np.log(family.table().beta), count))
    large = RANDOM.uniform(0.0, family.table().sigma[1], count)
    return beta, np.where(np.arange(count) % 2, large, np.exp(RANDOM.uniform(np.log(1e-7), np.log(0.05), count)))


def test_box_covers_what_is_wanted():
    table = family.table()
    assert table.beta[0] <= 3e-4 < 0.27 <= table.beta[1]
    assert table.sigma[0] <= 1e-7 < 0.05 <= table.sigma[1]
    assert list(table.covers(np.array([2e-4, 1e-4, 0.5, 0.5, np.nan]), np.array([1e-7, 0.01, 0.0, 0.06, 0.01]))) == [
        True,
        *[False] * 4,
    ]


def test_table_is_right_anywhere_in_the_box():
    """Errors on the scales of the two that cross zero: binding (v - v_rest)/sigma against beta + sigma, the frequency
    against 6.6 beta + 17.5 sigma; the others relative. Twice the nodes and functions that the table was built with."""
    beta, sigma = anywhere()
    exact = family.direct(beta, sigma, tolerance=1e-14, panels=16, basis=28)
    error = np.abs(family.lookup(beta, sigma, family.NAMES) - exact) / builder.scales(beta, sigma, exact)
    worst = dict(zip(family.NAMES, error.max(axis=1), strict=True))
    assert max(worst.values()) < 1e-8
    assert max(worst["mass"], worst["rest_mass"], worst["radius"]) < 1e-12
    assert np.all(error.max(axis=1) <= 4.0 * family.table().errors + 1e-14)  # what is stored is true


def test_inverse_table_is_right_anywhere_in_the_box():
    beta, sigma = anywhere()
    x, y = builder.proxies(beta, sigma, family.lookup(beta, sigma, ("rest_mass",))[0])
    inverse = family.table().inverse
    assert np.all(inverse.covers(x, y))
    exact = family.central_theta(beta, sigma) / sigma / x**2
    assert np.max(np.abs(inverse(x, y)[0] / exact - 1.0)) <= 4.0 * family.table().inverse_error < 1e-11


@pytest.mark.slow
def test_builder_gives_the_shipped_table():
    rebuilt = builder.stars()
    np.testing.assert_allclose(rebuilt.coefficients, family.table().stars.coefficients, atol=1e-11)
    np.testing.assert_allclose(builder.inverse(rebuilt).coefficients, family.table().inverse.coefficients, atol=1e-11)


def test_slopes_are_those_of_the_values():
    beta, sigma = anywhere(50)
    names = ("rest_mass", "frequency_squared")
    beta, sigma = np.clip(beta, 3e-4, 0.6), np.clip(sigma, 1e-5, 0.045)
    found = family.lookup(beta, sigma, names, derivatives=True).reshape(3, 2, -1)
    np.testing.assert_array_equal(found[0], family.lookup(beta, sigma, names))
    step = 1e-4
    by_beta = family.lookup(beta * (1 + step), sigma, names) - family.lookup(beta * (1 - step), sigma, names)
    by_sigma = family.lookup(beta, sigma * (1 + step), names) - family.lookup(beta, sigma * (1 - step), names)
    np.testing.assert_allclose(found[1], by_beta / (2 * step * beta), rtol=1e-5, atol=1e-4)
    np.testing.assert_allclose(found[2], by_sigma / (2 * step * sigma), rtol=1e-5, atol=1e-4)


def test_outside_the_box_stars_are_integrated():
    beta, sigma = np.array([1e-4, 0.02, 0.9, 0.3]), np.array([1e-5, 0.08, 0.01, 0.02])
    found = family.values(beta, sigma)
    np.testing.assert_allclose(found[:, 3], family.lookup(beta[3:], sigma[3:], family.NAMES)[:, 0], rtol=1e-15)
    np.testing.assert_allclose(found[:, :3], family.direct(beta[:3], sigma[:3], basis=16), rtol=1e-8)


@pytest.mark.parametrize(
    ("inside", "outside"),
    [((0.1, 0.05), (0.1, 0.0500001)), ((0.7, 0.01), (0.7000001, 0.01)), ((2e-4, 1e-3), (1.9999999e-4, 1e-3))],
)
def test_no_step_at_the_edge_of_the_box(inside, outside):
    beta, sigma = np.array([inside, outside]).T
    assert list(family.table().covers(beta, sigma)) == [True, False]
    found = family.values(beta, sigma, derivatives=True)
    scale = np.abs(found[:, 0]) + np.repeat([0.0, 1.0, 1.0], len(family.NAMES))
    assert np.all(np.abs(found[:, 1] - found[:, 0]) <= 1e-5 * scale)


def test_stars_are_those_of_direct_integration_in_cgs():
    beta, sigma, mu = np.array([0.02, 0.3]), np.array([1e-3, 0.03]), np.array([0.59, 1.3])
    star = family.stars(beta, sigma, mu)
    mass, rest, radius, _, square, stiffness, response = family.direct(beta, sigma)
    # from temperature and density, which are given back, by the equation of state alone
    rho, temperature = star.density, star.temperature
    np.testing.assert_allclose(eos.gas_fraction(rho, temperature, mu), beta, rtol=1e-12)
    energy = rho * C**2 + rho * eos.internal_energy(rho, temperature, mu)
    np.testing.assert_allclose(eos.pressure(rho, temperature, mu) / energy, sigma, rtol=1e-12)
    length = np.sqrt(sigma * C**4 / (np.pi * G * energy))
    unit = 4.0 * np.pi * length**3 * energy / C**2
    np.testing.assert_allclose(star.radius, radius * length, rtol=1e-11)
    np.testing.assert_allclose(star.gravitational_mass, unit * mass, rtol=1e-11)
    np.testing.assert_allclose(star.rest_mass, unit * rest, rtol=1e-11)
    np.testing.assert_allclose(star.energy, (star.gravitational_mass - star.rest_mass) * C**2, rtol=1e-8)
    np.testing.assert_allclose(star.compactness, G * star.gravitational_mass / (star.radius * C**2), rtol=1e-11)
    frequency = square * G * star.gravitational_mass / star.radius**3
    np.testing.assert_allclose(star.frequency_squared, frequency, rtol=1e-7)
    np.testing.assert_allclose(star.stiffness, stiffness * beta, rtol=1e-10)
    np.testing.assert_allclose(star.critical, stiffness * beta - response * square, rtol=1e-8)


def test_everything_scales_with_the_mean_molecular_weight():
    """M mu^2 and T/mu depend on beta and sigma alone, rho/mu^4 too."""
    light, heavy = family.stars(0.05, 0.002, 0.5), family.stars(0.05, 0.002, 1.0)
    assert light.rest_mass == pytest.approx(4.0 * heavy.rest_mass, rel=1e-14)
    assert light.temperature == pytest.approx(heavy.temperature / 2.0, rel=1e-14)
    assert light.density == pytest.approx(heavy.density / 16.0, rel=1e-14)
    assert light.radius == pytest.approx(4.0 * heavy.radius, rel=1e-14)
    assert light.frequency_squared == pytest.approx(heavy.frequency_squared / 16.0, rel=1e-13)
    assert light.margin == pytest.approx(heavy.margin, rel=1e-14)


def test_theta_and_sigma_belong_together():
    beta, sigma = anywhere(20)
    theta = family.central_theta(beta, sigma)
    np.testing.assert_allclose(family.sigma_of_theta(beta, theta), sigma, rtol=1e-14)
    star = family.stars(beta, sigma, 0.7)
    np.testing.assert_allclose(K_B * star.temperature / (0.7 * M_U * C**2), theta, rtol=1e-13)


def test_support_lowers_what_is_critical_and_raises_the_frequency():
    alone, held = family.stars(0.02, 2e-3, 0.59), family.stars(0.02, 2e-3, 0.59, support=1e-3)
    assert held.critical == pytest.approx(alone.critical - 1e-3, rel=1e-12)
    assert held.radius == alone.radius
    # marginal together: the frequency vanishes where the support makes up for what is missing
    just = family.stars(0.02, 2e-3, 0.59, support=alone.critical - alone.stiffness)
    assert abs(just.frequency_squared) < 1e-12 * abs(alone.frequency_squared)
    assert abs(just.margin) < 1e-12


def test_any_shape():
    beta = np.full((2, 1, 3), 0.1)
    star = family.stars(beta, np.array([[1e-3], [2e-3]]), 0.59)
    assert star.radius.shape == (2, 2, 3)
    assert family.stars(0.1, 1e-3, 0.59).radius.shape == ()
    assert star.radius[1, 0, 2] == pytest.approx(family.stars(0.1, 1e-3, 0.59).radius, rel=1e-14)
    assert family.stars(np.array([]), np.array([]), 0.59).radius.shape == (0,)


@pytest.mark.parametrize(
    ("values", "words"),
    [
        ((0.1, 0.0, 0.59), "sigma: 0 is not allowed; give more than 0"),
        ((0.1, -1e-3, 0.59), "sigma: -0.001 is not allowed"),
        ((0.1, 0.36, 0.59), "sigma: 0.36 is not allowed"),
        ((0.1, np.nan, 0.59), "sigma: nan is not allowed"),
        ((0.0, 1e-3, 0.59), "beta: 0 is not allowed; give more than 0 and less than 1"),
        ((1.0, 1e-3, 0.59), "beta: 1 is not allowed"),
        ((0.1, 1e-3, 0.0), "mean molecular weight: 0 is not allowed; give a positive number"),
    ],
)
def test_refuses_what_no_star_can_be(values, words):
    with pytest.raises(InputError, match=words):
        family.stars(*values)
