"""The fields of a scenario: name, unit, default, allowed range, labels and help, written down once.

Validation, files, controls, axis labels and the table in the README all read this table. It knows no physics.
"""

import re
from dataclasses import dataclass
from functools import cached_property

from astropy import units as u


def short(number):
    """A number for a sentence, with a power of ten where that is clearly shorter: ``100``, ``1e5``, ``1e-6``."""
    plain = f"{number:g}"
    power = re.sub(r"\.?0*e([+-])0*", lambda found: "e" + found[1].strip("+"), f"{number:e}")
    return power if "e" in plain or len(power) < len(plain) - 1 else plain


@dataclass(frozen=True)
class Field:
    """One field of a scenario.

    ``unit`` is an astropy unit string; "" marks a plain number and None a text. ``default``, ``low`` and ``high`` are
    in that unit, both ends allowed; a text counts its characters. ``none_means`` says what None stands for, "" that
    None is refused. ``bound`` names another field that narrows the range further. ``also`` lists units in which a
    plain number may arrive as well; ``choice`` says what a text must be when it is not free. ``scale`` ("linear" or
    "log") is a hint for controls and axes, ``label`` and ``help`` are written on the control, ``stage`` is the part
    of the chain the field belongs to.
    """

    name: str
    stage: str
    label: str
    meaning: str
    unit: str | None
    default: float | str | None
    low: float
    high: float
    help: str
    scale: str = "linear"
    none_means: str = ""
    bound: str = ""
    also: tuple[str, ...] = ()
    choice: str = ""

    @property
    def optional(self):
        """Whether None is allowed."""
        return bool(self.none_means)

    @cached_property
    def astropy_unit(self):
        """The canonical unit; None for a text."""
        return None if self.unit is None else u.Unit(self.unit)

    @property
    def allowed(self):
        """What is allowed, for a sentence: ``1e6 to 1e9 K, or None (found from the burning rates)``."""
        joint = " in " if self.unit and self.unit.startswith("1") else " "
        unit = f"{joint}{self.unit}" if self.unit else ""
        return f"{self.range_text}{unit}{self.or_none}"

    @property
    def range_text(self):
        """The allowed range without its unit: ``1e6 to 1e9``."""
        if self.choice:
            return self.choice
        if self.unit is None:
            return f"{self.low:g} to {self.high:g} printable characters"
        return f"{short(self.low)} to {self.bound or short(self.high)}"

    @property
    def or_none(self):
        """``, or None (...)`` where None is allowed, else nothing."""
        return f", or None ({self.none_means})" if self.optional else ""

    def with_unit(self, number):
        """What a scenario holds for this number in the canonical unit: a read-only Quantity, or the number itself."""
        if not self.unit or number is None:
            return number
        quantity = u.Quantity(number, self.astropy_unit)
        # Scenarios are frozen; without this, ``scenario.mass *= 2`` would change the shared array before it fails.
        quantity.setflags(write=False)
        return quantity


_ALL = (
    Field("label", "star", "Label", "free text", None, "untitled", 1, 80, "A name for this scenario."),
    Field(
        "mass", "star", "Mass", "rest mass of the star now", "solMass", 1e5, 1e2, 1e8,
        "Number of baryons times the atomic mass constant.", scale="log",
    ),
    Field(
        "helium", "star", "Helium Y", "mass fraction of helium", "", 0.2470, 0.0, 1.0,
        "The rest, 1 - Y - Z, is hydrogen.", bound="1 - metals",
    ),
    Field(
        "metals", "star", "Metals Z", "mass fraction of everything heavier than helium", "", 0.0, 0.0, 0.1,
        "Total, not only carbon, nitrogen and oxygen.",
    ),
    Field(
        "ignition_temperature", "star", "Ignition temperature",
        "central temperature at which hydrogen burning settles the star", "K", None, 1e6, 1e9,
        "Contraction stops here, unless instability comes first.", scale="log",
        none_means="found from the burning rates",
    ),
    Field(
        "spin", "star", "Spin", "T/abs(W) is spin squared times its value at mass shedding", "", 0.0, 0.0, 1.0,
        "0 does not rotate, 1 sheds mass at the equator.",
    ),
    Field(
        "background_density", "star", "Background density", "fixed, uniform density of other matter", "g / cm3",
        0.0, 0.0, 1.0, "For example dark matter; covered below 0.01 of the central density.",
    ),
    Field(
        "infall_rate", "infall", "Infall rate", "mass gained by the star per time", "solMass / yr", 0.0, 0.0, 1e4,
        "0 keeps the mass fixed.", none_means="from the cloud",
    ),
    Field(
        "infall_factor", "infall", "Infall factor", "f in the cloud's infall rate f c_s^3 / G", "", 1.0, 0.1, 100.0,
        "Only for infall from the cloud.", scale="log",
    ),
    Field(
        "cloud_dust", "cloud", "Cloud dust", "dust-to-metals ratio relative to the local one", "", 1.0, 0.0, 10.0,
        "0 is dust-free gas.",
    ),
    Field(
        "core_fraction", "infall", "Core fraction", "convective share of the mass of a fed star", "", None, 0.01, 1.0,
        "1 is convective throughout.", none_means="from its history",
    ),
    Field(
        "cloud_temperature", "cloud", "Cloud temperature", "temperature of the halo's gas", "K", 8000.0, 10.0, 1e5,
        "Gas cooled by atomic hydrogen stays near 8000 K.", scale="log",
    ),
    Field(
        "cloud_density", "cloud", "Cloud density", "number density of the halo's gas", "1 / cm3", 1e4, 1e-2, 1e12,
        "Together with the temperature it sets the Jeans mass.", scale="log",
    ),
    Field(
        "cloud_metals", "cloud", "Cloud metals", "mass fraction of metals in the halo's gas", "", None, 0.0, 0.1,
        "May differ from the star's own.", none_means="as metals",
    ),
    Field(
        "birth_redshift", "growth", "Birth redshift", "redshift at which the star forms", "", 20.0, 0.0, 100.0,
        "The clock of the remnant's growth starts after the star's life.",
    ),
    Field(
        "surface_temperature", "sighting", "Surface temperature", "effective temperature of the photosphere", "K",
        None, 1e3, 1e6, "Near 5000-8000 K when inflated by infall, near 1e5 K when compact.", scale="log",
        none_means="from infall and structure",
    ),
    Field(
        "eddington_ratio", "growth", "Eddington ratio", "the remnant's luminosity over its Eddington luminosity", "",
        1.0, 0.0, 100.0, "1 shines at the limit while it feeds.",
    ),
    Field(
        "duty_cycle", "growth", "Duty cycle", "share of the time in which the remnant feeds", "", 1.0, 0.0, 1.0,
        "1 feeds without a break.",
    ),
    Field(
        "radiative_efficiency", "growth", "Radiative efficiency", "share of the fed rest energy that is radiated", "",
        0.1, 0.01, 0.42, "0.057 for a hole without spin, 0.42 for the fastest.",
    ),
    Field(
        "target_mass", "growth", "Target mass", "mass of the hole to be explained", "solMass", 1.5e9, 1e3, 1e12,
        "The quasar's black hole.", scale="log",
    ),
    Field(
        "target_redshift", "growth", "Target redshift", "redshift of the hole to be explained", "", 7.5, 0.0, 100.0,
        "Not earlier than the birth of the star.", bound="birth_redshift",
    ),
    Field(
        "cosmology", "growth", "Cosmology", "name of an astropy realization", None, "Planck18", 1, 80,
        "Sets cosmic time and distances.", choice="the name of a cosmology that astropy has",
    ),
    Field(
        "magnification", "sighting", "Magnification", "brightening by a gravitational lens", "", 1.0, 1.0, 1e4,
        "1 is no lens.", scale="log",
    ),
    Field(
        "survey_depth", "sighting", "Survey depth", "faintest AB magnitude of the survey", "", 30.0, 10.0, 45.0,
        "AB magnitude at the limit.", also=("mag", "mag(AB)"),
    ),
    Field(
        "survey_area", "sighting", "Survey area", "area of the survey", "deg2", 1.0, 1e-6, 41253.0,
        "The whole sky has 41253 square degrees.", scale="log",
    ),
    Field(
        "formation_rate", "sighting", "Formation rate", "stars born per comoving volume and time", "1 / (Mpc3 yr)",
        1e-10, 0.0, 1.0, "For expected counts.",
    ),
)  # fmt: skip

FIELDS = {field.name: field for field in _ALL}
