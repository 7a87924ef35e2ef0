"""One number of a scenario as a control: slider, typed entry, unit, range and message, with a check that cannot be
bypassed from the browser.

Where the usual slider would cut a value that is out of range to the nearest end, this field refuses it, says why, and
keeps the last good value.
"""

import math
import re

import anywidget
import traitlets

from massdash.errors import InputError, refuse
from massdash.render import bundle, wire
from massdash.render.units import unit_text
from massdash.scenario.fields import short

NUMBER = re.compile(r"[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][+-]?[0-9]+)?")
LONGEST = 40  # characters; a typed number needs no more


def read_number(text):
    """The float a person typed, as in 1.2e5, 2.0E6 or -.5, or None when the text is no plain number."""
    text = text.strip().replace("−", "-")
    return float(text) if len(text) <= LONGEST and NUMBER.fullmatch(text) else None


def middle(minimum, maximum, scale):
    """A number in the middle of a range, in two digits where the range allows that."""
    exact = math.sqrt(minimum) * math.sqrt(maximum) if scale == "log" else (minimum + maximum) / 2
    rounded = float(f"{exact:.2g}")
    return rounded if minimum <= rounded <= maximum else exact


class Allowed(traitlets.Float):
    """A float, or None, that its widget allows; traitlets' own checks let None pass unseen."""

    def validate(self, obj, value):
        return obj.checked(None if value is None else super().validate(obj, value))


class NumberField(anywidget.AnyWidget):
    """A control for one number.

    ``unit`` is written as astropy writes it and shown as in print. ``value`` is always a float within
    ``minimum``..``maximum``, or None when ``optional``; ``number`` is the last number it had. ``message`` is shown
    below the field, empty when there is nothing to say. ``dragging`` is true while the slider is held. On a logarithmic
    ``scale`` the slider gives ``digits`` significant digits, on a linear one multiples of ``step`` (None: a thousandth
    of the range). The browser writes ``entry`` only.
    """

    _esm = bundle.field_module()
    _css = bundle.stylesheet("field")
    label = traitlets.Unicode().tag(sync=True)
    unit = traitlets.Unicode().tag(sync=True)
    unit_shown = traitlets.Unicode().tag(sync=True)
    help = traitlets.Unicode().tag(sync=True)
    minimum = traitlets.Float().tag(sync=True)
    maximum = traitlets.Float().tag(sync=True)
    scale = traitlets.Enum(("linear", "log"), "linear").tag(sync=True)
    digits = traitlets.Int(3, min=1, max=15).tag(sync=True)
    step = traitlets.Float(None, allow_none=True).tag(sync=True)
    default = traitlets.Float(None, allow_none=True).tag(sync=True)
    optional = traitlets.Bool(False).tag(sync=True)
    none_label = traitlets.Unicode("not given").tag(sync=True)
    value = Allowed(None).tag(sync=True)
    number = traitlets.Float().tag(sync=True)
    message = traitlets.Unicode().tag(sync=True)
    dragging = traitlets.Bool(False).tag(sync=True)
    answered = traitlets.Int(0).tag(sync=True)
    entry = traitlets.Dict().tag(sync=True, echo_update=False)

    def __init__(self, *, label, minimum, maximum, default=None, **traits):
        """Raises InputError when the value is not allowed, ValueError when the range makes no sense."""
        scale = traits.get("scale", "linear")
        if not (math.isfinite(minimum) and math.isfinite(maximum) and minimum < maximum):
            raise ValueError(f"{label}: minimum {minimum} must be below maximum {maximum}, both finite")
        if scale == "log" and not minimum > 0:
            raise ValueError(f"{label}: a logarithmic scale needs a minimum above 0, got {minimum}")
        value = traits.pop("value", default)
        starts = (value, default, middle(minimum, maximum, scale))
        number = next(number for number in starts if number is not None)
        bounds = {"label": label, "minimum": minimum, "maximum": maximum, "default": default}
        super().__init__(**bounds, **traits, number=number, value=value)  # the value last: it is held to the others
        self.observe(self._receive, "entry")

    def observe_value(self, callback):
        """Calls ``callback(value)`` whenever the value changes, by the user or by Python."""
        self.observe(lambda change: callback(change["new"]), "value")

    def set_state(self, sync_data):
        """Takes from the browser what it may say; everything else is Python's."""
        super().set_state(wire.inputs_only(sync_data, {"entry"}))

    @property
    def allowed(self):
        """What may be given, in words: the end of every refusal."""
        words = f"{short(self.minimum)} to {short(self.maximum)} {self.unit}".rstrip()
        return f"{words}, or {self.none_label}" if self.optional else words

    def checked(self, value):
        """The value, if it is allowed; InputError otherwise."""
        if value is None and self.optional:
            return None
        if value is None or not (self.minimum <= value <= self.maximum):
            raise refuse(self.label, "nothing" if value is None else repr(value), self.allowed)
        return value

    @traitlets.observe("unit")
    def _show_unit(self, change):
        self.unit_shown = unit_text(change["new"])

    @traitlets.observe("value")
    def _keep_number(self, change):
        if change["new"] is not None:
            self.number = change["new"]

    def _receive(self, change):
        """Takes one entry: while held, ``dragging`` turns true before the value moves; on release it turns false after
        it, so that one change of ``dragging`` ends every drag."""
        entry = change["new"]
        held = entry.get("dragging") is True
        with self.hold_sync():  # value, message and answer arrive together
            if held:
                self.dragging = True
            try:
                self._take(entry)
            finally:
                if not held:
                    self.dragging = False
                self.answered = wire.sequence_number(entry)

    def _take(self, entry):
        try:
            value = self.checked(self._proposed(entry.get("kind"), entry.get("value")))
        except InputError as error:
            self.message = str(error)
            return
        self.message = ""
        self.value = value

    def _proposed(self, kind, given):
        """The value an entry asks for; InputError when it asks for nothing that could be one."""
        if kind == "number" and wire.is_number(given):
            return float(given)
        if kind == "text" and isinstance(given, str):
            number = read_number(given)
            if number is not None:
                return number
        choices = {"none": None, "some": self.number, "reset": self.default}
        if isinstance(kind, str) and kind in choices:
            return choices[kind]
        raise refuse(self.label, repr(given)[: LONGEST + 2], self.allowed)
