"""Matter, onset of collapse, ignition and the present state: the first stages of ``evaluate``."""

from dataclasses import dataclass
from functools import lru_cache

from massdash.constants import K_B, M_SUN, M_U, R_SUN
from massdash.errors import ComputationError
from massdash.model import pairs, words
from massdash.physics import composition, eos, relativistic
from massdash.physics import pairs as gas_with_pairs
from massdash.physics.family import Star
from massdash.physics.onset import maximum_mass_leading, onset_leading
from massdash.physics.post_newtonian import SHEDDING, Body

#: Taken while ignition temperatures cannot be computed; typical of a metal-free star that has settled [K].
ASSUMED_IGNITION = 1.5e8

#: Largest background density, in units of the central density, for which the functional is used.
COVERED_DILUTION = 0.01


@dataclass(frozen=True, eq=False)
class Matter:
    """Composition and the body it makes; ``mass`` in g."""

    hydrogen: float
    helium: float
    metals: float
    mu: float
    body: Body

    def covers(self, density):
        """Whether the background is thin enough at this central density."""
        return self.body.background <= COVERED_DILUTION * density


@dataclass(frozen=True, eq=False)
class Stability:
    """The onset, the same without pairs, and the state at the ignition temperature, None where they are not covered;
    ``ignition`` in K. ``ignites_with_pairs`` says that the state at ignition was computed with pairs."""

    onset: Star | None
    onset_without_pairs: Star | None
    ignition: float
    igniting: Star | None
    ignites_with_pairs: bool

    @property
    def shows_pairs(self):
        """Whether the present state was computed with pairs."""
        return self.ignites_with_pairs if self.settles else self.onset is not self.onset_without_pairs

    @property
    def settles(self):
        """Whether burning starts before collapse does; None when the onset is not covered."""
        return None if self.onset is None else bool(self.ignition <= self.onset.temperature)


def matter(scenario, ledger):
    """Composition of the scenario."""
    helium, metals = scenario.helium, scenario.metals
    mu = float(composition.mean_molecular_weight(helium, metals))
    mass, background = scenario.number("mass") * M_SUN, scenario.number("background_density")
    body = Body(mass, mu, scenario.spin**2 * SHEDDING, background)
    ledger.put("mean_molecular_weight", mu, "full ionisation, mass numbers", words.COMPOSITION_SOURCE)
    if scenario.number("mass") < 300:
        ledger.warn("Below about 300 Msun gas pressure is so strong that the closed forms (n = 3) are no longer good.")
    return Matter(scenario.hydrogen, helium, metals, mu, body)


_ONSET = {
    "temperature": lambda state: state.temperature,
    "density": lambda state: state.density,
    "energy": lambda state: state.energy,
    "radius": lambda state: state.radius / R_SUN,
    "compactness": lambda state: state.compactness,
}


def _find_onset(scenario, matter, ledger, bounds):
    """The onset in full relativity, the same without pairs, and its closed form, written down; None twice where the
    background is too dense."""
    body = matter.body
    leading = onset_leading(body)
    if not matter.covers(leading.density):
        ledger.leave([f"onset_{what}{road}" for road in ("", "_pn") for what in _ONSET], words.NOT_COVERED)
        return None, None
    second = onset_leading(Body(body.mass, body.mu, body.rotation, body.background, second_order=True))
    plain = relativistic.onset(body.mass, body.mu, body.rotation, body.background)
    wanted = bounds or pairs.matter_at(plain.temperature)
    found = _put_onset(scenario, matter, plain, pairs.onset(matter) if wanted else None, ledger)
    for what, of in _ONSET.items():
        ledger.put(f"onset_{what}_pn", of(leading), words.LEADING, words.energy_source(scenario), other=of(second))
    return found, plain


def _put_onset(scenario, matter, plain, paired, ledger):
    """Write the onset with its bound; returns the Star behind the values."""
    hot = pairs.matter_at(plain.temperature)
    value, other, note = plain, paired, pairs.BOUND
    method, source = words.onset_method(scenario), words.stability_source(scenario)
    if hot and paired is None and not pairs.left_out(matter.body):
        ledger.leave([f"onset_{what}" for what in _ONSET], pairs.NONE, words.ONSET_WITH_PAIRS, source)
        return plain
    if paired is None:
        note = pairs.LEFT_OUT if hot else ""
        if hot:
            ledger.warn(f"The onset lies above 5e8 K: {note}.")
    elif hot:
        value, other, note, method = paired, plain, pairs.INCLUDED, words.ONSET_WITH_PAIRS
        source = f"{source}; {words.PAIR_SOURCE}"
    for what, of in _ONSET.items():
        ledger.put(f"onset_{what}", of(value), method, source, note=note, other=other and of(other))
    return value


def _find_maximum_mass(scenario, matter, ignition, ledger, bounds, paired):
    body = matter.body
    source = words.energy_source(scenario)
    arguments = (body.mu, ignition, body.rotation, body.background)
    try:
        leading, second, exact = _largest(*arguments)
    except ComputationError:
        if not body.background > 0:
            raise
        ledger.leave(["maximum_mass", "maximum_mass_pn"], words.NO_LARGEST)
        return
    if not matter.covers(onset_leading(Body(leading, *arguments[::2], body.background)).density):
        ledger.leave(["maximum_mass", "maximum_mass_pn"], words.NOT_COVERED)
        return
    with_pairs = pairs.maximum_mass(matter, ignition) if bounds or paired else None
    _put_maximum_mass(scenario, exact / M_SUN, with_pairs, paired, ledger)
    ledger.put("maximum_mass_pn", leading / M_SUN, words.LEADING, source, other=second / M_SUN)


@lru_cache(maxsize=64)
def _largest(*arguments):
    """Maximum mass [g] at leading order, with the second order, and in full relativity; kept while only the mass of the
    star on show is changed."""
    second = maximum_mass_leading(*arguments, second_order=True)
    return maximum_mass_leading(*arguments), second, relativistic.maximum_mass(*arguments)


def _put_maximum_mass(scenario, plain, with_pairs, paired, ledger):
    """Write the maximum mass [Msun] with its bound; ``paired`` says that pairs decide, as for the margin."""
    method, source = words.onset_method(scenario), words.stability_source(scenario)
    if paired and with_pairs is None:
        ledger.leave("maximum_mass", pairs.NO_LARGEST, words.ONSET_WITH_PAIRS, source)
    elif paired:
        source = f"{source}; {words.PAIR_SOURCE}"
        value, note = with_pairs / M_SUN, pairs.INCLUDED
        ledger.put("maximum_mass", value, words.ONSET_WITH_PAIRS, source, note=note, other=plain)
    elif with_pairs is None:
        ledger.put("maximum_mass", plain, method, source)
    else:
        ledger.put("maximum_mass", plain, method, source, note=pairs.BOUND, other=with_pairs / M_SUN)


def ignition_of(scenario):
    """The ignition temperature [K], given or assumed."""
    given = scenario.number("ignition_temperature")
    return ASSUMED_IGNITION if given is None else given


def stability(scenario, matter, ledger, bounds):
    """Onset, ignition, maximum mass and the margin at ignition."""
    given = scenario.ignition_temperature is not None
    ignition = ignition_of(scenario)
    if not given:
        ledger.warn("No ignition temperature is given: 1.5e8 K is assumed until burning rates are built in.")
    found, plain = _find_onset(scenario, matter, ledger, bounds)
    paired = pairs.decide(matter.body, ignition, onset_with_pairs=found is not plain)
    _find_maximum_mass(scenario, matter, ignition, ledger, bounds, paired)
    result = Stability(found, plain, ignition, _igniting(matter, ignition, paired), paired)
    never = "" if result.settles is not False else "never reached: collapse sets in first"
    method = words.GIVEN if given else words.ASSUMED
    for name in ("ignition_temperature", "settled_temperature"):
        ledger.put(name, ignition, method, words.NO_SOURCE, note=never)
    _put_margin(scenario, result, ledger, never)
    _warn_between(ledger, result)
    return result


def _igniting(matter, ignition, paired):
    """The state at the ignition temperature; None where there is none, or its background is too dense."""
    body = matter.body
    try:
        if paired:
            state = pairs.at_temperature(matter, ignition)
        else:
            state = relativistic.at_temperature(body.mass, body.mu, ignition, body.rotation, body.background)
    except ComputationError:
        return None
    return state if matter.covers(state.density) else None


def _warn_between(ledger, stability):
    """Say so when the verdict would be another at the bound of the onset."""
    bound = ledger.entries["onset_temperature"].low
    if stability.settles and bound is not None and bound < stability.ignition:
        ledger.warn("With relativistic electrons and pairs collapse would set in before ignition: see the bounds.")


def _put_margin(scenario, stability, ledger, never):
    state, source, method = stability.igniting, words.stability_source(scenario), words.onset_method(scenario)
    margins = ("stability_margin", "settled_stability_margin")
    if state is None:
        why = words.BEYOND_TABLE if never else words.NOT_COVERED
        ledger.leave([*margins, "pulsation_frequency_squared", "growth_time"], why)
        return
    if stability.ignites_with_pairs:
        method, source = words.ONSET_WITH_PAIRS, f"{source}; {words.PAIR_SOURCE}"
    if state.stiffness > 0:
        for name in margins:
            ledger.put(name, state.margin, method, source, note=never)
    else:
        ledger.leave(margins, words.SOFT, method, source)
    ledger.put("pulsation_frequency_squared", state.frequency_squared, method, source, note=never)
    if state.frequency_squared < 0:
        ledger.put("growth_time", (-state.frequency_squared) ** -0.5, method, source, note=never)
    else:
        ledger.leave("growth_time", "the star is stable", method, source)


def present(scenario, matter, stability, ledger):
    """The equilibrium at the lower of ignition and onset temperature; None where not covered."""
    if stability.settles is None:
        ledger.leave("settles", words.NOT_COVERED)
    else:
        ledger.put("settles", float(stability.settles), words.onset_method(scenario), words.stability_source(scenario))
    state = stability.igniting if stability.settles else stability.onset
    if state is None:
        ledger.leave(_PRESENT, words.NOT_COVERED)
        return None
    paired = stability.shows_pairs
    if pairs.matter_at(state.temperature) and not paired:
        ledger.warn("The centre is hotter than 5e8 K: with spin or a background electron-positron pairs are left out.")
    if paired or stability.onset is not stability.onset_without_pairs:
        ledger.warn("Electron-positron pairs are in the values of this star, but the charts leave them out.")
    _put_gas(matter, state, ledger, paired)
    values = {
        "central_temperature": state.temperature,
        "central_density": state.density,
        "radius": state.radius / R_SUN,
        "gravitational_mass": state.gravitational_mass / M_SUN,
        "binding_energy": state.energy,
        "compactness": state.compactness,
    }
    method, source = words.RELATIVISTIC, words.RELATIVITY_SOURCE
    if paired:
        method, source = words.RELATIVISTIC_WITH_PAIRS, f"{source}; {words.PAIR_SOURCE}"
    for name, value in values.items():
        ledger.put(name, value, method, source)
    return state


_PRESENT = (
    "gas_pressure_fraction",
    "adiabatic_index",
    "entropy_per_baryon",
    "radiation_entropy",
    "central_temperature",
    "central_density",
    "radius",
    "gravitational_mass",
    "binding_energy",
    "compactness",
)


def _put_gas(matter, state, ledger, paired):
    """What the gas is like at the centre, with pairs or without."""
    place, mixture = (state.density, state.temperature), (matter.helium, matter.metals)
    if paired:
        method, source, how = words.GAS_WITH_PAIRS, words.PAIR_SOURCE, ""
        index = gas_with_pairs.adiabatic_index(*place, *mixture)
        entropy = gas_with_pairs.specific_entropy(*place, *mixture)
    else:
        method, source, how = words.GAS, words.GAS_SOURCE, "; Sackur-Tetrode"
        index, entropy = eos.adiabatic_index(state.beta), eos.specific_entropy(*place, *mixture)
    radiation = 4.0 * eos.radiation_pressure(state.temperature) * M_U / (state.density * K_B * state.temperature)
    ledger.put("gas_pressure_fraction", state.beta, method, source)
    ledger.put("adiabatic_index", index, method, source)
    ledger.put("entropy_per_baryon", entropy, method + how, source)
    ledger.put("radiation_entropy", radiation, method, source)
