"""Relativistic isentropic stars by what a user knows of them: rest mass with temperature, density or entropy, the onset
of collapse, and the largest mass that ignites. All from the formula of ``family``, vectorised, in cgs; stars outside
its box are integrated directly.

With theta = kT_c/(mu m_u c^2) and D = theta/sigma = beta + theta (3 - 1.5 beta) the rest mass is

    M0 mu^2 = EDDINGTON_MASS (v_rest/2.01824) (1 - beta)^(1/2)/D^2,

Eddington's quartic with two factors, so that D is nearly w = (EDDINGTON_MASS/(M0 mu^2))^(1/2); the table holds D/w as
a function of w and theta. The onset is where the lowest pulsation mode has no frequency, that is where the rest mass at
fixed entropy turns. Slow rotation and a thin background enter by their effect on the effective Gamma_1 (Ledoux 1945,
ApJ 102, 143; McLaughlin & Fuller 1996, ApJ 456, 71): <Gamma_1> + (2/3) T/|W| + 4.083 rho_b/rho_c.
"""

import numpy as np
from scipy.special import wrightomega

from massdash.constants import K_B, M_SUN, M_U, C, G
from massdash.errors import ComputationError
from massdash.physics import eos, family
from massdash.physics.barotropes import demand
from massdash.physics.polytrope import standard_model
from massdash.physics.post_newtonian import EDDINGTON_MASS, K2, K_BACKGROUND
from massdash.physics.series import BLOCK

#: Shift of the effective Gamma_1 by a background, per rho_b/rho_c: from d2E/dy2 of the n = 3 energy functional.
BACKGROUND_SHIFT = 2.0 * K_BACKGROUND / K2
#: The same by rotation, per T/|W|.
ROTATION_SHIFT = 2.0 / 3.0
#: -xi^2 theta' of the n = 3 sphere, the table's mass at sigma = beta = 0.
LANE_EMDEN_MASS = standard_model().mass
#: A mean molecular weight above that of any mixture here (pure metals have 2).
HEAVIEST = 2.0
#: Gamma_crit - 4/3 over sigma at leading order.
CRITICAL = 2.6325

# exact derivatives: after a step of this size what is left is its square
_MOST, _TOLERANCE, _LONGEST = 60, 1e-8, 2.0


def _accept(**arguments):
    """The arguments as arrays of one shape; InputError unless ``background`` and ``rotation`` are finite and not
    negative and all others finite and positive."""
    arrays = np.broadcast_arrays(*(np.asarray(one, float) for one in arguments.values()))
    for name, array in zip(arguments, arrays, strict=True):
        may_vanish = name in ("rotation", "background")
        allowed = "a finite number that is not negative" if may_vanish else "a positive, finite number"
        demand(name, array, np.isfinite(array) & ((array >= 0) if may_vanish else (array > 0)), allowed)
    return arrays


def _theta(mu, temperature):
    return K_B * temperature / (mu * M_U * C**2)


# ------------------------------------------------------------------------------------------------ points of the family
# Stars are sought by u = ln z (z = P_rad/P_gas at the centre) and t = ln theta, which have no bounds; functions return
# their value and its derivatives by u and by t.
def _beta(u):
    return 1.0 / (1.0 + np.exp(u))


def _rows(u, theta, names):
    """(beta, values, derivatives by u, derivatives by t), the last three (names, ...)."""
    beta = _beta(u)
    sigma = family.sigma_of_theta(beta, theta)
    value, by_beta, by_sigma = np.split(family.values(beta, sigma, names, derivatives=True), 3)
    share = sigma**2 / theta
    by_u = beta * (beta - 1.0) * (by_beta - share * (1.0 - 1.5 * theta) * by_sigma)
    return beta, value, by_u, share * beta * by_sigma


def _log_mass(beta, theta, rest, rest_u, rest_t):
    """ln(M0 mu^2/EDDINGTON_MASS) and its derivatives, from those of the rest mass in the unit of the table."""
    quotient = beta + theta * (3.0 - 1.5 * beta)
    value = np.log(rest / LANE_EMDEN_MASS) + 0.5 * np.log1p(-beta) - 2.0 * np.log(quotient)
    by_u = rest_u / rest + 0.5 * beta + 2.0 * (1.0 - 1.5 * theta) * beta * (1.0 - beta) / quotient
    return value, by_u, rest_t / rest - 2.0 * theta * (3.0 - 1.5 * beta) / quotient


def _balance(beta, rows, rows_u, rows_t, support, thin, power=-3.0):
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


_BALANCE = ("frequency_squared", "stiffness", "response")


def _thin(beta, theta, mu, background):
    return BACKGROUND_SHIFT * background / (family.central_density(beta, theta) * mu**4)


def _newton(step, start, what):
    """Newton's method for every element: ``step(u)`` is the move that would lead to the root."""
    u = start
    for _ in range(_MOST):
        move = np.clip(step(u), -_LONGEST, _LONGEST)
        u = u - move
        if not np.all(np.isfinite(u)):
            break
        if np.max(np.abs(move), initial=0.0) < _TOLERANCE:
            return u
    raise ComputationError(f"no relativistic star has this {what}")


# ------------------------------------------------------------------------------------------------ at a given rest mass
def _w(rest_mass, mu):
    return np.sqrt(EDDINGTON_MASS * M_SUN / rest_mass) / mu


def _start(w):
    """ln z of the standard model, near enough for Newton's method."""
    beta = w / (1.0 + w / 4.0 + w**2 / 8.0 + w**4 / (1.0 + w))
    return np.log((1.0 - beta) / beta)


def _of_mass(w, theta_of, slope, what):
    """u of the stars of given rest mass with theta = theta_of(u), whose ln changes by ``slope`` du."""
    target = -2.0 * np.log(w)

    def step(u):
        theta = theta_of(u)
        beta, *rest = _rows(u, theta, ("rest_mass",))
        value, by_u, by_t = _log_mass(beta, theta, *(row[0] for row in rest))
        return (value - target) / (by_u + slope * by_t)

    return _newton(step, _start(w), what)


def _from_temperature(w, theta):
    """(beta, sigma) by the table of D/w; Newton's method where it does not reach."""
    root, ratio = np.sqrt(w), theta / w
    inverse = family.table().inverse
    inside = inverse.covers(root, ratio)
    if not np.all(inside):
        return _sought(w, theta, inside)
    shift = inverse(root.ravel(), ratio.ravel())[0].reshape(w.shape)
    return (shift * w - 3.0 * theta) / (1.0 - 1.5 * theta), ratio / shift


def _sought(w, theta, inside):
    w, theta, beta, sigma = np.asarray(w), np.asarray(theta), np.empty(w.shape), np.empty(w.shape)
    beta[inside], sigma[inside] = _from_temperature(w[inside], theta[inside])
    w, theta = w[~inside], theta[~inside]
    beta[~inside] = _beta(_of_mass(w, lambda u: theta + 0.0 * u, 0.0, "rest mass and central temperature"))
    sigma[~inside] = family.sigma_of_theta(beta[~inside], theta)
    return beta, sigma


def support(density, rotation=0.0, background=0.0):
    """What rotation and background add to the effective Gamma_1 at a central density [g cm-3]."""
    return ROTATION_SHIFT * rotation + BACKGROUND_SHIFT * background / density


def _supported(beta, sigma, mu, rotation, background):
    density = family.central_density(beta, family.central_theta(beta, sigma)) * mu**4
    return family.stars(beta, sigma, mu, support(density, rotation, background))


def covers(rest_mass, mu, temperature):
    """Whether the table holds the star of this rest mass [g] and central temperature [K]; where it does not, the others
    integrate directly, which takes milliseconds a star. Only stars far beyond their onset, or heavier than 1e8 Msun,
    are outside."""
    rest_mass, mu, temperature = _accept(rest_mass=rest_mass, mu=mu, temperature=temperature)
    w = _w(rest_mass, mu)
    return family.table().inverse.covers(np.sqrt(w), _theta(mu, temperature) / w)


def covers_density(rest_mass, mu, density):
    """The same for a central rest-mass density [g cm-3], by the temperature that the standard model has there."""
    rest_mass, mu, density = _accept(rest_mass=rest_mass, mu=mu, density=density)
    return covers(rest_mass, mu, eos.temperature(density, _beta(_start(_w(rest_mass, mu))), mu))


def at_temperature(rest_mass, mu, temperature, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] with central ``temperature`` [K]."""
    rest_mass, mu, temperature, rotation, background = _accept(
        rest_mass=rest_mass, mu=mu, temperature=temperature, rotation=rotation, background=background
    )
    beta, sigma = _from_temperature(_w(rest_mass, mu), _theta(mu, temperature))
    return _supported(beta, sigma, mu, rotation, background)


def brief(rest_mass, mu, temperature):
    """Gravitational mass [g], radius [cm], (M - M0)/M0 and squared frequency [s-2] of the stars of ``rest_mass`` [g]
    with central ``temperature`` [K], stacked (4, ...); as ``at_temperature``, in blocks and with nothing else."""
    rest_mass, mu, temperature = _accept(rest_mass=rest_mass, mu=mu, temperature=temperature)
    shape = rest_mass.shape
    rest_mass, mu, temperature = rest_mass.ravel(), mu.ravel(), temperature.ravel()
    result = np.empty((4, rest_mass.size))
    for start in range(0, rest_mass.size, BLOCK):
        part = slice(start, start + BLOCK)
        result[:, part] = _brief(rest_mass[part], mu[part], temperature[part])
    return result.reshape(4, *shape)


def _brief(rest_mass, mu, temperature):
    beta, sigma = _from_temperature(_w(rest_mass, mu), _theta(mu, temperature))
    mass, radius, binding, square = family.values(beta, sigma, ("mass", "radius", "binding", "frequency_squared"))
    binding = sigma * binding
    rest = mass - binding
    heavy = rest_mass * mass / rest
    compactness = 4.0 * sigma * mass / radius
    size = G / C**2 * heavy / compactness
    return heavy, size, binding / rest, square * compactness * (C / size) ** 2


def at_density(rest_mass, mu, density, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] with central rest-mass ``density`` [g cm-3]: a point of the locus of equilibria.

    Raises ComputationError where a star of this mass cannot be so dense.
    """
    rest_mass, mu, density, rotation, background = _accept(
        rest_mass=rest_mass, mu=mu, density=density, rotation=rotation, background=background
    )
    scale = np.cbrt(density / (family.central_density(0.5, 1.0) * mu**4))

    def theta(u):
        return scale * np.exp(u / 3.0)

    u = _of_mass(_w(rest_mass, mu), theta, 1.0 / 3.0, "rest mass and central density")
    beta = _beta(u)
    return family.stars(beta, family.sigma_of_theta(beta, theta(u)), mu, support(density, rotation, background))


# ------------------------------------------------------------------------------------------------ the onset
def onset(rest_mass, mu, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] at the onset of collapse, with T/|W| = ``rotation`` and other matter of density
    ``background`` [g cm-3]; Newton's method for ln z and ln theta together."""
    rest_mass, mu, rotation, background = _accept(rest_mass=rest_mass, mu=mu, rotation=rotation, background=background)
    w, turning = _w(rest_mass, mu), ROTATION_SHIFT * rotation

    def step(place):
        u, theta = place[0], np.exp(place[1])
        beta, *rows = _rows(u, theta, ("rest_mass", *_BALANCE))
        mass, mass_u, mass_t = _log_mass(beta, theta, *(row[0] for row in rows))
        thin = _thin(beta, theta, mu, background)
        value, by_u, by_t = _balance(beta, *(row[1:] for row in rows), turning, thin)
        excess = mass + 2.0 * np.log(w)
        determinant = mass_u * by_t - mass_t * by_u
        return np.stack([excess * by_t - mass_t * value, mass_u * value - excess * by_u]) / determinant

    u, t = _newton(step, _start_of_onset(w, mu, turning, background), "rest mass and an onset of collapse")
    beta = _beta(u)
    return _supported(beta, family.sigma_of_theta(beta, np.exp(t)), mu, rotation, background)


def _start_of_onset(w, mu, turning, background):
    """(ln z, ln theta) from the leading order, CRITICAL sigma = beta/6 + 2/3 T/|W| + what the background adds; that
    goes as sigma^-3."""
    u = _start(w)
    beta = _beta(u)
    own = (beta / 6.0 + turning) / CRITICAL
    sigma = own + (_thin(beta, beta, mu, background) / CRITICAL) ** 0.25
    sigma = np.minimum(sigma, 0.3)
    return np.stack([u, np.log(family.central_theta(beta, sigma * (1.0 - 1.1 * beta / (1.0 + beta))))])


def maximum_mass(mu, temperature, rotation=0.0, background=0.0):
    """Rest mass [g] of the star that meets the onset of collapse at just ``temperature`` [K].

    Raises ComputationError where the background holds up stars of any mass.
    """
    mu, temperature, rotation, background = _accept(
        mu=mu, temperature=temperature, rotation=rotation, background=background
    )
    theta, turning = _theta(mu, temperature), ROTATION_SHIFT * rotation

    def step(u):
        beta, *rows = _rows(u, theta, _BALANCE)
        value, by_u, _ = _balance(beta, *rows, turning, _thin(beta, theta, mu, background))
        return value / by_u

    pull = _pull(mu, temperature, background)
    if not np.all(pull > 0):
        raise ComputationError("there is no maximum mass at this temperature: the background holds up every star")
    half = turning / (2.0 * pull)
    u = _newton(step, np.log(half + np.sqrt(half**2 + 1.0 / (6.0 * pull))), "onset temperature")
    beta = _beta(u)
    rest = family.values(beta, family.sigma_of_theta(beta, theta), ("rest_mass",))[0]
    return EDDINGTON_MASS * M_SUN * np.exp(_log_mass(beta, theta, rest, 0.0, 0.0)[0]) / mu**2


def _pull(mu, temperature, background):
    """What is left of relativity's pull, CRITICAL theta, beside the background's push per z; not positive where stars
    of any mass are held up. At leading order pull z = 1/(6 z) + 2/3 T/|W| at the onset."""
    theta = _theta(mu, temperature)
    return CRITICAL * theta - _thin(0.5, theta, mu, background)


def weight_for(rest_mass, temperature, rotation=0.0, background=0.0):
    """Mean molecular weight at which the star of ``rest_mass`` [g] meets the onset at just ``temperature`` [K].

    Infinite where not even HEAVIEST brings it there, as when rotation or background alone hold it up.
    """
    temperature, rotation, background = _accept(temperature=temperature, rotation=rotation, background=background)
    falls = np.asarray(_pull(HEAVIEST, temperature, background) > 0)
    least = np.full(temperature.shape, np.inf)  # mass that meets the onset when it is made of HEAVIEST
    least[falls] = maximum_mass(HEAVIEST, temperature[falls], rotation[falls], background[falls])
    rest_mass, temperature, rotation, background, least = np.broadcast_arrays(
        *_accept(rest_mass=rest_mass), temperature, rotation, background, least
    )
    exists = rest_mass >= least
    weight = np.full(rest_mass.shape, np.inf)
    if np.any(exists):
        weight[exists] = _weight_for(*(one[exists] for one in (rest_mass, temperature, rotation, background)))
    return weight


def _weight_for(rest_mass, temperature, rotation, background):
    """Newton's method for ln z and ln theta: M0 T^2 = (M0 mu^2) (T/mu)^2 is known, and mu is T over theta."""
    heat, turning = _theta(1.0, temperature), ROTATION_SHIFT * rotation
    target = np.log(rest_mass / (EDDINGTON_MASS * M_SUN)) + 2.0 * np.log(heat)

    def step(place):
        u, t = place
        theta = np.exp(t)
        beta, *rows = _rows(u, theta, ("rest_mass", *_BALANCE))
        mass, mass_u, mass_t = _log_mass(beta, theta, *(row[0] for row in rows))
        thin = _thin(beta, theta, heat / theta, background)
        value, by_u, by_t = _balance(beta, *(row[1:] for row in rows), turning, thin, power=1.0)
        excess, mass_t = mass + 2.0 * t - target, mass_t + 2.0
        determinant = mass_u * by_t - mass_t * by_u
        return np.stack([excess * by_t - mass_t * value, mass_u * value - excess * by_u]) / determinant

    # leading order without help: M0 T^2 ~ theta^2/beta^2 and CRITICAL theta = beta^2/6
    beta = np.minimum(6.0 * CRITICAL * np.exp(0.5 * target), 0.5)
    start = np.stack([np.log((1.0 - beta) / beta), np.log(beta**2 / (6.0 * CRITICAL))])
    return heat / np.exp(_newton(step, start, "rest mass and onset temperature, whatever its weight")[1])


# ------------------------------------------------------------------------------------------------ constant entropy
def entropy_constant(beta, temperature):
    """4z + ln z - 1.5 ln T, which is constant along an isentrope; mu times the entropy per baryon, up to a constant."""
    z = (1.0 - beta) / beta
    return 4.0 * z + np.log(z) - 1.5 * np.log(temperature)


def _on_isentrope(constant, mu, log_temperature):
    """(u, theta, du/d ln T) of the star with this entropy constant and ln T_c."""
    z = wrightomega(constant + 1.5 * log_temperature + np.log(4.0)) / 4.0
    return np.log(z), _theta(mu, np.exp(log_temperature)), 1.5 / (4.0 * z + 1.0)


def _on_isentrope_star(constant, mu, log_temperature):
    u, theta, _ = _on_isentrope(constant, mu, log_temperature)
    return family.stars(_beta(u), family.sigma_of_theta(_beta(u), theta), mu)


def along_entropy(star, mu, temperature):
    """The Star of the same entropy as ``star`` with another central ``temperature`` [K]."""
    beta, old, mu, temperature = _accept(
        beta=star.beta, star_temperature=star.temperature, mu=mu, temperature=temperature
    )
    return _on_isentrope_star(entropy_constant(beta, old), mu, np.log(temperature))


def turning_point(star, mu):
    """The Star of largest rest mass among those with the entropy of ``star``; beyond it they collapse."""
    mu, constant, old, beta, sigma = np.broadcast_arrays(
        mu, entropy_constant(star.beta, star.temperature), star.temperature, star.beta, star.sigma
    )

    def step(log_temperature):
        u, theta, along = _on_isentrope(constant, mu, log_temperature)
        beta, *rows = _rows(u, theta, _BALANCE)
        value, by_u, by_t = _balance(beta, *rows, 0.0, 0.0)
        return value / (along * by_u + by_t)

    # sigma ~ T z at onset is beta/16, and z hardly changes along an isentrope
    start = np.log(old * beta / (15.8 * sigma))
    return _on_isentrope_star(constant, mu, _newton(step, start, "entropy and an onset of collapse"))


def at_entropy(rest_mass, star, mu):
    """The stable Star of ``rest_mass`` [g] with the entropy of ``star``; arrays broadcast.

    Raises ComputationError where the rest mass is beyond the largest of its entropy.
    """
    limit = turning_point(star, mu)
    rest_mass, mu, constant, top, most = np.broadcast_arrays(
        np.asarray(rest_mass, float),
        mu,
        entropy_constant(limit.beta, limit.temperature),
        np.log(limit.temperature),
        limit.rest_mass,
    )
    ratio = rest_mass / most
    if not np.all((ratio > 0) & (ratio <= 1.0)):
        worst = ratio[~((ratio > 0) & (ratio <= 1.0))].flat[0]
        raise ComputationError(
            f"no star of this entropy has this rest mass: it is {worst:.6g} times the largest that is allowed"
        )
    target = -2.0 * np.log(_w(rest_mass, mu))

    def excess(log_temperature):
        u, theta, along = _on_isentrope(constant, mu, log_temperature)
        beta, *rest = _rows(u, theta, ("rest_mass",))
        value, by_u, by_t = _log_mass(beta, theta, *(row[0] for row in rest))
        return value - target, along * by_u + by_t

    return _on_isentrope_star(constant, mu, _bracketed(excess, top - 40.0, top, "entropy and rest mass"))


def _bracketed(function, low, high, what):
    """Root of a rising function between ``low`` and ``high``, by Newton's method where it stays between the bounds
    found so far and by halving elsewhere; ``function`` returns value and slope."""
    x = np.maximum(low, high - 0.5)
    for _ in range(4 * _MOST):
        value, slope = function(x)
        low, high = np.where(value < 0, x, low), np.where(value < 0, high, x)
        newton = x - value / np.where(slope > 0, slope, np.inf)
        new = np.where((newton >= low) & (newton <= high) & (slope > 0), newton, 0.5 * (low + high))
        moved = np.max(np.abs(new - x), initial=0.0)
        x = new
        if moved < 1e-12:
            return x
    raise ComputationError(f"no relativistic star has this {what}")
