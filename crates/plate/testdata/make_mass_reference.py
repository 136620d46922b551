"""Makes mass_reference.csv: masses, ions and isotope patterns by RDKit and molmass.

Run it in this directory: python make_mass_reference.py
It needs rdkit and molmass; the values do not come from the crate that they test.
"""

import csv

import molmass
from molmass import Formula
from rdkit import Chem, rdBase
from rdkit.Chem import Descriptors
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

MOLECULES = [
    "CC(=O)c1ccccc1",
    "CCOC(=O)CC(C)=O",
    "CC(=O)C(C)(Cc1ccccc1)C(=O)OCC",
    "N#CC(Cc1ccc(Br)cc1)c1ccccc1",
    "O=C(CCl)c1ccc(Cl)cc1",
    "ClC(Cl)(Cl)C(O)C[N+](=O)[O-]",
    "CC(=O)CS(=O)(=O)c1ccccc1",
    "C=C(O[Si](C)(C)C)c1ccccc1",
    "CC(=O)CSSc1ccccc1",
    "O=C(C[Se]c1ccccc1)c1ccccc1",
    "CC1(C)OB(CC(C)=O)OC1(C)C",
    "CCOP(=O)(CC(C)=O)OCC",
    "O=C(CI)c1ccccc1",
    "O=C(CF)C(F)(F)F",
    "BrC(Br)C(=O)c1ccc(Br)cc1",
    "COc1cc2ncnc(C(C#N)C(=O)OCC)c2cc1OC",
    "CN(C)CC(=O)c1ccccn1",
    "O=C(c1cccs1)C(Cl)Br",
    "CCCCCCCCCCCCCCCCCC(=O)CC(=O)OCC",
    "N#CCC#N",
    "CC1(C)C(C(=O)OCc2cccc(Oc3ccccc3)c2)C1C=C(Cl)Cl",
    "C[As](C)C",
]


def ions(formula):
    """m/z of [M+H]+, [M+Na]+, [M+NH4]+ and [M-H]-."""
    for change in ("+H", "+Na", "+NH4"):
        yield Formula(f"[{formula}{change}]+").monoisotopic_mass
    neutral = Formula(formula) - Formula("H")
    yield Formula(f"[{neutral.formula}]-").monoisotopic_mass


def pattern(formula):
    """Heights by nominal mass, M that of the most abundant isotopes, the highest peak 1."""
    formula = Formula(formula)
    nominal = sum(
        formula._elements[symbol][0] * molmass.ELEMENTS[symbol].nominalmass
        for symbol in formula._elements
    )
    spectrum = formula.spectrum(min_intensity=0.1)
    return " ".join(
        f"{entry.massnumber - nominal}:{entry.intensity / 100:.6f}" for entry in spectrum.values()
    )


def main():
    with open("mass_reference.csv", "w", newline="", encoding="utf-8") as file:
        file.write(
            f"# RDKit {rdBase.rdkitVersion} (formula, mass) and molmass {molmass.__version__} (ions, isotopes), "
            "by make_mass_reference.py. m/z and Da; peaks of 0.1 % and above.\n"
        )
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(["smiles", "formula", "exact_mass", "mh", "mna", "mnh4", "m_minus_h", "isotopes"])
        for smiles in MOLECULES:
            molecule = Chem.MolFromSmiles(smiles)
            formula = CalcMolFormula(molecule)
            writer.writerow(
                [
                    smiles,
                    formula,
                    f"{Descriptors.ExactMolWt(molecule):.6f}",
                    *(f"{mz:.6f}" for mz in ions(formula)),
                    pattern(formula),
                ]
            )


if __name__ == "__main__":
    main()
