"""Writes data/family.npz: isentropic stars of gas and radiation in full general relativity, as Chebyshev series.

Run ``python -m massdash.data.builders.family`` after a change in physics/barotropes.py, tov.py or pulsation.py. Every
quantity is a polynomial in the square root of beta_c and in sigma, fitted at Chebyshev points; so is the way back from
rest mass and temperature (see ``physics.relativistic``). The largest deviation from direct integration at random
points of the box is measured, with more nodes and functions than the fit had, and stored.
"""

from pathlib import Path

import numpy as np

from massdash.physics import series
from massdash.physics.family import NAMES, central_theta, direct
from massdash.physics.points import LANE_EMDEN_MASS
from massdash.physics.roots import secant

BETA = (2e-4, 0.7)
SIGMA = (0.0, 0.05)
NODES = (36, 16)
INVERSE_NODES = (28, 12)
CHECKS, SEED = 2000, 20260101


def scales(beta, sigma, values):
    """What the error of each quantity is measured against: itself, or for the two that cross zero the size of the
    terms that cancel in them."""
    result = np.abs(values)
    result[NAMES.index("binding")] = beta + sigma
    result[NAMES.index("frequency_squared")] = 6.6 * beta + 17.5 * sigma
    return result


def stars():
    """The Series of NAMES over root-beta and sigma."""
    root = tuple(np.sqrt(BETA))
    beta, sigma = np.meshgrid(series.points(NODES[0], root) ** 2, series.points(NODES[1], SIGMA), indexing="ij")
    values = direct(beta.ravel(), sigma.ravel(), tolerance=1e-13, panels=8, basis=20)
    return series.fit(NAMES, root, SIGMA, values.reshape(-1, *NODES))


def proxies(beta, sigma, rest_mass):
    """root-w and theta/w of stars, from their ``rest_mass`` in the unit of the table."""
    theta = central_theta(beta, sigma)
    w = theta / sigma / np.sqrt(rest_mass / LANE_EMDEN_MASS * np.sqrt(1.0 - beta))
    return np.sqrt(w), theta / w


def inverse(table):
    """The Series of D/w over root-w and theta/w, on a box that holds the images of all stars of the table."""
    root, sigma = (axis.ravel() for axis in np.meshgrid(np.linspace(*table.x, 200), np.linspace(1e-9, SIGMA[1], 50)))
    x, y = proxies(root**2, sigma, table(root, sigma, ("rest_mass",))[0])
    box = (0.99 * x.min(), 1.01 * x.max()), (0.0, 1.01 * y.max())
    x, y = np.meshgrid(*(series.points(n, span) for n, span in zip(INVERSE_NODES, box, strict=True)), indexing="ij")
    return series.fit(("shift",), *box, shift(x.ravel(), y.ravel()).reshape(1, *INVERSE_NODES))


def shift(x, y):
    """D/w by direct integration."""
    w = x**2

    def residual(log_shift):
        ratio = np.exp(log_shift)
        beta = w * (ratio - 3.0 * y) / (1.0 - 1.5 * y * w)
        mass = direct(beta, y / ratio, tolerance=1e-13, panels=8, basis=9)[NAMES.index("rest_mass")]
        return 2.0 * log_shift - np.log(mass / LANE_EMDEN_MASS) - 0.5 * np.log1p(-beta)

    return np.exp(secant(residual, np.log(1.0 - 0.25 * w - 3.0 * y), what="inverse of the family"))


def sample():
    """Random (beta, sigma) of the whole box, small sigma as often as large."""
    random = np.random.default_rng(SEED)
    beta = np.exp(random.uniform(*np.log(BETA), CHECKS))
    low, high = 1e-7, SIGMA[1]
    spread = np.exp(random.uniform(np.log(low), np.log(high), CHECKS))
    return beta, np.where(random.random(CHECKS) < 0.5, random.uniform(low, high, CHECKS), spread)


def main():
    table = stars()
    back = inverse(table)
    beta, sigma = sample()
    exact = direct(beta, sigma, tolerance=1e-14, panels=16, basis=28)
    found = table(np.sqrt(beta), sigma)
    errors = (np.abs(found - exact) / scales(beta, sigma, exact)).max(axis=1)
    x, y = proxies(beta, sigma, exact[NAMES.index("rest_mass")])
    inverse_error = np.max(np.abs(back(x, y)[0] * x**2 * sigma / central_theta(beta, sigma) - 1.0))
    for name, error in zip((*NAMES, "inverse"), (*errors, inverse_error), strict=True):
        print(f"{name}: {error:.1e}")
    np.savez_compressed(
        Path(__file__).parents[1] / "family.npz",
        names=NAMES,
        beta=BETA,
        sigma=SIGMA,
        coefficients=table.coefficients,
        errors=errors,
        root=back.x,
        ratio=back.y,
        inverse=back.coefficients,
        inverse_error=inverse_error,
    )


if __name__ == "__main__":
    main()
