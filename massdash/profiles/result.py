"""A star's profile as users hold it: columns in their units, the equation of state, and where all that comes from."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from massdash.constants import C
from massdash.physics import constraint
from massdash.profiles.columns import COLUMNS


@dataclass(frozen=True, eq=False)
class Profile:
    """A star from centre to surface.

    ``columns`` maps the names of ``massdash.profiles.COLUMNS`` to arrays (points,) in the system ``units``, "cgs" or
    "geometric"; ``equation_of_state`` likewise along the star's isentrope, or None when it was not read along.
    ``about`` is the header of its files: plain values, texts, lists and dicts of these. ``profile[name]`` is a column
    as an astropy Quantity.
    """

    units: str
    columns: Mapping[str, np.ndarray]
    equation_of_state: Mapping[str, np.ndarray] | None
    about: dict

    def __getitem__(self, name):
        from astropy import units as u

        return u.Quantity(self.columns[name], COLUMNS[name].unit_in(self.units))

    @cached_property
    def residual(self):
        """The largest scaled residual of the Hamiltonian constraint of these columns; see ``constraint.DEFINITION``."""
        light = C**2 if self.units == "cgs" else 1.0
        columns = self.columns
        rows = constraint.residual(columns["radius"], columns["mass"], columns["energy_density"] / light)
        return float(np.max(np.abs(rows)))

    @property
    def warnings(self):
        """Sentences about what this star is not."""
        return tuple(self.about["warnings"])

    def table(self):
        """The columns as a QTable, with ``about`` as its metadata."""
        return _table(self.columns, self.units, self.about)

    def equation_of_state_table(self):
        """The equation of state as a QTable; None when there is none."""
        return self.equation_of_state and _table(self.equation_of_state, self.units, self.about)

    def save(self, path):
        """Write the file or files of ``massdash.profiles.files.save``; returns their paths."""
        from massdash.profiles.files import save

        return save(self, path)


def _table(columns, system, about):
    from astropy.table import QTable

    table = QTable(meta=dict(about))
    for name, values in columns.items():
        table[name] = values  # a copy
        table[name].unit = COLUMNS[name].unit_in(system) or None
        table[name].info.description = COLUMNS[name].meaning
    return table
