"""Relativistic stars in hydrostatic balance, many at once.

The Tolman-Oppenheimer-Volkoff equations with the logarithmic enthalpy as independent variable: all matter is known at
fixed nodes beforehand, and only two quadratures are coupled,

    d(xi^2)/dh = -2 (1 - chi)/(v/xi^3 + sigma P/P_c),    dv = xi^2 epsilon/epsilon_c dxi,    chi = 2 Gm/(r c^2),

with r = A xi and m = 4 pi A^3 (epsilon_c/c^2) v. With h = depth (1 - q)^2 everything is smooth in q from the centre
(xi^2 ~ q) to the surface (q = 1). The panels of q are solved one after another by collocation at Gauss nodes, iterated
to rounding; in the first, v ~ q^(3/2) is integrated with that weight, so that the centre needs no series. Panel ends
are good to nearly order 2 ``nodes`` in the width of the panels. Where these are so many that the second one decides,
whose ends lie a factor 2 apart, the error is linear in the width and falls 34-fold with every node ((3 + 8^(1/2))^2,
from the branch point of q^(3/2)): below 1e-17 for 12. The step from Newtonian to relativistic stars is smooth down to
sigma = 0.
"""

from dataclasses import dataclass, fields
from functools import cache

import numpy as np

from massdash.errors import ComputationError
from massdash.physics.barotropes import State

NODES, PANELS, MOST_PANELS = 12, 4, 128
_ITERATIONS, _CLOSE = 200, 5e-15


@dataclass(frozen=True, eq=False)
class Structure:
    """A batch of N stars. Surface values (N,): ``radius`` xi, ``mass`` v, and ``binding`` (v - v_rest)/sigma, negative
    when bound. Values at the nodes (k, N), centre to surface: ``square`` xi^2, ``enclosed`` v, ``enclosed_binding``,
    ``enthalpy`` h, ``state``; ``rate`` d(xi^2)/dq and the ``weight`` (k, 1) of integrals over q of what rises from the
    centre like q^(1/2) times something smooth, as volume integrals do. ``matter`` is the barotrope.
    """

    matter: object
    radius: np.ndarray
    mass: np.ndarray
    binding: np.ndarray
    square: np.ndarray
    enclosed: np.ndarray
    enclosed_binding: np.ndarray
    enthalpy: np.ndarray
    rate: np.ndarray
    weight: np.ndarray
    state: object

    @property
    def compactness(self):
        """GM/(R c^2), shape (N,)."""
        return self.matter.order * self.matter.sigma * self.mass / self.radius

    @property
    def rest_mass(self):
        """Rest mass in the unit of ``mass``, shape (N,)."""
        return self.mass - self.matter.sigma * self.binding


@dataclass(frozen=True, eq=False)
class _Rule:
    """Gauss nodes on 0..1, their weights, and matrices that integrate from 0 to each node (and to 1), plainly and with
    the weight q^(1/2)."""

    nodes: np.ndarray
    weights: np.ndarray
    plain: np.ndarray
    root: np.ndarray
    root_end: np.ndarray
    to_coefficients: np.ndarray


@cache
def _rule(count):
    x, w = np.polynomial.legendre.leggauss(count)
    nodes, weights = (x + 1.0) / 2.0, w / 2.0
    fine, fine_weights = np.polynomial.legendre.leggauss(2 * count + 2)
    y, root_weights = (fine + 1.0) / 2.0, fine_weights / 2.0 * 2.0 * ((fine + 1.0) / 2.0) ** 2

    def basis(at):
        factors = [(at[:, None] - np.delete(nodes, j)) / (nodes[j] - np.delete(nodes, j)) for j in range(count)]
        return np.stack([factor.prod(axis=1) for factor in factors], axis=1)

    vandermonde = np.polynomial.legendre.legvander(x, count - 1)
    return _Rule(
        nodes,
        weights,
        plain=np.array([q * weights @ basis(q * nodes) for q in nodes]),
        root=np.array([q**1.5 * root_weights @ basis(q * y**2) for q in nodes]),
        root_end=root_weights @ basis(y**2),
        to_coefficients=np.linalg.inv(vandermonde),
    )


def structure(matter, *, tolerance=1e-12, nodes=NODES, panels=PANELS):
    """The stars of a barotrope batch (see ``barotropes``), all to the relative ``tolerance`` of mass and radius.

    The number of panels is doubled until the error, estimated from the last coefficients of the integrands, is small
    enough for every star of the batch. Raises ComputationError when that does not help.
    """
    reason = ""
    while panels <= MOST_PANELS:
        try:
            result, error = solve(matter, nodes, panels)
        except _TooCoarse as failure:
            reason = str(failure)
        else:
            worst = np.max(error, initial=0.0)
            if worst <= tolerance:
                return result
            reason = f"error {worst:.1e} is above the tolerance {tolerance:.1e}"
        panels *= 2
    raise ComputationError(f"structure of a relativistic star: {reason}")


def solve(matter, nodes, panels):
    """(Structure, error estimate (N,)) with a fixed number of panels; ``structure`` is the checked way in.

    The estimate is the square of the last two Legendre coefficients of the integrands, relative to the whole star,
    because the order at panel ends is twice that inside.
    """
    rule, width = _rule(nodes), 1.0 / panels
    end, parts, tails = None, [], []
    for k in range(panels):
        panel = _Panel(matter, (width * (k + rule.nodes))[:, None], width, rule)
        part, end, tail = panel.first() if k == 0 else panel.later(end)
        parts.append(part)
        tails.append(tail)
    square, enclosed, binding, enthalpy, rate, states = zip(*parts, strict=True)
    state = State(*(np.concatenate([getattr(one, f.name) for one in states]) for f in fields(State)))
    joined = [np.concatenate(one) for one in (square, enclosed, binding, enthalpy, rate)]
    error = (width * np.sum(tails, axis=0) / np.stack([end[0], end[1]])).max(axis=0) ** 2
    return Structure(matter, np.sqrt(end[0]), end[1], end[2], *joined, grid(nodes, panels)[1], state), error


def grid(nodes, panels):
    """(q, weight) of the nodes, centre to surface, each (k, 1): see ``Structure.weight``."""
    rule, width = _rule(nodes), 1.0 / panels
    weight = np.tile(width * rule.weights, panels)
    weight[:nodes] = width * rule.root_end / np.sqrt(rule.nodes)
    return (width * (np.arange(panels)[:, None] + rule.nodes)).reshape(-1, 1), weight[:, None]


class _TooCoarse(ComputationError):
    """The collocation equations were not solved with this many panels."""


class _Panel:
    """The collocation equations of one panel of q."""

    def __init__(self, matter, q, width, rule):
        self.sigma, self.order = matter.sigma, matter.order
        self.q, self.width, self.rule = q, width, rule
        self.h = matter.depth * (1.0 - q) ** 2
        self.slope = -2.0 * matter.depth * (1.0 - q)
        self.state = matter.at(self.h)

    def _rate(self, mean, chi):
        """d(xi^2)/dq from v/xi^3 and 2Gm/(rc^2)."""
        return -2.0 * (1.0 - chi) / (mean + self.sigma * self.state.pressure) * self.slope

    def _binding_density(self, chi):
        """(energy - rest mass over proper volume)/sigma in units of the energy density."""
        root = np.sqrt(1.0 - chi)
        return (self.state.internal - self.state.rest * chi / (root * (1.0 + root))) / self.sigma

    def first(self):
        """From the centre: xi^2 = q a, v = xi^3 mean; the iteration contracts because the mean density of a small
        sphere does not depend on its size."""
        rule, width, doubled = self.rule, self.width, 2.0 * self.order * self.sigma
        mean = np.full_like(self.h, 1.0 / 3.0)
        square = self._rate(mean, 0.0) * self.q
        for _ in range(_ITERATIONS):
            rate = self._rate(mean, doubled * mean * square)
            update = width * rule.plain @ rate
            if not np.all(update > 0):
                raise _TooCoarse("its centre was not resolved")
            root = np.sqrt(update / self.q)
            volume = 0.5 * root * rate
            mean = width**1.5 * rule.root @ (volume * self.state.energy) / update**1.5
            change, square = np.max(np.abs(update / square - 1.0), initial=0.0), update
            if change < _CLOSE:
                break
        else:
            raise _TooCoarse("its centre was not resolved")
        enclosed = mean * square**1.5
        bound = volume * self._binding_density(doubled * mean * square)
        end = (
            width * rule.weights @ rate,
            width**1.5 * rule.root_end @ (volume * self.state.energy),
            width**1.5 * rule.root_end @ bound,
        )
        binding = width**1.5 * rule.root @ bound
        return (square, enclosed, binding, self.h, rate, self.state), end, self._tail(rate, volume * self.state.energy)

    def later(self, start):
        """From the end of the panel before."""
        rule, width, doubled = self.rule, self.width, 2.0 * self.order * self.sigma
        square, enclosed = start[0] + 0.0 * self.h, start[1] + 0.0 * self.h
        for _ in range(_ITERATIONS):
            radius = np.sqrt(square)
            rate = self._rate(enclosed / (square * radius), doubled * enclosed / radius)
            update = start[0] + width * rule.plain @ rate
            if not np.all(update > 0):
                raise _TooCoarse("its balance was not resolved")
            shell = 0.5 * np.sqrt(update) * rate * self.state.energy
            enclosed = start[1] + width * rule.plain @ shell
            change, square = np.max(np.abs(update / square - 1.0), initial=0.0), update
            if change < _CLOSE:
                break
        else:
            raise _TooCoarse("its balance was not resolved")
        radius = np.sqrt(square)
        bound = 0.5 * radius * rate * self._binding_density(doubled * enclosed / radius)
        end = (
            start[0] + width * rule.weights @ rate,
            start[1] + width * rule.weights @ shell,
            start[2] + width * rule.weights @ bound,
        )
        binding = start[2] + width * rule.plain @ bound
        return (square, enclosed, binding, self.h, rate, self.state), end, self._tail(rate, shell)

    def _tail(self, *integrands):
        """Sum of the last two Legendre coefficients of each integrand, (integrands, N)."""
        return np.stack([np.abs(self.rule.to_coefficients[-2:] @ values).sum(axis=0) for values in integrands])
