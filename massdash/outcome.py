"""What ``evaluate`` returns: every quantity with its unit, method, source and spread, the fate, and the verdict."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from types import MappingProxyType

from massdash.errors import NotAvailable
from massdash.quantities import QUANTITIES

#: Verdicts on the birth of the star.
BIRTHS = ("single_star", "cluster", "unclear", "not_asked")

#: Fates of the star.
FATES = (
    "fragments",
    "core_collapse",
    "pulsational_pair_instability",
    "pair_instability_supernova",
    "pair_collapse",
    "helium_explosion",
    "collapse_in_helium_burning",
    "collapse_in_hydrogen_burning",
    "collapse_before_ignition",
    "thermonuclear_explosion",
    "mass_shedding",
    "undecided",
)


@dataclass(frozen=True)
class Entry:
    """One quantity: ``value`` in ``unit``, or None with a ``note`` that says why; ``low`` and ``high`` bound a spread.

    ``method`` says how it was computed and where that holds, ``source`` names the paper behind the method.
    """

    value: float | None
    unit: str
    method: str = ""
    source: str = ""
    note: str = ""
    low: float | None = None
    high: float | None = None


@dataclass(frozen=True, eq=False, repr=False)
class Outcome:
    """The answer for one scenario. ``outcome[name]`` is an astropy Quantity; ``entries`` holds all that is known.

    ``headline`` is the verdict in words, ``birth`` and ``fate`` are one of ``BIRTHS`` and ``FATES``, ``warnings`` are
    sentences about where the methods stop holding. ``workings`` are the stages' own results, for charts.
    """

    scenario: object
    entries: Mapping[str, Entry]
    birth: str
    fate: str
    headline: str
    warnings: tuple[str, ...] = field(default_factory=tuple)
    workings: object = None

    def __post_init__(self):
        object.__setattr__(self, "entries", MappingProxyType({name: self.entries[name] for name in QUANTITIES}))

    def __getitem__(self, name):
        """The quantity as an astropy Quantity; KeyError for an unknown name, NotAvailable when it has no value."""
        from astropy import units as u

        entry = self.entries[name]
        if entry.value is None:
            raise NotAvailable(f"{name} has no value here: {entry.note}")
        return u.Quantity(entry.value, u.Unit(entry.unit))

    def __contains__(self, name):
        return name in self.entries

    def __iter__(self):
        return iter(self.entries)

    def keys(self):
        """Names of all quantities, in order along the chain."""
        return self.entries.keys()

    def __repr__(self):
        return f"<Outcome: {self.headline}>"

    def __reduce__(self):
        parts = (self.birth, self.fate, self.headline, self.warnings, self.workings)
        return Outcome, (self.scenario, dict(self.entries), *parts)

    def number(self, name):
        """The value in the quantity's own unit, or None."""
        return self.entries[name].value

    def table(self):
        """All quantities as a QTable of quantity, value, low, high, unit, method, source and note, gaps masked."""
        import numpy as np
        from astropy.table import MaskedColumn, QTable

        entries = list(self.entries.values())
        table = QTable({"quantity": list(self.entries)})
        for name in ("value", "low", "high"):
            values = [getattr(entry, name) for entry in entries]
            missing = [value is None for value in values]
            filled = np.array([0.0 if value is None else value for value in values])
            table[name] = MaskedColumn(filled, mask=missing)
        for name in ("unit", "method", "source", "note"):
            table[name] = [getattr(entry, name) for entry in entries]
        from massdash.provenance import provenance

        verdict = {"birth": self.birth, "fate": self.fate, "warnings": list(self.warnings)}
        table.meta.update(provenance(self), **verdict)
        return table
