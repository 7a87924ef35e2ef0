"""Measures relativistic stars per second on one core, all in one process, and prints one line of JSON.

Run by test_relativity_speed.py in a process of its own, whose linear algebra has one thread.
"""

import json
import sys
import time
from math import exp, expm1, log

import numpy as np

from massdash.constants import M_SUN, C
from massdash.physics import family, relativistic
from massdash.physics.barotropes import Isentrope
from massdash.physics.integrate import integrate
from massdash.physics.pulsation import pulsation
from massdash.physics.tov import solve

MU, FOUR = 0.59, ("mass", "radius", "binding", "frequency_squared")


def seconds(function, repeats, *arguments):
    """Least wall time of a call: the machine may be shared."""
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        function(*arguments)
        times.append(time.perf_counter() - start)
    return min(times)


def sample(count, seed):
    random = np.random.default_rng(seed)
    beta = np.exp(random.uniform(np.log(3e-4), np.log(0.27), count))
    return beta, random.uniform(1e-7, 0.05, count)


def scalar_matter(matter):
    """(energy, pressure, rest) at h for one star, in plain floats and warm Newton steps: a single call of the arrays'
    own function would be several times slower, and the comparison unfair."""
    sigma, theta, z = matter.sigma[0].item(), matter.theta[0].item(), matter.z[0].item()
    share, entropy, last = matter.rest_fraction[0].item(), 4.0 * z + log(z), [log(z)]

    def at(h):
        specific = expm1(4.0 * sigma * max(h, 1e-30))
        scaled, u = log(specific / theta), last[0]
        for _ in range(50):
            here = exp(u)
            move = (4.0 * here + u - entropy) / 1.5 + log(4.0 * here + 2.5) - scaled
            move /= (4.0 * here + 1.0) / 1.5 + 4.0 * here / (4.0 * here + 2.5)
            u -= move
            if abs(move) < 1e-8:
                break
        last[0], here = u, exp(u)
        temperature = specific / (theta * (4.0 * here + 2.5))
        rest, heat = share * temperature**3 * z / here, theta * temperature
        return rest * (1.0 + heat * (3.0 * here + 1.5)), rest * heat * (1.0 + here), rest

    return at


def by_solve_ivp(beta, sigma, rtol):
    """(R, M, M0) of one star by DOP853: the equations of balance over the enthalpy, which end at the surface without
    searching for it."""
    matter = Isentrope(np.array([beta]), np.array([sigma]))
    at, depth, sigma = scalar_matter(matter), matter.depth[0].item(), float(sigma)

    def rhs(h, y):
        xi, v, _ = y.tolist()
        energy, pressure, rest = at(h)
        metric = 1.0 - 8.0 * sigma * v / xi
        slope = -metric / (v / xi**2 + xi * pressure)
        return [slope, slope * xi**2 * energy, slope * xi**2 * rest / metric**0.5]

    small = 1e-3
    start = [small, small**3 / 3, small**3 / 3 * matter.rest_fraction[0].item()]
    span = (depth - small**2 * (1.0 / 3.0 + sigma) / 2.0, 0.0)
    return integrate(rhs, span, start, rtol=rtol, atol=rtol * 1e-3, what="star").y[:, -1]


def deviation(found, exact):
    return float(np.max(np.abs(np.asarray(found) / np.asarray(exact) - 1.0)))


def solver_figures():
    """solve_ivp and collocation on the same stars: error of R and M, stars per second."""
    beta, sigma = sample(6, 3)
    exact = solve(Isentrope(beta, sigma), 16, 16)[0]
    figures = {}
    for name, rtol in (("loose", 1e-8), ("tight", 1e-11)):
        found = np.array([by_solve_ivp(b, s, rtol) for b, s in zip(beta, sigma, strict=True)]).T
        took = [seconds(by_solve_ivp, 3, b, s, rtol) for b, s in zip(beta, sigma, strict=True)]
        figures[name] = {
            "rtol": rtol,
            "error": max(deviation(found[0], exact.radius), deviation(found[1], exact.mass)),
            "stars_per_second": 1.0 / np.mean(took),
        }
    return figures


def collocation_figures(error):
    """The cheapest collocation whose error is not above ``error``, structure alone and with the lowest mode."""
    beta, sigma = sample(300, 4)
    matter = Isentrope(beta, sigma)
    exact = solve(matter, 16, 16)[0]
    best = None
    for nodes, panels in ((8, 2), (8, 3), (8, 4), (10, 2), (10, 3), (10, 4), (12, 2), (12, 3), (12, 4), (16, 3)):
        star = solve(matter, nodes, panels)[0]
        own = max(deviation(star.radius, exact.radius), deviation(star.mass, exact.mass))
        if own <= error:
            speed = beta.size / seconds(solve, 8, matter, nodes, panels)
            if best is None or speed > best["stars_per_second"]:
                best = {"nodes": nodes, "panels": panels, "error": own, "stars_per_second": speed}
    star = solve(matter, best["nodes"], best["panels"])[0]
    mode = seconds(lambda: pulsation(star, basis=10), 5)
    best["with_lowest_mode_per_second"] = beta.size / (beta.size / best["stars_per_second"] + mode)
    return best


def formula_figures():
    beta, sigma = sample(16384, 5)
    star = family.stars(beta, sigma, MU)
    few = slice(0, 400)
    exact = family.direct(beta[few], sigma[few], tolerance=1e-14, panels=16, basis=28)[[0, 2, 3, 4]]
    scale = np.stack([exact[0], exact[1], (beta + sigma)[few], (6.6 * beta + 17.5 * sigma)[few]])
    table = family.lookup(beta, sigma, FOUR)[:, few]
    found = relativistic.brief(star.rest_mass[few], MU, star.temperature[few])
    share = sigma[few] * exact[2] / (exact[0] - sigma[few] * exact[2])
    unit = star.compactness[few] * C**2 / star.radius[few] ** 2
    known = np.stack([star.rest_mass[few] * (1 + share), star.radius[few], share, exact[3] * unit])
    ruler = np.stack([known[0], known[1], (sigma * (beta + sigma))[few], scale[3] * unit])
    return {
        "from_beta_sigma": {
            "stars_per_second": beta.size / seconds(family.lookup, 60, beta, sigma, FOUR),
            "error": float(np.max(np.abs(table - exact) / scale)),
        },
        "from_mass_temperature": {
            "stars_per_second": beta.size / seconds(relativistic.brief, 60, star.rest_mass, MU, star.temperature),
            "error": float(np.max(np.abs(found - known) / ruler)),
        },
    }


def live_figures():
    """Milliseconds of what is asked for while a slider is dragged."""
    masses, temperatures = np.geomspace(1e3, 1e7, 300) * M_SUN, np.geomspace(1e7, 2e8, 300)
    plane = np.meshgrid(np.geomspace(1e3, 1e7, 200) * M_SUN * MU**2, np.geomspace(1e7, 3e8, 200) / MU)
    return {
        "map_200x200_ms": 1e3 * seconds(lambda: relativistic.at_temperature(plane[0], 1.0, plane[1]).margin, 12),
        "onset_300_ms": 1e3 * seconds(relativistic.onset, 40, masses, MU),
        "onset_300_with_spin_and_background_ms": 1e3 * seconds(relativistic.onset, 40, masses, MU, 0.005, 1e-12),
        "maximum_mass_300_ms": 1e3 * seconds(relativistic.maximum_mass, 40, MU, temperatures),
    }


def main():
    solver = solver_figures()
    equal = {name: collocation_figures(one["error"]) for name, one in solver.items()}
    json.dump(
        {
            "solve_ivp": solver,
            "collocation": equal,
            "ratio": {name: equal[name]["stars_per_second"] / solver[name]["stars_per_second"] for name in solver},
            "formula": formula_figures(),
            "live": live_figures(),
        },
        sys.stdout,
    )


if __name__ == "__main__":
    main()
