"""How benchmarks report: one line of JSON for programs, one sentence for people. Nothing is judged here."""

import json
import os


def report(name, figures, sentence):
    """Print the figures of one benchmark; with MASSDASH_BENCHMARKS=FILE also append the JSON line to that file."""
    load = round(os.getloadavg()[0], 2) if hasattr(os, "getloadavg") else None
    line = json.dumps({"benchmark": name, "cores": os.cpu_count(), "load": load, **figures})
    print(f"\n{line}\n{sentence} (load average {load} on {os.cpu_count()} cores)")
    if path := os.environ.get("MASSDASH_BENCHMARKS"):
        with open(path, "a", encoding="utf-8") as file:
            file.write(line + "\n")
