"""Small radial pulsations of relativistic stars (Chandrasekhar 1964, ApJ 140, 417; Bardeen, Thorne & Meltzer 1966,
ApJ 145, 505), by Ritz's method for whole batches.

With the displacement xi = r e^(nu/2) f the energy of a pulsation is integrated by parts until only the stiffness
beyond 4/3 and relativistic terms are left, so that no digit is lost where a star is nearly marginal:

    omega^2 int (eps + P) e^((3 lambda + nu)/2) r^4 f^2 dr = int e^((lambda + 3 nu)/2) {
        (Gamma_1 - 4/3) P (9 r^2 f^2 + 6 r^3 f f') + Gamma_1 P r^4 f'^2
        - 4 P r^3 f^2 (lambda' + 3 nu')/2 - r^4 f^2 [P'^2/(eps + P) - 8 pi G/c^4 (eps + P) P e^lambda] } dr.

f is a polynomial in q, the coordinate of ``tov``: it follows the matter, where powers of r/R would miss a small core in
a wide halo. The polynomials are orthonormal in the weight of the left-hand side (Stieltjes' recurrence at the nodes),
so that no number of them makes the problem ill-conditioned.
"""

from dataclasses import dataclass

import numpy as np

from massdash.errors import ComputationError
from massdash.physics import tov

BASIS = 9  # functions at first for the lowest mode; four more for each overtone
MOST = 40
DROPPED = 3  # functions left out to estimate the error


@dataclass(frozen=True, eq=False)
class Pulsation:
    """The lowest modes of N stars.

    ``frequency_squared`` (modes, N) in units of GM/R^3, rising, and ``error`` of the same shape and unit, by how much
    it would grow without the last three functions (what is left of the error is smaller still). ``stiffness`` and
    ``critical`` (N,) are Gamma_1 - 4/3 and its least stable value, both weighted with the lowest mode; ``response`` is
    their difference over ``frequency_squared``, which stays regular where both vanish.
    ``coefficients`` (basis, N) of the lowest mode's f in the polynomials of ``recurrence``.
    """

    frequency_squared: np.ndarray
    error: np.ndarray
    stiffness: np.ndarray
    critical: np.ndarray
    response: np.ndarray
    coefficients: np.ndarray
    recurrence: tuple

    @property
    def margin(self):
        return 1.0 - self.critical / self.stiffness

    def eigenfunction(self, q):
        """f/f(centre) of the lowest mode at q = 1 - (h/depth)^(1/2), shape (k,) or (k, N), from 0 in the centre to 1
        at the surface; the displacement is r e^(nu/2) f. Shape (k, N)."""
        q = np.asarray(q, float)
        q = q[:, None] if q.ndim == 1 else q
        return self._lowest(q) / self._lowest(np.zeros((1, 1)))

    def _lowest(self, q):
        """By the recurrence of the polynomials; their common factor does not matter."""
        x, before, value = 2.0 * q - 1.0, 0.0, np.ones(())
        result, last = self.coefficients[0] + 0.0 * q, 0.0
        for shift, norm, coefficient in zip(*self.recurrence, self.coefficients[1:], strict=True):
            before, value = value, ((x - shift) * value - last * before) / norm
            result, last = result + coefficient * value, norm
        return result


def growth_time(frequency_squared):
    """Time in which an unstable star leaves its balance by e, (-omega^2)^(-1/2) [s]; NaN where it is stable.
    ``frequency_squared`` in s-2."""
    square = np.asarray(frequency_squared, float)
    unstable = square < 0
    return np.where(unstable, 1.0 / np.sqrt(np.where(unstable, -square, 1.0)), np.nan)


def pulsation(structure, modes=1, basis=None, tolerance=1e-8):
    """The lowest ``modes`` of every star of a ``tov.Structure``, by ``basis`` functions.

    Without ``basis`` their number, and with it that of the nodes, is raised until ``error`` is below ``tolerance``
    times the size of the terms that cancel in the frequency squared; raises ComputationError when that does not help.
    """
    terms = _terms(structure)
    if basis is not None:
        return _solve(terms, modes, basis)[0]
    count = BASIS + 4 * (modes - 1)
    while count <= MOST:
        if count > _carried(structure):
            structure = _finer(structure)
            terms = _terms(structure)
            continue
        result, size = _solve(terms, modes, count)
        if np.all(result.error <= tolerance * np.maximum(size, np.abs(result.frequency_squared))):
            return result
        count += max(4, count // 3)
    raise ComputationError(
        f"radial pulsation: mode {modes} was not found to {tolerance:.1e} with {MOST} functions; the mode is too high, "
        "or the star too close to the limit of sigma"
    )


def critical_index(structure, basis=24):
    """The uniform Gamma_1 with which the lowest mode of each star would have no frequency, shape (N,)."""
    while basis > _carried(structure):
        structure = _finer(structure)
    terms = _terms(structure)
    base = _Basis.of(terms, basis)
    stiff = _matrix(base, 9.0 * terms.pressure, 3.0 * terms.pressure * terms.lever, terms.pressure * terms.lever**2)
    rest = _matrix(base, terms.gravity, 0.0, 4.0 / 3.0 * terms.pressure * terms.lever**2)
    lower = np.linalg.cholesky(stiff)
    half = np.linalg.solve(lower, rest)
    return 4.0 / 3.0 - np.linalg.eigvalsh(np.linalg.solve(lower, half.transpose(0, 2, 1)))[:, 0]


def _carried(structure):
    """How many functions the nodes integrate without loss (found by experiment, held by a test)."""
    return structure.square.shape[0] // 4 + 4


def _finer(structure):
    """The same stars with twice the nodes."""
    return tov.solve(structure.matter, tov.NODES, -(-2 * structure.square.shape[0] // tov.NODES))[0]


@dataclass(frozen=True, eq=False)
class _Terms:
    """The integrands at the nodes, (k, N), with their weights, for f and g = df/dq: ``pressure`` multiplies
    (3 f + lever g)^2 (Gamma_1 - 4/3) and 4/3 (lever g)^2, ``gravity`` f^2, ``inertia`` f^2 on the other side."""

    q: np.ndarray
    pressure: np.ndarray
    lever: np.ndarray
    gravity: np.ndarray
    inertia: np.ndarray
    excess: np.ndarray
    unit: np.ndarray


def _terms(structure):
    matter, state, square, v = structure.matter, structure.state, structure.square, structure.enclosed
    sigma, order = matter.sigma, matter.order
    xi = np.sqrt(square)
    metric = 1.0 - 2.0 * order * sigma * v / xi  # e^-lambda
    lapse = np.sqrt(1.0 - 2.0 * structure.compactness) * np.exp(-order * sigma * structure.enthalpy)  # e^(nu/2)
    half_nu = order * sigma * (v + sigma * square * xi * state.pressure) / (square * metric)
    half_lambda = order * sigma * (xi * state.energy - v / square) / metric
    heavy = (state.energy + sigma * state.pressure) / sigma
    measure = structure.weight * structure.rate / (2.0 * xi)
    work = measure * lapse**3 / np.sqrt(metric)
    gravity = -4.0 * state.pressure * square * xi * (half_lambda + 3.0 * half_nu) - square**2 * heavy * (
        half_nu**2 - 2.0 * order * sigma**2 * state.pressure / metric
    )
    return _Terms(
        q=1.0 - np.sqrt(structure.enthalpy / matter.depth),
        pressure=work * state.pressure * square,
        lever=2.0 * square / structure.rate,
        gravity=work * gravity,
        inertia=sigma * measure * heavy * lapse * metric**-1.5 * square**2,
        excess=state.excess,
        unit=structure.radius**3 / (order * structure.mass),
    )


def _solve(terms, modes, count):
    """(Pulsation, size of the terms that cancel (N,)) with ``count`` functions."""
    base = _Basis.of(terms, count)
    stiff = terms.excess * terms.pressure
    bending = (terms.excess + 4.0 / 3.0) * terms.pressure * terms.lever**2
    energy = _matrix(base, 9.0 * stiff + terms.gravity, 3.0 * stiff * terms.lever, bending)
    values, vectors = np.linalg.eigh(energy)
    values, vectors = values[:, :modes], vectors[:, :, :modes]
    lowest = vectors[:, :, 0].T
    strain = np.einsum("ikn,in->kn", base.values, lowest) * 3.0
    strain += terms.lever * np.einsum("ikn,in->kn", base.slopes, lowest)
    weight = np.sum(terms.pressure * strain**2, axis=0)
    stiffness = np.sum(stiff * strain**2, axis=0) / weight
    critical, response = stiffness - values[:, 0] / weight, 1.0 / (weight * terms.unit)
    size = (np.abs(stiffness) + np.abs(critical)) * weight * terms.unit
    error = _without_last(energy, values, vectors) * terms.unit
    result = Pulsation(values.T * terms.unit, error, stiffness, critical, response, lowest, (base.shifts, base.norms))
    return result, size


def _without_last(energy, values, vectors):
    """Growth (modes, N) of each Rayleigh quotient when the last coefficients are dropped: with (E - omega^2) c = 0 it
    is the quotient of the dropped part alone, over what is kept."""
    tail = vectors[:, -DROPPED:, :]
    square = np.sum(tail**2, axis=1)
    form = np.einsum("nim,nij,njm->nm", tail, energy[:, -DROPPED:, -DROPPED:], tail, optimize=True)
    return np.abs(form - values * square).T / np.maximum(1.0 - square, 1e-300).T


def _matrix(base, plain, mixed, bent):
    """int plain f_i f_j + mixed (f_i g_j + g_i f_j) + bent g_i g_j, shape (N, count, count)."""
    f, g = base.values.transpose(2, 0, 1), base.slopes.transpose(2, 1, 0)
    left = np.concatenate([f, base.slopes.transpose(2, 0, 1)], axis=2)
    turned = base.values.transpose(2, 1, 0)
    plain, mixed, bent = (np.broadcast_to(one, base.values.shape[1:]).T[:, :, None] for one in (plain, mixed, bent))
    return left @ np.concatenate([plain * turned + mixed * g, mixed * turned + bent * g], axis=1)


@dataclass(frozen=True, eq=False)
class _Basis:
    """Polynomials of x = 2q - 1 orthonormal in the inertia, (count, k, N), and their slopes by q; the recurrence
    norms[i] p_(i+1) = (x - shifts[i]) p_i - norms[i-1] p_(i-1), both (count - 1, N)."""

    values: np.ndarray
    slopes: np.ndarray
    shifts: np.ndarray
    norms: np.ndarray

    @classmethod
    def of(cls, terms, count):
        x, weight = 2.0 * terms.q - 1.0, terms.inertia
        values, slopes = np.zeros((2, count, *weight.shape))
        shifts, norms = np.zeros((2, count - 1, weight.shape[1]))
        values[0] = 1.0 / np.sqrt(np.sum(weight, axis=0))
        for i in range(count - 1):
            shifts[i] = np.sum(weight * x * values[i] ** 2, axis=0)
            value = (x - shifts[i]) * values[i]
            slope = 2.0 * values[i] + (x - shifts[i]) * slopes[i]
            if i:
                value -= norms[i - 1] * values[i - 1]
                slope -= norms[i - 1] * slopes[i - 1]
            norms[i] = np.sqrt(np.sum(weight * value**2, axis=0))
            values[i + 1], slopes[i + 1] = value / norms[i], slope / norms[i]
        return cls(values, slopes, shifts, norms)
