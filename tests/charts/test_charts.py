"""The four figures by their data: what they mark must be what the physics and the outcome say."""

from dataclasses import replace

import numpy as np
import pytest
from astropy import units as u

from massdash import Scenario, builtin, builtin_names, evaluate
from massdash.charts import CHARTS, energy_chart, lifetime_chart, margin_chart, margin_map
from massdash.charts.chart import Line, Map, Point, Rule, Span
from massdash.charts.masses import family
from massdash.constants import M_SUN
from massdash.physics import relativistic
from massdash.physics.post_newtonian import energy_terms, equilibrium_at_density

LANTERN = builtin("lantern")
HEAVY = Scenario(label="Breakwater", mass=1e6 * u.Msun, ignition_temperature=1.6e8 * u.K)
HELD = replace(LANTERN, background_density=1e-6 * u.g / u.cm**3)


def at(line, x):
    """A line's value at x, straight between its points in log x."""
    known = np.isfinite(line.y)
    return np.interp(np.log(x), np.log(line.x[known]), line.y[known])


def draw(scenario):
    """The figures of the dashboard by key."""
    outcome = evaluate(scenario)
    return {key: make(outcome) for key, make in CHARTS.items()}


# ------------------------------------------------------------------------------------------------------------- energy
def test_the_star_lies_in_the_minimum_of_its_own_curve():
    outcome = evaluate(LANTERN)
    chart = energy_chart(outcome)
    own, star, barrier = chart["own"], chart["star"], chart["barrier"]
    assert (star.x, star.y) == (outcome.number("central_density"), outcome.number("binding_energy"))
    inner = own.x < barrier.x
    lowest = own.x[inner][np.argmin(own.y[inner])]
    spacing = own.x[1] / own.x[0]
    assert star.x / spacing < lowest < star.x * spacing


@pytest.mark.parametrize("mass", [7e4, 1.1e5, 1.2e5])
def test_the_barrier_is_the_maximum_of_the_same_curve(mass):
    outcome = evaluate(replace(LANTERN, mass=mass * u.Msun))
    barrier, body = energy_chart(outcome)["barrier"], outcome.workings.matter.body
    star = equilibrium_at_density(body, outcome.workings.present.density)
    around = barrier.x * np.exp(np.linspace(-0.1, 0.1, 2001))
    own = energy_terms(body, star, around)["total"]
    assert around[np.argmax(own)] == pytest.approx(barrier.x, rel=5e-3)
    assert own.max() == pytest.approx(barrier.y, rel=1e-5)
    assert barrier.x > outcome.number("onset_density") > outcome.number("central_density")


@pytest.mark.parametrize("scenario", [LANTERN, HEAVY, replace(LANTERN, mass=2e4 * u.Msun)], ids=lambda s: s.label)
def test_the_locus_has_its_minimum_at_onset(scenario):
    chart = energy_chart(evaluate(scenario))
    locus, onset = chart["locus"], chart["onset"]
    lowest = np.nanargmin(locus.y)
    assert locus.x[lowest - 1] < onset.x < locus.x[lowest + 1]
    assert locus.y[lowest] == pytest.approx(onset.y, rel=1e-3)
    assert np.nanmin(locus.y) >= onset.y * (1 + 1e-6)


def test_the_star_lies_on_the_locus():
    chart = energy_chart(evaluate(LANTERN))
    assert at(chart["locus"], chart["star"].x) == pytest.approx(chart["star"].y, rel=2e-3)


def test_terms_add_up_to_the_own_curve():
    chart = energy_chart(evaluate(replace(HELD, spin=0.4)), terms=True)
    parts = [mark for mark in chart.of(Line) if mark.key.startswith("term_")]
    assert {mark.key for mark in parts} == {
        f"term_{name}" for name in ("internal", "newtonian", "first_order", "rotation", "background")
    }
    largest = max(np.abs(part.y).max() for part in parts)
    assert sum(part.y for part in parts) == pytest.approx(chart["own"].y, abs=1e-12 * largest)
    without = energy_chart(evaluate(LANTERN), terms=True)
    assert not {"term_rotation", "term_background"} & {mark.key for mark in without.marks}


def test_a_star_that_never_ignites_is_drawn_at_its_onset():
    chart = energy_chart(evaluate(HEAVY))
    assert (chart["star"].x, chart["star"].y) == pytest.approx((chart["onset"].x, chart["onset"].y), rel=1e-6)
    assert "at the onset of collapse" in chart.alt


def test_energy_is_empty_and_says_so_where_nothing_is_covered():
    chart = energy_chart(evaluate(replace(HEAVY, background_density=1 * u.g / u.cm**3)))
    assert chart.marks == ()
    assert "not covered" in chart.alt
    assert "not covered" in chart.notes[0]


# ------------------------------------------------------------------------------------------------------------- margin
@pytest.mark.parametrize("name", builtin_names())
def test_the_margin_vanishes_at_the_largest_mass(name):
    outcome = evaluate(builtin(name))
    chart = margin_chart(outcome)
    line, rule = chart["margin"], chart["maximum_mass"]
    assert rule.at == outcome.number("maximum_mass")
    spacing = line.x[1] / line.x[0]
    stable = line.x[line.y >= 0]
    assert stable.max() <= rule.at < stable.max() * spacing * (1 + 1e-12)
    assert abs(at(line, rule.at)) < 1e-2


def test_the_margin_is_the_stars_own_at_its_mass():
    outcome = evaluate(LANTERN)
    chart = margin_chart(outcome)
    assert chart["star"].x == LANTERN.number("mass")
    assert chart["star"].y == outcome.number("stability_margin")
    assert at(chart["margin"], chart["star"].x) == pytest.approx(chart["star"].y, abs=2e-3)
    assert chart.of(Span)[0].high == 0.0


def test_a_star_below_the_axis_stands_on_its_edge_with_its_value():
    outcome = evaluate(HEAVY)
    assert outcome.number("stability_margin") < -1
    star = margin_chart(outcome)["star"]
    assert star.y == -1.0
    assert "off the axis" in star.label
    assert np.nanmin(margin_chart(outcome)["margin"].y) >= -1


@pytest.mark.parametrize("changes", [{}, {"spin": 1.0, "ignition_temperature": 1e7 * u.K}, {"mass": 200 * u.Msun}])
def test_stars_above_one_stand_on_the_axis(changes):
    """Rotation and background, and in light stars the motion itself, lift the margin over 1."""
    chart = margin_chart(evaluate(replace(LANTERN, **changes)))
    low, high = chart.y.limits
    assert low <= chart["star"].y <= high
    assert np.nanmax(chart["margin"].y) <= high
    assert 1.0 <= high < np.nanmax(chart["margin"].y) + 0.2


# ---------------------------------------------------------------------------------------------------------------- map
def grid(chart):
    """Masses, temperatures and values at the cell centres of the map."""
    layer = chart.of(Map)[0]
    rows, columns = layer.values.shape
    sides = []
    for (low, high), count in ((layer.x, columns), (layer.y, rows)):
        edges = np.linspace(np.log(low), np.log(high), count + 1)
        sides.append(np.exp((edges[1:] + edges[:-1]) / 2))
    return (*sides, np.asarray(layer.values, float))


@pytest.mark.parametrize(
    "scenario", [LANTERN, replace(LANTERN, helium=1.0, spin=0.7), HELD], ids=["plain", "spin", "held"]
)
def test_the_map_is_the_direct_evaluation_at_cell_centres(scenario):
    outcome = evaluate(scenario)
    masses, temperatures, values = grid(margin_map(outcome))
    body = outcome.workings.matter.body
    seen = 0
    for row in range(0, len(temperatures), 17):
        for column in range(0, len(masses), 19):
            value = values[row, column]
            if not (value > -1 and relativistic.covers(masses[column] * M_SUN, body.mu, temperatures[row])):
                continue
            arguments = masses[column] * M_SUN, body.mu, temperatures[row], body.rotation, body.background
            assert value == pytest.approx(float(relativistic.at_temperature(*arguments).margin), abs=1e-6)
            seen += 1
    assert seen > 3


@pytest.mark.parametrize("scenario", [LANTERN, replace(LANTERN, helium=0.6, spin=0.3)], ids=["plain", "spin"])
def test_the_zero_contour_is_the_largest_mass(scenario):
    outcome = evaluate(scenario)
    masses, temperatures, values = grid(margin_map(outcome))
    body, compared = outcome.workings.matter.body, 0
    for row in range(0, len(temperatures), 10):
        largest = float(relativistic.maximum_mass(body.mu, temperatures[row], body.rotation)) / M_SUN
        stable = masses[values[row] >= 0]
        if 1e3 < largest < 9e7:
            assert stable.max() <= largest <= stable.max() * masses[1] / masses[0] * (1 + 1e-9)
            compared += 1
    assert compared > 5


def test_the_map_covers_its_axes_at_every_composition():
    for helium, metals in ((0.0, 0.0), (0.247, 0.0), (1.0, 0.0), (0.9, 0.1)):
        chart = margin_map(evaluate(replace(LANTERN, helium=helium, metals=metals)))
        layer = chart.of(Map)[0]
        assert layer.x[0] <= 1e2 < 1e8 <= layer.x[1]
        assert layer.y[0] <= 1e6 < 1e9 <= layer.y[1]
        assert np.isfinite(layer.values).all()
        assert -1 <= layer.values.min() < 0 < layer.values.max() < 1.05  # light stars do not move homologously


def test_the_star_can_be_dragged_and_stands_where_the_scenario_says():
    star = margin_map(evaluate(LANTERN))["star"]
    assert (star.x, star.y, star.handle) == (LANTERN.number("mass"), LANTERN.number("ignition_temperature"), "star")


def test_cells_in_too_dense_a_background_are_empty():
    _, _, values = grid(margin_map(evaluate(replace(LANTERN, background_density=1e-4 * u.g / u.cm**3))))
    assert 0.1 < np.isnan(values).mean() < 0.9


# ----------------------------------------------------------------------------------------------------------- lifetimes
@pytest.mark.parametrize("name", builtin_names())
def test_lifetimes_are_the_stars_own_at_its_mass(name):
    outcome = evaluate(builtin(name))
    chart, mass = lifetime_chart(outcome), outcome.scenario.number("mass")
    for key, quantity in (
        ("contraction", "contraction_time"),
        ("burning", "hydrogen_lifetime"),
        ("nuclear", "nuclear_timescale"),
    ):
        value, line = outcome.number(quantity), chart[key]
        if value is None:
            assert not np.isfinite(line.y[line.x > mass]).any()
        else:
            assert at(replace(line, y=np.log(line.y)), mass) == pytest.approx(np.log(value), abs=0.03), key
    for key in ("contraction_time", "hydrogen_lifetime"):
        if outcome.number(key) is not None:
            assert (chart[key].x, chart[key].y) == (mass, outcome.number(key))


def test_lifetimes_computed_for_many_stars_equal_those_of_one():
    """At the masses of the curve, through evaluate."""
    chart = lifetime_chart(evaluate(LANTERN))
    pairs = {"contraction": "contraction_time", "nuclear": "nuclear_timescale", "burning": "hydrogen_lifetime"}
    for key, name in pairs.items():
        line = chart[key]
        for index in (5, len(line.x) // 2, -8, -2, -1):
            alone = evaluate(replace(LANTERN, mass=float(line.x[index]) * u.Msun))
            assert line.y[index] == pytest.approx(alone.number(name), rel=1e-6), (key, index)


def test_the_line_of_burning_reaches_the_largest_mass():
    for scenario in (LANTERN, builtin("hearth"), replace(LANTERN, spin=0.5), HELD):
        outcome = evaluate(scenario)
        line, largest = lifetime_chart(outcome)["burning"], outcome.number("maximum_mass")
        assert 0.99 * largest < line.x[-1] < largest
        assert np.all(np.diff(line.x) > 0)
        assert line.y[-1] < 0.05 * np.nanmax(line.y)


def test_pure_helium_has_no_line_of_burning():
    chart = lifetime_chart(evaluate(replace(LANTERN, helium=1.0)))
    assert not np.isfinite(chart["burning"].y).any()
    assert chart["star"].at == LANTERN.number("mass")  # a rule, as no point carries the label


# ------------------------------------------------------------------------------------------------------------ all four
def test_four_charts_in_order():
    charts = draw(LANTERN)
    assert [chart.key for chart in charts.values()] == list(charts) == ["energy", "margin", "map", "lifetimes"]
    assert all(chart.sources and chart.notes for chart in charts.values())
    assert len({chart.title for chart in charts.values()}) == 4


def test_curves_kept_from_one_star_do_not_serve_another():
    """Caches know all that they depend on: the same figure fresh and after many others."""
    first = draw(LANTERN)
    for change in ({"spin": 0.2}, {"helium": 0.1}, {"metals": 0.05}, {"ignition_temperature": 9e7 * u.K}):
        other = draw(replace(LANTERN, **change))
        for key, line in (("margin", "margin"), ("lifetimes", "burning")):
            assert not np.array_equal(other[key][line].y, first[key][line].y, equal_nan=True), change
    again = draw(LANTERN)
    assert np.array_equal(again["margin"]["margin"].y, first["margin"]["margin"].y, equal_nan=True)
    assert np.array_equal(again["map"]["margin"].values, first["map"]["margin"].values)
    assert family(evaluate(LANTERN)) == family(evaluate(replace(LANTERN, label="Other")))


def test_marks_are_of_known_kinds():
    kinds = {type(mark) for chart in draw(HELD).values() for mark in chart.marks}
    assert kinds <= {Line, Map, Point, Rule, Span}
