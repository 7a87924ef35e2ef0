"""Functions on 0..1 as one polynomial a panel, all panels of equal width, from their values at Gauss nodes: what a
collocation solution is between its nodes."""

from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.polynomial import legendre


@cache
def _to_coefficients(count):
    """From values at ``count`` Gauss nodes to coefficients of Legendre polynomials."""
    return np.linalg.inv(legendre.legvander(legendre.leggauss(count)[0], count - 1))


@dataclass(frozen=True, eq=False)
class Piecewise:
    """Several functions, ``coefficients`` (degree + 1, functions, panels) of Legendre polynomials on each panel."""

    coefficients: np.ndarray

    @classmethod
    def of_values(cls, values, panels):
        """From values (functions, panels * nodes) at the Gauss nodes of all panels, in order."""
        values = np.asarray(values, float)
        nodes = values.shape[1] // panels
        return cls(np.einsum("ij,fpj->ifp", _to_coefficients(nodes), values.reshape(len(values), panels, nodes)))

    def __call__(self, q):
        """Values (functions, n) at ``q`` (n,) within 0..1."""
        panels = self.coefficients.shape[2]
        place = np.asarray(q, float) * panels
        panel = np.minimum(place.astype(int), panels - 1)
        basis = legendre.legvander(2.0 * (place - panel) - 1.0, len(self.coefficients) - 1)
        return np.einsum("ni,ifn->fn", basis, self.coefficients[:, :, panel])

    def antiderivative(self):
        """The integrals from 0, as functions of their upper end."""
        panels = self.coefficients.shape[2]
        inner = legendre.legint(self.coefficients, lbnd=-1, scl=0.5 / panels, axis=0)
        inner[0, :, 1:] += np.cumsum(inner.sum(axis=0), axis=1)[:, :-1]  # every Legendre polynomial is 1 at its end
        return Piecewise(inner)

    def tail(self):
        """The last two coefficients over the largest value of each function, (functions,): an estimate of the error."""
        size = np.abs(self.coefficients).sum(axis=0).max(axis=1)
        return np.abs(self.coefficients[-2:]).max(axis=(0, 2)) / size
