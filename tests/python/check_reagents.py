"""Identity and boiling points of the library's reagents against `chemicals` and RDKit.

A CAS number must stand for the structure beside it (same InChIKey skeleton), and a
boiling point must be within 5 K. Exits with 1 on a fault.
"""

import sys

import chemicals
from chemicals.identifiers import search_chemical
from rdkit import Chem, RDLogger

from library_tables import report, rows

BOILING_TOLERANCE_C = 5.0

# Reagents that the package does not know.
NOT_KNOWN_THERE = {"LiTMP"}

# Boiling points where the package is not followed, and why.
BOILING_EXCEPTIONS = {
    "BnBr": "198 C in handbooks (from memory)",
    "propargyl bromide": "88-90 C in handbooks (from memory)",
    "bromoacetonitrile": "the package's value is one under reduced pressure",
    "cyclopentenone": "150 C in handbooks (from memory)",
    "anisaldehyde": "248 C in handbooks (from memory)",
}


def skeleton(smiles):
    """First block of the InChIKey: the skeleton without stereo and charge state."""
    return Chem.MolToInchiKey(Chem.MolFromSmiles(smiles))[:14]


def main():
    RDLogger.DisableLog("rdApp.*")
    compared, faults = 0, []
    for table in ("bases", "solvents", "electrophiles"):
        for row in rows(table):
            if row["name"] in NOT_KNOWN_THERE:
                continue
            compared += 1
            known = search_chemical(row["cas"])
            if known.InChI_key[:14] != skeleton(row["smiles"]):
                faults.append(f"{row['name']}: {row['cas']} is {known.smiles} there")
    needed = set()
    for row in rows("electrophiles"):
        kelvin = chemicals.Tb(row["cas"])
        if kelvin is None or not row["boiling_c"]:
            continue
        compared += 1
        if abs(float(row["boiling_c"]) + 273.15 - kelvin) <= BOILING_TOLERANCE_C:
            continue
        if row["name"] in BOILING_EXCEPTIONS:
            needed.add(row["name"])
        else:
            faults.append(f"{row['name']}: boils at {kelvin - 273.15:.1f} C there")
    faults += [f"exception {n} is not needed" for n in BOILING_EXCEPTIONS if n not in needed]
    return report("reagents", compared, faults)


if __name__ == "__main__":
    sys.exit(main())
