"""Whole cascades: drawn with the same random numbers, Python, C++ and TypeScript give the same ones.

Usage: test_cascade_agreement.py DUMP_CASCADES DIST TABLE_FILE..., with the program made from dump_cascades.cpp and the folder
of the compiled TypeScript. Names, rows and ends must be equal, masses to 1e-9: powers and roots of two languages differ in
the last digits. PYTHONPATH as for test_python_draws.py.
"""

import array
import collections
import random
import subprocess
import sys
import tempfile

import couplet_cascades
import couplet_decays

SEED = 20261202
CASCADES = 400
UNIFORMS = 1_000_000
TOLERANCE = 1e-9

NODE = """
const [dist, file, numbers, count, ...starts] = process.argv.slice(1);
const { readFileSync } = require("node:fs");
const { decodeDecays } = require(dist + "/tables/decode-decays.js");
const { cascadeDrawer } = require(dist + "/tables/draw-cascade.js");
const bytes = readFileSync(numbers);
let at = -8;
const uniform = () => bytes.readDoubleLE((at += 8));
const drawer = cascadeDrawer(decodeDecays(readFileSync(file), file));
for (const start of starts) {
  for (let k = 0; k < Number(count); k++) {
    for (const { name, massMeV, mother, row, end } of drawer.draw(start, uniform))
      console.log([name, massMeV, mother, row?.id ?? "-", end].join("\\t"));
  }
}
"""


class Given:
    """Random numbers from a list."""

    def __init__(self, numbers):
        self._numbers = iter(numbers)
        self.used = 0

    def random(self):
        self.used += 1
        return next(self._numbers)


def python_particles(tables, starts, given):
    cascades = couplet_cascades.Cascades(tables)
    for start in starts:
        for _ in range(CASCADES):
            for particle in cascades.draw(start, given):
                mother = -1 if particle.mother is None else particle.mother
                row = particle.row.id if particle.row is not None else "-"
                yield (particle.name, str(mother), row, particle.end), particle.mass


def program_particles(command):
    for line in subprocess.run(command, check=True, capture_output=True, text=True).stdout.splitlines():
        name, mass, *rest = line.split("\t")
        yield (name, *rest), float(mass)


def largest_difference(ours, theirs):
    """Of the masses, relative; infinite where anything else differs."""
    if [what for what, _ in ours] != [what for what, _ in theirs]:
        return float("inf")
    return max(abs(a - b) / max(a, 1) for (_, a), (_, b) in zip(ours, theirs))


def main(dump, dist, *files):
    passed = failed = 0
    rng = random.Random(SEED)
    numbers = array.array("d", (rng.random() for _ in range(UNIFORMS)))
    with tempfile.NamedTemporaryFile() as file:
        numbers.tofile(file)
        file.flush()
        for path in files:
            tables = couplet_decays.read_tables(path)
            # Every second start is the antiparticle.
            starts = [
                parent.hadron.antiparticle if k % 2 and parent.hadron.HasField("antiparticle") else parent.hadron.name
                for k, parent in enumerate(tables.parents)
            ]
            given = Given(numbers)
            ours = list(python_particles(tables, starts, given))
            ends = collections.Counter(what[-1] for what, _ in ours)
            arguments = [path, file.name, str(CASCADES), *starts]
            for language, command in [("C++", [dump]), ("TypeScript", ["node", "-e", NODE, dist])]:
                difference = largest_difference(ours, list(program_particles(command + arguments)))
                ok = difference <= TOLERANCE and ends["decayed"] > 0
                passed, failed = passed + ok, failed + (not ok)
                print(
                    f"{'ok' if ok else 'FAILED'}  {path.rsplit('/')[-1]}: Python and {language} draw the same {len(ours)} particles "
                    f"from {given.used} numbers: largest relative difference of masses {difference:.1e}"
                )
    other = [(what, mass * (1 + 1e-8)) for what, mass in ours]
    ok = largest_difference(ours, other) > TOLERANCE and largest_difference(ours, ours[:-1]) > TOLERANCE
    passed, failed = passed + ok, failed + (not ok)
    print(f"{'ok' if ok else 'FAILED'}  a difference of 1e-8 in the masses, and a particle less, are seen")
    print(f"{passed} passed, {failed} failed")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
