"""How well a tabulated star satisfies the Hamiltonian constraint, by finite differences on its own points.

For a star at rest in areal radius the constraint is dm/dr = 4 pi r^2 epsilon/c^2. The derivative is that of the
polynomial through ORDER + 1 neighbouring points (Fornberg 1988, Math. Comp. 51, 699), whatever their spacing; inside
the star they lie on both sides, and at the centre the points mirrored at r = 0 belong to them, where m is odd.
"""

import numpy as np

ORDER = 4
DEFINITION = (
    f"max |dm/dr - 4 pi r^2 epsilon/c^2| / max(4 pi r^2 epsilon/c^2), dm/dr by finite differences of order {ORDER} on "
    f"the points of this table ({ORDER + 1} neighbours, mirrored at r = 0, one-sided at the surface)"
)


def derivative(x, values, order=ORDER):
    """d(values)/dx (n,) at the points x (n,), to the given even order; both rising from x = 0, where values are odd."""
    half = order // 2
    x = np.concatenate([-x[half:0:-1], x])
    values = np.concatenate([-values[half:0:-1], values])
    centre = np.arange(half, x.size)
    first = np.minimum(centre - half, x.size - order - 1)
    near = first[:, None] + np.arange(order + 1)
    weights = _weights(x[near], centre - first)
    # differences first, so that digits of large, nearly equal values are not lost
    return np.sum(weights * (values[near] - values[centre][:, None]), axis=1)


def _weights(points, at):
    """Weights (n, k) of the derivative at points[i, at[i]] of the polynomial through points[i] (Lagrange's form); that
    of the point itself multiplies 0 and is left at 0."""
    n, k = points.shape
    rows = np.arange(n)
    here = points[rows, at]
    apart = points[:, :, None] - points[:, None, :]
    apart[:, np.arange(k), np.arange(k)] = 1.0
    from_here = here[:, None] - points
    from_here[rows, at] = 1.0
    weights = from_here.prod(axis=1)[:, None] / from_here / apart.prod(axis=2)
    weights[rows, at] = 0.0
    return weights


def residual(radius, mass, density, order=ORDER):
    """The scaled residual (n,) of a table from r = 0 to the surface; ``density`` is epsilon/c^2, units that agree."""
    source = 4.0 * np.pi * radius**2 * density
    return (derivative(radius, mass, order) - source) / np.max(source)
