"""Partial widths off the nominal mass: the readers in Python, C++ and TypeScript must give the same numbers.

Usage: test_agreement.py TABLE_FILE CPP_EVALUATE DIST, with the program that test/clients/cpp/run.sh leaves in its work
folder and the folder of the compiled TypeScript. The given table is compared, and one made here that has every width
model, option, coupling and order of daughters. PYTHONPATH as for test_python_draws.py.
"""

import hashlib
import itertools
import subprocess
import sys
import tempfile

import couplet_decays
from couplet.v1 import decays_pb2

SHIFTS = ["-1e300", "-900", "-37.5", "-0.001", "0", "0.001", "12.25", "300", "2500", "40000"]
# Powers and roots of two languages differ in the last digits.
TOLERANCE = 1e-12

NODE = """
const [dist, file, ...shifts] = process.argv.slice(1);
const { readFileSync } = require("node:fs");
const { decodeDecays } = require(dist + "/tables/decode-decays.js");
const { rowsEvaluator, tableHadrons } = require(dist + "/tables/evaluate-rows.js");
const tables = decodeDecays(readFileSync(file), file);
for (const parent of tables.parents) {
  const evaluator = rowsEvaluator(parent, tableHadrons(tables));
  const widths = new Array(evaluator.rowCount).fill(0);
  for (const shift of shifts) {
    evaluator.widthsInto(Math.max(parent.hadron.mass + Number(shift), 1e-3), widths, 0);
    parent.rows.forEach((row, k) => console.log([parent.hadron.name, shift, row.id, widths[k]].join("\\t")));
  }
}
"""


def python_widths(path):
    """Widths by parent, shift and row."""
    tables = couplet_decays.read_tables(path)
    found = {}
    for parent in tables.parents:
        at = couplet_decays.ParentWidths(tables, parent)
        for shift in SHIFTS:
            for row, width in zip(parent.rows, at.widths(max(parent.hadron.mass + float(shift), 1e-3))):
                found[parent.hadron.name, shift, row.id] = width
    return found


def program_widths(command):
    """The same, as a program prints them."""
    lines = subprocess.run(command, check=True, capture_output=True, text=True).stdout.splitlines()
    return {tuple(line.split("\t")[:3]): float(line.split("\t")[3]) for line in lines}


def difference(ours, theirs):
    """Largest relative difference; infinite where one is zero and the other is not, or where rows differ."""
    if ours.keys() != theirs.keys():
        return float("inf")
    return max(
        0.0 if theirs[key] == width else abs(theirs[key] / width - 1) if width else float("inf")
        for key, width in ours.items()
    )


def every_model():
    """A sealed table with every width model and vertex, for rows open and closed at the nominal mass."""
    tables = decays_pb2.DecayTables(kind=couplet_decays.KIND.decode())
    tables.header.schema_minor = couplet_decays.SCHEMA_MINOR
    tables.header.convention = couplet_decays.CONVENTION
    masses = {0: 137.25, 1: 938.5, 2: 775.5}

    def hadron(name, mass, two_j):
        tables.externals.add(name=name, mass=mass, two_j=two_j, parity=1)
        return name

    light = {two_j: hadron(f"light {two_j}", mass, two_j) for two_j, mass in masses.items()}
    heavy = {two_j: hadron(f"heavy {two_j}", mass + 5000, two_j) for two_j, mass in masses.items()}
    photon = hadron("photon", 0.0, 2)
    options = {
        "a": [{"n": n, "referenceMomentumMeV": 1000, "referenceMassMeV": 900} for n in (0, 1, 2)],
        "b": [{"rangeMeV": 350, "nucleonMassMeV": 938.9}, {"rangeMeV": 80, "nucleonMassMeV": 1000}],
        "c": [{"radiusFm": 1, "referenceMassMeV": 1000}, {"radiusFm": 0.25, "referenceMassMeV": 938}],
        # Without the option it is 0, as in tables from before there was one.
        "d": [{"scaleMeV": 139.57}, {"scaleMeV": 139.57, "derivativeForm": 0}, {"scaleMeV": 250, "derivativeForm": 1}],
        "e": [{}],
    }
    units = {"n": "1", "radiusFm": "fm", "derivativeForm": "1"}

    def parent(name, mass, two_j):
        made = tables.parents.add(multiplet="made", total_width=1)
        made.hadron.name, made.hadron.mass, made.hadron.two_j, made.hadron.parity = name, mass, two_j, 1
        return made

    def row(of, daughters, model, l):
        for number, chosen in enumerate(options[model]):
            made = of.rows.add(id=f"{model} {number} L{l} {daughters}", identical_factor=0.5, parts_per_billion=0, threshold=900)
            for daughter in daughters:
                made.daughters.add(name=daughter)
            # Closed rows have no amplitude at the nominal mass, only the fit's.
            is_open = not any(daughter.startswith("heavy") for daughter in daughters)
            wave = made.waves.add(two_l=2 * l, two_s=1, model=model, flavour_amplitude=-1.5)
            wave.re, wave.im = (1.25, -0.5) if is_open else (0.0, 0.0)
            for option, value in chosen.items():
                wave.options.add(name=option, value=value, unit=units.get(option, "MeV"))

    for two_j in (1, 3, 5, 7):
        baryon = parent(f"baryon {two_j}/2", 1900.0, two_j)
        for kind in (light, heavy):
            for model, l in itertools.product("abc", range(6)):
                row(baryon, [kind[1], light[0]], model, l)
            for l in ((two_j - 1) // 2, (two_j + 1) // 2):
                row(baryon, [kind[1], light[0]], "d", l)
    mesons = {0: [(0, 0, 0), (2, 2, 1)], 2: [(0, 0, 1), (2, 0, 1), (0, 2, 1), (2, 0, 0), (0, 2, 0)], 4: [(0, 0, 2)]}
    for two_j, vertices in mesons.items():
        meson = parent(f"meson {two_j // 2}", 1650.0, two_j)
        for first, second, l in vertices:
            row(meson, [light[first], light[second]], "e", l)
            row(meson, [light[first], heavy[second]], "e", l)
        if two_j == 2:
            row(meson, [photon, light[0]], "e", 1)
    # Rows with a grid: folded ones, and one without an amplitude in closed form.
    for number, (flag, is_open) in enumerate([(True, True), (True, False), (False, False)]):
        made = tables.parents[1].rows.add(id=f"grid {number}", identical_factor=1, parts_per_billion=0, threshold=1200)
        for daughter in (light if is_open else heavy)[1], light[0]:
            made.daughters.add(name=daughter)
        if flag:
            made.flags.append(decays_pb2.FLAG_FOLDED)
        wave = made.waves.add(two_l=2, two_s=1, model="d", flavour_amplitude=1, re=2, im=0)
        wave.options.add(name="scaleMeV", value=139.57, unit="MeV")
        made.grid.threshold = 1100.125
        made.grid.distances.extend([0.001, 0.1, 3, 400, 1000, 50000])
        made.grid.log_widths.extend([-20, -10, -4, 3, 3.5, 4])
        made.grid.slopes.extend([3, 2.75, 1.5, 0.9, 0.25, 0])
    # Two waves of one row, and a row without waves.
    two_waves = tables.parents[0].rows[0]
    two_waves.waves.add().CopyFrom(tables.parents[0].rows[1].waves[0])
    # Rows outside the symmetry.
    for power in (None, 0, 2, 3.5):
        made = tables.parents[2].rows.add(id=f"power {power}", parts_per_billion=0, threshold=1000.5, power=power)
        made.daughters.add(name="three pions")
        made.width.value = 12.5
    # A parent below its only threshold.
    row(parent("light meson", 600.0, 0), [heavy[0], light[0]], "a", 0)
    for made in tables.parents:
        made.rows.add(id="remainder", threshold=0 if made.hadron.mass < 900 else 100, parts_per_billion=couplet_decays.WHOLE).width.value = 7.5
    return seal(tables)


def forms_of_model_d(widths):
    """What is wrong with rows of model d by their option derivativeForm, for the widths of one reader.

    Missing is 0; 1 makes a width at m0 grow by ((m -+ m1)/(m0 -+ m1))^2 more for spin 1/2, - in an S and + in a P wave,
    and a row that is closed at m0 by ((m -+ m1)/m_s)^2; nothing for higher spins.
    """
    wrong, grown = [], 0
    for (parent, shift, row), width in widths.items():
        if not row.startswith("d 0 "):
            continue
        written_out = widths[parent, shift, row.replace("d 0", "d 1")]
        derivative = widths[parent, shift, row.replace("d 0", "d 2")]
        if written_out != width:
            wrong.append(f"{parent} {row} at {shift}: absent and 0 differ")
        # Scales of 139.57 and 250 MeV: they cancel where the amplitude is that at the nominal mass.
        is_open = "heavy" not in row
        nominal, first = 1900.0, 938.5 + 5000 * (not is_open)
        if parent == "baryon 1/2":
            mass, sign = max(nominal + float(shift), 1e-3), -1 if " L0 " in row else 1
            scale = nominal + sign * first if is_open else 250
            expected = width * ((mass + sign * first) / scale) ** 2
            grown += width > 0 and float(shift) != 0
        else:
            n = (int(parent[7]) - 1) // 2
            expected = width * (1 if is_open else (139.57 / 250) ** (2 * n))
        if abs(derivative - expected) > 1e-12 * expected:
            wrong.append(f"{parent} {row} at {shift}: {derivative} instead of {expected}")
    return wrong if grown > 10 else [*wrong, f"only {grown} widths of the derivative form off the nominal mass"]


def refusals(kind):
    """Tables with one option of model d that no reader may accept, by what is wrong with it."""
    changes = {
        "an unknown option": ("mixing", 1, "1"),
        "a known option in another unit": ("derivativeForm", 1, "MeV"),
        "derivativeForm = 0.5": ("derivativeForm", 0.5, "1"),
        "derivativeForm = nan": ("derivativeForm", float("nan"), "1"),
        "derivativeForm twice": ("derivativeForm", 1, "1"),
    }
    for what, (name, value, unit) in changes.items():
        tables = couplet_decays.tables_from_bytes(kind, "made")
        wave = next(
            wave
            for row in tables.parents[0].rows
            for wave in row.waves
            if wave.model == "d" and len(wave.options) == (2 if what.endswith("twice") else 1)
        )
        wave.options.add(name=name, value=value, unit=unit)
        yield what, seal(tables)


def refused_by(path, cpp_evaluate, dist):
    """The readers that refuse a file as damaged or too new, in words."""
    found = []
    try:
        python_widths(path)
    except couplet_decays.Damaged:
        found.append("Python")
    for language, command in [("C++", [cpp_evaluate, path]), ("TypeScript", ["node", "-e", NODE, dist, path])]:
        done = subprocess.run(command + SHIFTS, capture_output=True, text=True)
        if done.returncode != 0 and "width model d" in done.stderr:
            found.append(language)
    return found


def seal(tables):
    """A message as the bytes of a sealed file."""
    tables.ClearField("sha256")
    body = tables.SerializeToString()
    return body + couplet_decays.SEAL_HEAD + hashlib.sha256(body).digest()


def main(table, cpp_evaluate, dist):
    passed = failed = 0
    with tempfile.NamedTemporaryFile(suffix=".decays.pb") as made:
        made.write(every_model())
        made.flush()
        for what, path in [("the given table", table), ("every width model", made.name)]:
            ours = python_widths(path)
            positive = sum(width > 0 for width in ours.values())
            for language, command in [("C++", [cpp_evaluate, path]), ("TypeScript", ["node", "-e", NODE, dist, path])]:
                largest = difference(ours, program_widths(command + SHIFTS))
                ok = largest <= TOLERANCE and len(ours) / 4 < positive < len(ours)
                passed, failed = passed + ok, failed + (not ok)
                print(
                    f"{'ok' if ok else 'FAILED'}  Python and {language} agree on {len(ours)} widths of {what}, "
                    f"{positive} of them positive: largest relative difference {largest:.1e}"
                )
    wrong = forms_of_model_d(ours)
    passed, failed = passed + (not wrong), failed + bool(wrong)
    print(f"{'FAILED' if wrong else 'ok'}  model d: without derivativeForm it is 0, with 1 its width grows by another law")
    for line in wrong[:5]:
        print("        " + line)
    for what, content in refusals(every_model()):
        with tempfile.NamedTemporaryFile(suffix=".decays.pb") as made:
            made.write(content)
            made.flush()
            found = refused_by(made.name, cpp_evaluate, dist)
        ok = found == ["Python", "C++", "TypeScript"]
        passed, failed = passed + ok, failed + (not ok)
        print(f"{'ok' if ok else 'FAILED'}  {what} of model d is refused by {', '.join(found)}")
    key = max(ours, key=ours.get)
    ok = difference(ours, {**ours, key: ours[key] * (1 + 1e-11)}) > TOLERANCE
    passed, failed = passed + ok, failed + (not ok)
    print(f"{'ok' if ok else 'FAILED'}  a difference of 1e-11 in one width is seen")
    print(f"{passed} passed, {failed} failed")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
