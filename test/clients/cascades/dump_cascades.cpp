// Prints cascades drawn with given random numbers, to be compared with other languages.
// Usage: dump_cascades FILE UNIFORMS COUNT START...   UNIFORMS is a file of doubles in [0, 1), taken one after another,
// COUNT the cascades of each start; lines of: name, mass, mother (-1 for none), row (- for none), end. It stops with exit
// code 1 when the numbers run out.
#include <cstdio>
#include <cstdlib>
#include <cstring>

#include "couplet_cascades.hpp"
#include "couplet_decays_plain.hpp"

// Gives the upper 26 and the lower 27 bits of each number by turns, of which a draw makes the number again.
struct Given {
  using result_type = std::uint64_t;
  static constexpr result_type min() { return 0; }
  static constexpr result_type max() { return std::numeric_limits<result_type>::max(); }
  std::string bytes;
  std::size_t at = 0;
  bool is_low = false;
  result_type operator()() {
    if (at + sizeof(double) > bytes.size()) std::exit(1);
    double u;
    std::memcpy(&u, bytes.data() + at, sizeof u);
    const auto bits = static_cast<result_type>(u * 0x1p53);
    if (is_low) at += sizeof(double);
    is_low = !is_low;
    return is_low ? bits >> 27 : bits & ((1u << 27) - 1);
  }
};

int main(int argc, char** argv) {
  if (argc < 5) return 2;
  const couplet::Tables tables = couplet::plain::read_tables(argv[1]);
  const couplet::Cascades cascades(tables);
  Given given{couplet::detail::file_bytes(argv[2])};
  constexpr const char* ENDS[] = {"decayed", "left", "undecayable", "closed"};
  for (int start = 4; start < argc; ++start) {
    for (int k = 0; k < std::atoi(argv[3]); ++k) {
      for (const couplet::CascadeParticle& particle : cascades.draw(argv[start], given)) {
        std::printf("%s\t%.17g\t%d\t%s\t%s\n", particle.name.c_str(), particle.mass,
                    particle.mother ? static_cast<int>(*particle.mother) : -1,
                    particle.row ? particle.row->id.c_str() : "-", ENDS[static_cast<int>(particle.end)]);
      }
    }
  }
  return 0;
}
