"""The proton balance against an independent solver: Cantera's minimisation of the Gibbs energy.

`enolattice-calibration balance` prints cases with the engine's own solution:

    {"cases": [{"name": "...",
                "acids": [{"name": "...",
                           "pkas": [29.0],            stepwise, first proton first
                           "charged_m": [0.2, 0.0],   mol/L of each form, most protonated first
                           "solution_m": [...]}]}]}   the same at equilibrium

Cantera knows nothing of pKa values or of proton balances: each acid is an element of its own, the
proton another, and the standard Gibbs energy of a form is that of the protons it has lost.
"""

import json
import math
import subprocess

import cantera
import pytest

R = 8.314462618  # J/(mol K), CODATA 2018
TEMPERATURE_K = 298.15
# Of the whole amount of an acid; the solver of Cantera stops at about 1e-10.
TOLERANCE = 1e-8


@pytest.fixture(scope="module")
def cases(calibration):
    printed = subprocess.run(
        [calibration, "balance"], check=True, capture_output=True, text=True
    ).stdout
    return json.loads(printed)["cases"]


def form(i, lost):
    return f"A{i}_{lost}"


def phase(acids):
    """An ideal phase that holds every form of every acid."""
    elements = [{"symbol": "Proton", "atomic-weight": 1.0}]
    elements += [{"symbol": f"X{i}", "atomic-weight": 10.0} for i in range(len(acids))]
    species = []
    for i, acid in enumerate(acids):
        most = len(acid["pkas"])
        for lost in range(most + 1):
            energy = R * TEMPERATURE_K * math.log(10.0) * sum(acid["pkas"][:lost])
            composition = {f"X{i}": 1.0}
            if lost < most:
                composition["Proton"] = float(most - lost)
            species.append(
                {
                    "name": form(i, lost),
                    "composition": composition,
                    "thermo": {
                        "model": "constant-cp",
                        "T0": TEMPERATURE_K,
                        "h0": f"{energy!r} J/mol",
                        "s0": "0 J/mol/K",
                        "cp0": "0 J/mol/K",
                    },
                    "equation-of-state": {"model": "constant-volume", "molar-volume": 1.0},
                }
            )
    document = {
        "elements": elements,
        "species": species,
        "phases": [
            {
                "name": "pot",
                "thermo": "ideal-condensed",
                "standard-concentration-basis": "unity",
                "elements": [element["symbol"] for element in elements],
                "species": [one["name"] for one in species],
            }
        ],
    }
    # JSON is YAML.
    return cantera.Solution(yaml=json.dumps(document))


def equilibrium(acids):
    """Amounts of each form of each acid, mol/L, by Gibbs minimisation."""
    amounts = {
        form(i, lost): amount
        for i, acid in enumerate(acids)
        for lost, amount in enumerate(acid["charged_m"])
    }
    pot = phase(acids)
    pot.TPX = TEMPERATURE_K, cantera.one_atm, amounts
    mixture = cantera.Mixture([(pot, sum(amounts.values()))])
    mixture.T, mixture.P = TEMPERATURE_K, cantera.one_atm
    mixture.equilibrate("TP", solver="vcs", rtol=1e-12, max_steps=5000)
    moles = dict(zip(mixture.species_names, mixture.species_moles))
    return [[moles[form(i, lost)] for lost in range(len(a["pkas"]) + 1)] for i, a in enumerate(acids)]


def test_the_solver_knows_the_simplest_balance():
    """K = 10^ΔpKa: equal amounts of acid and base one unit apart, x²/(1 − x)² = 10."""
    acids = [
        {"pkas": [20.0], "charged_m": [1.0, 0.0]},
        {"pkas": [21.0], "charged_m": [0.0, 1.0]},
    ]
    ionised = math.sqrt(10.0) / (1.0 + math.sqrt(10.0))
    assert abs(equilibrium(acids)[0][1] - ionised) < 1e-9


def test_the_engines_balance_is_that_of_gibbs(cases):
    assert len(cases) >= 20
    assert any(len(acid["pkas"]) > 1 for case in cases for acid in case["acids"])
    for case in cases:
        expected = equilibrium(case["acids"])
        for acid, forms in zip(case["acids"], expected):
            whole = sum(acid["charged_m"])
            for told, amount in zip(acid["solution_m"], forms, strict=True):
                assert abs(told - amount) <= TOLERANCE * max(whole, 1e-3), (case["name"], acid["name"])
