"""Methods and sources, worded once; the stages refer to them."""

GAS = "ideal gas of nuclei and electrons plus radiation, no electron-positron pairs"
EXACT = "post-Newtonian energy functional, first order, exact beta and Gamma_1, n = 3 shape"
LEADING = "post-Newtonian, first order, leading order in beta; the bound is the second-order root"
GIVEN = "given with the scenario"
ASSUMED = "assumed; burning rates are not built in yet"

COMPOSITION_SOURCE = "Kippenhahn, Weigert & Weiss 2012, ch. 4"
GAS_SOURCE = "Chandrasekhar 1939, ch. II"
ENERGY_SOURCE = "Chandrasekhar 1964, ApJ 140, 417; Shapiro & Teukolsky 1983, ch. 6 and 17"
ROTATION_SOURCE = "Baumgarte & Shapiro 1999, ApJ 526, 941"
BACKGROUND_SOURCE = "McLaughlin & Fuller 1996, ApJ 456, 71"
LIFE_SOURCE = "Hoyle & Fowler 1963, MNRAS 125, 169"
SCATTERING_SOURCE = "Kippenhahn, Weigert & Weiss 2012, ch. 17"
COMPTON_SOURCE = "Paczynski 1983, ApJ 267, 315"

NO_SOURCE = ""
NOT_COVERED = "not covered: the background is denser than 0.01 of the star's central density"


def energy_source(scenario):
    """The papers behind the functional for this scenario."""
    extra = (ROTATION_SOURCE,) * (scenario.spin > 0) + (BACKGROUND_SOURCE,) * (
        scenario.number("background_density") > 0
    )
    return "; ".join((ENERGY_SOURCE, *extra))
