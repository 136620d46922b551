"""What a user would write instead: the same networks in NumPy, all cells at once, ranked with DuckDB. Run by hand.

    pip install numpy duckdb
    enolattice-calibration networks > networks.json
    python by_hand_numpy.py networks.json [--cells N] [--screened CELLS_PER_SECOND]

Question: how many times as fast as such a script is the engine? Each network of the file (random cells of which neither
nothing nor everything happens) stands for a batch of cells whose rate constants are strewn by a factor of three. All cells
of a batch take the same steps: backward Euler, each step a tenth longer than the last, three iterations of Newton's method
with one batched factorisation each. The script knows no acidity, no rates, no cautions, no uncertainty: the networks are
given to it, which is most of the work. `--screened` is what `enolattice screen` printed on the same machine, cells a second
of all its threads, yields with uncertainty included.
"""

import argparse
import json
import time

import duckdb
import numpy as np

STEPS_OF_A_STRETCH = 60
FIRST_STEP_S = 1e-4
ITERATIONS = 3


class Batch:
    """A network with rate constants of its own in each cell."""

    def __init__(self, reactions, species, strewn):
        self.k = np.array([one["k"] for one in reactions]) * strewn[:, : len(reactions)]
        padded = [one["reactants"] + [species] * (3 - len(one["reactants"])) for one in reactions]
        self.reactants = np.array(padded, dtype=int).reshape(-1, 3)
        self.change = np.zeros((species, len(reactions)))
        for column, one in enumerate(reactions):
            for index in one["used"]:
                self.change[index, column] -= 1.0
            for index in one["formed"]:
                self.change[index, column] += 1.0
        self.species = species

    def rates_and_slopes(self, y):
        cells = len(y)
        amounts = np.concatenate([np.maximum(y, 0.0), np.ones((cells, 1))], axis=1)
        a, b, c = (amounts[:, self.reactants[:, place]] for place in range(3))
        rates = (self.k * a * b * c) @ self.change.T
        slopes = np.zeros((cells, len(self.change), self.species + 1))
        for place, others in enumerate((b * c, a * c, a * b)):
            for reaction, index in enumerate(self.reactants[:, place]):
                weights = (self.k * others)[:, reaction]
                slopes[:, :, index] += weights[:, None] * self.change[None, :, reaction]
        return rates, slopes[:, :, : self.species]


def march(case, strewn):
    """Amounts at the end in each cell, mol/L."""
    species = len(case["start_m"])
    cells = len(strewn)
    batches = [Batch(reactions, species, strewn) for reactions in case["reactions"]]
    y = np.tile(np.array(case["start_m"]), (cells, 1))
    one = np.eye(species)
    for stretch in case["stretches"]:
        batch = batches[stretch["reactions"]]
        added = np.zeros(species)
        if stretch["added"] is not None:
            index, amount = stretch["added"]
            added[index] = amount / stretch["duration_s"]
        ends = np.geomspace(FIRST_STEP_S, stretch["duration_s"], STEPS_OF_A_STRETCH)
        for step in np.diff(ends, prepend=0.0):
            before, y = y, y.copy()
            for _ in range(ITERATIONS):
                rates, slopes = batch.rates_and_slopes(y)
                fault = y - before - step * (rates + added)
                y -= np.linalg.solve(one - step * slopes, fault[:, :, None])[:, :, 0]
    return y


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("networks")
    parser.add_argument("--cells", type=int, default=200, help="cells of a batch")
    parser.add_argument("--screened", type=float, help="cells a second of `enolattice screen`")
    asked = parser.parse_args()
    with open(asked.networks, encoding="utf-8") as file:
        cases = json.load(file)["cases"]
    random = np.random.default_rng(1)
    rows, apart = [], []
    begun = time.perf_counter()
    for number, case in enumerate(cases):
        most = max(len(reactions) for reactions in case["reactions"])
        strewn = 3.0 ** random.normal(size=(asked.cells, most))
        strewn[0] = 1.0  # the cell as it is, to be held against the reference
        amounts = march(case, strewn)
        # three iterations do not always suffice: what is beyond all bounds is cut
        yields = np.clip(amounts[:, case["product"]].sum(axis=1) / case["substrate_m"], 0.0, 1.0)
        reference = sum(case["end_m"][index] for index in case["product"]) / case["substrate_m"]
        apart.append(abs(yields[0] - reference))
        rows.append(np.column_stack([np.full(asked.cells, number), np.arange(asked.cells), yields]))
    scored = time.perf_counter() - begun
    table = np.concatenate(rows)
    begun = time.perf_counter()
    columns = {"network": table[:, 0], "cell": table[:, 1], "product": table[:, 2]}
    best = duckdb.sql("select * from columns order by product desc, network, cell limit 100").fetchall()
    ranked = time.perf_counter() - begun
    a_second = len(table) / scored
    print(f"{len(table)} cells of {len(cases)} networks: {scored:.1f} s, {1e6 / a_second:.0f} us a cell")
    print(f"ranked by DuckDB in {ranked:.3f} s; best {best[0][2]:.3f}")
    within = np.mean(np.array(apart) <= 0.05)
    print(f"within 0.05 of the reference: {100 * within:.0f} % of the networks, worst {max(apart):.3f}")
    if asked.screened:
        print(f"enolattice scores {asked.screened / a_second:.1f} times as many cells a second")


if __name__ == "__main__":
    main()
