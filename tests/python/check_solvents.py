"""Solvent constants against the Python package `chemicals` (CRC, DIPPR, VDI and others).

Exits with 1 on a value that differs by more than its tolerance. What the package does
not know is skipped; the number of values compared has a floor.
"""

import sys

import chemicals
from chemicals import permittivity, viscosity, volume
from chemicals.dippr import EQ116

from library_tables import report, rows

T = 298.15

# Column: how far it may be off, absolute or as a fraction, whichever is larger.
TOLERANCES = {
    "boiling_c": (1.0, 0.0),
    "melting_c": (1.0, 0.0),
    "flash_c": (2.0, 0.0),
    "permittivity": (0.05, 0.01),
    "density_g_ml": (0.0, 0.01),
    "viscosity_mpa_s": (0.0, 0.05),
}

# Values where the package is not followed, and why.
EXCEPTIONS = {
    ("DMPU", "boiling_c"): "246 C in handbooks (from memory); the package's is one under reduced pressure",
    ("dihydrolevoglucosenone", "melting_c"): "a liquid at room temperature (common practice)",
    ("trifluorotoluene", "flash_c"): "12 C on labels (from memory)",
    ("PhCN", "flash_c"): "71 C on labels (from memory)",
    ("ethylene glycol", "flash_c"): "111 C on labels (from memory)",
    ("NH3", "permittivity"): "at the boiling point, as it is used",
    ("NH3", "density_g_ml"): "at the boiling point, as it is used",
    ("NH3", "viscosity_mpa_s"): "at the boiling point, as it is used",
}

# Values that the package knew when this was written; fewer means that the check is broken.
LEAST_COMPARED = 325


def celsius(kelvin):
    return None if kelvin is None else kelvin - 273.15


def relative_permittivity(cas):
    """CRC's polynomial at 25 C, where its range comes within 5 K of it."""
    table = permittivity.permittivity_data_CRC
    if cas not in table.index:
        return None
    fit = table.loc[cas]
    if not fit["Tmin"] - 5 <= T <= fit["Tmax"] + 5:
        return None
    terms = [fit[letter] for letter in "ABCD"]
    return sum(a * T**power for power, a in enumerate(terms) if a == a)


def density(cas):
    """VDI's equation for the density of the saturated liquid, g/mL."""
    table = volume.rho_data_VDI_PPDS_2
    if cas not in table.index:
        return None
    fit = table.loc[cas]
    kg_per_m3 = EQ116(T, fit["Tc"], fit["rhoc"], *(fit[letter] for letter in "ABCD"))
    return kg_per_m3 / 1000


def dynamic_viscosity(cas):
    """VDI's equation for the viscosity of the saturated liquid, mPa s."""
    table = viscosity.mu_data_VDI_PPDS_7
    if cas not in table.index:
        return None
    fit = table.loc[cas]
    return 1000 * viscosity.PPDS9(T, *(fit[letter] for letter in "ABCDE"))


REFERENCES = {
    "boiling_c": lambda cas: celsius(chemicals.Tb(cas)),
    "melting_c": lambda cas: celsius(chemicals.Tm(cas)),
    "flash_c": lambda cas: celsius(chemicals.T_flash(cas)),
    "permittivity": relative_permittivity,
    "density_g_ml": density,
    "viscosity_mpa_s": dynamic_viscosity,
}


def main():
    compared, faults, needed = 0, [], set()
    for row in rows("solvents"):
        for column, (absolute, fraction) in TOLERANCES.items():
            reference = REFERENCES[column](row["cas"])
            if reference is None or not row[column]:
                continue
            compared += 1
            ours = float(row[column])
            if abs(ours - reference) <= max(absolute, fraction * abs(reference)):
                continue
            if (row["name"], column) in EXCEPTIONS:
                needed.add((row["name"], column))
            else:
                faults.append(f"{row['name']}, {column}: {ours} here, {reference:.4g} there")
    faults += [f"exception {what} is not needed" for what in EXCEPTIONS if what not in needed]
    if compared < LEAST_COMPARED:
        faults.append(f"only {compared} values could be compared")
    return report("solvents", compared, faults)


if __name__ == "__main__":
    sys.exit(main())
