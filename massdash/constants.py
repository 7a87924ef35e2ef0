"""Constants of nature and of the trade, in cgs units.

Fundamental values are CODATA 2018 (Tiesinga, Mohr, Newell & Taylor 2021, Rev. Mod. Phys. 93, 025010); c, h and k_B are
exact in the SI of 2019. Solar values are the nominal ones of IAU 2015 Resolution B3 (Prsa et al. 2016, AJ 152, 41);
the solar mass follows from the nominal G M_sun, which is known far better than G. Everything below the line is
computed from what stands above it.
"""

from math import pi

VERSION = "CODATA 2018, IAU 2015"

C = 2.99792458e10  # speed of light, cm s-1
G = 6.67430e-8  # gravitational constant, cm3 g-1 s-2
H = 6.62607015e-27  # Planck constant, erg s
K_B = 1.380649e-16  # Boltzmann constant, erg K-1
M_U = 1.66053906660e-24  # atomic mass constant, g
M_E = 9.1093837015e-28  # electron mass, g
M_P = 1.67262192369e-24  # proton mass, g
SIGMA_T = 6.6524587321e-25  # Thomson cross-section, cm2
GM_SUN = 1.3271244e26  # nominal solar mass parameter, cm3 s-2
R_SUN = 6.957e10  # nominal solar radius, cm
L_SUN = 3.828e33  # nominal solar luminosity, erg s-1
YEAR = 365.25 * 86400.0  # Julian year, s

# ---------------------------------------------------------------------------------------------------------------------
M_SUN = GM_SUN / G  # g
HBAR = H / (2 * pi)  # erg s
RADIATION = 8 * pi**5 * K_B**4 / (15 * C**3 * H**3)  # radiation density constant a = 4 sigma / c, erg cm-3 K-4
