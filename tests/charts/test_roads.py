"""Post-Newtonian forms, turning point and pulsation against each other."""

import numpy as np
import pytest

import massdash as md
from massdash.charts import CHARTS, PRINTED, all_charts, roads_chart, roads_over_beta
from massdash.charts.chart import Line
from massdash.charts.roads import GUIDE, TURNING_POINTS, differences
from massdash.constants import M_SUN
from massdash.errors import ComputationError
from massdash.physics import relativistic
from massdash.physics.turning import turning_temperature

MASSES = np.array([1e3, 1e5, 1e7]) * M_SUN
MU = 0.59


@pytest.fixture(scope="module")
def outcome():
    return md.evaluate(md.Scenario(label="Lantern", mass="1.2e5 solMass", ignition_temperature="1.6e8 K"))


def lines(chart):
    return {line.key: line for line in chart.of(Line)}


@pytest.mark.parametrize(("mass", "ratio"), [(9.7467e4, 0.9745), (9.9142e5, 0.9918)])
def test_leading_order_against_independent_turning_points(mass, ratio):
    """T/T_PN of two onsets at mu 0.59, computed independently in high precision (project check values, 5b)."""
    roads = differences(MU)
    difference = np.exp(np.interp(np.log(mass), np.log(roads.masses), np.log(roads.leading)))
    assert 1.0 / (1.0 + difference) == pytest.approx(ratio, abs=5e-5)


@pytest.mark.parametrize("road", ["leading", "exact", "second"])
def test_post_newtonian_differences_fall_as_beta(road):
    roads = differences(MU)
    heavy = roads.masses > 1e6
    slope = np.polyfit(np.log(roads.masses[heavy]), np.log(getattr(roads, road)[heavy]), 1)[0]
    assert slope == pytest.approx(-0.5, abs=2e-3)


def test_the_limit_of_the_leading_order():
    """1.13 beta: project check values, 5b."""
    roads = differences(MU)
    assert roads.leading[-1] / roads.beta[-1] == pytest.approx(GUIDE, abs=5e-3)


def test_differences_depend_on_the_mass_times_mu_squared_alone():
    light, heavy = differences(MU), differences(2.0 * MU)
    both = np.interp(np.log(heavy.masses * 4.0), np.log(light.masses), np.log(light.leading / light.beta))
    inside = heavy.masses * 4.0 <= light.masses[-1]
    np.testing.assert_allclose(np.exp(both[inside]), (heavy.leading / heavy.beta)[inside], rtol=1e-4)


@pytest.mark.parametrize("mu", [0.5, 0.59, 4.0 / 3.0])
def test_the_mass_turns_where_the_pulsation_has_no_frequency(mu):
    marginal = relativistic.onset(MASSES, mu)
    found = turning_temperature(marginal, mu, 1.2 * marginal.temperature)
    np.testing.assert_allclose(found, marginal.temperature, rtol=1e-9)


def test_only_the_entropy_of_the_star_counts():
    marginal = relativistic.onset(MASSES, MU)
    other = relativistic.along_entropy(marginal, MU, 0.5 * marginal.temperature)
    found = [turning_temperature(star, MU, marginal.temperature) for star in (marginal, other)]
    np.testing.assert_allclose(*found, rtol=1e-9)


@pytest.mark.parametrize("factor", [0.4, 2.5])
def test_no_turning_point_is_found_where_none_is(factor):
    marginal = relativistic.onset(MASSES, MU)
    with pytest.raises(ComputationError, match="no single maximum near the guess"):
        turning_temperature(marginal, MU, factor * marginal.temperature)


def test_the_chart_shows_every_road(outcome):
    drawn = lines(roads_chart(outcome))
    assert set(drawn) == {"guide", "leading", "exact", "second", "turning"}
    assert all(np.all(line.y >= 0) for line in drawn.values())  # the turning point may agree to the last digit
    assert all(line.x[0] == pytest.approx(1e3) and line.x[-1] == pytest.approx(1e8) for line in drawn.values())
    assert len(drawn["turning"].x) == TURNING_POINTS
    assert np.max(drawn["turning"].y) < 1e-6 * np.min(drawn["second"].y)
    assert np.all(drawn["leading"].y > drawn["exact"].y)
    assert np.all(drawn["exact"].y > drawn["second"].y)


def test_the_chart_over_beta_is_the_other_divided_by_it(outcome):
    plain, scaled, guide = lines(roads_chart(outcome)), lines(roads_over_beta(outcome)), roads_chart(outcome)["guide"]
    for key, line in scaled.items():
        np.testing.assert_allclose(line.y * guide.y / GUIDE, plain[key].y, rtol=1e-12)
    chart = roads_over_beta(outcome)
    assert all(np.all((line.y > chart.y.limits[0]) & (line.y < chart.y.limits[1])) for line in scaled.values())


def test_the_composition_counts_and_what_holds_a_star_up_does_not():
    plain, helped, heavy = (
        lines(roads_chart(md.evaluate(md.Scenario(**fields))))["leading"].y
        for fields in ({}, {"spin": 1.0, "background_density": "1e-9 g / cm3"}, {"helium": 1.0})
    )
    assert np.array_equal(plain, helped)
    assert np.all(heavy < plain)


def test_pairs_are_marked_and_the_star_where_it_is_on_the_axis(outcome):
    chart = roads_chart(outcome)
    limit = relativistic.onset(chart["pairs"].high * M_SUN, outcome.number("mean_molecular_weight"))
    assert limit.temperature == pytest.approx(5e8, rel=1e-8)
    assert (chart["star"].at, chart["star"].label) == (1.2e5, "Lantern")
    light = roads_chart(md.evaluate(md.Scenario(mass="200 solMass")))
    assert "star" not in [mark.key for mark in light.marks]


def test_the_sentences_have_the_numbers(outcome):
    assert "from 0.26 at 1000 Msun to 8.2×10⁻⁴ at 10⁸ Msun" in roads_chart(outcome).alt
    assert "1.13 at leading order, 1.06 with exact" in roads_over_beta(outcome).alt


def test_roads_are_printed_and_not_live(outcome):
    assert tuple(PRINTED) == (*CHARTS, "roads", "roads_beta")
    assert [chart.key for chart in all_charts(outcome)] == list(PRINTED)


def test_the_work_is_done_once(outcome):
    assert roads_chart(outcome)["turning"].x is roads_chart(outcome)["turning"].x
    assert differences(MU) is differences(MU)
