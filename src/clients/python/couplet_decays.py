"""Reads decay tables written by Couplet and draws decays from them.

Needs Debian's python3-protobuf and the classes that protoc makes from the .proto files:

    protoc -I proto --python_out=OUT proto/couplet/v1/exact.proto proto/couplet/v1/decays.proto
    PYTHONPATH=OUT /usr/bin/python3 couplet_decays.py FILE --parent 'N(1675)+' --draws 5

Widths at other masses than the nominal one are in couplet_widths.py, beside this file.
"""

import argparse
import bisect
import collections
import hashlib
import itertools
import math
import random
import sys

from google.protobuf.message import DecodeError

from couplet.v1 import decays_pb2
from couplet_widths import Damaged, ParentWidths

__all__ = [
    "Damaged",
    "Decayer",
    "NotOurs",
    "ParentWidths",
    "draw_mass",
    "parent_named",
    "parent_numbered",
    "read_tables",
    "tables_from_bytes",
]

KIND = b"couplet.v1.DecayTables"
# Field 1000 with a length of 32: the digest is the last field of the file.
SEAL_HEAD = b"\xc2\x3e\x20"
SEAL_LENGTH = len(SEAL_HEAD) + 32
# The newest schema this reader knows, and the convention it can pass on.
SCHEMA_MINOR = 0
CONVENTION = "deswart-v1"
WHOLE = 10**9


class NotOurs(Exception):
    """The file is not a decay table of Couplet at all."""


def read_tables(path):
    """The DecayTables message in a file; raises NotOurs or Damaged, and OSError if the file cannot be read."""
    with open(path, "rb") as file:
        return tables_from_bytes(file.read(), path)


def tables_from_bytes(data, name):
    """The DecayTables message in a file's bytes, after checking digest, version, convention and sums.

    name: the file's, for messages.
    """
    head = bytes([0x0A, len(KIND)]) + KIND
    if not data.startswith(head):
        raise NotOurs(
            f"{name}: expected decay tables written by Couplet, got something else ({len(data)} bytes). "
            "Give a .decays.pb file that `couplet tables` wrote."
        )
    # The digest is of the bytes as read; encoding the message again could give other bytes.
    body, seal = data[:-SEAL_LENGTH], data[-SEAL_LENGTH:]
    if seal != SEAL_HEAD + hashlib.sha256(body).digest():
        raise Damaged(
            f"{name}: the file is damaged: its digest does not match its content ({len(data)} bytes). "
            "Nothing was read; get a fresh copy or write the table again."
        )
    written_otherwise = "The file was written by something else; write it again."
    try:
        tables = decays_pb2.DecayTables.FromString(data)
    except DecodeError:
        tables = None
    if tables is None or tables.kind.encode() != KIND:
        raise Damaged(f"{name}: expected a message {KIND.decode()}, got bytes that are none. {written_otherwise}")
    header = tables.header
    minor = f"1.{header.schema_minor}" if header.HasField("schema_minor") else "none"
    if minor == "none" or header.schema_minor > SCHEMA_MINOR:
        raise Damaged(
            f"{name}: expected schema version 1.{SCHEMA_MINOR} or older, got {minor}. Read it with a newer reader."
        )
    if header.convention != CONVENTION:
        raise Damaged(
            f'{name}: expected phase convention {CONVENTION}, got "{header.convention}". Read it with a newer reader.'
        )
    for parent in tables.parents:
        total = sum(row.parts_per_billion for row in parent.rows)
        if total != WHOLE:
            raise Damaged(
                f"{name}: {parent.hadron.name}: expected rows that add up to {WHOLE} parts, got {total}. "
                + written_otherwise
            )
    return tables


class Decayer:
    """Draws decay channels of one parent with the fractions of its rows."""

    def __init__(self, parent):
        self.rows = list(parent.rows)
        self._cumulative = list(itertools.accumulate(row.parts_per_billion for row in self.rows))

    def draw(self, rng):
        """A row, drawn with a random.Random; a row without daughters is the remainder."""
        return self.rows[bisect.bisect_right(self._cumulative, rng.randrange(WHOLE))]


def draw_mass(shape, rng):
    """A mass in MeV from a parent's line_shape, drawn with a random.Random; a parent without one has its nominal mass."""
    check_points(shape)
    return mass_at(shape, rng.random())


def check_points(shape):
    """Raises Damaged for a line shape that cannot be drawn from."""
    if not (len(shape.distances) >= 2 and len(shape.distances) == len(shape.cumulative) and shape.power > 0):
        raise Damaged("line shape: expected distances and chances of two points or more, got others")


def mass_at(shape, u):
    """The mass in MeV up to which a line shape that has been checked has the chance u."""
    x, chance = shape.distances, shape.cumulative
    if u < chance[0]:
        return shape.low + x[0] * (u / chance[0]) ** (1 / shape.power)
    k = bisect.bisect_right(chance, u, 1, len(x) - 1) - 1
    return shape.low + x[k] * (x[k + 1] / x[k]) ** (math.log(u / chance[k]) / math.log(chance[k + 1] / chance[k]))


def chance_up_to(shape, mass):
    """The inverse: the chance of a mass up to this one; 0 below the shape and 1 above it."""
    x, chance = shape.distances, shape.cumulative
    distance = mass - shape.low
    if not distance > 0:
        return 0.0
    if distance >= x[-1]:
        return 1.0
    if distance < x[0]:
        return chance[0] * (distance / x[0]) ** shape.power
    k = bisect.bisect_right(x, distance, 1, len(x) - 1) - 1
    return chance[k] * (chance[k + 1] / chance[k]) ** (math.log(distance / x[k]) / math.log(x[k + 1] / x[k]))


def parent_named(tables, name):
    """The parent of a name; says what there is if there is none."""
    for parent in tables.parents:
        if parent.hadron.name == name:
            return parent
    raise NotOurs(f'no parent "{name}" in this table; there are: ' + ", ".join(p.hadron.name for p in tables.parents))


def parent_numbered(tables, number):
    """The parent of a Monte Carlo number, or else the one that has it as an alias."""
    for parent in tables.parents:
        if parent.hadron.HasField("mc_number") and parent.hadron.mc_number == number:
            return parent
    for parent in tables.parents:
        if number in parent.hadron.mc_aliases:
            return parent
    raise NotOurs(f"no parent with the Monte Carlo number {number} in this table; ask by name")


def main(arguments=None):
    parser = argparse.ArgumentParser(description="Draw decays from a table file written by Couplet.")
    parser.add_argument("file")
    parser.add_argument("--parent", help="only this hadron; all of them without it")
    parser.add_argument("--draws", type=int, default=1000, help="decays to draw for each parent (default 1000)")
    parser.add_argument("--mass", type=float, help="also print widths and fractions at this mass of the parent, in MeV")
    parser.add_argument("--seed", type=int, default=1, help="seed of the random numbers (default 1)")
    options = parser.parse_args(arguments)
    try:
        tables = read_tables(options.file)
        parents = [parent_named(tables, options.parent)] if options.parent else tables.parents
        rng = random.Random(options.seed)
        for parent in parents:
            show_draws(parent, options.draws, rng)
            if options.mass is not None:
                show_widths(tables, parent, options.mass)
    except (OSError, NotOurs, ValueError) as error:
        print(error, file=sys.stderr)
        return 2
    except Damaged as error:
        print(error, file=sys.stderr)
        return 3
    return 0


def show_draws(parent, draws, rng):
    """Prints how often each row is drawn."""
    decayer = Decayer(parent)
    counts = collections.Counter(decayer.draw(rng).id for _ in range(draws))
    print(f"{parent.hadron.name}: {draws} decays")
    for row in parent.rows:
        if row.parts_per_billion:
            print(f"  {counts[row.id]:>8}  {row.id}  (expected {draws * row.parts_per_billion / WHOLE:.1f})")


def show_widths(tables, parent, mass):
    """Prints widths and fractions at a mass."""
    at = ParentWidths(tables, parent)
    print(f"{parent.hadron.name} at {mass:g} MeV: total width {at.total(mass):.5g} MeV")
    for row, width, fraction in zip(parent.rows, at.widths(mass), at.fractions(mass)):
        print(f"  {width:>8.4g} MeV  {fraction:.4f}  {row.id}")


if __name__ == "__main__":
    sys.exit(main())
