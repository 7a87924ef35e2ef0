"""An outcome as text for people, and as JSON and ECSV for programs."""

import io
import json
import textwrap
from itertools import groupby

from massdash.errors import ComputationError
from massdash.provenance import method_line, numbered_methods, provenance
from massdash.quantities import QUANTITIES, STAGES

SCHEMA = 1
_NAME = 27  # columns for names of quantities; longer ones push their value to the right
_INDENT = "  "


def as_text(outcome, *, width=100):
    """A report to read: verdict, warnings, quantities by stage, then the numbered methods with their sources.

    Lines have at most ``width`` characters where the words allow it. Numbers are written 1.2e54, so that they can be
    copied into other programs.
    """
    about = provenance(outcome)
    methods = numbered_methods(outcome)
    parts = [_wrapped(outcome.headline, width)]
    parts += [_wrapped(f"Warning: {sentence}", width, rest=_INDENT) for sentence in outcome.warnings]
    parts += ["", f"birth: {outcome.birth}", f"fate: {outcome.fate}"]
    for stage, names in groupby(outcome.entries, key=lambda name: QUANTITIES[name].stage):
        parts += ["", STAGES[stage], *_stage({name: outcome.entries[name] for name in names}, methods, width)]
    parts += ["", "Methods and sources"]
    parts += [_item(f"[{index}] {method_line(pair)}", width) for pair, index in methods.items()]
    parts += ["", _wrapped(f"{about['program']}, constants {about['constants']}", width)]
    return "\n".join(parts) + "\n"


def as_json(outcome):
    """The outcome as a JSON text; numbers are exact. Raises ComputationError rather than write what is no number."""
    content = {
        "schema": SCHEMA,
        "scenario": outcome.scenario.written(),
        "quantities": {name: _plain(entry) for name, entry in outcome.entries.items()},
        "birth": outcome.birth,
        "fate": outcome.fate,
        "warnings": list(outcome.warnings),
    }
    try:
        return json.dumps(content, indent=2, allow_nan=False) + "\n"
    except ValueError:
        raise ComputationError("the outcome holds a value that is not a finite number") from None


def as_ecsv(outcome):
    """The outcome's table as ECSV (astropy), with scenario, versions and sources in its header; numbers are exact."""
    table = outcome.table()
    table.meta = {
        **provenance(outcome),
        "birth": outcome.birth,
        "fate": outcome.fate,
        "warnings": list(outcome.warnings),
    }
    text = io.StringIO()
    table.write(text, format="ascii.ecsv")
    return text.getvalue()


def _plain(entry):
    numbers = {name: _float(getattr(entry, name)) for name in ("value", "low", "high")}
    return numbers | {name: getattr(entry, name) for name in ("unit", "method", "source", "note")}


def _float(value):
    return None if value is None else float(value)


def _stage(entries, methods, width):
    """Lines for the quantities of one stage; those without a value follow, gathered by their reason."""
    lines, missing = [], {}
    for name, entry in entries.items():
        if entry.value is None:
            missing.setdefault(entry.note, []).append(name)
        else:
            lines += _rows(name, entry, methods, width)
    return lines + [_item(f"no value for {', '.join(names)}: {note}", width) for note, names in missing.items()]


def _rows(name, entry, methods, width):
    parts = [f"{_INDENT}{name:<{_NAME}}", _digits(entry.value), entry.unit, _spread(entry)]
    parts.append(f"[{methods[entry.method, entry.source]}]")
    row = " ".join(filter(None, parts))
    return [row, _wrapped(entry.note, width, first=_INDENT * 2, rest=_INDENT * 2)] if entry.note else [row]


def _spread(entry):
    if entry.low is None and entry.high is None:
        return ""
    low, high = (entry.value if end is None else end for end in (entry.low, entry.high))
    return f"({_digits(low)} to {_digits(high)})"


def _digits(value):
    mantissa, _, power = f"{value:.6g}".partition("e")
    return f"{mantissa}e{int(power)}" if power else mantissa


def _item(text, width):
    return _wrapped(text, width, first=_INDENT, rest=_INDENT * 2)


def _wrapped(text, width, *, first="", rest=""):
    lines = textwrap.wrap(
        text, width, initial_indent=first, subsequent_indent=rest, break_long_words=False, break_on_hyphens=False
    )
    return "\n".join(lines)
