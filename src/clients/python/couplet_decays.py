"""Reads decay tables written by Couplet and draws decays from them.

Needs Debian's python3-protobuf and the classes that protoc makes from the .proto files:

    protoc -I proto --python_out=OUT proto/couplet/v1/exact.proto proto/couplet/v1/decays.proto
    PYTHONPATH=OUT /usr/bin/python3 couplet_decays.py FILE --parent 'N(1675)+' --draws 5
"""

import argparse
import bisect
import collections
import hashlib
import itertools
import random
import sys

from couplet.v1 import decays_pb2

KIND = b"couplet.v1.DecayTables"
# Field 1000 with a length of 32: the digest is the last field of the file.
SEAL_HEAD = b"\xc2\x3e\x20"
SEAL_LENGTH = len(SEAL_HEAD) + 32
# The newest schema this reader knows, and the conventions it can pass on.
SCHEMA_MINOR = 0
CONVENTIONS = {"deswart-v1"}
WHOLE = 10**9


class NotOurs(Exception):
    """The file is not a decay table of Couplet at all."""


class Damaged(Exception):
    """The file is one of ours, and damaged or too new for this reader."""


def read_tables(path):
    """The DecayTables message in a file, after checking digest, version, convention and sums."""
    with open(path, "rb") as file:
        data = file.read()
    head = bytes([0x0A, len(KIND)]) + KIND
    if not data.startswith(head):
        raise NotOurs(f"{path}: expected decay tables written by Couplet, got something else ({len(data)} bytes)")
    # The digest is of the bytes as read; encoding the message again could give other bytes.
    body, seal = data[:-SEAL_LENGTH], data[-SEAL_LENGTH:]
    if seal != SEAL_HEAD + hashlib.sha256(body).digest():
        raise Damaged(f"{path}: the file is damaged: its digest does not match its content; get a fresh copy")
    tables = decays_pb2.DecayTables.FromString(data)
    if tables.header.schema_minor > SCHEMA_MINOR:
        raise Damaged(f"{path}: schema 1.{tables.header.schema_minor} is newer than this reader (1.{SCHEMA_MINOR})")
    if tables.header.convention not in CONVENTIONS:
        raise Damaged(f"{path}: unknown phase convention {tables.header.convention!r}")
    for parent in tables.parents:
        total = sum(row.parts_per_billion for row in parent.rows)
        if total != WHOLE:
            raise Damaged(f"{path}: {parent.hadron.name}: rows add up to {total} parts, not {WHOLE}")
    return tables


class Decayer:
    """Draws decay channels of one parent with the fractions of its rows."""

    def __init__(self, parent):
        self.rows = list(parent.rows)
        self._cumulative = list(itertools.accumulate(row.parts_per_billion for row in self.rows))

    def draw(self, rng):
        """A row, drawn with a random.Random; a row without daughters is the remainder."""
        return self.rows[bisect.bisect_right(self._cumulative, rng.randrange(WHOLE))]


def parent_named(tables, name):
    """The parent of a name; says what there is if there is none."""
    for parent in tables.parents:
        if parent.hadron.name == name:
            return parent
    raise NotOurs(f"no parent {name!r} in this table; there are: " + ", ".join(p.hadron.name for p in tables.parents))


def main(arguments=None):
    parser = argparse.ArgumentParser(description="Draw decays from a table file written by Couplet.")
    parser.add_argument("file")
    parser.add_argument("--parent", help="only this hadron; all of them without it")
    parser.add_argument("--draws", type=int, default=1000, help="decays to draw for each parent (default 1000)")
    parser.add_argument("--seed", type=int, default=1, help="seed of the random numbers (default 1)")
    options = parser.parse_args(arguments)
    try:
        tables = read_tables(options.file)
        parents = [parent_named(tables, options.parent)] if options.parent else tables.parents
    except (OSError, NotOurs) as error:
        print(error, file=sys.stderr)
        return 2
    except Damaged as error:
        print(error, file=sys.stderr)
        return 3
    rng = random.Random(options.seed)
    for parent in parents:
        decayer = Decayer(parent)
        counts = collections.Counter(decayer.draw(rng).id for _ in range(options.draws))
        print(f"{parent.hadron.name}: {options.draws} decays")
        for row in parent.rows:
            if row.parts_per_billion:
                print(f"  {counts[row.id]:>8}  {row.id}  (expected {options.draws * row.parts_per_billion / WHOLE:.1f})")
    return 0


if __name__ == "__main__":
    sys.exit(main())
