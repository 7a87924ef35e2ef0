"""The field table: complete for controls and files, and the README shows the same."""

from pathlib import Path

import pytest
from astropy import units as u

from massdash.scenario import FIELDS
from massdash.scenario.field_table import field_table_markdown
from massdash.scenario.fields import short

README = Path(__file__).parents[2] / "README.md"


@pytest.mark.parametrize("field", FIELDS.values(), ids=lambda field: field.name)
def test_every_field_is_ready_for_a_control(field):
    assert field.label
    assert field.meaning
    assert field.help.endswith(".")
    assert field.stage in ("star", "cloud", "infall", "growth", "sighting")
    assert field.scale in ("linear", "log")
    assert field.low < field.high
    if field.scale == "log":
        assert field.low > 0
    if field.unit:
        assert field.astropy_unit == u.Unit(field.unit)


def test_allowed_is_a_phrase_with_range_unit_and_none():
    assert FIELDS["mass"].allowed == "100 to 1e8 solMass"
    assert FIELDS["ignition_temperature"].allowed == "1e6 to 1e9 K, or None (found from the burning rates)"
    assert FIELDS["cloud_density"].allowed == "0.01 to 1e12 in 1 / cm3"
    assert FIELDS["helium"].allowed == "0 to 1 - metals"
    assert FIELDS["label"].allowed == "1 to 80 printable characters"


@pytest.mark.parametrize(
    ("number", "text"), [(0, "0"), (100, "100"), (1e5, "1e5"), (1.5e9, "1.5e9"), (1e-6, "1e-6"), (41253, "41253")]
)
def test_numbers_are_short(number, text):
    assert short(number) == text


def test_the_readme_shows_this_table():
    between = README.read_text(encoding="utf-8").partition("<!-- fields -->")[2].partition("<!-- /fields -->")[0]
    assert between.strip() == field_table_markdown()


def test_the_table_has_a_row_for_every_field():
    rows = field_table_markdown().splitlines()
    assert len(rows) == 2 + len(FIELDS)
    assert all(row.count("|") == 6 for row in rows)
    assert rows[3] == "| `mass` | rest mass of the star now | `solMass` | 1e5 | 100 to 1e8 |"
