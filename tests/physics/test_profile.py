"""Profiles of stars: the equations of structure on their own points, exact relations, the exterior solution, and the
pulsation equation, all by finite differences that know nothing of how the columns were made."""

import numpy as np
import pytest

from massdash.constants import M_SUN, C, G
from massdash.errors import ComputationError
from massdash.physics import composition, constraint, eos, equilibrium, family, pairs
from massdash.physics import profile as profiles
from massdash.physics.piecewise import Piecewise

HELIUM = 0.247
# the least and greatest masses of interest, one with pairs, one far beyond its onset, and one with metals
STARS = {
    "light": lambda: equilibrium.at_temperature(300 * M_SUN, HELIUM, 0.0, 1e8),
    "heavy": lambda: equilibrium.at_onset(1e8 * M_SUN, HELIUM, 0.0),
    "paired": lambda: equilibrium.at_onset(1e4 * M_SUN, HELIUM, 0.0),
    "unstable": lambda: equilibrium.at_density(1e5 * M_SUN, HELIUM, 0.0, 1e2, with_pairs=False),
    "metal-rich": lambda: equilibrium.at_temperature(2e6 * M_SUN, 0.27, 0.02, 1e7),
}


def columns(found, points=2000, spacing="both"):
    return profiles.profile(found, profiles.fractions(points, spacing))


def largest_residual(made):
    return np.max(np.abs(constraint.residual(made["radius"], made["mass"], made["energy_density"] / C**2)))


@pytest.fixture(scope="module", params=STARS)
def star(request):
    """(Equilibrium, columns at the default resolution)."""
    found = STARS[request.param]()
    return found, columns(found)


@pytest.fixture(scope="module")
def onset():
    return equilibrium.at_onset(1e5 * M_SUN, HELIUM, 0.0)


def inner(made):
    """The columns without centre and surface."""
    return {name: values[1:-1] for name, values in made.items()}


def slope(made, name, order=6):
    """d(name)/d(radius) without the first and the last rows, where names are not odd or not smooth."""
    return constraint.derivative(made["radius"], made[name] - made[name][0], order)


# ------------------------------------------------------------------------------------------------ the tools
def test_a_piecewise_function_is_exact_for_polynomials_and_so_is_its_integral():
    x, _ = np.polynomial.legendre.leggauss(6)
    nodes = ((np.arange(3)[:, None] + (x + 1.0) / 2.0) / 3.0).ravel()
    made = Piecewise.of_values(np.stack([nodes**5 - nodes, 2.0 * nodes]), 3)
    q = np.linspace(0.0, 1.0, 40)
    np.testing.assert_allclose(made(q), [q**5 - q, 2.0 * q], atol=1e-14)
    np.testing.assert_allclose(made.antiderivative()(q), [q**6 / 6.0 - q**2 / 2.0, q**2], atol=1e-14)
    assert np.all(made.tail() < 0.1)


def test_the_tail_shows_what_a_polynomial_misses():
    x, _ = np.polynomial.legendre.leggauss(12)
    q = (x + 1.0) / 2.0
    smooth, rough = Piecewise.of_values(np.stack([np.exp(q), np.abs(q - 0.3)]), 1).tail()
    assert smooth < 1e-11
    assert rough > 1e-3


@pytest.mark.parametrize("order", [4, 6])
def test_differences_are_exact_for_odd_polynomials_of_their_order(order):
    x = np.linspace(0.0, 1.0, 15) ** 1.5
    values = 3.0 * x - 2.0 * x ** (order - 1)
    expected = 3.0 - 2.0 * (order - 1) * x ** (order - 2)
    np.testing.assert_allclose(constraint.derivative(x, values, order), expected, atol=1e-11)


@pytest.mark.parametrize("order", [4, 6])
def test_differences_converge_at_their_order(order):
    errors = []
    for points in (33, 65, 129):
        x = profiles.fractions(points, "both")
        errors.append(np.max(np.abs(constraint.derivative(x, np.sin(3.0 * x), order) - 3.0 * np.cos(3.0 * x))))
    assert np.log2(np.divide(errors[:-1], errors[1:])) == pytest.approx(order, abs=0.25)


@pytest.mark.parametrize(
    ("spacing", "centre", "surface"),
    [("uniform", 1.0, 1.0), ("centre", 6.8, None), ("surface", None, 6.8), ("both", 6.8, 6.8)],
)
def test_spacings_are_as_close_as_they_say(spacing, centre, surface):
    x = profiles.fractions(2001, spacing)
    steps = np.diff(x)
    assert (x[0], x[-1], len(x)) == (0.0, 1.0, 2001)
    assert np.all(steps > 0)
    for end, closer in ((0, centre), (-1, surface)):
        if closer is not None:
            assert 1.0 / (2000 * steps[end]) == pytest.approx(closer, rel=0.01)


# ------------------------------------------------------------------------------------------------ structure
def test_the_constraint_holds_at_the_default_resolution(star):
    assert largest_residual(star[1]) < 1e-8


@pytest.mark.parametrize("spacing", ["uniform", "both"])
def test_the_residual_converges_at_the_stated_order(onset, spacing):
    residuals = [largest_residual(columns(onset, points, spacing)) for points in (101, 201, 401, 801)]
    assert np.log2(np.divide(residuals[:-1], residuals[1:])) == pytest.approx(constraint.ORDER, abs=0.1)


def test_a_wrong_mass_shows_in_the_residual(onset):
    made = columns(onset)
    assert largest_residual(made | {"mass": made["mass"] * (1.0 + 1e-7)}) > 1e-8


def test_the_surface_is_that_of_the_star(star):
    found, made = star
    last = {name: values[-1] for name, values in made.items()}
    expected = {
        "radius": found.star.radius,
        "mass": found.star.gravitational_mass,
        "rest_mass": found.star.rest_mass,
        "lapse": np.sqrt(1.0 - 2.0 * found.star.compactness),
    }
    for name, value in expected.items():
        assert last[name] == pytest.approx(float(value), rel=1e-10), name
    assert [last[name] for name in ("density", "temperature", "pressure", "energy_density", "internal_energy")] == [
        0
    ] * 5


def test_the_surface_is_that_of_the_tabulated_family(onset):
    made = columns(onset, 20)
    mu = composition.mean_molecular_weight(HELIUM, 0.0)
    expected = family.stars(onset.star.beta, onset.star.sigma, mu)
    assert made["radius"][-1] == pytest.approx(float(expected.radius), rel=1e-10)
    assert made["mass"][-1] == pytest.approx(float(expected.gravitational_mass), rel=1e-11)
    assert made["rest_mass"][-1] == pytest.approx(1e5 * M_SUN, rel=1e-11)


def test_the_centre_is_that_of_the_star(star):
    found, made = star
    first = {name: values[0] for name, values in made.items()}
    assert first["density"] == pytest.approx(float(found.star.density), rel=1e-10)
    assert first["temperature"] == pytest.approx(float(found.star.temperature), rel=1e-10)
    assert first["pressure"] / first["energy_density"] == pytest.approx(float(found.star.sigma), rel=1e-10)
    assert (first["radius"], first["mass"], first["rest_mass"], first["isotropic_radius"]) == (0, 0, 0, 0)
    assert (first["g_rr"], first["xi_over_r"]) == (1, 1)


def test_matter_is_in_hydrostatic_balance(star):
    _, made = star
    row = inner(made)
    pull = G * (row["mass"] + 4.0 * np.pi * row["radius"] ** 3 * row["pressure"] / C**2) / row["radius"] ** 2
    force = (row["energy_density"] + row["pressure"]) / C**2 * pull * row["g_rr"]
    missing = slope({"radius": made["radius"], "p": made["pressure"] * made["radius"]}, "p")[1:-1]  # odd, so r P
    missing = (missing - row["pressure"]) / row["radius"] + force
    assert np.max(np.abs(missing)[5:-5]) < 1e-7 * np.max(force)


def test_rest_mass_fills_the_proper_volume(star):
    _, made = star
    source = 4.0 * np.pi * made["radius"] ** 2 * made["density"] * np.sqrt(made["g_rr"])
    assert np.max(np.abs(slope(made, "rest_mass", 4) - source)) < 1e-8 * np.max(source)


def test_lapse_times_enthalpy_is_uniform(star):
    _, made = star
    row = {name: values[:-1] for name, values in made.items()}
    enthalpy = (row["energy_density"] + row["pressure"]) / (row["density"] * C**2)
    np.testing.assert_allclose(row["lapse"] * enthalpy, made["lapse"][-1], rtol=1e-11)


def test_entropy_is_uniform_and_temperatures_belong_to_densities(star):
    found, made = star
    row = inner(made)
    of = pairs.specific_entropy if found.with_pairs else eos.specific_entropy
    local = of(row["density"], row["temperature"], found.helium, found.metals)
    np.testing.assert_allclose(local, row["entropy"], rtol=1e-9)
    pressure = (
        pairs.pressure
        if found.with_pairs
        else lambda rho, t, y, z: eos.pressure(rho, t, composition.mean_molecular_weight(y, z))
    )
    np.testing.assert_allclose(
        pressure(row["density"], row["temperature"], found.helium, found.metals), row["pressure"], rtol=1e-9
    )


def test_energies_add_up(star):
    row = inner(star[1])
    np.testing.assert_allclose(row["energy_density"], row["density"] * (C**2 + row["internal_energy"]), rtol=1e-13)


def test_the_mixture_is_that_of_the_star(star):
    found, made = star
    assert made["hydrogen"] + made["helium"] + made["metals"] == pytest.approx(1.0, abs=1e-15)
    assert made["electron_fraction"] == pytest.approx((1.0 + made["hydrogen"]) / 2.0, abs=1e-15)
    assert (made["helium"][7], made["metals"][7]) == (found.helium, found.metals)


# ------------------------------------------------------------------------------------------------ isotropic form
def test_the_isotropic_form_meets_the_exterior_solution(star):
    _, made = star
    mass, radius = G * made["mass"][-1] / C**2, made["isotropic_radius"][-1]
    assert made["conformal_factor"][-1] == pytest.approx(1.0 + mass / (2.0 * radius), abs=1e-12)
    lapse = (1.0 - mass / (2.0 * radius)) / (1.0 + mass / (2.0 * radius))
    assert made["lapse"][-1] == pytest.approx(lapse, rel=1e-12)
    assert made["radius"][-1] == pytest.approx(radius * (1.0 + mass / (2.0 * radius)) ** 2, rel=1e-14)


def test_areal_and_isotropic_form_are_one_geometry(star):
    """psi^4 d rb^2 = g_rr dr^2 and psi^2 rb = r, out to the surface, where the derivative is one-sided."""
    _, made = star
    stretched = slope(made, "isotropic_radius", 4)
    np.testing.assert_allclose(made["conformal_factor"] ** 2 * stretched, np.sqrt(made["g_rr"]), rtol=1e-9)
    np.testing.assert_allclose(made["conformal_factor"] ** 2 * made["isotropic_radius"], made["radius"], rtol=1e-14)


# ------------------------------------------------------------------------------------------------ pulsation
@pytest.mark.parametrize("name", ["heavy", "unstable", "light", "paired"])
def test_the_mode_satisfies_the_pulsation_equation(name):
    """(Chandrasekhar 1964, eq. 59, for zeta = r^2 e^(-nu/2) xi; Bardeen, Thorne & Meltzer 1966, eq. 4.)"""
    found = STARS[name]()
    made = columns(found, 801, "uniform")
    row = inner(made)
    r, flow, bent = row["radius"], row["lapse"], np.sqrt(row["g_rr"])
    p, heavy = (G / C**4 * density for density in (row["pressure"], row["energy_density"] + row["pressure"]))
    falling = -heavy * row["g_rr"] * (G * row["mass"] / C**2 + 4.0 * np.pi * r**3 * p) / r**2  # dP/dr
    # r^2 e^(-nu/2) xi is odd; what it is multiplied with, and the tension, are even
    zeta = row["xi_over_r"] * r**3 / flow
    slope_of_zeta = constraint.derivative(made["radius"], made["xi_over_r"] * made["radius"] ** 3 / made["lapse"], 6)
    tension = np.concatenate([[0.0], row["gamma_1"] * p * bent * flow**3 / r**2 * slope_of_zeta[1:-1]])
    tension[0] = 3.0 * made["gamma_1"][0] * made["pressure"][0] * G / C**4 * made["lapse"][0] ** 2
    odd = constraint.derivative(made["radius"][:-1], (tension - tension[0]) * made["radius"][:-1], 6)
    stress = (odd - tension + tension[0])[1:] / r
    pull = bent * flow**3 / r**2 * (falling**2 / heavy - 4.0 * falling / r - 8.0 * np.pi * heavy * p * bent**2)
    inertia = float(found.star.frequency_squared) / C**2 * heavy * bent**3 * flow / r**2
    missing = (stress + (pull + inertia) * zeta)[8:-8]
    assert np.max(np.abs(missing)) < 3e-6 * np.max(np.abs(stress))


def test_the_mode_of_a_heavy_star_is_nearly_homologous():
    mode = columns(STARS["heavy"](), 50)["xi_over_r"]
    assert np.all(np.abs(mode - 1.0) < 1e-3)


# ------------------------------------------------------------------------------------------------ matter as a table
def test_the_equation_of_state_is_the_stars_own(star):
    found, made = star
    table = profiles.equation_of_state(found)
    row = inner(made)
    for name in ("pressure", "energy_density", "temperature"):
        local = np.interp(np.log(row["density"]), np.log(table["density"]), np.log(table[name]))
        inside = row["density"] > table["density"][0]
        np.testing.assert_allclose(local[inside], np.log(row[name][inside]), atol=3e-4)
    assert table["density"][-1] > 100.0 * made["density"][0]


def test_the_equation_of_state_obeys_the_first_law(star):
    table = profiles.equation_of_state(star[0], 4000)
    rho = np.log(table["density"])
    energy = np.gradient(np.log(table["energy_density"] - table["density"] * C**2), rho)
    work = table["pressure"] / (table["density"] * table["internal_energy"])
    np.testing.assert_allclose(energy[2:-2], 1.0 + work[2:-2], rtol=2e-5)
    gamma = np.gradient(np.log(table["pressure"]), rho)
    np.testing.assert_allclose(gamma[2:-2], table["gamma_1"][2:-2], rtol=2e-5)
    assert np.ptp(table["entropy"]) == 0


# ------------------------------------------------------------------------------------------------ which star
def test_pairs_are_taken_in_where_they_matter():
    assert not equilibrium.at_onset(1e5 * M_SUN, HELIUM, 0.0).with_pairs
    assert equilibrium.at_onset(1e4 * M_SUN, HELIUM, 0.0).with_pairs
    assert not equilibrium.at_onset(1e4 * M_SUN, HELIUM, 0.0, with_pairs=False).with_pairs
    with pytest.raises(ComputationError, match="no onset of collapse"):
        equilibrium.at_onset(100 * M_SUN, HELIUM, 0.0)


@pytest.mark.parametrize("with_pairs", [False, True])
def test_a_density_is_that_of_the_star_with_the_temperature_found(with_pairs):
    found = equilibrium.at_density(1e5 * M_SUN, HELIUM, 0.0, 5.0, with_pairs)
    assert (found.with_pairs, float(found.star.density)) == (with_pairs, pytest.approx(5.0, rel=1e-10))
    again = equilibrium.at_temperature(1e5 * M_SUN, HELIUM, 0.0, float(found.star.temperature), with_pairs)
    assert float(again.star.density) == pytest.approx(5.0, rel=1e-6)
    assert float(found.star.rest_mass) == pytest.approx(1e5 * M_SUN, rel=1e-9)
