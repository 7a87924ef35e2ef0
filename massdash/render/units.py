"""Units as they are printed."""

from functools import lru_cache

from astropy import units as u


@lru_cache(maxsize=256)
def unit_text(unit):
    """The unit "g / cm3" as g cm⁻³, "solMass" as M☉; what is no unit of astropy stays as it is."""
    try:
        return u.Unit(unit).to_string("unicode")
    except ValueError:
        return unit
