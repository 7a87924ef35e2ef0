"""Scenario files: YAML with a schema number, then the fields, quantities as text with an astropy unit.

Only the flat mapping that a scenario needs is read, event by event: nested values, tags, anchors and aliases are
refused as soon as they are seen, so that nothing in a file runs code or grows beyond its own size.
"""

import os
from pathlib import Path

import yaml

from massdash.errors import InputError, refuse
from massdash.scenario.fields import FIELDS
from massdash.scenario.scenario import Scenario
from massdash.scenario.values import one_line, shown
from massdash.whole import write_whole

SCHEMA = 1
LARGEST = 2**20  # bytes
_KEY = "massdash"
_NULLS = ("", "~", "null", "Null", "NULL")
_A_SCENARIO = f'a mapping that starts with "{_KEY}: {SCHEMA}"'


def load(path):
    """The scenario in a file. Raises InputError with file, key, value and what is allowed."""
    path = _path(path)
    try:
        with path.open("rb") as file:
            data = file.read(LARGEST + 1)
    except (OSError, ValueError) as error:
        raise _file_error(path, "cannot be read", error) from None
    return from_bytes(data, where=_name(path))


def save(scenario, path):
    """Write a scenario to a file, whole or not at all; `load` gives back an equal one.

    Raises InputError when the file cannot be written; what was there before is then untouched.
    """
    if not isinstance(scenario, Scenario):
        raise refuse("scenario", shown(scenario), "a Scenario")
    path = _path(path)
    try:
        write_whole({path: to_text(scenario).encode()})
    except (OSError, ValueError) as error:
        raise _file_error(path, "cannot be written", error) from None


def from_bytes(data, *, where):
    """The scenario in the bytes of a file; ``where`` names it in messages."""
    if not len(data) <= LARGEST:
        raise refuse("file size", "more than 1 MiB", "a scenario file of at most 1 MiB", where=where)
    try:
        text = data.decode("utf-8")
    except UnicodeDecodeError as error:
        raise refuse("encoding", f"byte {error.start}", "text in UTF-8", where=where) from None
    return from_text(text, where=where)


def from_text(text, *, where="scenario text"):
    """The scenario in a text; ``where`` names it in messages."""
    fields = {}
    try:
        for key, value in _pairs(yaml.parse(text, Loader=yaml.SafeLoader), where):
            _check_key(key, value, fields, where)
            fields[key] = value
    except yaml.YAMLError as error:
        raise _syntax_error(error, where) from None
    if _KEY not in fields:
        raise refuse(_KEY, "a missing schema number", f"{_KEY}: {SCHEMA} as the first line", where=where)
    del fields[_KEY]
    try:
        return Scenario(**fields)
    except InputError as error:
        raise refuse(error.name, error.got, error.allowed, where=where) from None


def to_text(scenario):
    """The scenario as the text of a file: schema, label, mass, and every field that differs from its default."""
    fields = {_KEY: SCHEMA, **scenario.written(everything=False)}
    return yaml.safe_dump(fields, sort_keys=False, allow_unicode=True, width=float("inf"))


def _pairs(events, where):
    """Key and value of each entry of the one flat mapping a file may hold; texts, or None for null."""
    _expect(events, yaml.StreamStartEvent, where)
    _expect(events, yaml.DocumentStartEvent, where)
    _expect(events, yaml.MappingStartEvent, where)
    while not isinstance(event := next(events), yaml.MappingEndEvent):
        key = _scalar(event, "a key", where)
        yield key, _scalar(next(events), str(key), where)
    _expect(events, yaml.DocumentEndEvent, where)
    _expect(events, yaml.StreamEndEvent, where)


def _expect(events, kind, where):
    event = next(events)
    _refuse_extras(event, "file", where)
    if not isinstance(event, kind):
        raise refuse("file", _PLAIN_NAMES.get(type(event), "something else"), _A_SCENARIO, where=where)


def _scalar(event, name, where):
    _refuse_extras(event, name, where)
    if not isinstance(event, yaml.ScalarEvent):
        raise refuse(one_line(name), _PLAIN_NAMES[type(event)], "a single value", where=where)
    return None if event.style is None and event.value in _NULLS else event.value


def _refuse_extras(event, name, where):
    if getattr(event, "anchor", None) is not None:
        raise refuse(one_line(name), "a YAML anchor or alias", "a single value", where=where)
    if getattr(event, "tag", None) is not None:
        raise refuse(one_line(name), f"the YAML tag {shown(event.tag)}", "values without tags", where=where)


_PLAIN_NAMES = {
    yaml.StreamEndEvent: "no content",
    yaml.ScalarEvent: "a single value",
    yaml.SequenceStartEvent: "a list",
    yaml.MappingStartEvent: "a mapping",
    yaml.DocumentStartEvent: "a second document",
}


def _check_key(key, value, seen, where):
    if key in seen:
        raise refuse(one_line(str(key)), "a second value", "each key once", where=where)
    if key == _KEY and value != str(SCHEMA):
        raise refuse(_KEY, shown(value), f"the schema number {SCHEMA}", where=where)
    if key != _KEY and key not in FIELDS:
        raise refuse("key", shown(key), f"one of {', '.join(FIELDS)}", where=where)


def _syntax_error(error, where):
    mark = getattr(error, "problem_mark", None)
    line = f"line {mark.line + 1}" if mark else "the file"
    problem = getattr(error, "problem", None) or getattr(error, "reason", None) or "unreadable"
    return refuse(line, f"broken YAML ({one_line(problem)})", _A_SCENARIO, where=where)


def _path(path):
    try:
        return Path(os.fsdecode(path))
    except TypeError:
        raise refuse("path", shown(path), "the path of a file") from None


def _name(path):
    """The path for a sentence, on one line."""
    return str(path) if str(path).isprintable() else ascii(str(path))


def _file_error(path, what, error):
    reason = getattr(error, "strerror", None) or str(error)
    where = _name(path)
    return InputError(f"{where}: the file {what} ({one_line(reason)})", name="file", got=reason, where=where)
