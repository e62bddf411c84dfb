// Tables made for the tests: small ones, ones with every field set, and sealed bytes that are wrong.
#ifndef COUPLET_TEST_MADE_TABLES_HPP
#define COUPLET_TEST_MADE_TABLES_HPP

#include <google/protobuf/message.h>

#include "couplet/v1/decays.pb.h"
#include "couplet_tables.hpp"

// The body with the digest of its bytes as the last field.
inline std::string sealed(const std::string& body) {
  const couplet::Digest digest = couplet::sha256(body);
  return body + "\xc2\x3e\x20" + std::string(digest.begin(), digest.end());
}

inline std::string sealed(couplet::v1::DecayTables message) {
  message.clear_sha256();
  return sealed(message.SerializeAsString());
}

// The first parent with two of its rows, and what they need.
inline couplet::v1::DecayTables small_table(const couplet::v1::DecayTables& whole) {
  couplet::v1::DecayTables small;
  small.set_kind(whole.kind());
  small.mutable_header()->set_schema_minor(whole.header().schema_minor());
  small.mutable_header()->set_convention(whole.header().convention());
  couplet::v1::Parent* parent = small.add_parents();
  *parent = whole.parents(0);
  parent->mutable_rows()->DeleteSubrange(2, parent->rows_size() - 2);
  parent->mutable_rows(0)->set_parts_per_billion(123456789);
  parent->mutable_rows(1)->set_parts_per_billion(1000000000 - 123456789);
  const auto named = [&](const std::string& name) -> const couplet::v1::Hadron& {
    for (const auto& hadron : whole.externals()) {
      if (hadron.name() == name) return hadron;
    }
    for (const auto& other : whole.parents()) {
      if (other.hadron().name() == name) return other.hadron();
    }
    std::abort();
  };
  for (const auto& row : parent->rows()) {
    for (const auto& daughter : row.daughters()) *small.add_externals() = named(daughter.name());
  }
  return small;
}

// Keeps a few points of each curve, so that the table stays small.
inline void shorten(google::protobuf::RepeatedField<float>* points) {
  if (points->size() > 3) points->Truncate(3);
}

inline void shorten(couplet::v1::Hadron& hadron) {
  hadron.clear_content();
  if (!hadron.has_line_shape()) return;
  shorten(hadron.mutable_line_shape()->mutable_distances());
  shorten(hadron.mutable_line_shape()->mutable_cumulative());
}

// Of a small table, one row and what its width needs.
inline couplet::v1::DecayTables one_row_table(couplet::v1::DecayTables table) {
  couplet::v1::Parent& parent = *table.mutable_parents(0);
  parent.mutable_rows()->DeleteSubrange(1, parent.rows_size() - 1);
  parent.mutable_rows(0)->set_parts_per_billion(couplet::WHOLE);
  parent.mutable_rows(0)->clear_measurement();
  parent.mutable_rows(0)->clear_sources();
  shorten(*parent.mutable_hadron());
  for (auto& hadron : *table.mutable_externals()) shorten(hadron);
  if (parent.rows(0).has_grid()) {
    couplet::v1::MassGrid& grid = *parent.mutable_rows(0)->mutable_grid();
    shorten(grid.mutable_distances());
    shorten(grid.mutable_log_widths());
    shorten(grid.mutable_slopes());
  }
  return table;
}

// A table so small that every byte of it can take every value.
inline couplet::v1::DecayTables tiny_table(couplet::v1::DecayTables table) {
  table.clear_externals();
  table.mutable_parents(0)->mutable_hadron()->clear_line_shape();
  table.mutable_parents(0)->mutable_rows(0)->clear_grid();
  return table;
}

// Sets every field of a message and of those in it, each list to one item, each number to another value. Enums get a
// number the schema does not know yet.
inline void set_every_field(google::protobuf::Message& message, int& count) {
  using google::protobuf::FieldDescriptor;
  const auto* reflection = message.GetReflection();
  for (int k = 0; k < message.GetDescriptor()->field_count(); ++k) {
    const FieldDescriptor* f = message.GetDescriptor()->field(k);
    const int n = ++count;
    const bool many = f->is_repeated();
    switch (f->cpp_type()) {
      case FieldDescriptor::CPPTYPE_INT32:
        many ? reflection->AddInt32(&message, f, -n) : reflection->SetInt32(&message, f, -n);
        break;
      case FieldDescriptor::CPPTYPE_UINT32:
        many ? reflection->AddUInt32(&message, f, n) : reflection->SetUInt32(&message, f, n);
        break;
      case FieldDescriptor::CPPTYPE_DOUBLE:
        many ? reflection->AddDouble(&message, f, n + 0.1) : reflection->SetDouble(&message, f, n + 0.1);
        break;
      case FieldDescriptor::CPPTYPE_FLOAT: {
        const float value = static_cast<float>(n) + 0.5f;
        many ? reflection->AddFloat(&message, f, value) : reflection->SetFloat(&message, f, value);
        break;
      }
      case FieldDescriptor::CPPTYPE_BOOL:
        many ? reflection->AddBool(&message, f, true) : reflection->SetBool(&message, f, true);
        break;
      case FieldDescriptor::CPPTYPE_ENUM:
        many ? reflection->AddEnumValue(&message, f, 1000 + n) : reflection->SetEnumValue(&message, f, 1000 + n);
        break;
      case FieldDescriptor::CPPTYPE_STRING:
        many ? reflection->AddString(&message, f, "text " + std::to_string(n))
             : reflection->SetString(&message, f, "text " + std::to_string(n));
        break;
      case FieldDescriptor::CPPTYPE_MESSAGE:
        set_every_field(many ? *reflection->AddMessage(&message, f) : *reflection->MutableMessage(&message, f), count);
        break;
      default:
        std::abort();
    }
  }
}

// A table where every field of every message is set, as far as the checks of a reader leave a choice.
inline couplet::v1::DecayTables full_table() {
  couplet::v1::DecayTables full;
  int count = 0;
  set_every_field(full, count);
  full.set_kind(std::string(couplet::KIND));
  full.mutable_header()->set_schema_minor(couplet::SCHEMA_MINOR);
  full.mutable_header()->set_convention(std::string(couplet::CONVENTION));
  full.mutable_parents(0)->mutable_rows(0)->set_parts_per_billion(couplet::WHOLE);
  return full;
}

#endif
