"""The version of this program: that of the installed distribution, or of the checkout it runs from."""

import tomllib
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path

DISTRIBUTION = "massdash-stars"


def _of_checkout():
    project = Path(__file__).parent.parent / "pyproject.toml"
    try:
        return tomllib.loads(project.read_text(encoding="utf-8"))["project"]["version"]
    except (OSError, KeyError, tomllib.TOMLDecodeError):
        return "unknown"


def find_version(distribution=DISTRIBUTION):
    """The version as text; "unknown" when neither a distribution nor a checkout says it."""
    try:
        return version(distribution)
    except PackageNotFoundError:
        return _of_checkout()


__version__ = find_version()
