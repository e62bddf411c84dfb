"""Statistical test of the draws of couplet_decays.py from a fresh table, and of what it refuses.

For each parent the counts of N draws are compared with the fractions by Pearson's chi-square (rows expecting under 10
draws are put together). The whole test fails if any parent's probability is below FALSE_ALARM / (number of parents), so
that a correct reader fails it with a chance of at most FALSE_ALARM; the seed is fixed, so a run can be repeated.
The test also proves that it can fail: draws compared with shifted fractions must be refused.
"""

import bisect
import collections
import hashlib
import math
import random
import sys

import couplet_decays

FALSE_ALARM = 1e-6
DRAWS = 200_000
SEED = 20261201


def chi_square_tail(chi2, ndf):
    """Q(ndf/2, chi2/2), by the recurrence in ndf from its closed forms for ndf 1 and 2."""
    x = chi2 / 2
    q, a = (math.erfc(math.sqrt(x)), 0.5) if ndf % 2 else (math.exp(-x), 1.0)
    while a < ndf / 2:
        q += math.exp(a * math.log(x) - x - math.lgamma(a + 1)) if x > 0 else 0.0
        a += 1
    return q


def probability(counts, fractions, draws):
    rare_count = rare_expected = chi2 = 0.0
    cells = 0
    for key, fraction in fractions.items():
        expected = fraction * draws
        if expected < 10:
            rare_count += counts[key]
            rare_expected += expected
        else:
            chi2 += (counts[key] - expected) ** 2 / expected
            cells += 1
    if rare_expected >= 10:
        chi2 += (rare_count - rare_expected) ** 2 / rare_expected
        cells += 1
    elif rare_count > 60:
        return 0.0
    return chi_square_tail(chi2, cells - 1) if cells > 1 else 1.0


def shifted(fractions):
    """The two largest fractions moved towards each other by a fiftieth of the smaller: a wrong table."""
    first, second = sorted(fractions, key=fractions.get)[-2:]
    step = fractions[first] / 50
    return {**fractions, first: fractions[first] + step, second: fractions[second] - step}


def main(path):
    # Known value: M. Abramowitz, I.A. Stegun, Handbook of Mathematical Functions (1964), Table 26.7; provenance: memory.
    assert abs(chi_square_tail(11.0705, 5) - 0.05) < 1e-5 and abs(chi_square_tail(18.3070, 10) - 0.05) < 1e-5
    tables = couplet_decays.read_tables(path)
    rng = random.Random(SEED)
    limit = FALSE_ALARM / len(tables.parents)
    passed = failed = powerful = 0
    for parent in tables.parents:
        decayer = couplet_decays.Decayer(parent)
        counts = collections.Counter(decayer.draw(rng).id for _ in range(DRAWS))
        fractions = {row.id: row.parts_per_billion / couplet_decays.WHOLE for row in parent.rows}
        chance = probability(counts, fractions, DRAWS)
        ok = chance >= limit
        passed, failed = passed + ok, failed + (not ok)
        print(f"{'ok' if ok else 'FAILED'}  {parent.hadron.name}: probability {chance:.3g} over {DRAWS} draws")
        open_rows = sum(fraction > 0.05 for fraction in fractions.values())
        if open_rows >= 2 and probability(counts, shifted(fractions), DRAWS) < limit:
            powerful += 1
    ok = powerful > 0
    print(f"{'ok' if ok else 'FAILED'}  shifted fractions are refused for {powerful} parents")
    passed, failed = passed + ok, failed + (not ok)
    for ok, what in mass_checks(tables, rng):
        print(f"{'ok' if ok else 'FAILED'}  {what}")
        passed, failed = passed + ok, failed + (not ok)
    for ok, what in damage_checks(path):
        print(f"{'ok' if ok else 'FAILED'}  {what}")
        passed, failed = passed + ok, failed + (not ok)
    print(f"python draws: {passed} passed, {failed} failed (false-alarm rate {FALSE_ALARM:g}, seed {SEED})")
    return 1 if failed else 0


def mass_checks(tables, rng):
    """Masses drawn from line shapes, counted between the points of the shape."""
    shapes = [parent.hadron.line_shape for parent in tables.parents if parent.hadron.HasField("line_shape")]
    follow = powerful = 0
    for shape in shapes:
        points = list(shape.distances)[:-1]
        chances = dict(enumerate(b - a for a, b in zip([0, *shape.cumulative], shape.cumulative)))
        masses = [couplet_decays.draw_mass(shape, rng) for _ in range(DRAWS // 4)]
        inside = all(shape.low <= mass <= shape.high * (1 + 1e-7) for mass in masses)
        counts = collections.Counter(bisect.bisect_left(points, mass - shape.low) for mass in masses)
        follow += inside and probability(counts, chances, len(masses)) >= FALSE_ALARM / len(shapes)
        moved = {k: chances[(k + 1) % len(chances)] for k in chances}
        powerful += probability(counts, moved, len(masses)) < FALSE_ALARM / len(shapes)
    yield follow == len(shapes) > 0, f"masses drawn for {len(shapes)} parents follow their line shapes"
    yield powerful == len(shapes), "line shapes moved by a point are refused"


def damage_checks(path):
    """Every changed byte and every truncation of the file, and what else is wrong, is refused with the right words."""
    data = open(path, "rb").read()
    head = 2 + len(couplet_decays.KIND)

    def refusal(content):
        try:
            couplet_decays.tables_from_bytes(bytes(content), "f.pb")
        except (couplet_decays.Damaged, couplet_decays.NotOurs) as error:
            return type(error), str(error)
        return None, ""

    def expected(at):
        return couplet_decays.NotOurs if at < head else couplet_decays.Damaged

    def wrong_changes(whole, changes_at):
        changed = bytearray(whole)
        wrong = 0
        for at, byte in enumerate(whole):
            for change in changes_at(at):
                changed[at] = byte ^ change
                wrong += refusal(changed)[0] is not expected(at)
            changed[at] = byte
        return wrong

    def wrong_truncations(whole):
        return sum(refusal(whole[:length])[0] is not expected(length) for length in range(len(whole)))

    tiny = tiny_table(data)
    accepted = refusal(tiny)[0] is None
    wrong = wrong_changes(tiny, lambda at: range(1, 256))
    yield accepted and wrong == 0, f"every change of one byte of a table of {len(tiny)} bytes is refused"
    wrong = wrong_truncations(tiny) + (refusal(tiny + b"\0")[0] is not couplet_decays.Damaged)
    yield wrong == 0, "every truncation of it, and a byte more, is refused"
    wrong = wrong_changes(data, lambda at: [1 << (at % 8)])
    yield wrong == 0, f"a change of any of the {len(data)} bytes of the given table is refused"
    yield wrong_truncations(data) == 0, "every truncation of it is refused"

    foreign = "f.pb: expected decay tables written by Couplet, got something else (5 bytes). "
    foreign += "Give a .decays.pb file that `couplet tables` wrote."
    yield refusal(b"hello") == (couplet_decays.NotOurs, foreign), "a foreign file is refused in words"
    cut = "f.pb: the file is damaged: its digest does not match its content (100 bytes). "
    cut += "Nothing was read; get a fresh copy or write the table again."
    yield refusal(data[:100]) == (couplet_decays.Damaged, cut), "a cut file is refused in words"
    for ok, what in content_checks(data, refusal):
        yield ok, what


def sealed(body):
    """The body with the digest of its bytes as the last field."""
    return body + couplet_decays.SEAL_HEAD + hashlib.sha256(body).digest()


def tiny_table(data):
    """One row of a table, so small that every byte of it can take every value."""
    whole = couplet_decays.decays_pb2.DecayTables.FromString(data)
    tiny = couplet_decays.decays_pb2.DecayTables(kind=whole.kind)
    tiny.header.schema_minor = whole.header.schema_minor
    tiny.header.convention = whole.header.convention
    parent = tiny.parents.add(total_width=whole.parents[0].total_width)
    parent.hadron.name = whole.parents[0].hadron.name
    parent.hadron.mass = whole.parents[0].hadron.mass
    row = parent.rows.add()
    row.CopyFrom(whole.parents[0].rows[0])
    row.parts_per_billion = couplet_decays.WHOLE
    for field in ("grid", "measurement", "sources"):
        row.ClearField(field)
    return sealed(tiny.SerializeToString())


def content_checks(data, refusal):
    """Tables with a right digest and a wrong content."""

    def remade(change):
        tables = couplet_decays.decays_pb2.DecayTables.FromString(data)
        tables.ClearField("sha256")
        change(tables)
        return sealed(tables.SerializeToString())

    def newer(tables):
        tables.header.schema_minor = couplet_decays.SCHEMA_MINOR + 1

    def other_convention(tables):
        tables.header.convention = "left-handed"

    def a_part_more(tables):
        tables.parents[0].rows[0].parts_per_billion += 1

    known, new = couplet_decays.SCHEMA_MINOR, couplet_decays.SCHEMA_MINOR + 1
    name = couplet_decays.tables_from_bytes(data, "f.pb").parents[0].hadron.name
    written_otherwise = " The file was written by something else; write it again."
    cases = [
        (
            remade(newer),
            f"expected schema version 1.{known} or older, got 1.{new}. Read it with a newer reader.",
            "a newer schema",
        ),
        (
            remade(other_convention),
            'expected phase convention deswart-v1, got "left-handed". Read it with a newer reader.',
            "an unknown convention",
        ),
        (
            remade(a_part_more),
            f"{name}: expected rows that add up to 1000000000 parts, got 1000000001." + written_otherwise,
            "a wrong sum",
        ),
        (
            sealed(data[: -couplet_decays.SEAL_LENGTH] + b"\x12\x7f"),
            "expected a message couplet.v1.DecayTables, got bytes that are none." + written_otherwise,
            "a length beyond the end",
        ),
    ]
    for content, message, what in cases:
        yield refusal(content) == (couplet_decays.Damaged, "f.pb: " + message), f"{what} is refused in words"


if __name__ == "__main__":
    sys.exit(main(sys.argv[1]))
