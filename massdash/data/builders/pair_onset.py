"""Writes data/pair_onset.npz: the onset of collapse with electron-positron pairs against central temperature.

Run ``python -m massdash.data.builders.pair_onset`` after a change in the pair physics, the structure or the pulsation.
The largest deviations from direct integration at random compositions and temperatures are measured and stored with it.
"""

import time
from pathlib import Path

import numpy as np
from numpy.polynomial import chebyshev
from scipy.optimize.elementwise import find_root

from massdash.constants import K_B, M_SUN, M_U, C
from massdash.physics import eos, family, pair_onset, pairs
from massdash.physics.composition import mean_molecular_weight
from massdash.physics.pair_isentrope import PairIsentrope
from massdash.physics.pulsation import pulsation
from massdash.physics.tov import structure

NODES = (54, 11, 6)
CHECKS, SEED = 300, 20260101


def marginal(temperature, helium, metals, panels=8, basis=20):
    """ln rho_c (N,) of the stars whose lowest mode has no frequency, bracketed around the post-Newtonian estimate."""
    mu = mean_molecular_weight(helium, metals)
    ratio = np.sqrt(6.0 * 2.6325 * K_B * temperature / (mu * M_U * C**2))  # beta/(1 - beta) at leading order
    beta = ratio / (1.0 + ratio)
    pair_share = np.where(temperature > 4e8, 0.6 * np.minimum(1.0, (temperature / 1e9) ** 3), 0.0)
    low = eos.density(temperature, 0.7 * beta, mu)
    high = eos.density(temperature, np.minimum(1.3 * beta + pair_share, 0.75), mu)

    def frequency(log_rho, temperature, helium, metals):
        matter = PairIsentrope(temperature, np.exp(log_rho), pairs.composition(helium, metals))
        return pulsation(structure(matter, panels=panels), basis=basis).frequency_squared[0]

    tight = {"xatol": 1e-13, "xrtol": 0.0, "fatol": 0.0, "frtol": 0.0}
    found = find_root(frequency, (np.log(low), np.log(high)), args=(temperature, helium, metals), tolerances=tight)
    if not np.all(found.success):
        raise ArithmeticError("a marginal star was not found")
    return found.x


def quantities(temperature, helium, metals, panels=8, basis=20):
    """What the table holds (names, N): ln(rho_c t^(-7/2)) [g cm-3], ln(M0 t) [M_sun], ln of GM/(Rc^2) t^(-1/2),
    energy [M_sun c^2] and the weighted Gamma_1 - 4/3 over t^(1/2), all smooth down to t = 0."""
    log_rho = marginal(temperature, helium, metals, panels, basis)
    matter = PairIsentrope(temperature, np.exp(log_rho), pairs.composition(helium, metals))
    star = structure(matter, panels=panels)
    mode = pulsation(star, basis=basis)
    unit = 4.0 * np.pi * family.length_unit(matter.sigma, matter.energy_density) ** 3 * matter.energy_density / M_SUN
    log_t = np.log(temperature / pairs.ELECTRON_TEMPERATURE)
    return np.stack(
        [
            log_rho - 3.5 * log_t,
            np.log(unit * star.rest_mass) + log_t,
            np.log(star.compactness) - 0.5 * log_t,
            unit * matter.sigma * star.binding,
            mode.stiffness * np.exp(-0.5 * log_t),
        ]
    )


def coefficients():
    """Chebyshev coefficients (names, NODES)."""
    points = [chebyshev.chebpts1(count) for count in NODES]
    inverse = [np.linalg.inv(chebyshev.chebvander(x, x.size - 1)) for x in points]
    root, weight, metals = np.meshgrid(
        pair_onset.root_of(points[0]),
        points[1],
        (points[2] + 1.0) / 2.0 * pair_onset.MOST_METALS,
        indexing="ij",
    )
    temperature = pairs.ELECTRON_TEMPERATURE * root.ravel() ** 2
    found = quantities(temperature, pair_onset.helium_of(weight, metals).ravel(), metals.ravel())
    return np.einsum("ia,jb,kc,qabc->qijk", *inverse, found.reshape(-1, *NODES), optimize=True)


def random_stars(count=CHECKS):
    """Temperature, helium and metals of random marginal stars of the whole table."""
    random = np.random.default_rng(SEED)
    temperature = np.exp(random.uniform(np.log(1e5), np.log(pair_onset.HOTTEST), count))
    metals = random.uniform(0.0, pair_onset.MOST_METALS, count)
    return temperature, random.uniform(0.0, 1.0, count) * (1.0 - metals), metals


def measured_errors():
    """Largest deviation (names,) from direct integration with more nodes and functions."""
    temperature, helium, metals = random_stars()
    exact = quantities(temperature, helium, metals, panels=12, basis=26)
    log_root = np.log(temperature / pairs.ELECTRON_TEMPERATURE) / 2.0
    return np.abs(pair_onset._Curves(helium, metals).values(log_root) - exact).max(axis=1)


if __name__ == "__main__":
    target = Path(__file__).parents[1] / "pair_onset.npz"
    start = time.perf_counter()
    table = coefficients()
    np.savez_compressed(target, coefficients=table, errors=np.zeros(len(pair_onset.NAMES)))
    built = time.perf_counter() - start
    errors = measured_errors()
    np.savez_compressed(target, coefficients=table, errors=errors)
    print(f"built in {built:.1f} s;", ", ".join(f"{n} {e:.1e}" for n, e in zip(pair_onset.NAMES, errors, strict=True)))
