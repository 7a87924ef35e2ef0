"""Constants and those computed from them. Sources: check_values.md names CODATA 2018 and the IAU nominal values."""

import pytest
from astropy.constants import codata2018, iau2015

from massdash import constants


@pytest.mark.parametrize(
    ("name", "standard"),
    [
        ("C", codata2018.c),
        ("G", codata2018.G),
        ("H", codata2018.h),
        ("HBAR", codata2018.hbar),
        ("K_B", codata2018.k_B),
        ("M_U", codata2018.u),
        ("M_E", codata2018.m_e),
        ("M_P", codata2018.m_p),
        ("SIGMA_T", codata2018.sigma_T),
        ("GM_SUN", iau2015.GM_sun),
        ("R_SUN", iau2015.R_sun),
        ("L_SUN", iau2015.L_sun),
    ],
)
def test_against_astropy(name, standard):
    assert getattr(constants, name) == pytest.approx(standard.cgs.value, rel=1e-10)


def test_radiation_constant_is_four_sigma_over_c():
    stefan = codata2018.sigma_sb.cgs.value
    assert pytest.approx(4 * stefan / constants.C, rel=1e-9) == constants.RADIATION
