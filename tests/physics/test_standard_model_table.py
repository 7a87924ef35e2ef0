"""data/standard_model.csv against the script that writes it, and convergence of its quadrature."""

from importlib.resources import files

import numpy as np
import pytest

from massdash.data.builders import standard_model as builder


def numbers(text):
    return np.array([float(word) for line in text.splitlines()[1:] for word in line.split(",") if word[:1].isdigit()])


def test_the_shipped_table_is_what_the_builder_writes():
    shipped = (files("massdash") / "data" / "standard_model.csv").read_text()
    assert numbers(shipped).size == 6 + 2 * builder.NODES
    assert numbers(shipped) == pytest.approx(numbers(builder.text()), rel=1e-11, abs=1e-18)


def test_the_quadrature_converges():
    def inertia(count):
        xi, _, weight = builder.nodes(count)
        return np.sum(weight * xi**2)

    exact = inertia(40)
    assert abs(inertia(8) / exact - 1) > 1e-9 > abs(inertia(builder.NODES) / exact - 1) * 1e4
