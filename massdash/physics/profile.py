"""A relativistic star from centre to surface at any radii, to the accuracy of its collocation solution.

All columns are regular functions of q, the coordinate of ``tov``, and are evaluated from the polynomials that the
structure was solved with; matter follows from the enthalpy exactly. The isotropic radius rb of
ds^2 = -lapse^2 c^2 dt^2 + psi^4 (d rb^2 + rb^2 dOmega^2) obeys d ln rb/d ln r = (1 - 2Gm/rc^2)^(-1/2); it is matched to
Schwarzschild's exterior solution, where 2 rb = r - GM/c^2 + (r^2 - 2GMr/c^2)^(1/2), so that psi = 1 + GM/(2 rb c^2).
"""

import numpy as np

from massdash.constants import C
from massdash.errors import ComputationError
from massdash.physics import composition, family
from massdash.physics.piecewise import Piecewise
from massdash.physics.pulsation import pulsation
from massdash.physics.tov import NODES, structure

SPACINGS = ("uniform", "centre", "surface", "both")
_STRETCH = 4.0  # points where they are closest are sinh(4)/4 = 6.8 times as close as uniform ones
_FINEST = 1.0 - _STRETCH / np.sinh(_STRETCH)
_PANELS, _MOST_PANELS, _TAIL = 16, 128, 1e-11  # panels are doubled until the polynomials are good to this
_BASIS = 24  # functions of the lowest mode
_SKIN = 1e-12  # of the enthalpy at the centre: where limits at the surface are taken
_MOST, _ENOUGH = 40, 1e-9  # Newton's method: after a step of this size what is left is its square


def fractions(points, spacing):
    """r/R from 0 to 1, (points,): a smooth odd function of 0..1 in equal steps, with points closer together at the
    centre, at the surface, or at both by a factor sinh(4)/4 = 6.8 against equal steps in r."""
    s = np.linspace(0.0, 1.0, points)
    if spacing == "centre":
        return np.sinh(_STRETCH * s) / np.sinh(_STRETCH)
    if spacing == "surface":
        return np.tanh(_STRETCH / 2.0 * s) / np.tanh(_STRETCH / 2.0)
    return s if spacing == "uniform" else s - _FINEST * np.sin(2.0 * np.pi * s) / (2.0 * np.pi)


def profile(equilibrium, x):
    """The columns of an Equilibrium at radii x R, x (n,) rising from 0 to 1, as a dict of arrays (n,) in cgs.

    ``radius`` areal, ``mass`` gravitational and ``rest_mass`` enclosed; ``density`` of rest mass, ``temperature``,
    ``pressure``, ``energy_density`` total, ``internal_energy`` per rest mass, ``entropy`` per baryon [k_B per m_u],
    ``gamma_1``; ``lapse``, ``g_rr``, ``isotropic_radius``, ``conformal_factor``; ``electron_fraction``, ``hydrogen``,
    ``helium``, ``metals``; ``xi_over_r`` of the lowest mode, 1 at the centre. At the surface matter is 0 and gamma_1 is
    that just below.
    """
    star, inside = _solved(equilibrium.matter)
    q = _locate(inside, star.radius[0], x)
    growth, mean, bound, iso, _ = inside(q)
    matter, square = equilibrium.matter, q * growth
    length = float(family.length_unit(matter.sigma, equilibrium.energy_density)[0])
    unit = 4.0 * np.pi * length**3 * equilibrium.energy_density
    mass = unit * mean * square**1.5
    metric = 1.0 - 2.0 * matter.order * matter.sigma * mean * square  # 1 - 2Gm/(rc^2)
    radius = x * star.radius[0] * length
    lapse = _lapse(star, matter.depth * (1.0 - q) ** 2)
    stretch = _outside(star.compactness[0]) + iso - iso[-1]  # ln(rb/r)
    mode = pulsation(star, basis=_BASIS).eigenfunction(q)[:, 0]
    return {
        "radius": radius,
        "mass": mass,
        "rest_mass": mass - unit * matter.sigma * bound * square**1.5,
        **matter_columns(equilibrium, matter.depth * (1.0 - q) ** 2),
        "lapse": lapse,
        "g_rr": 1.0 / metric,
        "isotropic_radius": radius * np.exp(stretch),
        "conformal_factor": np.exp(-0.5 * stretch),
        **_mixture(equilibrium, x),
        "xi_over_r": mode * lapse / lapse[0],
    }


def equation_of_state(equilibrium, points=400, coolest=1e-4, hottest=10.0, limit=1.5e10):
    """The isentrope of an Equilibrium as columns (points,) in cgs, evenly spaced in the logarithm of the enthalpy per
    rest mass less c^2, from ``coolest`` to ``hottest`` times its value at the centre; temperatures are nearly in that
    ratio, and are kept below ``limit`` [K], about where the table of pairs ends."""
    matter = equilibrium.matter
    depth = matter.order * matter.sigma[0]
    top = min(hottest, max(1.0, limit / float(equilibrium.star.temperature)))
    specific = np.geomspace(coolest, top, points) * np.expm1(depth * matter.depth[0])
    return matter_columns(equilibrium, np.log1p(specific) / depth)


def matter_columns(equilibrium, h):
    """Density, temperature, pressure, energies, entropy and Gamma_1 at enthalpies h (n,), 0 at the surface."""
    matter, heaviness = equilibrium.matter, equilibrium.energy_density
    empty = h <= 0
    state = matter.at(np.where(empty, _SKIN * matter.depth, h)[:, None])
    density, internal = (np.where(empty, 0.0, heaviness * part[:, 0]) for part in (state.rest, state.internal))
    heat = C**2 * (state.internal / state.rest)[:, 0]
    return {
        "density": density,
        "temperature": np.where(empty, 0.0, float(equilibrium.star.temperature) * state.temperature[:, 0]),
        "pressure": np.where(empty, 0.0, matter.sigma * heaviness * C**2 * state.pressure[:, 0]),
        "energy_density": (density + internal) * C**2,
        "internal_energy": np.where(empty, 0.0, heat),
        "entropy": np.full(h.shape, equilibrium.entropy),
        "gamma_1": 4.0 / 3.0 + state.excess[:, 0],
    }


def _mixture(equilibrium, x):
    helium, metals = equilibrium.helium, equilibrium.metals
    values = {
        "electron_fraction": composition.electrons_per_baryon(helium, metals),
        "hydrogen": composition.hydrogen(helium, metals),
        "helium": helium,
        "metals": metals,
    }
    return {name: np.full(x.shape, float(value)) for name, value in values.items()}


def _lapse(star, h):
    return np.sqrt(1.0 - 2.0 * star.compactness) * np.exp(-star.matter.order * star.matter.sigma * h)


def _outside(compactness):
    """ln(rb/r) of Schwarzschild's solution where GM/(rc^2) = ``compactness``."""
    return np.log((1.0 - compactness + np.sqrt(1.0 - 2.0 * compactness)) / 2.0)


def _solved(matter):
    """(Structure, its Piecewise functions of q: xi^2/q, v/xi^3, binding/xi^3, ln(rb/r) up to a constant, d xi^2/dq),
    with panels enough that the polynomials are good between the nodes."""
    panels = _PANELS
    while panels <= _MOST_PANELS:
        star = structure(matter, panels=panels)
        panels = star.square.shape[0] // NODES
        inside = _functions(star, panels)
        if np.all(inside.tail() <= _TAIL):
            return star, inside
        panels *= 2
    raise ComputationError("profile: the structure of this star is not resolved by polynomials")


def _functions(star, panels):
    q = 1.0 - np.sqrt(star.enthalpy / star.matter.depth)
    mean, bound = star.enclosed / star.square**1.5, star.enclosed_binding / star.square**1.5
    pull = star.matter.order * star.matter.sigma
    root = np.sqrt(1.0 - 2.0 * pull * mean * star.square)
    bending = Piecewise.of_values((pull * mean * star.rate / (root * (1.0 + root))).T, panels).antiderivative()
    rows = [star.square / q, mean, bound, bending(q[:, 0]).T, star.rate]
    return Piecewise.of_values(np.concatenate(rows, axis=1).T, panels)


def _locate(inside, radius, x):
    """q (n,) where xi = x ``radius``, by Newton's method for xi^2."""
    q = np.linspace(0.0, 1.0, 1025)
    # (1 - x^2)^(1/2) is nearly linear in q at both ends
    known = np.sqrt(np.maximum(1.0 - q * inside(q)[0] / radius**2, 0.0))
    sought = np.interp(-np.sqrt(1.0 - x**2), -known, q)
    inner = (x > 0) & (x < 1)
    for _ in range(_MOST):
        growth, *_, rate = inside(sought[inner])
        move = ((x[inner] * radius) ** 2 - sought[inner] * growth) / rate
        sought[inner] = np.clip(sought[inner] + move, 0.0, 1.0)
        if np.max(np.abs(move), initial=0.0) < _ENOUGH:
            return sought
    raise ComputationError("profile: no place in the star was found for a radius")
