// Tests of both readers of decay tables: digest, equality, damage, draws, widths. Usage: decays_test TABLE_FILE
//
// `decays_test prefixes FILE` prints the digests of the first 0, 1, 2, ... 300 bytes of a file, to be compared with
// another program's.
#include <google/protobuf/stubs/logging.h>

#include <array>
#include <map>
#include <random>

#include "checks.hpp"
#include "chi_square.hpp"
#include "couplet_decays.hpp"
#include "couplet_decays_plain.hpp"
#include "dump.hpp"
#include "made_tables.hpp"

using couplet::Damaged;
using couplet::NotOurs;
using couplet::Parent;
using couplet::ParentWidths;
using couplet::Row;
using couplet::Tables;

namespace {

constexpr double FALSE_ALARM = 1e-6;
constexpr long DRAWS = 200'000;
constexpr std::uint64_t SEED = 20261201;
constexpr int MUTATIONS = 200'000;

using ReadBytes = Tables (*)(std::string_view, const std::string&);
struct Reader {
  std::string name;
  ReadBytes read;
  Tables (*read_file)(const std::string&);
};
const std::array<Reader, 2> READERS = {
    Reader{"with protobuf", couplet::with_protobuf::tables_from_bytes, couplet::with_protobuf::read_tables},
    Reader{"plain", couplet::plain::tables_from_bytes, couplet::plain::read_tables}};

std::string hex(const couplet::Digest& digest) {
  std::string text;
  char two[3];
  for (const std::uint8_t byte : digest) {
    std::snprintf(two, sizeof two, "%02x", byte);
    text += two;
  }
  return text;
}

// Published: NIST, FIPS 180-4 example values for SHA-256 ("abc", 448 bits, 896 bits, one million a); the empty string is
// from NIST's short-message vectors for byte-oriented implementations. Provenance: memory.
void digest_vectors(Checks& check) {
  const auto is = [](const std::string& text, const char* digest) { return hex(couplet::sha256(text)) == digest; };
  check(is("", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"), "SHA-256 of the empty string");
  check(is("abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"), "SHA-256 of abc");
  check(is("abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
           "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1"),
        "SHA-256 of the 448-bit message");
  check(is("abcdefghbcdefghicdefghijdefghijkefghijklfghijklmghijklmnhijklmnoijklmnopjklmnopqklmnopqrlmnopqrsmnopqrst"
           "nopqrstu",
           "cf5b16a778af8380036ce59e7b0492370b249b11e8f07a51afac45037afee9d1"),
        "SHA-256 of the 896-bit message");
  check(is(std::string(1'000'000, 'a'), "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0"),
        "SHA-256 of one million a");
}

// What a reader does with bytes: 'a' accepts, 'n' not ours, 'd' damaged.
char verdict(const Reader& reader, std::string_view bytes) {
  try {
    reader.read(bytes, "f");
    return 'a';
  } catch (const NotOurs&) {
    return 'n';
  } catch (const Damaged&) {
    return 'd';
  }
}

void equality(Checks& check, const std::string& bytes) {
  const Tables with = READERS[0].read(bytes, "f"), plain = READERS[1].read(bytes, "f");
  check(!plain.parents.empty() && dumped(with) == dumped(plain), "both readers see the same fields of the given table");
  const std::string full = sealed(full_table());
  Dump dump_with, dump_plain;
  dump_with.add(READERS[0].read(full, "f"));
  dump_plain.add(READERS[1].read(full, "f"));
  check(dump_with.text == dump_plain.text, "both readers see the same of a table where every field is set");
  // The one blank is schema minor 0.
  check(dump_with.blanks == (couplet::SCHEMA_MINOR == 0 ? 1 : 0), "no field of that table is missed by both readers");
  Tables other = plain;
  other.parents.back().rows.back().fraction.breaking += 1e-15;
  check(dumped(other) != dumped(plain), "the comparison sees a change of 1e-15 in one field");
}

// Every change of one byte to every other value, and every truncation.
void damage(Checks& check, const Reader& reader, const std::string& bytes) {
  const std::string size = std::to_string(bytes.size());
  long accepted = 0, wrong = 0;
  const std::size_t head = 2 + couplet::KIND.size();
  std::string changed = bytes;
  for (std::size_t at = 0; at < bytes.size(); ++at) {
    for (int change = 1; change < 256; ++change) {
      changed[at] = static_cast<char>(bytes[at] ^ change);
      const char got = verdict(reader, changed);
      accepted += got == 'a';
      wrong += got != (at < head ? 'n' : 'd');
    }
    changed[at] = bytes[at];
  }
  check(verdict(reader, bytes) == 'a' && accepted == 0 && wrong == 0,
        reader.name + ": every change of one byte of a table of " + size + " bytes is refused");
  for (std::size_t length = 0; length < bytes.size(); ++length) {
    const char got = verdict(reader, std::string_view(bytes).substr(0, length));
    wrong += got != (length < head ? 'n' : 'd');
  }
  wrong += verdict(reader, bytes + '\0') != 'd';
  check(wrong == 0, reader.name + ": every truncation of it, and a byte more, is refused");
}

void messages(Checks& check, const Reader& reader, const couplet::v1::DecayTables& small) {
  const auto refuses = [&](const couplet::v1::DecayTables& message, const std::string& text, const std::string& what) {
    check.refused<Damaged>([&] { reader.read(sealed(message), "f.pb"); }, "f.pb: " + text, reader.name + ": " + what);
  };
  couplet::v1::DecayTables wrong = small;
  wrong.mutable_header()->set_schema_minor(couplet::SCHEMA_MINOR + 1);
  const std::string known = std::to_string(couplet::SCHEMA_MINOR), newer = std::to_string(couplet::SCHEMA_MINOR + 1);
  refuses(wrong, "expected schema version 1." + known + " or older, got 1." + newer + ". Read it with a newer reader.",
          "a newer schema is refused");
  wrong.mutable_header()->clear_schema_minor();
  refuses(wrong, "expected schema version 1." + known + " or older, got none. Read it with a newer reader.",
          "no schema version is refused");
  wrong = small;
  wrong.mutable_header()->set_convention("left-handed");
  refuses(wrong, "expected phase convention deswart-v1, got \"left-handed\". Read it with a newer reader.",
          "an unknown convention is refused");
  wrong = small;
  wrong.mutable_parents(0)->mutable_rows(1)->set_parts_per_billion(1000000000 - 123456788);
  refuses(wrong,
          small.parents(0).hadron().name() +
              ": expected rows that add up to 1000000000 parts, got 1000000001. The file was written by something "
              "else; write it again.",
          "fractions that do not add up are refused");
  const std::string none =
      "f.pb: expected a message couplet.v1.DecayTables, got bytes that are none. The file was written by something "
      "else; write it again.";
  const std::string body = small.SerializeAsString();
  const std::array<std::pair<std::string, std::string>, 5> broken = {
      {{body + "\x12\x7f", "a length beyond the end"},
       {body + std::string("\x00\x00", 2), "field number 0"},
       {body + "\x12\x01\x0c", "the end of a group that never began"},
       {body + "\x80\x80\x80\x80\x80\x80\x80\x80\x80\x80\x01", "an endless number"},
       {body + "\x0a\x05other", "a second kind"}}};
  for (const auto& [bytes, what] : broken) {
    check.refused<Damaged>([&, &wrong_bytes = bytes] { reader.read(sealed(wrong_bytes), "f.pb"); }, none,
                           reader.name + ": " + what + " is refused");
  }
  check.refused<NotOurs>([&] { reader.read("hello", "f.pb"); },
                         "f.pb: expected decay tables written by Couplet, got something else (5 bytes). Give a "
                         ".decays.pb file that `couplet tables` wrote.",
                         reader.name + ": a foreign file is refused");
  check.refused<Damaged>([&] { reader.read(sealed(body).substr(0, 100), "f.pb"); },
                         "f.pb: the file is damaged: its digest does not match its content (100 bytes). Nothing was "
                         "read; get a fresh copy or write the table again.",
                         reader.name + ": a cut file is refused in words");
  check.refused<std::system_error>([&] { reader.read_file("/no/such.pb"); }, "/no/such.pb: No such file or directory",
                                   reader.name + ": a missing file is refused");
  check.refused<std::system_error>([&] { reader.read_file("/"); }, "/: Is a directory",
                                   reader.name + ": a folder is refused");
  const Tables tables = reader.read(sealed(small), "f.pb");
  check.refused<NotOurs>([&] { couplet::parent_named(tables, "Z"); },
                         "no parent \"Z\" in this table; there are: " + tables.parents[0].hadron.name,
                         reader.name + ": an unknown parent is refused");
  couplet::v1::DecayTables numbered = small;
  numbered.mutable_parents(0)->mutable_hadron()->set_mc_number(-3226);
  for (const int alias : {-103226, 103}) numbered.mutable_parents(0)->mutable_hadron()->add_mc_aliases(alias);
  const Tables by_number = reader.read(sealed(numbered), "f.pb");
  bool found = true;
  for (const int number : {-3226, -103226, 103}) found = found && &couplet::parent_numbered(by_number, number) == by_number.parents.data();
  check(found, reader.name + ": a parent is found by its Monte Carlo number and by each alias");
  check.refused<NotOurs>([&] { couplet::parent_numbered(by_number, 3226); },
                         "no parent with the Monte Carlo number 3226 in this table; ask by name",
                         reader.name + ": an unknown number is refused");
}

// Unknown fields of every wire type, groups in groups among them, change nothing.
void unknown_fields(Checks& check, const couplet::v1::DecayTables& small) {
  couplet::v1::DecayTables message = small;
  message.clear_sha256();
  const std::string body = message.SerializeAsString();
  std::string unknown;
  unknown += std::string("\xa8\x06\x96\x01", 4);                           // field 101, number
  unknown += std::string("\xa9\x06", 2) + std::string(8, '\x11');          // 8 bytes
  unknown += std::string("\xaa\x06\x03xyz", 6);                            // block
  unknown += std::string("\xab\x06\xb3\x06\xa8\x06\x01\xb4\x06\xac\x06", 11);  // group 101 with group 102 in it
  unknown += std::string("\xad\x06", 2) + std::string(4, '\x22');          // 4 bytes
  unknown += std::string("\x10\x05", 2);                                   // the header's number with another wire type
  const std::string expected = dumped(READERS[1].read(sealed(body), "f"));
  for (const Reader& reader : READERS) {
    check(dumped(reader.read(sealed(body + unknown), "f")) == expected, reader.name + ": unknown fields are skipped");
  }
  std::string deep;
  for (int k = 0; k < 200'000; ++k) deep += "\xab\x06";
  check(verdict(READERS[1], sealed(body + deep)) == 'd', "plain: 200 000 groups in each other are refused");
}

std::string mutated(std::string bytes, std::mt19937_64& rng) {
  const auto below = [&](std::size_t n) { return static_cast<std::size_t>(couplet::detail::draw_below(rng, n)); };
  // Seldom in the first field, whose every change is refused before anything is parsed.
  const std::size_t first = below(50) == 0 ? 0 : 2 + couplet::KIND.size();
  const std::size_t changes = 1 + below(4);
  for (std::size_t k = 0; k < changes; ++k) {
    if (bytes.size() <= first) return bytes;
    const std::size_t at = first + below(bytes.size() - first);
    const std::size_t length = std::min(bytes.size() - at, 1 + below(16));
    switch (below(7)) {
      case 0: bytes[at] = static_cast<char>(bytes[at] ^ (1 << below(8))); break;
      case 1: bytes[at] = static_cast<char>(below(256)); break;
      case 2: bytes.erase(at, length); break;
      case 3: bytes.insert(at, bytes.substr(first + below(bytes.size() - first), length)); break;
      case 4: bytes.insert(at, std::string(length, static_cast<char>(below(256)))); break;
      case 5: bytes.replace(at, 1, "\xff\xff\xff\xff\x0f"); break;
      default: bytes.resize(below(20) == 0 ? at : bytes.size());
    }
  }
  return bytes;
}

// Uses everything in a table, as a program that trusts the digest would.
void use(const Tables& tables, std::mt19937_64& rng, double& sum) {
  for (const Parent& parent : tables.parents) {
    sum += static_cast<double>(couplet::Decayer(parent).draw(rng).parts_per_billion);
    try {
      const ParentWidths widths(tables, parent);
      for (const double fraction : widths.fractions(2000)) sum += fraction;
    } catch (const Damaged&) {
    } catch (const std::invalid_argument&) {
    }
  }
}

// Changed bytes under a digest that is right again: nothing may be read outside, and where the protobuf library accepts
// the bytes the plain reader sees the same. (It may accept more: it does not look into fields it has no use for.)
void fuzz(Checks& check, const std::string& body) {
  std::mt19937_64 rng(SEED);
  long accepted = 0, refused = 0, different = 0;
  double sum = 0;
  for (int k = 0; k < MUTATIONS; ++k) {
    const std::string bytes = sealed(mutated(body, rng));
    std::optional<Tables> plain, with;
    try {
      plain = READERS[1].read(bytes, "f");
    } catch (const NotOurs&) {
    } catch (const Damaged&) {
    }
    (plain ? accepted : refused) += 1;
    if (plain) use(*plain, rng, sum);
    // The comparison costs most of the time, so a part will do.
    if (k % 4 != 0) continue;
    try {
      with = READERS[0].read(bytes, "f");
    } catch (const NotOurs&) {
    } catch (const Damaged&) {
    }
    different += with && (!plain || dumped(*with) != dumped(*plain));
  }
  check(accepted > MUTATIONS / 100 && refused > MUTATIONS / 100,
        "plain: " + std::to_string(MUTATIONS) + " changed tables with a right digest do no harm (" +
            std::to_string(accepted) + " accepted, " + std::to_string(refused) + " refused, seed " +
            std::to_string(SEED) + ")");
  check(different == 0, "both readers see the same of those the protobuf library accepts");
}

// All values of a small generator, one after another.
template <unsigned Base>
struct Digits {
  using result_type = unsigned;
  static constexpr unsigned min() { return 1; }
  static constexpr unsigned max() { return Base; }
  unsigned at = 0, digits = 1, number = 0;
  unsigned operator()() {
    if (at == 0) {
      at = digits;
      ++number;
    }
    unsigned rest = number - 1;
    for (unsigned k = 1; k < at; ++k) rest /= Base;
    --at;
    return 1 + rest % Base;
  }
};

// Exact: over all sequences of digits each number is drawn equally often.
template <unsigned Base>
bool draws_evenly(unsigned n, unsigned digits, unsigned each) {
  Digits<Base> all{0, digits, 0};
  std::map<std::uint64_t, unsigned> counts;
  for (unsigned k = 0; k < n * each; ++k) ++counts[couplet::detail::draw_below(all, n)];
  for (const auto& [value, count] : counts) {
    if (value >= n || count != each) return false;
  }
  return counts.size() == n;
}

template <class Generator>
std::vector<long> drawn(const Parent& parent, Generator& rng, long draws) {
  const couplet::Decayer decayer(parent);
  std::vector<long> counts(parent.rows.size());
  for (long k = 0; k < draws; ++k) ++counts[static_cast<std::size_t>(&decayer.draw(rng) - parent.rows.data())];
  return counts;
}

// The whole test of one reader fails for a right one with a chance of at most FALSE_ALARM.
void draws(Checks& check, const Reader& reader, const std::string& bytes) {
  const Tables tables = reader.read(bytes, "f");
  std::mt19937_64 rng(SEED);
  const double limit = FALSE_ALARM / static_cast<double>(tables.parents.size() + 1);
  int powerful = 0;
  std::vector<double> fractions;
  for (const Parent& parent : tables.parents) {
    fractions.clear();
    for (const Row& row : parent.rows) fractions.push_back(row.parts_per_billion / double{couplet::WHOLE});
    const std::vector<long> counts = drawn(parent, rng, DRAWS);
    const double chance = probability(counts, fractions, DRAWS);
    char text[32];
    std::snprintf(text, sizeof text, "%.3g", chance);
    check(chance >= limit, reader.name + ": draws of " + parent.hadron.name + " follow its fractions (probability " + text + ")");
    const auto large = std::count_if(fractions.begin(), fractions.end(), [](double f) { return f > 0.05; });
    powerful += large >= 2 && probability(counts, shifted(fractions), DRAWS) < limit;
  }
  check(powerful > 0, reader.name + ": shifted fractions are refused for " + std::to_string(powerful) + " parents");
  std::minstd_rand short_range(SEED % 1000);
  check(probability(drawn(tables.parents.back(), short_range, DRAWS), fractions, DRAWS) >= limit,
        reader.name + ": draws with a generator of 31 bits follow the fractions");
}

// Masses drawn from line shapes, counted between the points of the shape; the same false-alarm rate as above.
void masses(Checks& check, const std::string& bytes) {
  const Tables tables = READERS[1].read(bytes, "f");
  std::mt19937 rng(SEED % 4'000'000'000);
  const auto shapes = std::count_if(tables.parents.begin(), tables.parents.end(),
                                    [](const Parent& parent) { return parent.hadron.line_shape.has_value(); });
  int follow = 0, powerful = 0;
  for (const Parent& parent : tables.parents) {
    if (!parent.hadron.line_shape) continue;
    const couplet::LineShape& shape = *parent.hadron.line_shape;
    std::vector<long> counts(shape.distances.size());
    std::vector<double> chances;
    double before = 0;
    for (const float chance : shape.cumulative) {
      chances.push_back(chance - before);
      before = chance;
    }
    bool inside = true;
    for (long k = 0; k < DRAWS / 4; ++k) {
      const double mass = couplet::draw_mass(shape, rng);
      inside = inside && mass >= shape.low && mass <= shape.high * (1 + 1e-7);
      const auto bin = std::lower_bound(shape.distances.begin(), shape.distances.end() - 1, mass - shape.low);
      ++counts[static_cast<std::size_t>(bin - shape.distances.begin())];
    }
    const double limit = FALSE_ALARM / static_cast<double>(shapes);
    follow += inside && probability(counts, chances, DRAWS / 4) >= limit;
    std::rotate(chances.begin(), chances.begin() + 1, chances.end());
    powerful += probability(counts, chances, DRAWS / 4) < limit;
  }
  check(shapes > 0 && follow == shapes, "masses drawn for " + std::to_string(shapes) + " parents follow their line shapes");
  check(powerful == shapes, "line shapes moved by a point are refused");
  check.refused<Damaged>([&] { couplet::draw_mass(couplet::LineShape{}, rng); },
                         "line shape: expected distances and chances of two points or more, got others",
                         "an empty line shape is refused");
}

void widths(Checks& check, const Reader& reader, const std::string& bytes) {
  const Tables tables = reader.read(bytes, "f");
  int rows = 0, open = 0, nominal = 0, below = 0, fractions = 0, above = 0, closed = 0;
  for (const Parent& parent : tables.parents) {
    const ParentWidths at(tables, parent);
    const double mass = parent.hadron.mass;
    double sum = 0;
    for (const double fraction : at.fractions(mass + 25)) sum += fraction;
    fractions += close(sum, 1, 1e-12) && close(at.total(mass), parent.total_width, 1e-4);
    for (std::size_t k = 0; k < parent.rows.size(); ++k) {
      const Row& row = parent.rows[k];
      ++rows;
      // A folded row comes from a grid, whose accuracy the schema states.
      const bool folded = std::count(row.flags.begin(), row.flags.end(), couplet::Flag::folded) > 0;
      nominal += close(at.width(k, mass), row.width.value, folded ? 1e-4 : 1e-9);
      if (row.waves.empty() || folded) {
        // Massless daughters, or a remainder that is all there is, have no threshold.
        below += row.threshold == 0 || at.width(k, row.threshold / 2) == 0;
        continue;
      }
      // The threshold in the table is a rounded sum.
      below += at.width(k, row.threshold * (1 - 1e-14)) == 0 && at.width(k, row.threshold / 2) == 0;
      above += at.width(k, row.threshold + 500) > at.width(k, row.threshold + 400);
      ++open;
      closed += row.kinematics == couplet::Kinematics::closed && at.width(k, row.threshold + 1) > 0;
    }
  }
  const auto parents = static_cast<int>(tables.parents.size());
  check(rows > 0 && nominal == rows, reader.name + ": at the nominal mass " + std::to_string(rows) + " rows have their width");
  check(below == rows, reader.name + ": below threshold a width is zero");
  check(above == open && closed > 0, reader.name + ": widths grow above threshold, for rows closed at the nominal mass too");
  check(fractions == parents, reader.name + ": fractions off the nominal mass add up to 1, widths at it to the total");
}

void width_refusals(Checks& check, const couplet::v1::DecayTables& small) {
  const Tables good = READERS[1].read(sealed(small), "f");
  const auto refuses = [&](const Tables& tables, const std::string& text, const std::string& what) {
    check.refused<Damaged>([&] { ParentWidths(tables, tables.parents[0]); }, tables.parents[0].rows[0].id + text, what);
  };
  Tables wrong = good;
  wrong.parents[0].rows[0].waves[0].model = "z";
  refuses(wrong, ": expected a width model among a, b, c, d, e, got \"z\". Read the table with a newer reader.",
          "an unknown width model is refused");
  wrong = good;
  auto& options = wrong.parents[0].rows[0].waves[0].options;
  options.clear();
  wrong.parents[0].rows[0].waves[0].model = "b";
  refuses(wrong, ": expected width model b with the options [rangeMeV in MeV, nucleonMassMeV in MeV], got []. Read the "
                 "table with a newer reader.",
          "a missing option is refused");
  options = {{"rangeMeV", 350, "GeV"}, {"nucleonMassMeV", 938.9, "MeV"}};
  refuses(wrong, ": expected width model b with the options [rangeMeV in MeV, nucleonMassMeV in MeV], got [rangeMeV in "
                 "GeV, nucleonMassMeV in MeV]. Read the table with a newer reader.",
          "an option in another unit is refused");
  wrong.parents[0].rows[0].waves[0].model = "d";
  options = {{"scaleMeV", 139.57, "MeV"}, {"mixing", 1, "1"}};
  refuses(wrong, ": expected width model d with the options [scaleMeV in MeV, derivativeForm in 1 or none], got [scaleMeV "
                 "in MeV, mixing in 1]. Read the table with a newer reader.",
          "an unknown option is refused beside one that may be missing");
  options = {{"derivativeForm", 1, "1"}};
  refuses(wrong, ": expected width model d with the options [scaleMeV in MeV, derivativeForm in 1 or none], got "
                 "[derivativeForm in 1]. Read the table with a newer reader.",
          "an option that may be missing does not stand for one that may not");
  options = {{"scaleMeV", 139.57, "MeV"}, {"derivativeForm", 2, "1"}};
  refuses(wrong, ": expected derivativeForm 0 or 1 of width model d, got 2. Read the table with a newer reader.",
          "a derivative form that is neither 0 nor 1 is refused");
  wrong = good;
  wrong.parents[0].rows[0].waves[0].two_l = 3;
  refuses(wrong, ": expected an even 2L up to 24, got 3. Read the table with a newer reader.", "an odd 2L is refused");
  wrong = good;
  wrong.externals.clear();
  refuses(wrong, ": expected " + good.parents[0].rows[0].daughters[0].name +
                     " among the hadrons of the table with its mass, got none",
          "a daughter without a mass is refused");
  wrong = good;
  wrong.parents[0].hadron.mass = 1;
  wrong.parents[0].rows[0].grid.reset();
  wrong.parents[0].rows[0].waves[0].re = 2;
  wrong.parents[0].rows[0].waves[0].im = 0;
  refuses(wrong, ": expected a grid, since the nominal masses forbid the decay, got a width without one. Read the table "
                 "with a newer reader.",
          "a width that the nominal masses forbid is refused without a grid");
  const ParentWidths at(good, good.parents[0]);
  const std::string positive = "mass: expected a finite number > 0 in MeV";
  check.refused<std::invalid_argument>([&] { at.width(0, 0); }, positive, "a mass of 0 is refused");
  check.refused<std::invalid_argument>([&] { at.width(0, couplet::MISSING); }, positive, "a mass that is NaN is refused");
  check.refused<std::invalid_argument>([&] { at.width(0, 1e200); },
                                       "mass: expected one at which widths are finite, got more", "a huge mass is refused");
}

}  // namespace

int main(int argc, char** argv) {
  if (argc == 3 && std::string(argv[1]) == "prefixes") {
    const std::string bytes = couplet::detail::file_bytes(argv[2]);
    for (std::size_t n = 0; n <= 300; ++n) {
      std::printf("%s\n", hex(couplet::sha256(std::string_view(bytes).substr(0, n))).c_str());
    }
    return 0;
  }
  const std::string bytes = couplet::detail::file_bytes(argc > 1 ? argv[1] : "");
  couplet::v1::DecayTables whole;
  if (!whole.ParseFromString(bytes) || whole.parents_size() == 0) return 2;
  couplet::v1::DecayTables small = small_table(whole);
  Checks check;
  digest_vectors(check);
  // Known values: M. Abramowitz, I.A. Stegun, Handbook of Mathematical Functions (1964), Table 26.7; provenance: memory.
  check(std::fabs(chi_square_tail(11.0705, 5) - 0.05) < 1e-5 && std::fabs(chi_square_tail(18.3070, 10) - 0.05) < 1e-5,
        "the tail of the chi-square distribution has its tabled values");
  check(draws_evenly<10>(7, 1, 1) && draws_evenly<3>(7, 2, 1) && draws_evenly<10>(10, 1, 1) &&
            draws_evenly<10>(3, 1, 3) && draws_evenly<10>(30, 2, 3),
        "over all values of a generator each number is drawn equally often");
  equality(check, bytes);
  unknown_fields(check, small);
  const couplet::v1::DecayTables one_row = one_row_table(small);
  for (const Reader& reader : READERS) {
    damage(check, reader, sealed(tiny_table(one_row)));
    messages(check, reader, small);
    draws(check, reader, bytes);
    widths(check, reader, bytes);
  }
  masses(check, bytes);
  width_refusals(check, small);
  // The library would print a line for each text that is none.
  const google::protobuf::LogSilencer silence;
  fuzz(check, one_row.SerializeAsString());
  std::printf("%d passed, %d failed\n", check.passed, check.failed);
  return check.failed == 0 ? 0 : 1;
}
