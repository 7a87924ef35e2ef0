"""Methods and sources, worded once; the stages refer to them."""

GAS = "ideal gas of nuclei and electrons plus radiation, no electron-positron pairs"
GAS_WITH_PAIRS = "exact gas of nuclei, electrons and positrons (pairs counted as gas) plus radiation"
RELATIVISTIC_WITH_PAIRS = "full general relativity, isentropic star of gas, radiation and electron-positron pairs"
RELATIVISTIC = "full general relativity, isentropic star of gas and radiation"
ONSET = "full general relativity, isentropic star of gas and radiation, zero of the lowest pulsation mode"
ONSET_WITH_PAIRS = (
    "full general relativity, isentropic star of gas, radiation and electron-positron pairs, zero of the lowest "
    "pulsation mode"
)
TRIAL = "post-Newtonian energy functional, first order, exact beta and Gamma_1, n = 3 shape"
LEADING = "post-Newtonian, first order, leading order in beta; the bound is the second-order root"
GIVEN = "given with the scenario"
ASSUMED = "assumed; burning rates are not built in yet"

COMPOSITION_SOURCE = "Kippenhahn, Weigert & Weiss 2012, ch. 4"
GAS_SOURCE = "Chandrasekhar 1939, ch. II"
RELATIVITY_SOURCE = "Tolman 1939, Phys. Rev. 55, 364; Oppenheimer & Volkoff 1939, Phys. Rev. 55, 374"
PULSATION_SOURCE = "Chandrasekhar 1964, ApJ 140, 417; Bardeen, Thorne & Meltzer 1966, ApJ 145, 505"
PAIR_SOURCE = "Cox & Giuli 1968, Principles of Stellar Structure, ch. 24"
EFFECTIVE_SOURCE = "Ledoux 1945, ApJ 102, 143"
ENERGY_SOURCE = "Chandrasekhar 1964, ApJ 140, 417; Shapiro & Teukolsky 1983, ch. 6 and 17"
ROTATION_SOURCE = "Baumgarte & Shapiro 1999, ApJ 526, 941"
BACKGROUND_SOURCE = "McLaughlin & Fuller 1996, ApJ 456, 71"
LIFE_SOURCE = "Hoyle & Fowler 1963, MNRAS 125, 169"
SCATTERING_SOURCE = "Kippenhahn, Weigert & Weiss 2012, ch. 17"
COMPTON_SOURCE = "Paczynski 1983, ApJ 267, 315"

NO_SOURCE = ""
BEYOND_TABLE = "never reached, and so far beyond the onset that no star was computed"
NO_LARGEST = "none: this background keeps the onset of ever heavier stars above the ignition temperature"
SOFT = "the average of Gamma_1 is not above 4/3: no margin is defined"
NOT_COVERED = "not covered: the background is denser than 0.01 of the star's central density"


def energy_source(scenario):
    """The papers behind the functional for this scenario."""
    extra = (ROTATION_SOURCE,) * (scenario.spin > 0) + (BACKGROUND_SOURCE,) * (
        scenario.number("background_density") > 0
    )
    return "; ".join((ENERGY_SOURCE, *extra))


def stability_source(scenario):
    """The papers behind onset and margin in full relativity for this scenario."""
    extra = (EFFECTIVE_SOURCE,) * (scenario.spin > 0) + (BACKGROUND_SOURCE,) * (
        scenario.number("background_density") > 0
    )
    return "; ".join((PULSATION_SOURCE, *extra))


def onset_method(scenario):
    """How onset and margin were computed, with what stands in for rotation and background."""
    helped = scenario.spin > 0 or scenario.number("background_density") > 0
    return f"{ONSET}; rotation and background by the effective Gamma_1" if helped else ONSET
