"""Stars that several tests of full relativity look at, and independent roads to them."""

import numpy as np

from massdash.physics import family
from massdash.physics.integrate import integrate


def tooper(star):
    """(xi_1, v) of rest-mass polytropes in the units of Tooper (1965): his A^2 and mass use rho_c, ours epsilon_c."""
    share = 1.0 - star.matter.index * star.matter.sigma
    return star.radius * share, star.mass * share**2


def of_rest(sigma, index):
    """Our P_c/epsilon_c from Tooper's P_c/(rho_c c^2)."""
    return np.atleast_1d(sigma) / (1.0 + index * np.atleast_1d(sigma))


def one(value):
    return np.array([float(value)])


def state_at(matter, h):
    return matter.at(np.array([[max(h, 1e-30)]]))


def balance(matter, xi, h, v):
    """(dh/dxi, e^-lambda, state) of the equations of balance."""
    sigma, state = matter.sigma[0], state_at(matter, h)
    metric = 1.0 - 2.0 * matter.order * sigma * v / xi
    return -(v / xi**2 + sigma * xi * state.pressure[0, 0]) / metric, metric, state


def centre_of(matter, xi):
    """(h, v) at a small radius."""
    return matter.depth[0] - xi**2 * (1.0 / 3.0 + matter.sigma[0]) / 2.0, xi**3 / 3.0


def by_radius(matter, rtol=1e-12):
    """(xi, v, v_rest) where h vanishes: the equations of balance in radius by DOP853."""

    def rhs(xi, y):
        dh, metric, state = balance(matter, xi, y[0], y[1])
        return np.array([dh, xi**2 * state.energy[0, 0], xi**2 * state.rest[0, 0] / np.sqrt(metric)])

    def surface(_, y):
        return y[0]

    surface.terminal = True
    small = 1e-4
    h, mass = centre_of(matter, small)
    start = [h, mass, mass * state_at(matter, h).rest[0, 0]]
    found = integrate(rhs, (small, 1e4), start, rtol=rtol, atol=1e-15, what="star in radius", events=surface)
    return found.t_events[0][0], *found.y_events[0][0][1:]


def eigenvalue_by_shooting(matter, radius, mass, low, high):
    """omega^2 in GM/R^3 between two bounds (brentq): the equation of radial pulsation in the form of Chanmugam (1977,
    ApJ 217, 799; first order in zeta = xi/r and the Lagrangian pressure change), integrated with the balance from the
    centre outwards over h by DOP853 and matched to the solution that is regular at the surface."""
    from scipy.optimize import brentq

    order, sigma, depth = matter.order, matter.sigma[0], matter.depth[0]
    compactness = order * sigma * mass / radius
    unit = compactness / radius**2

    def local(square, xi, h, v):
        dh, metric, state = balance(matter, xi, h, v)
        p, energy = sigma * state.pressure[0, 0], state.energy[0, 0]
        lapse = (1.0 - 2.0 * compactness) * np.exp(-2.0 * order * sigma * h)
        moving = square * unit / (metric * lapse) * (energy + p) * xi
        return dh, metric, p, energy, state.excess[0, 0] + 4.0 / 3.0, (energy + p) * order * sigma * dh, moving

    def rhs(h, y, square):
        xi, v, zeta, delta = y
        dh, metric, p, energy, gamma, slope, moving = local(square, xi, h, v)
        heavy = energy + p
        d_zeta = -(3.0 * zeta + delta / (gamma * p)) / xi - slope / heavy * zeta
        d_delta = zeta * (moving - 4.0 * slope)
        d_delta += zeta * (slope**2 * xi / heavy - 2.0 * order * sigma * heavy * p * xi / metric)
        d_delta += delta * (slope / heavy - order * sigma * heavy * xi / metric)
        return np.array([1.0, xi**2 * energy, d_zeta, d_delta]) / dh

    def mismatch(square):
        small, stop = 1e-4, 1e-3 * depth
        h, v = centre_of(matter, small)
        _, _, p, _, gamma, _, _ = local(square, small, h, v)
        found = integrate(
            lambda h, y: rhs(h, y, square),
            (h, stop),
            [small, v, 1.0, -3.0 * gamma * p],
            rtol=3e-10,
            atol=1e-15,
            what="pulsation",
        )
        xi, v, zeta, delta = found.y[:, -1]
        _, _, p, energy, _, slope, moving = local(square, xi, stop, v)
        return delta / p - zeta * (moving / slope - 4.0 + slope * xi / (energy + p))

    return brentq(mismatch, low, high, xtol=1e-11, rtol=1e-10)


def isentrope_by_integration(constant, log_temperature, mu):
    """(rest mass, mass, density, compactness) in cgs along an isentrope by direct integration, not from the table."""
    from massdash.constants import K_B, M_U, C
    from massdash.physics.eos import density as gas_density

    z = np.array([_ratio(constant + 1.5 * one) for one in log_temperature])
    beta, temperature = 1.0 / (1.0 + z), np.exp(log_temperature)
    theta = K_B * temperature / (mu * M_U * C**2)
    sigma = family.sigma_of_theta(beta, theta)
    mass, rest, radius = family.direct(beta, sigma, tolerance=1e-13, panels=8)[:3]
    density = gas_density(temperature, beta, mu)
    energy_density = density * (1.0 + theta * (3.0 * z + 1.5))
    unit = 4.0 * np.pi * family.length_unit(sigma, energy_density) ** 3 * energy_density
    return unit * rest, unit * mass, density, 4.0 * sigma * mass / radius


def _ratio(right):
    """z where 4 z + ln z = ``right``, by halving and Newton's method."""
    z = max(right / 4.0, 1e-3)
    for _ in range(60):
        z = max(z - (4.0 * z + np.log(z) - right) / (4.0 + 1.0 / z), 0.1 * z)
    return z
