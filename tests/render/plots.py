"""Two small charts in a page, and places on them as fractions of the plot."""

import numpy as np

from massdash.charts.chart import Axis, Chart, Line, Map, Point, Rule

X = np.linspace(0.0, 10.0, 101)
CELLS = np.arange(200.0).reshape(10, 20) / 199


def curves(at=4.0, *, title="Two curves"):
    marks = (
        Line("up", "rising", X, X**2),
        Line("down", "falling", X, 100 - X**2, style=1),
        Rule("mass", f"at {at:g}", "x", at, handle="mass"),
        Point("star", "the star", 7.0, 20.0, handle="star"),
    )
    axes = Axis("distance", "pc", limits=(0, 10)), Axis("light", "solLum", limits=(0, 100))
    return Chart("curves", title, *axes, marks, alt=f"Two curves; the rule is at {at:g}.")


def plane():
    field = Map("z", Axis("depth", "m"), (1e2, 1e4), (1.0, 11.0), CELLS, levels=(0.5,))
    return Chart(
        "plane", "A plane", Axis("mass", "solMass", "log", (1e2, 1e4)), Axis("height", limits=(1, 11)), (field,)
    )


class Plot:
    """One chart in the page: places given as fractions of the plot."""

    def __init__(self, page, key="curves"):
        self.page, self.key = page, key
        self.area = page.locator(f"[data-chart={key}] .massdash-plot")

    def view(self, expression):
        return self.page.evaluate(
            f"(() => {{ const view = views.find((v) => v.key === '{self.key}'); return {expression}; }})()"
        )

    def at(self, fx, fy):
        box, place = self.view("view.picture.box"), self.area.bounding_box()
        x = place["x"] + box["left"] + fx * box["width"]
        return x, place["y"] + box["top"] + (1 - fy) * box["height"]

    def hover(self, fx, fy):
        self.page.mouse.move(*self.at(fx, fy))
        return self.area.locator(".massdash-read").inner_text().split("\n")

    def drag(self, start, end, steps=4):
        self.page.mouse.move(*self.at(*start))
        self.page.mouse.down()
        self.page.mouse.move(*self.at(*end), steps=steps)

    def range(self, name):
        return self.view(f"[view.scales.{name}.start, view.scales.{name}.end]")

    def painted(self):
        """Waits for the paints that are under way."""
        self.page.evaluate("new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(done)))")

    def sent(self):
        self.painted()
        return [saved["event"] for saved in self.page.evaluate("model.saved")]
