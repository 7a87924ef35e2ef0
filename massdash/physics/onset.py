"""Where a star of given mass meets general-relativistic collapse, and the largest mass that ignites before it.

Two roads: closed forms at leading order in beta (names ending in ``_leading``), and the energy functional with exact
beta and Gamma_1. Both are the conditions dE/dy = d2E/dy2 = 0 of ``post_newtonian``; at leading order they read

    k2 (T/|W| + beta/4 + 3 kb/k2 rho_b/rho_c) = y (k4 + 3 k5 y),        beta^2 = C/(mu^2 M).
"""

import numpy as np

from massdash.constants import K_B, M_SUN, M_U, RADIATION, C, G
from massdash.physics import eos
from massdash.physics.isentrope import averages
from massdash.physics.post_newtonian import (
    EDDINGTON_MASS,
    K1,
    K2,
    K4,
    K5,
    K_BACKGROUND,
    SHEDDING,
    Body,
    Equilibrium,
    demand,
    describe,
    help_from_outside,
    pull,
    radius,
    relativity,
    specific_pressure,
)
from massdash.physics.roots import secant


def leading_beta(mass, mu):
    """beta of a radiation-dominated star at leading order, (C/(mu^2 M))^(1/2); mass in g."""
    return np.sqrt(EDDINGTON_MASS * M_SUN / mass) / mu


def _lift(body):
    """What the background adds to y (k4 + 3 k5 y) at onset, times y^3; a constant, as rho_b/rho_c goes as y^-3."""
    return 3.0 * K_BACKGROUND * body.background * body.mass**2 * (G / C**2) ** 3


def _leading_y(body):
    """Root of the leading-order condition; positive and single, since the polynomial changes sign once."""
    floor = K2 * (body.rotation + leading_beta(body.mass, body.mu) / 4.0)
    if not np.any(body.background):
        return 2.0 * floor / (K4 + np.sqrt(K4**2 + 12.0 * body.k5 * floor))
    lift = _lift(body)

    def residual(u):
        y = np.exp(u)
        return np.log((floor + lift / y**3) / (y * (K4 + 3.0 * body.k5 * y)))

    start = np.log(floor / K4 + (lift / K4) ** 0.25)
    return np.exp(secant(residual, start, what="leading-order onset"))


def onset_leading(body):
    """The onset at leading order in beta, first (or second) post-Newtonian order, as an Equilibrium."""
    y, beta = _leading_y(body), leading_beta(body.mass, body.mu)
    density = body.density(y)
    size = radius(body.mass, density)
    lift = 3.0 * K_BACKGROUND * body.background / density
    energy = y * (K4 * y + 2.0 * body.k5 * y**2 + lift - K2 * (beta / 2.0 + body.rotation))
    return Equilibrium(
        beta=beta + 0.0 * y,
        temperature=np.cbrt(3.0 * K_B * density / (RADIATION * body.mu * M_U * beta)),
        density=density,
        radius=size,
        compactness=G * body.mass / (size * C**2),
        energy=energy * body.mass * C**2,
        margin=0.0 * y,
        frequency_squared=0.0 * y,
    )


def _marginal_y(body, excess):
    """y at which a given <Gamma_1> - 4/3 is just enough; plain arithmetic, so it may be solved inside another root."""

    def residual(u):
        y = np.exp(u)
        support = 3.0 * excess * body.pull(y) + help_from_outside(y, body.rotation, body.background / body.density(y))
        return np.log(relativity(y, body.k5) / support)

    # exact without background and second order
    start = (1.5 * excess * (1.0 - 2.0 * body.rotation) + body.rotation) * K2 / (K4 * (1.0 - 3.0 * excess))
    if not (np.any(body.background) or body.second_order):
        return start
    return np.exp(secant(residual, np.log(start + (_lift(body) / K4) ** 0.25), what="onset of instability"))


def onset(body):
    """The onset from the energy functional with exact beta and Gamma_1, as an Equilibrium; its margin is 0."""

    def marginal(u):
        z = np.exp(u)
        work, _, excess = averages(1.0 / (1.0 + z))
        return z, work, _marginal_y(body, excess)

    def residual(u):
        z, work, y = marginal(u)
        return np.log(work) + u / 3.0 + np.log1p(z) - demand(body, y)

    start = np.log(1.0 / leading_beta(body.mass, body.mu)) + 0.0 * (body.rotation + body.background)
    z, _, y = marginal(secant(residual, start, what="onset of instability"))
    return describe(body, y, 1.0 / (1.0 + z))


def maximum_mass_leading(mu, temperature, rotation=0.0, background=0.0, second_order=False):
    """Rest mass [g] whose leading-order onset temperature is ``temperature`` [K]."""
    # without spin and background, where y = k2 beta/(4 k4) and k1 P_c/rho_c = k2 y c^2, this is beta^2 at onset
    single = 4.0 * K1 * K4 / K2**2 * K_B * temperature / (mu * M_U * C**2)

    def residual(u):
        body = Body(np.exp(u), mu, rotation, background, second_order)
        return np.log(onset_leading(body).temperature / temperature)

    return np.exp(secant(residual, np.log(EDDINGTON_MASS * M_SUN / (mu**2 * single)), what="maximum mass"))


def _balance_at(mu, temperature, z, rotation, background, k5):
    """(y, work in M c^2, dilution, density) of the star in balance at central temperature and z, whatever its mass."""
    density = eos.density(temperature, 1.0 / (1.0 + z), mu)
    dilution = background / density
    work = 3.0 * averages(1.0 / (1.0 + z))[0] * specific_pressure(mu, temperature, z)
    linear = K2 * (1.0 - 2.0 * rotation) + 2.0 * K_BACKGROUND * dilution
    y = 2.0 * work / (linear + np.sqrt(linear**2 + 8.0 * K4 * work))
    if k5:
        y = np.exp(secant(lambda u: np.log(pull(np.exp(u), rotation, dilution, k5) / work), np.log(y), what="balance"))
    return y, work, dilution, density


def maximum_mass(mu, temperature, rotation=0.0, background=0.0, second_order=False):
    """Rest mass [g] whose onset temperature is ``temperature`` [K], with exact beta and Gamma_1."""
    k5 = K5 if second_order else 0.0

    def residual(u):
        z = np.exp(u)
        y, work, dilution, _ = _balance_at(mu, temperature, z, rotation, background, k5)
        support = 3.0 * work * averages(1.0 / (1.0 + z))[2] + help_from_outside(y, rotation, dilution)
        return np.log(relativity(y, k5) / support)

    guess = leading_beta(maximum_mass_leading(mu, temperature, rotation, background), mu)
    z = np.exp(secant(residual, np.log1p(1.0 / guess), what="maximum mass"))
    y, _, _, density = _balance_at(mu, temperature, z, rotation, background, k5)
    return (y * C**2 / G) ** 1.5 / np.sqrt(density)


def weight_for(mass, temperature, rotation=0.0, background=0.0):
    """Mean molecular weight at which the star of ``mass`` [g] meets onset at just ``temperature`` [K].

    The temperature gives the radiation's pressure. With z = P_rad/P_gas follow the pressure and, from balance, y; z is
    where relativity takes just what <Gamma_1> - 4/3 and the helpers give. Infinite where rotation or background alone
    keep a star of any weight from its onset at this temperature. Shapes broadcast.
    """
    body = Body(mass, 1.0, rotation, background)
    temperature = np.asarray(temperature, float)

    def wanted(work, radiation_share):
        y = _y_at_pressure(body, work, RADIATION / 3.0 * temperature**4 / radiation_share)
        return y, (relativity(y) - help_from_outside(y, rotation, background / body.density(y))) / (3.0 * body.pull(y))

    least = wanted(averages(0.0)[0], 1.0)[1]  # <Gamma_1> - 4/3 that would do for a star of pure radiation
    exists = least > 0.0
    start = np.log(1.0 / np.where(exists, 6.0 * least, 1.0))

    def residual(u):
        z = np.exp(u)
        work, _, excess = averages(1.0 / (1.0 + z))
        return np.log(np.where(exists, wanted(work, z / (1.0 + z))[1], excess) / excess)

    z = np.exp(secant(residual, start, what="mean molecular weight"))
    y = wanted(averages(1.0 / (1.0 + z))[0], z / (1.0 + z))[0]
    return np.where(exists, body.density(y) / eos.density(temperature, 1.0 / (1.0 + z), 1.0), np.inf)


def _y_at_pressure(body, work, pressure):
    """y of the configuration in balance at a central pressure [dyn cm-2]; ``work`` as ``averages`` gives it."""
    goal = np.log(3.0 * work * pressure)

    def residual(u):
        y = np.exp(u)
        return np.log(body.pull(y) * body.density(y) * C**2) - goal

    start = 0.25 * (goal - np.log(K2 * body.density(1.0) * C**2))
    return np.exp(secant(residual, start, what="balance at given pressure"))


def rotation_for(mass, mu, temperature):
    """T/|W| that puts the onset of the star of ``mass`` [g] at ``temperature`` [K]; negative when it needs none."""
    start = np.log(1.0 / leading_beta(mass, mu)) + 0.0 * np.log(temperature)

    def parts(z):
        work, _, excess = averages(1.0 / (1.0 + z))
        work = 3.0 * work * specific_pressure(mu, temperature, z)
        y = Body(mass, mu).y(eos.density(temperature, 1.0 / (1.0 + z), mu))
        return work, excess, y

    def residual(u):
        work, excess, y = parts(np.exp(u))
        return np.log(work * (1.0 - 3.0 * excess) / (K2 * y))  # balance and onset together, rotation eliminated

    work, excess, y = parts(np.exp(secant(residual, start, what="spin")))
    return (relativity(y) - 3.0 * work * excess) / (2.0 * K2 * y)


def spin_for(mass, mu, temperature):
    """Spin (square root of T/|W| over its value at mass shedding) wanted for onset at ``temperature``; NaN if none."""
    share = rotation_for(mass, mu, temperature) / SHEDDING
    return np.where((share >= 0) & (share <= 1), np.sqrt(np.abs(share)), np.nan)
