"""The outcome as an object: frozen, with units, a table with gaps, and a reason where there is no value."""

import dataclasses
import pickle

import numpy as np
import pytest
from astropy import units as u
from astropy.table import QTable

from massdash import NotAvailable, Scenario, evaluate
from massdash.errors import ComputationError, InputError
from massdash.model.ledger import Ledger
from massdash.quantities import QUANTITIES

OUTCOME = evaluate(Scenario(label="Buoy", mass=1e5 * u.Msun, ignition_temperature=1.6e8 * u.K))


def test_it_is_frozen():
    with pytest.raises(dataclasses.FrozenInstanceError):
        OUTCOME.fate = "undecided"
    with pytest.raises(TypeError):
        OUTCOME.entries["radius"] = None
    with pytest.raises(dataclasses.FrozenInstanceError):
        OUTCOME.entries["radius"].value = 1.0


def test_quantities_have_units():
    assert OUTCOME["maximum_mass"].unit == u.solMass
    assert OUTCOME["central_density"].unit == u.g / u.cm**3
    assert OUTCOME["pulsation_frequency_squared"].unit == u.s**-2
    assert OUTCOME["stability_margin"].unit == u.dimensionless_unscaled
    assert isinstance(OUTCOME["settles"], u.Quantity)
    for name, info in QUANTITIES.items():
        if OUTCOME.number(name) is not None:
            assert OUTCOME[name].unit == u.Unit(info.unit), name
            assert OUTCOME[name].value == OUTCOME.number(name)


def test_unknown_names_and_gaps():
    with pytest.raises(KeyError):
        OUTCOME["mass_of_the_moon"]
    note = OUTCOME.entries["growth_time"].note
    with pytest.raises(NotAvailable, match=f"growth_time has no value here: {note}"):
        OUTCOME["growth_time"]
    assert OUTCOME.number("growth_time") is None


def test_table():
    table = OUTCOME.table()
    assert isinstance(table, QTable)
    assert table.colnames == ["quantity", "value", "low", "high", "unit", "method", "source", "note"]
    assert list(table["quantity"]) == list(QUANTITIES)
    for row, (name, entry) in zip(table, OUTCOME.entries.items(), strict=True):
        assert np.ma.is_masked(row["value"]) == (entry.value is None), name
        assert entry.value is None or row["value"] == entry.value
        assert np.ma.is_masked(row["low"]) == (entry.low is None)
        assert row["unit"] == entry.unit
    assert table.meta["scenario"]["label"] == "Buoy"
    assert table.meta["program"].startswith("massdash ")
    assert table.meta["sources"]
    assert table.meta["fate"] == OUTCOME.fate


def test_an_outcome_is_a_mapping_of_names_that_travels_between_processes():
    back = pickle.loads(pickle.dumps(OUTCOME))
    assert dict(back.entries) == dict(OUTCOME.entries)
    assert back.headline == OUTCOME.headline
    assert list(OUTCOME) == list(OUTCOME.keys()) == list(QUANTITIES)
    assert "radius" in OUTCOME
    assert "girth" not in OUTCOME
    assert len(repr(OUTCOME)) < 1000


@pytest.mark.parametrize("wrong", ["lantern.yaml", None, 3])
def test_only_scenarios_are_evaluated(wrong):
    with pytest.raises(InputError, match="a Scenario"):
        evaluate(wrong)


def test_no_stage_can_write_what_is_not_finite():
    for value in (np.nan, np.inf, -np.inf):
        with pytest.raises(ComputationError, match="radius: no finite value was found"):
            Ledger().put("radius", value, "", "")


def test_bounds_go_to_their_side_and_warnings_are_said_once():
    ledger = Ledger()
    ledger.put("radius", 2.0, "", "", other=1.0)
    assert (ledger.entries["radius"].low, ledger.entries["radius"].high) == (1.0, None)
    ledger.put("radius", 2.0, "", "", other=3.0)
    assert (ledger.entries["radius"].low, ledger.entries["radius"].high) == (None, 3.0)
    for _ in range(2):
        ledger.warn("Once.")
    assert ledger.warnings == ["Once."]
