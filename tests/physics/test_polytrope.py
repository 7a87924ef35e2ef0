"""Lane-Emden spheres. Sources: sections 1 to 3 of the project's check values; their computed numbers (40-digit Taylor
steps) are good to all digits shown."""

import numpy as np
import pytest

from massdash.physics.integrate import integrate
from massdash.physics.polytrope import lane_emden, profile, standard_model
from massdash.physics.post_newtonian import K1, K2, K3, K4, critical_index_coefficient

# n, xi_1, -theta'(xi_1), -xi_1^2 theta', rho_c/rho_mean
SPHERES = [
    (0, 2.44948974278318, 0.816496580927726, 4.89897948556636, 1),
    (0.5, 2.75269805406499, 0.499997082944227, 3.78865118488401, 1.83514274247079),
    (1, 3.14159265358979, 0.318309886183791, 3.14159265358979, 3.28986813369645),
    (1.5, 3.65375373621912, 0.203301282638546, 2.71405512010865, 5.99070451630353),
    (2, 4.35287459594612, 0.127248651131175, 2.41104601209689, 11.4025428619513),
    (2.5, 5.35527545901078, 0.0762649134799931, 2.18719956551708, 23.4064622670627),
    (3, 6.89684861937696, 0.0424297576044530, 2.01823595096623, 54.1824811073408),
    (3.25, 8.01893752727151, 0.0303219612769820, 1.94980396358771, 88.1532415182615),
    (3.5, 9.53580534424485, 0.0207909839393312, 1.89055709344312, 152.883662970941),
    (4, 14.9715463488381, 0.00801807880640324, 1.79722991443925, 622.407882250705),
    (4.5, 31.8364632446943, 0.00171454891242902, 1.73779886766603, 6189.47312495375),
]
# n, K, integral of theta theta'^2 xi^2, K as printed by Chandrasekhar 1964 (from memory)
CRITICAL = [
    (0, 0.452380952381, 0.559883369779, 0.452381),
    (0.5, 0.503114554213, 0.519022026343, None),
    (1, 0.565382327525, 0.485131169621, 0.565382),
    (1.5, 0.645063030726, 0.456643641741, 0.645063),
    (2, 0.751296268097, 0.432459045545, 0.751296),
    (2.5, 0.900302693223, 0.411788268205, 0.900302),
    (3, 1.12447431198, 0.394059747018, 1.12447),
    (3.25, 1.28501978057, 0.386165350385, 1.28503),
    (3.5, 1.49953647854, 0.378863435253, 1.49953),
    (4, 2.25339473674, 0.365921546685, 2.25338),
    (4.5, 4.53038842328, 0.355087292672, None),
]


@pytest.mark.parametrize("row", SPHERES, ids=lambda row: f"n={row[0]}")
def test_surface_values(row):
    sphere = lane_emden(row[0])
    found = (sphere.radius, sphere.slope, sphere.mass, sphere.concentration)
    assert found == pytest.approx(row[1:], rel=1e-12)


@pytest.mark.parametrize("row", CRITICAL, ids=lambda row: f"n={row[0]}")
def test_critical_index(row):
    n, k, integral, printed = row
    sphere = lane_emden(n)
    assert sphere.slope_integral == pytest.approx(integral, abs=1e-12)
    assert critical_index_coefficient(sphere) == pytest.approx(k, rel=1e-11)
    if printed is not None:
        assert critical_index_coefficient(sphere) == pytest.approx(printed, abs=2e-5)


def test_closed_forms():
    """n = 0: xi_1 = sqrt 6; n = 1: sin xi/xi; n = 5: (1 + xi^2/3)^(-1/2)."""
    ends = lane_emden([0, 1, 5])
    assert ends.radius == pytest.approx([np.sqrt(6), np.pi, np.inf], rel=1e-13)
    assert ends.mass == pytest.approx([2 * np.sqrt(6), np.pi, np.sqrt(3)], rel=1e-13)
    assert ends.concentration == pytest.approx([1, np.pi**2 / 3, np.inf], rel=1e-13)
    assert ends.slope_integral[2] == pytest.approx(np.sqrt(3) / 5, rel=1e-14)
    assert critical_index_coefficient(lane_emden(0)) == pytest.approx(19 / 42, rel=1e-12)


@pytest.mark.parametrize(
    ("n", "xi_of", "slope_of"),
    [
        (0, lambda t: np.sqrt(6 * (1 - t)), lambda x, t: x / 3),
        (1, None, lambda x, t: (t - np.cos(x)) / x),
    ],
)
def test_profiles_in_closed_form(n, xi_of, slope_of):
    theta = np.array([0.99, 0.7, 0.3, 1e-3, 0.0])
    xi, phi = profile(n, theta)
    if xi_of:
        assert xi == pytest.approx(xi_of(theta), rel=1e-12)
    else:
        assert np.sin(xi) / xi == pytest.approx(theta, abs=1e-12)
    assert phi / xi**2 == pytest.approx(slope_of(xi, theta), rel=1e-11)


def test_shapes():
    assert lane_emden(3.0).radius.shape == ()
    assert lane_emden(np.zeros((2, 3))).mass.shape == (2, 3)
    assert lane_emden(np.zeros((0,))).radius.shape == (0,)


@pytest.mark.parametrize("n", [-0.1, 5.1, np.nan, [1, np.inf]])
def test_index_outside(n):
    with pytest.raises(ValueError, match=r"index n: .* is not allowed; give 0 to 5"):
        lane_emden(n)
    if np.ndim(n) == 0:
        with pytest.raises(ValueError, match=r"give 0 to below 5"):
            profile(n, [0.5])


def test_constants_of_the_standard_model():
    """Section 1, n = 3 derived constants, and section 3 (computed)."""
    sphere = standard_model()
    assert sphere.inertia == pytest.approx(0.113036459940, abs=1e-12)
    assert sphere.inertia * 2 / 3 == pytest.approx(0.0753576399601, abs=1e-13)
    assert pytest.approx(1.75578969093, abs=1e-11) == K1
    assert pytest.approx(0.639000453061, abs=1e-12) == K2
    assert pytest.approx(1.204100, abs=5e-7) == K3
    assert pytest.approx(0.918294253, abs=5e-10) == K4


def test_k4_by_the_integral_that_defines_it():
    """Section 3: dE = -(1/c^2) int [(Gm/r)^2/2 + u Gm/r + G dm1/r + (G^2 m/r^4) int m r' dr'] dm, u = 3P/rho.

    With r = a xi, m = 4 pi rho_c a^3 phi and potentials in units of K rho_c^(1/3): u = 3 theta, Gm/r = 4 phi/xi.
    """

    def rhs(xi, y):
        theta, phi, correction, moment, _ = y
        shell, potential = xi**2 * theta**3, 4 * phi / xi
        density = potential**2 / 2 + 3 * theta * potential + 4 * correction / xi + 16 * phi * moment / xi**4
        return [-phi / xi**2, shell, (3 * theta - potential) * shell, phi * xi, density * shell]

    small, sphere = 1e-3, standard_model()
    start = [1 - small**2 / 6, small**3 / 3, small**3, small**5 / 15, small**5 / 5 * 4]
    end = integrate(rhs, (small, sphere.radius * (1 - 1e-9)), start, rtol=1e-12, atol=1e-16, what="k4").y[:, -1]
    k4 = end[4] / sphere.mass * np.pi**2 / (4 * np.pi * sphere.mass) ** (4 / 3)
    assert pytest.approx(k4, rel=1e-9) == K4


def test_identity_between_k4_and_the_critical_index():
    """K(3) = (1/3)(k4/k2)(3 rho_c/(4 pi rho_mean))^(1/3), with the printed k4 and K."""
    sphere = standard_model()
    identity = 0.918294253 / K2 / 3 * np.cbrt(3 * sphere.concentration / (4 * np.pi))
    assert identity == pytest.approx(1.124474312, abs=2e-9)


def test_averages_over_mass_by_the_shipped_nodes():
    """Weights sum to one; the virial theorem gives the average of theta: 3 <P/rho> = |W| = (3/2) GM^2/R."""
    sphere = standard_model()
    assert sphere.weight.sum() == pytest.approx(1, abs=1e-14)
    assert 3 * np.sum(sphere.weight * sphere.theta) == pytest.approx(1.5 * 4 * sphere.mass / sphere.radius, rel=1e-13)
