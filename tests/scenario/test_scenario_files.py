"""Scenario files: an exact round trip, and refusals with file, key, value and what is allowed."""

import os
import stat

import pytest
from astropy import units as u
from astropy.cosmology import available
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from massdash.errors import InputError
from massdash.scenario import FIELDS, Scenario, builtin, builtin_names, from_bytes, from_text, load, save, to_text

# Draws of many fields are slow on a busy machine, which is no fault of theirs.
unhurried = settings(deadline=None, suppress_health_check=[HealthCheck.too_slow])


def values(field):
    """All a field may hold, including both ends and the smallest numbers."""
    if field.name == "cosmology":
        return st.sampled_from(available)
    if field.unit is None:
        return st.text(min_size=1, max_size=80).filter(str.isprintable)
    numbers = st.floats(field.low, field.high) | st.sampled_from([field.low, field.high])
    held = numbers.map(field.with_unit)
    return st.none() | held if field.optional else held


@st.composite
def scenarios(draw):
    fields = {name: draw(values(field)) for name, field in FIELDS.items() if draw(st.booleans())}
    if "metals" in fields:
        fields["helium"] = draw(st.floats(0.0, 1.0 - fields["metals"]))
    born = fields.get("birth_redshift", 20.0)
    fields["target_redshift"] = min(fields.get("target_redshift", 0.0), born)
    return Scenario(**fields)


@unhurried
@given(scenarios())
def test_text_round_trip_is_exact(scenario):
    again = from_text(to_text(scenario))
    assert again == scenario
    assert repr(again) == repr(scenario)


@unhurried
@given(scenarios())
def test_everything_written_is_read_back_by_the_constructor(scenario):
    assert Scenario(**scenario.written()) == scenario


@pytest.mark.parametrize("number", [5e-324, 2.2250738585072014e-308, 1e-17, 1e16, 0.1 + 0.2, 1 / 3])
def test_awkward_numbers_survive(number):
    dense = Scenario(infall_rate=min(number, 1e4) * u.Unit("solMass / yr"), spin=min(number, 1.0))
    assert from_text(to_text(dense)) == dense


@pytest.mark.parametrize(
    "label",
    [
        "null",
        "~",
        "yes",
        "1e5",
        "42",
        " spaces ",
        "# no comment",
        "a: b",
        "'",
        '"',
        "*a",
        "&a",
        "!x",
        "日本",
        "🌟",
        "=",
    ],
)
def test_awkward_labels_survive(label):
    assert from_text(to_text(Scenario(label=label))).label == label


def test_files_are_pleasant_to_read():
    scenario = Scenario(label="Lantern", mass=1.2e5 * u.Msun, infall_rate=None, spin=0.1)
    assert to_text(scenario) == "massdash: 1\nlabel: Lantern\nmass: 120000.0 solMass\nspin: 0.1\ninfall_rate: null\n"
    long = "Läntern 日 " * 8
    assert f"label: {long!r}\n" in to_text(Scenario(label=long))


def test_what_people_write_is_read():
    text = """
# by hand
massdash: 1
label: 42
mass: 1e5 solMass
metals: 1e-3
spin: "0.5"
ignition_temperature: ~
cloud_density:   10 cm-3
"""
    expected = Scenario(label="42", mass="1e5 solMass", metals=1e-3, spin=0.5, cloud_density="10 / cm3")
    assert from_text(text) == expected
    assert from_bytes(b"\xef\xbb\xbf" + text.encode(), where="with a byte order mark") == expected


FIRST = "massdash: 1\n"
REFUSED = {
    "nothing": ("", "file: no content"),
    "only a comment": ("# nothing\n", "file: no content"),
    "no schema number": ("mass: 1e5 solMass\n", "massdash: a missing schema number"),
    "another schema number": ("massdash: 2\nmasse: 3\n", "massdash: '2'"),
    "a schema number in words": ("massdash: one\n", "massdash: 'one'"),
    "an unknown key": (FIRST + "masse: 1e5 solMass\n", "key: 'masse'"),
    "a null key": (FIRST + "~: 1\n", "key: None"),
    "a repeated key": (FIRST + "spin: 0.1\nspin: 0.1\n", "spin: a second value"),
    "a wrong unit": (FIRST + "mass: 1e5 K\n", r"mass: 100000.0 K \(wrong unit\)"),
    "no unit": (FIRST + "mass: 1e5\n", "mass: '1e5' without a unit"),
    "not a number": (FIRST + "spin: .nan\n", "spin: '.nan'"),
    "not a number with unit": (FIRST + "mass: nan solMass\n", "mass: 'nan solMass'"),
    "infinity": (FIRST + "spin: .inf\n", "spin: '.inf'"),
    "out of range": (FIRST + "mass: 1e9 solMass\n", "mass: '1e9 solMass'"),
    "a truth value": (FIRST + "spin: true\n", "spin: 'true'"),
    "a cross rule": (FIRST + "birth_redshift: 3\n", "target_redshift: 7.5"),
    "null where it means nothing": (FIRST + "mass:\n", "mass: None"),
    "a list": ("- massdash: 1\n", "file: a list"),
    "a word": ("massdash", "file: a single value"),
    "a list as value": (FIRST + "label: [a]\n", "label: a list"),
    "a mapping as value": (FIRST + "label: {a: 1}\n", "label: a mapping"),
    "a list as key": (FIRST + "? [a]\n: 1\n", "a key: a list"),
    "a merge": (FIRST + "<<: {a: 1}\n", "<<: a mapping"),
    "an anchor": (FIRST + "label: &a x\n", "label: a YAML anchor or alias"),
    "an anchor around all": ("&a\nmassdash: 1\n", "file: a YAML anchor or alias"),
    "an alias": (FIRST + "label: *a\n", "label: a YAML anchor or alias"),
    "a tag": (FIRST + "label: !!str x\n", "label: the YAML tag"),
    "a tag that would run code": (FIRST + "label: !!python/object/apply:os.getcwd []\n", "label: the YAML tag"),
    "a tag around all": ("!!map\nmassdash: 1\n", "file: the YAML tag"),
    "two documents": (FIRST + "---\nmassdash: 1\n", "file: a second document"),
    "broken YAML": (FIRST + "label: 'abc\n", r"line \d: broken YAML"),
    "a tab": (FIRST + "\tspin: 1\n", "line 2: broken YAML"),
    "a null byte": (FIRST + "label: a\0\n", "the file: broken YAML"),
    "another YAML version": ("%YAML 3.0\n---\nmassdash: 1\n", "line 1: broken YAML"),
}


@pytest.mark.parametrize(("text", "message"), REFUSED.values(), ids=REFUSED)
def test_a_broken_file_is_refused_in_one_sentence(tmp_path, text, message):
    path = tmp_path / "star.yaml"
    path.write_bytes(text.encode())
    with pytest.raises(InputError, match=f"star.yaml: {message}.* is not allowed; give .") as caught:
        load(path)
    assert caught.value.where == str(path)
    assert "\n" not in str(caught.value)


def test_an_alias_bomb_is_refused_at_its_first_anchor():
    bomb = "a: &a [x,x,x,x,x,x,x,x,x]\n" + "".join(f"b{i}: &b{i} [*a,*a,*a,*a,*a,*a]\n" for i in range(9))
    with pytest.raises(InputError, match="a YAML anchor or alias"):
        from_text(FIRST + bomb)


def test_deep_nesting_is_refused():
    with pytest.raises(InputError, match="label: a list"):
        from_text(FIRST + "label: " + "[" * 10000)


def test_file_size_is_limited(tmp_path):
    filler = "#" * (2**20 - len(FIRST) - 1) + "\n"
    path = tmp_path / "large.yaml"
    path.write_text(FIRST + filler)
    assert load(path) == Scenario()
    path.write_text(FIRST + filler + "#")
    with pytest.raises(InputError, match=r"large.yaml: file size: more than 1 MiB is not allowed"):
        load(path)


def test_files_that_are_not_utf8_are_refused():
    for data, byte in ((b"massdash: 1\nlabel: \xfc\n", 19), ("massdash: 1\n".encode("utf-16"), 0)):
        with pytest.raises(InputError, match=f"^old.yaml: encoding: byte {byte} is not allowed; give text in UTF-8"):
            from_bytes(data, where="old.yaml")


def test_paths_that_cannot_be_read(tmp_path):
    for path in (tmp_path / "none.yaml", tmp_path, "a\0b", os.fsencode(tmp_path / "none")):
        with pytest.raises(InputError, match="the file cannot be read"):
            load(path)
    for path in (None, 3):
        with pytest.raises(InputError, match=f"^path: {path} is not allowed"):
            load(path)


def test_load_and_save(tmp_path):
    path = tmp_path / "lantern.yaml"
    scenario = Scenario(label="Läntern", mass=1.2345678e5 * u.Msun)
    save(scenario, path)
    assert load(path) == scenario == load(str(path)) == load(os.fsencode(path))
    assert [file.name for file in tmp_path.iterdir()] == ["lantern.yaml"]


def test_saving_keeps_permissions_and_follows_links(tmp_path):
    path, link = tmp_path / "a.yaml", tmp_path / "link.yaml"
    path.touch()
    path.chmod(0o640)
    link.symlink_to(path)
    save(Scenario(), link)
    assert link.is_symlink()
    assert load(path) == Scenario()
    assert stat.S_IMODE(path.stat().st_mode) == 0o640


def test_saving_where_it_cannot_be_done(tmp_path):
    for path in (tmp_path, tmp_path / "none" / "a.yaml", tmp_path / ("x" * 300), "/dev/null", "a\0b"):
        with pytest.raises(InputError, match="the file cannot be written"):
            save(Scenario(), path)
    with pytest.raises(InputError, match=r"^path: None is not allowed"):
        save(Scenario(), None)
    with pytest.raises(InputError, match=r"^scenario: 'mass' is not allowed; give a Scenario"):
        save("mass", tmp_path / "a.yaml")


def test_a_failed_save_leaves_the_old_file(tmp_path, monkeypatch):
    path = tmp_path / "a.yaml"
    save(Scenario(label="old"), path)

    def no_space(descriptor):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", no_space)
    with pytest.raises(InputError, match=r"a.yaml: the file cannot be written \(No space left on device\)"):
        save(Scenario(label="new"), path)
    assert load(path).label == "old"
    assert [file.name for file in tmp_path.iterdir()] == ["a.yaml"]


@pytest.mark.parametrize("name", builtin_names())
def test_every_built_in_scenario_reads_and_round_trips(name):
    scenario = builtin(name)
    assert scenario.label.lower() == name
    assert from_text(to_text(scenario)) == scenario


def test_built_in_names():
    assert builtin_names() == ("breaker", "ember", "hearth", "lantern")
    for wrong in ("Lantern", "../lantern", "", None, []):
        with pytest.raises(InputError, match=r"^built-in scenario: .* give one of breaker, ember, hearth, lantern"):
            builtin(wrong)
