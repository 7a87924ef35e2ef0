"""Widgets in a bare page, without a kernel: the joined JavaScript on a stand-in for the model."""

import base64
import json

from massdash.render import bundle
from massdash.render.frame import frame, structure

HANG = 15_000  # milliseconds after which a page counts as hung

PAGE = """<!doctype html><html><head><meta charset="utf-8"><style>{css}
body {{ margin: 8px; background: {paper}; color: {ink}; }}</style></head><body><div id="host"></div></body></html>"""

# A model as the widget libraries give it: get, set, save_changes and named events. What the browser saves is kept in
# window.saved; like a kernel's echo it changes nothing by itself.
MODEL = """
const bytes = (text) => Uint8Array.from(atob(text), (c) => c.charCodeAt(0));
window.makeModel = (state) => {
  const handlers = {};
  const model = {
    state, saved: [], changed: {},
    get: (name) => model.state[name],
    set: (name, value) => { model.state[name] = value; model.changed[name] = value; },
    save_changes: () => { model.saved.push(JSON.parse(JSON.stringify(model.changed))); model.changed = {}; },
    on: (name, handle) => (handlers[name] ||= []).push(handle),
    off: (name, handle) => { handlers[name] = (handlers[name] || []).filter((other) => other !== handle); },
    fromPython: (values) => {
      Object.assign(model.state, values);
      for (const name of Object.keys(values)) (handlers["change:" + name] || []).forEach((handle) => handle());
      (handlers.change || []).forEach((handle) => handle());
    },
  };
  return model;
};
window.withBuffer = (message) => {
  const raw = bytes(message.buffer), apart = new Uint8Array(raw.length + 3);
  apart.set(raw, 3); // as in a message, where a buffer starts anywhere
  return { ...message, buffer: new DataView(apart.buffer, 3, raw.length) };
};
window.start = async (source, state) => {
  const module = await import(URL.createObjectURL(new Blob([source], { type: "text/javascript" })));
  window.model = makeModel(state);
  window.end = module.default.render({ model: window.model, el: document.querySelector("#host") });
};
undefined
"""


def message(charts, *, number=1, exact=False, answers=0):
    """A frame as JSON text, its buffer as base64."""
    values, buffer = frame(charts, exact=exact)
    stamped = values | {"number": number, "answers": answers, "buffer": base64.b64encode(buffer).decode()}
    return json.dumps(stamped, allow_nan=False)


def _open(page, css, dark):
    paper, ink = ("#111111", "#e4e4e4") if dark else ("#ffffff", "#222222")
    page.set_content(PAGE.format(css=css, paper=paper, ink=ink))
    page.evaluate(MODEL)


def open_charts(page, charts, *, columns=2, height=300, dark=False, exact=False):
    """Draws charts in an empty page and waits for the first paint, at most 15 s: a hung page fails here."""
    _open(page, bundle.stylesheet("charts"), dark)
    page.evaluate(
        """([source, structure, frame, columns, height]) => {
            const state = { structure, frame: withBuffer(JSON.parse(frame)), columns, height };
            setTimeout(() => start(source, state));
        }""",
        [bundle.charts_module(), structure(charts), message(charts, exact=exact), columns, height],
    )
    page.wait_for_selector("[data-frame='1']", timeout=HANG)
    page.evaluate("window.views = document.querySelector('.massdash-charts').page.views; undefined")


def show(page, charts, **options):
    """Sends another frame and waits until it is painted; returns the milliseconds that took."""
    return page.evaluate(
        """async ([structure, frame]) => {
            const changed = JSON.stringify(structure) !== JSON.stringify(model.state.structure);
            const painted = new Promise((done) => addEventListener("massdash:painted", done, { once: true }));
            const begun = performance.now();
            model.fromPython({ ...(changed ? { structure } : {}), frame: withBuffer(JSON.parse(frame)) });
            await painted;
            return performance.now() - begun;
        }""",
        [structure(charts), message(charts, **options)],
    )


def open_field(page, state, *, dark=False):
    """A number field in an empty page."""
    _open(page, bundle.stylesheet("field"), dark)
    page.evaluate("([source, state]) => start(source, state)", [bundle.field_module(), state])
