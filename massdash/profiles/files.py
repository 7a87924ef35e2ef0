"""Profiles to files and back; the format is that of the file's name."""

import os
from pathlib import Path

import numpy as np

from massdash.errors import InputError, refuse
from massdash.profiles import ecsv, fits, hdf5
from massdash.profiles.about import SCHEMA
from massdash.profiles.columns import COLUMNS, MATTER, SYSTEMS
from massdash.profiles.result import Profile
from massdash.scenario.values import one_line, shown
from massdash.whole import write_whole

FORMATS = {".ecsv": ecsv, ".fits": fits, ".h5": hdf5, ".hdf5": hdf5}
_OPTIONAL = {"depleted_pressure"}


def save(profile, path):
    """Write a profile, all of its files or none, and return their paths: name.ecsv with name_eos.ecsv for the equation
    of state, or one .fits or .h5 file. Raises InputError when that cannot be done; what was there is then untouched."""
    path, module = place(path)
    files = module.files(profile, path)
    try:
        write_whole(files)
    except (OSError, ValueError) as error:
        raise _failed(path, "cannot be written", error) from None
    return list(files)[::-1]


def read_profile(path):
    """The Profile in a file; raises InputError for what is no such file."""
    path, module = place(path)
    try:
        found = module.read(path)
    except (OSError, ValueError, LookupError, TypeError, AttributeError) as error:
        raise _failed(path, "cannot be read as a profile", error) from None
    return _accepted(*found, _name(path))


def place(path):
    """(path, module of its format); InputError for a name without one."""
    try:
        path = Path(os.fsdecode(path))
    except TypeError:
        raise refuse("path", shown(path), "the path of a file") from None
    if path.suffix.lower() not in FORMATS:
        raise refuse("file name", shown(path.name), f"a name that ends in {', '.join(FORMATS)}")
    return path, FORMATS[path.suffix.lower()]


def _accepted(columns, matter, about, where):
    schema, units = about.get("massdash_profile"), about.get("units")
    if schema != SCHEMA:
        raise refuse("massdash_profile", shown(schema), f"the schema number {SCHEMA}", where=where)
    if units not in SYSTEMS:
        raise refuse("units", shown(units), f"one of {', '.join(SYSTEMS)}", where=where)
    columns = _ordered(columns, set(COLUMNS) - _OPTIONAL, where)
    if about.get("points") != len(columns["radius"]):
        raise refuse("points", f"{len(columns['radius'])} rows", f"{shown(about.get('points'))} rows", where=where)
    return Profile(units, columns, matter and _ordered(matter, set(MATTER), where), about)


def _ordered(columns, needed, where):
    """The columns in the order of the table, each a finite number in every row."""
    for name in sorted(needed - set(columns)):
        raise refuse("columns", f"a table without {name}", ", ".join(sorted(needed)), where=where)
    for name in sorted(set(columns) - set(COLUMNS)):
        raise refuse("columns", shown(name), ", ".join(COLUMNS), where=where)
    rows = columns["density"].shape
    for name, values in columns.items():
        if not (len(rows) == 1 and values.shape == rows and np.all(np.isfinite(values))):
            raise refuse(name, "a column with gaps", "a finite number in every row", where=where)
    return {name: columns[name] for name in COLUMNS if name in columns}


def _name(path):
    return str(path) if str(path).isprintable() else ascii(str(path))


def _failed(path, what, error):
    reason = one_line(str(getattr(error, "strerror", None) or error))
    where = _name(path)
    return InputError(f"{where}: the file {what} ({reason})", name="file", got=reason, where=where)
