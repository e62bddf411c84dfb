// Prints partial widths of every row of a table at masses around the nominal one, to be compared with other readers.
// Usage: evaluate FILE SHIFT...   with shifts of the mass in MeV (it stops at 0.001 MeV); lines of: parent, shift, row,
// width in MeV.
#include <cstdio>
#include <cstdlib>

#include "couplet_decays_plain.hpp"

int main(int argc, char** argv) {
  if (argc < 3) return 2;
  const couplet::Tables tables = couplet::plain::read_tables(argv[1]);
  for (const couplet::Parent& parent : tables.parents) {
    const couplet::ParentWidths widths(tables, parent);
    for (int k = 2; k < argc; ++k) {
      const double mass = std::max(parent.hadron.mass + std::atof(argv[k]), 1e-3);
      for (std::size_t row = 0; row < parent.rows.size(); ++row) {
        std::printf("%s\t%s\t%s\t%.17g\n", parent.hadron.name.c_str(), argv[k], parent.rows[row].id.c_str(),
                    widths.width(row, mass));
      }
    }
  }
  return 0;
}
