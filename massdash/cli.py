"""The command line. Results go to stdout, progress and refusals to stderr.

Exit status: 0 done, 2 bad input, 1 failed computation, 130 stopped by Ctrl-C. Nothing heavy is imported at the top, so
that the help comes at once.
"""

import argparse
import os
import shutil
import sys

from massdash.errors import InputError, MassdashError, refuse

FORMATS = ("text", "json", "ecsv", "latex")
FIGURE_FORMATS = ("pdf", "svg", "png")
STATES, SPACINGS, SYSTEMS = ("ignition", "onset"), ("uniform", "centre", "surface", "both"), ("cgs", "geometric")
_PROFILE_WISHES = ("at", "central_density", "central_temperature", "points", "spacing", "units", "deplete")
BUILTIN = "builtin:"
_FILE_HELP = f"a scenario file, {BUILTIN}NAME for a built-in scenario, or - for standard input"
_LATER = {
    "serve": "serve a read-only view of scenarios to collaborators",
    "publish": "write scenarios as a static page",
    "survey": "evaluate many scenarios at once",
}


class _Parser(argparse.ArgumentParser):
    """Refuses in one sentence, without the usage in front of it."""

    def error(self, message):
        raise InputError(f"{message}; {self.prog} --help shows what can be given")


def main(arguments=None):
    """Run one command line (a list of words, by default this process's own) and return the exit status."""
    _reconfigure(sys.stdout, sys.stderr, errors="backslashreplace")  # a sign that a terminal lacks is no failure
    try:
        status = _run(arguments)
        print(end="", flush=True)
        return status
    except MassdashError as error:
        _say(error)
        return 2 if isinstance(error, InputError) else 1
    except KeyboardInterrupt:
        return 130
    except BrokenPipeError:
        _discard_output()
        return 0  # whoever reads has seen enough
    except OSError as error:
        _say(": ".join(filter(None, [error.filename, error.strerror or str(error)])))
        _discard_output()
        return 1


def _run(arguments):
    options, unknown = _parser().parse_known_args(arguments)
    if unknown and options.command not in _LATER:
        raise InputError(f"unrecognized arguments: {' '.join(unknown)}; massdash --help shows what can be given")
    if options.version:
        from massdash.version import __version__

        print(f"massdash {__version__}")
        return 0
    if options.command is None:
        raise InputError("no command given; massdash --help lists the commands")
    return options.run(options)


def _dashboard(options):
    from massdash.app import run_dashboard

    files = [_path_of(name) for name in options.files]
    return run_dashboard(files, port=options.port, open_browser=not options.no_browser)


def _evaluate(options):
    outcome = _outcome(options.file)
    if options.format != "text":
        _reconfigure(sys.stdout, encoding="utf-8")  # what programs read does not depend on the terminal
    print(_written(outcome, options.format), end="")
    return 0


def _figures(options):
    from massdash.charts import all_charts
    from massdash.render.export import WIDTHS, export_figures, provenance

    wishes = {"formats": tuple(dict.fromkeys(options.format or ["pdf"])), "width_mm": _width(options.width, WIDTHS)}
    _make_directory(options.output)
    export_figures((), options.output, **wishes, provenance={})  # bad wishes are refused before anything is computed
    outcome = _outcome(options.file)
    charts = all_charts(outcome)
    _say(f"drawing {len(charts)} figures")
    for path in export_figures(charts, options.output, **wishes, provenance=provenance(outcome)):
        print(path)
    return 0


def _make_directory(name):
    from massdash.errors import refuse

    try:
        os.makedirs(name, exist_ok=True)
    except OSError as error:
        allowed = "a directory that exists or can be made"
        raise refuse("directory", f"'{name}' ({error.strerror})", allowed) from error


def _profile(options):
    from massdash.profiles import profile
    from massdash.profiles.ecsv import as_text
    from massdash.profiles.files import place

    if options.output is not None:
        place(options.output)  # a bad name is refused before anything is computed
    wishes = {name: getattr(options, name) for name in _PROFILE_WISHES if getattr(options, name) is not None}
    wishes |= {} if options.pairs is None else {"pairs": options.pairs == "yes"}
    made = profile(_scenario(options.file), **wishes)
    for sentence in made.warnings:
        _say(f"warning: {sentence}")
    stability, points = made.about["star"]["stability"], made.about["points"]
    _say(f"star {made.about['state']}, {stability}: {points} points, constraint residual {made.residual:.1e}")
    if options.output is None:
        _reconfigure(sys.stdout, encoding="utf-8")
        print(as_text(made.table()), end="")
        return 0
    for path in made.save(options.output):
        print(path)
    return 0


def _not_built(options):
    _say(f"the command {options.command} is not built yet")
    return 1


def _outcome(name):
    from massdash.model import evaluate

    return evaluate(_scenario(name))


def _scenario(name):
    from massdash import scenario

    if name == "-":
        from massdash.scenario.yaml_file import LARGEST

        return scenario.from_bytes(sys.stdin.buffer.read(LARGEST + 1), where="standard input")
    if name.startswith(BUILTIN):
        return scenario.builtin(name.removeprefix(BUILTIN))
    return scenario.load(name)


def _path_of(name):
    """The path of a scenario file, also of a built-in one."""
    if not name.startswith(BUILTIN):
        return name
    from massdash.scenario.builtin import builtin_path

    return str(builtin_path(name.removeprefix(BUILTIN)))


def _written(outcome, form):
    from massdash import report

    if form == "text":
        return report.as_text(outcome, width=min(shutil.get_terminal_size().columns, 120))
    if form == "latex":
        from massdash.latex import as_latex

        return as_latex(outcome)
    return report.as_json(outcome) if form == "json" else report.as_ecsv(outcome)


def _width(text, named):
    """Millimetres from a number or a name; the exporter knows which numbers are allowed."""
    if text in named:
        return named[text]
    try:
        return float(text)
    except ValueError:
        raise refuse("--width", repr(text), f"a number of mm, or one of {', '.join(named)}") from None


def _say(sentence):
    print("massdash:", " ".join(str(sentence).split()), file=sys.stderr)


def _reconfigure(*streams, **settings):
    """Set up standard streams; those that are closed, or are no text files of the system, stay as they are."""
    for stream in streams:
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(**settings)


def _discard_output():
    """Keep Python from complaining at exit that what is left in stdout cannot be written."""
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def _parser():
    parser = _Parser(
        prog="massdash",
        allow_abbrev=False,
        description="Candidate supermassive stars: structure, stability, life and fate.",
        epilog="Exit status: 0 done, 2 bad input, 1 failed computation.",
    )
    parser.add_argument("--version", action="store_true", help="print the version and end")
    commands = parser.add_subparsers(dest="command", metavar="COMMAND", title="commands")
    _add_dashboard(commands)
    _add_evaluate(commands)
    _add_figures(commands)
    _add_profile(commands)
    for name, what in _LATER.items():
        command = _add(commands, name, _not_built, f"{what} (not built yet)")
        command.add_argument("words", nargs="*", metavar="...", help="not read yet")
    return parser


def _add(commands, name, run, what):
    command = commands.add_parser(name, help=what, description=what[0].upper() + what[1:] + ".", allow_abbrev=False)
    command.set_defaults(run=run)
    return command


def _add_dashboard(commands):
    command = _add(commands, "dashboard", _dashboard, "open the live dashboard")
    command.add_argument("files", nargs="*", metavar="FILE", help=f"a scenario file, or {BUILTIN}NAME")
    command.add_argument("--port", type=int, metavar="N", help="port on this machine; by default a free one")
    command.add_argument("--no-browser", action="store_true", help="only print the address")


def _add_evaluate(commands):
    command = _add(commands, "evaluate", _evaluate, "print every quantity of one scenario")
    command.add_argument("file", metavar="FILE", help=_FILE_HELP)
    command.add_argument(
        "--format", choices=FORMATS, default="text", help="text to read, or for programs; default text"
    )


def _add_figures(commands):
    command = _add(commands, "figures", _figures, "write every figure of one scenario, with its data")
    command.add_argument("file", metavar="FILE", help=_FILE_HELP)
    command.add_argument("-o", "--output", metavar="DIR", default=".", help="an existing directory; default this one")
    command.add_argument(
        "--format", choices=FIGURE_FORMATS, action="append", help="may be given more than once; default pdf"
    )
    command.add_argument(
        "--width", metavar="MM", default="single", help="in mm, or single or double for a journal's columns"
    )


def _add_profile(commands):
    command = _add(commands, "profile", _profile, "write a star from centre to surface, ready to start its collapse")
    command.add_argument("file", metavar="FILE", help=_FILE_HELP)
    which = command.add_mutually_exclusive_group()
    which.add_argument("--at", choices=STATES, help="which equilibrium of the star's rest mass; default onset")
    which.add_argument("--central-density", metavar="X", help='the one with this rest-mass density, "0.5 g/cm3"')
    which.add_argument("--central-temperature", metavar="X", help='the one with this temperature, "1e8 K"')
    kinds = ".ecsv (with a second file for the equation of state), .fits or .h5"
    command.add_argument("-o", "--output", metavar="OUT", help=f"file to write, {kinds}; default ECSV on stdout")
    command.add_argument("--units", choices=SYSTEMS, help="cgs, or G = c = Msun = 1; default cgs")
    command.add_argument("--points", type=int, metavar="N", help="from centre to surface, 20 to 100000; default 2000")
    command.add_argument("--spacing", choices=SPACINGS, help="where points lie closest; default both")
    command.add_argument("--deplete", metavar="F", help="add a column with this fraction of the pressure taken off")
    command.add_argument(
        "--pairs", choices=("yes", "no"), help="with electron-positron pairs or not; default above 5e8 K at the centre"
    )
