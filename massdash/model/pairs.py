"""What relativistic electrons and electron-positron pairs change at the onset of collapse.

They lower it by a few per cent at 1e5 Msun and by factors below 1e4. Where the onset of a star without them lies above
5e8 K the value includes them; below, they are the bound of the value, because the charts, which must agree with it,
know gas and radiation only. Stars hotter than 5e8 K are computed with them, one at a time. With spin or a background
there is no formula yet.
"""

from massdash.errors import ComputationError
from massdash.physics import eos, pair_onset, pair_stars

_CLOSE = 0.8  # pairs lower an onset of 5e8 K by less
BOUND = "the bound includes relativistic electrons and electron-positron pairs"
INCLUDED = "the bound leaves electron-positron pairs out"
NONE = "with electron-positron pairs a star so light meets no onset of collapse; the value leaves them out"
LEFT_OUT = "electron-positron pairs, which matter here, are left out with spin or a background"


def onset(matter):
    """The onset with pairs, as a Star; None where there is no formula, or no onset."""
    if _helped(matter.body):
        return None
    try:
        return pair_onset.onset(matter.body.mass, matter.helium, matter.metals)
    except ComputationError:
        return None


def maximum_mass(matter, ignition):
    """The maximum mass with pairs [g]; None likewise."""
    if _helped(matter.body):
        return None
    try:
        return float(pair_onset.maximum_mass(matter.helium, matter.metals, ignition))
    except ComputationError:
        return None


def at_temperature(matter, temperature):
    """The Star of the scenario's mass at this central temperature [K], with pairs; ComputationError when none is."""
    return pair_stars.at_temperature(matter.body.mass, matter.helium, matter.metals, temperature)


def decide(body, ignition, *, onset_with_pairs):
    """Whether the star at the ignition temperature [K] is computed with pairs: where it is hot, and where its onset is
    and the two are so close that they must be judged alike."""
    return not _helped(body) and bool(matter_at(ignition) or (onset_with_pairs and matter_at(ignition / _CLOSE)))


def matter_at(temperature):
    """Whether pairs decide at this temperature [K]."""
    return temperature > eos.PAIR_TEMPERATURE


def why_none(body):
    """Why ``onset`` has no answer for this body."""
    return LEFT_OUT if _helped(body) else NONE


def _helped(body):
    return body.rotation > 0 or body.background > 0
