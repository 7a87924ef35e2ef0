"""Profiles for users: what may be asked for, the header, both systems of units, three formats and the command."""

import json
import warnings
from dataclasses import replace

import numpy as np
import pytest
from astropy import units as u
from astropy.table import QTable

import massdash as md
from massdash import cli, constants
from massdash.constants import GM_SUN, M_SUN, C
from massdash.physics.profile import SPACINGS
from massdash.profiles import COLUMNS, Profile, making, read_profile
from massdash.profiles.columns import SYSTEMS

SUFFIXES = (".ecsv", ".fits", ".h5", ".hdf5")


@pytest.fixture(scope="module")
def lantern():
    return md.builtin("lantern")


@pytest.fixture(scope="module")
def made(lantern):
    return md.profile(lantern, deplete=0.1)


def equal(one, other):
    """Whether two dictionaries of columns are the same to the last bit, in the same order."""
    return list(one) == list(other) and all(np.array_equal(one[name], other[name]) for name in one)


# ------------------------------------------------------------------------------------------------ which star
def test_by_default_the_star_is_at_onset(lantern):
    star = md.profile(lantern, points=50).about["star"]
    onset = md.evaluate(lantern)
    assert star["stability"] == "marginal"
    assert star["central_temperature"]["value"] == pytest.approx(onset["onset_temperature"].value, rel=1e-10)
    assert star["central_density"]["value"] == pytest.approx(onset["onset_density"].value, rel=1e-10)


def test_at_ignition_it_is_the_present_state(lantern):
    found = md.profile(lantern, "ignition", points=50)
    outcome = md.evaluate(lantern)
    assert found.about["star"]["stability"] == "stable"
    assert "growth_time" not in found.about["star"]
    assert found["radius"][-1].to_value("solRad") == pytest.approx(outcome["radius"].value, rel=1e-9)
    assert found["mass"][-1].to_value("solMass") == pytest.approx(outcome["gravitational_mass"].value, rel=1e-9)
    assert "1.6e8 K" in found.about["state"]


def test_an_equilibrium_beyond_onset_is_marked_unstable():
    breaker = md.builtin("breaker")
    found = md.profile(breaker, at="ignition", points=50)
    assert found.about["star"]["stability"] == "unstable"
    growth = md.evaluate(breaker)["growth_time"].to_value("s")
    assert found.about["star"]["growth_time"]["value"] == pytest.approx(growth, rel=1e-7)
    assert "unstable" in found.warnings[0]


def test_a_central_density_or_temperature_may_be_chosen(lantern):
    dense = md.profile(lantern, central_density="0.5 g/cm3", points=50)
    assert dense["density"][0].to_value("g/cm3") == pytest.approx(0.5, rel=1e-10)
    hot = md.profile(lantern, central_temperature=1.2e8 * u.K, points=50)
    assert hot["temperature"][0].to_value("K") == pytest.approx(1.2e8, rel=1e-10)
    for found in (dense, hot):
        assert found["rest_mass"][-1].to_value("solMass") == pytest.approx(1.2e5, rel=1e-11)


def test_spin_and_background_are_left_out_and_that_is_said(lantern):
    turning = md.profile(replace(lantern, spin=0.5, background_density=1e-6 * u.Unit("g/cm3")), points=50)
    assert equal(turning.columns, md.profile(lantern, points=50).columns)
    assert ["spin" in turning.warnings[0], "background" in turning.warnings[1]] == [True, True]
    assert md.profile(lantern, points=50).warnings == ()


def test_no_rotating_configuration_is_offered_and_every_header_says_so(made):
    assert made.about["notes"][0].startswith("No rotating configuration is offered")


def test_pairs_are_said_to_be_in_or_out(lantern):
    without = md.profile(lantern, points=50)
    assert "no pairs" in without.about["matter"]
    assert any("ask for pairs" in note for note in without.about["notes"])
    inside = md.profile(lantern, points=50, pairs=True)
    assert "positrons" in inside.about["matter"]
    assert not any("ask for pairs" in note for note in inside.about["notes"])
    assert inside["temperature"][0] < without["temperature"][0]
    light = replace(lantern, mass=1e4 * u.Msun)
    assert "positrons" in md.profile(light, points=50).about["matter"]
    assert "left out" in md.profile(light, points=50, pairs=False).warnings[0]


@pytest.mark.parametrize(
    ("wishes", "parts"),
    [
        ({"at": "birth"}, ["at: 'birth'", "ignition or onset"]),
        ({"at": 3}, ["at: 3"]),
        ({"at": "onset", "central_density": "1 g/cm3"}, ["at and central_density", "one of"]),
        ({"central_density": "5"}, ["central_density", "without a unit", '"1 g / cm3"']),
        ({"central_density": 5.0}, ["without a unit"]),
        ({"central_density": "-1 g/cm3"}, ["central_density: '-1 g/cm3'", "1e-12 to 1e12"]),
        ({"central_density": np.nan * u.Unit("g/cm3")}, ["central_density: nan"]),
        ({"central_temperature": "1 g/cm3"}, ["wrong unit", "1e5 to 1.5e10 K"]),
        ({"central_temperature": [1e8, 2e8] * u.K}, ["array"]),
        ({"points": 19}, ["points: 19", "20 to 100000"]),
        ({"points": 100_001}, ["points"]),
        ({"points": 100.0}, ["points: 100.0"]),
        ({"points": True}, ["points: True"]),
        ({"spacing": "wide"}, ["spacing: 'wide'", "uniform, centre, surface, both"]),
        ({"spacing": ["both"]}, ["spacing"]),
        ({"units": "SI"}, ["units: 'SI'", "cgs, geometric"]),
        ({"deplete": 1.5}, ["deplete: 1.5", "0 to 1"]),
        ({"deplete": float("nan")}, ["deplete: nan"]),
        ({"pairs": "yes"}, ["pairs: 'yes'", "True, False or None"]),
    ],
)
def test_bad_wishes_are_refused_in_one_sentence(lantern, wishes, parts):
    with pytest.raises(md.InputError) as refusal:
        md.profile(lantern, **wishes)
    assert [part for part in parts if part not in str(refusal.value)] == []
    assert "\n" not in str(refusal.value)


def test_only_scenarios_have_profiles():
    with pytest.raises(md.InputError, match="scenario: 'lantern' is not allowed; give a Scenario"):
        md.profile("lantern")


@pytest.mark.parametrize("wishes", [{"at": "onset"}, {"central_density": "1e12 g/cm3"}])
def test_a_star_that_does_not_exist_is_a_sentence(wishes):
    with pytest.raises(md.ComputationError, match=r"^no star of 100 solMass at .* was found: "):
        md.profile(md.Scenario(mass="100 solMass"), **wishes)


# ------------------------------------------------------------------------------------------------ the table
def test_the_table_carries_units_meanings_and_the_header(made):
    table = made.table()
    assert isinstance(table, QTable)
    assert table.colnames == list(made.columns) == list(COLUMNS)
    assert table["radius"].unit == u.cm
    assert table["pressure"].info.description == COLUMNS["pressure"].meaning
    assert table.meta == made.about
    assert u.allclose(table["energy_density"], table["density"] * (C**2 * u.Unit("cm2/s2") + table["internal_energy"]))
    assert made.equation_of_state_table().colnames == ["density", *list(COLUMNS)[4:10]]


def test_a_table_may_be_changed_without_harm(made):
    made.table()["radius"][0] = 7 * u.cm
    assert made.columns["radius"][0] == 0


def test_every_header_is_plain_json(made):
    assert json.loads(json.dumps(made.about, allow_nan=False)) == made.about
    assert {"program", "constants_version", "scenario", "sources", "constants", "constraint"} <= set(made.about)
    assert made.about["scenario"] == [
        "massdash: 1",
        "label: Lantern",
        "mass: 120000.0 solMass",
        made.about["scenario"][3],
    ]
    assert made.about["constants"]["G"] == {"value": constants.G, "unit": "cm3 / (g s2)"}
    assert all(u.Unit(row["unit"]) is not None for row in made.about["constants"].values())


def test_the_residual_is_below_1e_8_and_in_the_header(made):
    assert made.residual < 1e-8
    assert made.about["constraint"]["residual"] == made.residual
    assert "order 4" in made.about["constraint"]["definition"]


def test_depletion_makes_a_column_of_its_own(lantern, made):
    plain = md.profile(lantern)
    assert "depleted_pressure" not in plain.columns
    assert made.columns["depleted_pressure"] == pytest.approx(0.9 * plain.columns["pressure"], rel=1e-15)
    assert equal(plain.columns, {name: made.columns[name] for name in plain.columns})
    assert "pressure times 0.9" in made.about["notes"][-1]
    assert "no pressure was taken away" in plain.about["notes"][-1]


def test_geometric_units_have_no_constants_left(lantern, made):
    plain = md.profile(lantern, deplete=0.1, units="geometric")
    columns = plain.columns
    assert columns["g_rr"][1:] == pytest.approx(
        1.0 / (1.0 - 2.0 * columns["mass"][1:] / columns["radius"][1:]), rel=1e-13
    )
    assert columns["energy_density"] == pytest.approx(
        columns["density"] * (1.0 + columns["internal_energy"]), rel=1e-13
    )
    assert columns["rest_mass"][-1] == pytest.approx(1.2e5, rel=1e-11)
    assert columns["radius"] * GM_SUN / C**2 == pytest.approx(made.columns["radius"], rel=1e-14)
    assert plain.residual == pytest.approx(made.residual, abs=1e-9)
    for name, values in columns.items():
        factor = plain.about["columns"][name]["cgs_per_unit"]
        assert values * factor == pytest.approx(made.columns[name], rel=1e-13), name
        assert plain.table()[name].unit in (None, u.K)
    density = plain.equation_of_state["density"] * plain.about["constants"]["geometric_density"]["value"]
    assert density == pytest.approx(made.equation_of_state["density"], rel=1e-13)


def test_geometric_factors_follow_from_units():
    """Against astropy, which knows nothing of our factors."""
    c, g = C * u.Unit("cm/s"), constants.G * u.Unit("cm3/(g s2)")
    mass = M_SUN * u.g
    units = {
        "radius": g * mass / c**2,
        "mass": mass,
        "density": c**6 / g**3 / mass**2,
        "pressure": c**8 / g**3 / mass**2,
    }
    units |= {"internal_energy": c**2, "energy_density": units["pressure"], "temperature": 1.0 * u.K}
    for name, unit in units.items():
        expected = unit.to_value(COLUMNS[name].unit)
        assert COLUMNS[name].factor("geometric") == pytest.approx(expected, rel=1e-12), name


# ------------------------------------------------------------------------------------------------ files
@pytest.mark.parametrize("suffix", SUFFIXES)
@pytest.mark.parametrize("units", SYSTEMS)
def test_reading_back_gives_the_same_star(tmp_path, lantern, suffix, units):
    odd = md.profile(replace(lantern, label="Läntern ★"), "ignition", units=units, points=200, deplete=0.05)
    paths = odd.save(tmp_path / f"star{suffix}")
    again = md.read_profile(paths[0])
    assert isinstance(again, Profile)
    assert sorted(path.name for path in tmp_path.iterdir()) == sorted(path.name for path in paths)
    assert equal(again.columns, odd.columns)
    assert equal(again.equation_of_state, odd.equation_of_state)
    assert (again.about, again.units, again.residual, again.warnings) == (odd.about, units, odd.residual, odd.warnings)
    assert "label: Läntern ★" in again.about["scenario"]


@pytest.mark.parametrize("suffix", SUFFIXES)
def test_what_was_read_tells_masses_and_radius(tmp_path, lantern, suffix):
    md.profile(lantern).save(tmp_path / f"star{suffix}")
    again, onset = md.read_profile(tmp_path / f"star{suffix}"), md.evaluate(lantern)
    assert again["rest_mass"][-1].to_value("solMass") == pytest.approx(1.2e5, rel=1e-10)
    assert again["radius"][-1].to_value("solRad") == pytest.approx(onset["onset_radius"].value, rel=1e-10)
    bound = (again["mass"][-1] - again["rest_mass"][-1]).to_value("g") * C**2
    assert bound == pytest.approx(onset["onset_energy"].value, rel=1e-6)
    assert again.residual < 1e-8


def test_ecsv_has_a_second_file_that_may_be_missing(tmp_path, made):
    paths = made.save(tmp_path / "star.ecsv")
    assert [path.name for path in paths] == ["star.ecsv", "star_eos.ecsv"]
    table = QTable.read(paths[1], format="ascii.ecsv")
    assert table["density"].unit == u.g / u.cm**3
    paths[1].unlink()
    again = read_profile(paths[0])
    assert again.equation_of_state is None
    assert again.equation_of_state_table() is None
    for suffix in SUFFIXES:
        again.save(tmp_path / f"again{suffix}")
        assert read_profile(tmp_path / f"again{suffix}").equation_of_state is None


def test_fits_is_read_by_others(tmp_path, made):
    from astropy.io import fits

    made.save(tmp_path / "star.fits")
    with fits.open(tmp_path / "star.fits") as hdus:
        hdus.verify("exception")
        assert [hdu.name for hdu in hdus[1:]] == ["PROFILE", "EQUATION_OF_STATE", "ABOUT"]
        header = hdus[0].header
        assert header["M0"] == pytest.approx(1.2e5, rel=1e-11)
        assert (header["UNITS"], header["STABLE"], header["DEPLETE"]) == ("cgs", "marginal", 0.1)
        assert header["RESIDUAL"] == pytest.approx(made.residual, rel=1e-12)
        assert "No rotating configuration" in str(header["COMMENT"])
        assert hdus["PROFILE"].header["TCOMM1"] == "areal radius r"
    table = QTable.read(tmp_path / "star.fits", hdu="PROFILE")
    assert table["radius"].unit == u.cm
    assert u.allclose(table["pressure"], made["pressure"])
    assert u.allclose(table["internal_energy"], made["internal_energy"])


def test_hdf5_has_the_layout_it_promises(tmp_path, made):
    import h5py

    made.save(tmp_path / "star.h5")
    with h5py.File(tmp_path / "star.h5") as file:
        assert set(file) == {"profile", "equation_of_state", "star", "constants", "about"}
        assert set(file["profile"]) == set(made.columns)
        assert dict(file["profile/density"].attrs) == made.about["columns"]["density"]
        assert (file["star/rest_mass"][()], file["star/rest_mass"].attrs["unit"]) == (
            made.about["star"]["rest_mass"]["value"],
            "solMass",
        )
        assert file["constants/c"][()] == C
        assert (file.attrs["massdash_profile"], file.attrs["units"]) == (1, "cgs")
        assert (file.attrs["stability"], file.attrs["residual"]) == ("marginal", made.residual)


@pytest.mark.parametrize("name", ["star.txt", "star", "star.csv", ".h5"])
def test_a_name_tells_the_format(tmp_path, made, name):
    with pytest.raises(md.InputError, match=r"file name: .* give a name that ends in \.ecsv, \.fits, \.h5, \.hdf5"):
        made.save(tmp_path / name)
    with pytest.raises(md.InputError, match="file name"):
        read_profile(tmp_path / name)
    with pytest.raises(md.InputError, match="path: 3 is not allowed"):
        made.save(3)


@pytest.mark.parametrize("suffix", SUFFIXES)
def test_what_cannot_be_written_is_a_sentence_and_leaves_nothing(tmp_path, made, suffix):
    with pytest.raises(md.InputError, match=r"no/star.*: the file cannot be written .No such file"):
        made.save(tmp_path / "no" / f"star{suffix}")
    (tmp_path / f"star{suffix}").mkdir()
    with pytest.raises(md.InputError, match=r"the file cannot be written .not an ordinary file"):
        made.save(tmp_path / f"star{suffix}")
    assert [path.name for path in tmp_path.iterdir()] == [f"star{suffix}"]


def test_a_failed_second_file_leaves_the_old_ones(tmp_path, lantern, made):
    made.save(tmp_path / "star.ecsv")
    before = (tmp_path / "star.ecsv").read_bytes()
    (tmp_path / "star_eos.ecsv").unlink()
    (tmp_path / "star_eos.ecsv").mkdir()
    with pytest.raises(md.InputError, match="cannot be written"):
        md.profile(lantern, points=20).save(tmp_path / "star.ecsv")
    assert (tmp_path / "star.ecsv").read_bytes() == before
    assert len(list(tmp_path.iterdir())) == 2


def test_files_keep_their_permissions(tmp_path, made):
    path = tmp_path / "star.h5"
    path.write_bytes(b"old")
    path.chmod(0o640)
    made.save(path)
    assert path.stat().st_mode & 0o777 == 0o640


@pytest.mark.parametrize("suffix", SUFFIXES)
@pytest.mark.parametrize(
    "content", [b"", b"moon\n1\n", b"\x89HDF\r\n\x1a\n", b"SIMPLE  =                    T", b"\xff\xfe"]
)
def test_what_is_no_profile_is_a_sentence(tmp_path, suffix, content):
    path = tmp_path / f"star{suffix}"
    with pytest.raises(md.InputError, match=r"cannot be read as a profile .No such file"):
        read_profile(path)
    path.write_bytes(content)
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        with pytest.raises(md.InputError, match=r"^[^\n]*star[^\n]*$"):
            read_profile(path)


@pytest.mark.parametrize("suffix", SUFFIXES)
@pytest.mark.parametrize("share", [0.3, 0.7, 0.999])
def test_a_profile_cut_short_is_a_sentence(tmp_path, made, suffix, share):
    path, *_ = made.save(tmp_path / f"star{suffix}")
    content = path.read_bytes()
    path.write_bytes(content[: int(share * len(content))])
    with pytest.raises(md.InputError, match=r"^[^\n]*star[^\n]*$"):
        read_profile(path)


@pytest.mark.parametrize("suffix", SUFFIXES)
@pytest.mark.parametrize(
    ("columns", "about", "said"),
    [
        ({}, {"massdash_profile": 2}, "massdash_profile: 2 is not allowed; give the schema number 1"),
        ({}, {"units": "SI"}, "units: 'SI' is not allowed; give one of cgs, geometric"),
        ({"lapse": np.full(2000, np.nan)}, {}, "lapse: a column with gaps"),
        ({"lapse": None}, {}, "a table without lapse"),
        ({}, {"points": 2001}, "points: 2000 rows is not allowed; give 2001 rows"),
    ],
)
def test_a_damaged_profile_is_refused(tmp_path, made, suffix, columns, about, said):
    kept = {name: values for name, values in (made.columns | columns).items() if values is not None}
    Profile("cgs", kept, made.equation_of_state, made.about | about).save(tmp_path / f"star{suffix}")
    with pytest.raises(md.InputError, match=f"star{suffix}: .*{said}"):
        read_profile(tmp_path / f"star{suffix}")


# ------------------------------------------------------------------------------------------------ the command
def run(capsys, *arguments):
    status = cli.main(["profile", *arguments])
    said = capsys.readouterr()
    return status, said.out, said.err


def test_the_command_prints_ecsv(capsys, lantern):
    status, out, err = run(capsys, "builtin:lantern", "--points", "50")
    assert status == 0
    assert err.startswith("massdash: star at the onset of collapse, marginal: 50 points, constraint residual ")
    table = QTable.read(out.splitlines(), format="ascii.ecsv")
    assert np.array_equal(table["radius"].value, md.profile(lantern, points=50).columns["radius"])


@pytest.mark.parametrize("suffix", SUFFIXES)
def test_the_command_writes_files_and_lists_them(capsys, tmp_path, lantern, suffix):
    path = tmp_path / f"star{suffix}"
    options = ["--at", "ignition", "--units", "geometric", "--points", "60", "--spacing", "centre", "--deplete", "0.2"]
    status, out, err = run(capsys, "builtin:lantern", "-o", str(path), *options, "--pairs", "yes")
    assert (status, err.count("\n")) == (0, 1)
    assert sorted(out.split()) == sorted(str(path) for path in tmp_path.iterdir())
    wishes = {"units": "geometric", "points": 60, "spacing": "centre", "deplete": 0.2, "pairs": True}
    assert equal(read_profile(path).columns, md.profile(lantern, "ignition", **wishes).columns)


@pytest.mark.parametrize(
    ("option", "column", "value"),
    [(["--central-density", "0.5 g/cm3"], "density", 0.5), (["--central-temperature=1.2e8K"], "temperature", 1.2e8)],
)
def test_the_command_takes_a_chosen_centre(capsys, option, column, value):
    status, out, _ = run(capsys, "builtin:lantern", "--points", "20", *option)
    table = QTable.read(out.splitlines(), format="ascii.ecsv")
    assert (status, table[column][0].value) == (0, pytest.approx(value, rel=1e-10))


def test_the_command_says_warnings(capsys):
    status, _, err = run(capsys, "builtin:breaker", "--at", "ignition", "--points", "20")
    assert (status, err.splitlines()[0]) == (
        0,
        "massdash: warning: This equilibrium is unstable: it lies beyond the onset of collapse.",
    )


@pytest.mark.parametrize(
    ("arguments", "parts"),
    [
        ([], ["FILE"]),
        (["builtin:moon"], ["'moon'"]),
        (["builtin:lantern", "--at", "birth"], ["--at", "'birth'"]),
        (["builtin:lantern", "--at", "onset", "--central-density", "1 g/cm3"], ["not allowed with"]),
        (["builtin:lantern", "--central-density", "5"], ["central_density", "without a unit"]),
        (["builtin:lantern", "--points", "many"], ["--points", "'many'"]),
        (["builtin:lantern", "--points", "3"], ["points: 3"]),
        (["builtin:lantern", "--deplete", "half"], ["deplete: 'half'", "0 to 1"]),
        (["builtin:lantern", "--pairs", "some"], ["--pairs", "'some'"]),
        (["builtin:lantern", "-o", "star.txt"], ["file name: 'star.txt'", ".fits"]),
    ],
)
def test_the_command_refuses_bad_input(capsys, arguments, parts):
    status, out, err = run(capsys, *arguments)
    assert (status, out, err.count("\n")) == (2, "", 1)
    assert [part for part in parts if part not in err] == []


def test_a_missing_star_ends_the_command_with_1(capsys, tmp_path):
    (tmp_path / "small.yaml").write_text("massdash: 1\nmass: 100 solMass\n")
    status, out, err = run(capsys, str(tmp_path / "small.yaml"))
    assert (status, out) == (1, "")
    assert err.startswith("massdash: no star of 100 solMass at the onset of collapse was found: ")


def test_the_command_offers_what_the_library_does():
    assert (cli.STATES, cli.SPACINGS, cli.SYSTEMS) == (making.STATES, SPACINGS, SYSTEMS)
