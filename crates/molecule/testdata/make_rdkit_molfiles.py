"""Makes rdkit_molfiles.sdf with RDKit: every third molecule of molecules.smi in V2000 and V3000.

Run it in this directory: python make_rdkit_molfiles.py
It needs RDKit and nothing else; the values do not come from the crate that they test.
"""

from rdkit import Chem
from rdkit.Chem import AllChem

MOST_ATOMS = 40

EXTRA = [
    "C[C@H](N)C(=O)OC", "C/C=C/C(=O)OCC", "C/C=C\\C#N", "CC[N+](=O)[O-]", "[O-][n+]1ccccc1C",
    "O=C1CC[C@@H]2CCCC[C@@H]2C1", "[2H]C([2H])([2H])C(C)=O", "CCN.Cl", "[Na+].CC([O-])=O",
    "C[N+](C)(C)Cc1ccccc1.[Br-]", "CC(=O)[13CH3]", "CS(=O)(=O)CC#N", "C[S@](=O)CC(=O)c1ccccc1",
    "FC(F)(F)C(=O)CC(=O)OCC", "[C-]#[N+]CC(=O)OCC", "[N-]=[N+]=NCC(=O)OCC",
]


def records():
    names = [line.split()[0] for line in open("molecules.smi") if line.strip() and not line.startswith("#")]
    for number, smiles in enumerate(EXTRA + names[::3]):
        molecule = Chem.MolFromSmiles(smiles)
        if molecule is None or molecule.GetNumAtoms() > MOST_ATOMS:
            continue
        AllChem.Compute2DCoords(molecule)
        Chem.WedgeMolBonds(molecule, molecule.GetConformer())
        for form in ("V2000", "V3000"):
            block = Chem.MolToMolBlock(molecule, forceV3000=form == "V3000")
            # what a molfile says, read back by RDKit: stereo that a drawing cannot hold is gone
            canonical = Chem.MolToSmiles(Chem.MolFromMolBlock(block))
            title, rest = block.split("\n", 1)
            yield f"{form} {number}\n{rest}>  <canonical>\n{canonical}\n\n$$$$\n"


if __name__ == "__main__":
    with open("rdkit_molfiles.sdf", "w") as out:
        out.writelines(records())
