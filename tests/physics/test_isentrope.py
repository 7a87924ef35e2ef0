"""Averages over an isentropic star: polynomials against quadrature, and their limits."""

import numpy as np
import pytest

from massdash.physics.eos import adiabatic_index_excess
from massdash.physics.isentrope import TOP, averages, averages_by_nodes
from massdash.physics.post_newtonian import K1

BETAS = np.concatenate([np.geomspace(1e-6, 1e-2, 50), np.linspace(0.01, TOP, 397)])


def test_polynomials_against_quadrature():
    for fast, slow in zip(averages(BETAS), averages_by_nodes(BETAS), strict=True):
        assert fast == pytest.approx(slow, rel=1e-9)


def test_beyond_the_polynomials_they_are_summed():
    beta = np.array([0.5, 0.81, 0.99])
    for fast, slow in zip(averages(beta), averages_by_nodes(beta), strict=True):
        assert np.array_equal(fast, slow)


def test_pure_radiation_is_the_polytrope():
    """P ~ rho^(4/3): 3 <P/rho> = k1 P_c/rho_c, and nothing is left of gas and excess."""
    work, gas, excess = averages(0.0)
    assert 3 * work == pytest.approx(K1, rel=1e-10)
    assert (gas, excess) == (0, 0)


def test_averages_near_pure_radiation():
    """To first order beta is uniform and Gamma_1 - 4/3 = beta/6."""
    beta = np.array([1e-6, 1e-4, 1e-2])
    _, gas, excess = averages(beta)
    assert np.all(np.abs(gas / beta - 1) < 2 * beta)
    assert excess == pytest.approx(gas / 6, rel=1e-2)


def test_averages_are_those_of_values_inside_the_star():
    beta = np.linspace(0.01, 0.8, 9)
    work, gas, excess = averages(beta)
    assert np.all((work > 0) & (work < 1))
    assert np.all((gas > 0) & (gas < 1) & (excess > 0) & (excess < 1 / 3))
    assert np.all(excess < adiabatic_index_excess(1.0))


@pytest.mark.parametrize("shape", [(), (0,), (3,), (2, 3)])
def test_shapes(shape):
    assert all(one.shape == shape for one in averages(np.full(shape, 0.1)))
    assert all(one.shape == shape for one in averages(np.full(shape, 0.9)))
