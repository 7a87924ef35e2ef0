"""The verdict in words, and the warnings that keep it honest."""

import pytest

from massdash import Scenario, evaluate


def star(mass, ignition="1.6e8 K", **fields):
    return evaluate(Scenario(label="Buoy", mass=f"{mass} solMass", ignition_temperature=ignition, **fields))


def test_two_temperatures_that_differ_are_told_apart():
    headline = star(1.294e5).headline
    assert "never ignites" in headline
    assert "1.599×10⁸ K, before the 1.6×10⁸ K" in headline


def test_a_verdict_that_the_bound_would_turn_is_warned_of():
    near, far = star(1.28e5), star(1e5)
    assert near.entries["onset_temperature"].low < 1.6e8 < near.number("onset_temperature")
    assert any("collapse would set in before ignition" in warning for warning in near.warnings)
    assert not any("before ignition" in warning for warning in far.warnings)


def test_charts_without_pairs_are_warned_of():
    assert any("charts leave them out" in warning for warning in star(2e4, "7e8 K").warnings)
    assert not any("charts" in warning for warning in star(1e5).warnings)


def test_rising_weight_meets_the_onset_with_pairs_soon_where_it_is_near():
    near, farther = (star(mass, "7e8 K").number("hydrogen_lifetime") for mass in (2.26e4, 2e4))
    assert 0 < near < 0.1 * farther


@pytest.mark.parametrize(
    ("outcome", "words"),
    [
        (star(100), "meets no onset of collapse"),
        (star(3e4, helium=1.0), "has no hydrogen"),
        (star(1e5, background_density="0.5 g / cm3"), "background is too dense"),
    ],
)
def test_unusual_stars_are_not_said_to_be_usual(outcome, words):
    assert words in outcome.headline
