"""Statistical test of the draws of couplet_decays.py from a fresh table.

For each parent the counts of N draws are compared with the fractions by Pearson's chi-square (rows expecting under 10
draws are put together). The whole test fails if any parent's probability is below FALSE_ALARM / (number of parents), so
that a correct reader fails it with a chance of at most FALSE_ALARM; the seed is fixed, so a run can be repeated.
The test also proves that it can fail: draws compared with shifted fractions must be refused.
"""

import collections
import math
import random
import sys
import tempfile

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
    for ok, what in damage_checks(path):
        print(f"{'ok' if ok else 'FAILED'}  {what}")
        passed, failed = passed + ok, failed + (not ok)
    print(f"python draws: {passed} passed, {failed} failed (false-alarm rate {FALSE_ALARM:g}, seed {SEED})")
    return 1 if failed else 0


def damage_checks(path):
    """A table with one byte changed, a cut one and a foreign file are each refused with the right exception."""
    data = open(path, "rb").read()
    flipped = bytearray(data)
    flipped[len(data) // 2] ^= 1
    cases = [
        (bytes(flipped), couplet_decays.Damaged, "a changed byte is refused"),
        (data[: len(data) // 2], couplet_decays.Damaged, "a cut file is refused"),
        (b"hello", couplet_decays.NotOurs, "a foreign file is refused"),
    ]
    for content, expected, what in cases:
        with tempfile.NamedTemporaryFile() as file:
            file.write(content)
            file.flush()
            try:
                couplet_decays.read_tables(file.name)
                yield False, what
            except (couplet_decays.Damaged, couplet_decays.NotOurs) as error:
                yield type(error) is expected, what


if __name__ == "__main__":
    sys.exit(main(sys.argv[1]))
