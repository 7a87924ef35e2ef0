"""Profiles as ECSV: the profile in one file, the equation of state in a second one beside it, the header in both."""

import io

import numpy as np

BESIDE = "_eos"  # is added to the name of the second file


def companion(path):
    """Where the equation of state of a profile at ``path`` stands."""
    return path.with_name(f"{path.stem}{BESIDE}{path.suffix}")


def as_text(table):
    """A QTable as the text of an ECSV file; every number is exact."""
    text = io.StringIO()
    table.write(text, format="ascii.ecsv")
    return text.getvalue()


def files(profile, path):
    """{path: bytes} of both files, that of the profile last."""
    tables = {companion(path): profile.equation_of_state_table(), path: profile.table()}
    return {place: as_text(table).encode() for place, table in tables.items() if table is not None}


def read(path):
    """(columns, equation of state or None when its file is not there, header)."""
    columns, about = _read(path)
    beside = companion(path)
    return columns, _read(beside)[0] if beside.is_file() else None, about


def _read(path):
    from astropy.table import Table

    table = Table.read(path.read_text(encoding="utf-8").splitlines(), format="ascii.ecsv")
    return {name: np.asarray(table[name], float) for name in table.colnames}, dict(table.meta)
