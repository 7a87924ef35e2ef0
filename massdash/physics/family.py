"""Isentropic stars of gas and radiation in full general relativity as a formula.

Without pairs such a star is fixed by beta_c and sigma = P_c/epsilon_c, up to a scaling with the mean molecular weight:
M mu^2 and T/mu depend on the two numbers alone. The shipped table (data/builders/family.py writes it) holds the
structure as Chebyshev series; errors against direct integration are stored in it. Outside its box stars are integrated
directly. Everything here is vectorised over stars; nothing loops over them. Arguments and results in cgs.
"""

from dataclasses import dataclass
from functools import cache
from importlib.resources import files

import numpy as np

from massdash.constants import K_B, M_U, RADIATION, C, G
from massdash.physics.barotropes import Isentrope, demand
from massdash.physics.pulsation import pulsation
from massdash.physics.series import Series
from massdash.physics.tov import structure

NAMES = ("mass", "rest_mass", "radius", "binding", "frequency_squared", "stiffness", "response")
_BATCH, _STEP = 1000, 1e-4  # stars at a time and relative step of derivatives where they are integrated directly


@dataclass(frozen=True, eq=False)
class Table:
    """``stars`` gives NAMES over root-beta and sigma, ``inverse`` the ratio D/w of ``relativistic`` over root-w and
    theta/w; ``beta`` and ``sigma`` are the box, ``errors`` the measured largest deviation of each name on its own
    scale, ``inverse_error`` that of the ratio."""

    stars: Series
    inverse: Series
    beta: tuple[float, float]
    sigma: tuple[float, float]
    errors: np.ndarray
    inverse_error: float

    def covers(self, beta, sigma):
        """Whether the box holds these stars."""
        return (beta >= self.beta[0]) & (beta <= self.beta[1]) & (sigma > self.sigma[0]) & (sigma <= self.sigma[1])


@cache
def table():
    """The shipped table."""
    with (files("massdash") / "data" / "family.npz").open("rb") as file, np.load(file) as stored:
        beta, sigma = tuple(stored["beta"].tolist()), tuple(stored["sigma"].tolist())
        root, ratio = tuple(stored["root"].tolist()), tuple(stored["ratio"].tolist())
        return Table(
            Series(tuple(stored["names"].tolist()), tuple(np.sqrt(beta).tolist()), sigma, stored["coefficients"]),
            Series(("shift",), root, ratio, stored["inverse"]),
            beta,
            sigma,
            stored["errors"],
            float(stored["inverse_error"]),
        )


def lookup(beta, sigma, names, *, derivatives=False):
    """The named quantities of ``direct`` from the table, stacked (names, ...), for stars inside the box.

    With ``derivatives``, (3 * names, ...): values, then derivatives by beta_c, then by sigma. Shapes of ``beta`` and
    ``sigma`` must agree. No check of the box: see ``Table.covers``.
    """
    beta, sigma = np.asarray(beta, float), np.asarray(sigma, float)
    root = np.sqrt(beta.ravel())
    result = table().stars(root, sigma.ravel(), names, derivatives=derivatives)
    if derivatives:
        result[len(names) : 2 * len(names)] /= 2.0 * root
    return result.reshape(result.shape[0], *beta.shape)


def direct(beta, sigma, *, tolerance=1e-12, panels=4, basis=None, pulsating=True):
    """NAMES, stacked (names, N), by direct integration; the first four only when not ``pulsating``.

    ``mass``, ``rest_mass``, ``radius``, ``binding`` as in tov.Structure; ``frequency_squared`` of the lowest mode in
    GM/R^3; ``stiffness`` is <Gamma_1 - 4/3>/beta_c with the weight of that mode, and ``response`` the ratio of
    <Gamma_1> - Gamma_crit to frequency_squared.
    """
    star = structure(Isentrope(beta, sigma), tolerance=tolerance, panels=panels)
    found = [star.mass, star.rest_mass, star.radius, star.binding]
    if pulsating:
        mode = pulsation(star, basis=basis)
        found += [mode.frequency_squared[0], mode.stiffness / beta, mode.response]
    return np.stack(found)


def values(beta, sigma, names=NAMES, *, derivatives=False):
    """As ``lookup``, for any star: those outside the box are integrated directly, derivatives taken from
    differences."""
    inside = table().covers(beta, sigma)
    if np.all(inside):
        return lookup(beta, sigma, names, derivatives=derivatives)
    result = np.empty((len(names) * (3 if derivatives else 1), *np.shape(beta)))
    result[:, inside] = lookup(beta[inside], sigma[inside], names, derivatives=derivatives)
    result[:, ~inside] = _integrated(beta[~inside], sigma[~inside], names, derivatives)
    return result


def _integrated(beta, sigma, names, derivatives):
    rows = [NAMES.index(name) for name in names]
    if not derivatives:
        parts = [slice(start, start + _BATCH) for start in range(0, beta.size, _BATCH)]
        pulsating = max(rows) >= NAMES.index("frequency_squared")
        return np.concatenate([direct(beta[part], sigma[part], pulsating=pulsating)[rows] for part in parts], axis=1)
    d_beta, d_sigma = _STEP * beta * (1.0 - beta), _STEP * sigma
    stars = np.stack([beta, beta + d_beta, beta - d_beta, beta, beta])
    other = np.stack([sigma, sigma, sigma, sigma + d_sigma, sigma - d_sigma])
    found = _integrated(stars.ravel(), other.ravel(), names, False).reshape(len(names), 5, -1)
    slopes = [(found[:, 1] - found[:, 2]) / (2.0 * d_beta), (found[:, 3] - found[:, 4]) / (2.0 * d_sigma)]
    return np.concatenate([found[:, 0], *slopes])


# ------------------------------------------------------------------------------------------------ the scales of a star
def central_theta(beta, sigma):
    """kT_c/(mu m_u c^2)."""
    return sigma * beta / (1.0 - sigma * (3.0 - 1.5 * beta))


def sigma_of_theta(beta, theta):
    """sigma of the star with central kT/(mu m_u c^2) = ``theta``."""
    return theta / (beta + theta * (3.0 - 1.5 * beta))


def central_density(beta, theta):
    """Rest-mass density over mu^4 [g cm-3]: rho_c = a T^3 mu m_u/(3 k z) with T = theta mu m_u c^2/k."""
    return RADIATION / 3.0 * (M_U / K_B) ** 4 * C**6 * theta**3 * beta / (1.0 - beta)


def length_unit(sigma, energy_density):
    """A = (sigma c^2/(pi G epsilon_c/c^2))^(1/2) [cm]."""
    return np.sqrt(sigma * C**2 / (np.pi * G * energy_density))


@dataclass(frozen=True, eq=False)
class Star:
    """Relativistic isentropic stars; every array has the same shape.

    ``beta``, ``sigma`` as in the table; ``temperature`` [K] and ``density`` [g cm-3] (rest mass) at the centre;
    ``rest_mass``, ``gravitational_mass`` [g]; ``radius`` areal [cm]; ``energy`` (M - M0) c^2 [erg]; ``compactness``
    GM/(Rc^2); ``frequency_squared`` of the lowest mode [s-2]; ``stiffness`` and ``critical`` its weighted
    Gamma_1 - 4/3 and the least value that is stable; ``margin`` 1 - critical/stiffness.
    """

    beta: np.ndarray
    sigma: np.ndarray
    temperature: np.ndarray
    density: np.ndarray
    rest_mass: np.ndarray
    gravitational_mass: np.ndarray
    radius: np.ndarray
    energy: np.ndarray
    compactness: np.ndarray
    frequency_squared: np.ndarray
    stiffness: np.ndarray
    critical: np.ndarray

    @property
    def margin(self):
        return 1.0 - self.critical / self.stiffness


def stars(beta, sigma, mu, support=0.0):
    """The Star of each (beta_c, sigma) at mean molecular weight ``mu``.

    ``support`` is what rotation or a background adds to the effective Gamma_1: it lowers ``critical`` and stiffens the
    pulsation, and leaves the spherical structure as it is. Raises InputError for values no star can have.
    """
    beta, sigma, mu, support = np.broadcast_arrays(*(np.asarray(one, float) for one in (beta, sigma, mu, support)))
    Isentrope(beta, sigma)  # refuses what no star can have
    demand("mean molecular weight", mu, (mu > 0) & np.isfinite(mu), "a positive number")
    mass, rest, radius, binding, square, stiffness, response = values(beta, sigma)
    theta = central_theta(beta, sigma)
    density = central_density(beta, theta)
    energy_density = density * (theta / (sigma * beta))
    length = length_unit(sigma, energy_density) / mu**2
    unit = 4.0 * np.pi * length**3 * energy_density * mu**4
    compactness = 4.0 * sigma * mass / radius
    stiffness = stiffness * beta
    size = radius * length
    return Star(
        beta=beta,
        sigma=sigma,
        temperature=theta * mu * M_U * C**2 / K_B,
        density=density * mu**4,
        rest_mass=unit * rest,
        gravitational_mass=unit * mass,
        radius=size,
        energy=unit * sigma * binding * C**2,
        compactness=compactness,
        frequency_squared=(square + support / response) * compactness * C**2 / size**2,
        stiffness=stiffness,
        critical=stiffness - response * square - support,
    )
