"""The fate and the headline: what the numbers say, in words."""

from massdash.numerals import duration, numeral


def fate(stability, times):
    """The fate as far as it is known at this level."""
    if stability.settles is False:
        return "collapse_before_ignition"
    if stability.settles and times is not None and times.burning is not None and times.onset_reached:
        return "collapse_in_hydrogen_burning"
    return "undecided"


def headline(scenario, ledger, stability, times):
    """Two or three sentences: does it settle, how far from collapse, how bright and how long, what limits it."""
    name = f"{scenario.label} ({numeral(scenario.number('mass'))} Msun)"
    if stability.settles is None:
        return f"{name}: no verdict, because the background is too dense for the methods at hand."
    sentences = [_first(name, ledger, stability), _limit(ledger), _shining(ledger, stability, times)]
    return " ".join(sentence for sentence in sentences if sentence)


def _first(name, ledger, stability):
    onset, ignition = _apart(stability.onset.temperature, stability.ignition)
    if ledger.entries["onset_temperature"].value is None:
        return f"{name} settles: hydrogen ignites at {ignition} K, and so light a star meets no onset of collapse."
    if not stability.settles:
        return f"{name} never ignites: collapse sets in at {onset} K, before the {ignition} K that burning needs."
    if stability.igniting is None:
        return f"{name} would settle at {ignition} K, but its background is too dense there for the methods at hand."
    if ledger.entries["hydrogen_lifetime"].value is None:
        return f"{name} could settle at {ignition} K, below the onset of collapse at {onset} K, but has no hydrogen."
    margin = ledger.entries["stability_margin"].value
    where = f", with a stability margin of {numeral(margin, 2)}" if margin is not None else ""
    return f"{name} settles: hydrogen ignites at {ignition} K, below the onset of collapse at {onset} K{where}."


def _apart(one, other):
    """Both numbers with as many digits, three or more, as it takes to tell them apart."""
    for digits in range(3, 9):
        texts = numeral(one, digits), numeral(other, digits)
        if texts[0] != texts[1]:
            break
    return texts


def _limit(ledger):
    value = ledger.entries["maximum_mass"].value
    return f"The largest mass that ignites is {numeral(value)} Msun." if value is not None else ""


def _shining(ledger, stability, times):
    luminosity = ledger.entries["luminosity"].value
    if luminosity is None:
        return ""
    shines = f"It shines at {numeral(luminosity, 2)} Lsun"
    if stability.settles:
        burning = ledger.entries["hydrogen_lifetime"].value
        if burning is None:
            return f"{shines}."
        end = "until rising mean weight makes it unstable" if times.onset_reached else "until its hydrogen is used up"
        return f"{shines} for {duration(burning, 2)}, {end}."
    rate = ledger.entries["assembly_rate"].value
    if rate is None:
        return f"{shines}."
    contraction = duration(ledger.entries["contraction_time"].value, 2)
    return (
        f"{shines}; it contracts in only {contraction}, so its gas must arrive at {numeral(rate, 2)} Msun/yr or faster."
    )
