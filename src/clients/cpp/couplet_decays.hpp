// Reads decay tables written by Couplet, with the classes that protoc makes from its schema.
//
//     protoc -I proto --cpp_out=OUT proto/couplet/v1/exact.proto proto/couplet/v1/decays.proto
//     g++ -std=c++17 -I OUT -I src/clients/cpp program.cpp OUT/couplet/v1/*.pb.cc $(pkg-config --cflags --libs protobuf)
//
// C++17; tested with Debian's protobuf 3.21. Where protobuf versions clash, use couplet_decays_plain.hpp instead.
#ifndef COUPLET_DECAYS_HPP
#define COUPLET_DECAYS_HPP

#include "couplet/v1/decays.pb.h"
#include "couplet_tables.hpp"
#include "couplet_widths.hpp"

namespace couplet::with_protobuf {

namespace detail {

// A field's value, or nothing where it is absent.
template <class T>
std::optional<T> maybe(bool present, const T& value) {
  return present ? std::optional<T>(value) : std::nullopt;
}

inline double number(bool present, double value) { return present ? value : MISSING; }

template <class T, class Repeated>
std::vector<T> list(const Repeated& repeated) {
  return std::vector<T>(repeated.begin(), repeated.end());
}

// A list with each item turned into a plain struct.
template <class T, class Repeated, class Plain>
std::vector<T> list(const Repeated& repeated, Plain plain) {
  std::vector<T> out;
  for (const auto& item : repeated) out.push_back(plain(item));
  return out;
}

inline Header header(const v1::Header& m) {
  Header h;
  h.schema_minor = maybe(m.has_schema_minor(), m.schema_minor());
  h.producer = m.producer();
  h.title = m.title();
  h.study_text = m.study_text();
  h.convention = m.convention();
  h.multiplicity_rule = m.multiplicity_rule();
  h.unit = m.unit();
  h.editions = list<std::string>(m.editions());
  h.cautions = list<std::string>(m.cautions());
  h.notes = list<std::string>(m.notes());
  h.breaking = number(m.has_breaking(), m.breaking());
  const v1::Policies& p = m.policies();
  h.policies = {p.conflicts(), p.neutral_kaons(), p.antiparticles(), p.daughters()};
  return h;
}

inline LineShape line_shape(const v1::LineShape& m) {
  LineShape s;
  s.low = number(m.has_low(), m.low());
  s.high = number(m.has_high(), m.high());
  s.normalisation = number(m.has_normalisation(), m.normalisation());
  s.distances = list<float>(m.distances());
  s.cumulative = list<float>(m.cumulative());
  s.power = number(m.has_power(), m.power());
  return s;
}

inline Hadron hadron(const v1::Hadron& m) {
  Hadron h;
  h.name = m.name();
  h.mc_number = maybe(m.has_mc_number(), m.mc_number());
  h.mass = number(m.has_mass(), m.mass());
  h.mass_error = number(m.has_mass_error(), m.mass_error());
  h.width = maybe(m.has_width(), m.width());
  h.width_error = maybe(m.has_width_error(), m.width_error());
  h.two_j = maybe(m.has_two_j(), m.two_j());
  h.parity = maybe(m.has_parity(), m.parity());
  h.charge = maybe(m.has_charge(), m.charge());
  h.baryon_number = maybe(m.has_baryon_number(), m.baryon_number());
  h.strangeness = maybe(m.has_strangeness(), m.strangeness());
  h.charm = maybe(m.has_charm(), m.charm());
  h.antiparticle = maybe(m.has_antiparticle(), m.antiparticle());
  h.notes = list<std::string>(m.notes());
  if (m.has_line_shape()) h.line_shape = line_shape(m.line_shape());
  h.lifetime = maybe(m.has_lifetime(), m.lifetime());
  h.mc_aliases = list<std::int32_t>(m.mc_aliases());
  h.mass_plus = maybe(m.has_mass_plus(), m.mass_plus());
  h.mass_minus = maybe(m.has_mass_minus(), m.mass_minus());
  return h;
}

inline Daughter daughter(const v1::Daughter& m) { return {m.name(), maybe(m.has_mc_number(), m.mc_number())}; }

inline Estimate estimate(const v1::Estimate& m) {
  return {number(m.has_value(), m.value()), number(m.has_plus(), m.plus()), number(m.has_minus(), m.minus()),
          number(m.has_breaking(), m.breaking()), maybe(m.has_branch(), m.branch()), maybe(m.has_model(), m.model())};
}

inline Option option(const v1::Option& m) { return {m.name(), number(m.has_value(), m.value()), m.unit()}; }

inline Wave wave(const v1::Wave& m) {
  Wave w;
  w.two_l = m.two_l();
  w.two_s = m.two_s();
  w.re = number(m.has_re(), m.re());
  w.im = number(m.has_im(), m.im());
  w.phase = static_cast<Phase>(m.phase());
  w.model = m.model();
  w.options = list<Option>(m.options(), option);
  w.flavour_amplitude = number(m.has_flavour_amplitude(), m.flavour_amplitude());
  w.kinematic_factor = number(m.has_kinematic_factor(), m.kinematic_factor());
  w.unit = m.unit();
  return w;
}

inline MassGrid grid(const v1::MassGrid& m) {
  return {number(m.has_threshold(), m.threshold()), list<float>(m.distances()), list<float>(m.log_widths()),
          list<float>(m.slopes())};
}

inline FlavourAmplitude flavour_amplitude(const v1::FlavourAmplitude& m) {
  return {m.row(), number(m.has_projection(), m.projection()), list<double>(m.re()), list<double>(m.im())};
}

inline Row row(const v1::Row& m) {
  Row r;
  r.id = m.id();
  r.daughters = list<Daughter>(m.daughters(), daughter);
  r.parts_per_billion = m.parts_per_billion();
  r.fraction = estimate(m.fraction());
  r.width = estimate(m.width());
  r.origin = static_cast<Origin>(m.origin());
  r.flags = list<Flag>(m.flags(), [](int flag) { return static_cast<Flag>(flag); });
  r.sources = list<std::string>(m.sources());
  r.kinematics = static_cast<Kinematics>(m.kinematics());
  r.threshold = number(m.has_threshold(), m.threshold());
  r.momentum = number(m.has_momentum(), m.momentum());
  r.identical_factor = number(m.has_identical_factor(), m.identical_factor());
  r.waves = list<Wave>(m.waves(), wave);
  r.integrated_fraction = maybe(m.has_integrated_fraction(), m.integrated_fraction());
  if (m.has_grid()) r.grid = grid(m.grid());
  r.isospin_channel = m.isospin_channel();
  r.isospin_coefficient = maybe(m.has_isospin_coefficient(), m.isospin_coefficient());
  r.power = maybe(m.has_power(), m.power());
  if (m.has_unadjusted_fraction()) r.unadjusted_fraction = estimate(m.unadjusted_fraction());
  if (m.has_unadjusted_width()) r.unadjusted_width = estimate(m.unadjusted_width());
  r.kaon_flavours = list<FlavourAmplitude>(m.kaon_flavours(), flavour_amplitude);
  r.replica_ratios = list<float>(m.replica_ratios());
  if (m.has_integrated()) r.integrated = estimate(m.integrated());
  return r;
}

inline Replica replica(const v1::Replica& m) {
  Replica r;
  r.part = static_cast<ReplicaPart>(m.part());
  r.minimum = maybe(m.has_minimum(), m.minimum());
  r.chi2 = number(m.has_chi2(), m.chi2());
  r.model = m.model();
  r.options = list<Option>(m.options(), option);
  r.seed = maybe(m.has_seed(), m.seed());
  r.draw = maybe(m.has_draw(), m.draw());
  r.unreachable_rows = maybe(m.has_unreachable_rows(), m.unreachable_rows());
  return r;
}

inline Parent parent(const v1::Parent& m) {
  Parent p;
  p.hadron = hadron(m.hadron());
  p.multiplet = m.multiplet();
  p.total_width = number(m.has_total_width(), m.total_width());
  p.total_width_error = number(m.has_total_width_error(), m.total_width_error());
  p.total_origin = static_cast<TotalOrigin>(m.total_origin());
  p.rows = list<Row>(m.rows(), row);
  p.warnings = list<std::string>(m.warnings());
  p.total_width_plus = maybe(m.has_total_width_plus(), m.total_width_plus());
  p.total_width_minus = maybe(m.has_total_width_minus(), m.total_width_minus());
  p.total_source = m.total_source();
  return p;
}

}  // namespace detail

// The tables in the bytes of a file, after checking digest, version, convention and sums.
// `name` is the file's, for messages. Throws NotOurs or Damaged.
inline Tables tables_from_bytes(std::string_view bytes, const std::string& name) {
  couplet::detail::check_seal(bytes, name);
  v1::DecayTables message;
  const bool fits = bytes.size() <= static_cast<std::size_t>(std::numeric_limits<int>::max());
  if (!fits || !message.ParseFromArray(bytes.data(), static_cast<int>(bytes.size()))) {
    couplet::detail::refuse_bytes(name);
  }
  Tables tables;
  tables.kind = message.kind();
  tables.header = detail::header(message.header());
  tables.parents = detail::list<Parent>(message.parents(), detail::parent);
  tables.externals = detail::list<Hadron>(message.externals(), detail::hadron);
  tables.left_open = detail::list<std::string>(message.left_open());
  tables.replicas = detail::list<Replica>(message.replicas(), detail::replica);
  couplet::detail::check_content(tables, name);
  return tables;
}

// The tables in a file. Throws NotOurs or Damaged, and std::system_error if the file cannot be read.
inline Tables read_tables(const std::string& path) {
  return tables_from_bytes(couplet::detail::file_bytes(path), path);
}

}  // namespace couplet::with_protobuf

#endif
