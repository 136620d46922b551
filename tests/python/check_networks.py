"""The stiff reference against an independent integrator: SciPy's BDF.

`enolattice-calibration networks` prints networks with the solution of the reference:

    {"cases": [{"name": "...",
                "kind": "Alkyl",                            of the electrophile
                "species": ["substrate", ...],
                "start_m": [0.1, ...],                      mol/L
                "reactions": [[{"reactants": [3, 24],       of the rate, k times their product
                                "used": [3, 24],
                                "formed": [27],
                                "k": 0.1}]],                L, mol, s
                "stretches": [{"reactions": 0,              which of the lists holds
                               "duration_s": 600.0,
                               "added": [5, 0.11]}],        species and mol/L over the stretch, or null
                "product": [27, 30, 33],                    species that are the wanted product
                "substrate_m": 0.1,
                "end_m": [...]}]}                           at the end by the reference

Nothing but rate law and stoichiometry is shared with the engine.
"""

import json
import subprocess

import numpy as np
import pytest
from scipy.integrate import solve_ivp

# Of yields, the aim of the design.
TOLERANCE = 0.002
KINDS = {"Alkyl", "Michael", "Aldehyde", "Ketone", "Imine", "Acyl", "Ring", "Cumulene", "Aryl"}
LEAST_CASES = 20


@pytest.fixture(scope="module")
def cases(calibration):
    printed = subprocess.run(
        [calibration, "networks"], check=True, capture_output=True, text=True
    ).stdout
    return json.loads(printed)["cases"]


class MassAction:
    """Rates of reactions of up to three molecules.

    Rounding makes amounts below zero. One of them turns its reaction back; with two nothing happens, where
    their product would run away.
    """

    def __init__(self, reactions, species):
        self.k = np.array([one["k"] for one in reactions])
        # an extra species that is always 1 stands where a reaction has fewer than three reactants
        padded = [one["reactants"] + [species] * (3 - len(one["reactants"])) for one in reactions]
        self.reactants = np.array(padded, dtype=int).reshape(-1, 3)
        self.change = np.zeros((species, len(reactions)))
        for column, one in enumerate(reactions):
            for index in one["used"]:
                self.change[index, column] -= 1.0
            for index in one["formed"]:
                self.change[index, column] += 1.0
        self.species = species

    def amounts(self, y):
        return np.append(y, 1.0)[self.reactants]

    def rates(self, y):
        amounts = self.amounts(y)
        together = np.where((amounts < 0.0).sum(axis=1) < 2, amounts.prod(axis=1), 0.0)
        return self.change @ (self.k * together)

    def jacobian(self, y):
        amounts = self.amounts(np.maximum(y, 0.0))
        slopes = np.zeros((len(self.k), self.species + 1))
        rows = np.arange(len(self.k))
        for place in range(3):
            others = np.delete(amounts, place, axis=1).prod(axis=1)
            np.add.at(slopes, (rows, self.reactants[:, place]), self.k * others)
        return self.change @ slopes[:, : self.species]


def end(case):
    """Amounts at the end, mol/L."""
    y = np.array(case["start_m"])
    networks = [MassAction(reactions, len(y)) for reactions in case["reactions"]]
    for stretch in case["stretches"]:
        network = networks[stretch["reactions"]]
        added = np.zeros(len(y))
        if stretch["added"] is not None:
            index, amount = stretch["added"]
            added[index] = amount / stretch["duration_s"]
        solution = solve_ivp(
            lambda _, y, network=network, added=added: network.rates(y) + added,
            (0.0, stretch["duration_s"]),
            y,
            method="BDF",
            jac=lambda _, y, network=network: network.jacobian(y),
            rtol=1e-7,
            atol=1e-12,
            first_step=1e-8,
        )
        assert solution.success, (case["name"], solution.message)
        y = solution.y[:, -1]
    return y


def product(case, amounts):
    return sum(amounts[index] for index in case["product"]) / case["substrate_m"]


def test_the_integrator_knows_a_reaction_of_two_equal_amounts():
    """A + B = P with equal amounts c: conversion k c t / (1 + k c t)."""
    case = {
        "name": "two equal amounts",
        "start_m": [0.2, 0.2, 0.0],
        "reactions": [[{"reactants": [0, 1], "used": [0, 1], "formed": [2], "k": 1e-3}]],
        "stretches": [{"reactions": 0, "duration_s": 3600.0, "added": None}],
        "product": [2],
        "substrate_m": 0.2,
    }
    kct = 1e-3 * 0.2 * 3600.0
    assert abs(product(case, end(case)) - kct / (1.0 + kct)) < 1e-5


def test_the_networks_are_of_every_kind(cases):
    assert len(cases) >= LEAST_CASES
    assert KINDS <= {case["kind"] for case in cases}
    steps = [one for case in cases for reactions in case["reactions"] for one in reactions]
    assert {len(one["reactants"]) for one in steps} == {1, 2, 3}
    assert any(one["used"] != one["reactants"] for one in steps), "a step uses what its rate lacks"


def test_the_references_yields_are_those_of_scipy(cases):
    apart = {case["name"]: product(case, end(case)) - product(case, case["end_m"]) for case in cases}
    far = {name: difference for name, difference in apart.items() if abs(difference) > TOLERANCE}
    assert not far
