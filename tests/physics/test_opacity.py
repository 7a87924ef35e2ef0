"""Opacity and the luminosity it lets through. Sources: section 9 and the traps of the project's check values."""

import numpy as np
import pytest

from massdash.constants import L_SUN, M_P, M_SUN, SIGMA_T
from massdash.physics.opacity import central_opacity, eddington_luminosity, surface_opacity


def test_eddington_luminosity_of_pure_hydrogen():
    """Computed there with sigma_T/m_p."""
    power = eddington_luminosity(M_SUN, SIGMA_T / M_P)
    assert power == pytest.approx(1.257065e38, rel=1e-6)
    assert power / L_SUN == pytest.approx(3.283869e4, rel=1e-6)


@pytest.mark.parametrize(("hydrogen", "power"), [(0.753, 1.42604e38), (0.7, 1.47049e38), (0.0, 2.49984e38)])
def test_eddington_luminosity_per_solar_mass(hydrogen, power):
    assert eddington_luminosity(M_SUN, surface_opacity(hydrogen)) == pytest.approx(power, rel=4e-6)


def test_central_opacity_falls_by_a_fifth_at_1e8_kelvin():
    """From memory (Paczynski 1983): about 21 per cent lower at 1e8 K and low density."""
    assert central_opacity(1e-3, 1e8, 0.753) / surface_opacity(0.753) == pytest.approx(0.79, abs=0.01)


def test_central_opacity_meets_the_surface_value_in_cool_thin_gas():
    assert central_opacity(1e-20, 1e3, 0.7) == pytest.approx(surface_opacity(0.7), rel=1e-4)


def test_degeneracy_lowers_it_and_shapes_broadcast():
    rho, temperature = np.array([1e-3, 1.0, 1e3])[:, None], np.array([1e7, 1e8])
    kappa = central_opacity(rho, temperature, 0.7)
    assert kappa.shape == (3, 2)
    assert np.all(np.diff(kappa, axis=0) < 0)
