"""Plans as datasets of the Open Reaction Database, held against its own validator."""

import json
import os
import pathlib
import re
import subprocess

import pytest

from conftest import ROOT

CAMPAIGN = """
title = "Invented: records"
[substrates]
smiles = ["CCOC(=O)CC(=O)OCC", "CCC(=O)c1ccccc1", "CCOC(=O)CC(C)=O", "CC(=O)c1ccccc1"]
[bases]
library = ["LDA", "KOtBu", "K2CO3", "DBU"]
[electrophiles]
library = ["MeI", "BnBr", "benzaldehyde"]
[solvents]
library = ["THF", "DMF", "THF/DMF 4:1"]
[conditions]
temperature_c = [-20, 25]
formation_temperature_c = [-20]
"""

REQUEST = """
title = "Invented: tonight"
[plates]
wells = 24
[choice]
shortlist = 300
draws = 32
[controls]
positive = 2
no_base = 1
[deck]
lowest_temperature_c = -20
inert = true
slurries = true
"""

PERSON = ["--person-name", "A. Example", "--person-email", "planner@example.org"]


@pytest.fixture(scope="module")
def ord_python():
    if "ENOLATTICE_ORD_PYTHON" in os.environ:
        path = pathlib.Path(os.environ["ENOLATTICE_ORD_PYTHON"])
    else:
        path = ROOT / "target" / "ord-venv" / "bin" / "python"
    assert path.is_file(), "make an environment of requirements-ord.txt, or set ENOLATTICE_ORD_PYTHON"
    return str(path)


def run(*command):
    done = subprocess.run([str(part) for part in command], capture_output=True, text=True)
    assert done.returncode == 0, done.stderr
    return done.stdout


@pytest.fixture(scope="module")
def screened(binary, tmp_path_factory):
    folder = tmp_path_factory.mktemp("records")
    (folder / "campaign.toml").write_text(CAMPAIGN)
    (folder / "plan.toml").write_text(REQUEST)
    told = run(binary, "screen", folder / "campaign.toml", "--data", folder / "data", "--json")
    return folder, json.loads(told)["job"]["job"]


ROWS = {24: 4, 96: 8, 384: 16, 1536: 32}
MARKS = {"positive": "+", "no_base": "-", "no_electrophile": "/", "deuterium": "*", "solvent_only": "o"}


def check_plates(shown, plan):
    """Every well of the first plate stands in its row and column, within 80 columns."""
    wells = plan["request"]["plates"]["wells"]
    rows = ROWS[wells]
    lines = shown.splitlines()[2 : 2 + rows]
    assert all(len(line) <= 80 for line in lines), shown
    step = {24: 6, 96: 6, 384: 3, 1536: 1}[wells]
    columns = 3 * rows // 2
    fields = [[line[4 + step * c :][:step].strip() for c in range(columns)] for line in lines]
    for well in plan["plates"][0]["wells"]:
        row, column = re.fullmatch("([A-Z]+)([0-9]+)", well["well"]).groups()
        index = 0
        for letter in row:
            index = 26 * index + ord(letter) - ord("A") + 1
        text = fields[index - 1].pop(int(column) - 1)
        fields[index - 1].insert(int(column) - 1, "·")
        if well["content"] == "cell":
            assert text[0].isalpha() and text != "·", (well["well"], text)
            if wells <= 96:
                assert text.split()[1] == str(int(100 * well["p_hit"] + 0.5)), (well["well"], text)
        else:
            assert text[-1] == MARKS[well["content"]], (well["well"], text)
    assert all(field == "·" for row in fields for field in row), "no well that is empty is filled"


def test_a_plate_of_1536_is_shown(binary, screened):
    folder, job = screened
    options = ["--data", folder / "data", "--request", folder / "plan.toml", "--wells", 1536]
    plan = json.loads(run(binary, "plan", job, *options, "--json"))
    check_plates(run(binary, "plan", "--kept", plan["id"], *options[:2], "--show"), plan)


@pytest.mark.parametrize("wells", [24, 96, 384])
def test_the_validator_finds_nothing(binary, screened, ord_python, wells):
    folder, job = screened
    data = ["--data", folder / "data"]
    request = ["--request", folder / "plan.toml", "--wells", wells]
    files = [folder / f"plan-{wells}.{ending}" for ending in ("pb", "json")]
    plan = json.loads(run(binary, "plan", job, *data, *request, "--ord", files[0], *PERSON, "--json"))
    shown = run(binary, "plan", "--kept", plan["id"], *data, "--ord", files[1], *PERSON, "--show")
    check_plates(shown, plan)

    script = ROOT / "tests" / "python" / "validate_dataset.py"
    told = json.loads(run(ord_python, script, *files))
    assert told["errors"] == [] and told["warnings"] == []
    assert told["equal"], "both files say the same"
    assert told["measured"] == 0, "a prediction is no measurement"

    runs = [
        (plate["name"], well)
        for plate in plan["plates"]
        for well in plate["wells"]
        if well["content"] in ("cell", "positive")
    ]
    assert told["reactions"] == len(runs) > 0
    expected = [[plate, well["well"]] for plate, well in runs]
    assert told["positions"] == expected

    # the first reaction: amounts and prediction are those of the plan
    first, (_, well) = told["first"], runs[0]
    amounts = {
        identifier["value"]: component["amount"]["moles"]["value"]
        for part in first["inputs"].values()
        for component in part["components"]
        if "moles" in component["amount"]
        for identifier in component["identifiers"]
        if identifier["type"] == "NAME" or len(component["identifiers"]) == 1
    }
    for role in ("substrate", "base", "electrophile"):
        reagent = well[role]
        assert amounts[reagent["name"]] == pytest.approx(reagent["amount_umol"], rel=1e-6), role
    features = first["outcomes"][0]["products"][0]["features"]
    assert features["predicted_score"]["floatValue"] == pytest.approx(well["p_hit"], rel=1e-6)


def test_what_the_schema_asks_for_is_asked_for(binary, screened):
    folder, _ = screened
    for options, said in [
        (["--ord", "x.pb"], "--person-email"),
        (["--ord", "x.pb", "--person-email", "nobody"], "is no e-mail address"),
        (["--ord", "x.csv", *PERSON], "ends on .pb or .json"),
    ]:
        command = [binary, "plan", "--kept", "none", "--data", str(folder / "data"), *options]
        done = subprocess.run(command, capture_output=True, text=True)
        assert done.returncode == 2 and said in done.stderr, done.stderr
