// Asks a Couplet sidecar for widths and decays of a parent.
//
//     ./sidecar_example ADDRESS PARENT [SHA256 [DRAWS [SEED [MASS in MeV]]]]
#include <cstdio>
#include <cstdlib>

#include "couplet_sidecar.hpp"

int main(int argc, char** argv) {
  if (argc < 3 || argc > 7) {
    std::fprintf(stderr, "usage: %s ADDRESS PARENT [SHA256 [DRAWS [SEED [MASS in MeV]]]]\n", argv[0]);
    return 2;
  }
  const std::string parent = argv[2];
  const unsigned draws = argc > 4 ? static_cast<unsigned>(std::atoi(argv[4])) : 1000;
  const unsigned long seed = argc > 5 ? std::strtoul(argv[5], nullptr, 10) : 1;
  try {
    const couplet::sidecar::Sidecar sidecar(argv[1], argc > 3 ? argv[3] : "");
    const auto table = sidecar.decay_table(parent).parent();
    const double mass = argc > 6 ? std::atof(argv[6]) : table.hadron().mass();
    auto stream = sidecar.stream_widths(parent);
    stream.send({mass});
    const auto widths = stream.receive();
    stream.finish();
    std::vector<long> counts(static_cast<std::size_t>(table.rows_size()));
    for (const int row : sidecar.draw(parent, seed, 0, draws)) ++counts[static_cast<std::size_t>(row)];
    std::printf("%s at %g MeV: width %.5g MeV; %u decays at the nominal mass\n", parent.c_str(), mass, widths.totals[0],
                draws);
    for (std::size_t k = 0; k < counts.size(); ++k)
      std::printf("  %8.4f  %8ld  %s\n", widths.fractions[0][k], counts[k], table.rows(static_cast<int>(k)).id().c_str());
  } catch (const couplet::sidecar::WrongTable& error) {
    std::fprintf(stderr, "%s\n", error.what());
    return 3;
  } catch (const std::exception& error) {
    std::fprintf(stderr, "%s\n", error.what());
    return 2;
  }
  return 0;
}
