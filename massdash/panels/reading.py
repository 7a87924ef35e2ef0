"""What the dashboard says in words and tables, as HTML."""

from html import escape
from itertools import groupby

from massdash.numerals import numeral
from massdash.quantities import QUANTITIES, STAGES
from massdash.scenario import FIELDS


def headline(outcome):
    """The verdict, after the program's name."""
    return f'<p class="massdash-headline"><b role="heading" aria-level="1">massdash</b>{escape(outcome.headline)}</p>'


def warnings(outcome):
    """The warnings as a list; nothing when there are none."""
    if not outcome.warnings:
        return ""
    items = "".join(f"<li>{escape(sentence)}</li>" for sentence in outcome.warnings)
    return f'<ul class="massdash-warnings" aria-label="Warnings">{items}</ul>'


def others(scenario, shown):
    """The fields without a control that are not at their default, so that nothing that counts is out of sight."""
    hidden = [name for name in scenario.changed if name not in shown and name != "label"]
    if not hidden:
        return ""
    said = ", ".join(f"{FIELDS[name].label.lower()} {escape(str(scenario.written()[name]))}" for name in hidden)
    return f'<p class="massdash-others">Also set in this scenario: {said}.</p>'


def status(sentence, *, error=False):
    """The line that reports what was done or refused."""
    kind = "massdash-error" if error else "massdash-done"
    return f'<p class="{kind}" role="{"alert" if error else "status"}">{escape(sentence)}</p>'


def table(outcome):
    """All quantities by stage with value, unit, method and source; those without a value say why."""
    head = "".join(f'<th scope="col">{title}</th>' for title in ("Quantity", "Value", "Unit", "Method", "Source"))
    grouped = groupby(outcome.entries.items(), key=lambda item: QUANTITIES[item[0]].stage)
    bodies = "".join(_stage(STAGES[stage], items) for stage, items in grouped)
    return f'<table class="massdash-table"><thead><tr>{head}</tr></thead>{bodies}</table>'


def _stage(title, items):
    rows = "".join(_row(name, entry) for name, entry in items)
    return f'<tbody><tr><th scope="rowgroup" colspan="5">{title}</th></tr>{rows}</tbody>'


def _row(name, entry):
    meaning = escape(QUANTITIES[name].meaning, quote=True)
    title = f'<th scope="row" title="{meaning}">{name}</th>'
    if entry.value is None:
        return f'<tr class="massdash-none">{title}<td colspan="4">{escape(entry.note)}</td></tr>'
    method = escape(entry.method + (f" ({entry.note})" if entry.note else ""))
    cells = f"<td>{_value(entry)}</td><td>{escape(entry.unit)}</td><td>{method}</td><td>{escape(entry.source)}</td>"
    return f'<tr data-name="{name}" data-value="{entry.value!r}">{title}{cells}</tr>'


def _value(entry):
    bounds = (("low", entry.low), ("high", entry.high))
    spread = ", ".join(f"{word} {numeral(bound, 4)}" for word, bound in bounds if bound is not None)
    return numeral(entry.value, 5) + (f" <small>({spread})</small>" if spread else "")
