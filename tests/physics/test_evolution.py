"""Contraction and burning times in closed form. Sources: section 8 of the project's check values (computed)."""

import numpy as np
import pytest

from massdash.constants import M_SUN, M_U, YEAR
from massdash.physics import evolution
from massdash.physics.opacity import eddington_luminosity, surface_opacity

X = 0.753
POWER = eddington_luminosity(M_SUN, surface_opacity(X))


def test_hydrogen_yield_from_the_mass_defect():
    """26.73097 MeV per helium nucleus, atomic mass of hydrogen 1.00782503 (both computed there)."""
    per_gram = 26.73097e6 * 1.602176634e-12 / (4 * 1.00782503 * M_U)
    assert per_gram == pytest.approx(6.39780e18, rel=1e-5)
    assert pytest.approx(per_gram, rel=1e-4) == evolution.HYDROGEN_YIELD


def test_fully_mixed_lifetime():
    assert evolution.mixed_burning_time(X, 0.0, 0.0) / YEAR == pytest.approx(1.672e6, rel=4e-4)


def test_nuclear_timescale():
    assert evolution.nuclear_timescale(M_SUN, X, POWER) / YEAR == pytest.approx(2.13e6, rel=3e-3)


def test_burning_conserves_energy():
    """The integral of L dt equals Q times the burnt hydrogen, L following X."""
    x = np.linspace(0.2, X, 4001)
    times = evolution.mixed_burning_time(X, x, 0.02)
    power = eddington_luminosity(M_SUN, surface_opacity(x)) * 0.98
    radiated = -np.sum((power[1:] + power[:-1]) / 2 * np.diff(times))
    assert radiated == pytest.approx(evolution.HYDROGEN_YIELD * (X - 0.2) * M_SUN, rel=1e-7)


def test_gas_pressure_lengthens_the_life_as_it_dims_the_star():
    assert evolution.mixed_burning_time(X, 0.1, 0.2) * 0.8 == pytest.approx(evolution.mixed_burning_time(X, 0.1, 0.0))


def test_contraction_time():
    times = evolution.contraction_time(np.array([-2e54, 0.0, 1e54]), 1e43)
    assert times[0] == pytest.approx(2e11)
    assert np.isnan(times[1:]).all()
