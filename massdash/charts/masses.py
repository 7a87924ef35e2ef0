"""Stars of all masses that share everything else with one scenario: what the charts against mass draw."""

from typing import NamedTuple

import numpy as np

from massdash.constants import M_SUN
from massdash.model.structure import COVERED_DILUTION
from massdash.physics import eos, relativistic
from massdash.physics.post_newtonian import Body, eddington_beta

#: Range of mass axes [Msun]; a lighter star widens it downwards.
HEAVIEST, LIGHTEST, LIGHTEST_OF_ALL = 1e8, 1e3, 1e2
#: Range of ignition temperatures on axes [K].
COLDEST, HOTTEST = 1e6, 1e9


def mass_limits(outcome):
    """The mass axis' range for this scenario [Msun]."""
    return (LIGHTEST if outcome.scenario.number("mass") >= LIGHTEST else LIGHTEST_OF_ALL, HEAVIEST)


class Family(NamedTuple):
    """Stars of all masses that share composition, T/|W| and background; hashable, so that curves of it are kept while
    only the mass of the one star on show is changed."""

    mu: float
    rotation: float
    background: float
    lightest: float

    def masses(self, count, ignition):
        """Masses [Msun] over the axis; those whose background is too dense at ``ignition`` [K] are left out."""
        masses = np.geomspace(self.lightest, HEAVIEST, count)
        if self.background > 0:
            density = eos.density(ignition, eddington_beta(masses * M_SUN, self.mu), self.mu)
            masses = masses[self.background <= COVERED_DILUTION * density]
        return masses

    def bodies(self, masses):
        """The Body of the stars of these masses [Msun], for the post-Newtonian functions."""
        return Body(masses * M_SUN, self.mu, self.rotation, self.background)

    def margins(self, masses, temperature):
        """Stability margins in full relativity of stars of these masses [Msun] at a central temperature [K], any
        shapes that broadcast; NaN beyond the table, where all are far past their onset."""
        mass, temperature = np.broadcast_arrays(masses * M_SUN, np.asarray(temperature, float))
        known = relativistic.covers(mass, self.mu, temperature)
        result = np.full(mass.shape, np.nan)
        arguments = (mass[known], self.mu, temperature[known], self.rotation, self.background)
        result[known] = relativistic.at_temperature(*arguments).margin
        return result


def family(outcome):
    """The Family of the scenario's star."""
    body = outcome.workings.matter.body
    return Family(float(body.mu), float(body.rotation), float(body.background), mass_limits(outcome)[0])
