"""Roots of many smooth equations at once, for the live dashboard where no optimiser is to be imported."""

import numpy as np

from massdash.errors import ComputationError


def secant(residual, start, *, what, step=1e-4, tolerance=1e-13, most=60):
    """Solve residual(u) = 0 for every element, from ``start``; u is best a logarithm and the residual a log ratio.

    ``residual`` maps an array to an array of the same shape. The step that would leave a factor e^2 is cut. Raises
    ComputationError, naming ``what``, when an element does not converge or leaves the reals.
    """
    u0 = np.asarray(start, float)
    u1 = u0 + step
    r0, r1 = residual(u0), residual(u1)
    for _ in range(most):
        change = r1 - r0
        move = -r1 * (u1 - u0) / (change + (change == 0.0))
        move = np.minimum(np.maximum(move, -2.0), 2.0)
        u0, r0, u1 = u1, r1, u1 + move
        if (np.abs(move) <= tolerance * np.maximum(1.0, np.abs(u1))).all():
            return u1
        r1 = residual(u1)
    raise ComputationError(f"{what}: no answer found for this star")
