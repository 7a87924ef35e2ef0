"""Writes data/family.npz: isentropic stars of gas and radiation in full general relativity, as Chebyshev series.

Run ``python -m massdash.data.builders.family`` after a change in physics/barotropes.py, tov.py or pulsation.py. Every
quantity is a polynomial in the square root of beta_c and in sigma, fitted at Chebyshev points; the largest deviation
from direct integration at random points of the box is measured and stored with it.
"""

from pathlib import Path

import numpy as np
from numpy.polynomial import chebyshev

from massdash.physics.barotropes import Isentrope
from massdash.physics.pulsation import pulsation
from massdash.physics.tov import structure

BETA = (2e-4, 0.7)
SIGMA = (0.0, 0.05)
NODES = (36, 16)
NAMES = ("mass", "rest_mass", "radius", "binding", "frequency_squared", "stiffness", "response")
CHECKS, SEED = 2000, 20260101


def quantities(beta, sigma):
    """The tabulated quantities (names, N) by direct integration.

    ``mass``, ``rest_mass``, ``radius``, ``binding`` as in tov.Structure; ``frequency_squared`` in GM/R^3;
    ``stiffness`` is <Gamma_1 - 4/3>/beta_c with the weight of the lowest mode, and ``response`` the ratio of
    <Gamma_1> - Gamma_crit to frequency_squared.
    """
    star = structure(Isentrope(beta, sigma), tolerance=1e-13, panels=8)
    mode = pulsation(star, basis=12)
    square = mode.frequency_squared[0]
    response = (mode.stiffness - mode.critical) / square
    return np.stack([star.mass, star.rest_mass, star.radius, star.binding, square, mode.stiffness / beta, response])


def scales(beta, sigma, values):
    """What the error of each quantity is measured against: itself, or for the two that cross zero the size of the
    terms that cancel in them."""
    result = np.abs(values)
    result[NAMES.index("binding")] = beta + sigma
    result[NAMES.index("frequency_squared")] = 6.6 * beta + 17.5 * sigma
    return result


def coefficients():
    """Chebyshev coefficients (names, NODES) over the box."""
    points = [chebyshev.chebpts1(count) for count in NODES]
    low, high = np.sqrt(BETA)
    root = low + (high - low) * (points[0] + 1.0) / 2.0
    sigma = SIGMA[0] + (SIGMA[1] - SIGMA[0]) * (points[1] + 1.0) / 2.0
    beta, sigma = np.meshgrid(root**2, sigma, indexing="ij")
    values = quantities(beta.ravel(), sigma.ravel()).reshape(len(NAMES), *NODES)
    inverse = [np.linalg.inv(chebyshev.chebvander(x, count - 1)) for x, count in zip(points, NODES, strict=True)]
    return np.einsum("ib,qbs,js->qij", inverse[0], values, inverse[1])


def measured_errors(table):
    """Largest deviation of each quantity from direct integration at random points of the box, on its own scale."""
    random = np.random.default_rng(SEED)
    beta = np.exp(random.uniform(*np.log(BETA), CHECKS))
    sigma = np.where(
        random.random(CHECKS) < 0.5, random.uniform(1e-7, SIGMA[1], CHECKS), 10 ** random.uniform(-7, -1.302, CHECKS)
    )
    low, high = np.sqrt(BETA)
    basis = chebyshev.chebvander(2.0 * (np.sqrt(beta) - low) / (high - low) - 1.0, NODES[0] - 1)
    other = chebyshev.chebvander(2.0 * (sigma - SIGMA[0]) / (SIGMA[1] - SIGMA[0]) - 1.0, NODES[1] - 1)
    exact = quantities(beta, sigma)
    deviation = np.abs(np.einsum("ni,qij,nj->qn", basis, table, other) - exact) / scales(beta, sigma, exact)
    return deviation.max(axis=1)


if __name__ == "__main__":
    table = coefficients()
    errors = measured_errors(table)
    for name, error in zip(NAMES, errors, strict=True):
        print(f"{name}: {error:.1e}")
    target = Path(__file__).parents[1] / "family.npz"
    np.savez_compressed(target, names=NAMES, beta=BETA, sigma=SIGMA, coefficients=table, errors=errors)
