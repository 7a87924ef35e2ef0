"""Lane-Emden spheres of any index 0 <= n <= 5, and the n = 3 sphere in particular.

The equation is integrated from the centre outwards with w = theta^(1/2) as independent variable: xi(w) and the scaled
mass phi(w) = -xi^2 theta' are then smooth from the centre to the surface w = 0, which is an end point and no event to
be searched for, and theta^n = w^(2n) has bounded derivatives down to n = 1/2.
"""

from dataclasses import dataclass
from functools import cache
from importlib.resources import files

import numpy as np

from massdash.physics.integrate import integrate

SERIES_END = 0.05  # radius where the central series hands over; its first neglected term is below 1e-18 there


@dataclass(frozen=True, eq=False)
class Polytrope:
    """Surface values of Lane-Emden spheres; every array has the shape of the index.

    ``radius`` xi_1, ``slope`` -theta'(xi_1), ``mass`` -xi_1^2 theta'(xi_1), ``concentration`` rho_c over mean density,
    ``slope_integral`` the integral of theta theta'^2 xi^2 over the sphere (for the critical index).
    """

    index: np.ndarray
    radius: np.ndarray
    slope: np.ndarray
    mass: np.ndarray
    concentration: np.ndarray
    slope_integral: np.ndarray


def _central_series(n, xi):
    """theta and phi near the centre, through xi^8 (Chandrasekhar 1939, ch. IV, eq. 24, two terms further)."""
    a = (-1 / 6, n / 120, -n * (8 * n - 5) / 15120, n * (122 * n**2 - 183 * n + 70) / 3265920)
    theta = 1 + sum(c * xi ** (2 * k) for k, c in enumerate(a, 1))
    phi = -sum(2 * k * c * xi ** (2 * k + 1) for k, c in enumerate(a, 1))
    return theta, phi


def _solve(n, stops):
    """State (xi, phi, slope integral) at decreasing values ``stops`` of w; each is the end of its own integration."""

    def rhs(w, y):
        xi, phi, _ = y
        dxi = -2 * w * xi**2 / phi
        return [dxi, xi**2 * w ** (2 * n) * dxi, -2 * w**3 * phi]

    theta, phi = _central_series(n, SERIES_END)
    slope_integral = SERIES_END**5 / 45 - SERIES_END**7 * (1 + 1.2 * n) / (7 * 54)
    w, state, states = np.sqrt(theta), [SERIES_END, phi, slope_integral], []
    for stop in stops:
        what = f"Lane-Emden equation, n = {n:g}"
        state = integrate(rhs, (w, stop), state, rtol=2.3e-14, atol=1e-18, what=what).y[:, -1]
        w = stop
        states.append(state)
    return np.array(states)


def lane_emden(n):
    """Lane-Emden spheres of index ``n`` (any shape, 0 to 5); errors below 1e-12 of each value up to n = 4.5.

    n = 5 has infinite radius and concentration and mass sqrt(3). Raises ValueError outside 0..5.
    """
    n = np.asarray(n, float)
    if not np.all((n >= 0) & (n <= 5)):
        raise ValueError(f"index n: {n} is not allowed; give 0 to 5")
    rows = [_surface(float(one)) for one in n.ravel()]
    radius, mass, integral = np.array(rows).reshape(*n.shape, 3).transpose(-1, *range(n.ndim))
    with np.errstate(divide="ignore", invalid="ignore"):
        concentration = np.where(n == 5, np.inf, radius**3 / (3 * mass))
    return Polytrope(n, radius, mass / radius**2, mass, concentration, integral)


@cache
def _surface(n):
    if n == 5:
        return np.inf, np.sqrt(3.0), np.sqrt(3.0) / 5
    return tuple(_solve(n, [0.0])[-1])


def profile(n, theta):
    """xi and -xi^2 theta' where the sphere of one index ``n`` (a number, 0 to below 5) has the given theta values.

    ``theta`` (k,) decreases from at most 0.999 to at least 0. Good to 1e-12; meant for nodes of a quadrature.
    """
    if not 0 <= n < 5:
        raise ValueError(f"index n: {n} is not allowed; give 0 to below 5")
    return _solve(n, np.sqrt(np.asarray(theta, float))).T[:2]


# ------------------------------------------------------------------------------------------------ the n = 3 sphere
@dataclass(frozen=True, eq=False)
class StandardModel:
    """The n = 3 sphere: its constants, and nodes that turn mass averages into sums.

    ``inertia`` is the integral of r^2 dm over M R^2, ``slope_integral`` as in Polytrope; ``theta`` and ``weight``
    (k,): the average over mass of f(theta) is sum(weight * f(theta)).
    """

    radius: float
    slope: float
    mass: float
    concentration: float
    slope_integral: float
    inertia: float
    theta: np.ndarray
    weight: np.ndarray
    index: float = 3.0


@cache
def standard_model():
    """The n = 3 sphere from the shipped table (data/builders/standard_model.py writes it, a test recomputes it)."""
    text = (files("massdash") / "data" / "standard_model.csv").read_text()
    rows = [line.split(",") for line in text.splitlines() if line and not line.startswith("#")]
    constants = {name: float(value) for name, value in rows[:6]}
    theta, weight = np.array(rows[7:], float).T
    return StandardModel(**constants, theta=theta, weight=weight)
