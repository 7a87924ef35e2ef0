"""A reader of the dashboard: finds its parts as a person would, by what they are called."""

import re

from playwright.sync_api import expect

from massdash import evaluate
from massdash.scenario import builtin

SLOW = 60_000  # milliseconds; only ever waited for when something is broken


class Reader:
    """The dashboard on a page that shows it."""

    def __init__(self, page):
        self.page = page
        self.headline = page.locator(".massdash-headline")
        self.status = page.locator(".massdash-error, .massdash-done")
        self.charts = page.locator(".massdash-cell")
        expect(page.locator(".massdash-charts[data-frame]")).to_be_visible(timeout=SLOW)

    def field(self, label):
        """The group of one scenario field."""
        return self.page.locator(".massdash-field").filter(has=self.page.get_by_text(label, exact=True))

    def start_over(self):
        """Back to the built-in scenario that the dashboard opens with."""
        for name in ("Ember", "Lantern"):
            self.page.get_by_label("Scenario").select_option(f"{name} (built in)")
            expect(self.headline).to_contain_text(name)
        self.shows("radius", float(evaluate(builtin("lantern"))["radius"].value))

    def type(self, label, text):
        entry = self.field(label).get_by_role("textbox")
        entry.fill(text)
        entry.press("Enter")

    def quantity(self, name):
        """The row of one quantity in the table."""
        return self.page.locator(f'.massdash-table tr:has(th:text-is("{name}"))')

    def value(self, name):
        return float(self.quantity(name).get_attribute("data-value"))

    def shows(self, name, expected):
        """Waits until the table gives exactly this value for a quantity."""
        value = re.compile(rf"^{re.escape(repr(expected))}$")
        expect(self.quantity(name)).to_have_attribute("data-value", value, timeout=SLOW)  # the table follows later

    def changes(self, name, act):
        """The value of a quantity before and after ``act()``, which must change it."""
        before = self.quantity(name).get_attribute("data-value")
        act()
        expect(self.quantity(name)).not_to_have_attribute("data-value", before)
        return float(before), self.value(name)

    def pixels(self, chart):
        """What is painted on the canvas of a chart."""
        return chart.locator("canvas").evaluate("canvas => canvas.toDataURL()")

    def upload(self, name, content):
        with self.page.expect_file_chooser() as choosing:
            self.page.get_by_role("button", name=re.compile("Open a file")).click()
        choosing.value.set_files({"name": name, "mimeType": "application/yaml", "buffer": content.encode()})

    def download(self, button):
        """(name, bytes) of what a button hands over."""
        with self.page.expect_download(timeout=SLOW) as handing:
            self.page.get_by_role("button", name=button).click()
        return handing.value.suggested_filename, handing.value.path().read_bytes()


def in_browser(page, running):
    """The dashboard at the address that ``massdash dashboard`` printed."""
    page.goto(running.address)
    return Reader(page)


def in_lab(page, running):
    """The dashboard's notebook in JupyterLab, its one cell run."""
    page.goto(running.address)
    expect(page.locator(".jp-StatusBar-TextItem", has_text="Idle")).to_be_visible(timeout=SLOW)
    page.locator(".jp-Notebook .jp-CodeCell .cm-content").first.click()
    page.keyboard.press("Shift+Enter")
    return Reader(page)
