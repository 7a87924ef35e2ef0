"""Writes data/standard_model.csv: the n = 3 sphere's constants and quadrature nodes for averages over its mass.

Run ``python -m massdash.data.builders.standard_model`` after a change here or in physics/polytrope.py. With
theta = (1 - t^2)^2 the sphere is smooth in t from centre (0) to surface (1): Gauss-Legendre nodes in t converge fast.
"""

from pathlib import Path

import numpy as np

from massdash.physics.polytrope import lane_emden, profile

NODES = 32


def nodes(count):
    """xi and theta (count,) from centre to surface, and the weights (count,) of an average over mass."""
    t, gauss = (np.polynomial.legendre.leggauss(count)[k] for k in (0, 1))
    t, gauss = (t + 1) / 2, gauss / 2
    w = 1 - t**2
    xi, phi = profile(3.0, w**2)
    return xi, w**2, gauss * 2 * t * 2 * w**7 * xi**4 / phi / lane_emden(3.0).mass


def text():
    """The file's text."""
    sphere = lane_emden(3.0)
    xi, theta, weight = nodes(NODES)
    constants = {k: getattr(sphere, k) for k in ("radius", "slope", "mass", "concentration", "slope_integral")}
    constants["inertia"] = np.sum(weight * xi**2) / sphere.radius**2
    lines = ["# n = 3 Lane-Emden sphere, written by massdash.data.builders.standard_model"]
    lines += [f"{name},{float(value)!r}" for name, value in constants.items()]
    lines += ["theta,weight"] + [f"{float(a)!r},{float(b)!r}" for a, b in zip(theta, weight, strict=True)]
    return "\n".join(lines) + "\n"


if __name__ == "__main__":
    (Path(__file__).parents[1] / "standard_model.csv").write_text(text())
