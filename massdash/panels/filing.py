"""Opening and saving scenarios, and carrying figures away."""

import re

import ipywidgets

from massdash.charts import CHARTS
from massdash.errors import MassdashError
from massdash.render.download import Download
from massdash.scenario import DEFAULT_NAME, builtin, builtin_names, from_bytes, load, to_text

FORMATS = {"PDF": "pdf", "SVG": "svg", "PNG": "png", "data (ECSV)": "ecsv"}
WIDTHS = {"single column": "single", "double column": "double"}
_MIME = {"pdf": "application/pdf", "svg": "image/svg+xml", "png": "image/png", "ecsv": "text/plain"}
_TITLES = {"energy": "Binding energy", "margin": "Stability margin", "map": "Margin map", "lifetimes": "Lifetimes"}


def slug(label):
    """A file name, without ending, from any label."""
    return re.sub(r"[^\w.-]+", "_", label, flags=re.ASCII).strip("_.").lower() or "scenario"


def choices(files):
    """(shown text, scenario) for the files a session was opened with, then for the built-in ones, the default first."""
    opened = [(f"{scenario.label} (opened file)", scenario) for scenario in map(load, files)]
    names = sorted(builtin_names(), key=lambda name: name != DEFAULT_NAME)
    return opened + [(f"{scenario.label} (built in)", scenario) for scenario in map(builtin, names)]


class Filing:
    """The file controls. ``accept(scenario)`` is called with a scenario to show, ``outcome()`` gives the present one,
    ``chart(key)`` a figure of it, ``say(sentence, error=False)`` writes the status line."""

    def __init__(self, offered, *, accept, outcome, chart, say):
        self._accept, self._outcome, self._chart, self._say = accept, outcome, chart, say
        self.download = Download()
        texts = [text for text, _ in offered]
        self._offered = dict(zip(texts, (scenario for _, scenario in offered), strict=True))
        self.choice = ipywidgets.Dropdown(options=texts, value=texts[0], description="Scenario")
        self.upload = ipywidgets.FileUpload(accept=".yaml,.yml", description="Open a file")
        self.save = ipywidgets.Button(description="Save scenario")
        self.figure = ipywidgets.Dropdown(options=[(_TITLES[key], key) for key in CHARTS], description="Figure")
        self.format = ipywidgets.Dropdown(options=list(FORMATS.items()), description="Format")
        self.width = ipywidgets.Dropdown(options=list(WIDTHS.items()), description="Width")
        self.export = ipywidgets.Button(description="Export figure")
        self.choice.observe(lambda change: accept(self._offered[change["new"]]), "value")
        self.upload.observe(self._opened, "value")
        self.save.on_click(lambda _: self._guarded(self._save))
        self.export.on_click(lambda _: self._guarded(self._export))

    def _guarded(self, action):
        # Errors in callbacks of a kernel vanish unless they are shown on purpose.
        try:
            self._say(action())
        except MassdashError as error:
            self._say(str(error), error=True)
        except Exception as error:
            self._say(f"an error in the program ({type(error).__name__}: {error})", error=True)
            raise

    def _opened(self, change):
        if not change["new"]:
            return
        (file,) = change["new"][-1:]
        self._guarded(lambda: self._open(file["name"], bytes(file["content"])))
        self.upload.value = ()

    def _open(self, name, content):
        scenario = from_bytes(content, where=name)
        self._accept(scenario)
        return f"Opened {name}: {scenario.label}."

    def _save(self):
        scenario = self._outcome().scenario
        name = f"{slug(scenario.label)}.yaml"
        self.download.offer(name, to_text(scenario).encode(), "application/yaml")
        return f"Saved {name}."

    def _export(self):
        from massdash.render.export import WIDTHS as MILLIMETRES
        from massdash.render.export import figure_bytes, provenance

        key, ending = self.figure.value, self.format.value
        chart, about = self._chart(key), provenance(self._outcome())
        if ending == "ecsv":
            from massdash.render.tables import ecsv_bytes

            data = ecsv_bytes(chart, about)
        else:
            data = figure_bytes(chart, ending, width_mm=MILLIMETRES[self.width.value], provenance=about)
        name = f"{slug(self._outcome().scenario.label)}_{key}.{ending}"
        self.download.offer(name, data, _MIME[ending])
        return f"Exported {name}."
