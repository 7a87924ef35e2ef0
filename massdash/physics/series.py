"""Polynomials of two variables for many points at once: Chebyshev series by products of matrices."""

from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.polynomial import chebyshev

BLOCK = 2048  # points at a time, so that intermediate arrays stay in the processor's cache
_FEW = 8


@dataclass(frozen=True, eq=False)
class Series:
    """Quantities ``names`` over the box ``x`` times ``y`` (each low, high); ``coefficients`` (names, i, j)."""

    names: tuple[str, ...]
    x: tuple[float, float]
    y: tuple[float, float]
    coefficients: np.ndarray

    def covers(self, x, y):
        """Whether the box holds these points."""
        return (x >= self.x[0]) & (x <= self.x[1]) & (y >= self.y[0]) & (y <= self.y[1])

    def __call__(self, x, y, names=None, *, derivatives=False):
        """The named quantities, stacked (names, N), at points x and y of shape (N,) within the box (not checked).

        With ``derivatives``, (3 * names, N): values, then derivatives by x, then by y.
        """
        packed = _packed(self, self.names if names is None else tuple(names), derivatives)
        i, j = self.coefficients.shape[1:]
        result = np.empty((packed.shape[0] // j, x.size))
        for start in range(0, x.size, BLOCK):
            part = slice(start, start + BLOCK)
            inner = (packed @ polynomials(scaled(x[part], self.x), i)).reshape(result.shape[0], j, -1)
            result[:, part] = np.einsum("qjn,jn->qn", inner, polynomials(scaled(y[part], self.y), j))
        return result


@cache
def _packed(series, names, derivatives):
    """Coefficients of the named quantities, and of their derivatives, as one matrix (quantities * j, i)."""
    chosen = series.coefficients[[series.names.index(name) for name in names]]
    if derivatives:
        along, across = np.zeros_like(chosen), np.zeros_like(chosen)
        along[:, :-1] = chebyshev.chebder(chosen, axis=1) * 2.0 / (series.x[1] - series.x[0])
        across[:, :, :-1] = chebyshev.chebder(chosen, axis=2) * 2.0 / (series.y[1] - series.y[0])
        chosen = np.concatenate([chosen, along, across])
    return np.ascontiguousarray(chosen.transpose(0, 2, 1).reshape(-1, chosen.shape[1]))


def scaled(value, box):
    """-1..1 over the box."""
    return (2.0 * value - (box[0] + box[1])) / (box[1] - box[0])


def polynomials(x, count):
    """Chebyshev polynomials (count, N), at least two, at x: each pass doubles their number by
    T_(m+k) = 2 T_m T_k - T_(m-k). A few points are answered faster, if a little less exactly, by cosines."""
    if x.size <= _FEW:
        return np.cos(np.arange(count)[:, None] * np.arccos(np.clip(x, -1.0, 1.0)))
    rows = np.empty((count, x.size))
    rows[0], rows[1] = 1.0, x
    known = 1
    while known < count - 1:
        new = min(known, count - 1 - known)
        np.multiply(rows[1 : new + 1], 2.0 * rows[known], out=rows[known + 1 : known + new + 1])
        rows[known + 1 : known + new + 1] -= rows[known - new : known][::-1]
        known += new
    return rows


def points(count, box):
    """Chebyshev points (count,) of the first kind over the box."""
    return box[0] + (box[1] - box[0]) * (chebyshev.chebpts1(count) + 1.0) / 2.0


def fit(names, x, y, values):
    """The Series through ``values`` (names, i, j) at ``points`` of the two boxes."""
    inverse = [np.linalg.inv(chebyshev.chebvander(chebyshev.chebpts1(count), count - 1)) for count in values.shape[1:]]
    return Series(tuple(names), tuple(x), tuple(y), np.einsum("ib,qbs,js->qij", inverse[0], values, inverse[1]))
