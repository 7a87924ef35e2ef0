"""The energy functional. Sources: sections 4, 12 and 13 of the project's check values (computed), mpmath for the
quartic, and the functional's own derivatives."""

import mpmath
import numpy as np
import pytest
from slopes import first, order, second

from massdash.constants import M_SUN, C, G
from massdash.physics import eos
from massdash.physics.onset import onset
from massdash.physics.post_newtonian import (
    EDDINGTON_MASS,
    K2,
    K_BACKGROUND,
    SHEDDING,
    Body,
    eddington_beta,
    eddington_ratio,
    energy_terms,
    equilibrium_at_density,
    equilibrium_at_temperature,
    relativity,
)

BODIES = {
    "plain": Body(1e5 * M_SUN, 0.59),
    "heavy": Body(1e7 * M_SUN, 0.59),
    "light": Body(3e2 * M_SUN, 0.5),
    "second order": Body(1e5 * M_SUN, 0.59, second_order=True),
    "spinning": Body(1e5 * M_SUN, 0.59, 0.5 * SHEDDING),
    "in a background": Body(1e5 * M_SUN, 0.59, 0.0, 1e-3),
    "everything": Body(3e5 * M_SUN, 1.2, SHEDDING, 1e-4, second_order=True),
}
every_body = pytest.mark.parametrize("body", BODIES.values(), ids=BODIES)


def test_eddington_mass():
    assert pytest.approx(18.2871481, abs=6e-8) == EDDINGTON_MASS
    assert np.sqrt(EDDINGTON_MASS) == pytest.approx(4.276348, abs=6e-7)


@pytest.mark.parametrize(
    ("mass", "half", "primordial"),
    [
        (1e2, 0.6553236671, 0.5825886735),
        (1e3, 0.2515603464, 0.2156959980),
        (1e4, 0.0836787015, 0.0711552200),
        (1e5, 0.0268625068, 0.0227886243),
        (1e6, 0.0085343883, 0.0072349012),
        (1e7, 0.0027027703, 0.0022907199),
    ],
)
def test_beta_of_the_quartic(mass, half, primordial):
    assert eddington_beta(mass * M_SUN, np.array([0.5, 0.59])) == pytest.approx([half, primordial], abs=6e-11)


@pytest.mark.parametrize("mu", [0.5, 0.59, 4 / 3])
def test_quartic_from_one_to_a_thousand_million_solar_masses(mu):
    masses = np.geomspace(1, 1e9, 19)
    z = eddington_ratio(masses * M_SUN, mu)
    for mass, beta, rest in zip(masses, 1 / (1 + z), z / (1 + z), strict=True):
        with mpmath.workdps(40):
            scale = (mpmath.mpf(mass) * M_SUN * mpmath.mpf(mu) ** 2 / (mpmath.mpf(EDDINGTON_MASS) * M_SUN)) ** 2
            guess = mpmath.log(mpmath.mpf(beta) / mpmath.mpf(rest)) * -1
            root = mpmath.exp(
                mpmath.findroot(lambda u, s=scale: u + 3 * mpmath.log1p(mpmath.exp(u)) - mpmath.log(s), guess)
            )
            expected = float(1 / (1 + root)), float(root / (1 + root))
        assert (beta, rest) == pytest.approx(expected, rel=1e-12)


@every_body
def test_energy_is_stationary_at_equilibrium(body):
    for share in (0.01, 1.0, 30.0):
        star = equilibrium_at_density(body, share * onset(body).density)

        def energy(t, star=star):
            return energy_terms(body, star, star.density * np.exp(t))["total"]

        scale = K2 * body.y(star.density) * body.mass * C**2  # of the terms that cancel
        assert abs(first(energy, 0.0, 1e-2)) < 1e-9 * scale
        assert energy(0.0) == pytest.approx(float(star.energy), abs=1e-12 * scale)


@every_body
def test_curvature_vanishes_at_onset_and_tells_stable_from_unstable(body):
    turn = onset(body)
    for share, sign in ((1.0, 0), (0.5, 1), (2.0, -1)):
        star = equilibrium_at_density(body, share * turn.density)
        curvature = 9 * second(lambda t, star=star: energy_terms(body, star, star.density * np.exp(t))["total"], 0.0)
        scale = relativity(body.y(star.density), body.k5) * body.mass * C**2
        if sign:
            assert np.sign(curvature) == sign == np.sign(star.margin) == np.sign(star.frequency_squared)
        else:
            assert abs(curvature) < 3e-5 * scale
            assert abs(star.margin) < 1e-9


@every_body
def test_frequency_is_the_curvature_over_the_inertia(body):
    """For homologous motion: omega^2 = (d2E/d ln R 2)/I at equilibrium, I the integral of r^2 dm (section 1)."""
    star = equilibrium_at_density(body, 0.3 * onset(body).density)
    curvature = 9 * second(lambda t: energy_terms(body, star, star.density * np.exp(t))["total"], 0.0)
    inertia = 0.113036459940 * body.mass * star.radius**2
    assert star.frequency_squared == pytest.approx(curvature / inertia, rel=1e-4)


@pytest.mark.parametrize("name", ["plain", "heavy", "light", "second order"])
def test_the_locus_of_equilibria_has_its_minimum_at_onset(name):
    """Along the locus only the entropy changes, and E falls as long as it does: both turn together."""
    body = BODIES[name]
    turn = onset(body)

    def locus(t):
        return equilibrium_at_density(body, turn.density * np.exp(t)).energy

    depth = abs(turn.energy)
    assert abs(first(locus, 0.0, 2e-2)) < 1e-7 * depth
    assert second(locus, 0.0, 2e-2) > 1e-2 * depth


def test_rotation_and_background_raise_their_own_terms_only():
    star = equilibrium_at_density(BODIES["everything"], 1e-3)
    parts = energy_terms(BODIES["everything"], star, np.array([1e-4, 1e-3, 1e-2]))
    assert set(parts) == {
        "internal", "newtonian", "first_order", "second_order", "rotation", "background", "total",
    }  # fmt: skip
    assert sum(values for name, values in parts.items() if name != "total") == pytest.approx(parts["total"], rel=1e-9)
    plain = energy_terms(BODIES["plain"], equilibrium_at_density(BODIES["plain"], 1.0), np.array([0.1, 1.0]))
    assert not np.any(plain["rotation"])
    assert not np.any(plain["background"])
    assert not np.any(plain["second_order"])


@pytest.mark.parametrize(
    ("term", "power"), [("newtonian", 1), ("first_order", 2), ("second_order", 3), ("rotation", 2), ("background", -2)]
)
def test_powers_of_y(term, power):
    body = BODIES["everything"]
    rho = np.geomspace(1e-5, 1e-1, 5)
    values = energy_terms(body, equilibrium_at_density(body, 1e-3), rho)[term]
    assert order(body.y(rho), values) == pytest.approx(power, abs=1e-10)


def test_rotational_energy_is_the_wanted_share_of_gravity():
    body = BODIES["spinning"]
    star = equilibrium_at_density(body, 0.1)
    parts = energy_terms(body, star, star.density[None])
    assert -parts["rotation"] / parts["newtonian"] == pytest.approx(body.rotation, rel=1e-13)


def test_background_coefficient():
    """Section 12: dE = 1.304540 G rho_d M^(5/3) rho_c^(-2/3) (derived there)."""
    body = BODIES["in a background"]
    assert pytest.approx(1.304540, abs=5e-7) == K_BACKGROUND
    energy = energy_terms(body, equilibrium_at_density(body, 1.0), np.array([2.0]))["background"]
    assert energy == pytest.approx(1.304540 * G * 1e-3 * body.mass ** (5 / 3) * 2 ** (-2 / 3), rel=1e-6)


def test_mass_shedding():
    """Section 6: T/|W| = 0.5 (8/27) 0.0753576/1.5 in the Roche approximation."""
    assert pytest.approx(0.0074427, abs=5e-8) == SHEDDING


def test_pulsation_of_a_newtonian_star():
    """Section 13: omega^2 = 39.810164 (Gamma_1 - 4/3) GM/R^3 = 6.635 beta GM/R^3 without relativity."""
    body = Body(np.array([1e6, 1e8, 1e10]) * M_SUN, 0.59)
    star = equilibrium_at_density(body, body.density(1e-11))
    scaled = star.frequency_squared * star.radius**3 / (G * body.mass)
    assert scaled[-1] / eos.adiabatic_index_excess(star.beta[-1]) == pytest.approx(39.810164, rel=1e-4)
    assert scaled[-1] / star.beta[-1] == pytest.approx(6.635, rel=2e-4)
    off = scaled / eos.adiabatic_index_excess(star.beta) / 39.810164 - 1
    assert order(star.beta, off) == pytest.approx(1, abs=0.02)


def test_newtonian_limit_is_the_standard_model():
    """With beta, balance differs from the quartic as the isentrope does from the polytrope, by a part of beta."""
    body = Body(np.array([1e4, 1e6, 1e8]) * M_SUN, 0.59)
    star = equilibrium_at_density(body, body.density(1e-11))
    off = star.beta / eddington_beta(body.mass, 0.59) - 1
    assert order(star.beta, off) == pytest.approx(1, abs=0.1)
    assert np.all(np.abs(off) < star.beta)


@every_body
def test_temperature_and_density_name_the_same_star(body):
    by_density = equilibrium_at_density(body, 0.2 * onset(body).density)
    by_temperature = equilibrium_at_temperature(body, by_density.temperature)
    for name, value in vars(by_density).items():
        assert getattr(by_temperature, name) == pytest.approx(value, rel=1e-8), name
    found = eos.gas_fraction(by_density.density, by_density.temperature, body.mu)
    assert found == pytest.approx(by_density.beta, rel=1e-9)


@pytest.mark.parametrize("shape", [(), (0,), (3,), (2, 3)])
@pytest.mark.parametrize("solve", [equilibrium_at_density, equilibrium_at_temperature])
def test_shapes(solve, shape):
    values = {equilibrium_at_density: (1e-6, 1e-2), equilibrium_at_temperature: (1e6, 1e8)}[solve]
    argument = np.geomspace(*values, int(np.prod(shape))).reshape(shape)
    star = solve(Body(1e5 * M_SUN, 0.59), argument)
    assert {np.shape(value) for value in vars(star).values()} == {shape}
    for index in np.ndindex(shape):
        alone = solve(Body(1e5 * M_SUN, 0.59), argument[index])
        assert [v[index] for v in vars(star).values()] == pytest.approx(list(vars(alone).values()), rel=1e-9)


def test_everything_broadcasts():
    body = Body(np.geomspace(1e4, 1e6, 4)[:, None] * M_SUN, np.array([0.5, 0.59, 1.3]), 1e-3, np.full(3, 1e-9))
    star = equilibrium_at_temperature(body, 1e7)
    assert {value.shape for value in vars(star).values()} == {(4, 3)}
    alone = equilibrium_at_temperature(Body(1e6 * M_SUN, 1.3, 1e-3, 1e-9), 1e7)
    assert star.energy[3, 2] == pytest.approx(alone.energy, rel=1e-9)
