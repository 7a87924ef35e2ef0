"""What later stages will bring: until then these quantities have no value and say so."""

from massdash.quantities import QUANTITIES

#: Fields that no stage uses yet; set to other than their default they draw a warning.
USED_FIELDS = ("label", "mass", "helium", "metals", "ignition_temperature", "spin", "background_density")

_NOTES = {
    "life": "needs burning rates and collapse, which are not built in yet",
    "birth": "birth and infall are not built in yet",
    "fate": "fates and remnants are not built in yet",
    "growth": "growth of the remnant is not built in yet",
    "sighting": "brightness is not built in yet",
}


def fill(ledger):
    """Enter every quantity that no stage has written, with its note."""
    for name, info in QUANTITIES.items():
        if name not in ledger.entries:
            ledger.leave(name, _NOTES[info.stage])


def warn_of_unused(scenario, ledger):
    """One warning for all fields that were set and have no effect yet."""
    unused = [name for name in scenario.changed if name not in USED_FIELDS]
    if unused:
        verb = "has" if len(unused) == 1 else "have"
        ledger.warn(
            f"{', '.join(unused)} {verb} no effect yet: the stages that use it are not built in.".replace(
                "use it", "use it" if len(unused) == 1 else "use them"
            )
        )
