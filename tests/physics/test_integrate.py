"""The guarded solver: a bad start, an endless integration and an answer that is not finite are refused in words."""

from types import SimpleNamespace

import numpy as np
import pytest

from massdash.errors import ComputationError
from massdash.physics.integrate import integrate

TIGHT = {"rtol": 1e-12, "atol": 1e-14, "what": "decay"}


def decay(t, y):
    return [-y[0]]


def test_closed_form():
    assert integrate(decay, (0, 1), [1.0], **TIGHT).y[0, -1] == pytest.approx(np.exp(-1), rel=1e-11)


@pytest.mark.parametrize(("span", "start"), [((0, np.nan), [1.0]), ((0, np.inf), [1.0]), ((0, 1), [np.nan])])
def test_bad_start(span, start):
    with pytest.raises(ComputationError, match="decay: the start of the integration is not finite"):
        integrate(decay, span, start, **TIGHT)


def test_too_many_evaluations():
    with pytest.raises(ComputationError, match="decay: no answer after 50 evaluations"):
        integrate(lambda t, y: [np.sin(1e4 * t) * 1e4], (0, 1), [1.0], most=50, **TIGHT)


@pytest.mark.filterwarnings("ignore::RuntimeWarning")  # what the guard is for
@pytest.mark.parametrize("slope", [lambda t, y: [y[0] ** 2], lambda t, y: [np.nan if t > 0.5 else -y[0]]])
def test_blow_up(slope):
    with pytest.raises(ComputationError, match=r"^decay: "):
        integrate(slope, (0, 2), [1.0], most=20_000, **TIGHT)


def test_success_with_an_answer_that_is_not_finite(monkeypatch):
    """Some solvers report success all the same."""

    def lying(*_, **__):
        return SimpleNamespace(success=True, y=np.array([[1.0, np.nan]]), message="fine")

    monkeypatch.setattr("scipy.integrate.solve_ivp", lying)
    with pytest.raises(ComputationError, match=r"decay: the integration failed \(fine\)"):
        integrate(decay, (0, 1), [1.0], **TIGHT)
