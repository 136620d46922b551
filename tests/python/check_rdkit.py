"""Products of a screened campaign against RDKit: formula, mass, canonical SMILES, atoms."""

import collections
import json
import subprocess

import pytest
from rdkit import Chem
from rdkit.Chem import Descriptors, rdMolDescriptors

from conftest import ROOT

CELLS = 40

CAMPAIGN = """
title = "Products of the demo's substrates"
[substrates]
file = "substrates.csv"
[bases]
library = ["LDA"]
[electrophiles]
library = ["MeI", "nBuBr", "iPrBr", "BnBr", "allyl bromide", "ethyl bromoacetate",
           "methyl acrylate", "acrylonitrile", "benzaldehyde"]
smiles = ["O=[N+]([O-])/C=C/c1ccccc1"]
[solvents]
library = ["THF"]
[conditions]
temperature_c = [25]
"""


@pytest.fixture(scope="module")
def products(binary, tmp_path_factory):
    """Explanations of cells spread over the whole campaign."""
    folder = tmp_path_factory.mktemp("products")
    (folder / "campaign.toml").write_text(CAMPAIGN)
    demo = ROOT / "deploy" / "demo" / "substrates.csv"
    (folder / "substrates.csv").write_text(demo.read_text())

    def run(*arguments):
        command = [binary, *arguments, "--json", "--data", str(folder / "data")]
        done = subprocess.run(command, check=True, capture_output=True, text=True)
        return json.loads(done.stdout)

    run("screen", str(folder / "campaign.toml"))
    (job,) = run("jobs")
    step = job["cells"] / CELLS
    cells = [int(i * step) for i in range(CELLS)]
    explained = [run("explain", job["job"], str(cell)) for cell in cells]
    with_product = [told for told in explained if told["product_smiles"] is not None]
    assert len(with_product) >= 30, "too few products to judge"
    return with_product


def atoms(molecule):
    """Atoms by symbol, hydrogens included."""
    counted = collections.Counter(a.GetSymbol() for a in Chem.AddHs(molecule).GetAtoms())
    return counted


def test_products_are_the_molecules_rdkit_sees(products):
    for told in products:
        smiles = told["product_smiles"]
        molecule = Chem.MolFromSmiles(smiles)
        assert molecule is not None, smiles
        assert Chem.MolToSmiles(molecule) == smiles
        assert rdMolDescriptors.CalcMolFormula(molecule) == told["product_formula"], smiles
        assert abs(Descriptors.ExactMolWt(molecule) - told["product_mass"]) < 1e-4, smiles


def test_masses_to_look_for_are_those_of_rdkit(products):
    """Every product of every channel, not the wanted one alone; the largest share comes first."""
    channels = collections.Counter()
    for told in products:
        for line in told["products"]:
            channels[line["channel"]] += 1
            smiles = line["smiles"]
            molecule = Chem.MolFromSmiles(smiles)
            assert molecule is not None, smiles
            assert Chem.MolToSmiles(molecule) == smiles
            assert rdMolDescriptors.CalcMolFormula(molecule) == line["formula"], smiles
            assert abs(Descriptors.ExactMolWt(molecule) - line["monoisotopic_mass"]) < 1e-4, smiles
        shares = [line["fraction"] for line in told["products"]]
        known = [share for share in shares if share is not None]
        assert known == sorted(known, reverse=True)
        assert shares[: len(known)] == known, "those without a share come last"
        wanted = [line["smiles"] for line in told["products"] if line["channel"] == "wanted product"]
        assert told["product_smiles"] in wanted
    assert channels["wanted product"] >= 30
    assert {"O-attack", "over-alkylation", "self-condensation", "base consumed by electrophile"} <= set(channels)


def test_atoms_are_kept(products):
    """Substrate + electrophile = product + what leaves: nothing, HBr or HI."""
    for told in products:
        cell = told["cell"]
        substrate = Chem.MolFromSmiles(cell["substrate_smiles"])
        electrophile = Chem.MolFromSmiles(cell["electrophile_smiles"])
        product = Chem.MolFromSmiles(told["product_smiles"])
        left = atoms(substrate) + atoms(electrophile)
        left.subtract(atoms(product))
        leaving = {symbol: count for symbol, count in left.items() if count}
        assert leaving in ({}, {"H": 1, "Br": 1}, {"H": 1, "I": 1}), (told["product_smiles"], leaving)


def test_the_substrate_is_in_its_product(products):
    for told in products:
        substrate = Chem.MolFromSmiles(told["cell"]["substrate_smiles"])
        product = Chem.MolFromSmiles(told["product_smiles"])
        assert product.HasSubstructMatch(substrate), told["product_smiles"]


def test_atom_numbers_of_sites_are_those_of_the_smiles(products):
    """Element and hydrogens of each site of the substrate, by the index that is told."""
    for told in products:
        substrate = Chem.MolFromSmiles(told["cell"]["substrate_smiles"])
        for site in told["sites"]:
            if site["molecule"] == "substrate":
                atom = substrate.GetAtomWithIdx(site["atom"])
                assert atom.GetSymbol() == site["element"], told["cell"]
                assert atom.GetTotalNumHs() == site["hydrogens"], told["cell"]
