"""The proton balance against an independent solver: Cantera's minimisation of the Gibbs energy.

`enolattice-calibration balance` prints whole pots with the engine's own solution:

    {"cases": [{"name": "...", "cation": "Lithium",
                "acids": [{"name": "...",
                           "charge": 0,                       of the most protonated form
                           "pkas": [29.0],                    stepwise, first proton first
                           "log10_homoconjugation": 3.7,      of AH + A- = AHA-, or null
                           "charged_m": [0.2, 0.0],           mol/L of each form, most protonated first
                           "solution_m": [...],               the same at equilibrium
                           "complex_m": 0.0}]}]}              AHA- at equilibrium

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
# Mass and charge, mol/L.
CONSERVED = 1e-9
# A proton that prefers another acid by this many units of pKa is there, to far below the tolerance: Cantera's
# solver loses its way among amounts of 1e-60.
WIDEST_GAP = 30.0


@pytest.fixture(scope="module")
def cases(calibration):
    printed = subprocess.run(
        [calibration, "balance"], check=True, capture_output=True, text=True
    ).stdout
    return json.loads(printed)["cases"]


def form(i, lost):
    return f"A{i}_{lost}"


def pair(i):
    """The complex of the two most protonated forms of an acid."""
    return f"A{i}_pair"


def drawn_together(acids):
    """The same acids with gaps between neighbouring pKa no wider than WIDEST_GAP."""
    steps = sorted({pka for acid in acids for pka in acid["pkas"]})
    moved, shift = {}, 0.0
    for i, pka in enumerate(steps):
        if i > 0:
            shift += max(0.0, pka - steps[i - 1] - WIDEST_GAP)
        moved[pka] = pka - shift - steps[0]
    return [dict(acid, pkas=[moved[pka] for pka in acid["pkas"]]) for acid in acids]


def species_of(acids, total_m):
    """Each form and complex: name, composition, standard Gibbs energy in units of RT ln 10.

    Activities are mole fractions: a complex, of which the constant is in L/mol, has the total amount in its
    energy.
    """
    for i, acid in enumerate(acids):
        most = len(acid["pkas"])
        for lost in range(most + 1):
            composition = {f"X{i}": 1.0}
            if lost < most:
                composition["Proton"] = float(most - lost)
            yield form(i, lost), composition, sum(acid["pkas"][:lost])
        if acid.get("log10_homoconjugation") is not None:
            composition = {f"X{i}": 2.0, "Proton": float(2 * most - 1)}
            energy = acid["pkas"][0] - acid["log10_homoconjugation"] - math.log10(total_m)
            yield pair(i), composition, energy


def phase(acids, total_m):
    """An ideal phase that holds every form of every acid."""
    elements = [{"symbol": "Proton", "atomic-weight": 1.0}]
    elements += [{"symbol": f"X{i}", "atomic-weight": 10.0} for i in range(len(acids))]
    species = [
        {
            "name": name,
            "composition": composition,
            "thermo": {
                "model": "constant-cp",
                "T0": TEMPERATURE_K,
                "h0": f"{R * TEMPERATURE_K * math.log(10.0) * energy!r} J/mol",
                "s0": "0 J/mol/K",
                "cp0": "0 J/mol/K",
            },
            "equation-of-state": {"model": "constant-volume", "molar-volume": 1.0},
        }
        for name, composition, energy in species_of(acids, total_m)
    ]
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


def at_total(acids, total_m):
    """Amounts of all species, mol/L, by Gibbs minimisation, with this total in the energy of complexes."""
    amounts = {
        form(i, lost): amount
        for i, acid in enumerate(acids)
        for lost, amount in enumerate(acid["charged_m"])
    }
    pot = phase(acids, total_m)
    pot.TPX = TEMPERATURE_K, cantera.one_atm, amounts
    mixture = cantera.Mixture([(pot, sum(amounts.values()))])
    mixture.T, mixture.P = TEMPERATURE_K, cantera.one_atm
    mixture.equilibrate("TP", solver="vcs", rtol=1e-12, max_steps=5000)
    return dict(zip(mixture.species_names, mixture.species_moles))


def equilibrium(acids):
    """Amounts of each form of each acid and of its complex, mol/L."""
    acids = drawn_together(acids)
    total_m = sum(sum(acid["charged_m"]) for acid in acids)
    complexes = any(acid.get("log10_homoconjugation") is not None for acid in acids)
    for _ in range(40 if complexes else 1):
        moles = at_total(acids, total_m)
        found_m = sum(moles.values())
        if abs(found_m - total_m) < 1e-13:
            break
        total_m = found_m
    return [
        (
            [moles[form(i, lost)] for lost in range(len(acid["pkas"]) + 1)],
            moles.get(pair(i), 0.0),
        )
        for i, acid in enumerate(acids)
    ]


def test_the_solver_knows_the_simplest_balance():
    """K = 10^ΔpKa: equal amounts of acid and base one unit apart, x²/(1 − x)² = 10."""
    acids = [
        {"pkas": [20.0], "charged_m": [1.0, 0.0]},
        {"pkas": [21.0], "charged_m": [0.0, 1.0]},
    ]
    ionised = math.sqrt(10.0) / (1.0 + math.sqrt(10.0))
    assert abs(equilibrium(acids)[0][0][1] - ionised) < 1e-9


def test_the_solver_knows_the_simplest_complex():
    """A half-neutralised acid, K = 1000 L/mol: x + 1000 x² = 0.1 of each."""
    acids = [{"pkas": [20.0], "charged_m": [0.1, 0.1], "log10_homoconjugation": 3.0}]
    free = (-1.0 + math.sqrt(1.0 + 400.0)) / 2000.0
    forms, paired = equilibrium(acids)[0]
    assert abs(forms[0] - free) < 1e-9 and abs(paired - (0.1 - free)) < 1e-9


def test_mass_and_charge_are_kept(cases):
    for case in cases:
        change = 0.0
        for acid in case["acids"]:
            mass = sum(acid["solution_m"]) + 2.0 * acid["complex_m"]
            assert abs(mass - sum(acid["charged_m"])) <= CONSERVED, (case["name"], acid["name"])
            charges = [acid["charge"] - lost for lost in range(len(acid["solution_m"]))]
            change += sum(z * m for z, m in zip(charges, acid["solution_m"], strict=True))
            change -= sum(z * m for z, m in zip(charges, acid["charged_m"], strict=True))
            change += (2 * acid["charge"] - 1) * acid["complex_m"]
        assert abs(change) <= CONSERVED, case["name"]


def test_the_engines_balance_is_that_of_gibbs(cases):
    assert len(cases) >= 50
    acids = [acid for case in cases for acid in case["acids"]]
    assert any(len(acid["pkas"]) == 3 for acid in acids), "phosphate"
    assert any(acid["complex_m"] > 1e-3 for acid in acids), "homoconjugation"
    metals = {"Lithium", "Sodium", "Potassium", "Caesium", "Ammonium", "Magnesium", "Zinc"}
    assert metals <= {case["cation"] for case in cases}
    for case in cases:
        expected = equilibrium(case["acids"])
        for acid, (forms, paired) in zip(case["acids"], expected, strict=True):
            whole = max(sum(acid["charged_m"]), 1e-3)
            told = [*acid["solution_m"], acid["complex_m"]]
            for ours, theirs in zip(told, [*forms, paired], strict=True):
                assert abs(ours - theirs) <= TOLERANCE * whole, (case["name"], acid["name"])
