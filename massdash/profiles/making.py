"""From a scenario to the profile of its star."""

import numpy as np
from astropy import units as u

from massdash.constants import M_SUN
from massdash.errors import ComputationError, refuse
from massdash.model import evaluate
from massdash.physics import constraint, equilibrium
from massdash.physics import profile as physics
from massdash.profiles.about import about
from massdash.profiles.columns import SYSTEMS, converted
from massdash.profiles.result import Profile
from massdash.scenario import Field, Scenario
from massdash.scenario.fields import short
from massdash.scenario.values import accept, shown

STATES = ("ignition", "onset")
FEWEST, MOST = 20, 100_000
_CHOICES = {
    field.name: field
    for field in (
        Field("central_density", "", "", "", "g / cm3", 1.0, 1e-12, 1e12, ""),
        Field("central_temperature", "", "", "", "K", 1e8, 1e5, 1.5e10, ""),
        Field("deplete", "", "", "", "", 0.0, 0.0, 1.0, ""),
    )
}


def profile(
    scenario,
    at=None,
    *,
    central_density=None,
    central_temperature=None,
    points=2000,
    spacing="both",
    units="cgs",
    deplete=0.0,
    pairs=None,
):
    """The Profile of a scenario's star, not rotating and alone, as initial data for its collapse.

    ``at`` is "onset" (the default) or "ignition"; instead of it a ``central_density`` (of rest mass) or a
    ``central_temperature`` may be asked for, Quantities or texts such as "0.5 g/cm3"; unstable equilibria are marked
    as such. ``points`` from centre to surface, 20 to 100000, with ``spacing`` "uniform" in areal radius, or about
    seven times closer than that at the "centre", the "surface" or "both". ``units`` "cgs" or "geometric".
    ``deplete`` > 0 adds a column with the pressure less this fraction of it. ``pairs`` True or False takes
    electron-positron pairs in or leaves them out; None takes them in when the centre is hotter than 5e8 K.

    Raises InputError for values that are not allowed, ComputationError where there is no such star.
    """
    if not isinstance(scenario, Scenario):
        raise refuse("scenario", shown(scenario), "a Scenario")
    asked = _asked(at, central_density, central_temperature)
    _accept(points, spacing, units, pairs)
    depletion = accept(_CHOICES["deplete"], deplete)
    found, words = _find(scenario, asked, pairs)
    columns = physics.profile(found, physics.fractions(int(points), spacing))
    if depletion > 0:
        columns["depleted_pressure"] = (1.0 - depletion) * columns["pressure"]
    columns, matter = converted(columns, units), physics.equation_of_state(found)
    made = {"state": words, "spacing": spacing, "depletion": depletion, "hottest": float(matter["temperature"][-1])}
    header = about(scenario, found, units, columns, made)
    result = Profile(units, columns, converted(matter, units), header)
    header["constraint"] = {"residual": result.residual, "definition": constraint.DEFINITION}
    return result


def _asked(at, density, temperature):
    """(what, number or None) of the star asked for."""
    given = {"at": at, "central_density": density, "central_temperature": temperature}
    given = {name: value for name, value in given.items() if value is not None}
    if len(given) > 1:
        raise refuse(
            " and ".join(given), "more than one choice", "only one of at, central_density, central_temperature"
        )
    if not given:
        return "onset", None
    [(name, value)] = given.items()
    if name != "at":
        return name, u.Quantity(accept(_CHOICES[name], value)).value.item()
    if not (isinstance(value, str) and value in STATES):
        raise refuse("at", shown(value), " or ".join(STATES))
    return value, None


def _accept(points, spacing, units, pairs):
    whole = isinstance(points, int | np.integer) and not isinstance(points, bool)
    if not (whole and FEWEST <= points <= MOST):
        raise refuse("points", shown(points), f"a whole number from {FEWEST} to {MOST}")
    for name, value, allowed in (("spacing", spacing, physics.SPACINGS), ("units", units, SYSTEMS)):
        if not (isinstance(value, str) and value in allowed):
            raise refuse(name, shown(value), f"one of {', '.join(allowed)}")
    if not (pairs is None or isinstance(pairs, bool)):
        raise refuse("pairs", shown(pairs), "True, False or None (when the centre is hotter than 5e8 K)")


def _find(scenario, asked, pairs):
    """The Equilibrium, and what it is in words."""
    words, find, number = _sought(scenario, *asked)
    star = scenario.number("mass") * M_SUN, scenario.helium, scenario.metals
    try:
        return find(*star, *number, pairs), words
    except ComputationError as error:
        mass = short(scenario.number("mass"))
        raise ComputationError(f"no star of {mass} solMass {words} was found: {error}") from None


def _sought(scenario, what, number):
    """(words, function of ``equilibrium``, its number if any)."""
    if what == "onset":
        return "at the onset of collapse", equilibrium.at_onset, ()
    if what == "central_density":
        return f"at a central density of {short(number)} g / cm3", equilibrium.at_density, (number,)
    if what == "central_temperature":
        return f"at a central temperature of {short(number)} K", equilibrium.at_temperature, (number,)
    entry = evaluate(scenario, bounds=False).entries["ignition_temperature"]
    words = f"at the ignition temperature of {short(entry.value)} K ({entry.method})"
    return words, equilibrium.at_temperature, (entry.value,)
