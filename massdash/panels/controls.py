"""The controls: one field for each input a person may move, made from the scenario's field table."""

from massdash.render.field import NumberField
from massdash.scenario import FIELDS

#: Fields with a control, in order.
SHOWN = ("mass", "helium", "metals", "ignition_temperature")

#: What None means on the control, where the field table's words are too long for a check box.
_NONE_LABELS = {"ignition_temperature": "found (1.5e8 K until burning rates are built in)"}
#: Numbers that a control starts from when its field is None.
_STARTS = {"ignition_temperature": 1.5e8}


def number_field(name, scenario):
    """The control of one scenario field, set to the scenario's value."""
    field = FIELDS[name]
    start = scenario.number(name)
    control = NumberField(
        label=field.label,
        unit=field.unit or "",
        help=field.help,
        minimum=field.low,
        maximum=field.high,
        scale=field.scale,
        default=field.default if field.default is not None else _STARTS[name],
        value=start if start is not None else _STARTS[name],
        optional=field.optional,
        none_label=_NONE_LABELS.get(name, field.none_means),
    )
    control.value = start
    return control


class Controls:
    """All fields together. ``on_change(name, value)`` is called for each change a person makes, ``on_release()`` when
    a slider is let go; setting them with ``show`` calls neither."""

    def __init__(self, scenario, on_change, on_release):
        self.fields = {name: number_field(name, scenario) for name in SHOWN}
        self._showing = False
        for name, control in self.fields.items():
            control.observe_value(lambda value, name=name: self._changed(name, value, on_change))
            control.observe(lambda change: None if change["new"] else on_release(), "dragging")

    @property
    def dragging(self):
        """Whether any slider is held."""
        return any(control.dragging for control in self.fields.values())

    def show(self, scenario):
        """Make the controls say what the scenario says."""
        self._showing = True
        try:
            for name, control in self.fields.items():
                control.value = scenario.number(name)
        finally:
            self._showing = False
        self.quiet()

    def quiet(self):
        """Take back all messages."""
        for control in self.fields.values():
            control.message = ""

    def refuse(self, name, sentence, scenario):
        """Put a field back to the scenario's value and say why beside it."""
        self.show(scenario)
        self.fields[name].message = sentence

    def _changed(self, name, value, on_change):
        if not self._showing:
            on_change(name, value)
