"""Matter of relativistic stars: thermodynamics that must hold whatever the formula, end points, refusals."""

import numpy as np
import pytest

from massdash.errors import InputError
from massdash.physics.barotropes import EnergyPolytrope, Isentrope, RestPolytrope

MATTER = [
    Isentrope(np.array([2e-4, 0.02, 0.3, 0.7, 0.999]), np.array([1e-7, 1e-3, 0.02, 0.05, 0.2])),
    EnergyPolytrope(1.5, np.array([1e-6, 0.1, 0.5])),
    EnergyPolytrope(3.0, np.array([1e-6, 0.1, 0.5])),
    RestPolytrope(1.0, np.array([1e-6, 0.1, 0.5])),
    RestPolytrope(3.0, np.array([1e-6, 0.1, 0.3])),
]
INNER = np.linspace(0.05, 0.95, 7)[:, None]


def slope(function, x, step):
    """Sixth-order central difference."""
    weights = {1: 45.0, 2: -9.0, 3: 1.0}
    return sum(w * (function(x + k * step) - function(x - k * step)) for k, w in weights.items()) / (60.0 * step)


@pytest.mark.parametrize("matter", MATTER, ids=lambda matter: type(matter).__name__)
class TestThermodynamics:
    def test_enthalpy_is_the_integral_of_dp_over_energy_and_pressure(self, matter):
        h = INNER * matter.depth
        state = matter.at(h)
        found = slope(lambda x: matter.at(x).pressure, h, 2e-3 * matter.depth)
        expected = matter.order * (state.energy + matter.sigma * state.pressure)
        np.testing.assert_allclose(found, expected, rtol=1e-9)

    def test_first_law_at_constant_entropy(self, matter):
        h = INNER * matter.depth
        state = matter.at(h)
        step = 2e-3 * matter.depth
        d_energy = slope(lambda x: matter.at(x).internal, h, step)
        d_rest = slope(lambda x: matter.at(x).rest, h, step)
        # d(epsilon) = (epsilon + P) d(rho)/rho; the rest energy drops out on both sides
        expected = (state.internal + matter.sigma * state.pressure) / state.rest * d_rest
        np.testing.assert_allclose(d_energy, expected, rtol=1e-9)

    def test_parts_add_up(self, matter):
        state = matter.at(INNER * matter.depth)
        np.testing.assert_allclose(state.rest + state.internal, state.energy, rtol=1e-14)

    def test_is_one_in_the_centre_and_nothing_at_the_surface(self, matter):
        state = matter.at(matter.depth[None, :])
        np.testing.assert_allclose(state.energy, 1.0, rtol=1e-8)
        np.testing.assert_allclose(state.pressure, 1.0, rtol=1e-8)
        assert np.all(matter.at(1e-8 * matter.depth[None, :]).pressure < 1e-15)

    def test_some_of_the_stars_are_the_same_stars(self, matter):
        chosen = np.array([True, False] * 3)[: matter.sigma.size]
        part, whole = matter.take(chosen), matter.at(0.5 * matter.depth[None, :])
        np.testing.assert_allclose(part.at(0.5 * part.depth[None, :]).energy, whole.energy[:, chosen], rtol=1e-13)


@pytest.mark.parametrize("matter", [MATTER[0], MATTER[3], MATTER[4]], ids=lambda matter: type(matter).__name__)
def test_gamma_is_the_slope_of_pressure_against_rest_mass(matter):
    h, step = INNER * matter.depth, 2e-3 * matter.depth
    pressure = slope(lambda x: np.log(matter.at(x).pressure), h, step)
    rest = slope(lambda x: np.log(matter.at(x).rest), h, step)
    np.testing.assert_allclose(pressure / rest - 4.0 / 3.0, matter.at(h).excess, rtol=1e-7, atol=1e-8)


def test_isentrope_keeps_its_entropy():
    """Sackur-Tetrode and radiation: 4z + ln z - 1.5 ln T is the entropy (times mu, up to a constant)."""
    matter = MATTER[0]
    state = matter.at(INNER * matter.depth)
    gas = state.rest * matter.theta * state.temperature / matter.sigma  # P_gas/P_c
    z = (state.pressure - gas) / gas
    entropy = 4.0 * z + np.log(z) - 1.5 * np.log(state.temperature)
    centre = 4.0 * matter.z + np.log(matter.z)
    np.testing.assert_allclose(entropy, np.broadcast_to(centre, entropy.shape), rtol=1e-8)


def test_given_gamma_replaces_that_of_the_adiabat():
    for kind in (EnergyPolytrope, RestPolytrope):
        np.testing.assert_allclose(kind(3.0, np.array([0.1]), 1.5).at(np.array([[0.5]])).excess, 1.5 - 4.0 / 3.0)


@pytest.mark.parametrize(
    ("make", "words"),
    [
        (lambda: Isentrope(np.array([0.1]), np.array([0.0])), "sigma: 0 is not allowed; give more than 0"),
        (lambda: Isentrope(np.array([0.1, 0.1]), np.array([0.1, np.nan])), "sigma: nan is not allowed"),
        (lambda: Isentrope(np.array([0.1]), np.array([0.36])), r"less than 1/\(3 - 1.5 beta\)"),
        (lambda: Isentrope(np.array([1.0]), np.array([0.1])), "beta: 1 is not allowed; give more than 0"),
        (lambda: EnergyPolytrope(3.0, np.array([-1.0])), "sigma: -1 is not allowed; give a positive"),
        (lambda: EnergyPolytrope(3.0, np.array([np.inf])), "sigma: inf is not allowed"),
        (lambda: EnergyPolytrope(-1.0, np.array([0.1])), "index: -1 is not allowed"),
        (lambda: EnergyPolytrope(0.0, np.array([0.1])), "index: 0 is not allowed; .* when gamma is given"),
        (lambda: RestPolytrope(3.0, np.array([0.4])), "sigma: 0.4 is not allowed; give more than 0 and less than 1/n"),
        (lambda: RestPolytrope(np.nan, np.array([0.1])), "index: nan is not allowed"),
    ],
)
def test_refuses_what_no_star_can_be(make, words):
    with pytest.raises(InputError, match=words):
        make()
