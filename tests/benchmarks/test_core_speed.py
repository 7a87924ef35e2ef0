"""Time of the core without a dashboard: imports, one evaluation, and the figures of one step of a drag.

Steps are new values each, so that nothing kept from an earlier step answers for them, except what a drag of that field
is meant to keep.
"""

import statistics
import subprocess
import sys
import time
from dataclasses import replace
from pathlib import Path

import pytest
from astropy import units as u
from reporting import report

from massdash import builtin, evaluate
from massdash.charts import CHARTS

pytestmark = pytest.mark.benchmark
ROOT = Path(__file__).resolve().parents[2]
STAR = builtin("lantern")
RUNS, STEPS = 7, 60
DRAGS = {
    "mass": lambda i: replace(STAR, mass=1.2e5 * 1.001 ** (i + 1) * u.Msun),
    "helium": lambda i: replace(STAR, helium=0.247 + 1e-3 * (i + 1)),
    "ignition": lambda i: replace(STAR, ignition_temperature=1.6e8 * 0.999 ** (i + 1) * u.K),
}


def seconds(call):
    start = time.perf_counter()
    call()
    return time.perf_counter() - start


def milliseconds(times):
    """Median and smallest, as a busy machine only ever adds."""
    return {"median_ms": round(1e3 * statistics.median(times), 2), "least_ms": round(1e3 * min(times), 2)}


def fresh(*arguments):
    """Times of fresh interpreters from start to end: what a user waits for."""

    def run():
        subprocess.run([sys.executable, *arguments], cwd=ROOT, check=True, stdout=subprocess.DEVNULL)

    run()  # compiles and fills the file cache
    return [seconds(run) for _ in range(RUNS)]


@pytest.mark.parametrize(
    ("name", "arguments", "target"),
    [
        ("import massdash", ("-c", "import massdash"), 800),
        ("import massdash and evaluate", ("-c", "from massdash import Scenario, evaluate"), 800),
        ("massdash --help", ("-m", "massdash", "--help"), 300),
    ],
)
def test_fresh_interpreters(name, arguments, target):
    bare = milliseconds(fresh("-c", "pass"))
    found = milliseconds(fresh(*arguments))
    report(
        name,
        {**found, "bare_python_ms": bare["median_ms"], "target_ms": target},
        f"{name}: {found['median_ms']:.0f} ms in a fresh interpreter, of which Python itself {bare['median_ms']:.0f}; "
        f"target {target} ms.",
    )


def test_evaluate():
    scenarios = [DRAGS["mass"](i) for i in range(STEPS)]
    evaluate(STAR)
    found = milliseconds([seconds(lambda s=s: evaluate(s)) for s in scenarios])
    report("evaluate", {**found, "target_ms": 10}, f"evaluate, warm: {found['median_ms']} ms; target 10 ms.")


@pytest.mark.parametrize("field", DRAGS)
def test_drag_step(field):
    def draw(scenario):
        outcome = evaluate(scenario, bounds=False)  # as the dashboard does
        return [make(outcome) for make in CHARTS.values()]

    draw(STAR)
    found = milliseconds([seconds(lambda i=i: draw(DRAGS[field](i))) for i in range(STEPS)])
    report(
        f"drag {field}",
        {**found, "target_ms": 8},
        f"One step of a drag of {field}, evaluate and four charts: {found['median_ms']} ms; target 8 ms.",
    )
