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

from functools import lru_cache

import numpy as np
from scipy.special import wrightomega

from massdash.constants import M_SUN, C, G
from massdash.errors import ComputationError
from massdash.physics import eos, family, points
from massdash.physics.points import BACKGROUND_SHIFT, CRITICAL, ROTATION_SHIFT
from massdash.physics.post_newtonian import EDDINGTON_MASS
from massdash.physics.series import BLOCK

#: A mean molecular weight above that of any mixture here (pure metals have 2).
HEAVIEST = 2.0
#: One below that of any mixture here (pure hydrogen has 1/2).
LIGHTEST = 0.25


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
        beta, *rest = points.rows(u, theta, ("rest_mass",))
        value, by_u, by_t = points.log_mass(beta, theta, *(row[0] for row in rest))
        return (value - target) / (by_u + slope * by_t)

    return points.newton(step, _start(w), what)


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
    beta[~inside] = points.beta_at(_of_mass(w, lambda u: theta + 0.0 * u, 0.0, "rest mass and central temperature"))
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
    rest_mass, mu, temperature = points.accept(rest_mass=rest_mass, mu=mu, temperature=temperature)
    w = _w(rest_mass, mu)
    return family.table().inverse.covers(np.sqrt(w), points.theta_at(mu, temperature) / w)


def covers_density(rest_mass, mu, density):
    """The same for a central rest-mass density [g cm-3], by the temperature that the standard model has there."""
    rest_mass, mu, density = points.accept(rest_mass=rest_mass, mu=mu, density=density)
    return covers(rest_mass, mu, eos.temperature(density, points.beta_at(_start(_w(rest_mass, mu))), mu))


def at_temperature(rest_mass, mu, temperature, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] with central ``temperature`` [K]."""
    rest_mass, mu, temperature, rotation, background = points.accept(
        rest_mass=rest_mass, mu=mu, temperature=temperature, rotation=rotation, background=background
    )
    beta, sigma = _from_temperature(_w(rest_mass, mu), points.theta_at(mu, temperature))
    return _supported(beta, sigma, mu, rotation, background)


def brief(rest_mass, mu, temperature):
    """Gravitational mass [g], radius [cm], (M - M0)/M0 and squared frequency [s-2] of the stars of ``rest_mass`` [g]
    with central ``temperature`` [K], stacked (4, ...); as ``at_temperature``, in blocks and with nothing else."""
    rest_mass, mu, temperature = points.accept(rest_mass=rest_mass, mu=mu, temperature=temperature)
    shape = rest_mass.shape
    rest_mass, mu, temperature = rest_mass.ravel(), mu.ravel(), temperature.ravel()
    result = np.empty((4, rest_mass.size))
    for start in range(0, rest_mass.size, BLOCK):
        part = slice(start, start + BLOCK)
        result[:, part] = _brief(rest_mass[part], mu[part], temperature[part])
    return result.reshape(4, *shape)


def _brief(rest_mass, mu, temperature):
    beta, sigma = _from_temperature(_w(rest_mass, mu), points.theta_at(mu, temperature))
    mass, radius, binding, square = family.values(beta, sigma, ("mass", "radius", "binding", "frequency_squared"))
    binding = sigma * binding
    rest = mass - binding
    heavy = rest_mass * mass / rest
    compactness = 4.0 * sigma * mass / radius
    size = G / C**2 * heavy / compactness
    return heavy, size, binding / rest, square * compactness * (C / size) ** 2


def at_density(rest_mass, mu, density, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] with central rest-mass ``density`` [g cm-3]: a point of the locus of equilibria."""
    rest_mass, mu, density, rotation, background = points.accept(
        rest_mass=rest_mass, mu=mu, density=density, rotation=rotation, background=background
    )
    scale = np.cbrt(density / (family.central_density(0.5, 1.0) * mu**4))

    def theta(u):
        return scale * np.exp(u / 3.0)

    u = _of_mass(_w(rest_mass, mu), theta, 1.0 / 3.0, "rest mass and central density")
    beta = points.beta_at(u)
    return family.stars(beta, family.sigma_of_theta(beta, theta(u)), mu, support(density, rotation, background))


# ------------------------------------------------------------------------------------------------ the onset
def onset(rest_mass, mu, rotation=0.0, background=0.0):
    """The Star of ``rest_mass`` [g] at the onset of collapse, with T/|W| = ``rotation`` and other matter of density
    ``background`` [g cm-3]; Newton's method for ln z and ln theta together."""
    rest_mass, mu, rotation, background = points.accept(
        rest_mass=rest_mass, mu=mu, rotation=rotation, background=background
    )
    w, turning = _w(rest_mass, mu), ROTATION_SHIFT * rotation

    def step(place):
        u, theta = place[0], np.exp(place[1])
        beta, *rows = points.rows(u, theta, ("rest_mass", *points.BALANCE))
        mass, mass_u, mass_t = points.log_mass(beta, theta, *(row[0] for row in rows))
        thin = points.thin(beta, theta, mu, background)
        value, by_u, by_t = points.balance(beta, *(row[1:] for row in rows), turning, thin)
        excess = mass + 2.0 * np.log(w)
        determinant = mass_u * by_t - mass_t * by_u
        return np.stack([excess * by_t - mass_t * value, mass_u * value - excess * by_u]) / determinant

    u, t = points.newton(step, _start_of_onset(w, mu, turning, background), "rest mass and an onset of collapse")
    beta = points.beta_at(u)
    return _supported(beta, family.sigma_of_theta(beta, np.exp(t)), mu, rotation, background)


def _start_of_onset(w, mu, turning, background):
    """(ln z, ln theta) from the leading order, CRITICAL sigma = beta/6 + 2/3 T/|W| + what the background adds; that
    goes as sigma^-3."""
    u = _start(w)
    beta = points.beta_at(u)
    own = (beta / 6.0 + turning) / CRITICAL
    sigma = own + (points.thin(beta, beta, mu, background) / CRITICAL) ** 0.25
    sigma = np.minimum(sigma, 0.3)
    return np.stack([u, np.log(family.central_theta(beta, sigma * (1.0 - 1.1 * beta / (1.0 + beta))))])


def maximum_mass(mu, temperature, rotation=0.0, background=0.0):
    """Rest mass [g] of the star that meets the onset of collapse at just ``temperature`` [K].

    Raises ComputationError where the background holds up stars of any mass.
    """
    mu, temperature, rotation, background = points.accept(
        mu=mu, temperature=temperature, rotation=rotation, background=background
    )
    theta, turning = points.theta_at(mu, temperature), ROTATION_SHIFT * rotation

    def step(u):
        beta, *rows = points.rows(u, theta, points.BALANCE)
        value, by_u, _ = points.balance(beta, *rows, turning, points.thin(beta, theta, mu, background))
        return value / by_u

    pull = _pull(mu, temperature, background)
    if not np.all(pull > 0):
        raise ComputationError("there is no maximum mass at this temperature: the background holds up every star")
    half = turning / (2.0 * pull)
    u = points.newton(step, np.log(half + np.sqrt(half**2 + 1.0 / (6.0 * pull))), "onset temperature")
    beta = points.beta_at(u)
    rest = family.values(beta, family.sigma_of_theta(beta, theta), ("rest_mass",))[0]
    return EDDINGTON_MASS * M_SUN * np.exp(points.log_mass(beta, theta, rest, 0.0, 0.0)[0]) / mu**2


def _pull(mu, temperature, background):
    """What is left of relativity's pull, CRITICAL theta, beside the background's push per z; not positive where stars
    of any mass are held up. At leading order pull z = 1/(6 z) + 2/3 T/|W| at the onset."""
    theta = points.theta_at(mu, temperature)
    return CRITICAL * theta - points.thin(0.5, theta, mu, background)


def weight_for(rest_mass, temperature, rotation=0.0, background=0.0):
    """Mean molecular weight at which the star of ``rest_mass`` [g] meets the onset at just ``temperature`` [K].

    Infinite where not even HEAVIEST brings it there, as when rotation or background alone hold it up; LIGHTEST where
    stars of any weight are beyond their onset.
    """
    temperature, rotation, background = points.accept(temperature=temperature, rotation=rotation, background=background)
    if temperature.ndim == 0:
        least, most = _extremes(float(temperature), float(rotation), float(background))
    else:
        least, most = _extremes_of_many(temperature, rotation, background)
    rest_mass, temperature, rotation, background, least, most = np.broadcast_arrays(
        *points.accept(rest_mass=rest_mass), temperature, rotation, background, least, most
    )
    exists = (rest_mass >= least) & (rest_mass <= most)
    weight = np.where(rest_mass > most, LIGHTEST, np.inf)
    if np.any(exists):
        weight[exists] = _weight_for(*(one[exists] for one in (rest_mass, temperature, rotation, background)))
    return weight


@lru_cache(maxsize=64)
def _extremes(temperature, rotation, background):
    """``_extremes_of_many`` for one star; kept, because a moving slider asks for the same again and again."""
    return _extremes_of_many(*(np.asarray(one) for one in (temperature, rotation, background)))


def _extremes_of_many(temperature, rotation, background):
    """Masses [g] that meet the onset at ``temperature`` when made of HEAVIEST and of LIGHTEST; infinite where none."""
    falls = np.asarray(_pull(HEAVIEST, temperature, background) > 0)
    least, most = np.full(temperature.shape, np.inf), np.full(temperature.shape, np.inf)
    for mass, mu in ((least, HEAVIEST), (most, LIGHTEST)):
        mass[falls] = maximum_mass(mu, temperature[falls], rotation[falls], background[falls])
    return least, most


def _weight_for(rest_mass, temperature, rotation, background):
    """Newton's method for ln z and ln theta: M0 T^2 = (M0 mu^2) (T/mu)^2 is known, and mu is T over theta."""
    heat, turning = points.theta_at(1.0, temperature), ROTATION_SHIFT * rotation
    target = np.log(rest_mass / (EDDINGTON_MASS * M_SUN)) + 2.0 * np.log(heat)

    def step(place):
        u, t = place
        theta = np.exp(t)
        beta, *rows = points.rows(u, theta, ("rest_mass", *points.BALANCE))
        mass, mass_u, mass_t = points.log_mass(beta, theta, *(row[0] for row in rows))
        thin = points.thin(beta, theta, heat / theta, background)
        value, by_u, by_t = points.balance(beta, *(row[1:] for row in rows), turning, thin, power=1.0)
        excess, mass_t = mass + 2.0 * t - target, mass_t + 2.0
        determinant = mass_u * by_t - mass_t * by_u
        return np.stack([excess * by_t - mass_t * value, mass_u * value - excess * by_u]) / determinant

    # leading order without help: M0 T^2 ~ theta^2/beta^2 and CRITICAL theta = beta^2/6
    beta = np.minimum(6.0 * CRITICAL * np.exp(0.5 * target), 0.5)
    start = np.stack([np.log((1.0 - beta) / beta), np.log(beta**2 / (6.0 * CRITICAL))])
    return heat / np.exp(points.newton(step, start, "rest mass and onset temperature, whatever its weight")[1])


# ------------------------------------------------------------------------------------------------ constant entropy
def entropy_constant(beta, temperature):
    """4z + ln z - 1.5 ln T, which is constant along an isentrope; mu times the entropy per baryon, up to a constant."""
    z = (1.0 - beta) / beta
    return 4.0 * z + np.log(z) - 1.5 * np.log(temperature)


def _on_isentrope(constant, mu, log_temperature):
    """(u, theta, du/d ln T) of the star with this entropy constant and ln T_c."""
    z = wrightomega(constant + 1.5 * log_temperature + np.log(4.0)) / 4.0
    return np.log(z), points.theta_at(mu, np.exp(log_temperature)), 1.5 / (4.0 * z + 1.0)


def _on_isentrope_star(constant, mu, log_temperature):
    u, theta, _ = _on_isentrope(constant, mu, log_temperature)
    return family.stars(points.beta_at(u), family.sigma_of_theta(points.beta_at(u), theta), mu)


def along_entropy(star, mu, temperature):
    """The Star of the same entropy as ``star`` with another central ``temperature`` [K]."""
    beta, old, mu, temperature = points.accept(
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
        beta, *rows = points.rows(u, theta, points.BALANCE)
        value, by_u, by_t = points.balance(beta, *rows, 0.0, 0.0)
        return value / (along * by_u + by_t)

    # sigma ~ T z at onset is beta/16, and z hardly changes along an isentrope
    start = np.log(old * beta / (15.8 * sigma))
    return _on_isentrope_star(constant, mu, points.newton(step, start, "entropy and an onset of collapse"))


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
        beta, *rest = points.rows(u, theta, ("rest_mass",))
        value, by_u, by_t = points.log_mass(beta, theta, *(row[0] for row in rest))
        return value - target, along * by_u + by_t

    return _on_isentrope_star(constant, mu, points.bracketed(excess, top - 40.0, top, "entropy and rest mass"))
