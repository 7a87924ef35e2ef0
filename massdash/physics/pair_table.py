"""One kind of fermion of the electron's mass, at any temperature: the potential all its thermodynamics follow from.

Units are those of the electron: t = kT/(m_e c^2), number densities in (m_e c/hbar)^3, pressures and energies in m_e c^2
of these. With eta = (chemical potential - rest energy)/kT the pressure of one kind with two spin states is

    P(t, eta) = 2^(3/2)/(3 pi^2) t^(5/2) int_0^inf x^(3/2) (1 + t x/2)^(3/2)/(e^(x - eta) + 1) dx

(Cox & Giuli 1968, Principles of Stellar Structure, ch. 24), and dP = s dT + n d mu gives all else. Two roads give P
with its derivatives: ``by_quadrature``, and ``lookup`` in the shipped series (data/builders/pairs.py writes it). The
series is ln(P/(t^(5/2) y)) as one polynomial in ln(1 + 4t) and y = ln(1 + e^eta). These coordinates make both ideal
limits, t -> 0 and e^eta -> 0, plain ends of the box, so that it has no lowest temperature and no lowest density; and
in y the nearest singularity is 2 pi i away.
"""

from dataclasses import dataclass
from functools import cache
from importlib.resources import files

import numpy as np

BLOCK = 512  # states at a time, so that intermediate arrays stay in the processor's cache
STRETCH = 4.0  # temperatures enter as ln(1 + STRETCH t)


@dataclass(frozen=True, eq=False)
class Table:
    """The series: ``coefficients`` (i, j) over the two coordinates, each running from 0 to the value that belongs to
    ``hottest`` t and ``densest`` eta; ``errors`` the measured largest relative deviations of P and its derivatives."""

    coefficients: np.ndarray
    hottest: float
    densest: float
    errors: np.ndarray

    def covers(self, t, eta):
        """Whether the box holds these states."""
        return (t > 0) & (t <= self.hottest) & (eta <= self.densest)


@cache
def table():
    """The shipped series."""
    with (files("massdash") / "data" / "pairs.npz").open("rb") as file, np.load(file) as stored:
        return Table(stored["coefficients"], float(stored["hottest"]), float(stored["densest"]), stored["errors"])


# ------------------------------------------------------------------------------------------------ quadrature
@cache
def _nodes(step=0.05, low=-3.6, high=4.6):
    """Nodes and weights on 0..inf for integrands that fall like e^-x: the double exponential rule
    x = exp(u - exp(-u)) of Takahasi & Mori (1974, Publ. RIMS 9, 721)."""
    u = np.arange(low, high + step / 2.0, step)
    x = np.exp(u - np.exp(-u))
    return x, step * x * (1.0 + np.exp(-u))


def by_quadrature(t, eta):
    """P and its derivatives by T = ln t and eta, stacked (6, ...): P, P_T, P_eta, P_TT, P_Teta, P_etaeta.

    Good to 1e-13 for t to 10 and eta to 20. Every integrand is the exact derivative of that of P.
    """
    t, eta = np.broadcast_arrays(np.asarray(t, float), np.asarray(eta, float))
    x, weight = _nodes()
    t, eta = t[..., None], eta[..., None]
    filled = 1.0 / (np.exp(x - eta) + 1.0)
    slope = filled * (1.0 - filled)
    q = t * x / 2.0
    share = 1.5 * q / (1.0 + q)  # d ln (1 + q)^(3/2)/d ln t
    by_t = 2.5 + share
    by_tt = by_t**2 + share / (1.0 + q)
    front = 2.0**1.5 / (3.0 * np.pi**2) * t**2.5 * weight * x**1.5 * (1.0 + q) ** 1.5
    return np.stack(
        [
            np.sum(front * one, axis=-1)
            for one in (filled, by_t * filled, slope, by_tt * filled, by_t * slope, slope * (1.0 - 2.0 * filled))
        ]
    )


# ------------------------------------------------------------------------------------------------ series
@cache
def _packed():
    """The polynomial and its derivatives (G, G_a, G_b, G_aa, G_ab, G_bb) by powers of its coordinates, as one matrix
    (6 j, i). The series falls so fast that writing it out in powers loses nothing."""
    poly = np.polynomial.polynomial
    c = np.apply_along_axis(np.polynomial.chebyshev.cheb2poly, 0, table().coefficients)
    c = np.apply_along_axis(np.polynomial.chebyshev.cheb2poly, 1, c)
    result = np.zeros((6, *c.shape))
    for k, (along, across) in enumerate(((0, 0), (1, 0), (0, 1), (2, 0), (1, 1), (0, 2))):
        part = poly.polyder(poly.polyder(c, along, axis=0), across, axis=1)
        result[k, : part.shape[0], : part.shape[1]] = part
    return np.ascontiguousarray(result.transpose(0, 2, 1).reshape(-1, c.shape[0]))


def _powers(x, count):
    """Powers (count, N) of x."""
    rows = np.ones((count, x.size))
    rows[1:] = x
    return np.multiply.accumulate(rows, axis=0, out=rows)


def _series(a, b):
    """G, G_a, G_b, G_aa, G_ab, G_bb (6, N) at coordinates a, b in -1..1."""
    i, j = table().coefficients.shape
    result = np.empty((6, a.size))
    for start in range(0, a.size, BLOCK):
        part = slice(start, start + BLOCK)
        inner = (_packed() @ _powers(a[part], i)).reshape(6, j, -1)
        np.einsum("qjn,jn->qn", inner, _powers(b[part], j), out=result[:, part])
    return result


def lookup(t, eta):
    """The six quantities of ``by_quadrature`` from the series, for states inside the box (see ``Table.covers``)."""
    data = table()
    t, eta = np.broadcast_arrays(np.asarray(t, float), np.asarray(eta, float))
    flat_t, fugacity = t.ravel(), np.exp(eta.ravel())
    y = np.log1p(fugacity)
    scale_a, scale_b = 2.0 / np.log1p(STRETCH * data.hottest), 2.0 / np.log1p(np.exp(data.densest))
    g, g_a, g_b, g_aa, g_ab, g_bb = _series(scale_a * np.log1p(STRETCH * flat_t) - 1.0, scale_b * y - 1.0)
    cold = 1.0 / (1.0 + STRETCH * flat_t)
    a_t, a_tt = scale_a * (1.0 - cold), scale_a * (1.0 - cold) * cold  # by ln t
    filled = fugacity / (1.0 + fugacity)  # dy/d eta
    y_ee = filled * (1.0 - filled)
    ratio = filled / y
    # ln P = 2.5 ln t + ln y + G
    by_t = 2.5 + g_a * a_t
    by_e = ratio + scale_b * g_b * filled
    by_tt = g_aa * a_t**2 + g_a * a_tt
    by_te = scale_b * g_ab * a_t * filled
    by_ee = ratio * (1.0 - filled - ratio) + scale_b**2 * g_bb * filled**2 + scale_b * g_b * y_ee
    p = flat_t**2.5 * y * np.exp(g)
    parts = (1.0, by_t, by_e, by_tt + by_t**2, by_te + by_t * by_e, by_ee + by_e**2)
    return np.stack([p * one for one in parts]).reshape(6, *t.shape)
