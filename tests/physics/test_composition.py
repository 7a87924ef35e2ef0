"""Mean molecular weights. Sources: section 11 of the project's check values (computed)."""

import numpy as np
import pytest

from massdash.physics.composition import (
    electrons_per_baryon,
    hydrogen,
    hydrogen_of_weight,
    mean_molecular_weight,
)


@pytest.mark.parametrize(("helium", "mu"), [(0.2470, 0.591279), (0.2454, 0.590580), (0.2450, 0.590406)])
def test_primordial_weights(helium, mu):
    assert mean_molecular_weight(helium, 0.0) == pytest.approx(mu, abs=5e-7)


@pytest.mark.parametrize(("helium", "metals", "mu"), [(0, 0, 1 / 2), (1, 0, 4 / 3), (0, 1, 2)])
def test_pure_substances(helium, metals, mu):
    assert mean_molecular_weight(helium, metals) == pytest.approx(mu, rel=1e-15)


def test_weight_per_electron():
    assert 1 / electrons_per_baryon(0.2470, 0.0) == pytest.approx(1.140901, abs=5e-7)
    assert electrons_per_baryon(0.3, 0.1) == pytest.approx((1 + hydrogen(0.3, 0.1)) / 2, rel=1e-15)


def test_particles_are_nuclei_of_hydrogen_and_helium_and_all_electrons():
    helium, metals = np.array([0.0, 0.25, 0.7]), np.array([0.1, 0.0, 0.02])
    particles = hydrogen(helium, metals) + helium / 4 + electrons_per_baryon(helium, metals)
    assert mean_molecular_weight(helium, metals) == pytest.approx(1 / particles, rel=1e-15)


def test_weight_and_hydrogen_are_inverses_for_all_shapes():
    helium, metals = np.linspace(0, 0.9, 7)[:, None], np.array([0.0, 0.02, 0.1])
    weight = mean_molecular_weight(helium, metals)
    assert weight.shape == (7, 3)
    assert hydrogen_of_weight(weight, metals) == pytest.approx(hydrogen(helium, metals), abs=1e-14)
    assert mean_molecular_weight(np.zeros((0,)), 0.0).shape == (0,)


def test_infinite_weight_means_no_hydrogen():
    assert hydrogen_of_weight(np.inf, 0.0) < 0
