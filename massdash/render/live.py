"""All live charts of a page in one widget, drawn by the browser from complete frames.

One widget beats one per chart, because a drag then costs one message and one paint. The newest frame wins: each frame
carries a number, the browser never draws an older one after a newer one, and it writes the number it drew into the
page (``data-frame``) and announces it with the event ``massdash:painted``.
"""

import anywidget
import traitlets

from massdash.render import bundle, wire
from massdash.render.frame import frame, structure

KINDS = ("click", "drag", "drop")


def handles_of(charts):
    """The handles each chart offers, by chart key."""
    return {chart.key: {getattr(mark, "handle", None) for mark in chart.marks} - {None} for chart in charts}


def checked_event(event, handles):
    """(kind, chart key, handle, x, y) of a message from the browser, or None when any part of it is not what it must
    be. ``handles`` is what handles_of gives. A click may fall on no handle."""
    kind, chart, handle = event.get("kind"), event.get("chart"), event.get("handle")
    x, y = event.get("x"), event.get("y")
    if not (kind in KINDS and isinstance(chart, str) and chart in handles):
        return None
    known = isinstance(handle, str) and handle in handles[chart]
    if not (known or (kind == "click" and handle is None)):
        return None
    if not (wire.is_number(x) and wire.is_number(y)):
        return None
    return kind, chart, handle, float(x), float(y)


class LiveCharts(anywidget.AnyWidget):
    """Draws charts in a grid of ``columns`` columns (1 or 2), each ``height`` CSS pixels high; with ``fill`` two rows
    fill the window instead.

    The browser writes ``event`` only; ``structure`` and ``frame`` are Python's.
    """

    _esm = bundle.charts_module()
    _css = bundle.stylesheet("charts")
    columns = traitlets.Int(2, min=1, max=2).tag(sync=True)
    height = traitlets.Int(300, min=120, max=2000).tag(sync=True)
    fill = traitlets.Bool(False).tag(sync=True)
    structure = traitlets.Dict().tag(sync=True)
    frame = traitlets.Dict().tag(sync=True)
    event = traitlets.Dict().tag(sync=True, echo_update=False)

    def __init__(self, **traits):
        self._handles, self._callbacks, self._number, self._answers = {}, [], 0, 0
        super().__init__(**traits)
        self.observe(self._receive, "event")

    def show(self, charts):
        """Draws the charts of this moment; cheap enough for every step of a drag."""
        self._draw(charts, exact=False)

    def settle(self, charts):
        """As show, with full precision for the read-out; for the end of a drag."""
        self._draw(charts, exact=True)

    def on_event(self, callback):
        """Calls ``callback(kind, chart_key, handle, x, y)`` for each click on a chart (``handle`` None when it fell on
        none), for each step of a handle that is dragged, and for its drop. ``x`` and ``y`` are data values, finite
        and checked; a Rule's handle moves along its own axis only."""
        self._callbacks.append(callback)

    def set_state(self, sync_data):
        """Takes from the browser what it may say; everything else is Python's."""
        super().set_state(wire.inputs_only(sync_data, {"event"}))

    def _draw(self, charts, exact):
        charts = tuple(charts)
        self._handles = handles_of(charts)
        values, buffer = frame(charts, exact=exact)
        self._number += 1
        with self.hold_sync():  # structure and frame belong together: one message
            self.structure = structure(charts)
            self.frame = self._stamped(values | {"buffer": buffer})

    def _stamped(self, values):
        return {"number": self._number, "answers": self._answers} | values

    def _receive(self, change):
        message = change["new"]
        event = checked_event(message, self._handles)
        if event is None:
            return
        self._answers, before = wire.sequence_number(message), self._number
        for callback in self._callbacks:
            callback(*event)
        if event[0] == "drop" and self._number == before:
            self._answer_drop()

    def _answer_drop(self):
        """Nothing moved: the same picture again, so that the dropped handle returns to where Python has it."""
        values = {name: part for name, part in self.frame.items() if name not in ("number", "answers")}
        self._number += 1
        self.frame = self._stamped(values)
