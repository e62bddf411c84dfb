"""Weights of replicas: the readers in Python, C++ (both variants) and TypeScript must give the same numbers.

Usage: test_replicas.py DIST CPP_PROGRAM..., with the folder of the compiled TypeScript and the programs made from
test/clients/cpp/replica_weights.cpp. PYTHONPATH as for test_python_draws.py. The table is made here, from replicas.yaml.
"""

import pathlib
import random
import subprocess
import sys
import tempfile

import couplet_decays
from couplet_replicas import ReplicaWeights, chain_weights

SHIFTS = ["-900", "-37.5", "0", "12.25"]
# Powers and roots of two languages differ in the last digits.
TOLERANCE = 1e-12
DRAWS = 100_000
# Standard deviations that a right weighted mean may be off; the chance of one passing it is 3e-7, and there are few.
SIGMAS = 5

NODE = """
const [dist, file, ...shifts] = process.argv.slice(1);
const { readFileSync } = require("node:fs");
const { decodeDecays, tableHadrons, replicaWeights, chainWeights } = require(dist + "/index.js");
const tables = decodeDecays(readFileSync(file), file);
for (const parent of tables.parents) {
  const weights = replicaWeights(parent, tableHadrons(tables), tables.replicas.length);
  for (const shift of shifts) {
    const mass = Math.max(parent.hadron.mass + Number(shift), 1e-3);
    for (const row of parent.rows) {
      const once = weights.of(row.id, mass);
      const squares = chainWeights([once, once]);
      const numbers = once.flatMap((weight, k) => [weight, squares[k]]);
      console.log([parent.hadron.name, shift, row.id, ...numbers].join("\\t"));
    }
  }
}
"""


def python_weights(tables):
    """By parent, shift and row: each replica's weight and its square."""
    found = {}
    for parent in tables.parents:
        weights = ReplicaWeights(tables, parent)
        for shift in SHIFTS:
            mass = max(parent.hadron.mass + float(shift), 1e-3)
            for row in parent.rows:
                once = weights.of(row, mass)
                pairs = zip(once, chain_weights(once, once))
                found[parent.hadron.name, shift, row.id] = [number for pair in pairs for number in pair]
    return found


def program_weights(command):
    """The same, as a program prints them."""
    lines = subprocess.run(command, check=True, capture_output=True, text=True).stdout.splitlines()
    split = [line.split("\t") for line in lines]
    return {tuple(parts[:3]): [float(number) for number in parts[3:]] for parts in split}


def difference(ours, theirs):
    """Largest relative difference; infinite where rows or the number of weights differ."""
    if ours.keys() != theirs.keys() or any(len(ours[key]) != len(theirs[key]) for key in ours):
        return float("inf")
    pairs = [pair for key in ours for pair in zip(ours[key], theirs[key])]
    return max(0.0 if a == b else abs(a - b) / max(abs(a), abs(b)) for a, b in pairs)


def weighted_mean_is_off(tables):
    """Deviations of a drawn and weighted chain's fractions from the replicas', in standard deviations; how many.

    Sigma(1731)0 -> Sigma0 eta is closed, so the chain is Lambda(1718) -> Sigma0 pi0 with pi0 -> gamma gamma, both drawn.
    """
    rng = random.Random(20261204)
    first = couplet_decays.parent_named(tables, "Lambda(1718)")
    second = couplet_decays.parent_named(tables, "pi0")
    decayers = [couplet_decays.Decayer(parent) for parent in (first, second)]
    weights = [ReplicaWeights(tables, parent) for parent in (first, second)]
    fractions = [
        [{row.id: w * row.parts_per_billion / couplet_decays.WHOLE for row, w in zip(parent.rows, per_row)} for per_row in zip(*(made.of(row) for row in parent.rows))]
        for parent, made in zip((first, second), weights)
    ]
    cached = [{row.id: made.of(row) for row in parent.rows} for parent, made in zip((first, second), weights)]
    wanted = ("Lambda(1718) -> Sigma0 pi0", "pi0 -> gamma gamma")
    count = len(tables.replicas)
    sums, squares = [0.0] * count, [0.0] * count
    for _ in range(DRAWS):
        chain = tuple(decayer.draw(rng).id for decayer in decayers)
        if chain != wanted:
            continue
        for k, weight in enumerate(chain_weights(cached[0][chain[0]], cached[1][chain[1]])):
            sums[k] += weight
            squares[k] += weight * weight
    off = []
    for k in range(count):
        mean = sums[k] / DRAWS
        error = max((squares[k] / DRAWS - mean * mean) / DRAWS, 1e-300) ** 0.5
        off.append((mean - fractions[0][k][wanted[0]] * fractions[1][k][wanted[1]]) / error)
    return off


def main(dist, *programs):
    passed = failed = 0

    def check(ok, name):
        nonlocal passed, failed
        passed, failed = passed + bool(ok), failed + (not ok)
        print(f"{'ok' if ok else 'FAILED'}  {name}")

    study = pathlib.Path(__file__).with_name("replicas.yaml")
    with tempfile.TemporaryDirectory() as folder:
        command = ["node", f"{dist}/cli/main.js", "tables", str(study), "-o", folder]
        subprocess.run(command, check=True, capture_output=True)
        path = f"{folder}/replicas.decays.pb"
        tables = couplet_decays.read_tables(path)
        ours = python_weights(tables)
        commands = [("TypeScript", ["node", "-e", NODE, dist, path])] + [(pathlib.Path(p).name, [p, path]) for p in programs]
        moved = sum(abs(weight - 1) > 1e-3 for weights in ours.values() for weight in weights)
        numbers = sum(len(weights) for weights in ours.values())
        for name, start in commands:
            largest = difference(ours, program_weights(start + SHIFTS))
            check(
                largest <= TOLERANCE and moved > numbers / 4,
                f"Python and {name} agree on {numbers} weights, {moved} of them not 1: largest relative difference {largest:.1e}",
            )
        key = max(ours, key=lambda row: max(ours[row]))
        check(difference(ours, {**ours, key: [w * (1 + 1e-11) for w in ours[key]]}) > TOLERANCE, "a difference of 1e-11 in one row is seen")
        off = weighted_mean_is_off(tables)
        check(
            max(map(abs, off)) < SIGMAS,
            f"a drawn chain of two decays, weighted, has the fractions of all {len(off)} replicas: within {max(map(abs, off)):.1f} standard deviations of {DRAWS} draws",
        )
        tables.parents[0].rows[0].replica_ratios.append(1)
        try:
            ReplicaWeights(tables, tables.parents[0])
            refused = ""
        except couplet_decays.Damaged as error:
            refused = str(error)
        expected = f"{tables.parents[0].rows[0].id}: expected one finite ratio >= 0 for each of {len(tables.replicas)} replicas, got others"
        check(refused == expected, "a row with one ratio too many is refused")
    print(f"{passed} passed, {failed} failed")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
