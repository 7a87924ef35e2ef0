"""The one place that calls an initial-value solver of scipy, guarded.

A solver can report success with NaN in its answer, or never return when its first step is not finite. Here the start
is checked, the number of evaluations is bounded, and the answer is finite or a ComputationError says what failed.
"""

import numpy as np

from massdash.errors import ComputationError


class _Bounded:
    """Counts evaluations of a right-hand side and stops the integration when there are too many."""

    def __init__(self, rhs, most, what):
        self.rhs, self.left, self.most, self.what = rhs, most, most, what

    def __call__(self, t, y):
        self.left -= 1
        if self.left < 0:
            raise ComputationError(f"{self.what}: no answer after {self.most} evaluations")
        return self.rhs(t, y)


def integrate(rhs, span, start, *, rtol, atol, what, most=200_000, **options):
    """scipy.integrate.solve_ivp with DOP853 and the checks above; returns its result object.

    ``span`` is (from, to), ``start`` the initial state (k,), ``what`` a name for messages; further ``options`` go to
    solve_ivp. Raises ComputationError.
    """
    from scipy.integrate import solve_ivp  # half a second to import, and not needed by the live dashboard

    if not (np.all(np.isfinite(span)) and np.all(np.isfinite(start))):
        raise ComputationError(f"{what}: the start of the integration is not finite")
    result = solve_ivp(_Bounded(rhs, most, what), span, start, method="DOP853", rtol=rtol, atol=atol, **options)
    if not (result.success and np.all(np.isfinite(result.y))):
        raise ComputationError(f"{what}: the integration failed ({result.message})")
    return result
