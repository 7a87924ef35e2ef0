"""The quantities of an outcome: name, unit, stage and meaning, in order along the chain.

Tables, reports and the JSON output follow this order; every outcome has an entry for each name.
"""

from typing import NamedTuple


class QuantityInfo(NamedTuple):
    """What is fixed about a quantity: ``unit`` is an astropy unit string, ``stage`` one of ``STAGES``."""

    name: str
    unit: str
    stage: str
    meaning: str


STAGES = {
    "present": "Present state",
    "stability": "Stability",
    "life": "Life",
    "birth": "Birth and infall",
    "fate": "Fate and remnant",
    "growth": "Growth",
    "sighting": "Sighting",
}

BANDS = ("box_1.5um", "box_2.0um", "box_2.8um", "box_3.6um", "box_4.4um")

_LISTS = {
    "present": (
        ("settles", "", "1 if burning settles the star before collapse sets in, else 0"),
        ("mean_molecular_weight", "", "mean mass per particle in atomic mass units"),
        ("gas_pressure_fraction", "", "gas over total pressure at the centre, beta"),
        ("adiabatic_index", "", "Gamma_1 at the centre"),
        ("entropy_per_baryon", "", "entropy in k_B per atomic mass unit"),
        ("radiation_entropy", "", "the radiation's part of it"),
        ("ignition_temperature", "K", "central temperature at which hydrogen ignites"),
        ("settled_temperature", "K", "central temperature while hydrogen burns"),
        ("central_temperature", "K", "temperature at the centre"),
        ("central_density", "g / cm3", "density at the centre"),
        ("radius", "solRad", "hydrostatic areal radius"),
        ("gravitational_mass", "solMass", "mass that a distant orbit feels"),
        ("binding_energy", "erg", "energy less rest energy; negative when bound"),
        ("compactness", "", "GM/(R c^2)"),
    ),
    "stability": (
        ("stability_margin", "", "1 - (Gamma_crit - 4/3)/(<Gamma_1> - 4/3) at the ignition temperature"),
        ("settled_stability_margin", "", "the same at the settled temperature"),
        ("pulsation_frequency_squared", "1 / s2", "lowest radial mode at the ignition temperature"),
        ("growth_time", "s", "e-folding time of an unstable mode"),
        *(
            (f"onset_{what}{road}", unit, f"{meaning} at the onset of collapse{how}")
            for road, how in (("", ""), ("_pn", ", leading order"))
            for what, unit, meaning in (
                ("temperature", "K", "central temperature"),
                ("density", "g / cm3", "central density"),
                ("energy", "erg", "binding energy"),
                ("radius", "solRad", "radius"),
                ("compactness", "", "GM/(R c^2)"),
            )
        ),
        ("maximum_mass", "solMass", "largest rest mass that ignites before it collapses"),
        ("maximum_mass_pn", "solMass", "the same, leading order"),
    ),
    "life": (
        ("opacity", "cm2 / g", "opacity in the outer layers"),
        ("central_opacity", "cm2 / g", "opacity at the centre"),
        ("luminosity", "solLum", "luminosity"),
        ("eddington_luminosity", "solLum", "Eddington luminosity"),
        ("nuclear_timescale", "yr", "time the hydrogen would last at this luminosity"),
        ("contraction_time", "yr", "from birth to ignition or onset"),
        ("hydrogen_lifetime", "yr", "from ignition to onset or exhaustion"),
        ("helium_lifetime", "yr", "of helium burning"),
        ("time_to_onset", "yr", "from birth to the onset of collapse"),
        ("lifetime", "yr", "from birth to the end of the star"),
        ("collapse_time", "s", "from onset to the horizon"),
        ("assembly_rate", "solMass / yr", "infall needed to gather the star within its contraction time"),
        ("cno_trace", "", "mass fraction of carbon, nitrogen and oxygen at ignition"),
    ),
    "birth": (
        ("jeans_mass", "solMass", "Jeans mass of the cloud"),
        ("cloud_infall_rate", "solMass / yr", "infall rate from the cloud"),
        ("critical_infall_rate", "solMass / yr", "infall rate above which the star stays inflated"),
        ("core_mass", "solMass", "mass of the convective core"),
        ("final_mass", "solMass", "mass at the end of the growth"),
        ("surface_temperature", "K", "effective temperature"),
        ("surface_radius", "solRad", "radius of the photosphere"),
    ),
    "fate": (
        ("explosion_metallicity", "", "total Z above which hydrogen burning reverses the collapse"),
        ("explosion_energy", "erg", "energy of the explosion"),
        ("remnant_mass", "solMass", "mass of the black hole left"),
        ("remnant_spin", "", "cJ/(GM^2) of the black hole left"),
        ("disk_mass", "solMass", "mass left in orbit"),
    ),
    "growth": (
        ("efolding_time", "yr", "e-folding time of the growing hole"),
        ("mass_at_target", "solMass", "mass of the hole at the target redshift"),
        ("required_eddington_ratio", "", "Eddington ratio that reaches the target"),
        ("latest_birth_redshift", "", "latest birth that still reaches the target"),
    ),
    "sighting": (
        *((f"apparent_magnitude_in_{band}", "mag(AB)", f"AB magnitude in {band}") for band in BANDS),
        ("redshift_reach", "", "largest redshift at which the survey sees the star"),
        ("expected_counts", "", "stars expected in the survey"),
    ),
}

QUANTITIES = {
    name: QuantityInfo(name, unit, stage, meaning) for stage, rows in _LISTS.items() for name, unit, meaning in rows
}
