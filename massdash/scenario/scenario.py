"""One candidate star and its surroundings: the frozen, validated input of everything else."""

from dataclasses import dataclass

from astropy import units as u

from massdash.errors import refuse
from massdash.scenario.fields import FIELDS
from massdash.scenario.values import accept, shown, written

_DEFAULT = {name: field.with_unit(field.default) for name, field in FIELDS.items()}


@dataclass(frozen=True, kw_only=True, eq=False, repr=False)
class Scenario:
    """A scenario; `massdash.scenario.FIELDS` gives meaning, unit, default and allowed range of every field.

    Fields with a unit take an astropy Quantity or a text such as ``"1.2e5 solMass"`` and hold a read-only Quantity in
    the canonical unit; plain numbers are held as float. None is allowed where the table says what it means. Anything
    else raises `InputError`. Change one with `dataclasses.replace`. Equal scenarios hash equal.
    """

    label: str = _DEFAULT["label"]
    mass: u.Quantity = _DEFAULT["mass"]
    helium: float = _DEFAULT["helium"]
    metals: float = _DEFAULT["metals"]
    ignition_temperature: u.Quantity | None = _DEFAULT["ignition_temperature"]
    spin: float = _DEFAULT["spin"]
    background_density: u.Quantity = _DEFAULT["background_density"]
    infall_rate: u.Quantity | None = _DEFAULT["infall_rate"]
    infall_factor: float = _DEFAULT["infall_factor"]
    cloud_dust: float = _DEFAULT["cloud_dust"]
    core_fraction: float | None = _DEFAULT["core_fraction"]
    cloud_temperature: u.Quantity = _DEFAULT["cloud_temperature"]
    cloud_density: u.Quantity = _DEFAULT["cloud_density"]
    cloud_metals: float | None = _DEFAULT["cloud_metals"]
    birth_redshift: float = _DEFAULT["birth_redshift"]
    surface_temperature: u.Quantity | None = _DEFAULT["surface_temperature"]
    eddington_ratio: float = _DEFAULT["eddington_ratio"]
    duty_cycle: float = _DEFAULT["duty_cycle"]
    radiative_efficiency: float = _DEFAULT["radiative_efficiency"]
    target_mass: u.Quantity = _DEFAULT["target_mass"]
    target_redshift: float = _DEFAULT["target_redshift"]
    cosmology: str = _DEFAULT["cosmology"]
    magnification: float = _DEFAULT["magnification"]
    survey_depth: float = _DEFAULT["survey_depth"]
    survey_area: u.Quantity = _DEFAULT["survey_area"]
    formation_rate: u.Quantity = _DEFAULT["formation_rate"]

    def __post_init__(self):
        for name, field in FIELDS.items():
            given = getattr(self, name)
            if given is not _DEFAULT[name]:  # defaults hold to the table, as a test shows
                object.__setattr__(self, name, accept(field, given))
        _check_composition(self)
        _check_redshifts(self)
        _check_cosmology(self)

    @property
    def hydrogen(self):
        """X, the mass fraction of hydrogen: what helium and metals leave."""
        return 1.0 - (self.helium + self.metals)

    @property
    def changed(self):
        """Names of the fields that differ from their default, in the order of the table."""
        return tuple(name for name in FIELDS if self.number(name) != FIELDS[name].default)

    def number(self, name):
        """The field as a float in its canonical unit; None where the field is None; a text field as its text."""
        value = getattr(self, FIELDS[name].name)
        return float(value.value) if isinstance(value, u.Quantity) else value

    def written(self, *, everything=True):
        """The fields as files hold them, in order: quantities as text with unit, plain numbers, texts and None.

        Without ``everything``, only the label, the mass and what differs from its default.
        """
        names = FIELDS if everything else ("label", "mass", *self.changed)
        return {name: written(FIELDS[name], getattr(self, name)) for name in FIELDS if name in names}

    def _key(self):
        return tuple(self.number(name) for name in FIELDS)

    def __eq__(self, other):
        return self._key() == other._key() if isinstance(other, Scenario) else NotImplemented

    def __hash__(self):
        return hash(self._key())

    def __repr__(self):
        fields = ", ".join(f"{name}={value!r}" for name, value in self.written(everything=False).items())
        return f"Scenario({fields})"

    def __reduce__(self):
        # Through the door again: arrays would come out of a pickle writable.
        return _rebuild, (dict(zip(FIELDS, self._key(), strict=True)),)


def _rebuild(numbers):
    return Scenario(**{name: FIELDS[name].with_unit(number) for name, number in numbers.items()})


def _check_composition(scenario):
    # Compared as a sum: decimal fractions that add up to 1 do so in floating point, their difference may miss by a bit.
    if not scenario.helium + scenario.metals <= 1.0:
        raise refuse("helium", shown(scenario.helium), f"0 to 1 - metals (metals is {scenario.metals})")


def _check_redshifts(scenario):
    if not scenario.target_redshift <= scenario.birth_redshift:
        allowed = f"0 to birth_redshift (birth_redshift is {scenario.birth_redshift})"
        raise refuse("target_redshift", shown(scenario.target_redshift), allowed)


def _check_cosmology(scenario):
    if scenario.cosmology == FIELDS["cosmology"].default:
        return  # importing the cosmologies takes longer than everything else together
    from astropy.cosmology import available

    if scenario.cosmology not in available:
        raise refuse("cosmology", shown(scenario.cosmology), f"one of {', '.join(available)}")
