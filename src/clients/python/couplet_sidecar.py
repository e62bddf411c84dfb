"""A client of `couplet serve`: what an event generator asks of the sidecar.

Needs Debian's python3-grpcio and python3-protobuf, and the classes that protoc makes from the .proto files:

    protoc -I proto --python_out=OUT --grpc_out=OUT --plugin=protoc-gen-grpc="$(command -v grpc_python_plugin)" \
        proto/couplet/v1/{exact,decays,factors,couplings,sidecar}.proto
    PYTHONPATH=OUT /usr/bin/python3 couplet_sidecar.py 127.0.0.1:50610 --parent 'Sigma(1385)+' --draws 1000
"""

import argparse
import collections
import sys

import grpc

from couplet.v1 import sidecar_pb2 as pb
from couplet.v1 import sidecar_pb2_grpc

# The phase conventions this client's user can interpret.
CONVENTIONS = {"deswart-v1"}
KIND = "couplet.v1.DecayTables"


class WrongTable(Exception):
    """The sidecar does not serve the table this job was prepared for, or in a convention we do not know."""


class Sidecar:
    """A connection that is bound to one decay table from the start; every answer is checked to be from it."""

    def __init__(self, address, sha256=None, credentials=None, timeout=10.0):
        """address: HOST:PORT or unix:PATH. sha256: the table's digest in hexadecimal; without it the only one served."""
        make = grpc.insecure_channel(address) if credentials is None else grpc.secure_channel(address, credentials)
        self._channel = make
        self._stub = sidecar_pb2_grpc.SidecarServiceStub(make)
        self._timeout = timeout
        self.table = self._checked(sha256)
        self.rows = {}

    def __enter__(self):
        return self

    def __exit__(self, *_):
        self._channel.close()

    def _checked(self, sha256):
        listing = self._stub.ListTables(pb.ListTablesRequest(), timeout=self._timeout)
        decays = [table for table in listing.tables if table.kind == KIND]
        wanted = [table for table in decays if sha256 in (None, table.sha256.hex())]
        if len(wanted) != 1:
            served = ", ".join(f"{table.sha256.hex()} ({table.file})" for table in decays)
            raise WrongTable(f"expected {sha256 or 'one decay table'}, got {served}")
        if wanted[0].header.convention not in CONVENTIONS:
            raise WrongTable(f"unknown phase convention {wanted[0].header.convention!r}")
        return wanted[0]

    def _key(self, parent):
        return pb.ParentKey(table_sha256=self.table.sha256, name=parent)

    def decay_table(self, parent):
        """Rows and daughters of a parent; widths, fractions and draws are in the order of the rows."""
        request = pb.GetDecayTableRequest(parent=self._key(parent))
        return self._stub.GetDecayTable(request, timeout=self._timeout)

    def row_count(self, parent):
        if parent not in self.rows:
            self.rows[parent] = len(self.decay_table(parent).parent.rows)
        return self.rows[parent]

    def widths(self, parent, mass):
        """Widths in MeV and fractions of every row at one mass in MeV."""
        request = pb.EvaluateWidthsRequest(parent=self._key(parent), mass=mass)
        return self._stub.EvaluateWidths(request, timeout=self._timeout)

    def stream_widths(self, parent, batches):
        """For each batch of masses, sent ahead of the answers: the total width at each mass and its fractions."""
        rows = self.row_count(parent)
        key = self._key(parent)
        requests = (pb.EvaluateWidthsStreamRequest(parent=key, masses=masses) for masses in batches)
        for answer in self._stub.EvaluateWidthsStream(requests):
            self._require_table(answer.table_sha256)
            fractions = list(answer.fractions)
            yield list(answer.total_widths), [fractions[k : k + rows] for k in range(0, len(fractions), rows)]

    def draw(self, parent, seed, batch, count):
        """Indices of rows drawn at the nominal mass; the same seed and batch give the same ones."""
        request = pb.DrawChannelsRequest(parent=self._key(parent), seed=seed, batch=batch, count=count)
        return self._drawn(request)

    def draw_at(self, parent, seed, batch, masses):
        """One row for each mass in MeV; -1 where every row is closed."""
        request = pb.DrawChannelsRequest(parent=self._key(parent), seed=seed, batch=batch, masses=masses)
        return self._drawn(request)

    def _drawn(self, request):
        answer = self._stub.DrawChannels(request, timeout=self._timeout)
        self._require_table(answer.table_sha256)
        return list(answer.rows)

    def _require_table(self, sha256):
        if sha256 != self.table.sha256:
            raise WrongTable(f"expected an answer from table {self.table.sha256.hex()}, got one from {sha256.hex()}")


def main(arguments=None):
    parser = argparse.ArgumentParser(description="Ask a Couplet sidecar for widths and decays.")
    parser.add_argument("address", help="HOST:PORT or unix:PATH")
    parser.add_argument("--parent", required=True, help="e.g. 'Sigma(1385)+'")
    parser.add_argument("--sha256", help="digest of the table the job was prepared for")
    parser.add_argument("--mass", type=float, help="a mass in MeV; default the nominal one")
    parser.add_argument("--draws", type=int, default=1000, help="decays to draw (default 1000)")
    parser.add_argument("--seed", type=int, default=1, help="seed of the job (default 1)")
    options = parser.parse_args(arguments)
    try:
        with Sidecar(options.address, options.sha256) as sidecar:
            parent = sidecar.decay_table(options.parent).parent
            mass = options.mass or parent.hadron.mass
            for totals, fractions in sidecar.stream_widths(options.parent, [[mass]]):
                counts = collections.Counter(sidecar.draw(options.parent, options.seed, 0, options.draws))
                print(f"{options.parent} at {mass:g} MeV: width {totals[0]:.5g} MeV; {options.draws} decays at the nominal mass")
                for k, row in enumerate(parent.rows):
                    print(f"  {fractions[0][k]:8.4f}  {counts[k]:>8}  {row.id}")
    except WrongTable as error:
        print(error, file=sys.stderr)
        return 3
    except grpc.RpcError as error:
        print(f"{error.code().name}: {error.details()}", file=sys.stderr)
        return 2
    return 0


if __name__ == "__main__":
    sys.exit(main())
