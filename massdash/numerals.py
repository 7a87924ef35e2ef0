"""Numbers as people read them, the same in sentences, tables and figures."""

import math

_SUPERSCRIPTS = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def numeral(value, digits=3):
    """``1.2×10⁵⁴``, or plain digits from 0.001 to below 100000; ``–`` when there is no finite value."""
    if value is None or not math.isfinite(value):
        return "–"
    rounded = float(f"{value:.{digits - 1}e}")
    if rounded == 0:
        return "0"
    if 1e-3 <= abs(rounded) < 1e5:
        return (
            f"{rounded:.{digits}g}".replace("-", "−")
            if abs(rounded) < 10**digits
            else f"{rounded:.0f}".replace("-", "−")
        )
    mantissa, exponent = f"{value:.{digits - 1}e}".split("e")
    mantissa = f"{float(mantissa):g}".replace("-", "−")
    power = "10" + str(int(exponent)).translate(_SUPERSCRIPTS)
    return power if mantissa == "1" else f"−{power}" if mantissa == "−1" else f"{mantissa}×{power}"


_SPANS = ((1e9, "Gyr"), (1e6, "Myr"), (1.0, "yr"))


def duration(years, digits=3):
    """A time span in the unit that reads best: ``1.43 Myr``, ``5800 yr``, ``12 days``."""
    if years is None or not math.isfinite(years):
        return "–"
    rounded = float(f"{years:.{digits - 1}e}")  # what rounds up to a unit is given in that unit
    for size, unit in _SPANS:
        if rounded >= size:
            return f"{numeral(years / size, digits)} {unit}"
    days = years * 365.25
    return f"{numeral(days, digits)} days" if days >= 1 else f"{numeral(days * 86400, digits)} s"
