"""Profiles as HDF5.

/profile/NAME, /equation_of_state/NAME   columns, with the attributes unit, cgs_per_unit and meaning
/star/NAME, /constants/NAME              single numbers, with the attribute unit
/about                                   the whole header as JSON
attributes of /                          massdash_profile (the schema), program, units, state, stability, residual
"""

import io
import json

import numpy as np

from massdash.profiles.columns import described


def files(profile, path):
    """{path: bytes} of the one file."""
    import h5py

    buffer, about = io.BytesIO(), profile.about
    with h5py.File(buffer, "w") as file:
        for name in ("massdash_profile", "program", "units", "state"):
            file.attrs[name] = about[name]
        file.attrs["stability"] = about["star"]["stability"]
        file.attrs["residual"] = about["constraint"]["residual"]
        file["about"] = json.dumps(about)
        for group, columns in (("profile", profile.columns), ("equation_of_state", profile.equation_of_state)):
            if columns is not None:
                _write_columns(file.create_group(group), columns, profile.units)
        for group in ("star", "constants"):
            _write_numbers(file.create_group(group), about[group])
    return {path: buffer.getvalue()}


def read(path):
    """(columns, equation of state or None, header)."""
    import h5py

    with h5py.File(io.BytesIO(path.read_bytes()), "r") as file:
        about = json.loads(file["about"].asstr()[()])
        matter = _columns(file["equation_of_state"]) if "equation_of_state" in file else None
        return _columns(file["profile"]), matter, about


def _columns(group):
    return {name: np.asarray(group[name], float) for name in group}


def _write_columns(group, columns, system):
    for name, about in described(columns, system).items():
        group[name] = columns[name]
        group[name].attrs.update(about)


def _write_numbers(group, rows):
    for name, row in rows.items():
        if isinstance(row, dict):
            group[name] = row["value"]
            group[name].attrs["unit"] = row["unit"]
