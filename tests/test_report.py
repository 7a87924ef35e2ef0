"""An outcome in its four formats: complete, exact where programs read, and readable where people do."""

import dataclasses
import json
import shutil
import subprocess

import pytest
from astropy.table import QTable

from massdash import Scenario, builtin, builtin_names, evaluate
from massdash.errors import ComputationError
from massdash.latex import as_latex, escape, number, unit
from massdash.outcome import BIRTHS, FATES
from massdash.provenance import provenance, sources
from massdash.quantities import QUANTITIES
from massdash.report import as_ecsv, as_json, as_text

AWKWARD = 'Äß ñ ő ł Γ₁ −4/3 <β> 10⁵⁴ ★ í \\{}$&%#_^~|" 日'


@pytest.fixture(scope="module", params=builtin_names())
def outcome(request):
    return evaluate(builtin(request.param))


@pytest.fixture(scope="module")
def lantern():
    return evaluate(builtin("lantern"))


def changed(outcome, name, **values):
    entries = dict(outcome.entries)
    entries[name] = dataclasses.replace(entries[name], **values)
    return dataclasses.replace(outcome, entries=entries)


def test_json_has_the_promised_shape_and_exact_numbers(outcome):
    content = json.loads(as_json(outcome))
    assert list(content) == ["schema", "scenario", "quantities", "birth", "fate", "warnings"]
    assert content["schema"] == 1
    assert Scenario(**content["scenario"]) == outcome.scenario
    assert list(content["quantities"]) == list(QUANTITIES)
    for name, quantity in content["quantities"].items():
        assert list(quantity) == ["value", "low", "high", "unit", "method", "source", "note"]
        assert quantity == {key: getattr(outcome.entries[name], key) for key in quantity}
        assert quantity["value"] is not None or quantity["note"]
    assert content["birth"] in BIRTHS
    assert content["fate"] in FATES
    assert content["warnings"] == list(outcome.warnings)


@pytest.mark.parametrize("number", [float("nan"), float("inf")])
def test_json_never_holds_what_is_no_number(lantern, number):
    with pytest.raises(ComputationError, match="not a finite number"):
        as_json(changed(lantern, "radius", value=number))


def test_ecsv_reads_back_exactly_with_its_origin(outcome, tmp_path):
    path = tmp_path / "outcome.ecsv"
    path.write_text(as_ecsv(outcome), encoding="utf-8")
    table = QTable.read(path)
    assert list(table["quantity"]) == list(QUANTITIES)
    for name, value in zip(table["quantity"], table["value"].filled(float("nan")), strict=True):
        expected = outcome.entries[name].value
        assert (value != value) if expected is None else (value == expected)
    assert Scenario(**table.meta["scenario"]) == outcome.scenario
    assert table.meta["program"].startswith("massdash ")
    assert table.meta["constants"]
    assert table.meta["data"]
    assert table.meta["sources"] == sources(outcome)
    assert table.meta["warnings"] == list(outcome.warnings)
    assert table.meta["fate"] == outcome.fate


def test_text_says_everything_within_the_width(outcome):
    text = as_text(outcome, width=80)
    joined = " ".join(text.split())
    assert joined.startswith(" ".join(outcome.headline.split()))
    for sentence in (*outcome.warnings, *sources(outcome)):
        assert " ".join(sentence.split()) in joined
    for name, entry in outcome.entries.items():
        assert name in joined
        assert entry.value is not None or f"{entry.note}" in joined
    assert max(map(len, text.splitlines())) <= 80
    assert "nan" not in joined.split()


def test_text_gives_value_spread_unit_note_and_method(lantern):
    entry = {
        "value": 1.23456789e54,
        "low": 1e54,
        "high": None,
        "note": "a note",
        "method": "by hand",
        "source": "Nobody",
    }
    text = as_text(changed(lantern, "binding_energy", **entry))
    row = next(line for line in text.splitlines() if line.startswith("  binding_energy "))
    assert row.split()[1:6] == ["1.23457e54", "erg", "(1e54", "to", "1.23457e54)"]
    assert f"  {row.split()[-1]} by hand; Nobody\n" in text
    assert f"{row}\n    a note\n" in text


def test_text_gathers_what_has_no_value_by_its_reason(lantern):
    for name in ("opacity", "luminosity"):
        lantern = changed(lantern, name, value=None, low=None, high=None, note="asleep")
    assert "  no value for opacity, luminosity: asleep\n" in as_text(lantern)


def test_latex_lists_methods_and_sources(outcome):
    text = as_latex(outcome)
    listed = text[text.index("Methods and sources") :]
    for entry in outcome.entries.values():
        if entry.value is not None:
            assert escape(entry.method) in listed
            assert escape(entry.source) in listed


def test_latex_has_a_row_for_every_quantity(outcome):
    rows = [
        line
        for line in as_latex(outcome).splitlines()
        if line.endswith(r"\tabularnewline") and not line.startswith("%")
    ]
    names = [row.partition(" & ")[0].replace(r"\_", "_") for row in rows]
    assert [name for name in names if name in QUANTITIES] == list(QUANTITIES)
    assert all(row.replace(r"\&", "").count("&") == 4 for row in rows)


def test_latex_carries_its_origin_in_comments(lantern):
    comments = [line for line in as_latex(lantern).splitlines() if line.startswith("%")]
    assert "% mass: 120000.0 solMass" in comments
    assert comments[0].startswith("% massdash ")


@pytest.mark.parametrize(
    ("value", "text"),
    [(0.5, "$0.5$"), (1.2e54, r"$1.2\times 10^{54}$"), (-1e-10, r"$-1\times 10^{-10}$"), (119999, "$119999$")],
)
def test_latex_numbers(value, text):
    assert number(value) == text


def test_latex_units():
    assert unit("") == ""
    assert unit("solMass / yr") == r"$\mathrm{M_{\odot}\,yr^{-1}}$"


@pytest.mark.parametrize(
    ("text", "escaped"),
    [
        ("a_b", r"a\_b"),
        ("50% & more", r"50\% \& more"),
        ("\\{}", r"\textbackslash{}\{\}"),
        ("é ő í", r"\'{e} \H{o} \'{\i}"),
        ("Γ₁ β Β", r"$\Gamma$$_{1}$ $\beta$ B"),
        ("10⁻⁴", "10$^{-}$$^{4}$"),
        ("★", "[black star]"),
        ("a\nb", "a b"),
    ],
)
def test_latex_escapes(text, escaped):
    assert escape(text) == escaped


@pytest.mark.skipif(shutil.which("latex") is None, reason="no latex found to compile the tables")
def test_latex_compiles_and_fits_the_page(tmp_path):
    tables = as_latex(changed(evaluate(Scenario(label=AWKWARD)), "radius", method=AWKWARD))
    (tmp_path / "tables.tex").write_text(tables, encoding="utf-8")
    page = ["\\documentclass{article}", "\\begin{document}", "\\input{tables}", "\\end{document}"]
    (tmp_path / "page.tex").write_text("\n".join(page))
    command = ["latex", "-interaction=nonstopmode", "-halt-on-error", "page.tex"]
    ended = subprocess.run(command, cwd=tmp_path, capture_output=True, text=True, errors="replace", check=False)
    assert ended.returncode == 0, ended.stdout[-2000:]
    assert "Overfull" not in ended.stdout


def test_provenance_is_plain_and_complete(lantern):
    about = provenance(lantern)
    assert json.loads(json.dumps(about)) == about
    assert list(about) == ["program", "constants", "data", "scenario", "sources"]
    assert len(set(about["sources"])) == len(about["sources"]) > 3


def test_sources_are_those_of_values(lantern):
    assert "Nobody" in sources(changed(lantern, "radius", source="Nobody"))
    assert "Nobody" not in sources(changed(lantern, "radius", source="Nobody", value=None, note="asleep"))
