"""Matter, onset of collapse, ignition and the present state: the first stages of ``evaluate``."""

from dataclasses import dataclass

from massdash.constants import M_SUN, R_SUN, C
from massdash.errors import ComputationError
from massdash.model import words
from massdash.physics import composition, eos
from massdash.physics.onset import maximum_mass, maximum_mass_leading, onset, onset_leading
from massdash.physics.post_newtonian import SHEDDING, Body, Equilibrium, equilibrium_at_temperature

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
    """The onset (None where not covered), the ignition temperature and the state at ignition (None likewise)."""

    onset: Equilibrium | None
    ignition: float
    igniting: Equilibrium | None

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
        ledger.warn("Below about 300 Msun gas pressure is so strong that the n = 3 shape is no longer good.")
    return Matter(scenario.hydrogen, helium, metals, mu, body)


def _put_onset(ledger, scenario, state, ending, method, other=None, note=""):
    source = words.energy_source(scenario)
    values = {
        "temperature": lambda e: e.temperature,
        "density": lambda e: e.density,
        "energy": lambda e: e.energy,
        "radius": lambda e: e.radius / R_SUN,
        "compactness": lambda e: e.compactness,
    }
    for what, of in values.items():
        ledger.put(f"onset_{what}{ending}", of(state), method, source, other=other and of(other), note=note)


def _find_onset(scenario, matter, ledger):
    """The onset by both roads, written down; None where the background is too dense."""
    body = matter.body
    leading = onset_leading(body)
    names = [f"onset_{what}" for what in ("temperature", "density", "energy", "radius", "compactness")]
    if not matter.covers(leading.density):
        ledger.leave([*names, *(f"{name}_pn" for name in names)], words.NOT_COVERED)
        return None
    second = onset_leading(Body(body.mass, body.mu, body.rotation, body.background, second_order=True))
    exact = onset(body)
    drop = 1.13 * exact.beta
    relativity = f"full general relativity lowers the temperature by about {100 * drop:.2g} per cent"
    pairs = exact.temperature > eos.PAIR_TEMPERATURE
    if pairs:
        ledger.warn(
            "The onset lies above 5e8 K, where electron-positron pairs, not included yet, bring collapse earlier."
        )
    _put_onset(ledger, scenario, exact, "", words.EXACT, note=relativity + ("; pairs matter here" if pairs else ""))
    _put_onset(ledger, scenario, leading, "_pn", words.LEADING, other=second)
    return exact


def _find_maximum_mass(scenario, matter, ignition, ledger):
    body = matter.body
    source = words.energy_source(scenario)
    arguments = (body.mu, ignition, body.rotation, body.background)
    try:
        leading = maximum_mass_leading(*arguments)
    except ComputationError:
        # a background holds the onset above some temperature however heavy the star; the field's range ends before
        ledger.leave(["maximum_mass", "maximum_mass_pn"], words.NOT_COVERED)
        return
    if not matter.covers(onset_leading(Body(leading, *arguments[::2], body.background)).density):
        ledger.leave(["maximum_mass", "maximum_mass_pn"], words.NOT_COVERED)
        return
    second = maximum_mass_leading(*arguments, second_order=True)
    ledger.put("maximum_mass", maximum_mass(*arguments) / M_SUN, words.EXACT, source)
    ledger.put("maximum_mass_pn", leading / M_SUN, words.LEADING, source, other=second / M_SUN)


def ignition_of(scenario):
    """The ignition temperature [K], given or assumed."""
    given = scenario.number("ignition_temperature")
    return ASSUMED_IGNITION if given is None else given


def stability(scenario, matter, ledger):
    """Onset, ignition, maximum mass and the margin at ignition."""
    given = scenario.ignition_temperature is not None
    ignition = ignition_of(scenario)
    if not given:
        ledger.warn("No ignition temperature is given: 1.5e8 K is assumed until burning rates are built in.")
    found = _find_onset(scenario, matter, ledger)
    _find_maximum_mass(scenario, matter, ignition, ledger)
    result = Stability(found, ignition, _igniting(matter, ignition))
    never = "" if result.settles is not False else "never reached: collapse sets in first"
    method = words.GIVEN if given else words.ASSUMED
    for name in ("ignition_temperature", "settled_temperature"):
        ledger.put(name, ignition, method, words.NO_SOURCE, note=never)
    _put_margin(scenario, result, ledger, never)
    return result


def _igniting(matter, ignition):
    """The state at the ignition temperature; None where the background is too dense for one."""
    try:
        state = equilibrium_at_temperature(matter.body, ignition)
    except ComputationError:
        if matter.body.background > 0:
            return None
        raise
    return state if matter.covers(state.density) else None


def _put_margin(scenario, stability, ledger, never):
    state, source = stability.igniting, words.energy_source(scenario)
    names = ("stability_margin", "settled_stability_margin", "pulsation_frequency_squared", "growth_time")
    if state is None:
        ledger.leave(names, words.NOT_COVERED)
        return
    far = "; far outside the post-Newtonian range" if state.compactness > 0.05 else ""
    for name in names[:2]:
        ledger.put(name, state.margin, words.EXACT, source, note=never + far)
    homologous = f"{words.EXACT}, homologous motion"
    square = state.frequency_squared
    ledger.put("pulsation_frequency_squared", square, homologous, source, note=never + far)
    if square < 0:
        ledger.put("growth_time", (-square) ** -0.5, homologous, source, note=never + far)
    else:
        ledger.leave("growth_time", "the star is stable", homologous, source)


def present(scenario, matter, stability, ledger):
    """The equilibrium at the lower of ignition and onset temperature; None where not covered."""
    if stability.settles is None:
        ledger.leave("settles", words.NOT_COVERED)
    else:
        ledger.put("settles", float(stability.settles), words.EXACT, words.energy_source(scenario))
    state = stability.igniting if stability.settles else stability.onset
    if state is None:
        ledger.leave(_PRESENT, words.NOT_COVERED)
        return None
    if state.temperature > eos.PAIR_TEMPERATURE:
        ledger.warn("The centre is hotter than 5e8 K, where electron-positron pairs, not included yet, matter.")
    _put_gas(matter, state, ledger)
    source = words.energy_source(scenario)
    ledger.put("central_temperature", state.temperature, words.EXACT, source)
    ledger.put("central_density", state.density, words.EXACT, source)
    ledger.put("radius", state.radius / R_SUN, words.EXACT, source)
    mass = (matter.body.mass + state.energy / C**2) / M_SUN
    ledger.put("gravitational_mass", mass, words.EXACT, source)
    ledger.put("binding_energy", state.energy, words.EXACT, source)
    ledger.put("compactness", state.compactness, words.EXACT, source)
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


def _put_gas(matter, state, ledger):
    entropy = eos.specific_entropy(state.density, state.temperature, matter.helium, matter.metals)
    ledger.put("gas_pressure_fraction", state.beta, words.GAS, words.GAS_SOURCE)
    ledger.put("adiabatic_index", eos.adiabatic_index(state.beta), words.GAS, words.GAS_SOURCE)
    ledger.put("entropy_per_baryon", entropy, f"{words.GAS}; Sackur-Tetrode", words.GAS_SOURCE)
    ledger.put("radiation_entropy", eos.radiation_entropy(state.beta, matter.mu), words.GAS, words.GAS_SOURCE)
