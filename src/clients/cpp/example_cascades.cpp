// Draws whole decay cascades from a table of Couplet; prints the first three and how often each final state came out.
//
//     ./example_cascades FILE [PARENT [CASCADES [SEED]]]
//
// Reads without a protobuf library unless it is built with -DCOUPLET_WITH_PROTOBUF; the rest is the same.
#include <cstdio>
#include <cstdlib>
#include <random>

#include "couplet_cascades.hpp"
#ifdef COUPLET_WITH_PROTOBUF
#include "couplet_decays.hpp"
namespace reader = couplet::with_protobuf;
#else
#include "couplet_decays_plain.hpp"
namespace reader = couplet::plain;
#endif

using Cascade = std::vector<couplet::CascadeParticle>;

static void print(const Cascade& cascade, std::size_t place, int indent) {
  const couplet::CascadeParticle& particle = cascade[place];
  const bool ends_badly = particle.end == couplet::End::undecayable || particle.end == couplet::End::closed;
  std::printf("%*s%s  %.3f MeV%s\n", indent, "", particle.name.c_str(), particle.mass,
              !ends_badly ? "" : particle.end == couplet::End::closed ? "  (closed)" : "  (undecayable)");
  for (std::size_t d = 0; d < particle.daughters; ++d) print(cascade, particle.first_daughter + d, indent + 2);
}

// The names of the particles that did not decay, in alphabetical order.
static std::string final_state(const Cascade& cascade) {
  std::vector<std::string> names;
  for (const couplet::CascadeParticle& particle : cascade) {
    if (particle.end != couplet::End::decayed) names.push_back(particle.name);
  }
  std::sort(names.begin(), names.end());
  std::string all;
  for (const std::string& name : names) all += (all.empty() ? "" : " ") + name;
  return all;
}

static void show(const couplet::Cascades& cascades, const std::string& parent, long draws, std::mt19937_64& rng) {
  std::map<std::string, long> counts;
  for (long k = 0; k < draws; ++k) {
    const Cascade cascade = cascades.draw(parent, rng);
    ++counts[final_state(cascade)];
    if (k < 3) print(cascade, 0, 0);
  }
  std::vector<std::pair<long, std::string>> ordered;
  for (const auto& [state, count] : counts) ordered.emplace_back(-count, state);
  std::sort(ordered.begin(), ordered.end());
  std::printf("%s: %ld cascades, %zu final states; the most frequent:\n", parent.c_str(), draws, counts.size());
  for (std::size_t k = 0; k < std::min<std::size_t>(10, ordered.size()); ++k) {
    std::printf("%10ld  %s\n", -ordered[k].first, ordered[k].second.c_str());
  }
}

int main(int argc, char** argv) {
  if (argc < 2 || argc > 5) {
    std::fprintf(stderr, "usage: %s FILE [PARENT [CASCADES [SEED]]]\n", argv[0]);
    return 2;
  }
  const long draws = argc > 3 ? std::atol(argv[3]) : 1000;
  std::mt19937_64 rng(argc > 4 ? std::strtoul(argv[4], nullptr, 10) : 1);
  try {
    const couplet::Tables tables = reader::read_tables(argv[1]);
    const couplet::Cascades cascades(tables);
    if (argc > 2) {
      show(cascades, argv[2], draws, rng);
    } else {
      for (const couplet::Parent& parent : tables.parents) show(cascades, parent.hadron.name, draws, rng);
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
