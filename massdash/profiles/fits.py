"""Profiles as FITS: binary tables PROFILE and EQUATION_OF_STATE, the main numbers as keywords, and the whole header as
JSON in the one cell of the table ABOUT."""

import io
import json
import warnings

import numpy as np

from massdash.profiles.columns import COLUMNS

_STAR = {
    "M0": ("rest_mass", "[solMass] rest mass"),
    "MGRAV": ("gravitational_mass", "[solMass] gravitational mass"),
    "RADIUS": ("radius", "[cm] areal radius"),
    "COMPACT": ("compactness", "GM/(R c^2)"),
    "RHO_C": ("central_density", "[g/cm3] central rest-mass density"),
    "T_C": ("central_temperature", "[K] central temperature"),
    "OMEGA2": ("pulsation_frequency_squared", "[s-2] of the lowest radial mode"),
}


def files(profile, path):
    """{path: bytes} of the one file."""
    from astropy.io import fits

    tables = {"PROFILE": profile.columns, "EQUATION_OF_STATE": profile.equation_of_state}
    hdus = [_primary(profile)]
    hdus += [_table(columns, profile.units, name) for name, columns in tables.items() if columns is not None]
    text = json.dumps(profile.about)
    about = fits.Column("JSON", f"{len(text)}A", array=np.array([text]))
    hdus.append(fits.BinTableHDU.from_columns([about], name="ABOUT"))
    buffer = io.BytesIO()
    fits.HDUList(hdus).writeto(buffer)
    return {path: buffer.getvalue()}


def read(path):
    """(columns, equation of state or None, header); what would be read with a warning, such as a file cut short, is
    not read."""
    from astropy.io import fits
    from astropy.utils.exceptions import AstropyUserWarning

    try:
        with warnings.catch_warnings():
            warnings.simplefilter("error", AstropyUserWarning)
            return _read(fits, path)
    except AstropyUserWarning as warning:
        raise ValueError(str(warning)) from None


def _read(fits, path):
    with fits.open(io.BytesIO(path.read_bytes())) as hdus:
        about = json.loads(str(hdus["ABOUT"].data["JSON"][0]))
        matter = _columns(hdus["EQUATION_OF_STATE"]) if "EQUATION_OF_STATE" in hdus else None
        return _columns(hdus["PROFILE"]), matter, about


def _columns(hdu):
    return {name: np.array(hdu.data[name], float) for name in hdu.columns.names}


def _primary(profile):
    from astropy.io import fits

    about, header = profile.about, fits.Header()
    header["PROGRAM"] = (about["program"], "wrote this file")
    header["UNITS"] = (profile.units, "of the tables; these keywords: see brackets")
    header["STABLE"] = (about["star"]["stability"], "radial stability of the equilibrium")
    for key, (name, comment) in _STAR.items():
        header[key] = (about["star"][name]["value"], comment)
    header["DEPLETE"] = (about["depletion"], "fraction taken off depleted_pressure")
    header["RESIDUAL"] = (about["constraint"]["residual"], "of the Hamiltonian constraint")
    for sentence in (about["state"], *about["notes"], *about["warnings"]):
        header["COMMENT"] = sentence.encode("ascii", "replace").decode()
    return fits.PrimaryHDU(header=header)


def _table(columns, system, name):
    from astropy.io import fits

    made = [fits.Column(key, "D", unit=_unit(COLUMNS[key].unit_in(system)), array=columns[key]) for key in columns]
    hdu = fits.BinTableHDU.from_columns(made, name=name)
    for number, key in enumerate(columns, start=1):
        hdu.header[f"TCOMM{number}"] = COLUMNS[key].meaning
    return hdu


def _unit(text):
    """In base units of cgs, because the standard has no dyn and frowns on erg."""
    from astropy import units as u

    return u.Unit(text).decompose(bases=[u.cm, u.g, u.s, u.K]).to_string("fits") if text else None
