"""Writes data/pairs.npz: the pressure of a relativistic Fermi gas at any temperature as a Chebyshev series.

Run ``python -m massdash.data.builders.pairs`` after a change in physics/pair_table.py. The largest deviations of the
pressure and its first and second derivatives from direct quadrature at random states are measured and stored with it.
"""

import time
from pathlib import Path

import numpy as np
from numpy.polynomial import chebyshev

from massdash.physics import pair_table

HOTTEST, DENSEST = 3.4, 6.0  # t = kT/(m_e c^2), 2.0e10 K; eta
NODES = (24, 22)
CHECKS, SEED = 2000, 20260101


def coefficients():
    """Chebyshev coefficients (NODES) of ln(P/(t^(5/2) y)) over the box."""
    points = [chebyshev.chebpts1(count) for count in NODES]
    a = (points[0] + 1.0) / 2.0 * np.log1p(pair_table.STRETCH * HOTTEST)
    y = (points[1] + 1.0) / 2.0 * np.log1p(np.exp(DENSEST))
    t, y = np.meshgrid(np.expm1(a) / pair_table.STRETCH, y, indexing="ij")
    values = np.log(pair_table.by_quadrature(t, np.log(np.expm1(y)))[0] / (t**2.5 * y))
    inverse = [np.linalg.inv(chebyshev.chebvander(x, count - 1)) for x, count in zip(points, NODES, strict=True)]
    return inverse[0] @ values @ inverse[1].T


def measured_errors():
    """Largest relative deviations (6,) of P, P_T, P_eta, P_TT, P_Teta, P_etaeta at random states."""
    random = np.random.default_rng(SEED)
    t = np.exp(random.uniform(np.log(1e-7), np.log(HOTTEST), CHECKS))
    eta = np.where(random.random(CHECKS) < 0.5, random.uniform(-3, DENSEST, CHECKS), random.uniform(-60, -3, CHECKS))
    exact = pair_table.by_quadrature(t, eta)
    return np.max(np.abs(pair_table.lookup(t, eta) - exact) / np.abs(exact), axis=1)


if __name__ == "__main__":
    target = Path(__file__).parents[1] / "pairs.npz"
    start = time.perf_counter()
    stored = {"coefficients": coefficients(), "hottest": HOTTEST, "densest": DENSEST}
    np.savez_compressed(target, **stored, errors=np.zeros(6))
    built = time.perf_counter() - start
    errors = measured_errors()
    np.savez_compressed(target, **stored, errors=errors)
    names = ("P", "P_T", "P_eta", "P_TT", "P_Teta", "P_etaeta")
    print(f"built in {built:.2f} s;", ", ".join(f"{name} {e:.1e}" for name, e in zip(names, errors, strict=True)))
