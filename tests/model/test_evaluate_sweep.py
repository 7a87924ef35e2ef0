"""Every acceptable star has an outcome: no input makes it fail, nothing is not finite, gaps have a reason."""

import json
import math

import pytest
from hypothesis import given, settings
from random_stars import scenarios

from massdash import builtin, builtin_names, evaluate
from massdash.outcome import BIRTHS, FATES
from massdash.quantities import QUANTITIES
from massdash.report import as_json


def check(outcome):
    assert list(outcome.entries) == list(QUANTITIES)
    for name, entry in outcome.entries.items():
        assert all(x is None or math.isfinite(x) for x in (entry.value, entry.low, entry.high)), name
        assert entry.value is not None or entry.note, name
        assert entry.value is None or entry.method, name
        assert entry.value is not None or (entry.low is None and entry.high is None), name
        assert entry.low is None or entry.low <= entry.value, name
        assert entry.high is None or entry.value <= entry.high, name
        assert entry.unit == QUANTITIES[name].unit
    assert outcome.fate in FATES
    assert outcome.birth in BIRTHS
    assert outcome.scenario.label in outcome.headline
    assert not any(word in outcome.headline for word in ("nan", "inf ", "None", "–"))
    assert json.loads(as_json(outcome), parse_constant=pytest.fail)["schema"] == 1


def check_consistency(outcome):
    """Numbers that must tell one story."""
    settles, margin = outcome.number("settles"), outcome.number("stability_margin")
    if settles is not None and margin is not None:
        assert settles == (margin >= 0)
    if settles is not None and (largest := outcome.number("maximum_mass")) is not None:
        mass = outcome.scenario.number("mass")
        assert settles == (mass <= largest) or mass == pytest.approx(largest, rel=1e-6)
    if settles is not None:
        onset, ignition = outcome.number("onset_temperature"), outcome.number("ignition_temperature")
        assert settles == (onset is None or ignition <= onset)  # None: so light a star meets no onset
        if (now := outcome.number("central_temperature")) is not None:
            assert now == pytest.approx(ignition if onset is None else min(onset, ignition), rel=1e-6)
        assert (outcome.fate == "collapse_before_ignition") == (settles == 0)
    squared = outcome.number("pulsation_frequency_squared")
    if squared is not None and margin is not None and abs(margin) > 1e-9:
        assert (squared > 0) == (margin > 0)
        assert (outcome.number("growth_time") is None) == (squared > 0)


@pytest.mark.parametrize("name", builtin_names())
def test_built_in_scenarios(name):
    outcome = evaluate(builtin(name))
    check(outcome)
    check_consistency(outcome)


@given(scenarios())
@settings(deadline=None, max_examples=150)
def test_any_star(scenario):
    outcome = evaluate(scenario)
    check(outcome)
    check_consistency(outcome)
