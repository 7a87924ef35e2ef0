"""The dashboard: controls, verdict, four live charts and the table of one scenario."""

import json
import os
from dataclasses import replace
from importlib.resources import files as package_files

import ipywidgets

from massdash import model
from massdash.charts import CHARTS, OVERLAID
from massdash.errors import MassdashError
from massdash.panels import reading
from massdash.panels.controls import SHOWN, Controls
from massdash.panels.filing import Filing, choices
from massdash.panels.later import Later
from massdash.render.live import LiveCharts
from massdash.scenario import FIELDS

#: The environment variable in which ``massdash dashboard FILE...`` hands over the files, as a JSON list.
OPEN = "MASSDASH_OPEN"


class Dashboard:
    """One person's view of one scenario at a time; ``widget`` is what a notebook shows.

    ``scenario`` and ``outcome`` are the present state; a change that is refused or cannot be computed leaves both as
    they are. ``evaluate`` may be replaced for tests.
    """

    def __init__(self, offered, *, evaluate=model.evaluate):
        self._evaluate = evaluate
        self.scenario = offered[0][1]
        self.outcome = evaluate(self.scenario, bounds=False)
        self.controls = Controls(self.scenario, self._changed, self._released)
        self.label = ipywidgets.Text(self.scenario.label, description="Label", continuous_update=False)
        self.terms = ipywidgets.Checkbox(False, description="Show the terms of the energy", indent=False)
        self.approximate = ipywidgets.Checkbox(False, description="Overlay the post-Newtonian forms", indent=False)
        self.charts = LiveCharts(fill=True)
        self.headline, self.status = ipywidgets.HTML(), ipywidgets.HTML()
        self.warnings, self.others, self.table = ipywidgets.HTML(), ipywidgets.HTML(), ipywidgets.HTML()
        self.filing = Filing(offered, accept=self.show, outcome=lambda: self.outcome, chart=self.chart, say=self.say)
        self._later = Later(self._catch_up)
        # the page lays its text out anew, which must not hold up the charts
        self._verdict = Later(self._say_verdict, delay=0.03, patient=False)
        self._setting_label = False
        self.label.observe(self._relabelled, "value")
        for switch in (self.terms, self.approximate):
            switch.observe(lambda change: self._redraw(), "value")
        self.charts.on_event(self._pointed)
        self.widget = _arranged(self)
        self._redraw()
        self._catch_up()

    # ------------------------------------------------------------------------------------------------ state
    def show(self, scenario):
        """Show another scenario. Raises MassdashError, and changes nothing, when it cannot be evaluated."""
        self._take(scenario)
        self.status.value = ""
        self.controls.show(self.scenario)
        self._show_label()
        self._later.soon()

    def chart(self, key):
        """One figure of the present outcome, with what the two switches ask for."""
        wishes = {"terms": self.terms.value} if key == "energy" else {}
        if key in OVERLAID:
            wishes["post_newtonian"] = self.approximate.value
        return CHARTS[key](self.outcome, **wishes)

    def say(self, sentence, *, error=False):
        """Write the status line."""
        self.status.value = reading.status(sentence, error=error)

    def _take(self, scenario):
        outcome = self._evaluate(scenario, bounds=False)
        self.scenario, self.outcome = scenario, outcome
        self._redraw()

    def _redraw(self):
        """What follows every step of a drag: the charts, and a moment later the verdict."""
        self.charts.show([self.chart(key) for key in CHARTS])
        self._verdict.soon()

    def _say_verdict(self):
        self.headline.value = reading.headline(self.outcome)

    def _catch_up(self):
        """What follows when a person pauses: bounds, exact maps, warnings and the table."""
        self.outcome = self._evaluate(self.scenario)
        self.charts.settle([self.chart(key) for key in CHARTS])
        self._say_verdict()
        self.warnings.value = reading.warnings(self.outcome)
        self.others.value = reading.others(self.scenario, SHOWN)
        self.table.value = reading.table(self.outcome)

    # ------------------------------------------------------------------------------------------------ a person's moves
    def _attempt(self, scenario_changes, refused):
        """Show the scenario with these changes; True when that worked, else ``refused(sentence)`` tells why not.

        Errors in callbacks of a kernel vanish unless they are shown on purpose; one that nobody foresaw is shown and
        raised into the log.
        """
        try:
            self._take(replace(self.scenario, **scenario_changes))
        except MassdashError as error:
            refused(str(error))
            return False
        except Exception as error:
            refused(f"an error in the program left everything as it was ({type(error).__name__}: {error})")
            raise
        self.controls.quiet()
        return True

    def _refuse(self, sentence):
        self.say(sentence, error=True)

    def _changed(self, name, value):
        def refused(sentence):
            self.controls.refuse(name, sentence, self.scenario)

        if self._attempt({name: FIELDS[name].with_unit(value)}, refused):
            self.status.value = ""
            if not self.controls.dragging:
                self._later.soon()

    def _released(self):
        self._later.soon()

    def _relabelled(self, change):
        if self._setting_label:
            return
        if self._attempt({"label": change["new"]}, self._refuse):
            self._later.soon()
        else:
            self._show_label()

    def _show_label(self):
        self._setting_label = True
        self.label.value = self.scenario.label
        self._setting_label = False

    def _pointed(self, kind, chart, handle, x, y):
        """A drag of the star on the map, or a click there, moves it; positions outside the allowed ranges do not."""
        place = {name: float(f"{value:.4g}") for name, value in zip(_MAP_FIELDS, (x, y), strict=True)}
        if chart != "map" or not all(FIELDS[name].low <= value <= FIELDS[name].high for name, value in place.items()):
            return
        if self._attempt({name: FIELDS[name].with_unit(value) for name, value in place.items()}, self._refuse):
            self.controls.show(self.scenario)
            if kind != "drag":
                self._later.soon()


_MAP_FIELDS = ("mass", "ignition_temperature")


def _arranged(board):
    """The layout: verdict on top, controls beside the charts, the table below."""
    style = ipywidgets.HTML(f"<style>{(package_files('massdash.panels') / 'dashboard.css').read_text()}</style>")
    filing = board.filing
    files = ipywidgets.HBox([filing.upload, filing.save])
    switches = [board.terms, board.approximate]
    column = _box(
        ipywidgets.VBox,
        "controls",
        [filing.choice, board.label, *board.controls.fields.values(), *switches, board.others, files, board.status],
    )
    carried = [filing.figure, filing.format, filing.width, filing.export, filing.download]
    carry = _box(ipywidgets.HBox, "carry", carried)
    stage = _box(ipywidgets.VBox, "stage", [board.charts, carry])
    main = _box(ipywidgets.HBox, "main", [column, stage])
    quantities = ipywidgets.Accordion([board.table], titles=("All quantities",), selected_index=0)
    return _box(ipywidgets.VBox, "board", [style, board.headline, board.warnings, main, quantities])


def _box(kind, name, children):
    box = kind(children)
    box.add_class(f"massdash-{name}")
    return box


def dashboard(files=None):
    """The dashboard as a widget, on the first of ``files`` (scenario files) or on a built-in scenario.

    Without ``files`` those named on the command line are taken. Raises InputError for a file that is no scenario.
    """
    named = json.loads(os.environ.get(OPEN, "[]")) if files is None else list(files)
    return Dashboard(choices(named)).widget
