"""Makes rdkit_reference.csv and rdkit_products.csv with RDKit.

Run it in this directory: python make_rdkit_reference.py
It needs RDKit and nothing else; the values do not come from the crate that they test.
"""

import csv

from rdkit import Chem, rdBase
from rdkit.Chem import AllChem, Descriptors
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

ACCEPTOR = "$(C=O),$(C#N),$([N+](=O)[O-]),$(S(=O)(=O)[#6])"
SULFONATE = "[OX2]S(=O)(=O)[#6,#8]"

# One reaction SMARTS a kind; the reacting atom of the substrate is marked by the isotope 99.
REACTIONS = {
    "alkyl halide": "[99#6;!H0:1].[CX4;!$(C(F)(F)F):2]-[Cl,Br,I]>>[#6:1]-[C:2]",
    "alkyl fluoride": "[99#6;!H0:1].[CX4:2]-F>>[#6:1]-[C:2]",
    "alkyl sulfonate": f"[99#6;!H0:1].[CX4:2]-{SULFONATE}>>[#6:1]-[C:2]",
    "michael": f"[99#6;!H0:1].[C:2]=[C:3]-[{ACCEPTOR}:4]>>[#6:1]-[C:2]-[C:3]-[*:4]",
    "aldehyde": "[99#6;!H0:1].[CX3;!H0:2](=[O:3])[#6,#1:4]>>[#6:1]-[C:2](-[O:3])[*:4]",
    "formaldehyde": "[99#6;!H0:1].[CH2:2]=[O:3]>>[#6:1]-[C:2]-[O:3]",
    "aldol dehydrated": "[99#6;!H0:1].[CX3;!H0:2](=[O:3])[#6,#1:4]>>[#6:1]=[C:2]-[*:4]",
    "enolate O-alkyl halide": "[99#6;!H0:1]-[C:2]=[O:3].[CX4:4]-[Cl,Br,I]>>[#6:1]=[C:2]-[O:3]-[C:4]",
    "enolate O-alkyl sulfonate": f"[99#6;!H0:1]-[C:2]=[O:3].[CX4:4]-{SULFONATE}>>[#6:1]=[C:2]-[O:3]-[C:4]",
    "nitronate O-alkyl halide": "[99#6;!H0:1]-[N+:2](=[O:3])[O-:5].[CX4:4]-[Cl,Br,I]>>[#6:1]=[N+:2](-[O:3]-[C:4])[O-:5]",
    "heteroatom alkyl halide": "[99*;!H0:1].[CX4:2]-[Cl,Br,I]>>[*:1]-[C:2]",
    "heteroatom alkyl sulfonate": f"[99*;!H0:1].[CX4:2]-{SULFONATE}>>[*:1]-[C:2]",
    "heteroatom michael": f"[99*;!H0:1].[C:2]=[C:3]-[{ACCEPTOR}:4]>>[*:1]-[C:2]-[C:3]-[*:4]",
    "self aldol": "[99#6;!H0:1].[98C:2](=[O:3])>>[#6:1]-[C:2](-[O:3])",
    "self claisen": "[99#6;!H0:1].[98C:2](=[O:3])-[O;!$(O=*)]-[#6]>>[#6:1]-[C:2](=[O:3])",
}

# kind, substrate, index of the reacting atom, electrophile (for self condensations: the carbonyl atom)
ROWS = [
    # alkylation at carbon
    ("alkyl halide", "OC(=O)Cc1ccccc1", 3, "CCCCBr"),
    ("alkyl halide", "CC(=O)CC(C)=O", 3, "CI"),
    ("alkyl halide", "CC1CCCCC1=O", 5, "BrCc1ccccc1"),
    ("alkyl halide", "CC(=O)C1CCOC1=O", 3, "BrCc1ccccc1"),
    ("alkyl halide", "CCOC(=O)CC(C)=O", 7, "CCCCBr"),
    ("alkyl halide", "CC(=O)Cc1ccccc1", 3, "CI"),
    ("alkyl halide", "CCCCCC(C)=O", 6, "BrCc1ccccc1"),
    ("alkyl halide", "O=C1CC2CCC1C2", 2, "CI"),
    ("alkyl halide", "CCOC(=O)CC(=O)OCC", 5, "BrC1CCCCC1"),
    ("alkyl halide", "CCOC(=O)CC(=O)OCC", 5, "BrCCCCBr"),
    ("alkyl halide", "CC(=O)c1ccccc1", 0, "C=CCBr"),
    ("alkyl halide", "N#CCc1ccccc1", 2, "C#CCBr"),
    ("alkyl halide", "CN(C)C(C)=O", 4, "BrCC(=O)OCC"),
    ("alkyl halide", "CC[N+](=O)[O-]", 1, "ClCc1ccc([N+](=O)[O-])cc1"),
    ("alkyl halide", "CS(=O)(=O)c1ccccc1", 0, "CCI"),
    ("alkyl halide", "O=C1CCCO1", 2, "ICC(C)C"),
    ("alkyl halide", "CC(C)C(=O)OC", 1, "BrCC(C)=CCCC(C)=C"),
    ("alkyl halide", "CC(C)C=O", 1, "BrC/C=C/c1ccccc1"),
    ("alkyl halide", "O=C1CCCc2ccccc12", 2, "BrCC#N"),
    ("alkyl halide", "C[C@H](CC(C)=O)c1ccccc1", 4, "CCI"),
    ("alkyl halide", "CC(=O)C/C=C/C", 3, "C/C=C\\CBr"),
    ("alkyl halide", "CC(C)(C)OC(=O)CN=C(c1ccccc1)c1ccccc1", 7, "BrCc1cccnc1"),
    ("alkyl fluoride", "CCOC(=O)CC#N", 5, "CCF"),
    ("alkyl sulfonate", "CCOC(=O)CC(=O)OCC", 5, "CCCCOS(=O)(=O)c1ccc(C)cc1"),
    ("alkyl sulfonate", "O=C1CCCCC1", 2, "COS(=O)(=O)C(F)(F)F"),
    ("alkyl sulfonate", "CC(=O)C1CCCCC1=O", 3, "CC(C)OS(C)(=O)=O"),
    ("alkyl sulfonate", "CC(C)C#N", 1, "CCOS(=O)(=O)OCC"),
    # conjugate addition
    ("michael", "COC(=O)CCC[N+](=O)[O-]", 6, "C=CC(=O)OC"),
    ("michael", "CCOC(=O)CC(=O)OCC", 5, "O=[N+]([O-])/C=C/c1ccccc1"),
    ("michael", "CCOC(=O)CC(=O)OCC", 5, "C=CC(C)=O"),
    ("michael", "CC(=O)CC(C)=O", 3, "O=C1C=CCCC1"),
    ("michael", "CC1C(=O)CCCC1=O", 1, "C=CC(C)=O"),
    ("michael", "N#CCc1ccccc1", 2, "C=CC#N"),
    ("michael", "CC(C)[N+](=O)[O-]", 1, "C=CS(=O)(=O)c1ccccc1"),
    ("michael", "CC(=O)CC(=O)OCC", 3, "C/C=C/C(=O)OCC"),
    ("michael", "CC(=O)c1ccccc1", 0, "O=C(/C=C/c1ccccc1)c1ccccc1"),
    ("michael", "N#CCC#N", 2, "CCOC(=O)C(=Cc1ccccc1)C(=O)OCC"),
    ("michael", "CCOC(=O)CC(=O)OCC", 5, "CN1C(=O)C=CC1=O"),
    ("michael", "C[N+](=O)[O-]", 0, "C=CC=O"),
    ("michael", "CCOC(=O)CC#N", 5, "C=CC(=O)N(C)C"),
    ("michael", "CC(=O)CC(C)=O", 3, "CCOC(=O)/C=C/C(=O)OCC"),
    # addition to aldehydes
    ("aldehyde", "CC(=O)c1ccccc1", 0, "O=Cc1ccccc1"),
    ("aldehyde", "CC[N+](=O)[O-]", 1, "O=Cc1ccc(Cl)cc1"),
    ("aldehyde", "CC(C)=O", 0, "CC(C)C=O"),
    ("aldehyde", "O=C1CCCCC1", 2, "O=Cc1ccc([N+](=O)[O-])cc1"),
    ("aldehyde", "CCOC(C)=O", 4, "CCC=O"),
    ("formaldehyde", "CC(C)C=O", 1, "C=O"),
    ("aldol dehydrated", "CC(=O)c1ccccc1", 0, "O=Cc1ccccc1"),
    ("aldol dehydrated", "CCOC(=O)CC#N", 5, "O=Cc1ccco1"),
    ("aldol dehydrated", "CCOC(=O)CC(=O)OCC", 5, "CC(C)C=O"),
    ("aldol dehydrated", "C[N+](=O)[O-]", 0, "O=Cc1ccc(OC)cc1"),
    # attack by the enolate oxygen
    ("enolate O-alkyl halide", "CC(=O)c1ccccc1", 0, "CI"),
    ("enolate O-alkyl halide", "O=C1CCCC(=O)C1", 7, "BrCc1ccccc1"),
    ("enolate O-alkyl halide", "CC(C)C=O", 1, "C=CCBr"),
    ("enolate O-alkyl halide", "CCOC(C)=O", 4, "CCI"),
    ("enolate O-alkyl halide", "C/C=C/C(=O)C/C=C/c1ccccc1", 5, "CCI"),
    ("enolate O-alkyl sulfonate", "O=C1CCCCC1", 2, "COS(=O)(=O)OC"),
    ("nitronate O-alkyl halide", "CC(C)[N+](=O)[O-]", 1, "BrCc1ccccc1"),
    # attack by O-H, N-H, S-H
    ("heteroatom alkyl halide", "CC(=O)c1ccc(O)cc1", 7, "BrCc1ccccc1"),
    ("heteroatom alkyl halide", "O=C1CCCN1", 5, "BrCc1ccccc1"),
    ("heteroatom alkyl halide", "OC(=O)Cc1ccccc1", 0, "CCCCBr"),
    ("heteroatom alkyl halide", "c1ccc2[nH]ccc2c1", 4, "CI"),
    ("heteroatom alkyl halide", "CC(=O)c1ccc(S)cc1", 7, "C=CCBr"),
    ("heteroatom alkyl sulfonate", "CC(=O)Nc1ccccc1", 3, "COS(=O)(=O)OC"),
    ("heteroatom michael", "SCC(=O)OC", 0, "C=CC#N"),
    # condensation of a substrate with itself
    ("self aldol", "CC(C)=O", 0, 1),
    ("self aldol", "O=C1CCCCC1", 2, 1),
    ("self aldol", "CCC=O", 1, 2),
    ("self claisen", "CCOC(C)=O", 4, 3),
    ("self claisen", "COC(=O)Cc1ccccc1", 4, 2),
]


def numbers(molecule):
    """Formula, monoisotopic and average mass."""
    return [
        CalcMolFormula(molecule),
        f"{Descriptors.ExactMolWt(molecule):.5f}",
        f"{Descriptors.MolWt(molecule):.3f}",
    ]


def cleaned(molecule):
    """The molecule as its own SMILES is read."""
    for atom in molecule.GetAtoms():
        if atom.GetIsotope() in (98, 99):
            atom.SetIsotope(0)
    return Chem.MolFromSmiles(Chem.MolToSmiles(molecule))


def marked(smiles, marks):
    molecule = Chem.MolFromSmiles(smiles)
    for index, isotope in marks.items():
        molecule.GetAtomWithIdx(index).SetIsotope(isotope)
        molecule.GetAtomWithIdx(index).SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
    return molecule


def product(kind, substrate, site, electrophile):
    """The one product of a row; refuses rows where the pattern is ambiguous."""
    first = marked(substrate, {site: 99})
    if isinstance(electrophile, int):
        second = marked(substrate, {electrophile: 98})
    else:
        second = Chem.MolFromSmiles(electrophile)
    reaction = AllChem.ReactionFromSmarts(REACTIONS[kind])
    found = {}
    for (outcome,) in reaction.RunReactants((first, second)):
        for atom in outcome.GetAtoms():
            atom.SetNoImplicit(False)
            if atom.GetIsotope() == 99:
                atom.SetNumExplicitHs(0)
        Chem.SanitizeMol(outcome)
        outcome = cleaned(outcome)
        found[Chem.MolToSmiles(outcome, isomericSmiles=False)] = outcome
    if len(found) != 1:
        raise SystemExit(f"{kind} {substrate} {site} {electrophile}: {sorted(found)}")
    return next(iter(found.items()))


def write(path, comment, header, rows):
    with open(path, "w", newline="", encoding="utf-8") as file:
        file.write(f"# RDKit {rdBase.rdkitVersion}, by make_rdkit_reference.py. {comment}\n")
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(header)
        writer.writerows(rows)


def main():
    molecules = []
    with open("molecules.smi", encoding="utf-8") as file:
        for line in file:
            smiles = line.strip()
            if smiles and not smiles.startswith("#"):
                molecule = Chem.MolFromSmiles(smiles)
                flat = Chem.MolToSmiles(molecule, isomericSmiles=False)
                rings = sorted(len(ring) for ring in Chem.GetSymmSSSR(molecule))
                ranks = Chem.CanonicalRankAtoms(molecule, breakTies=False, includeChirality=False)
                molecules.append(
                    [
                        smiles,
                        Chem.MolToSmiles(molecule),
                        flat,
                        *numbers(molecule),
                        " ".join(map(str, rings)),
                        len(set(ranks)),
                    ]
                )
    write(
        "rdkit_reference.csv",
        "Masses in Da and g/mol.",
        ["smiles", "canonical", "canonical_flat", "formula", "exact_mass", "molar_mass", "ring_sizes", "symmetry_classes"],
        molecules,
    )
    products = []
    for kind, substrate, site, electrophile in ROWS:
        flat, outcome = product(kind, substrate, site, electrophile)
        products.append(
            [kind, substrate, site, electrophile, flat, Chem.MolToSmiles(outcome), *numbers(outcome)]
        )
    write(
        "rdkit_products.csv",
        "The electrophile of a self condensation is the index of the carbonyl carbon.",
        ["kind", "substrate", "site", "electrophile", "canonical_flat", "canonical", "formula", "exact_mass", "molar_mass"],
        products,
    )


if __name__ == "__main__":
    main()
