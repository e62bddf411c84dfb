// Draws decays of a parent from a table of Couplet and prints the counts, and its widths at another mass.
//
//     ./example FILE [PARENT [DRAWS [SEED [MASS]]]]
//
// Reads without a protobuf library unless it is built with -DCOUPLET_WITH_PROTOBUF; the rest is the same.
#include <cstdio>
#include <cstdlib>
#include <map>
#include <random>

#ifdef COUPLET_WITH_PROTOBUF
#include "couplet_decays.hpp"
namespace reader = couplet::with_protobuf;
#else
#include "couplet_decays_plain.hpp"
namespace reader = couplet::plain;
#endif

static void show(const couplet::Tables& tables, const couplet::Parent& parent, long draws, std::mt19937_64& rng,
                 double mass) {
  const couplet::Decayer decayer(parent);
  std::map<std::string, long> counts;
  for (long k = 0; k < draws; ++k) ++counts[decayer.draw(rng).id];
  const couplet::ParentWidths widths(tables, parent);
  const double at = mass > 0 ? mass : parent.hadron.mass;
  const std::vector<double> fractions = widths.fractions(at);
  std::printf("%s: %ld decays at the nominal mass; widths at %.6g MeV (total %.5g MeV)\n", parent.hadron.name.c_str(),
              draws, at, widths.total(at));
  std::printf("   drawn  expected       MeV  fraction\n");
  for (std::size_t k = 0; k < parent.rows.size(); ++k) {
    const couplet::Row& row = parent.rows[k];
    const double expected = static_cast<double>(draws) * row.parts_per_billion / couplet::WHOLE;
    std::printf("%8ld  %8.1f  %8.4g  %8.4f  %s\n", counts[row.id], expected, widths.width(k, at), fractions[k],
                row.id.c_str());
  }
}

int main(int argc, char** argv) {
  if (argc < 2 || argc > 6) {
    std::fprintf(stderr, "usage: %s FILE [PARENT [DRAWS [SEED [MASS in MeV]]]]\n", argv[0]);
    return 2;
  }
  const long draws = argc > 3 ? std::atol(argv[3]) : 1000;
  std::mt19937_64 rng(argc > 4 ? std::strtoul(argv[4], nullptr, 10) : 1);
  const double mass = argc > 5 ? std::atof(argv[5]) : 0;
  try {
    const couplet::Tables tables = reader::read_tables(argv[1]);
    for (const std::string& caution : tables.header.cautions) std::printf("Caution: %s\n", caution.c_str());
    if (argc > 2) {
      show(tables, couplet::parent_named(tables, argv[2]), draws, rng, mass);
    } else {
      for (const couplet::Parent& parent : tables.parents) show(tables, parent, draws, rng, mass);
    }
  } catch (const couplet::Damaged& error) {
    std::fprintf(stderr, "%s\n", error.what());
    return 3;
  } catch (const std::exception& error) {
    std::fprintf(stderr, "%s\n", error.what());
    return 2;
  }
  return 0;
}
