"""The scenario: its fields, the frozen object, its files and the built-in examples."""

from massdash.scenario.builtin import DEFAULT_NAME, builtin, builtin_names
from massdash.scenario.fields import FIELDS, Field
from massdash.scenario.scenario import Scenario
from massdash.scenario.yaml_file import from_bytes, from_text, load, save, to_text

__all__ = [
    "DEFAULT_NAME",
    "FIELDS",
    "Field",
    "Scenario",
    "builtin",
    "builtin_names",
    "from_bytes",
    "from_text",
    "load",
    "save",
    "to_text",
]
