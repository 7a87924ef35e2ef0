"""The dashboard's front door: ``massdash dashboard [FILE...]``."""

import json
import os
import sys
from pathlib import Path

from .errors import InputError, refuse

PACKAGE = Path(__file__).resolve().parent
FILES_VARIABLE = "MASSDASH_OPEN"

# What a kernel does before its page asks for anything, so that the page finds all that is slow the first time done.
WARM_UP = "; ".join(
    [
        "import massdash.panels",
        "from massdash import evaluate",
        "from massdash.charts import CHARTS",
        "from massdash.scenario import DEFAULT_NAME, builtin",
        "outcome = evaluate(builtin(DEFAULT_NAME)); [chart(outcome) for chart in CHARTS.values()]",
    ]
)


def run_dashboard(files=(), *, port=None, open_browser=True):
    """Serve the dashboard to this machine alone until Ctrl-C; print its address on stdout.

    ``files`` are scenario files to start with, checked before anything is started. ``port`` None takes a free one.
    A browser is opened only where there is a screen. Returns the exit status 0; raises InputError for a bad file or
    port and for a port that is in use.
    """
    paths = [_checked(name) for name in files]
    from .door.address import bind

    sockets = bind(port)
    from .door.server import serve

    serve(
        dashboard_notebook(),
        sockets,
        environment=kernel_environment(paths),
        first_line=WARM_UP,
        open_browser=open_browser and has_screen(),
    )
    return 0


def dashboard_notebook():
    """Path of the dashboard's notebook: inside the installed package, or at top level of a checkout."""
    for folder in (PACKAGE / "notebooks", PACKAGE.parent / "notebooks"):
        if (folder / "dashboard.ipynb").is_file():
            return folder / "dashboard.ipynb"
    raise InputError("this installation lacks notebooks/dashboard.ipynb; install massdash again")


def has_screen():
    """Whether opening a browser can show anything to anybody."""
    if sys.platform in ("darwin", "win32"):
        return True
    return bool(os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY"))


def _checked(name):
    from .scenario import load

    path = Path(name).resolve()
    if not path.is_file():
        raise refuse("FILE", f"'{name}'", "an existing scenario file")
    load(path)
    return str(path)


def kernel_environment(paths):
    """What a kernel of the dashboard is told. In a checkout that is not installed it must also find the package."""
    told = {FILES_VARIABLE: json.dumps(paths)}
    if (PACKAGE.parent / "pyproject.toml").is_file():
        others = [entry for entry in (os.environ.get("PYTHONPATH"),) if entry]
        told["PYTHONPATH"] = os.pathsep.join([str(PACKAGE.parent), *others])
    return told
