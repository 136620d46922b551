"""Drawings of structures, read by RDKit: wedges, hashes and double bonds must say the configuration of the SMILES.

The file holds what the reports draw, place by place and bond by bond; a test of `crates/report` holds the drawings against it.
"""

import pytest
from rdkit import Chem

from conftest import ROOT

BLOCKS = (ROOT / "crates/report/testdata/configuration.sdf").read_text(encoding="utf-8").split("$$$$\n")[:-1]


def stereo(molecule):
    """CIP labels of atoms, and of double bonds."""
    atoms = Chem.FindMolChiralCenters(molecule, useLegacyImplementation=False)
    bonds = [str(bond.GetStereo()) for bond in molecule.GetBonds() if bond.GetStereo() > Chem.BondStereo.STEREOANY]
    return sorted(label for _, label in atoms), sorted(bonds)


@pytest.mark.parametrize("block", BLOCKS, ids=lambda block: block.splitlines()[0])
def test_a_drawing_says_the_configuration(block):
    drawn, said = Chem.MolFromMolBlock(block), Chem.MolFromSmiles(block.splitlines()[0])
    assert Chem.MolToSmiles(drawn) == Chem.MolToSmiles(said)
    assert stereo(drawn) == stereo(said)


def test_the_drawings_have_configuration():
    centres = [stereo(Chem.MolFromMolBlock(block)) for block in BLOCKS]
    assert sum(len(atoms) for atoms, _ in centres) > 20 and sum(len(bonds) for _, bonds in centres) > 4
