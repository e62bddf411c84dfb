"""Tests of couplet_sidecar.py against a running sidecar: python3 test_sidecar.py ADDRESS SHA256.

Draws are compared with the table's fractions by Pearson's chi-square: false-alarm rate 1e-6 in all, fixed seed, and
shifted fractions have to be refused, so that the test can fail. Prints `ok  name` lines and, last, the counts.
"""

import math
import sys

import grpc

import couplet_sidecar
from test_python_draws import chi_square_tail

FALSE_ALARM = 1e-6
DRAWS = 100_000
SEED = 20261201
PARENTS = ["Sigma(1385)0", "Delta(1232)+", "K*(892)+"]
results = []


def check(name, ok):
    print(f"{'ok' if ok else 'FAILED'}  {name}")
    results.append(bool(ok))


def probability(rows, fractions):
    expected = [fraction * len(rows) for fraction in fractions]
    counts = [rows.count(k) for k in range(len(fractions))]
    if any(count and not wanted for count, wanted in zip(counts, expected)):
        return 0.0
    cells = [(count, wanted) for count, wanted in zip(counts, expected) if wanted]
    return chi_square_tail(sum((c - e) ** 2 / e for c, e in cells), len(cells) - 1)


def shifted(fractions):
    """The two largest fractions moved towards each other by a fifth of the smaller: a wrong table."""
    second, first = sorted(range(len(fractions)), key=fractions.__getitem__)[-2:]
    step = fractions[second] / 5
    return [f - step if k == first else f + step if k == second else f for k, f in enumerate(fractions)]


def refused(call):
    try:
        call()
    except (grpc.RpcError, couplet_sidecar.WrongTable) as error:
        return error
    return None


def main(address, sha256):
    with couplet_sidecar.Sidecar(address, sha256) as sidecar:
        check("convention and digest are checked", sidecar.table.sha256.hex() == sha256)
        check(
            "a table that is not served is refused",
            isinstance(refused(lambda: couplet_sidecar.Sidecar(address, "ab" * 32)), couplet_sidecar.WrongTable),
        )
        limit = FALSE_ALARM / (2 * len(PARENTS))
        for parent in PARENTS:
            table = sidecar.decay_table(parent).parent
            fractions = [row.parts_per_billion / 1e9 for row in table.rows]
            rows = sidecar.draw(parent, SEED, 0, DRAWS)
            chance = probability(rows, fractions)
            check(f"{parent}: draws at the nominal mass (probability {chance:.3g})", chance >= limit)
            check(f"{parent}: shifted fractions are refused", probability(rows, shifted(fractions)) < limit)
            check(f"{parent}: the same seed draws the same", sidecar.draw(parent, SEED, 0, 1000) == rows[:1000])
            mass = table.hadron.mass + 20
            off = list(sidecar.widths(parent, mass).fractions)
            rows = [row for batch in range(50) for row in sidecar.draw_at(parent, SEED, batch, [mass] * 1000)]
            chance = probability(rows, off)
            check(f"{parent}: draws 20 MeV above it (probability {chance:.3g})", chance >= limit)
        masses = [[1300 + 10 * k + j for j in range(10)] for k in range(20)]
        streamed = list(sidecar.stream_widths("Sigma(1385)0", masses))
        single = [sidecar.widths("Sigma(1385)0", batch[3]) for batch in masses]
        agree = all(
            totals[3] == one.total_width and fractions[3] == list(one.fractions)
            for (totals, fractions), one in zip(streamed, single)
        )
        check("a stream of 20 batches gives what single queries give", len(streamed) == 20 and agree)
        check("fractions add up to 1", all(math.isclose(sum(f), 1) for _, fs in streamed for f in fs))
        error = refused(lambda: sidecar.widths("nobody", 1))
        check("an unknown parent is INVALID_ARGUMENT", error.code() == grpc.StatusCode.INVALID_ARGUMENT)
        error = refused(lambda: sidecar.draw("Sigma(1385)0", 1, 0, 10**6))
        check("too many draws are RESOURCE_EXHAUSTED", error.code() == grpc.StatusCode.RESOURCE_EXHAUSTED)
    print(f"{sum(results)} passed, {len(results) - sum(results)} failed")
    return 0 if all(results) else 1


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
