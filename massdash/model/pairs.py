"""What relativistic electrons and electron-positron pairs change at the onset of collapse.

They lower it by a few per cent at 1e5 Msun and by factors below 1e4. Where the onset of a star without them lies above
5e8 K the value includes them; below, they are the bound of the value, because the charts, which must agree with it,
know gas and radiation only. Stars hotter than 5e8 K are computed with them, one at a time. With spin or a background
there is no formula yet.
"""

import numpy as np

from massdash.constants import M_SUN
from massdash.errors import ComputationError
from massdash.physics import eos, pair_onset, pair_stars
from massdash.physics.evolution import EXHAUSTED
from massdash.physics.roots import secant

_CLOSE = 0.8  # pairs lower an onset of 5e8 K by less
BOUND = "the bound includes relativistic electrons and electron-positron pairs"
INCLUDED = "the bound leaves electron-positron pairs out"
NONE = "none: with electron-positron pairs so light a star never becomes soft enough to collapse"
NO_LARGEST = "none: with electron-positron pairs no star is stable up to this temperature and unstable beyond it"
LEFT_OUT = "electron-positron pairs, which matter here, are left out with spin or a background"


def onset(matter):
    """The onset with pairs, as a Star; None where there is no formula, or no onset."""
    if left_out(matter.body):
        return None
    try:
        return pair_onset.onset(matter.body.mass, matter.helium, matter.metals)
    except ComputationError:
        return None


def maximum_mass(matter, ignition):
    """The maximum mass with pairs [g]; None likewise."""
    if left_out(matter.body):
        return None
    try:
        return float(pair_onset.maximum_mass(matter.helium, matter.metals, ignition))
    except ComputationError:
        return None


def hydrogen_at_onset(matter, ignition):
    """Mass fraction X at which the star, burning at this central temperature [K], meets its onset; negative when it
    does not before its hydrogen is gone."""
    mass = matter.body.mass / M_SUN

    def excess(hydrogen):
        helium = np.maximum(0.0, 1.0 - np.clip(hydrogen, 0.0, 1.0) - matter.metals)
        return np.log(pair_onset.maximum_mass(helium, matter.metals, ignition) / M_SUN / mass)

    if excess(EXHAUSTED) >= 0:
        return -1.0
    return float(secant(excess, matter.hydrogen, step=-1e-3, what="hydrogen at the onset", tolerance=1e-9))


def at_temperature(matter, temperature):
    """The Star of the scenario's mass at this central temperature [K], with pairs; ComputationError when none is."""
    return pair_stars.at_temperature(matter.body.mass, matter.helium, matter.metals, temperature)


def decide(body, ignition, *, onset_with_pairs):
    """Whether the star at the ignition temperature [K] is computed with pairs: where it is hot, and where its onset is
    and the two are so close that they must be judged alike."""
    return not left_out(body) and bool(matter_at(ignition) or (onset_with_pairs and matter_at(ignition / _CLOSE)))


def matter_at(temperature):
    """Whether pairs decide at this temperature [K]."""
    return temperature > eos.PAIR_TEMPERATURE


def left_out(body):
    """Whether pairs are left out whatever the temperature, because of spin or a background."""
    return body.rotation > 0 or body.background > 0
