"""The turning point of the rest mass at constant entropy, from the masses of directly integrated stars alone: an
independent road to the onset of collapse (Zel'dovich 1963; Harrison, Thorne, Wakano & Wheeler 1965)."""

import numpy as np
from numpy.polynomial import chebyshev

from massdash.errors import ComputationError
from massdash.physics import family, relativistic
from massdash.physics.barotropes import Isentrope
from massdash.physics.tov import structure

# The rest mass along an isentrope is interpolated in ln T at so many points, so far to both sides of the guess; the
# post-Newtonian onset is too hot by 0.25 in ln T at worst.
_NODES, _REACH = 17, 0.5


def turning_temperature(star, mu, guess):
    """Central temperature [K] of the largest rest mass at the entropy of each ``star``, near ``guess`` [K]; (N,).

    From the masses of directly integrated stars and nothing else: of ``star`` only the entropy counts. Equal entropy is
    as good as equal rest mass to compare roads at, because next to its maximum the mass does not change.
    Raises ComputationError where the mass does not turn near ``guess``.
    """
    steps = chebyshev.chebpts1(_NODES)
    temperature = guess * np.exp(_REACH * steps)[:, None]
    mass = _log_mass(relativistic.along_entropy(star, mu, temperature))
    slopes = chebyshev.chebder(chebyshev.chebfit(steps, mass - mass[0], _NODES - 1))
    return guess * np.exp(_REACH * np.array([_descent(slope) for slope in slopes.T]))


def _log_mass(stars):
    """ln of the rest mass, up to a constant, by direct integration."""
    matter = Isentrope(stars.beta.ravel(), stars.sigma.ravel())
    energy = stars.density / matter.rest_fraction.reshape(stars.density.shape)
    rest = structure(matter, tolerance=1e-13).rest_mass.reshape(energy.shape)
    return np.log(family.length_unit(stars.sigma, energy) ** 3 * energy * rest)


def _descent(slope):
    """Where in -1..1 a Chebyshev series falls through zero."""
    roots = chebyshev.chebroots(slope)
    real = roots[(roots.imag == 0) & (np.abs(roots.real) < 1)].real
    falling = real[chebyshev.chebval(real, chebyshev.chebder(slope)) < 0]
    if falling.size != 1:
        raise ComputationError("the rest mass at constant entropy has no single maximum near the guess")
    return falling[0]
