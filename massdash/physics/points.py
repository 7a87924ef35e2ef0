"""Points of the family of relativistic isentropic stars, and how to look for one among them.

Stars are sought by u = ln z (z = P_rad/P_gas at the centre) and t = ln theta, theta = kT_c/(mu m_u c^2), which have no
bounds; functions return their value and its derivatives by u and by t.
"""

import numpy as np

from massdash.constants import K_B, M_U, C
from massdash.errors import ComputationError
from massdash.physics import family
from massdash.physics.barotropes import demand
from massdash.physics.polytrope import standard_model
from massdash.physics.post_newtonian import K2, K_BACKGROUND

#: Shift of the effective Gamma_1 by a background, per rho_b/rho_c: from d2E/dy2 of the n = 3 energy functional.
BACKGROUND_SHIFT = 2.0 * K_BACKGROUND / K2
#: The same by rotation, per T/|W|.
ROTATION_SHIFT = 2.0 / 3.0
#: -xi^2 theta' of the n = 3 sphere, the table's mass at sigma = beta = 0.
LANE_EMDEN_MASS = standard_model().mass
#: Gamma_crit - 4/3 over sigma at leading order.
CRITICAL = 2.6325
#: What ``balance`` needs of the table.
BALANCE = ("frequency_squared", "stiffness", "response")

# exact derivatives: after a step of this size what is left is its square
_MOST, _TOLERANCE, _LONGEST = 60, 1e-8, 2.0


def accept(**arguments):
    """The arguments as arrays of one shape; InputError unless ``background`` and ``rotation`` are finite and not
    negative and all others finite and positive."""
    arrays = np.broadcast_arrays(*(np.asarray(one, float) for one in arguments.values()))
    for name, array in zip(arguments, arrays, strict=True):
        may_vanish = name in ("rotation", "background")
        allowed = "a finite number that is not negative" if may_vanish else "a positive, finite number"
        demand(name, array, np.isfinite(array) & ((array >= 0) if may_vanish else (array > 0)), allowed)
    return arrays


def theta_at(mu, temperature):
    """kT/(mu m_u c^2)."""
    return K_B * temperature / (mu * M_U * C**2)


def beta_at(u):
    """P_gas/P where P_rad/P_gas is e^u."""
    return 1.0 / (1.0 + np.exp(u))


def rows(u, theta, names):
    """(beta, values, derivatives by u, derivatives by t), the last three (names, ...)."""
    beta = beta_at(u)
    sigma = family.sigma_of_theta(beta, theta)
    value, by_beta, by_sigma = np.split(family.values(beta, sigma, names, derivatives=True), 3)
    share = sigma**2 / theta
    by_u = beta * (beta - 1.0) * (by_beta - share * (1.0 - 1.5 * theta) * by_sigma)
    return beta, value, by_u, share * beta * by_sigma


def log_mass(beta, theta, rest, rest_u, rest_t):
    """ln(M0 mu^2/EDDINGTON_MASS) and its derivatives, from those of the rest mass in the unit of the table."""
    quotient = beta + theta * (3.0 - 1.5 * beta)
    value = np.log(rest / LANE_EMDEN_MASS) + 0.5 * np.log1p(-beta) - 2.0 * np.log(quotient)
    by_u = rest_u / rest + 0.5 * beta + 2.0 * (1.0 - 1.5 * theta) * beta * (1.0 - beta) / quotient
    return value, by_u, rest_t / rest - 2.0 * theta * (3.0 - 1.5 * beta) / quotient


def balance(beta, rows, rows_u, rows_t, support, thin, power=-3.0):
    """ln(critical/(stiffness + support)), 0 at the onset, and its derivatives; ``support`` is that of rotation and
    ``thin`` that of the background, which goes with the density as z theta^power: -3 at given weight, 1 at given
    temperature."""
    square, stiff, response = rows
    stiffness = beta * stiff
    critical = stiffness - response * square
    supported = stiffness + support + thin
    slopes = []
    for slope, own, moved in ((rows_u, beta * (beta - 1.0) * stiff, thin), (rows_t, 0.0, power * thin)):
        d_stiffness = own + beta * slope[1]
        d_critical = d_stiffness - slope[2] * square - response * slope[0]
        slopes.append(d_critical / critical - (d_stiffness + moved) / supported)
    return np.log(critical / supported), *slopes


def thin(beta, theta, mu, background):
    """What the background adds to the effective Gamma_1."""
    return BACKGROUND_SHIFT * background / (family.central_density(beta, theta) * mu**4)


def newton(step, start, what):
    """Newton's method for every element: ``step(u)`` is the move that would lead to the root."""
    u = start
    try:
        for _ in range(_MOST):
            move = np.clip(step(u), -_LONGEST, _LONGEST)
            u = u - move
            if np.max(np.abs(move), initial=0.0) < _TOLERANCE:
                return u
    except ComputationError as failure:
        raise ComputationError(f"no relativistic star with this {what} was found ({failure})") from failure
    raise ComputationError(f"no relativistic star with this {what} was found")


def bracketed(function, low, high, what):
    """Root of a rising function between ``low`` and ``high``, by Newton's method where it stays between the bounds
    found so far and by halving elsewhere; ``function`` returns value and slope."""
    x = np.maximum(low, high - 0.5)
    for _ in range(4 * _MOST):
        value, slope = function(x)
        low, high = np.where(value < 0, x, low), np.where(value < 0, high, x)
        newton = x - value / np.where(slope > 0, slope, np.inf)
        new = np.where((newton >= low) & (newton <= high) & (slope > 0), newton, 0.5 * (low + high))
        near = (np.abs(new - x) < _TOLERANCE) | (np.abs(value) < 1e-14)
        x = new
        if np.all(near):
            return x
    raise ComputationError(f"no relativistic star with this {what} was found")
