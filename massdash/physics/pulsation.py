"""Small radial pulsations of relativistic stars (Chandrasekhar 1964, ApJ 140, 417; Bardeen, Thorne & Meltzer 1966,
ApJ 145, 505), by Ritz's method for whole batches.

With the displacement xi = r e^(nu/2) f the energy of a pulsation is integrated by parts until only the stiffness
beyond 4/3 and relativistic terms are left, so that no digit is lost where a star is nearly marginal:

    omega^2 int (eps + P) e^((3 lambda + nu)/2) r^4 f^2 dr = int e^((lambda + 3 nu)/2) {
        (Gamma_1 - 4/3) P (9 r^2 f^2 + 6 r^3 f f') + Gamma_1 P r^4 f'^2
        - 4 P r^3 f^2 (lambda' + 3 nu')/2 - r^4 f^2 [P'^2/(eps + P) - 8 pi G/c^4 (eps + P) P e^lambda] } dr.

f is a polynomial in (r/R)^2.
"""

from dataclasses import dataclass

import numpy as np

BASIS = 9  # functions for the lowest mode; three more for each overtone wanted


@dataclass(frozen=True, eq=False)
class Pulsation:
    """The lowest modes of N stars. ``frequency_squared`` (modes, N) in units of GM/R^3, rising; ``coefficients``
    (basis, N) of the lowest mode's f in Legendre polynomials of 2 (r/R)^2 - 1; ``stiffness`` and ``critical`` (N,) are
    Gamma_1 - 4/3 and its least stable value, both weighted with the lowest mode; ``margin`` 1 - critical/stiffness."""

    frequency_squared: np.ndarray
    coefficients: np.ndarray
    stiffness: np.ndarray
    critical: np.ndarray

    @property
    def margin(self):
        return 1.0 - self.critical / self.stiffness

    def eigenfunction(self, relative_radius):
        """f/f(centre) of the lowest mode at r/R of shape (k,); the displacement is r e^(nu/2) f. Shape (k, N)."""
        x = 2.0 * np.asarray(relative_radius, float) ** 2 - 1.0
        centre = np.polynomial.legendre.legval(-1.0, self.coefficients)
        return np.polynomial.legendre.legval(x, self.coefficients, tensor=True).T / centre


def pulsation(structure, modes=1, basis=None):
    """The lowest ``modes`` of every star of a ``tov.Structure``."""
    basis = BASIS + 3 * (modes - 1) if basis is None else basis
    energy, stiff, norm, inertia = _matrices(structure, basis)
    lower = np.linalg.cholesky(inertia)
    half = np.linalg.solve(lower, energy)
    values, vectors = np.linalg.eigh(np.linalg.solve(lower, half.transpose(0, 2, 1)))
    vector = np.linalg.solve(lower.transpose(0, 2, 1), vectors[:, :, :1])[:, :, 0]
    weight = _form(norm, vector)
    stiffness = _form(stiff, vector) / weight
    critical = stiffness - values[:, 0] * _form(inertia, vector) / weight
    unit = structure.radius**3 / (structure.matter.order * structure.mass)
    return Pulsation(values[:, :modes].T * unit, vector.T, stiffness, critical)


def _form(matrix, vector):
    return np.einsum("nij,ni,nj->n", matrix, vector, vector)


def _matrices(structure, basis):
    """Quadratic forms (N, basis, basis): whole energy, the part of Gamma_1 - 4/3, the weight of that part, inertia."""
    sigma, order = structure.matter.sigma, structure.matter.order
    state, square, v = structure.state, structure.square, structure.enclosed
    xi = np.sqrt(square)
    chi = 2.0 * order * sigma * v / xi
    lapse = np.sqrt(1.0 - 2.0 * structure.compactness) * np.exp(-order * sigma * structure.enthalpy)  # e^(nu/2)
    half_nu = order * sigma * (v + sigma * square * xi * state.pressure) / (square * (1.0 - chi))
    half_lambda = order * sigma * (xi * state.energy - v / square) / (1.0 - chi)
    heavy = (state.energy + sigma * state.pressure) / sigma
    measure = structure.weight * structure.rate / (2.0 * xi)
    work = measure * lapse**3 / np.sqrt(1.0 - chi)
    gravity = -4.0 * state.pressure * square * xi * (half_lambda + 3.0 * half_nu) - square**2 * heavy * (
        half_nu**2 - 2.0 * order * sigma**2 * state.pressure / (1.0 - chi)
    )
    f, df = _basis(structure, xi, basis)
    pressure = work * state.pressure
    stiff = _integrals(state.excess * pressure, square, xi, f, df)
    norm = _integrals(pressure, square, xi, f, df)
    bending = np.einsum("kn,kni,knj->nij", pressure * square**2, df, df, optimize=True)
    energy = stiff + 4.0 / 3.0 * bending + np.einsum("kn,kni,knj->nij", work * gravity, f, f, optimize=True)
    moving = sigma * measure * heavy * lapse * (1.0 - chi) ** -1.5 * square**2
    return energy, stiff, norm, np.einsum("kn,kni,knj->nij", moving, f, f, optimize=True)


def _integrals(weight, square, xi, f, df):
    """int weight (3 r f + r^2 f')(3 r g + r^2 g')."""
    strain = 3.0 * xi[..., None] * f + square[..., None] * df
    return np.einsum("kn,kni,knj->nij", weight, strain, strain, optimize=True)


def _basis(structure, xi, count):
    """Legendre polynomials of 2 (r/R)^2 - 1 and their derivatives by xi, (k, N, count)."""
    x = 2.0 * structure.square / structure.radius**2 - 1.0
    values = np.polynomial.legendre.legvander(x, count - 1)
    slopes = np.polynomial.legendre.legder(np.eye(count))
    derivative = np.polynomial.legendre.legvander(x, max(count - 2, 0)) @ slopes
    return values, derivative * (4.0 * xi / structure.radius**2)[..., None]
