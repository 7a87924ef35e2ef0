"""Stars of full relativity per second on one core, beside scipy's solve_ivp in the same run."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest
from reporting import report

ONE_THREAD = dict.fromkeys(("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"), "1")


@pytest.mark.benchmark
def test_relativity_speed():
    script = Path(__file__).with_name("relativity_speed.py")
    done = subprocess.run(
        [sys.executable, str(script)], env={**os.environ, **ONE_THREAD}, capture_output=True, text=True, check=True
    )
    figures = json.loads(done.stdout)
    solver, ratio, formula, live = (figures[name] for name in ("solve_ivp", "ratio", "formula", "live"))
    slow = solver["tight"]["stars_per_second"]
    table, back = formula["from_beta_sigma"], formula["from_mass_temperature"]
    report(
        "relativity_speed",
        figures,
        f"Mass, radius, binding and frequency of {table['stars_per_second'] / 1e6:.2f} million stars/s from (beta_c, "
        f"sigma), error {table['error']:.0e}, and {back['stars_per_second'] / 1e6:.2f} million stars/s from (rest "
        f"mass, T_c), error {back['error']:.0e}: {table['stars_per_second'] / slow:.0f} and "
        f"{back['stars_per_second'] / slow:.0f} times solve_ivp, which integrates {slow:.0f} structures/s to "
        f"{solver['tight']['error']:.0e}. Direct integration: {ratio['tight']:.0f} times solve_ivp at that error and "
        f"{ratio['loose']:.0f} times at {solver['loose']['error']:.0e}. A map of 200 x 200 margins takes "
        f"{live['map_200x200_ms']:.0f} ms, 300 onsets {live['onset_300_ms']:.1f} ms, 300 maximum masses "
        f"{live['maximum_mass_300_ms']:.1f} ms",
    )
