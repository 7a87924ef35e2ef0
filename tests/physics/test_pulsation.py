"""Radial pulsation against exact modes, published eigenvalues, marginal stability and a shooting method."""

import numpy as np
import pytest
from stellar_matter import eigenvalue_by_shooting, of_rest, one

from massdash.constants import C, G
from massdash.errors import ComputationError, InputError
from massdash.physics.barotropes import EnergyPolytrope, Isentrope, RestPolytrope
from massdash.physics.pulsation import critical_index, growth_time, pulsation
from massdash.physics.tabulated import pulsation_of_table
from massdash.physics.tov import solve, structure

WEAK = 1e-10  # sigma at which relativity is below the digits compared


# ------------------------------------------------------------------------------------------------ Newtonian modes
def test_uniform_star_is_exact():
    """omega_j^2 = 3 Gamma - 4 + Gamma j (2j + 5) in GM/R^3 for n = 0 (Pekeris 1938)."""
    for gamma in (1.4, 5.0 / 3.0):
        modes = pulsation(structure(EnergyPolytrope(0.0, one(WEAK), gamma)), 3)
        exact = [3.0 * gamma - 4.0 + gamma * j * (2 * j + 5) for j in range(3)]
        np.testing.assert_allclose(modes.frequency_squared[:, 0], exact, rtol=1e-8)


def test_uniform_star_moves_homologously():
    mode = pulsation(structure(EnergyPolytrope(0.0, one(WEAK), 1.5)))
    np.testing.assert_allclose(mode.eigenfunction(np.linspace(0.0, 1.0, 5)), 1.0, rtol=1e-8)


@pytest.mark.parametrize(
    ("index", "exact"),
    [
        # recomputed for this project; Hurley, Roberts & Wright 1966 (ApJ 143, 535) print 9.2551 and 2.706
        (1.0, [1.891564951]),
        (1.5, [2.705872342]),
        (2.0, [4.000771922]),
        (3.0, [9.254706074, 16.98453508, 28.4824971]),
    ],
)
def test_gas_spheres(index, exact):
    modes = pulsation(structure(RestPolytrope(index, one(WEAK), 5.0 / 3.0)), len(exact))
    np.testing.assert_allclose(modes.frequency_squared[:, 0], exact, rtol=1e-8)
    assert np.all(np.diff(modes.frequency_squared[:, 0]) > 0)


def test_nearly_marginal_star():
    """omega^2 = 39.810164 (Gamma_1 - 4/3) GM/R^3 for n = 3 (Ledoux; 3|W|/I of the sphere)."""
    found = [
        pulsation(structure(RestPolytrope(3.0, one(1e-14), 4.0 / 3.0 + excess))).frequency_squared[0, 0] / excess
        for excess in (1e-5, 2e-5)
    ]
    assert 2.0 * found[0] - found[1] == pytest.approx(39.810164, rel=1e-7)


# ------------------------------------------------------------------------------------------------ marginal stability
@pytest.mark.parametrize(
    ("index", "exact"),
    [
        (0.5, 0.503114554213),
        (1.0, 0.565382327525),
        (1.5, 0.645063030726),
        (2.0, 0.751296268097),
        (2.5, 0.900302693223),
        (3.0, 1.12447431198),
        (3.25, 1.28501978057),
    ],
)
def test_first_post_newtonian_limit(index, exact):
    """Gamma_crit - 4/3 = K 2GM/(Rc^2) (Chandrasekhar 1964, ApJ 140, 417; K recomputed for this project)."""
    ratio = []
    for sigma in (2e-5, 1e-5):
        star = structure(RestPolytrope(index, one(sigma)))
        ratio.append((critical_index(star)[0] - 4.0 / 3.0) / (2.0 * star.compactness[0]))
    assert 2.0 * ratio[1] - ratio[0] == pytest.approx(exact, rel=1e-7)


@pytest.mark.parametrize(
    ("kind", "index", "exact"),
    [
        (EnergyPolytrope, 3.0, 1.12875),
        (RestPolytrope, 3.0, 1.12987),
        (EnergyPolytrope, 1.5, 0.64692),
        (EnergyPolytrope, 1.0, 0.56690),
    ],
)
def test_critical_index_at_small_sigma(kind, index, exact):
    """Zero-frequency solutions of the full equation at sigma = 5e-4, recomputed for this project."""
    star = structure(kind(index, one(5e-4) if kind is EnergyPolytrope else of_rest(5e-4, index)))
    assert (critical_index(star)[0] - 4.0 / 3.0) / (2.0 * star.compactness[0]) == pytest.approx(exact, abs=0.5e-5)


def test_critical_index_at_finite_sigma():
    """n = 3, sigma 0.01, 0.05, 0.1, 0.2; zero-frequency solutions, recomputed for this project."""
    sigma = np.array([0.01, 0.05, 0.1, 0.2])
    energy = critical_index(structure(EnergyPolytrope(3.0, sigma)))
    rest = critical_index(structure(RestPolytrope(3.0, of_rest(sigma, 3.0))))
    np.testing.assert_allclose(energy, [1.35987, 1.47012, 1.61626, 1.93218], atol=0.5e-5)
    np.testing.assert_allclose(rest, [1.35920, 1.45400, 1.55504, 1.71169], atol=0.5e-5)


@pytest.mark.parametrize("sigma", [0.01, 0.2])
def test_star_with_the_critical_index_does_not_pulsate(sigma):
    matter = RestPolytrope(3.0, of_rest(sigma, 3.0))
    marginal = critical_index(structure(matter))[0]
    for shift, sign in ((1e-6, 1), (-1e-6, -1)):
        mode = pulsation(structure(RestPolytrope(3.0, matter.sigma, marginal + shift)))
        assert np.sign(mode.frequency_squared[0, 0]) == sign
        assert np.sign(mode.margin[0]) == sign


@pytest.mark.parametrize(("index", "sigma"), [(1.5, 0.15064), (2.0, 0.07104), (2.5, 0.02681)])
def test_rest_mass_polytropes_turn_where_gamma_is_critical(index, sigma):
    """At the first mass maximum (recomputed to five digits for this project) Gamma_crit = 1 + 1/n."""
    found = critical_index(structure(RestPolytrope(index, of_rest(sigma, index))))[0]
    assert found == pytest.approx(1.0 + 1.0 / index, abs=1e-4)


# ------------------------------------------------------------------------------------------------ the method itself
@pytest.mark.parametrize(
    "matter",
    [
        Isentrope(one(0.01), one(3e-4)),
        Isentrope(one(0.01), one(0.03)),
        RestPolytrope(1.5, one(0.1), 5.0 / 3.0),
        EnergyPolytrope(3.0, one(0.1), 4.0 / 3.0),
    ],
    ids=["stable", "unstable", "gas", "energy"],
)
def test_shooting_finds_the_same_frequency(matter):
    star = structure(matter)
    square = pulsation(star).frequency_squared[0, 0]
    near = 0.02 * abs(square)
    shot = eigenvalue_by_shooting(matter, star.radius[0], star.mass[0], square - near, square + near)
    assert shot == pytest.approx(square, rel=2e-8)


@pytest.mark.parametrize("sigma", [0.01, 0.2, 0.4])
def test_error_estimate_bounds_the_error(sigma):
    star = structure(RestPolytrope(3.0, of_rest(sigma, 3.0), 1.5), panels=16)
    exact = pulsation(star, basis=30).frequency_squared
    for basis in (6, 9, 12):
        mode = pulsation(star, basis=basis)
        error = mode.frequency_squared - exact  # Ritz: from above
        assert np.all(error >= -1e-9 * np.abs(exact))
        assert np.all(error <= mode.error)


def test_takes_as_many_functions_as_needed():
    easy = pulsation(structure(Isentrope(one(0.01), one(5e-4))))
    hard = pulsation(structure(RestPolytrope(3.0, of_rest(0.2, 3.0), 4.0 / 3.0)))
    assert len(easy.coefficients) < 16 < len(hard.coefficients)
    finest = pulsation(solve(RestPolytrope(3.0, of_rest(0.2, 3.0), 4.0 / 3.0), 12, 16)[0], basis=32)
    np.testing.assert_allclose(hard.frequency_squared, finest.frequency_squared, rtol=1e-9)


def test_nodes_carry_the_functions_they_are_given():
    matter = RestPolytrope(3.0, one(WEAK), 5.0 / 3.0)
    exact = pulsation(solve(matter, 12, 16)[0], 3, basis=30).frequency_squared
    for panels, basis in ((4, 16), (8, 28)):
        fine = pulsation(solve(matter, 12, 16)[0], 3, basis=basis).frequency_squared
        coarse = pulsation(solve(matter, 12, panels)[0], 3, basis=basis).frequency_squared
        np.testing.assert_allclose(coarse, fine, rtol=2e-8)
    np.testing.assert_allclose(fine, exact, rtol=1e-9)


def test_too_many_modes_say_so():
    with pytest.raises(ComputationError, match=r"mode 12 was not found to 1.0e-08 with 40 functions"):
        pulsation(structure(RestPolytrope(3.0, one(WEAK), 5.0 / 3.0)), 12)


def test_eigenfunction_satisfies_what_was_minimised():
    """The Rayleigh quotient does not change at first order around a mode: half the functions, twice the digits."""
    star = structure(Isentrope(one(0.05), one(2e-3)))
    coarse, fine = pulsation(star, basis=6), pulsation(star, basis=12)
    q = np.linspace(0.0, 1.0, 9)
    wrong = np.max(np.abs(coarse.eigenfunction(q) / fine.eigenfunction(q) - 1.0))
    assert 1e-7 < wrong < 1e-2
    assert np.all(np.abs(coarse.frequency_squared - fine.frequency_squared) < 40.0 * wrong**2)


def test_together_is_the_same_as_one_by_one():
    beta, sigma = np.array([3e-4, 0.02, 0.5]), np.array([1e-5, 1e-3, 0.05])
    together = pulsation(structure(Isentrope(beta, sigma)), basis=16)
    for k in range(3):
        alone = pulsation(structure(Isentrope(beta[k : k + 1], sigma[k : k + 1])), basis=16)
        for name in ("frequency_squared", "stiffness", "critical", "margin"):
            np.testing.assert_allclose(
                getattr(alone, name)[..., 0], getattr(together, name)[..., k], rtol=1e-9, atol=1e-12
            )
    assert together.frequency_squared.shape == (1, 3)
    assert together.eigenfunction([0.0, 0.5]).shape == (2, 3)


def test_growth_time():
    np.testing.assert_allclose(growth_time([-4.0, -1e-6]), [0.5, 1e3])
    assert np.all(np.isnan(growth_time([0.0, 1.0])))


# ------------------------------------------------------------------------------------------------ stars from elsewhere
def table_of(matter, panels, central=1e24):
    """The star as columns in cgs: r, m, energy density, P, Gamma_1; the surface is the last row."""
    star = solve(matter, 12, panels)[0]
    length = np.sqrt(matter.order * matter.sigma[0] / (4.0 * np.pi * G * central)) * C**2
    unit = 4.0 * np.pi * length**3 * central / C**2
    state = star.state
    columns = [
        (np.sqrt(star.square) * length, star.radius * length),
        (star.enclosed * unit, star.mass * unit),
        (state.energy * central, [0.0]),
        (state.pressure * matter.sigma * central, [0.0]),
        (state.excess + 4.0 / 3.0, state.excess[-1] + 4.0 / 3.0),
    ]
    return [np.concatenate([inner[:, 0], surface]) for inner, surface in columns]


@pytest.mark.parametrize(
    "matter", [Isentrope(one(0.02), one(1e-3)), RestPolytrope(1.5, one(0.1), 5.0 / 3.0)], ids=["isentrope", "gas"]
)
def test_tabulated_star_pulsates_like_the_star(matter):
    exact = pulsation(structure(matter), 2)
    for panels, tolerance in ((16, 2e-6), (64, 1e-8)):
        columns = table_of(matter, panels)
        mode, unit = pulsation_of_table(*columns, modes=2)
        np.testing.assert_allclose(mode.frequency_squared, exact.frequency_squared, rtol=tolerance)
        np.testing.assert_allclose(mode.margin, exact.margin, rtol=100 * tolerance)
    assert unit == pytest.approx(G * columns[1][-1] / columns[0][-1] ** 3)


@pytest.mark.parametrize(
    ("column", "change", "words"),
    [
        (0, lambda r: r[::-1], "radius: .* finite values that rise"),
        (1, lambda m: np.where(np.arange(m.size) == 40, np.nan, m), "mass: nan is not allowed"),
        (2, lambda e: -e, "energy density: .* not negative"),
        (3, lambda p: 0.0 * p, "pressure: 0 is not allowed; give values that fall outwards"),
        (4, lambda g: g * np.inf, "Gamma_1: inf is not allowed"),
        (1, lambda m: 1e9 * m, r"2Gm/\(rc\^2\): .* less than 1"),
        (0, lambda r: r[:-1], "columns of different lengths"),
    ],
)
def test_table_that_is_no_star_is_refused(column, change, words):
    columns = table_of(Isentrope(one(0.02), one(1e-3)), 8)
    columns[column] = change(columns[column])
    with pytest.raises(InputError, match=words):
        pulsation_of_table(*columns)


def test_short_table_is_refused():
    with pytest.raises(InputError, match="5 rows is not allowed; give at least 10 rows"):
        pulsation_of_table(*(column[::20][:5] for column in table_of(Isentrope(one(0.02), one(1e-3)), 8)))
