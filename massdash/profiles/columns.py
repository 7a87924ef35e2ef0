"""What the columns of a profile are: unit, powers of length, mass and time, and meaning; and the two systems of units.

"geometric" means G = c = 1 and the sun's mass as the unit of mass: every column is then a plain number, and its factor
to cgs stands in the header. Temperatures stay in K.
"""

from dataclasses import dataclass

from massdash.constants import GM_SUN, M_SUN, C

SYSTEMS = ("cgs", "geometric")

LENGTH, TIME = GM_SUN / C**2, GM_SUN / C**3  # cm, s


@dataclass(frozen=True)
class Column:
    """``unit`` in cgs (astropy), "" for a plain number; ``powers`` of length, mass and time in it."""

    name: str
    unit: str
    powers: tuple[int, int, int]
    meaning: str

    def factor(self, system):
        """How many cgs units the unit of ``system`` is."""
        if system == "cgs":
            return 1.0
        length, mass, time = self.powers
        return LENGTH**length * M_SUN**mass * TIME**time

    def unit_in(self, system):
        """The unit as astropy writes it; "" for plain numbers, as all geometric ones are."""
        return self.unit if system == "cgs" or not any(self.powers) else ""


_PLAIN = (0, 0, 0)
_DENSITY, _PRESSURE, _SPECIFIC = (-3, 1, 0), (-1, 1, -2), (2, 0, -2)

_MATTER = (
    Column("density", "g / cm3", _DENSITY, "rest-mass density rho, m_u per baryon"),
    Column("temperature", "K", _PLAIN, "temperature T, in K in both systems of units"),
    Column("pressure", "dyn / cm2", _PRESSURE, "pressure P in hydrostatic balance"),
    Column("energy_density", "erg / cm3", _PRESSURE, "total energy density epsilon, rest mass included"),
    Column("internal_energy", "erg / g", _SPECIFIC, "specific internal energy, (epsilon - rho c^2)/rho"),
    Column("entropy", "", _PLAIN, "entropy per baryon, k_B per m_u"),
    Column("gamma_1", "", _PLAIN, "adiabatic index (d ln P/d ln rho) at constant entropy"),
)

COLUMNS = {
    column.name: column
    for column in (
        Column("radius", "cm", (1, 0, 0), "areal radius r"),
        Column("mass", "g", (0, 1, 0), "gravitational mass m within r, g_rr = 1/(1 - 2Gm/(r c^2))"),
        Column("rest_mass", "g", (0, 1, 0), "rest mass within r, m_u times the number of baryons"),
        *_MATTER,
        Column("lapse", "", _PLAIN, "alpha, g_tt = -alpha^2 c^2 with Schwarzschild's time outside"),
        Column("g_rr", "", _PLAIN, "radial metric function in areal radius"),
        Column("isotropic_radius", "cm", (1, 0, 0), "rb, spatial metric psi^4 (d rb^2 + rb^2 dOmega^2)"),
        Column("conformal_factor", "", _PLAIN, "psi = (r/rb)^(1/2)"),
        Column("electron_fraction", "", _PLAIN, "Y_e, electrons per baryon without pairs"),
        Column("hydrogen", "", _PLAIN, "mass fraction X"),
        Column("helium", "", _PLAIN, "mass fraction Y"),
        Column("metals", "", _PLAIN, "mass fraction Z"),
        Column("xi_over_r", "", _PLAIN, "relative displacement xi/r of the lowest radial mode, 1 at the centre"),
        Column("depleted_pressure", "dyn / cm2", _PRESSURE, "pressure taken down by the depletion, out of balance"),
    )
}

MATTER = tuple(column.name for column in _MATTER)


def converted(columns, system):
    """Columns in cgs as columns in ``system``."""
    return {name: values / COLUMNS[name].factor(system) for name, values in columns.items()}


def described(names, system):
    """Unit, factor to cgs and meaning of each column, for headers."""
    rows = {name: COLUMNS[name] for name in names}
    return {
        name: {"unit": row.unit_in(system), "cgs_per_unit": row.factor(system), "meaning": row.meaning}
        for name, row in rows.items()
    }
