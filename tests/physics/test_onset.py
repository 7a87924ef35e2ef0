"""Onset of collapse and the largest mass. Sources: sections 3, 5b, 6 and 12 of the project's check values."""

import numpy as np
import pytest
from slopes import order

from massdash.constants import M_SUN, M_U
from massdash.errors import ComputationError
from massdash.physics import eos
from massdash.physics.onset import (
    leading_beta,
    maximum_mass,
    maximum_mass_leading,
    onset,
    onset_leading,
    rotation_for,
    spin_for,
    weight_for,
)
from massdash.physics.post_newtonian import K2, K3, K4, SHEDDING, Body, equilibrium_at_density

MASSES = np.geomspace(1e4, 1e8, 5)
SUPPORT = [(0.0, 0.0), (1e-3, 0.0), (SHEDDING, 0.0), (0.0, 1e-9), (1e-4, 1e-12)]


# ------------------------------------------------------------------------------------------------------ closed forms
@pytest.mark.parametrize("mu", [0.5, 0.59, 4 / 3])
def test_closed_forms_at_leading_order(mu):
    """Section 3, post-Newtonian critical point with m_u (computed/derived)."""
    turn = onset_leading(Body(MASSES * M_SUN, mu))
    assert turn.density == pytest.approx(2.03415e18 * (0.5 / mu) ** 3 * MASSES**-3.5, rel=3e-6)
    assert turn.temperature == pytest.approx(1.25153e13 / (mu * MASSES), rel=4e-6)
    assert turn.energy == pytest.approx(np.full(5, -3.63290e54 * (0.5 / mu) ** 2), rel=2e-6)
    assert 1 / turn.compactness == pytest.approx(3.155425 * mu * np.sqrt(MASSES), rel=3e-7)


@pytest.mark.parametrize(
    ("mu", "masses"),
    [
        (0.59, [3.5354e5, 2.1212e5, 1.4142e5, 1.1785e5, 1.0606e5]),
        (0.50, [4.1718e5, 2.5031e5, 1.6687e5, 1.3906e5, 1.2515e5]),
    ],
)
def test_maximum_masses(mu, masses):
    """Section 3, post-Newtonian rows (computed)."""
    found = maximum_mass_leading(mu, np.array([6e7, 1e8, 1.5e8, 1.8e8, 2e8])) / M_SUN
    assert found == pytest.approx(masses, rel=4e-5)


def test_older_textbook_coefficients():
    """Shapiro & Teukolsky 1983, ch. 17, from memory and with the mass of hydrogen: bands of a few per cent."""
    turn = onset_leading(Body(1e6 * M_SUN, 0.5))
    assert turn.density == pytest.approx(1.994e18 * 1e6**-3.5, rel=0.03)
    assert turn.temperature == pytest.approx(2.49e13 / 1e6, rel=0.01)
    assert turn.energy == pytest.approx(-3.6e54, rel=0.02)
    assert 1 / turn.compactness == pytest.approx(1.59e3, rel=0.01)


def test_radiation_entropy():
    """Section 3: 0.935378 M^(1/2) k_B per m_u, for any weight, as M grows."""
    for mu in (0.5, 0.59, 4 / 3):
        turn = onset(Body(np.array([1e6, 1e10]) * M_SUN, mu))
        scaled = eos.radiation_entropy(turn.beta, mu) / np.sqrt([1e6, 1e10])
        assert scaled[1] == pytest.approx(0.935378, rel=3e-4)
        assert scaled[0] == pytest.approx(0.935378, rel=2e-2)


@pytest.mark.parametrize("solve", [onset_leading, onset])
def test_slopes_with_mass_and_weight(solve):
    """T ~ 1/(mu M), rho ~ mu^-3 M^-7/2, E independent of M and ~ mu^-2; with exact beta as M grows."""
    masses, weights = np.geomspace(1e10, 1e12, 5), np.linspace(0.5, 1.4, 5)
    by_mass, by_weight = solve(Body(masses * M_SUN, 0.6)), solve(Body(1e10 * M_SUN, weights))
    for name, mass_power, weight_power in (("temperature", -1, -1), ("density", -3.5, -3), ("energy", 0, -2)):
        assert order(masses, getattr(by_mass, name)) == pytest.approx(mass_power, abs=1e-4)
        assert order(weights, getattr(by_weight, name)) == pytest.approx(weight_power, abs=1e-4)


@pytest.mark.parametrize(("name", "power"), [("temperature", 1), ("energy", 1), ("density", 2), ("radius", 2)])
def test_exact_beta_tends_to_leading_order(name, power):
    """As beta; in density and radius the terms of that order cancel and leave beta^2 (own finding)."""
    body = Body(np.geomspace(1e6, 1e9, 7) * M_SUN, 0.59)
    off = getattr(onset(body), name) / getattr(onset_leading(body), name) - 1
    assert order(leading_beta(body.mass, 0.59), off) == pytest.approx(power, abs=0.05)
    assert np.all(np.abs(off) < 3 * leading_beta(body.mass, 0.59))


# ---------------------------------------------------------------------------------------------- the equilibrium itself
@pytest.mark.parametrize(("rotation", "background"), SUPPORT)
@pytest.mark.parametrize("second_order", [False, True])
def test_onset_is_the_equilibrium_without_margin(rotation, background, second_order):
    body = Body(MASSES * M_SUN, 0.59, rotation, background if background < 1e-10 else 0.0, second_order)
    turn = onset(body)
    there = equilibrium_at_density(body, turn.density)
    assert there.margin == pytest.approx(np.zeros(5), abs=1e-9)
    for name in ("beta", "temperature", "radius", "energy", "compactness"):
        assert getattr(there, name) == pytest.approx(getattr(turn, name), rel=1e-8), name
    assert eos.gas_fraction(turn.density, turn.temperature, 0.59) == pytest.approx(turn.beta, rel=1e-9)


@pytest.mark.parametrize("solve", [onset_leading, onset])
def test_background_as_an_addition_to_beta(solve):
    """Section 12: beta_eff = beta + 24.498 rho_b/rho_c, Gamma_1 shifted by 4.0831 rho_b/rho_c (derived there)."""
    masses = 1e12 * M_SUN  # beta 7e-6: terms of order beta are out of the way
    bare = solve(Body(masses, 0.59))
    body = Body(masses, 0.59, 0.0, 1e-9 * bare.density)
    held = solve(body)
    rise = 4 * K4 / K2 * (body.y(held.density) - body.y(bare.density)) / (body.background / held.density)
    assert rise == pytest.approx(24.498, rel=1e-4)
    assert rise / 6 == pytest.approx(4.0831, rel=1e-4)


@pytest.mark.parametrize("solve", [onset_leading, onset])
def test_rotation_as_an_addition_to_beta(solve):
    """Section 6: beta_eff = beta + 4 T/|W| (derived there)."""
    masses = 1e12 * M_SUN
    bare, body = solve(Body(masses, 0.59)), Body(masses, 0.59, 1e-8)
    rise = 4 * K4 / K2 * (body.y(solve(body).density) - body.y(bare.density)) / body.rotation
    assert rise == pytest.approx(4, rel=1e-4)


def test_pure_radiation_at_mass_shedding():
    """Section 6, recomputed there: R c^2/GM = 455.78, cJ/GM^2 = 0.8757 with the second order; 456 and 0.876 are
    Baumgarte & Shapiro 1999 (from memory)."""
    body = Body(1e22 * M_SUN, 0.59, SHEDDING, second_order=True)
    for solve in (onset_leading, onset):
        turn = solve(body)
        assert 1 / turn.compactness == pytest.approx(455.78, abs=6e-3)
        assert np.sqrt(K2 * SHEDDING / (K3 * body.y(turn.density))) == pytest.approx(0.8757, abs=6e-5)


def test_compact_criterion_at_a_million_solar_masses():
    """Section 6, derived there to the digits printed: y = 0.00639, j = 0.786, R c^2/GM = 367."""
    body = Body(1e6 * M_SUN, 0.59, 0.00744, second_order=True)
    turn = onset_leading(body)
    y = body.y(turn.density)
    assert y == pytest.approx(0.00639, abs=6e-6)
    assert np.sqrt(K2 * 0.00744 / (K3 * y)) == pytest.approx(0.786, abs=6e-4)
    assert 1 / turn.compactness == pytest.approx(367, abs=0.6)


@pytest.mark.parametrize(
    ("mass", "temperature", "density", "beta", "radius"),
    [(9.7467e4, 2.1208e8, 3.9823, 0.022797, 585.976), (9.9142e5, 2.1222e7, 1.24687e-3, 0.0072374, 1858.50)],
)
def test_full_relativity_is_met_to_order_beta(mass, temperature, density, beta, radius):
    """Section 5b (computed, full TOV turning point, mu 0.59). Bands, not bounds: the functional is first order."""
    turn = onset(Body(mass * M_SUN, 0.59))
    assert turn.beta == pytest.approx(beta, rel=1e-2, abs=3e-4)
    assert abs(turn.temperature / temperature - 1) < 1.2 * beta
    assert abs(turn.density / density - 1) < 3.6 * beta
    assert abs(1 / turn.compactness / radius - 1) < 0.5 * beta


def test_binding_energy_of_full_relativity():
    """Section 5b: (M0 - M)c^2 = 2.592e54 erg at 9.914e5 Msun, mu 0.59; leading order 9.082e53/mu^2."""
    body = Body(9.9142e5 * M_SUN, 0.59)
    assert onset_leading(body).energy == pytest.approx(-9.082e53 / 0.59**2, rel=1e-4)
    assert onset(body).energy == pytest.approx(-2.592e54, rel=0.01)


def test_spin_and_background_put_the_onset_off():
    plain = onset(Body(MASSES * M_SUN, 0.59)).temperature
    assert np.all(onset(Body(MASSES * M_SUN, 0.59, 1e-4)).temperature > plain)
    assert np.all(onset(Body(MASSES * M_SUN, 0.59, 0.0, 1e-13)).temperature > plain)


def test_second_order_brings_it_on():
    turn = onset(Body(1e5 * M_SUN, 0.59, SHEDDING)).temperature
    assert onset(Body(1e5 * M_SUN, 0.59, SHEDDING, second_order=True)).temperature < turn


# ---------------------------------------------------------------------------------------------------------- inverses
@pytest.mark.parametrize(("rotation", "background"), SUPPORT)
@pytest.mark.parametrize("mass", [1e4, 1e5, 1e6])
def test_onset_maximum_mass_and_weight_are_inverses(mass, rotation, background):
    for second_order in (False, True):
        body = Body(mass * M_SUN, 0.7, rotation, background, second_order)
        arguments = (0.7, onset(body).temperature, rotation, background, second_order)
        assert maximum_mass(*arguments) == pytest.approx(body.mass, rel=1e-9)
        arguments = (0.7, onset_leading(body).temperature, rotation, background, second_order)
        assert maximum_mass_leading(*arguments) == pytest.approx(body.mass, rel=1e-9)
    temperature = onset(Body(mass * M_SUN, 0.7, rotation, background)).temperature
    assert weight_for(mass * M_SUN, temperature, rotation, background) == pytest.approx(0.7, rel=1e-8)


@pytest.mark.parametrize("spin", [0.01, 0.3, 0.999])
def test_onset_and_spin_are_inverses(spin):
    temperature = onset(Body(MASSES * M_SUN, 0.59, spin**2 * SHEDDING)).temperature
    assert rotation_for(MASSES * M_SUN, 0.59, temperature) == pytest.approx(np.full(5, spin**2 * SHEDDING), rel=1e-6)
    assert spin_for(MASSES * M_SUN, 0.59, temperature) == pytest.approx(np.full(5, spin), rel=1e-6)


def test_no_spin_is_found_where_none_will_do():
    coldest, hottest = (onset(Body(1e5 * M_SUN, 0.59, share * SHEDDING)).temperature for share in (0, 1))
    found = spin_for(1e5 * M_SUN, 0.59, np.array([0.99 * coldest, 1.01 * hottest]))
    assert np.isnan(found).all()
    assert rotation_for(1e5 * M_SUN, 0.59, 0.99 * coldest) < 0


@pytest.mark.parametrize(("rotation", "background"), [(SHEDDING, 0.0), (1e-3, 0.0), (0.0, 1e-2)])
def test_weight_is_infinite_where_no_weight_meets_onset(rotation, background):
    """However heavy its particles: the onset of a nearly pure radiation star stays above the temperature."""
    heavy = onset(Body(1e4 * M_SUN, 1e4, rotation, background)).temperature
    assert weight_for(1e4 * M_SUN, 0.99 * heavy, rotation, background) == np.inf
    assert weight_for(1e4 * M_SUN, 1.01 * heavy, rotation, background) < 1e4


def test_weights_that_exist_and_that_do_not_side_by_side():
    masses = np.geomspace(1e2, 1e8, 301) * M_SUN
    weights = weight_for(masses, 1.6e8, 1e-3)
    exist = np.isfinite(weights)
    assert 0 < exist.sum() < 301
    again = onset(Body(masses[exist], weights[exist], 1e-3)).temperature
    assert again == pytest.approx(np.full(exist.sum(), 1.6e8), rel=1e-8)


def test_no_largest_mass_is_told():
    """A background can hold the onset of all stars above a temperature; found so by a search over masses."""
    masses = np.geomspace(1e-2, 1e13, 100) * M_SUN
    assert onset_leading(Body(masses, 0.59, 0.0, 1e-3)).temperature.min() > 1e7
    for solve in (maximum_mass, maximum_mass_leading):
        with pytest.raises(ComputationError, match="maximum mass: no answer found"):
            solve(0.59, 1e7, 0.0, 1e-3)


@pytest.mark.parametrize("shape", [(), (0,), (3,), (2, 3)])
def test_shapes(shape):
    masses = np.geomspace(1e4, 1e6, int(np.prod(shape))).reshape(shape) * M_SUN
    temperatures = np.geomspace(1e7, 1e8, int(np.prod(shape))).reshape(shape)
    calls = {
        onset: lambda m, t: onset(Body(m, 0.59, 1e-4)).temperature,
        onset_leading: lambda m, t: onset_leading(Body(m, 0.59, 1e-4, second_order=True)).temperature,
        maximum_mass: lambda m, t: maximum_mass(0.59, t, 1e-4),
        maximum_mass_leading: lambda m, t: maximum_mass_leading(0.59, t, 1e-4),
        weight_for: lambda m, t: weight_for(m, t),
        rotation_for: lambda m, t: rotation_for(m, 0.59, t),
        spin_for: lambda m, t: spin_for(m, 0.59, t),
    }
    for call in calls.values():
        together = call(masses, temperatures)
        assert np.shape(together) == shape
        for index in np.ndindex(shape):
            alone = float(call(masses[index], temperatures[index]))
            assert together[index] == pytest.approx(alone, rel=1e-9, nan_ok=True)


def test_leading_beta():
    """Section 4: sqrt(C)/mu M^(-1/2) with sqrt(C) = 4.276348 (computed)."""
    assert leading_beta(1e6 * M_SUN, 0.59) == pytest.approx(4.276348e-3 / 0.59, rel=2e-7)
    assert pytest.approx(1.66053907e-24, rel=1e-8) == M_U  # the coefficient is the one with m_u, not m_H
