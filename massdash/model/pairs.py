"""What relativistic electrons and electron-positron pairs change at the onset of collapse.

They lower it by a few per cent at 1e5 Msun and by factors below 1e4. Where the onset of a star without them lies above
5e8 K the value includes them; below, they are the bound of the value, because the margin and the charts, which must
agree with it, know gas and radiation only. With spin or a background there is no formula yet.
"""

from massdash.errors import ComputationError
from massdash.physics import eos, pair_onset

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


def matter_at(temperature):
    """Whether pairs decide at this temperature [K]."""
    return temperature > eos.PAIR_TEMPERATURE


def why_none(body):
    """Why ``onset`` has no answer for this body."""
    return LEFT_OUT if _helped(body) else NONE


def _helped(body):
    return body.rotation > 0 or body.background > 0
