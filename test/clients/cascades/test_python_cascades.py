"""Whole cascades of couplet_cascades.py: masses and rows against integrated densities, conservation, refusals.

Usage: test_python_cascades.py DEMO MESONS OCTET N1520   (the tables of the demo and of three studies in test/chain/studies).
PYTHONPATH as for test_python_draws.py, and the folder of that file. Seeds are fixed; a right reader fails a check with a
chance of FALSE_ALARM.
"""

import bisect
import collections
import math
import random
import sys

import couplet_cascades
import couplet_decays
from test_python_draws import FALSE_ALARM, probability

SEED = 20261202
DRAWS = 20_000
CELLS = 12
# Steps of the integration in each cell.
STEPS = 500


def momentum(m, a, b):
    total, difference = m * m - (a + b) ** 2, m * m - (a - b) ** 2
    return math.sqrt(total * difference) / (2 * m) if total > 0 else 0.0


def cumulative(shape, mass):
    """The chance of a mass up to this one, read off the points by the rule of the schema."""
    x, points, chances = mass - shape.low, list(shape.distances), list(shape.cumulative)
    if x <= 0:
        return 0.0
    if x <= points[0]:
        return chances[0] * (x / points[0]) ** shape.power
    for x0, x1, f0, f1 in zip(points, points[1:], chances, chances[1:]):
        if x <= x1:
            return math.exp(math.log(f0) + math.log(x / x0) / math.log(x1 / x0) * math.log(f1 / f0))
    return 1.0


def mass_checks(tables, parent_name, row_id, mass, stable, right, wrong):
    """Masses of a row's first daughter at one mass of the parent, against rho K."""
    alone = type(tables)()
    alone.CopyFrom(tables)
    parent = couplet_decays.parent_named(alone, parent_name)
    row = next(row for row in parent.rows if row.id == row_id)
    del parent.rows[:]
    parent.rows.append(row)
    hadrons = [*alone.externals, *(each.hadron for each in alone.parents)]
    shape = next(hadron.line_shape for hadron in hadrons if hadron.name == row.daughters[0].name)
    low, high = shape.low, min(shape.high, mass - stable)
    edges = [low + (high - low) * k / CELLS for k in range(CELLS + 1)]
    fine = [low + (high - low) * k / (CELLS * STEPS) for k in range(CELLS * STEPS + 1)]
    chances = [cumulative(shape, each) for each in fine]

    def expected(k_of):
        cells = collections.defaultdict(float)
        for n in range(CELLS * STEPS):
            cells[n // STEPS] += (chances[n + 1] - chances[n]) * k_of((fine[n] + fine[n + 1]) / 2)
        total = sum(cells.values())
        return {cell: value / total for cell, value in cells.items()}

    cascades, rng = couplet_cascades.Cascades(alone), random.Random(SEED)
    counts = collections.Counter(
        bisect.bisect_right(edges, cascades.draw(parent_name, rng, mass)[1].mass, 1, CELLS) - 1 for _ in range(DRAWS)
    )
    chance = probability(counts, expected(right), DRAWS)
    yield chance >= FALSE_ALARM, f"{row_id}: the mass follows rho K (probability {chance:.2g})"
    yield probability(counts, expected(wrong), DRAWS) < FALSE_ALARM, f"{row_id}: another K is refused"


def density_checks(mesons, n1520):
    delta_pi = couplet_decays.parent_named(n1520, "N(1520)+").rows[0]
    strengths = [wave.flavour_amplitude**2 for wave in delta_pi.waves]

    def waves(s, d):
        def k(w):
            q = momentum(1515, w, 139.57039)
            z = (q / 197.3269804) ** 2
            return s * q + d * q * z * z / (9 + 3 * z + z * z)

        return k

    right, wrong = waves(*strengths), waves(1, 0)
    yield from mass_checks(n1520, "N(1520)+", "N(1520)+ -> Delta(1232)++ pi-", 1515, 139.57039, right, wrong)
    left = 1318.2 - 134.9768
    right, wrong = (lambda w: (left - w) ** 2.5), (lambda w: (left - w) ** 1.5)
    yield from mass_checks(mesons, "a2(1320)+", "a2(1320)+ -> rho(770)+ pi0", 1318.2, 134.9768, right, wrong)


def row_checks(name, tables):
    """Mass first, then the row at that mass: rows come out with their integrated fractions."""
    cascades, rng = couplet_cascades.Cascades(tables), random.Random(SEED)
    follow = nominal_refused = 0
    draws = DRAWS // 4
    for parent in tables.parents:
        nominal = {row.id: row.parts_per_billion / couplet_decays.WHOLE for row in parent.rows}
        integrated = {
            row.id: row.integrated_fraction if row.HasField("integrated_fraction") else nominal[row.id] for row in parent.rows
        }
        counts = collections.Counter(cascades.draw(parent.hadron.name, rng)[0].row.id for _ in range(draws))
        follow += probability(counts, integrated, draws) >= FALSE_ALARM / len(tables.parents)
        nominal_refused += probability(counts, nominal, draws) < FALSE_ALARM
    yield follow == len(tables.parents), f"{name}: rows of {follow} parents have their integrated fractions"
    yield nominal_refused > 0, f"{name}: the nominal fractions are refused for {nominal_refused} of them"


def product_checks(mesons):
    """Narrow intermediate particles: the chance of a chain is the product of the fractions."""
    cascades, rng = couplet_cascades.Cascades(mesons), random.Random(SEED)
    pi0 = couplet_decays.parent_named(mesons, "pi0")
    expected = {}
    for row in couplet_decays.parent_named(mesons, "omega(782)").rows:
        if any(daughter.name == "pi0" for daughter in row.daughters):
            for second in pi0.rows:
                fraction = second.parts_per_billion / couplet_decays.WHOLE
                expected[row.id, second.id] = row.integrated_fraction * fraction
        else:
            expected[row.id, None] = row.integrated_fraction
    counts = collections.Counter()
    for _ in range(DRAWS):
        cascade = cascades.draw("omega(782)", rng)
        second = [cascade[k].row.id for k in cascade[0].daughters if cascade[k].name == "pi0"]
        counts[cascade[0].row.id, second[0] if second else None] += 1
    chance = probability(counts, expected, DRAWS)
    yield chance >= FALSE_ALARM, f"omega(782) and its pi0 decay with products of fractions (probability {chance:.2g})"
    twice = {key: value * (2 if key[1] == pi0.rows[0].id else 1) for key, value in expected.items()}
    yield probability(counts, twice, DRAWS) < FALSE_ALARM, "other products are refused"


def wrong_in(charges, cascades, cascade):
    """What does not hold of a cascade, of what must hold of every one; nothing if all holds."""
    total = [0, 0]
    for place, particle in enumerate(cascade):
        if not (math.isfinite(particle.mass) and particle.mass >= 0):
            return f"mass of {particle.name}"
        daughters = [cascade[k] for k in particle.daughters]
        if any(daughter.mother != place for daughter in daughters):
            return f"mother of the daughters of {particle.name}"
        if (particle.end == "decayed") != bool(daughters):
            return f"end of {particle.name}"
        if daughters and not sum(daughter.mass for daughter in daughters) < particle.mass:
            return f"sum of masses of {particle.row.id}"
        if not daughters:
            total = [a + b for a, b in zip(total, charges[particle.name])]
    return "" if total == list(charges[cascade[0].name]) else f"charges of {cascade[0].name}"


def conservation_checks(name, tables):
    cascades, rng = couplet_cascades.Cascades(tables), random.Random(SEED)
    charges = {}
    hadrons = [*tables.externals, *(parent.hadron for parent in tables.parents)]
    for hadron in hadrons:
        charges[cascades.antiparticle(hadron.name)] = [-hadron.charge, -hadron.baryon_number]
    for hadron in hadrons:
        charges[hadron.name] = [hadron.charge, hadron.baryon_number]
    drawn, wrong = 0, set()
    for parent in tables.parents:
        for start in (parent.hadron.name, cascades.antiparticle(parent.hadron.name)):
            for _ in range(300):
                wrong.add(wrong_in(charges, cascades, cascades.draw(start, rng)))
                drawn += 1
    what = f"{name}: {drawn} cascades of particles and antiparticles conserve charge and baryon number"
    yield wrong == {""}, what + "".join(sorted(wrong))


def refusal_checks(demo):
    cascades, rng = couplet_cascades.Cascades(demo), random.Random(SEED)

    def refusal(action):
        try:
            action()
        except (couplet_decays.NotOurs, couplet_decays.Damaged, ValueError) as error:
            return type(error), str(error)
        return None

    names = ", ".join(parent.hadron.name for parent in demo.parents)
    got = refusal(lambda: cascades.draw("p", rng))
    yield got == (couplet_decays.NotOurs, f'no rows for "p" in this table; there are: {names}'), "no rows: refused in words"
    for mass in (0, -1, math.nan, math.inf):
        got = refusal(lambda: cascades.draw("pi0", rng, mass))
        yield got == (ValueError, "mass: expected a finite number > 0 in MeV"), f"a mass of {mass} is refused"
    light = cascades.draw("N(1577)+", rng, 500)
    yield (len(light), light[0].end, light[0].mass) == (1, "closed", 500), "a mass at which all is closed ends the branch"
    single = type(demo)()
    single.CopyFrom(demo)
    del single.parents[0].rows[0].daughters[1:]
    del single.parents[0].rows[0].waves[:]
    got = refusal(lambda: couplet_cascades.Cascades(single))
    expected = f"{demo.parents[0].rows[0].id}: expected two daughters or more, got 1"
    yield got == (couplet_decays.Damaged, expected), "a single daughter is refused"


def checks(paths):
    demo, mesons, octet, n1520 = map(couplet_decays.read_tables, paths)
    yield from density_checks(mesons, n1520)
    yield from product_checks(mesons)
    for name, tables in [("mesons", mesons), ("octet", octet)]:
        yield from row_checks(name, tables)
    for name, tables in [("demo", demo), ("mesons", mesons), ("octet", octet)]:
        yield from conservation_checks(name, tables)
    yield from refusal_checks(demo)


def main(*paths):
    results = []
    for ok, what in checks(paths):
        print(f"{'ok' if ok else 'FAILED'}  {what}")
        results.append(bool(ok))
    print(f"{sum(results)} passed, {len(results) - sum(results)} failed")
    return 0 if all(results) else 1


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
