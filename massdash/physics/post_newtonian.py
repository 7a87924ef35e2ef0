"""The energy of a supermassive star as a function of its central density, to second post-Newtonian order.

At fixed mass M and entropy, for the shape of the n = 3 sphere, and in units of M c^2,

    E = U(rho_c, s) - k2 y - k4 y^2 [- k5 y^3] + k3 j^2 y^2 + kb y rho_b/rho_c,      y = G M^(2/3) rho_c^(1/3)/c^2,

with the internal energy U of an isentropic gas with exact beta, Newtonian gravity, first and second post-Newtonian
gravity, rotation at fixed angular momentum j = cJ/(GM^2), and a fixed uniform background of density rho_b.
Zel'dovich & Novikov 1971; Shapiro & Teukolsky 1983, sec. 6.9-6.10 and ch. 17; Baumgarte & Shapiro 1999, ApJ 526, 941
(rotation and second order); McLaughlin & Fuller 1996, ApJ 456, 71 (background). Where dE/dy = 0 the star is in
equilibrium, where d2E/dy2 = 0 as well it meets the onset of collapse.

``Body`` holds what does not change along a sequence. All functions take and return arrays in cgs; shapes broadcast.
"""

from dataclasses import dataclass

import numpy as np

from massdash.constants import K_B, M_SUN, M_U, RADIATION, C, G
from massdash.physics import eos
from massdash.physics.isentrope import averages
from massdash.physics.polytrope import standard_model
from massdash.physics.roots import secant

_SPHERE = standard_model()
_VOLUME = 3.0 * _SPHERE.concentration / (4.0 * np.pi)  # R = (volume M/rho_c)^(1/3)

K1 = 6.0 * _SPHERE.radius * _SPHERE.slope
K2 = 1.5 * np.cbrt(4.0 * np.pi * _SPHERE.slope / _SPHERE.radius)
K3 = 1.0 / (2.0 * (2.0 / 3.0) * _SPHERE.inertia * _VOLUME ** (2.0 / 3.0))
K5 = 0.331211  # Baumgarte & Shapiro 1999, ApJ 526, 941 (from memory; reproduces their critical R/M = 456)
K_BACKGROUND = 2.0 * np.pi / 3.0 * _SPHERE.inertia * _VOLUME ** (2.0 / 3.0)

#: Mass scale of the standard model in units of M_sun/mu^2 (Eddington quartic).
EDDINGTON_MASS = 4.0 / np.sqrt(np.pi) * _SPHERE.mass * np.sqrt(3.0 / RADIATION) * (K_B / M_U) ** 2 / G**1.5 / M_SUN

#: T/|W| of an n = 3 star that rotates uniformly at mass shedding, Roche approximation (Zel'dovich & Novikov 1971).
SHEDDING = 0.5 * (8.0 / 27.0) * (2.0 / 3.0) * _SPHERE.inertia / 1.5


def critical_index_coefficient(polytrope):
    """K in Gamma_crit = 4/3 + K 2GM/(Rc^2) for Lane-Emden spheres (Chandrasekhar 1964, ApJ 140, 417)."""
    n = polytrope.index
    relativity = 2.0 * (11.0 - n) / ((n + 1.0) * polytrope.radius**4 * polytrope.slope**3) * polytrope.slope_integral
    return (5.0 - n) / 18.0 * (1.0 + relativity)


K4 = 3.0 * critical_index_coefficient(_SPHERE) * K2 / np.cbrt(_VOLUME)


@dataclass(frozen=True, eq=False)
class Body:
    """What stays fixed along a sequence of configurations; arrays broadcast against each other.

    ``mass`` rest mass [g], ``mu`` mean molecular weight, ``rotation`` T/|W| (the same for every configuration, each
    perturbed at fixed angular momentum), ``background`` density of other, unmoved matter [g cm-3], ``second_order``
    includes the second post-Newtonian term.
    """

    mass: np.ndarray
    mu: np.ndarray
    rotation: np.ndarray | float = 0.0
    background: np.ndarray | float = 0.0
    second_order: bool = False

    @property
    def k5(self):
        """Coefficient of the second post-Newtonian term, 0 when it is left out."""
        return K5 if self.second_order else 0.0

    def density(self, y):
        """Central density [g cm-3] where G M^(2/3) rho_c^(1/3)/c^2 is ``y``."""
        return (C**2 * y / G) ** 3 / self.mass**2

    def y(self, density):
        """G M^(2/3) rho_c^(1/3)/c^2 at a central density."""
        return G * np.cbrt(self.mass**2 * density) / C**2

    def pull(self, y):
        """``pull`` of this body at ``y``."""
        return pull(y, self.rotation, self.background / self.density(y), self.k5)

    def eddington_mass(self):
        """M mu^2 in units of the standard model's mass scale."""
        return self.mass * self.mu**2 / (EDDINGTON_MASS * M_SUN)


@dataclass(frozen=True, eq=False)
class Equilibrium:
    """Configurations in balance, central values; every array has the shape of the solved sequence.

    ``beta`` gas over total pressure, ``temperature`` [K], ``density`` [g cm-3], ``radius`` [cm], ``compactness``
    GM/(Rc^2), ``energy`` total minus rest mass energy [erg], ``margin`` 1 - (Gamma_crit - 4/3)/(<Gamma_1> - 4/3),
    ``frequency_squared`` of the homologous pulsation [s-2].
    """

    beta: np.ndarray
    temperature: np.ndarray
    density: np.ndarray
    radius: np.ndarray
    compactness: np.ndarray
    energy: np.ndarray
    margin: np.ndarray
    frequency_squared: np.ndarray


def radius(mass, density):
    """Radius [cm] of the n = 3 sphere of given mass [g] and central density [g cm-3]."""
    return np.cbrt(_VOLUME * mass / density)


def pull(y, rotation=0.0, dilution=0.0, k5=0.0):
    """What the pressure work 3 int(P/rho) dm balances, in M c^2 (dE/dy = 0); ``dilution`` is rho_b/rho_c."""
    return y * (K2 * (1.0 - 2.0 * rotation) + 2.0 * K4 * y + 3.0 * k5 * y**2 + 2.0 * K_BACKGROUND * dilution)


def relativity(y, k5=0.0):
    """What relativity takes from the stiffness y^2 d2E/dy2, in M c^2."""
    return 2.0 * K4 * y**2 + 6.0 * k5 * y**3


def help_from_outside(y, rotation=0.0, dilution=0.0):
    """What rotation and background add to the stiffness y^2 d2E/dy2, in M c^2."""
    return y * (2.0 * K2 * rotation + 6.0 * K_BACKGROUND * dilution)


def specific_pressure(mu, temperature, z):
    """P_c/(rho_c c^2) from central temperature and z = P_rad/P_gas."""
    return K_B * temperature * (1.0 + z) / (mu * M_U * C**2)


def eddington_ratio(mass, mu):
    """z = P_rad/P_gas of the standard model, from the Eddington quartic z (1 + z)^3 = (M mu^2/C)^2 with M in g.

    Solved for ln z, so that both beta = 1/(1 + z) and 1 - beta = z/(1 + z) keep all digits for any mass.
    """
    right = 2.0 * np.log(np.asarray(mass, float) * mu**2 / (EDDINGTON_MASS * M_SUN))
    start = np.where(right > 0, right / 4.0, right)
    return np.exp(secant(lambda u: u + 3.0 * np.log1p(np.exp(u)) - right, start, what="Eddington quartic"))


def eddington_beta(mass, mu):
    """beta = P_gas/P of the standard model, (1 - beta)/beta^4 = (M mu^2/C)^2; mass in g."""
    return 1.0 / (1.0 + eddington_ratio(mass, mu))


def demand(body, y):
    """ln of work(beta) z^(1/3) (1 + z) that balance asks for at ``y``: the Eddington quartic with the body's pull."""
    return np.log(body.pull(y) / y * K1 / (3.0 * K2)) + np.log(body.eddington_mass()) * (2.0 / 3.0)


def balanced_beta(body, y):
    """beta_c that balances ``body`` at ``y``."""
    wanted = demand(body, y)

    def residual(u):
        z = np.exp(u)
        return np.log(averages(1.0 / (1.0 + z))[0]) + u / 3.0 + np.log1p(z) - wanted

    start = np.log(eddington_ratio(body.mass, body.mu)) + 0.0 * y
    return 1.0 / (1.0 + np.exp(secant(residual, start, what="balance at given density")))


def describe(body, y, beta):
    """The Equilibrium that ``body`` has at ``y`` with the balanced ``beta``."""
    work, gas, excess = averages(beta)
    needed = body.pull(y)
    density = body.density(y)
    size = radius(body.mass, density)
    dilution = body.background / density
    energy = -0.5 * gas * needed + y * (
        K4 * y + 2.0 * body.k5 * y**2 - K2 * body.rotation + 3.0 * K_BACKGROUND * dilution
    )
    stiffness = 3.0 * needed * excess
    threshold = relativity(y, body.k5) - help_from_outside(y, body.rotation, dilution)
    return Equilibrium(
        beta=beta,
        temperature=needed / (3.0 * work) * beta * body.mu * M_U * C**2 / K_B,
        density=density,
        radius=size,
        compactness=G * body.mass / (size * C**2),
        energy=energy * body.mass * C**2,
        margin=1.0 - threshold / stiffness,
        frequency_squared=C**2 * (stiffness - threshold) / (_SPHERE.inertia * size**2),
    )


def equilibrium_at_density(body, density):
    """The balanced configuration at a central density [g cm-3]: one point of the locus of equilibria."""
    y = body.y(np.asarray(density, float))
    return describe(body, y, balanced_beta(body, y))


def equilibrium_at_temperature(body, temperature):
    """The balanced configuration at a central temperature [K]."""

    def y_of(z):
        return body.y(eos.density(temperature, 1.0 / (1.0 + z), body.mu))

    def residual(u):
        z = np.exp(u)
        supply = 3.0 * averages(1.0 / (1.0 + z))[0] * specific_pressure(body.mu, temperature, z)
        return np.log(supply / body.pull(y_of(z)))

    start = np.log(eddington_ratio(body.mass, body.mu)) + 0.0 * np.log(temperature)
    z = np.exp(secant(residual, start, what="balance at given temperature"))
    return describe(body, y_of(z), 1.0 / (1.0 + z))


def energy_terms(body, star, density):
    """The energy E(rho_c) at the entropy and angular momentum of ``star``, term by term [erg].

    ``body`` and ``star`` (an Equilibrium of it) are single, ``density`` (k,). Returns a dictionary of arrays (k,):
    internal, newtonian, first_order, second_order, rotation, background, and their sum, total. The total is summed
    before the large terms are multiplied out: it is good to 1e-12 of the largest term.
    """
    density = np.asarray(density, float)
    z_star = (1.0 - star.beta) / star.beta
    z = eos.isentrope(z_star, density / star.density)
    temperature = eos.temperature(density, 1.0 / (1.0 + z), body.mu)
    work, gas, _ = averages(1.0 / (1.0 + z))
    y, y_star = body.y(density), body.y(star.density)
    terms = {
        "internal": 3.0 * work * specific_pressure(body.mu, temperature, z) * (1.0 - 0.5 * gas),
        "newtonian": -K2 * y,
        "first_order": -K4 * y**2,
        "second_order": -body.k5 * y**3,
        "rotation": K2 * body.rotation * y**2 / y_star,
        "background": K_BACKGROUND * y * body.background / density,
    }
    terms["total"] = sum(terms.values())
    return {name: value * body.mass * C**2 for name, value in terms.items()}
