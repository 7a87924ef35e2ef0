"""The table of fields for the README, made from the field table so that the two cannot differ."""

from massdash.scenario.fields import FIELDS, short


def field_table_markdown():
    """The fields as a Markdown table: name, meaning, unit, default, allowed."""
    lines = ["| field | meaning | unit | default | allowed |", "|---|---|---|---|---|"]
    return "\n".join([*lines, *(_row(field) for field in FIELDS.values())])


def _row(field):
    unit = f"`{field.unit}`" if field.unit else ""
    return f"| `{field.name}` | {field.meaning} | {unit} | {_default(field)} | {field.range_text}{field.or_none} |"


def _default(field):
    if isinstance(field.default, str):
        return f'"{field.default}"'
    return "None" if field.default is None else short(field.default)
