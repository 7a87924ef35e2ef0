"""The frozen scenario: what it accepts, how it holds it, and what it refuses in which words."""

import copy
import dataclasses
import pickle

import numpy as np
import pytest
from astropy import units as u
from astropy.cosmology import available

from massdash.errors import InputError
from massdash.scenario import FIELDS, Scenario
from massdash.scenario.values import accept

NUMBERS = [field for field in FIELDS.values() if field.unit is not None]
WITH_UNIT = [field for field in NUMBERS if field.unit]
# With these the cross rules leave every field its whole own range.
ROOM = {"metals": 0.0, "birth_redshift": 100.0, "target_redshift": 0.0}


def made(field, number):
    return Scenario(**{**ROOM, "helium": 0.0, field.name: field.with_unit(number)})


def by_name(field):
    return field.name


def test_the_table_and_the_object_have_the_same_fields_in_the_same_order():
    assert [field.name for field in dataclasses.fields(Scenario)] == list(FIELDS)


@pytest.mark.parametrize("field", FIELDS.values(), ids=by_name)
def test_defaults_are_acceptable_and_held_as_they_are(field):
    held = accept(field, field.with_unit(field.default))
    assert held == getattr(Scenario(), field.name)
    assert Scenario().number(field.name) == field.default


def test_the_contract_s_example():
    scenario = Scenario(label="Lantern", mass=1.2e5 * u.Msun, ignition_temperature=1e7 * u.K)
    assert scenario.mass == 1.2e5 * u.Msun
    assert scenario.number("ignition_temperature") == 1e7
    assert scenario.changed == ("label", "mass", "ignition_temperature")
    assert scenario.hydrogen == 1 - 0.2470


@pytest.mark.parametrize("field", NUMBERS, ids=by_name)
def test_both_ends_of_a_range_are_allowed_and_nothing_beyond(field):
    for end in (field.low, field.high):
        assert made(field, end).number(field.name) == end
    for beyond in (np.nextafter(field.low, -np.inf), np.nextafter(field.high, np.inf)):
        with pytest.raises(InputError, match=f"^{field.name}: .* is not allowed; give ") as caught:
            made(field, float(beyond))
        assert caught.value.name == field.name


@pytest.mark.parametrize("number", [np.nan, np.inf, -np.inf])
@pytest.mark.parametrize("field", NUMBERS, ids=by_name)
def test_numbers_that_are_not_finite_are_refused(field, number):
    with pytest.raises(InputError, match=f"^{field.name}: .*{number}.* is not allowed; give "):
        made(field, number)


@pytest.mark.parametrize("field", NUMBERS, ids=by_name)
@pytest.mark.parametrize("wrong", [True, np.True_, [1.0], {}, b"1", 1j, np.array(1.0), u.K, "", "much", "0x10", "1_0"])
def test_wrong_types_and_texts_are_refused(field, wrong):
    with pytest.raises(InputError, match=f"^{field.name}: .* is not allowed; give .*"):
        Scenario(**{field.name: wrong})


@pytest.mark.parametrize("field", NUMBERS, ids=by_name)
def test_wrong_units_are_refused_and_the_wanted_one_named(field):
    for wrong in (5 * u.candela, "5 cd", 5e6 * u.deg_C):
        with pytest.raises(InputError, match="wrong unit") as caught:
            Scenario(**{field.name: wrong})
        assert field.unit in str(caught.value)
    with pytest.raises(InputError, match="unknown unit"):
        Scenario(**{field.name: "5 stones"})


@pytest.mark.parametrize("field", WITH_UNIT, ids=by_name)
@pytest.mark.parametrize("kind", [float, str])
def test_a_bare_number_is_refused_where_a_unit_belongs(field, kind):
    with pytest.raises(InputError, match="without a unit") as caught:
        Scenario(**{field.name: kind(field.high)})
    assert field.unit in str(caught.value)


@pytest.mark.parametrize("field", FIELDS.values(), ids=by_name)
def test_none_only_where_it_means_something(field):
    optional = ("ignition_temperature", "infall_rate", "core_fraction", "cloud_metals", "surface_temperature")
    if field.name in optional:
        assert Scenario(**{field.name: None}).number(field.name) is None
    else:
        with pytest.raises(InputError, match=f"^{field.name}: None is not allowed"):
            Scenario(**{field.name: None})


@pytest.mark.parametrize("label", ["", "x" * 81, "two\nlines", "tab\t", "\x00", "\ud800", 3, b"bytes", 1.0])
def test_labels_that_are_refused(label):
    with pytest.raises(InputError, match=r"^label: .* give 1 to 80 printable characters$"):
        Scenario(label=label)


def test_long_or_many_line_input_is_shown_short_and_on_one_line():
    with pytest.raises(InputError) as caught:
        Scenario(label="a\n" * 10**5)
    assert len(str(caught.value)) < 200
    assert "\n" not in str(caught.value)
    with pytest.raises(InputError) as caught:
        Scenario(spin=10**400)
    assert len(str(caught.value)) < 200


@pytest.mark.parametrize(("helium", "metals"), [(0.93, 0.07), (0.9, 0.1), (0.98, 0.02), (1.0, 0.0), (0.997, 0.003)])
def test_helium_and_metals_may_fill_the_star(helium, metals):
    assert Scenario(helium=helium, metals=metals).hydrogen == pytest.approx(0.0, abs=1e-15)
    assert Scenario(helium=helium, metals=metals).hydrogen >= 0.0


def test_helium_and_metals_may_not_overfill_the_star():
    with pytest.raises(InputError, match=r"^helium: 0.95 is not allowed; give 0 to 1 - metals \(metals is 0.06\)"):
        Scenario(helium=0.95, metals=0.06)


def test_the_target_may_not_be_earlier_than_the_birth():
    assert Scenario(birth_redshift=7.5).target_redshift == 7.5
    with pytest.raises(InputError, match=r"^target_redshift: 7.5 is not allowed; .*birth_redshift is 5"):
        Scenario(birth_redshift=5)


def test_cosmology_is_one_that_astropy_has():
    for name in available:
        assert Scenario(cosmology=name).cosmology == name
    with pytest.raises(InputError, match=r"^cosmology: 'Planck99' is not allowed; give one of .*Planck18"):
        Scenario(cosmology="Planck99")


def test_values_are_exact_in_the_canonical_unit_and_converted_from_others():
    odd = 123456.78901234567
    assert Scenario(mass=odd * u.Msun).number("mass") == odd
    assert Scenario(mass=f"{odd!r} solMass").number("mass") == odd
    assert Scenario(cloud_density="1e6 m-3").number("cloud_density") == pytest.approx(1.0, rel=1e-15)
    assert Scenario(ignition_temperature=10 * u.MK).number("ignition_temperature") == pytest.approx(1e7, rel=1e-15)
    assert Scenario(mass=2e35 * u.kg).number("mass") == pytest.approx(2e35 / u.Msun.to("kg"), rel=1e-15)
    assert Scenario(infall_rate=3 * u.Unit("g / s")).infall_rate.unit == u.Unit("solMass / yr")


def test_plain_numbers_come_as_numbers_texts_or_dimensionless_quantities():
    for half in (0.5, "0.5", "5e-1", np.float32(0.5), np.float64(0.5), 0.5 * u.one, 50 * u.percent):
        assert type(Scenario(spin=half).spin) is float
        assert Scenario(spin=half).spin == 0.5
    assert Scenario(spin=np.int64(1)).spin == 1.0
    assert Scenario(survey_depth=28 * u.ABmag) == Scenario(survey_depth="28 mag") == Scenario(survey_depth=28)


def test_a_quantity_must_be_one_real_number():
    for wrong in ([1, 2] * u.Msun, (1 + 2j) * u.Msun, u.Magnitude(1)):
        with pytest.raises(InputError, match=r"^mass: "):
            Scenario(mass=wrong)


def test_arrays_are_refused_even_of_one_number():
    for wrong, shape in (([1e5] * u.Msun, r"\(1,\)"), ([[1, 2]] * u.K, r"\(1, 2\)")):
        with pytest.raises(InputError, match=rf"^mass: an array of shape {shape} is not allowed"):
            Scenario(mass=wrong)


def test_overlong_texts_never_reach_the_unit_parser():
    with pytest.raises(InputError, match=r"^mass: '1e5 solMass.* is not allowed"):
        Scenario(mass="1e5 solMass" + " " * 100)


def test_numbers_too_large_to_convert_are_refused_without_a_warning():
    for wrong in (1e308 * u.Unit("1e300 kg"), "1e400 solMass", "1 1e400 kg", "1e308 Gpc3 g / cm3"):
        with pytest.raises(InputError, match=r"^mass: "):
            Scenario(mass=wrong)


def test_it_is_frozen_down_to_the_numbers():
    scenario = Scenario()
    with pytest.raises(dataclasses.FrozenInstanceError):
        scenario.spin = 0.5
    with pytest.raises(ValueError, match="read-only"):
        scenario.mass *= 2
    given = 3e5 * u.Msun
    scenario = Scenario(mass=given)
    given *= 2
    assert scenario.number("mass") == 3e5


def test_replace_changes_one_field_and_checks_again():
    scenario = Scenario(mass="3e5 solMass", spin=0.25)
    changed = dataclasses.replace(scenario, spin=0.5)
    assert (changed.spin, changed.mass) == (0.5, scenario.mass)
    with pytest.raises(InputError, match=r"^spin: "):
        dataclasses.replace(scenario, spin=np.nan)


def test_equal_scenarios_hash_equal_and_unequal_ones_differ():
    one, two = Scenario(mass=1e5 * u.Msun), Scenario(mass="1e5 solMass")
    assert one == two
    assert hash(one) == hash(two)
    assert len({one, two, Scenario(spin=0.5)}) == 2
    for field in NUMBERS:
        ends = {made(field, field.low), made(field, field.high)}
        assert len(ends) == 2, field.name
    assert Scenario() != "untitled"


def test_copies_and_pickles_are_equal_and_still_read_only():
    scenario = Scenario(label="Ünïcode ★", mass=123456.789 * u.Msun, ignition_temperature=None, infall_rate=None)
    for other in (pickle.loads(pickle.dumps(scenario)), copy.copy(scenario), copy.deepcopy(scenario)):
        assert other == scenario
        assert hash(other) == hash(scenario)
        with pytest.raises(ValueError, match="read-only"):
            other.mass[...] = 5 * u.Msun


def test_repr_is_short_and_can_be_evaluated():
    scenario = Scenario(label='a "b"', mass=2e5 * u.Msun, infall_rate=None)
    assert repr(scenario) == """Scenario(label='a "b"', mass='200000.0 solMass', infall_rate=None)"""
    assert eval(repr(scenario), {"Scenario": Scenario}) == scenario


def test_positional_fields_and_unknown_names_are_refused():
    with pytest.raises(TypeError):
        Scenario("Lantern")
    with pytest.raises(TypeError):
        Scenario(masss=1e5 * u.Msun)
    with pytest.raises(KeyError):
        Scenario().number("hash")
