"""From a move of the mass slider to changed pixels, four charts, in a real Chromium, as a reader waits for it.

The clock runs in the page from the input event to a task after the first paint of the answer. "One frame later" is the
same plus one more animation frame and task, for comparison with methods that cannot see when the canvas was drawn.
"""

import math
import os
import statistics
from dataclasses import replace
from pathlib import Path

import pytest
from astropy import units
from playwright.sync_api import expect
from reporting import report
from running import DASHBOARD, started

from massdash import evaluate
from massdash.scenario import builtin

pytestmark = [pytest.mark.benchmark, pytest.mark.browser]
SCRIPT = Path(__file__).with_name("slider_to_pixels.js").read_text()
STEPS = {"label": "Mass", "steps": 40, "dragSeconds": 0, "movesPerSecond": 60}
DRAG = STEPS | {"steps": 0, "dragSeconds": 3}


def percentile(values, share):
    """The smallest of the values that at least this share of them does not exceed."""
    return sorted(values)[math.ceil(share * len(values)) - 1]


@pytest.fixture
def opened(page):
    """(page, server) with the dashboard at rest."""
    with started(DASHBOARD) as running:
        page.set_viewport_size({"width": 1366, "height": 768})
        page.goto(running.address)
        expect(page.locator(".massdash-charts[data-frame]")).to_be_visible(timeout=60_000)
        page.wait_for_timeout(1500)
        yield page, running
        page.close()


def seconds_of_processor(pid):
    """User and system time of a process so far."""
    fields = Path(f"/proc/{pid}/stat").read_text().rpartition(")")[2].split()
    return (int(fields[11]) + int(fields[12])) / os.sysconf("SC_CLK_TCK")


def shown_last(page):
    """Whether the table came to agree with the mass at which the slider was left."""
    mass = float(page.locator(".massdash-field-text").first.input_value())
    expected = float(evaluate(replace(builtin("lantern"), mass=mass * units.Msun))["radius"].value)
    page.wait_for_timeout(500)
    return float(page.locator('.massdash-table [data-name="radius"]').get_attribute("data-value")) == expected


def test_slider_to_pixels(opened):
    page, running = opened
    painted, later = zip(*page.evaluate(SCRIPT, STEPS)["steps"], strict=True)
    (kernel,) = running.kernels()
    before = seconds_of_processor(kernel)
    drag = page.evaluate(SCRIPT, DRAG)["drag"]
    used = seconds_of_processor(kernel) - before
    figures = {
        "median_ms": round(statistics.median(painted), 1),
        "p95_ms": round(percentile(painted, 0.95), 1),
        "median_one_frame_later_ms": round(statistics.median(later), 1),
        "p95_one_frame_later_ms": round(percentile(later, 0.95), 1),
        "updates_per_s": round(drag["updates"] / drag["seconds"], 1),
        "moves_per_s": round(drag["moves"] / drag["seconds"], 1),
        "kernel_ms_per_update": round(1000 * used / drag["updates"], 1),
        "settled_after_ms": round(drag["settled"], 1),
        "newest_last": drag["inOrder"] and shown_last(page),
    }
    report("slider_to_pixels", figures, sentence(figures))
    assert figures["newest_last"]


def sentence(figures):
    told = (
        "Slider to pixels, four charts: median {median_ms} ms, 95th percentile {p95_ms} ms; {updates_per_s} updates/s "
    )
    told += (
        "in a 3 s drag of {moves_per_s} moves/s, {kernel_ms_per_update} ms of kernel time each; the newest value was "
    )
    return told.format(**figures) + ("shown last" if figures["newest_last"] else "NOT shown last")
