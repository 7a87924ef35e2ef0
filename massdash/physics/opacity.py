"""Opacity of hot ionised hydrogen and helium, and the luminosity it lets through."""

import numpy as np

from massdash.constants import C, G


def surface_opacity(hydrogen):
    """Electron scattering in the outer layers, 0.2 (1 + X) [cm2 g-1] (Kippenhahn, Weigert & Weiss 2012, eq. 17.2)."""
    return 0.2 * (1.0 + np.asarray(hydrogen, float))


def central_opacity(rho, temperature, hydrogen):
    """Electron scattering at high temperature and density [cm2 g-1].

    Fit of Paczynski (1983, ApJ 267, 315) to Compton scattering with Klein-Nishina cross-sections and degeneracy;
    coefficients from memory. About 21 per cent below the surface value at 1e8 K.
    """
    temperature = np.asarray(temperature, float)
    degeneracy = 1.0 + 2.7e11 * rho / temperature**2
    compton = 1.0 + (temperature / 4.5e8) ** 0.86
    return surface_opacity(hydrogen) / (degeneracy * compton)


def eddington_luminosity(mass, opacity):
    """4 pi G M c/kappa [erg s-1] for mass in g."""
    return 4.0 * np.pi * G * C * np.asarray(mass, float) / opacity
