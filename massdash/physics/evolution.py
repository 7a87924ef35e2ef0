"""How long a star of fixed mass contracts and burns, in closed form.

The star radiates L_Edd (1 - beta) all its life (Hoyle & Fowler 1963, MNRAS 125, 169). Times in s, masses in g.
"""

import numpy as np

from massdash.constants import C, G

#: Energy of burning hydrogen to helium per gram of hydrogen, neutrinos included: 26.73097 MeV per helium nucleus
#: from the atomic masses of AME2020 (Wang et al. 2021, Chinese Phys. C 45, 030003) [erg g-1].
HYDROGEN_YIELD = 6.398e18

#: Hydrogen counts as exhausted below this mass fraction.
EXHAUSTED = 1e-3


def contraction_time(binding_energy, luminosity):
    """Kelvin-Helmholtz time from a wide, unbound start to ``binding_energy`` [erg, negative]: -E/L.

    NaN where the energy is not negative: such a star did not get there by radiating.
    """
    binding_energy = np.asarray(binding_energy, float)
    return np.where(binding_energy < 0, -binding_energy / luminosity, np.nan)


def nuclear_timescale(mass, hydrogen, luminosity):
    """X Q M/L: the time the hydrogen would last at constant luminosity."""
    return np.asarray(hydrogen, float) * HYDROGEN_YIELD * mass / luminosity


def mixed_burning_time(hydrogen_start, hydrogen_end, beta, energy_yield=HYDROGEN_YIELD):
    """Time in which a fully mixed star at L_Edd (1 - beta), opacity 0.2 (1 + X), burns from one X to another.

    From Q dX/dt = -4 pi G c (1 - beta)/(0.2 (1 + X)): t = 0.2 Q/(4 pi G c) [X + X^2/2]/(1 - beta).
    """

    def fuel(x):
        return x + 0.5 * np.asarray(x, float) ** 2

    scale = 0.2 * energy_yield / (4.0 * np.pi * G * C)
    return scale * (fuel(hydrogen_start) - fuel(hydrogen_end)) / (1.0 - np.asarray(beta, float))
