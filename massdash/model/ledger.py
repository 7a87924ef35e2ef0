"""The book in which the stages write their results, once each."""

import math

from massdash.errors import ComputationError
from massdash.outcome import Entry
from massdash.quantities import QUANTITIES


class Ledger:
    """Entries by name, and the warnings that came up."""

    def __init__(self):
        self.entries = {}
        self.warnings = []

    def put(self, name, value, method, source, *, note="", other=None):
        """Write a value; ``other``, from a second method, becomes its low or high bound.

        Raises ComputationError when the value is not finite: no stage may pass that on.
        """
        value = float(value)
        if not math.isfinite(value):
            raise ComputationError(f"{name}: no finite value was found for this star")
        low = high = None
        if other is not None:
            low, high = (float(other), None) if other < value else (None, float(other))
        self.entries[name] = Entry(value, QUANTITIES[name].unit, method, source, note, low, high)

    def leave(self, names, note, method="", source=""):
        """Write entries without a value and the reason."""
        for name in [names] if isinstance(names, str) else names:
            self.entries[name] = Entry(None, QUANTITIES[name].unit, method, source, note)

    def warn(self, sentence):
        """Add a warning unless it is there already."""
        if sentence not in self.warnings:
            self.warnings.append(sentence)
