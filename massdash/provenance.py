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
