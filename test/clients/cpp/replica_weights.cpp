// Prints the weights of every row of a table by every replica at masses around the nominal one, to be compared with other
// readers. Usage: replica_weights FILE SHIFT...   with shifts of the mass in MeV; lines of: parent, shift, row, weights.
// With COUPLET_WITH_PROTOBUF it reads the file with the classes that protoc makes.
#include <cstdio>
#include <cstdlib>

#ifdef COUPLET_WITH_PROTOBUF
#include "couplet_decays.hpp"
namespace reader = couplet::with_protobuf;
#else
#include "couplet_decays_plain.hpp"
namespace reader = couplet::plain;
#endif
#include "couplet_replicas.hpp"

int main(int argc, char** argv) {
  if (argc < 3) return 2;
  const couplet::Tables tables = reader::read_tables(argv[1]);
  for (const couplet::Parent& parent : tables.parents) {
    const couplet::ReplicaWeights weights(tables, parent);
    for (int k = 2; k < argc; ++k) {
      const double mass = std::max(parent.hadron.mass + std::atof(argv[k]), 1e-3);
      for (const couplet::Row& row : parent.rows) {
        std::printf("%s\t%s\t%s", parent.hadron.name.c_str(), argv[k], row.id.c_str());
        std::vector<double> squares;
        for (int twice = 0; twice < 2; ++twice) couplet::multiply_weights(squares, weights.of(row, mass));
        const std::vector<double> once = weights.of(row, mass);
        for (std::size_t r = 0; r < once.size(); ++r) std::printf("\t%.17g\t%.17g", once[r], squares[r]);
        std::printf("\n");
      }
    }
  }
  return 0;
}
