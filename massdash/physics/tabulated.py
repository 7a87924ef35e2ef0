"""Pulsations of a star that comes as a table from elsewhere: the rows are interpolated smoothly in the coordinate of
``tov``, in which every star is regular from centre to surface, and handed to ``pulsation``."""

from types import SimpleNamespace

import numpy as np

from massdash.constants import C, G
from massdash.errors import refuse
from massdash.physics.barotropes import demand
from massdash.physics.pulsation import pulsation
from massdash.physics.tov import NODES, grid

ORDER, PANELS, LEAST = 4.0, 16, 10


def pulsation_of_table(radius, mass, energy_density, pressure, gamma, modes=1, tolerance=1e-8):
    """(Pulsation, unit GM/R^3 [s-2]) of a tabulated relativistic star.

    Arrays (n,) from the centre outwards, in cgs: areal ``radius``, gravitational ``mass`` within it, total
    ``energy_density`` [erg cm-3], ``pressure`` and ``gamma`` = Gamma_1. The last row is taken as the surface; the
    centre is added when the table starts outside of it. The answer is as good as cubic interpolation of the rows.
    Raises InputError for a table that is no star.
    """
    rows = [np.asarray(one, float) for one in (radius, mass, energy_density, pressure, gamma)]
    _accept(*rows)
    r, m, energy, p, gamma = rows if rows[0][0] == 0.0 else _with_centre(*rows)
    sigma = p[0] / energy[0]
    length = np.sqrt(ORDER * sigma / (4.0 * np.pi * G * energy[0])) * C**2
    star = _interpolated(
        sigma, r / length, m * C**2 / (4.0 * np.pi * length**3 * energy[0]), energy / energy[0], p / p[0], gamma
    )
    return pulsation(star, modes, tolerance=tolerance), G * m[-1] / r[-1] ** 3


def _accept(radius, mass, energy, pressure, gamma):
    if not all(one.shape == radius.shape and one.ndim == 1 for one in (mass, energy, pressure, gamma)):
        raise refuse("tabulated star", "columns of different lengths", "one-dimensional columns of one length")
    if not radius.size >= LEAST:
        raise refuse("tabulated star", f"{radius.size} rows", f"at least {LEAST} rows")
    rising = np.diff(radius, prepend=-1.0)
    demand("radius", radius, (radius >= 0) & np.isfinite(radius) & (rising > 0), "finite values that rise")
    growing = np.diff(mass, prepend=0.0) >= -1e-12 * np.abs(mass)  # rounding aside
    demand("mass", mass, (mass >= 0) & growing & np.isfinite(mass), "values that do not fall outwards")
    demand("energy density", energy, (energy >= 0) & np.isfinite(energy), "finite values that are not negative")
    falling = np.diff(pressure, prepend=np.inf) < 0
    demand("pressure", pressure, (pressure >= 0) & falling & (pressure < energy.max()), "values that fall outwards")
    demand("Gamma_1", gamma, np.isfinite(gamma), "finite numbers")
    inside = radius > 0
    compact = 2.0 * G * mass[inside] / (radius[inside] * C**2)
    demand("2Gm/(rc^2)", compact, compact < 1, "less than 1")


def _with_centre(radius, mass, *others):
    """The table with a row at r = 0, where everything is even in r."""
    square = radius[:3] ** 2
    weights = [np.prod([b / (b - a) for b in square if b != a]) for a in square]
    centre = [np.dot(weights, one[:3]) for one in others]
    return [
        np.concatenate([[first], one]) for first, one in zip((0.0, 0.0, *centre), (radius, mass, *others), strict=True)
    ]


def _interpolated(sigma, xi, v, energy, pressure, gamma):
    """What ``pulsation`` reads of a Structure, at the nodes of ``tov.grid``."""
    from scipy.interpolate import CubicSpline  # slow to import, and not needed by the live dashboard

    mean = np.concatenate([[1.0 / 3.0], v[1:] / xi[1:] ** 3])
    doubled = 2.0 * ORDER * sigma
    slope = xi * (mean + sigma * pressure) / (1.0 - doubled * mean * xi**2)  # -dh/dxi
    inwards = CubicSpline(xi, slope).antiderivative()(xi)
    depth = inwards[-1]
    nodes, weight = grid(NODES, PANELS)
    q = 1.0 - np.sqrt(np.maximum(1.0 - inwards / depth, 0.0))
    # roots that a star of index 3 would have straight towards its surface
    columns = np.stack([xi**2, mean, np.cbrt(energy), pressure**0.25, gamma], axis=1)
    square, mean, energy, pressure, gamma = CubicSpline(q, columns)(nodes[:, 0]).T[:, :, None]
    energy, pressure = energy**3, pressure**4
    rate = 4.0 * depth * (1.0 - nodes) * (1.0 - doubled * mean * square) / (mean + sigma * pressure)
    return SimpleNamespace(
        matter=SimpleNamespace(sigma=np.array([sigma]), order=ORDER, depth=np.array([depth])),
        state=SimpleNamespace(energy=energy, pressure=pressure, excess=gamma - 4.0 / 3.0),
        radius=xi[-1:],
        mass=v[-1:],
        compactness=ORDER * sigma * v[-1:] / xi[-1:],
        square=square,
        enclosed=mean * square**1.5,
        enthalpy=depth * (1.0 - nodes) ** 2,
        rate=rate,
        weight=weight,
    )
