"""Identity and boiling points of the library's reagents against `chemicals` and RDKit.

A CAS number must stand for the structure beside it (same InChIKey skeleton), a formula
must be that of the structure and of the CAS number, and a boiling point must be within
5 K. Exits with 1 on a fault.
"""

import re
import sys

import chemicals
from chemicals.identifiers import search_chemical
from rdkit import Chem, RDLogger
from rdkit.Chem import rdMolDescriptors

from library_tables import report, rows

BOILING_TOLERANCE_C = 5.0

TABLES = ("bases", "solvents", "electrophiles", "additives")

# Reagents that the package does not know.
NOT_KNOWN_THERE = {
    "2-bromo-N,N-dimethylacetamide",
    "2-phenylsulfonyl-3-phenyloxaziridine",
    "4-benzylidene-2,6-di-tert-butylcyclohexadienone",
    "4-chloroquinazoline",
    "4-nitrobenzenediazonium tetrafluoroborate",
    "BTMG",
    "BTPP",
    "CH2=NMe2 I",
    "DBAD",
    "KOPh",
    "LiICA",
    "LiNCy2",
    "LiTMP",
    "Mg(HMDS)2",
    "N-(phenylthio)phthalimide",
    "N-methoxy-N-methylacetamide",
    "N-tosylaziridine",
    "N-tosylbenzaldimine",
    "NaOtAm",
    "P4-tBu",
    "PhSCl",
    "S-phenyl benzenethiosulfonate",
    "TBAF.3H2O",
    "TMPMgCl.LiCl",
    "TMPZnCl.LiCl",
    "ethenesulfonyl fluoride",
    "piperidinium acetate",
    "tBuMgCl",
}

# Salts that the package draws otherwise.
DRAWN_OTHERWISE_THERE = {"CaH2": "as atoms, not as ions", "LiH": "as atoms, not as ions"}

# Boiling points where the package is not followed, and why.
BOILING_EXCEPTIONS = {
    "chloroacetonitrile": "126 C in handbooks (from memory)",
    "methyl mesylate": "202 C in handbooks (from memory)",
    "trifluoroacetophenone": "166 C in handbooks (from memory)",
    "phenylacetaldehyde": "195 C in handbooks (from memory)",
    "cyclohexanecarbaldehyde": "162 C in handbooks (from memory)",
    "dimethylcarbamoyl chloride": "167 C in handbooks (from memory)",
    "TfCl": "the package's value is an estimate; 32 C in handbooks (from memory)",
    "BnBr": "198 C in handbooks (from memory)",
    "propargyl bromide": "88-90 C in handbooks (from memory)",
    "bromoacetonitrile": "the package's value is one under reduced pressure",
    "cyclopentenone": "150 C in handbooks (from memory)",
    "anisaldehyde": "248 C in handbooks (from memory)",
    "chloroacetonitrile": "126 C in handbooks (from memory)",
    "methyl mesylate": "203 C in handbooks (from memory)",
    "trifluoroacetophenone": "165 C in handbooks (from memory)",
    "phenylacetaldehyde": "195 C in handbooks (from memory)",
    "cyclohexanecarbaldehyde": "162 C in handbooks (from memory)",
    "dimethylcarbamoyl chloride": "167 C in handbooks (from memory)",
    "TfCl": "a liquid that boils at about 30 C (from memory)",
}


def skeleton(smiles):
    """First block of the InChIKey: the skeleton without stereo and charge state."""
    return Chem.MolToInchiKey(Chem.MolFromSmiles(smiles))[:14]


def elements(formula):
    """Numbers of atoms by element."""
    counts = {}
    for element, number in re.findall(r"([A-Z][a-z]?)(\d*)", formula):
        counts[element] = counts.get(element, 0) + int(number or 1)
    return counts


def formula_faults(row):
    """The stated formula against that of the structure as RDKit counts it."""
    stated = row.get("formula")
    if not stated:
        return []
    drawn = rdMolDescriptors.CalcMolFormula(Chem.MolFromSmiles(row["smiles"]))
    if elements(drawn) == elements(stated):
        return []
    return [f"{row['name']}: {stated} here, {drawn} by its structure"]


def identity_faults(row):
    """The CAS number against the package; none where the row has no number."""
    if not row["cas"]:
        return []
    try:
        known = search_chemical(row["cas"])
    except ValueError:
        return [] if row["name"] in NOT_KNOWN_THERE else [f"{row['name']}: {row['cas']} is not known there"]
    if row["name"] in NOT_KNOWN_THERE:
        return [f"{row['name']}: is known there, so no exception is needed"]
    faults = []
    drawn_alike = known.InChI_key[:14] == skeleton(row["smiles"])
    if drawn_alike == (row["name"] in DRAWN_OTHERWISE_THERE):
        faults.append(f"{row['name']}: {row['cas']} is {known.smiles} there")
    if row.get("formula") and elements(known.formula) != elements(row["formula"]):
        faults.append(f"{row['name']}: {row['formula']} here, {known.formula} there")
    return faults


def main():
    RDLogger.DisableLog("rdApp.*")
    compared, faults = 0, []
    for table in TABLES:
        for row in rows(table):
            compared += 1
            faults += formula_faults(row) + identity_faults(row)
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
