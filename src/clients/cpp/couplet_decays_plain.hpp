// Reads decay tables written by Couplet without any protobuf library: C++17 and its standard library, nothing else.
//
//     g++ -std=c++17 -I src/clients/cpp program.cpp
//
// It knows as much of the wire format of Protocol Buffers as these tables need (source: the public description
// "Encoding" of Protocol Buffers; provenance: memory). Fields it does not know are skipped; every read is checked
// against the end of the bytes it belongs to.
#ifndef COUPLET_DECAYS_PLAIN_HPP
#define COUPLET_DECAYS_PLAIN_HPP

#include <cstring>

#include "couplet_tables.hpp"
#include "couplet_widths.hpp"

namespace couplet::plain {

namespace detail {

// The bytes are no message; turned into Damaged, with the file's name, where it is known.
struct NoMessage {};

// The fields of one message, one after another. `next` goes to a field; one of `get`, `zigzag` or `skip` takes it.
class Wire {
 public:
  explicit Wire(std::string_view bytes) : bytes_(bytes) {}

  // Goes to the next field; false at the end of the message.
  bool next() {
    if (bytes_.empty()) return false;
    const std::uint64_t tag = varint(5);
    type_ = static_cast<Type>(tag & 7);
    number_ = static_cast<std::uint32_t>(tag) >> 3;
    if (number_ == 0) throw NoMessage{};
    return true;
  }

  std::uint32_t number() const { return number_; }

  // Each of these takes the field if it has the wire type of such a value, and skips it like an unknown one otherwise.
  void get(std::string& value) {
    if (is(Type::bytes)) value = std::string(block());
  }
  void get(std::optional<std::string>& value) {
    if (is(Type::bytes)) value = std::string(block());
  }
  void get(std::vector<std::string>& values) {
    if (is(Type::bytes)) values.emplace_back(block());
  }
  void get(double& value) {
    if (is(Type::fixed64)) value = fixed64();
  }
  void get(std::optional<double>& value) {
    if (is(Type::fixed64)) value = fixed64();
  }
  void get(std::uint32_t& value) {
    if (is(Type::varint)) value = static_cast<std::uint32_t>(varint());
  }
  void get(std::optional<std::uint32_t>& value) {
    if (is(Type::varint)) value = static_cast<std::uint32_t>(varint());
  }
  void zigzag(std::optional<std::int32_t>& value) {
    if (!is(Type::varint)) return;
    value = zigzag();
  }
  void zigzag(std::vector<std::int32_t>& values) {
    list(values, Type::varint, [](Wire& wire) { return wire.zigzag(); });
  }
  template <class Enum, std::enable_if_t<std::is_enum_v<Enum>, bool> = true>
  void get(Enum& value) {
    if (is(Type::varint)) value = static_cast<Enum>(static_cast<std::int32_t>(varint()));
  }
  // A list of enums comes as one block or as one field each.
  template <class Enum, std::enable_if_t<std::is_enum_v<Enum>, bool> = true>
  void get(std::vector<Enum>& values) {
    list(values, Type::varint, [](Wire& wire) { return static_cast<Enum>(static_cast<std::int32_t>(wire.varint())); });
  }
  // So does a list of numbers.
  void get(std::vector<float>& values) {
    list(values, Type::fixed32, [](Wire& wire) { return wire.fixed<float, std::uint32_t>(); });
  }
  void get(std::vector<double>& values) {
    list(values, Type::fixed64, [](Wire& wire) { return wire.fixed<double, std::uint64_t>(); });
  }
  // A message given twice is merged, as the format has it: `read` only writes the fields it meets.
  template <class Message, std::enable_if_t<std::is_class_v<Message>, bool> = true>
  void get(Message& message) {
    if (is(Type::bytes)) read(message, Wire(block()));
  }
  template <class Message, std::enable_if_t<std::is_class_v<Message>, bool> = true>
  void get(std::optional<Message>& message) {
    if (is(Type::bytes)) read(message ? *message : message.emplace(), Wire(block()));
  }
  template <class Message, std::enable_if_t<std::is_class_v<Message>, bool> = true>
  void get(std::vector<Message>& messages) {
    if (is(Type::bytes)) read(messages.emplace_back(), Wire(block()));
  }

  void skip() { skip(DEEPEST_GROUP); }

 private:
  enum class Type : unsigned { varint = 0, fixed64 = 1, bytes = 2, group = 3, group_end = 4, fixed32 = 5 };
  static constexpr int DEEPEST_GROUP = 100;

  bool is(Type type) {
    if (type_ == type) return true;
    skip();
    return false;
  }

  template <class Value, class Take>
  void list(std::vector<Value>& values, Type of_one, Take take_one) {
    if (type_ == Type::bytes) {
      Wire packed(block());
      while (!packed.bytes_.empty()) values.push_back(take_one(packed));
    } else if (is(of_one)) {
      values.push_back(take_one(*this));
    }
  }

  std::string_view take(std::uint64_t length) {
    if (length > bytes_.size()) throw NoMessage{};
    const std::string_view taken = bytes_.substr(0, static_cast<std::size_t>(length));
    bytes_.remove_prefix(taken.size());
    return taken;
  }

  std::uint64_t varint(int longest = 10) {
    std::uint64_t value = 0;
    for (int i = 0; i < longest; ++i) {
      const auto byte = static_cast<unsigned char>(take(1)[0]);
      value |= std::uint64_t{byte & 0x7fu} << (7 * i);
      if (byte < 0x80) return value;
    }
    throw NoMessage{};
  }

  std::string_view block() { return take(varint()); }

  std::int32_t zigzag() {
    const auto n = static_cast<std::uint32_t>(varint());
    return static_cast<std::int32_t>((n >> 1) ^ (0u - (n & 1u)));
  }

  double fixed64() { return fixed<double, std::uint64_t>(); }

  // A number of the format, lowest byte first.
  template <class Number, class Bits>
  Number fixed() {
    static_assert(sizeof(Number) == sizeof(Bits) && std::numeric_limits<Number>::is_iec559, "IEEE 754 is needed");
    const std::string_view bytes = take(sizeof(Bits));
    Bits bits = 0;
    for (std::size_t i = bytes.size(); i-- > 0;) bits = bits << 8 | static_cast<unsigned char>(bytes[i]);
    Number value;
    std::memcpy(&value, &bits, sizeof value);
    return value;
  }

  void skip(int groups_left) {
    switch (type_) {
      case Type::varint: varint(); return;
      case Type::fixed64: take(8); return;
      case Type::bytes: block(); return;
      case Type::fixed32: take(4); return;
      case Type::group: {
        const std::uint32_t opened = number_;
        if (groups_left == 0) throw NoMessage{};
        while (next()) {
          if (type_ != Type::group_end) {
            skip(groups_left - 1);
          } else if (number_ == opened) {
            return;
          } else {
            throw NoMessage{};
          }
        }
        throw NoMessage{};
      }
      case Type::group_end: break;
    }
    throw NoMessage{};
  }

  std::string_view bytes_;
  std::uint32_t number_ = 0;
  Type type_ = Type::varint;
};

// Field numbers are the ones of proto/couplet/v1/decays.proto.

inline void read(Policies& p, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(p.conflicts); break;
      case 2: wire.get(p.neutral_kaons); break;
      case 3: wire.get(p.antiparticles); break;
      case 4: wire.get(p.daughters); break;
      default: wire.skip();
    }
  }
}

inline void read(Header& h, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(h.schema_minor); break;
      case 2: wire.get(h.producer); break;
      case 3: wire.get(h.title); break;
      case 4: wire.get(h.study_text); break;
      case 5: wire.get(h.convention); break;
      case 6: wire.get(h.multiplicity_rule); break;
      case 7: wire.get(h.unit); break;
      case 8: wire.get(h.editions); break;
      case 9: wire.get(h.cautions); break;
      case 10: wire.get(h.notes); break;
      case 11: wire.get(h.breaking); break;
      case 12: wire.get(h.policies); break;
      default: wire.skip();
    }
  }
}

inline void read(LineShape& s, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(s.low); break;
      case 2: wire.get(s.high); break;
      case 3: wire.get(s.normalisation); break;
      case 4: wire.get(s.distances); break;
      case 5: wire.get(s.cumulative); break;
      case 6: wire.get(s.power); break;
      default: wire.skip();
    }
  }
}

inline void read(Hadron& h, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(h.name); break;
      case 2: wire.zigzag(h.mc_number); break;
      case 3: wire.get(h.mass); break;
      case 4: wire.get(h.mass_error); break;
      case 5: wire.get(h.width); break;
      case 6: wire.get(h.width_error); break;
      case 7: wire.get(h.two_j); break;
      case 8: wire.zigzag(h.parity); break;
      case 9: wire.zigzag(h.charge); break;
      case 10: wire.zigzag(h.baryon_number); break;
      case 11: wire.zigzag(h.strangeness); break;
      case 12: wire.zigzag(h.charm); break;
      case 13: wire.get(h.antiparticle); break;
      case 15: wire.get(h.notes); break;
      case 16: wire.get(h.line_shape); break;
      case 17: wire.get(h.lifetime); break;
      case 18: wire.zigzag(h.mc_aliases); break;
      case 19: wire.get(h.mass_plus); break;
      case 20: wire.get(h.mass_minus); break;
      default: wire.skip();
    }
  }
}

inline void read(Daughter& d, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(d.name); break;
      case 2: wire.zigzag(d.mc_number); break;
      default: wire.skip();
    }
  }
}

inline void read(Estimate& e, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(e.value); break;
      case 2: wire.get(e.plus); break;
      case 3: wire.get(e.minus); break;
      case 4: wire.get(e.breaking); break;
      case 5: wire.get(e.branch); break;
      case 6: wire.get(e.model); break;
      default: wire.skip();
    }
  }
}

inline void read(Option& o, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(o.name); break;
      case 2: wire.get(o.value); break;
      case 3: wire.get(o.unit); break;
      default: wire.skip();
    }
  }
}

inline void read(Wave& w, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(w.two_l); break;
      case 2: wire.get(w.two_s); break;
      case 3: wire.get(w.re); break;
      case 4: wire.get(w.im); break;
      case 5: wire.get(w.phase); break;
      case 6: wire.get(w.model); break;
      case 7: wire.get(w.options); break;
      case 8: wire.get(w.flavour_amplitude); break;
      case 9: wire.get(w.kinematic_factor); break;
      case 10: wire.get(w.unit); break;
      default: wire.skip();
    }
  }
}

inline void read(MassGrid& g, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(g.threshold); break;
      case 2: wire.get(g.distances); break;
      case 3: wire.get(g.log_widths); break;
      case 4: wire.get(g.slopes); break;
      default: wire.skip();
    }
  }
}

inline void read(FlavourAmplitude& f, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(f.row); break;
      case 2: wire.get(f.projection); break;
      case 3: wire.get(f.re); break;
      case 4: wire.get(f.im); break;
      default: wire.skip();
    }
  }
}

inline void read(Row& r, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(r.id); break;
      case 2: wire.get(r.daughters); break;
      case 3: wire.get(r.parts_per_billion); break;
      case 4: wire.get(r.fraction); break;
      case 5: wire.get(r.width); break;
      case 6: wire.get(r.origin); break;
      case 7: wire.get(r.flags); break;
      case 8: wire.get(r.sources); break;
      case 10: wire.get(r.kinematics); break;
      case 11: wire.get(r.threshold); break;
      case 12: wire.get(r.momentum); break;
      case 13: wire.get(r.identical_factor); break;
      case 14: wire.get(r.waves); break;
      case 15: wire.get(r.integrated_fraction); break;
      case 16: wire.get(r.grid); break;
      case 17: wire.get(r.isospin_channel); break;
      case 18: wire.get(r.isospin_coefficient); break;
      case 19: wire.get(r.power); break;
      case 20: wire.get(r.unadjusted_fraction); break;
      case 21: wire.get(r.unadjusted_width); break;
      case 22: wire.get(r.kaon_flavours); break;
      case 23: wire.get(r.replica_ratios); break;
      case 24: wire.get(r.integrated); break;
      default: wire.skip();
    }
  }
}

inline void read(Parent& p, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(p.hadron); break;
      case 2: wire.get(p.multiplet); break;
      case 3: wire.get(p.total_width); break;
      case 4: wire.get(p.total_width_error); break;
      case 5: wire.get(p.total_origin); break;
      case 6: wire.get(p.rows); break;
      case 7: wire.get(p.warnings); break;
      case 8: wire.get(p.total_width_plus); break;
      case 9: wire.get(p.total_width_minus); break;
      case 10: wire.get(p.total_source); break;
      default: wire.skip();
    }
  }
}

inline void read(Replica& r, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(r.part); break;
      case 2: wire.get(r.minimum); break;
      case 3: wire.get(r.chi2); break;
      case 4: wire.get(r.model); break;
      case 5: wire.get(r.options); break;
      case 6: wire.get(r.seed); break;
      case 7: wire.get(r.draw); break;
      case 8: wire.get(r.unreachable_rows); break;
      default: wire.skip();
    }
  }
}

inline void read(Tables& t, Wire wire) {
  while (wire.next()) {
    switch (wire.number()) {
      case 1: wire.get(t.kind); break;
      case 2: wire.get(t.header); break;
      case 4: wire.get(t.parents); break;
      case 5: wire.get(t.externals); break;
      case 6: wire.get(t.left_open); break;
      case 7: wire.get(t.replicas); break;
      default: wire.skip();
    }
  }
}

}  // namespace detail

// The tables in the bytes of a file, after checking digest, version, convention and sums.
// `name` is the file's, for messages. Throws NotOurs or Damaged.
inline Tables tables_from_bytes(std::string_view bytes, const std::string& name) {
  couplet::detail::check_seal(bytes, name);
  Tables tables;
  try {
    detail::read(tables, detail::Wire(bytes));
  } catch (const detail::NoMessage&) {
    couplet::detail::refuse_bytes(name);
  }
  couplet::detail::check_content(tables, name);
  return tables;
}

// The tables in a file. Throws NotOurs or Damaged, and std::system_error if the file cannot be read.
inline Tables read_tables(const std::string& path) {
  return tables_from_bytes(couplet::detail::file_bytes(path), path);
}

}  // namespace couplet::plain

#endif
