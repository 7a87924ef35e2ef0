"""The names and units that others rely on, written out once more, in order along the chain."""

import pytest
from astropy import units as u

from massdash import Scenario, evaluate
from massdash.quantities import QUANTITIES, STAGES

#: stage: names (unit), as the project's agreement on names lists them.
CONTRACT = {
    "present": """
        settles () mean_molecular_weight () gas_pressure_fraction () adiabatic_index () entropy_per_baryon ()
        radiation_entropy () ignition_temperature (K) settled_temperature (K) central_temperature (K)
        central_density (g/cm3) radius (solRad) gravitational_mass (solMass) binding_energy (erg) compactness ()""",
    "stability": """
        stability_margin () settled_stability_margin () pulsation_frequency_squared (1/s2) growth_time (s)
        onset_temperature (K) onset_density (g/cm3) onset_energy (erg) onset_radius (solRad) onset_compactness ()
        onset_temperature_pn (K) onset_density_pn (g/cm3) onset_energy_pn (erg) onset_radius_pn (solRad)
        onset_compactness_pn () maximum_mass (solMass) maximum_mass_pn (solMass)""",
    "life": """
        opacity (cm2/g) central_opacity (cm2/g) luminosity (solLum) eddington_luminosity (solLum)
        nuclear_timescale (yr) contraction_time (yr) hydrogen_lifetime (yr) helium_lifetime (yr) time_to_onset (yr)
        lifetime (yr) collapse_time (s) assembly_rate (solMass/yr) cno_trace ()""",
    "birth": """
        jeans_mass (solMass) cloud_infall_rate (solMass/yr) critical_infall_rate (solMass/yr) core_mass (solMass)
        final_mass (solMass) surface_temperature (K) surface_radius (solRad)""",
    "fate": """
        explosion_metallicity () explosion_energy (erg) remnant_mass (solMass) remnant_spin () disk_mass (solMass)""",
    "growth": """
        efolding_time (yr) mass_at_target (solMass) required_eddington_ratio () latest_birth_redshift ()""",
    "sighting": """
        apparent_magnitude_in_box_1.5um (mag(AB)) apparent_magnitude_in_box_2.0um (mag(AB))
        apparent_magnitude_in_box_2.8um (mag(AB)) apparent_magnitude_in_box_3.6um (mag(AB))
        apparent_magnitude_in_box_4.4um (mag(AB)) redshift_reach () expected_counts ()""",
}


def words(stage):
    parts = CONTRACT[stage].split()
    return {name: unit[1:-1] for name, unit in zip(parts[::2], parts[1::2], strict=True)}


@pytest.mark.parametrize("stage", CONTRACT)
def test_names_order_and_units(stage):
    found = {name: info for name, info in QUANTITIES.items() if info.stage == stage}
    assert list(found) == list(words(stage))
    for name, unit in words(stage).items():
        assert u.Unit(found[name].unit) == u.Unit(unit), name


def test_order_along_the_chain():
    assert list(STAGES) == list(CONTRACT)
    assert list(QUANTITIES) == [name for stage in CONTRACT for name in words(stage)]
    assert all(info.meaning for info in QUANTITIES.values())


def test_an_outcome_has_them_all():
    assert list(evaluate(Scenario()).entries) == list(QUANTITIES)
