"""The one place where the stages meet, in order: matter, onset, ignition, present state, life, fate."""

from dataclasses import dataclass

from massdash.errors import refuse
from massdash.model import life, pending, structure, verdict
from massdash.model.ledger import Ledger
from massdash.outcome import Outcome
from massdash.scenario import Scenario
from massdash.scenario.values import shown

__all__ = ["Workings", "evaluate"]


@dataclass(frozen=True, eq=False)
class Workings:
    """What the stages found, in their own terms; ``present`` and ``times`` are None where they are not covered."""

    matter: structure.Matter
    stability: structure.Stability
    present: object
    times: object


def evaluate(scenario, *, bounds=True):
    """The Outcome of a Scenario: every quantity of ``massdash.quantities``, the fate and the verdict.

    Without ``bounds`` the spread that takes time of its own is left out, which the live dashboard does while a slider
    moves; all values are the same. Raises ComputationError when no answer is found for an acceptable scenario.
    """
    if not isinstance(scenario, Scenario):
        raise refuse("scenario", shown(scenario), "a Scenario (md.load reads one from a file)")
    ledger = Ledger()
    matter = structure.matter(scenario, ledger)
    stability = structure.stability(scenario, matter, ledger, bounds)
    state = structure.present(scenario, matter, stability, ledger)
    times = life.life(scenario, matter, stability, state, ledger)
    pending.fill(ledger)
    pending.warn_of_unused(scenario, ledger)
    return Outcome(
        scenario=scenario,
        entries=ledger.entries,
        birth="not_asked",
        fate=verdict.fate(stability, times),
        headline=verdict.headline(scenario, ledger, stability, times),
        warnings=tuple(ledger.warnings),
        workings=Workings(matter, stability, state, times),
    )
