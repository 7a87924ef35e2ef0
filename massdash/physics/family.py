"""Isentropic stars of gas and radiation in full general relativity as a formula.

Without pairs such a star is fixed by beta_c and sigma = P_c/epsilon_c, up to a scaling with the mean molecular weight:
M mu^2 and T/mu depend on the two numbers alone. The shipped table (data/builders/family.py writes it) holds the
structure as Chebyshev series; errors against direct integration are stored in it. Everything here is vectorised over
stars; nothing loops over them. Arguments and results in cgs.
"""

from dataclasses import dataclass
from functools import cache
from importlib.resources import files

import numpy as np

from massdash.constants import K_B, M_U, RADIATION, C, G
from massdash.errors import ComputationError

BLOCK = 2048  # stars at a time, so that intermediate arrays stay in the processor's cache


@dataclass(frozen=True, eq=False)
class Table:
    """The series: ``coefficients`` (names, i, j) over root-beta and sigma, ``beta`` and ``sigma`` the box, ``errors``
    the measured largest deviation of each name on its own scale."""

    names: tuple[str, ...]
    beta: tuple[float, float]
    sigma: tuple[float, float]
    coefficients: np.ndarray
    errors: np.ndarray

    def covers(self, beta, sigma):
        """Whether the box holds these stars."""
        return (beta >= self.beta[0]) & (beta <= self.beta[1]) & (sigma > self.sigma[0]) & (sigma <= self.sigma[1])


@cache
def table():
    """The shipped table."""
    with (files("massdash") / "data" / "family.npz").open("rb") as file, np.load(file) as stored:
        return Table(
            tuple(stored["names"].tolist()),
            tuple(stored["beta"].tolist()),
            tuple(stored["sigma"].tolist()),
            stored["coefficients"],
            stored["errors"],
        )


@cache
def _packed(names, derivatives):
    """Coefficients of the named quantities, and of their derivatives by the two scaled coordinates, as one matrix
    (quantities * j, i)."""
    data = table()
    chosen = data.coefficients[[data.names.index(name) for name in names]]
    if derivatives:
        along = np.zeros_like(chosen)
        across = np.zeros_like(chosen)
        along[:, :-1] = np.polynomial.chebyshev.chebder(chosen, axis=1)
        across[:, :, :-1] = np.polynomial.chebyshev.chebder(chosen, axis=2)
        chosen = np.concatenate([chosen, along, across])
    return np.ascontiguousarray(chosen.transpose(0, 2, 1).reshape(-1, chosen.shape[1]))


def _basis(x, count):
    """Chebyshev polynomials (count, N) at x."""
    rows = np.empty((count, x.size))
    rows[0], rows[1] = 1.0, x
    double = 2.0 * x
    for k in range(2, count):
        np.multiply(double, rows[k - 1], out=rows[k])
        rows[k] -= rows[k - 2]
    return rows


def lookup(beta, sigma, names, *, derivatives=False):
    """The named quantities of data/builders/family.py, stacked (names, ...), for stars inside the box.

    With ``derivatives``, (3 * names, ...): values, then derivatives by beta_c, then by sigma. Shapes of ``beta`` and
    ``sigma`` must agree. No check of the box: see ``Table.covers``.
    """
    data, packed = table(), _packed(tuple(names), derivatives)
    beta, sigma = np.asarray(beta, float), np.asarray(sigma, float)
    low, high = np.sqrt(data.beta)
    root, flat_sigma = np.sqrt(beta.ravel()), sigma.ravel()
    i, j = data.coefficients.shape[1:]
    result = np.empty((packed.shape[0] // j, root.size))
    for start in range(0, root.size, BLOCK):
        part = slice(start, start + BLOCK)
        x = (2.0 * root[part] - (low + high)) / (high - low)
        y = (2.0 * flat_sigma[part] - sum(data.sigma)) / (data.sigma[1] - data.sigma[0])
        inner = (packed @ _basis(x, i)).reshape(-1, j, x.size)
        result[:, part] = np.einsum("qjn,jn->qn", inner, _basis(y, j))
    if derivatives:
        count = len(names)
        result[count : 2 * count] /= (high - low) * root
        result[2 * count :] *= 2.0 / (data.sigma[1] - data.sigma[0])
    return result.reshape(-1, *beta.shape)


# ------------------------------------------------------------------------------------------------ the scales of a star
def central_theta(beta, sigma):
    """kT_c/(mu m_u c^2)."""
    z = (1.0 - beta) / beta
    return sigma / (1.0 + z - sigma * (3.0 * z + 1.5))


def sigma_of_theta(beta, theta):
    """sigma of the star with central kT/(mu m_u c^2) = ``theta``."""
    z = (1.0 - beta) / beta
    return theta * (1.0 + z) / (1.0 + theta * (3.0 * z + 1.5))


def _energy_density(beta, theta):
    """epsilon_c/c^2 over mu^4 [g cm-3]: rho_c = a T^3 mu m_u/(3 k z) with T = theta mu m_u c^2/k."""
    z = (1.0 - beta) / beta
    rest = RADIATION / (3.0 * z) * (M_U / K_B) ** 4 * (theta * C**2) ** 3
    return rest * (1.0 + theta * (3.0 * z + 1.5)), rest


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
    """The Star of each (beta_c, sigma) at mean molecular weight ``mu``; raises ComputationError outside the box.

    ``support`` is what rotation or a background adds to the effective Gamma_1: it lowers ``critical`` and stiffens the
    pulsation, and leaves the spherical structure as it is.
    """
    beta, sigma, mu, support = np.broadcast_arrays(*(np.asarray(one, float) for one in (beta, sigma, mu, support)))
    if not np.all(table().covers(beta, sigma)):
        raise ComputationError("a star lies outside the table of relativistic stars")
    mass, rest, radius, binding, square, stiffness, response = lookup(beta, sigma, table().names)
    theta = central_theta(beta, sigma)
    energy_density, density = _energy_density(beta, theta)
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
