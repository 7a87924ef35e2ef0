"""The dashboard's widgets without a browser."""

import json
import re
from datetime import UTC, datetime

import numpy as np
import pytest

from massdash import model
from massdash.charts import CHARTS
from massdash.errors import ComputationError, InputError
from massdash.panels import Dashboard, dashboard, filing, reading
from massdash.panels.controls import SHOWN, Controls, number_field
from massdash.panels.dashboard import OPEN
from massdash.panels.later import Later
from massdash.scenario import FIELDS, Scenario, builtin, builtin_names, to_text


@pytest.fixture
def board():
    return Dashboard(filing.choices([]))


def said(board):
    return board.status.value


def upload(board, name, content):
    file = {"name": name, "type": "application/yaml", "size": len(content), "content": content}
    board.filing.upload.value = (file | {"last_modified": datetime(2026, 12, 1, tzinfo=UTC)},)


@pytest.mark.parametrize("name", SHOWN)
def test_a_control_follows_the_field_table(name):
    field, control = FIELDS[name], number_field(name, Scenario())
    assert (control.minimum, control.maximum, control.scale) == (field.low, field.high, field.scale)
    assert control.optional == field.optional
    assert control.value == Scenario().number(name)
    assert control.label == field.label


@pytest.mark.parametrize(
    ("name", "value"), [("mass", 3e5), ("helium", 0.3), ("metals", 0.01), ("ignition_temperature", 9e7)]
)
def test_a_change_reaches_the_outcome_verdict_and_table(board, name, value):
    headline, table = board.headline.value, board.table.value
    board.controls.fields[name].value = value
    assert board.scenario.number(name) == value
    assert board.outcome.scenario == board.scenario
    assert board.headline.value != headline
    assert board.table.value != table


def test_found_ignition_is_a_choice(board):
    board.controls.fields["ignition_temperature"].value = None
    assert board.scenario.ignition_temperature is None
    assert "ignition temperature" in board.warnings.value


def test_fields_that_exclude_each_other_are_refused_and_put_back(board):
    board.controls.fields["helium"].value = 1.0
    before = board.outcome
    board.controls.fields["metals"].value = 0.05
    assert board.controls.fields["metals"].value == 0.0
    assert "1 - metals" in board.controls.fields["metals"].message
    assert board.outcome is before
    board.controls.fields["helium"].value = 0.9
    board.controls.fields["metals"].value = 0.05
    assert board.controls.fields["metals"].message == ""


def test_a_failed_computation_leaves_everything_as_it_was():
    def evaluate(scenario, **options):
        if scenario.number("mass") > 1e6:
            raise ComputationError("no answer for such a star")
        return model.evaluate(scenario, **options)

    board = Dashboard(filing.choices([]), evaluate=evaluate)
    before = board.outcome
    board.controls.fields["mass"].value = 2e6
    assert board.outcome is before
    assert board.controls.fields["mass"].value == before.scenario.number("mass")
    assert board.controls.fields["mass"].message == "no answer for such a star"


def test_an_unforeseen_error_is_shown_and_raised():
    def evaluate(scenario, **options):
        if scenario.number("mass") > 1e6:
            raise ZeroDivisionError("somewhere")
        return model.evaluate(scenario, **options)

    board = Dashboard(filing.choices([]), evaluate=evaluate)
    with pytest.raises(ZeroDivisionError):
        board.controls.fields["mass"].value = 2e6
    assert "ZeroDivisionError" in board.controls.fields["mass"].message
    assert board.controls.fields["mass"].value == board.scenario.number("mass")


def test_choosing_a_built_in_scenario_moves_all_controls(board):
    for text in board.filing.choice.options:
        board.filing.choice.value = text
        for name in SHOWN:
            assert board.controls.fields[name].value == board.scenario.number(name)
        assert board.label.value == board.scenario.label


def test_fields_without_a_control_stay_in_sight(board):
    board.show(Scenario(label="Spun", spin=0.5))
    assert "spin 0.5" in board.others.value
    board.controls.fields["mass"].value = 2e5
    assert board.scenario.spin == 0.5


def test_opening_a_file_shows_it_and_a_broken_one_changes_nothing(board):
    other = Scenario(label="From a file", mass="2.5e4 solMass", spin=0.25)
    upload(board, "other.yaml", to_text(other).encode())
    assert board.scenario == other
    assert "Opened other.yaml" in said(board)
    for content in (b"mass: [", b"\xff\xfe", b"massdash: 1\nmass: .nan solMass\n", b"", b"massdash: 2\n"):
        upload(board, "bad.yaml", content)
        assert "bad.yaml" in said(board)
        assert 'role="alert"' in said(board)
        assert board.scenario == other


def test_saving_offers_the_scenario_as_a_file(board):
    board.filing.save.click()
    parcel = board.filing.download.parcel
    assert parcel["name"] == "lantern.yaml"
    assert parcel["data"].decode() == to_text(board.scenario)


EXPORTS = [(key, "ecsv", b"# %ECSV") for key in CHARTS]
EXPORTS += [("energy", "pdf", b"%PDF"), ("energy", "svg", b"<?xml"), ("map", "png", b"\x89PNG")]


@pytest.mark.parametrize(("key", "ending", "beginning"), EXPORTS)
def test_exports_carry_each_figure(board, key, ending, beginning):
    board.filing.figure.value, board.filing.format.value = key, ending
    board.filing.export.click()
    parcel = board.filing.download.parcel
    assert parcel["name"] == f"lantern_{key}.{ending}"
    assert bytes(parcel["data"]).startswith(beginning)


def test_the_terms_appear_on_request_on_screen_and_in_exports(board):
    assert len(board.chart("energy").marks) < 7
    board.terms.value = True
    assert {"term_internal", "term_newtonian", "term_first_order"} <= {mark.key for mark in board.chart("energy").marks}


def test_the_post_newtonian_forms_are_laid_over_on_request(board):
    overlays = {"energy": "locus_pn", "margin": "margin_pn", "map": "zero_pn"}
    for key, mark in overlays.items():
        assert mark not in [one.key for one in board.chart(key).marks]
    board.approximate.value = True
    for key, mark in overlays.items():
        assert np.isfinite(board.chart(key)[mark].y).any()


def test_the_star_on_the_map_can_be_moved(board):
    board._pointed("drop", "map", "star", 2e4, 3e7)
    assert (board.scenario.number("mass"), board.scenario.number("ignition_temperature")) == (2e4, 3e7)
    assert board.controls.fields["mass"].value == 2e4
    before = board.scenario
    board._pointed("drop", "map", "star", 1e9, 3e7)
    board._pointed("click", "energy", None, 1.0, 1e54)
    assert board.scenario == before


def test_labels_are_checked_and_never_become_markup(board):
    board.label.value = "<script>alert(1)</script>"
    assert "<script>" not in board.headline.value
    assert "&lt;script&gt;" in board.headline.value
    board.label.value = "x" * 81
    assert 'role="alert"' in said(board)
    assert board.label.value == "<script>alert(1)</script>"


def test_the_table_has_every_quantity_and_no_nan(board):
    for name in board.outcome.entries:
        assert f">{name}<" in board.table.value
    assert not re.search(r"\bnan\b", board.table.value, re.IGNORECASE)


def test_many_random_moves_end_in_a_state_that_equals_what_the_controls_show(board):
    import random

    draw = random.Random(20261201)
    for _ in range(150):
        name = draw.choice(SHOWN)
        control = board.controls.fields[name]
        low, high, share = control.minimum, control.maximum, draw.random()
        control.value = low * (high / low) ** share if control.scale == "log" else low + (high - low) * share
    for name in SHOWN:
        assert board.controls.fields[name].value == board.scenario.number(name)
    assert board.outcome.scenario == board.scenario


def test_files_of_the_command_line_come_first(tmp_path, monkeypatch):
    path = tmp_path / "mine.yaml"
    path.write_text(to_text(Scenario(label="Mine", mass="3e6 solMass")))
    monkeypatch.setenv(OPEN, json.dumps([str(path)]))
    assert "Mine" in _headline(dashboard())
    monkeypatch.delenv(OPEN)
    assert builtin("lantern").label in _headline(dashboard())
    assert "Mine" in _headline(dashboard([path]))
    with pytest.raises(InputError, match=r"gone\.yaml"):
        dashboard([tmp_path / "gone.yaml"])


def _headline(widget):
    return next(
        child.value
        for child in widget.children
        if getattr(child, "value", "").startswith('<p class="massdash-headline')
    )


def test_release_of_a_slider_catches_up_once():
    calls = []
    controls = Controls(Scenario(), lambda name, value: calls.append((name, value)), lambda: calls.append("released"))
    mass = controls.fields["mass"]
    mass.dragging = True
    mass.value = 2e5
    mass.dragging = False
    assert calls == [("mass", 2e5), "released"]
    controls.show(Scenario(mass="7e5 solMass"))
    assert calls[2:] == []
    assert mass.value == 7e5


def test_later_runs_once_after_a_pause():
    import asyncio

    async def hurry():
        ran = []
        later = Later(lambda: ran.append(1), delay=0.01)
        for _ in range(5):
            later.soon()
        assert ran == []
        await asyncio.sleep(0.05)
        assert ran == [1]
        later.soon()
        later.cancel()
        await asyncio.sleep(0.03)
        assert ran == [1]
        hasty = Later(lambda: ran.append(2), delay=0.02, patient=False)
        for _ in range(6):
            hasty.soon()
            await asyncio.sleep(0.01)
        assert ran.count(2) >= 2

    asyncio.run(hurry())
    ran = []
    Later(lambda: ran.append(1)).soon()
    assert ran == [1]


@pytest.mark.parametrize(
    ("label", "name"), [("Lantern 2", "lantern_2"), ("../../etc", "etc"), ("β Ceti", "ceti"), ("☉", "scenario")]
)
def test_file_names_are_safe(label, name):
    assert filing.slug(label) == name


def test_every_built_in_scenario_reads_well():
    for name in builtin_names():
        outcome = model.evaluate(builtin(name))
        assert outcome.scenario.label in reading.headline(outcome)
        assert reading.table(outcome).count("<tr") > len(outcome.entries)
