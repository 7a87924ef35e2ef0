"""massdash: candidate supermassive stars, from birth to black hole.

The names below are all a script needs. Each is imported when it is first asked for, so that the command line's help
and a plain `import massdash` stay quick and load neither a drawing nor a widget library.
"""

from importlib import import_module

_HOMES = {
    "ComputationError": "massdash.errors",
    "InputError": "massdash.errors",
    "MassdashError": "massdash.errors",
    "NotAvailable": "massdash.errors",
    "Outcome": "massdash.outcome",
    "Profile": "massdash.profiles",
    "Scenario": "massdash.scenario",
    "__version__": "massdash.version",
    "builtin": "massdash.scenario",
    "builtin_names": "massdash.scenario",
    "evaluate": "massdash.model",
    "load": "massdash.scenario",
    "profile": "massdash.profiles",
    "read_profile": "massdash.profiles",
    "save": "massdash.scenario",
}

__all__ = [
    "ComputationError",
    "InputError",
    "MassdashError",
    "NotAvailable",
    "Outcome",
    "Profile",
    "Scenario",
    "__version__",
    "builtin",
    "builtin_names",
    "evaluate",
    "load",
    "profile",
    "read_profile",
    "save",
]


def __getattr__(name):
    if name not in _HOMES:
        raise AttributeError(f"module 'massdash' has no attribute {name!r}")
    value = globals()[name] = getattr(import_module(_HOMES[name]), name)
    return value


def __dir__():
    return sorted({*globals(), *__all__})
