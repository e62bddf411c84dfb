// Every field of the plain structs as text, to compare what two readers saw.
//
// Structured bindings name all members, so that a field added to a struct and forgotten here does not compile.
// `blanks` counts the fields that are missing, zero or empty: none may be in a table where every field is set.
#ifndef COUPLET_TEST_DUMP_HPP
#define COUPLET_TEST_DUMP_HPP

#include <cmath>
#include <cstdio>

#include "couplet_tables.hpp"

class Dump {
 public:
  std::string text;
  int blanks = 0;

  template <class... Fields>
  void all(const Fields&... fields) {
    text += '{';
    (add(fields), ...);
    text += '}';
  }

  void add(const std::string& s) { field(std::to_string(s.size()) + ':' + s, s.empty()); }
  void add(double x) {
    char hex[64];
    std::snprintf(hex, sizeof hex, "%a", x);
    field(hex, std::isnan(x) || x == 0);
  }
  void add(float x) { add(double{x}); }
  void add(std::uint32_t n) { field(std::to_string(n), n == 0); }
  void add(std::int32_t n) { field(std::to_string(n), n == 0); }
  template <class Enum, std::enable_if_t<std::is_enum_v<Enum>, bool> = true>
  void add(Enum e) {
    add(static_cast<std::int32_t>(e));
  }
  template <class T>
  void add(const std::optional<T>& value) {
    if (value) {
      add(*value);
    } else {
      field("absent", true);
    }
  }
  template <class T>
  void add(const std::vector<T>& list) {
    text += '[';
    if (list.empty()) ++blanks;
    for (const T& item : list) add(item);
    text += ']';
  }

  void add(const couplet::Policies& policies) {
    const auto& [a, b, c, d] = policies;
    all(a, b, c, d);
  }
  void add(const couplet::FlavourAmplitude& amplitude) {
    const auto& [a, b, c, d] = amplitude;
    all(a, b, c, d);
  }
  void add(const couplet::Header& header) {
    const auto& [a, b, c, d, e, f, g, h, i, j, k, l] = header;
    all(a, b, c, d, e, f, g, h, i, j, k, l);
  }
  void add(const couplet::Hadron& hadron) {
    const auto& [a, b, c, d, e, f, g, h, i, j, k, l, m, n, o, p, q, r, s] = hadron;
    all(a, b, c, d, e, f, g, h, i, j, k, l, m, n, o, p, q, r, s);
  }
  void add(const couplet::Daughter& daughter) {
    const auto& [a, b] = daughter;
    all(a, b);
  }
  void add(const couplet::Estimate& estimate) {
    const auto& [a, b, c, d, e, f] = estimate;
    all(a, b, c, d, e, f);
  }
  void add(const couplet::Option& option) {
    const auto& [a, b, c] = option;
    all(a, b, c);
  }
  void add(const couplet::Wave& wave) {
    const auto& [a, b, c, d, e, f, g, h, i, j] = wave;
    all(a, b, c, d, e, f, g, h, i, j);
  }
  void add(const couplet::MassGrid& grid) {
    const auto& [a, b, c, d] = grid;
    all(a, b, c, d);
  }
  void add(const couplet::LineShape& shape) {
    const auto& [a, b, c, d, e, f] = shape;
    all(a, b, c, d, e, f);
  }
  void add(const couplet::Row& row) {
    const auto& [a, b, c, d, e, f, g, h, i, j, k, l, m, n, o, p, q, r, s, t, u, v, w] = row;
    all(a, b, c, d, e, f, g, h, i, j, k, l, m, n, o, p, q, r, s, t, u, v, w);
  }
  void add(const couplet::Parent& parent) {
    const auto& [a, b, c, d, e, f, g, h, i, j] = parent;
    all(a, b, c, d, e, f, g, h, i, j);
  }
  void add(const couplet::Replica& replica) {
    const auto& [a, b, c, d, e, f, g, h] = replica;
    all(a, b, c, d, e, f, g, h);
  }
  void add(const couplet::Tables& tables) {
    const auto& [a, b, c, d, e, f] = tables;
    all(a, b, c, d, e, f);
  }

 private:
  void field(const std::string& shown, bool blank) {
    text += shown + ';';
    if (blank) ++blanks;
  }
};

inline std::string dumped(const couplet::Tables& tables) {
  Dump dump;
  dump.add(tables);
  return dump.text;
}

#endif
