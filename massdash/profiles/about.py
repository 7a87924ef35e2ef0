"""The header that every file of a profile carries: what the star is, by which constants and methods, and what it is
not."""

from massdash import constants
from massdash.constants import M_SUN, C
from massdash.model import words
from massdash.physics import eos
from massdash.physics.pulsation import growth_time
from massdash.profiles.columns import LENGTH, TIME, described
from massdash.scenario import to_text
from massdash.version import __version__

SCHEMA = 1
_MEANING = {
    "cgs": "cgs; entropy in k_B per m_u",
    "geometric": "G = c = 1, mass in units of the sun's; temperature in K, entropy in k_B per m_u",
}
_MARGINAL = 1e-6  # of the terms that cancel: closer to the onset than this, the sign says nothing
NO_ROTATION = (
    "No rotating configuration is offered: this is the star that does not rotate, alone, with the rest mass and "
    "composition of the scenario."
)
_METRIC = (
    "Metric: ds^2 = -lapse^2 c^2 dt^2 + g_rr dr^2 + r^2 dOmega^2, or with the isotropic radius rb and the conformal "
    "factor psi, ds^2 = -lapse^2 c^2 dt^2 + psi^4 (d rb^2 + rb^2 dOmega^2); outside, Schwarzschild's."
)
_MODE = (
    "xi_over_r is the relative displacement xi/r of the lowest radial mode, 1 at the centre: multiply it by r for xi; "
    "the square of its frequency stands under star."
)
_SURFACE = "The last row is the surface, where matter ends; gamma_1 there is that just below."
_NO_PAIRS = (
    "The equation of state leaves out electron-positron pairs, which matter above 5e8 K: ask for pairs to follow a "
    "collapse that far."
)
_TABLE = (
    "The equation of state follows the star's own isentrope, beyond the centre to ten times its temperature where the "
    "methods reach so far."
)


def about(scenario, found, units, columns, made):
    """The header of a profile, as plain values; ``made`` is how it was made, and for the words see ``making``."""
    return {
        "massdash_profile": SCHEMA,
        "program": f"massdash {__version__}",
        "constants_version": constants.VERSION,
        "data": f"as shipped with massdash {__version__}",
        "scenario": to_text(scenario).splitlines(),
        "units": units,
        "units_mean": _MEANING[units],
        **{name: made[name] for name in ("state", "spacing", "depletion")},
        "points": len(columns["radius"]),
        "star": _star(found),
        "notes": _notes(found, made),
        "warnings": _warnings(scenario, found),
        "matter": _matter(found),
        "method": "full general relativity, isentropic star, collocation in the enthalpy",
        "sources": _sources(found),
        "constants": _constants(),
        "columns": described(columns, units),
    }


def stability(star):
    """Whether the lowest mode of a family.Star is stable, marginal or unstable, in one word."""
    excess = float(star.stiffness - star.critical)
    if abs(excess) <= _MARGINAL * float(abs(star.stiffness) + abs(star.critical)):
        return "marginal"
    return "stable" if excess > 0 else "unstable"


def _star(found):
    star = found.star
    values = {
        "rest_mass": (star.rest_mass / M_SUN, "solMass"),
        "gravitational_mass": (star.gravitational_mass / M_SUN, "solMass"),
        "radius": (star.radius, "cm"),
        "compactness": (star.compactness, ""),
        "binding_energy": (star.energy, "erg"),
        "central_density": (star.density, "g / cm3"),
        "central_temperature": (star.temperature, "K"),
        "central_pressure_over_energy_density": (star.sigma, ""),
        "gas_pressure_fraction": (star.beta, ""),
        "pulsation_frequency_squared": (star.frequency_squared, "1 / s2"),
    }
    if stability(star) == "unstable":
        values["growth_time"] = (growth_time(star.frequency_squared), "s")
    rows = {name: {"value": float(value), "unit": unit} for name, (value, unit) in values.items()}
    return {"stability": stability(star), **rows}


def _notes(found, made):
    """Sentences on the columns; the last ones on what was done to the pressure and how far the matter holds."""
    notes = [NO_ROTATION, _METRIC, _SURFACE, _MODE, _TABLE]
    if made["hottest"] > eos.PAIR_TEMPERATURE and not found.with_pairs:
        notes.append(_NO_PAIRS)
    if not made["depletion"] > 0:
        return [*notes, "The star is in balance; no pressure was taken away."]
    depleted = (
        f"depleted_pressure is pressure times {1.0 - made['depletion']:.15g}, to start a collapse; all other columns "
        "are those of the star in balance. The Hamiltonian constraint does not contain the pressure and holds as it "
        "is, as long as the energy density stays that of the table."
    )
    return [*notes, depleted]


def _warnings(scenario, found):
    said = []
    if scenario.spin > 0:
        said.append(f"The scenario's spin of {scenario.spin!r} is left out. {NO_ROTATION}")
    if scenario.number("background_density") > 0:
        said.append("The scenario's background of other matter is left out.")
    if stability(found.star) == "unstable":
        said.append("This equilibrium is unstable: it lies beyond the onset of collapse.")
    if found.star.temperature > eos.PAIR_TEMPERATURE and not found.with_pairs:
        said.append("The centre is hotter than 5e8 K, and electron-positron pairs are left out.")
    return said


def _matter(found):
    mixture = "ions, electrons, positrons and radiation" if found.with_pairs else "gas and radiation, no pairs"
    return f"{mixture}, uniform entropy of {found.entropy!r} k_B per m_u, uniform composition, fully ionised"


def _sources(found):
    known = [words.RELATIVITY_SOURCE, words.PULSATION_SOURCE, words.COMPOSITION_SOURCE, words.GAS_SOURCE]
    return known + [words.PAIR_SOURCE] * found.with_pairs


def _constants():
    """Those that the columns depend on, and the geometric units in cgs."""
    values = {
        "c": (C, "cm / s"),
        "G": (constants.G, "cm3 / (g s2)"),
        "k_B": (constants.K_B, "erg / K"),
        "h": (constants.H, "erg s"),
        "m_u": (constants.M_U, "g"),
        "m_e": (constants.M_E, "g"),
        "a": (constants.RADIATION, "erg / (cm3 K4)"),
        "GM_sun": (constants.GM_SUN, "cm3 / s2"),
        "M_sun": (M_SUN, "g"),
        "geometric_length": (LENGTH, "cm"),
        "geometric_time": (TIME, "s"),
        "geometric_density": (M_SUN / LENGTH**3, "g / cm3"),
        "geometric_pressure": (M_SUN * C**2 / LENGTH**3, "erg / cm3"),
    }
    return {name: {"value": float(value), "unit": unit} for name, (value, unit) in values.items()}
