"""The vectorised secant method: closed forms, every shape, and answers in words when there is no root."""

import numpy as np
import pytest

from massdash.errors import ComputationError
from massdash.physics.roots import secant


@pytest.mark.parametrize("shape", [(), (1,), (7,), (3, 4), (0,), (2, 0)])
def test_logarithms_for_every_shape(shape):
    wanted = np.linspace(-30, 40, int(np.prod(shape))).reshape(shape)
    found = secant(lambda u: u + np.exp(u) - wanted - np.exp(wanted), np.zeros(shape) + wanted / 2, what="test")
    assert np.shape(found) == shape
    assert found == pytest.approx(wanted, abs=1e-12)


def test_elements_do_not_disturb_each_other():
    wanted = np.array([1e-3, 1.0, 25.0])
    together = secant(lambda u: np.exp(u) - wanted, np.zeros(3), what="test")
    alone = [secant(lambda u, one=one: np.exp(u) - one, np.zeros(()), what="test") for one in wanted]
    assert together == pytest.approx(np.array(alone), abs=1e-12)
    assert together == pytest.approx(np.log(wanted), abs=1e-12)


def test_start_on_the_root():
    assert secant(lambda u: u - 1.0, np.ones(2), what="test") == pytest.approx([1.0, 1.0], abs=1e-13)


@pytest.mark.parametrize("residual", [lambda u: np.exp(u) + 1.0, lambda u: u**2 + 1.0, lambda u: 0 * u + np.nan])
def test_no_root(residual):
    with np.errstate(over="ignore", invalid="ignore"), pytest.raises(ComputationError, match="star: no answer found"):
        secant(residual, np.zeros(2), what="star")


def test_one_element_without_a_root_is_not_passed_over():
    with pytest.raises(ComputationError):
        secant(lambda u: u**2 - np.array([1.0, -1.0]), np.full(2, 0.9), what="star")
