"""The built-in scenarios: four stars of the invented Night Harbour survey, one file each in data/scenarios."""

from functools import cache
from importlib.resources import files

from massdash.errors import refuse
from massdash.scenario.values import shown
from massdash.scenario.yaml_file import from_bytes

DEFAULT_NAME = "lantern"


@cache
def builtin_names():
    """Names of the built-in scenarios, in alphabetical order."""
    return tuple(sorted(file.name.removesuffix(".yaml") for file in _folder().iterdir() if file.name.endswith(".yaml")))


def builtin(name):
    """The built-in scenario of this name. Raises InputError for any other name."""
    return from_bytes(builtin_path(name).read_bytes(), where=f"{name}.yaml")


def builtin_path(name):
    """The file of a built-in scenario. Raises InputError for any other name."""
    if name not in builtin_names():
        raise refuse("built-in scenario", shown(name), f"one of {', '.join(builtin_names())}")
    return _folder() / f"{name}.yaml"


def _folder():
    return files("massdash.data") / "scenarios"
