"""Scenarios for hypothesis: every star the present stages use, the ends of all ranges included."""

from astropy import units as u
from hypothesis import strategies as st

from massdash import Scenario


def decades(low, high):
    """Numbers spread evenly over the logarithm, both ends included."""
    between = st.floats(0, 1).map(lambda share: min(max(low * (high / low) ** share, low), high))
    return st.sampled_from([low, high]) | between


MASS = decades(1e2, 1e8)
METALS = st.sampled_from([0.0, 0.1]) | decades(1e-12, 0.1)
IGNITION = st.none() | decades(1e6, 1e9).map(lambda kelvin: kelvin * u.K)
SPIN = st.sampled_from([0.0, 1.0]) | st.floats(0, 1)
BACKGROUND = st.sampled_from([0.0, 0.0, 5e-324, 1.0]) | decades(1e-30, 1.0) | decades(1e-12, 1e-2)


@st.composite
def scenarios(draw, background=BACKGROUND):
    """Scenario of a valid star: mass, composition, ignition temperature, spin and background."""
    metals = draw(METALS)
    helium = draw(st.sampled_from([0.0, 0.247, 1.0]) | st.floats(0, 1))
    return Scenario(
        mass=draw(MASS) * u.Msun,
        metals=metals,
        helium=min(helium, 1.0 - metals),
        ignition_temperature=draw(IGNITION),
        spin=draw(SPIN),
        background_density=draw(background) * u.g / u.cm**3,
    )
