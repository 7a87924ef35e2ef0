"""Relativistic isentropic stars by what a user knows of them: rest mass with temperature, density or entropy, the onset
of collapse, and the largest mass that ignites. All from the formula of ``family``, vectorised, in cgs.

The onset is where the lowest pulsation mode has no frequency, that is where the rest mass at fixed entropy turns. Slow
rotation and a thin background enter by their effect on the effective Gamma_1 (Ledoux 1945, ApJ 102, 143; McLaughlin &
Fuller 1996, ApJ 456, 71): <Gamma_1> + (2/3) T/|W| + 4.083 rho_b/rho_c.
"""

import numpy as np
from scipy.special import wrightomega

from massdash.constants import K_B, M_SUN, M_U, RADIATION, C
from massdash.errors import ComputationError
from massdash.physics import family
from massdash.physics.post_newtonian import EDDINGTON_MASS, K2, K_BACKGROUND
from massdash.physics.roots import secant

#: Shift of the effective Gamma_1 by a background, per rho_b/rho_c: from d2E/dy2 of the n = 3 energy functional.
BACKGROUND_SHIFT = 2.0 * K_BACKGROUND / K2
#: The same by rotation, per T/|W|.
ROTATION_SHIFT = 2.0 / 3.0

# exact derivatives: after a step of this size what is left is its square
_MOST, _TOLERANCE = 40, 1e-8


def _specific(z, theta):
    return 1.0 + theta * (3.0 * z + 1.5)


def _log_mass(u, theta, slope):
    """ln(M0 mu^2) [g] at z = e^u and theta, and its derivative by u when ln theta changes by ``slope`` du."""
    z = np.exp(u)
    beta = 1.0 / (1.0 + z)
    sigma = family.sigma_of_theta(beta, theta)
    _inside(beta, sigma)
    value, by_beta, by_sigma = family.lookup(beta, sigma, ("rest_mass",), derivatives=True)
    inner = _specific(z, theta)
    along = (3.0 * z + slope * (3.0 * z + 1.5)) * theta / inner  # d ln(epsilon/rho c^2)/du
    sigma_slope = slope + z * beta - along
    energy, _ = family._energy_density(beta, theta)
    logarithm = np.log(4.0 * np.pi * value) + 3.0 * np.log(family.length_unit(sigma, energy)) + np.log(energy)
    prefactor = 1.5 * sigma_slope - 0.5 * (3.0 * slope - 1.0 + along)
    return logarithm, prefactor + (sigma_slope * sigma * by_sigma - beta**2 * z * by_beta) / value


def _inside(beta, sigma):
    if not np.all(family.table().covers(beta, sigma)):
        raise ComputationError("no relativistic star in the table answers to these values")


def _start(rest_mass, mu):
    """ln z of the standard model, near enough for Newton's method (Eddington quartic)."""
    scaled = rest_mass * mu**2 / (EDDINGTON_MASS * M_SUN)
    u = np.log(np.where(scaled > 1.0, np.sqrt(scaled) - 0.6, scaled**2))
    for _ in range(4):
        z = np.exp(u)
        u = u - (u + 3.0 * np.log1p(z) - 2.0 * np.log(scaled)) / (1.0 + 3.0 * z / (1.0 + z))
    return u


def _of_mass(rest_mass, mu, theta_of, slope):
    """beta and sigma of the stars of given rest mass with theta = theta_of(u), by Newton's method for u = ln z."""
    rest_mass, mu = np.broadcast_arrays(np.asarray(rest_mass, float), np.asarray(mu, float))
    target = np.log(rest_mass * mu**2)
    u = _start(rest_mass, mu) + 0.0 * theta_of(np.zeros_like(target))
    for _ in range(_MOST):
        value, derivative = _log_mass(u, theta_of(u), slope)
        move = (value - target) / derivative
        u = u - move
        if np.max(np.abs(move), initial=0.0) < _TOLERANCE:
            break
    else:
        raise ComputationError("no relativistic star of this mass was found")
    beta = 1.0 / (1.0 + np.exp(u))
    return beta, family.sigma_of_theta(beta, theta_of(u))


def support(density, rotation=0.0, background=0.0):
    """What rotation and background add to the effective Gamma_1 at a central density [g cm-3]."""
    return ROTATION_SHIFT * rotation + BACKGROUND_SHIFT * background / density


def at_temperature(rest_mass, mu, temperature, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] with central ``temperature`` [K]."""
    theta = K_B * np.asarray(temperature, float) / (mu * M_U * C**2)
    beta, sigma = _of_mass(rest_mass, mu, lambda u: theta + 0.0 * u, 0.0)
    return _supported(beta, sigma, mu, rotation, background)


def _supported(beta, sigma, mu, rotation, background):
    density = family._energy_density(beta, family.central_theta(beta, sigma))[1] * mu**4
    return family.stars(beta, sigma, mu, support(density, rotation, background))


def at_density(rest_mass, mu, density, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] with central rest-mass ``density`` [g cm-3]: a point of the locus of equilibria."""
    scale = np.cbrt(3.0 * K_B * np.asarray(density, float) / (RADIATION * mu * M_U)) * K_B / (mu * M_U * C**2)
    beta, sigma = _of_mass(rest_mass, mu, lambda u: scale * np.exp(u / 3.0), 1.0 / 3.0)
    return family.stars(beta, sigma, mu, support(density, rotation, background))


# ------------------------------------------------------------------------------------------------ the onset
_ONSET = ("frequency_squared", "stiffness", "response")


def _balance_of_stiffness(beta, sigma, support):
    """ln(critical/(stiffness + support)) and its derivatives by beta and sigma; 0 at the onset."""
    rows = family.lookup(beta, sigma, _ONSET, derivatives=True)
    square, stiff, response = rows[:3]
    stiffness = beta * stiff
    critical = stiffness - response * square
    supported = stiffness + support
    derivatives = []
    for k, own in ((3, stiff), (6, 0.0)):
        d_square, d_stiff, d_response = rows[k : k + 3]
        d_stiffness = own + beta * d_stiff
        d_critical = d_stiffness - d_response * square - response * d_square
        derivatives.append(d_critical / critical - d_stiffness / supported)
    return np.log(critical / supported), *derivatives


def onset(rest_mass, mu, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] at the onset of collapse, with T/|W| = ``rotation`` and other matter of density
    ``background`` [g cm-3]; Newton's method for ln z and ln sigma together."""
    rest_mass, mu, rotation, background = np.broadcast_arrays(
        *(np.asarray(one, float) for one in (rest_mass, mu, rotation, background))
    )
    target = np.log(rest_mass * mu**2)
    u = _start(rest_mass, mu)
    beta = 1.0 / (1.0 + np.exp(u))
    w = np.log((beta / 6.0 + ROTATION_SHIFT * rotation) / 2.6325)  # leading order, see post_newtonian
    for _ in range(_MOST):
        z, sigma = np.exp(u), np.exp(w)
        beta = 1.0 / (1.0 + z)
        _inside(beta, sigma)
        theta = family.central_theta(beta, sigma)
        density = family._energy_density(beta, theta)[1] * mu**4
        thin = BACKGROUND_SHIFT * background / density
        value, by_beta, by_sigma = _balance_of_stiffness(beta, sigma, ROTATION_SHIFT * rotation + thin)
        # the background's share changes with density ~ theta^3/z, and theta ~ sigma/(1 + z)
        share = thin / (_stiffness_at(beta, sigma) + ROTATION_SHIFT * rotation + thin)
        theta_w = 1.0 / (1.0 - sigma * (3.0 * z + 1.5) / (1.0 + z))
        theta_u = -z * (1.0 - 3.0 * sigma) / (1.0 + z - sigma * (3.0 * z + 1.5))
        row = (-by_beta * z * beta**2 + share * (3.0 * theta_u - 1.0), by_sigma * sigma + share * 3.0 * theta_w)
        mass, mass_row = _mass_and_slopes(beta, sigma, z, theta, theta_u, theta_w)
        first = mass - target
        determinant = mass_row[0] * row[1] - mass_row[1] * row[0]
        move_u = (first * row[1] - mass_row[1] * value) / determinant
        move_w = (mass_row[0] * value - first * row[0]) / determinant
        u, w = u - np.clip(move_u, -2.0, 2.0), w - np.clip(move_w, -2.0, 2.0)
        if max(np.max(np.abs(move_u), initial=0.0), np.max(np.abs(move_w), initial=0.0)) < _TOLERANCE:
            return _supported(1.0 / (1.0 + np.exp(u)), np.exp(w), mu, rotation, background)
    raise ComputationError("no onset of collapse was found for this mass")


def _stiffness_at(beta, sigma):
    return beta * family.lookup(beta, sigma, ("stiffness",))[0]


def _mass_and_slopes(beta, sigma, z, theta, theta_u, theta_w):
    """ln(M0 mu^2) and its derivatives by u = ln z and w = ln sigma."""
    value, by_beta, by_sigma = family.lookup(beta, sigma, ("rest_mass",), derivatives=True)
    energy, _ = family._energy_density(beta, theta)
    inner = _specific(z, theta)
    energy_u = 3.0 * theta_u - 1.0 + theta * (theta_u * (3.0 * z + 1.5) + 3.0 * z) / inner
    energy_w = 3.0 * theta_w + theta * theta_w * (3.0 * z + 1.5) / inner
    logarithm = np.log(4.0 * np.pi * value) + 3.0 * np.log(family.length_unit(sigma, energy)) + np.log(energy)
    slope_u = -0.5 * energy_u - by_beta * z * beta**2 / value
    slope_w = 1.5 - 0.5 * energy_w + by_sigma * sigma / value
    return logarithm, (slope_u, slope_w)


def maximum_mass(mu, temperature, rotation=0.0, background=0.0):
    """Rest mass [g] of the star that meets the onset of collapse at just ``temperature`` [K]."""
    mu, temperature, rotation, background = np.broadcast_arrays(
        *(np.asarray(one, float) for one in (mu, temperature, rotation, background))
    )
    theta = K_B * temperature / (mu * M_U * C**2)

    def residual(u):
        beta = 1.0 / (1.0 + np.exp(u))
        sigma = family.sigma_of_theta(beta, theta)
        _inside(beta, sigma)
        density = family._energy_density(beta, theta)[1] * mu**4
        support = ROTATION_SHIFT * rotation + BACKGROUND_SHIFT * background / density
        return _balance_of_stiffness(beta, sigma, support)[0]

    u = secant(residual, _start_of_onset(theta, rotation), what="maximum mass in full relativity")
    return np.exp(_log_mass(u, theta, 0.0)[0]) / mu**2


def _start_of_onset(theta, rotation):
    """ln z where, at leading order, 2.6325 theta z = 1/(6 z) + (2/3) T/|W|."""
    half = ROTATION_SHIFT * rotation / (2.0 * 2.6325 * theta)
    return np.log(half + np.sqrt(half**2 + 1.0 / (6.0 * 2.6325 * theta)))


# ------------------------------------------------------------------------------------------------ constant entropy
def entropy_constant(beta, temperature):
    """4z + ln z - 1.5 ln T, which is constant along an isentrope; mu times the entropy per baryon, up to a constant."""
    z = (1.0 - beta) / beta
    return 4.0 * z + np.log(z) - 1.5 * np.log(temperature)


def _on_isentrope(constant, mu, log_temperature):
    """beta and sigma of the star with this entropy constant and ln T_c."""
    z = wrightomega(constant + 1.5 * log_temperature + np.log(4.0)) / 4.0
    beta = 1.0 / (1.0 + z)
    sigma = family.sigma_of_theta(beta, K_B * np.exp(log_temperature) / (mu * M_U * C**2))
    _inside(beta, sigma)
    return beta, sigma


def along_entropy(star, mu, temperature):
    """The Star of the same entropy as ``star`` with another central ``temperature`` [K]."""
    constant = entropy_constant(star.beta, star.temperature)
    return family.stars(*_on_isentrope(constant, mu, np.log(temperature)), mu)


def turning_point(star, mu):
    """The Star of largest rest mass among those with the entropy of ``star``; beyond it they collapse."""
    constant = entropy_constant(star.beta, star.temperature)

    def residual(log_temperature):
        return _balance_of_stiffness(*_on_isentrope(constant, mu, log_temperature), 0.0)[0]

    # sigma ~ T z at onset is beta/16, and z hardly changes along an isentrope
    start = np.log(star.temperature * star.beta / (15.8 * star.sigma))
    return family.stars(*_on_isentrope(constant, mu, secant(residual, start, what="turning point")), mu)


def at_entropy(rest_mass, star, mu):
    """The stable Star of ``rest_mass`` [g] with the entropy of ``star``; arrays broadcast.

    Raises ComputationError where the rest mass is beyond the largest, or below the least in the table, of its entropy.
    """
    from scipy.optimize.elementwise import find_root

    limit = turning_point(star, mu)
    rest_mass, mu, constant, top = np.broadcast_arrays(
        np.asarray(rest_mass, float), mu, entropy_constant(star.beta, star.temperature), np.log(limit.temperature)
    )
    ratio = rest_mass / limit.rest_mass
    if not np.all(ratio <= 1.0):
        raise ComputationError(
            f"no star of this entropy has this rest mass: it is {np.max(ratio):.6g} times the largest that is allowed"
        )
    least = (1.0 - family.table().beta[1]) / family.table().beta[1]
    bottom = np.maximum(top - 9.0, (4.0 * least + np.log(least) - constant) / 1.5 + 1e-9)

    def excess(log_temperature, constant, mu, rest_mass):
        stars = family.stars(*_on_isentrope(constant, mu, log_temperature), mu)
        return np.log(stars.rest_mass / rest_mass)

    tight = {"xatol": 1e-13, "xrtol": 0.0, "fatol": 0.0, "frtol": 0.0}
    found = find_root(excess, (bottom, top), args=(constant, mu, rest_mass), tolerances=tight)
    if not np.all(found.success):
        raise ComputationError("no star of this entropy and rest mass lies in the table")
    return family.stars(*_on_isentrope(constant, mu, found.x), mu)
