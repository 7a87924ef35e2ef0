"""The command line: results on stdout, one sentence on stderr, exit status 0, 2, 1 or 130."""

import io
import json
import os
import subprocess
import sys
from pathlib import Path
from types import SimpleNamespace

import pytest

import massdash
from massdash import builtin, load
from massdash.cli import main
from massdash.errors import ComputationError

ROOT = Path(massdash.__file__).parents[1]
COMMANDS = ("dashboard", "serve", "publish", "evaluate", "survey", "profile", "figures")


def run(capsys, *arguments):
    status = main(list(arguments))
    said = capsys.readouterr()
    return status, said.out, said.err


def refused(capsys, *arguments):
    """The one sentence on stderr of a command line that is bad input."""
    status, out, err = run(capsys, *arguments)
    assert (status, out) == (2, "")
    assert err.startswith("massdash: ")
    assert err.count("\n") == 1
    return err.removeprefix("massdash: ").rstrip("\n")


def process(*arguments, **options):
    """The real program, as a started process."""
    plain = {"PYTHONPATH": str(ROOT), "PYTHONUNBUFFERED": ""}  # buffered, as for most users
    environment = os.environ | plain | options.pop("env", {})
    command = [sys.executable, "-m", "massdash", *arguments]
    return subprocess.Popen(
        command,
        stdout=options.pop("stdout", subprocess.PIPE),
        stderr=subprocess.PIPE,
        text=True,
        env=environment,
        **options,
    )


def finished(*arguments, **options):
    started = process(*arguments, **options)
    out, err = started.communicate(timeout=60)
    return started.returncode, out, err


@pytest.fixture
def lantern(tmp_path):
    path = tmp_path / "lantern.yaml"
    massdash.save(builtin("lantern"), path)
    return str(path)


def test_help_names_every_command(capsys):
    with pytest.raises(SystemExit) as ended:
        main(["--help"])
    assert ended.value.code == 0
    said = capsys.readouterr().out
    assert [name for name in COMMANDS if name not in said] == []


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_has_help(capsys, command):
    with pytest.raises(SystemExit) as ended:
        main([command, "--help"])
    assert ended.value.code == 0
    assert f"massdash {command}" in capsys.readouterr().out


def test_version(capsys):
    assert run(capsys, "--version") == (0, f"massdash {massdash.__version__}\n", "")


@pytest.mark.parametrize("command", ["serve", "publish", "survey"])
@pytest.mark.parametrize("rest", [[], ["a.yaml", "--locked", "-o", "x"]])
def test_commands_of_later_exit_with_1_and_a_sentence(capsys, command, rest):
    assert run(capsys, command, *rest) == (1, "", f"massdash: the command {command} is not built yet\n")


@pytest.mark.parametrize(
    ("arguments", "parts"),
    [
        ([], ["no command"]),
        (["evalute"], ["'evalute'", "evaluate"]),
        (["--verbose"], ["--verbose"]),
        (["evaluate"], ["FILE"]),
        (["evaluate", "a", "b"], ["unrecognized arguments: b"]),
        (["evaluate", "none.yaml"], ["none.yaml: the file cannot be read"]),
        (["evaluate", "."], [".: the file cannot be read"]),
        (["evaluate", "a\nb"], ["the file cannot be read"]),
        (["evaluate", "builtin:moon"], ["'moon'", "breaker, ember, hearth, lantern"]),
        (["evaluate", "builtin:ember", "--format", "xml"], ["--format", "'xml'", "'json'"]),
        (["evaluate", "builtin:ember", "--form", "json"], ["--form"]),
        (["figures"], ["FILE"]),
        (["figures", "builtin:ember", "--format", "gif"], ["--format", "'gif'", "'svg'"]),
        (["figures", "builtin:ember", "--width", "wide"], ["--width", "'wide'", "single, double"]),
        (["figures", "builtin:ember", "--width", "nan"], ["nan", "40", "400"]),
        (["figures", "builtin:ember", "-o", "/dev/null/place"], ["/dev/null/place", "can be made"]),
        (["dashboard", "--port", "x"], ["--port", "'x'"]),
        (["dashboard", "builtin:moon"], ["'moon'", "lantern"]),
        (["dashboard", "none.yaml"], ["none.yaml"]),
    ],
)
def test_bad_input_is_refused_in_one_sentence(capsys, arguments, parts):
    said = refused(capsys, *arguments)
    assert [part for part in parts if part not in said] == []


def test_a_broken_file_is_refused_with_file_key_value_and_allowed(capsys, tmp_path):
    path = tmp_path / "star.yaml"
    path.write_text("massdash: 1\nmass: 1e9 solMass\n")
    assert (
        refused(capsys, "evaluate", str(path)) == f"{path}: mass: '1e9 solMass' is not allowed; give 100 to 1e8 solMass"
    )


def test_evaluate_prints_a_report(capsys, lantern):
    status, out, err = run(capsys, "evaluate", lantern)
    assert (status, err) == (0, "")
    assert out.startswith("Lantern")
    assert out == run(capsys, "evaluate", "builtin:lantern")[1]


def test_evaluate_prints_json(capsys, lantern):
    status, out, err = run(capsys, "evaluate", lantern, "--format", "json")
    assert (status, err) == (0, "")
    assert massdash.Scenario(**json.loads(out)["scenario"]) == load(lantern)


@pytest.mark.parametrize(("form", "start"), [("ecsv", "# %ECSV 1.0\n"), ("latex", "% massdash ")])
def test_evaluate_prints_tables(capsys, lantern, form, start):
    status, out, err = run(capsys, "evaluate", "--format", form, lantern)
    assert (status, err) == (0, "")
    assert out.startswith(start)
    assert "onset" in out


def test_evaluate_reads_standard_input(capsys, monkeypatch):
    def feed(data):
        monkeypatch.setattr(sys, "stdin", SimpleNamespace(buffer=io.BytesIO(data)))

    feed(b"massdash: 1\nlabel: Piped\n")
    assert run(capsys, "evaluate", "-")[1].startswith("Piped")
    feed(b"massdash: 2\n")
    assert refused(capsys, "evaluate", "-").startswith("standard input: massdash: '2'")
    feed(b"#" * (2**20 + 1))
    assert "more than 1 MiB" in refused(capsys, "evaluate", "-")


def test_a_failed_computation_exits_with_1(capsys, monkeypatch):
    def fail(scenario):
        raise ComputationError("no answer")

    monkeypatch.setattr("massdash.model.evaluate", fail)
    assert run(capsys, "evaluate", "builtin:ember") == (1, "", "massdash: no answer\n")


def test_ctrl_c_is_quiet(capsys, monkeypatch):
    def stop(scenario):
        raise KeyboardInterrupt

    monkeypatch.setattr("massdash.model.evaluate", stop)
    assert run(capsys, "evaluate", "builtin:ember") == (130, "", "")


def test_dashboard_hands_over_its_files_and_options(capsys, monkeypatch, lantern):
    calls = []

    def run_dashboard(files, *, port, open_browser):
        calls.append((files, port, open_browser))
        return 0

    monkeypatch.setattr("massdash.app.run_dashboard", run_dashboard)
    assert run(capsys, "dashboard")[0] == 0
    assert run(capsys, "dashboard", lantern, "builtin:ember", "--port", "8000", "--no-browser")[0] == 0
    (plain, (files, port, open_browser)) = calls
    assert plain == ([], None, True)
    assert (files[0], port, open_browser) == (lantern, 8000, False)
    assert load(files[1]) == builtin("ember")


def test_figures_are_written_and_listed(capsys, tmp_path):
    status, out, err = run(
        capsys,
        "figures",
        "builtin:lantern",
        "-o",
        str(tmp_path),
        "--format",
        "svg",
        "--format",
        "svg",
        "--width",
        "100",
    )
    assert status == 0
    assert err.startswith("massdash: drawing ")
    written = out.splitlines()
    assert len(written) == len(set(written))
    assert sorted(written) == sorted(str(path) for path in tmp_path.iterdir())
    assert {path.suffix for path in tmp_path.iterdir()} == {".svg", ".ecsv"}


def test_figures_at_a_named_width_go_to_this_directory(capsys, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    assert run(capsys, "figures", "builtin:ember", "--width", "double")[0] == 0
    assert {path.suffix for path in tmp_path.iterdir()} == {".pdf", ".ecsv"}


def test_the_program_as_a_process():
    status, out, err = finished("evaluate", "builtin:lantern", "--format", "json")
    assert (status, err) == (0, "")
    assert json.loads(out)["scenario"]["label"] == "Lantern"
    status, out, err = finished("evaluate", "none.yaml")
    assert (status, out) == (2, "")
    assert err == "massdash: none.yaml: the file cannot be read (No such file or directory)\n"


@pytest.mark.parametrize("arguments", [["evaluate", "builtin:lantern"], ["--version"]])
def test_a_reader_that_leaves_is_no_failure(arguments):
    started = process(*arguments)
    started.stdout.close()
    assert started.wait(timeout=60) == 0
    assert started.stderr.read() == ""
    started.stderr.close()


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="needs the device that is always full")
@pytest.mark.parametrize("arguments", [["evaluate", "builtin:lantern"], ["--version"]])
def test_a_full_disk_is_a_sentence(arguments):
    with open("/dev/full", "w") as full:
        status, _, err = finished(*arguments, stdout=full)
    assert (status, err) == (1, "massdash: No space left on device\n")


def test_a_narrow_terminal_encoding_is_no_failure():
    plain = {"PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}
    status, out, err = finished("evaluate", "builtin:lantern", env=plain)
    assert (status, err) == (0, "")
    assert out.isascii()


def test_what_programs_read_is_utf8_on_any_terminal(tmp_path):
    massdash.save(massdash.Scenario(label="Läntern ★"), tmp_path / "a.yaml")
    plain = {"PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}
    started = process("evaluate", str(tmp_path / "a.yaml"), "--format", "latex", env=plain, encoding="utf-8")
    out, err = started.communicate(timeout=60)
    assert (started.returncode, err) == (0, "")
    assert "Läntern ★" in out


def test_standard_output_may_be_closed(monkeypatch):
    monkeypatch.setattr(sys, "stdout", None)
    assert main(["evaluate", "builtin:lantern"]) == 0
