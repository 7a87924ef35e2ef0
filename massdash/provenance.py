"""Where an exported result comes from: what every file that leaves the program carries along."""

from massdash.constants import VERSION as CONSTANTS
from massdash.version import __version__


def provenance(outcome):
    """Plain values for file headers: program, constants and data with their versions, scenario fields, sources."""
    return {
        "program": f"massdash {__version__}",
        "constants": CONSTANTS,
        "data": f"as shipped with massdash {__version__}",
        "scenario": outcome.scenario.written(),
        "sources": sources(outcome),
    }


def sources(outcome):
    """The sources of all quantities that have a value, each once, in order of first use."""
    used = (entry.source for entry in outcome.entries.values() if entry.value is not None and entry.source)
    return list(dict.fromkeys(used))


def numbered_methods(outcome):
    """Each pair (method, source) behind a value, with its number from 1 on, in order of first use."""
    used = ((entry.method, entry.source) for entry in outcome.entries.values() if entry.value is not None)
    return {pair: index for index, pair in enumerate(dict.fromkeys(used), start=1)}


def method_line(pair):
    """Method and source of one such pair in one line."""
    return "; ".join(filter(None, pair))
