"""Mean molecular weights of fully ionised gas from mass fractions."""

import numpy as np


def hydrogen(helium, metals):
    """Hydrogen mass fraction X = 1 - Y - Z (any shapes that broadcast)."""
    return 1.0 - np.asarray(helium, float) - np.asarray(metals, float)


def mean_molecular_weight(helium, metals):
    """Mean mass per free particle in units of m_u, mu = 1/(2X + 3Y/4 + Z/2).

    Full ionisation with mass numbers for atomic masses; a metal nucleus of mass number A brings about A/2 electrons,
    its own particle (1/A) is left out, the usual form (Kippenhahn, Weigert & Weiss 2012, eq. 4.30).
    """
    x = hydrogen(helium, metals)
    return 1.0 / (2.0 * x + 0.75 * np.asarray(helium, float) + 0.5 * np.asarray(metals, float))


def electrons_per_baryon(helium, metals):
    """Free electrons per baryon, Y_e = 1/mu_e = X + Y/2 + Z/2."""
    return hydrogen(helium, metals) + 0.5 * (np.asarray(helium, float) + np.asarray(metals, float))


def hydrogen_of_weight(mu, metals):
    """Hydrogen mass fraction of a mixture with mean molecular weight ``mu`` and metals Z; inverse of the above.

    Not limited to 0..1: the caller decides what a value outside means.
    """
    metals = np.asarray(metals, float)
    return (1.0 / np.asarray(mu, float) - 0.75 + 0.25 * metals) / 1.25
