// Decay tables of Couplet as plain structs, the checks every reader owes its user, and draws of decays.
//
// C++17, standard library only. Include one of the two readers, which fill these structs from a file:
//   couplet_decays.hpp        with the classes protoc makes from decays.proto
//   couplet_decays_plain.hpp  without any protobuf library
//
// Fields have the names and meanings of proto/couplet/v1/decays.proto. Masses, momenta and widths are in MeV. A double
// that is missing in the file is NaN, so that it cannot pass for a number; what the schema lets be absent is optional.
#ifndef COUPLET_TABLES_HPP
#define COUPLET_TABLES_HPP

#include <algorithm>
#include <cerrno>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <cstdio>
#include <limits>
#include <memory>
#include <optional>
#include <stdexcept>
#include <string>
#include <string_view>
#include <system_error>
#include <vector>

#include "couplet_sha256.hpp"

namespace couplet {

// The file is not a decay table of Couplet at all, or has no such parent. The command line of Couplet exits with 2.
class NotOurs : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

// The file is one of ours, and damaged or too new for this reader. The command line of Couplet exits with 3.
class Damaged : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

// The newest schema this reader knows, and the convention it can pass on.
inline constexpr std::uint32_t SCHEMA_MINOR = 0;
inline constexpr std::string_view CONVENTION = "deswart-v1";
inline constexpr std::string_view KIND = "couplet.v1.DecayTables";
// Fractions are written in parts of this.
inline constexpr std::uint32_t WHOLE = 1'000'000'000;
inline constexpr double MISSING = std::numeric_limits<double>::quiet_NaN();

// Numbers as in the schema; a number of a newer schema is kept as it is.
enum class Origin { unspecified = 0, measured = 1, predicted = 2, remainder = 3 };
enum class TotalOrigin { unspecified = 0, measured = 1, sum = 2 };
enum class Kinematics { unspecified = 0, open = 1, closed = 2, folded = 3 };
enum class ReplicaPart { unspecified = 0, data = 1, breaking = 2, branch = 3, model = 4 };
enum class Phase { unspecified = 0, known = 1, assumed = 2 };
enum class Flag {
  unspecified = 0,
  isospin_split = 1,
  undecayable = 2,
  near_threshold = 3,
  small_amplitude = 4,
  folded = 5,
  adjusted = 6,
  weak = 7
};

struct Policies {
  std::string conflicts, neutral_kaons, antiparticles, daughters;
};

struct Header {
  std::optional<std::uint32_t> schema_minor;
  std::string producer, title, study_text, convention, multiplicity_rule, unit;
  std::vector<std::string> editions, cautions, notes;
  double breaking = MISSING;
  Policies policies;
};

// Distribution of a hadron's mass; draw_mass draws from it.
struct LineShape {
  double low = MISSING, high = MISSING, normalisation = MISSING;
  std::vector<float> distances, cumulative;
  double power = MISSING;
};

struct Hadron {
  std::string name;
  std::optional<std::int32_t> mc_number;
  // Other numbers in use for it.
  std::vector<std::int32_t> mc_aliases;
  double mass = MISSING, mass_error = MISSING;
  std::optional<double> width, width_error;
  std::optional<std::uint32_t> two_j;
  std::optional<std::int32_t> parity, charge, baryon_number, strangeness, charm;
  std::optional<std::string> antiparticle;
  std::vector<std::string> notes;
  // Absent for a narrow hadron: it has its nominal mass.
  std::optional<LineShape> line_shape;
  // Mean life in seconds.
  std::optional<double> lifetime;
  // Upper and lower error of the mass.
  std::optional<double> mass_plus, mass_minus;
};

struct Daughter {
  std::string name;
  std::optional<std::int32_t> mc_number;
};

struct Estimate {
  double value = MISSING, plus = MISSING, minus = MISSING, breaking = MISSING;
  // Absent where they were not computed.
  std::optional<double> branch, model;
};

struct Option {
  std::string name;
  double value = MISSING;
  std::string unit;
};

struct Wave {
  std::uint32_t two_l = 0, two_s = 0;
  // sqrt(MeV), at the nominal mass.
  double re = MISSING, im = MISSING;
  Phase phase = Phase::unspecified;
  std::string model;
  std::vector<Option> options;
  double flavour_amplitude = MISSING;
  double kinematic_factor = MISSING;
  std::string unit;
};

// Partial width against mass, for rows whose width has no closed form; ParentWidths evaluates it.
struct MassGrid {
  double threshold = MISSING;
  std::vector<float> distances, log_widths, slopes;
};

struct FlavourAmplitude {
  std::string row;
  double projection = MISSING;
  std::vector<double> re, im;
};

struct Row {
  std::string id;
  std::vector<Daughter> daughters;
  std::uint32_t parts_per_billion = 0;
  Estimate fraction, width;
  Origin origin = Origin::unspecified;
  std::vector<Flag> flags;
  std::vector<std::string> sources;
  Kinematics kinematics = Kinematics::unspecified;
  double threshold = MISSING, momentum = MISSING, identical_factor = MISSING;
  std::vector<Wave> waves;
  std::optional<double> integrated_fraction;
  std::optional<MassGrid> grid;
  std::string isospin_channel;
  std::optional<double> isospin_coefficient;
  std::optional<double> power;
  std::optional<Estimate> unadjusted_fraction, unadjusted_width;
  std::vector<FlavourAmplitude> kaon_flavours;
  // By replica: its partial width over this row's; empty where all are 1.
  std::vector<float> replica_ratios;
  // The integrated fraction with its errors.
  std::optional<Estimate> integrated;
};

struct Parent {
  Hadron hadron;
  std::string multiplet;
  double total_width = MISSING, total_width_error = MISSING;
  TotalOrigin total_origin = TotalOrigin::unspecified;
  std::vector<Row> rows;
  std::vector<std::string> warnings;
  // Upper and lower error of the total width.
  std::optional<double> total_width_plus, total_width_minus;
  // Where the total width comes from: "study", or the edition of the catalogue; empty for the sum of the rows.
  std::string total_source;
};

// One alternative to the numbers of the tables; ReplicaWeights weights decays by it.
struct Replica {
  ReplicaPart part = ReplicaPart::unspecified;
  // Place of its minimum among those of the fit, from 0.
  std::optional<std::uint32_t> minimum;
  double chi2 = MISSING;
  // Empty for the study's own width models.
  std::string model;
  std::vector<Option> options;
  // Of drawn replicas.
  std::optional<std::uint32_t> seed, draw;
  // Rows that no weight can bring into a simulation.
  std::optional<std::uint32_t> unreachable_rows;
};

struct Tables {
  // Must be KIND; a reader has checked that it is.
  std::string kind;
  Header header;
  std::vector<Parent> parents;
  std::vector<Hadron> externals;
  // Externals whose decays a generator must know itself.
  std::vector<std::string> left_open;
  std::vector<Replica> replicas;
};

// The parent of a name; throws NotOurs that says what there is if there is none.
inline const Parent& parent_named(const Tables& tables, std::string_view name) {
  std::string known;
  for (const Parent& parent : tables.parents) {
    if (parent.hadron.name == name) return parent;
    known += (known.empty() ? "" : ", ") + parent.hadron.name;
  }
  throw NotOurs("no parent \"" + std::string(name) + "\" in this table; there are: " + known);
}

// The parent of a Monte Carlo number, or else the one that has it as an alias; throws NotOurs if there is none.
inline const Parent& parent_numbered(const Tables& tables, std::int32_t number) {
  for (const Parent& parent : tables.parents) {
    if (parent.hadron.mc_number == number) return parent;
  }
  for (const Parent& parent : tables.parents) {
    const auto& aliases = parent.hadron.mc_aliases;
    if (std::find(aliases.begin(), aliases.end(), number) != aliases.end()) return parent;
  }
  throw NotOurs("no parent with the Monte Carlo number " + std::to_string(number) + " in this table; ask by name");
}

// The hadron of a name among parents and externals; null if there is none.
inline const Hadron* find_hadron(const Tables& tables, std::string_view name) {
  for (const Parent& parent : tables.parents) {
    if (parent.hadron.name == name) return &parent.hadron;
  }
  for (const Hadron& hadron : tables.externals) {
    if (hadron.name == name) return &hadron;
  }
  return nullptr;
}

namespace detail {

// A whole number from 0 to n - 1, each equally likely, for n <= 2^32: what would favour some numbers is drawn again.
template <class Generator>
std::uint64_t draw_below(Generator& rng, std::uint64_t n) {
  constexpr std::uint64_t top_of_one = Generator::max() - Generator::min();
  static_assert(top_of_one > 0, "the generator must have more than one value");
  for (;;) {
    std::uint64_t value = rng() - Generator::min();
    std::uint64_t top = top_of_one;
    if constexpr (top_of_one < std::numeric_limits<std::uint32_t>::max()) {
      // A small generator gives a number of several digits to its own base.
      while (top < n - 1) {
        value = value * (top_of_one + 1) + (rng() - Generator::min());
        top = top * (top_of_one + 1) + top_of_one;
      }
    }
    // There are top + 1 values, which may be 2^64; the excess is what is left of them after division by n.
    const std::uint64_t excess = (top % n + 1) % n;
    if (value <= top - excess) return value % n;
  }
}

}  // namespace detail

// Draws decay channels of one parent with the fractions of its rows. The parent must outlive it.
class Decayer {
 public:
  explicit Decayer(const Parent& parent) : rows_(&parent.rows) {
    std::uint32_t sum = 0;
    for (const Row& row : parent.rows) cumulative_.push_back(sum += row.parts_per_billion);
    if (sum != WHOLE) throw Damaged(parent.hadron.name + ": expected fractions that add up to 1, got others");
  }
  explicit Decayer(Parent&&) = delete;

  // A row, drawn with any UniformRandomBitGenerator, e.g. std::mt19937_64; one without daughters is the remainder.
  template <class Generator>
  const Row& draw(Generator& rng) const {
    const auto part = static_cast<std::uint32_t>(detail::draw_below(rng, WHOLE));
    const auto row = std::upper_bound(cumulative_.begin(), cumulative_.end(), part) - cumulative_.begin();
    return (*rows_)[static_cast<std::size_t>(row)];
  }

 private:
  const std::vector<Row>* rows_;
  std::vector<std::uint32_t> cumulative_;
};

namespace detail {

// Uniform in [0, 1), in steps of 2^-53.
template <class Generator>
double draw_uniform(Generator& rng) {
  const std::uint64_t high = draw_below(rng, 1u << 26), low = draw_below(rng, 1u << 27);
  return static_cast<double>(high << 27 | low) * 0x1p-53;
}

inline void check_points(const LineShape& shape) {
  const std::size_t points = shape.distances.size();
  if (points >= 2 && points == shape.cumulative.size() && shape.power > 0) return;
  throw Damaged("line shape: expected distances and chances of two points or more, got others");
}

// The mass up to which a line shape that has been checked has the chance u, in MeV.
inline double mass_at(const LineShape& shape, double u) {
  const std::vector<float>&x = shape.distances, &chance = shape.cumulative;
  if (u < chance[0]) return shape.low + x[0] * std::pow(u / chance[0], 1 / shape.power);
  const auto above = static_cast<std::size_t>(std::upper_bound(chance.begin() + 1, chance.end() - 1, u) - chance.begin());
  const double x0 = x[above - 1], x1 = x[above], f0 = chance[above - 1], f1 = chance[above];
  return shape.low + x0 * std::pow(x1 / x0, std::log(u / f0) / std::log(f1 / f0));
}

// The inverse: the chance of a mass up to this one; 0 below the shape and 1 above it.
inline double chance_up_to(const LineShape& shape, double mass) {
  const std::vector<float>&x = shape.distances, &chance = shape.cumulative;
  const double distance = mass - shape.low;
  if (!(distance > 0)) return 0;
  if (distance >= x.back()) return 1;
  if (distance < x[0]) return chance[0] * std::pow(distance / x[0], shape.power);
  const auto above = static_cast<std::size_t>(std::upper_bound(x.begin() + 1, x.end() - 1, distance) - x.begin());
  const double x0 = x[above - 1], x1 = x[above], f0 = chance[above - 1], f1 = chance[above];
  return f0 * std::pow(f1 / f0, std::log(distance / x0) / std::log(x1 / x0));
}

}  // namespace detail

// A mass from a line shape, in MeV. Throws Damaged for a shape without points.
template <class Generator>
double draw_mass(const LineShape& shape, Generator& rng) {
  detail::check_points(shape);
  return detail::mass_at(shape, detail::draw_uniform(rng));
}

namespace detail {

// The bytes of a file; throws std::system_error with the reason of the operating system.
inline std::string file_bytes(const std::string& path) {
  struct Close {
    void operator()(std::FILE* file) const { std::fclose(file); }
  };
  const std::unique_ptr<std::FILE, Close> file(std::fopen(path.c_str(), "rb"));
  if (!file) throw std::system_error(errno, std::generic_category(), path);
  std::string bytes;
  std::vector<char> chunk(1 << 16);
  while (const std::size_t n = std::fread(chunk.data(), 1, chunk.size(), file.get())) bytes.append(chunk.data(), n);
  if (std::ferror(file.get())) throw std::system_error(errno, std::generic_category(), path);
  return bytes;
}

// Checks that a file is ours and undamaged: its first field says what it is; its last one, field 1000 with a length of
// 32, is the SHA-256 of every byte before it. The digest is of the bytes as read; encoding again could give others.
inline void check_seal(std::string_view bytes, const std::string& name) {
  constexpr std::string_view seal_head = "\xc2\x3e\x20";
  const std::string size = std::to_string(bytes.size());
  const std::string head = std::string{'\x0a', static_cast<char>(KIND.size())}.append(KIND);
  if (bytes.substr(0, head.size()) != head) {
    throw NotOurs(name + ": expected decay tables written by Couplet, got something else (" + size +
                  " bytes). Give a .decays.pb file that `couplet tables` wrote.");
  }
  const std::size_t seal_length = seal_head.size() + std::tuple_size<Digest>::value;
  if (bytes.size() >= head.size() + seal_length) {
    const std::string_view body = bytes.substr(0, bytes.size() - seal_length);
    const Digest digest = sha256(body);
    const std::string seal = std::string(seal_head).append(digest.begin(), digest.end());
    if (bytes.substr(body.size()) == seal) return;
  }
  throw Damaged(name + ": the file is damaged: its digest does not match its content (" + size +
                " bytes). Nothing was read; get a fresh copy or write the table again.");
}

// A sealed file that is no message: it was written by something else, with a digest of its own.
[[noreturn]] inline void refuse_bytes(const std::string& name) {
  throw Damaged(name + ": expected a message " + std::string(KIND) +
                ", got bytes that are none. The file was written by something else; write it again.");
}

// Checks kind, version, convention, and that each parent's fractions add up to exactly one.
inline void check_content(const Tables& tables, const std::string& name) {
  if (tables.kind != KIND) refuse_bytes(name);
  const std::optional<std::uint32_t> minor = tables.header.schema_minor;
  if (!minor || *minor > SCHEMA_MINOR) {
    throw Damaged(name + ": expected schema version 1." + std::to_string(SCHEMA_MINOR) + " or older, got " +
                  (minor ? "1." + std::to_string(*minor) : "none") + ". Read it with a newer reader.");
  }
  if (tables.header.convention != CONVENTION) {
    throw Damaged(name + ": expected phase convention " + std::string(CONVENTION) + ", got \"" +
                  tables.header.convention + "\". Read it with a newer reader.");
  }
  for (const Parent& parent : tables.parents) {
    std::uint64_t sum = 0;
    for (const Row& row : parent.rows) sum += row.parts_per_billion;
    if (sum != WHOLE) {
      throw Damaged(name + ": " + parent.hadron.name + ": expected rows that add up to " + std::to_string(WHOLE) +
                    " parts, got " + std::to_string(sum) +
                    ". The file was written by something else; write it again.");
    }
  }
}

}  // namespace detail

}  // namespace couplet

#endif
