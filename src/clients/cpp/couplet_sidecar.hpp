// A client of `couplet serve`: what an event generator asks of the sidecar. C++17, with Debian's gRPC.
//
// Needs the classes that protoc makes from the .proto files (packages protobuf-compiler-grpc libgrpc++-dev):
//
//     plugin=$(command -v grpc_cpp_plugin)
//     protoc -I proto --cpp_out=OUT --grpc_out=OUT --plugin=protoc-gen-grpc="$plugin" FILES
//
// with FILES proto/couplet/v1/{exact,decays,factors,couplings,sidecar}.proto.
#ifndef COUPLET_SIDECAR_HPP
#define COUPLET_SIDECAR_HPP

#include <grpcpp/grpcpp.h>

#include <chrono>
#include <cstdint>
#include <memory>
#include <optional>
#include <stdexcept>
#include <string>
#include <vector>

#include "couplet/v1/sidecar.grpc.pb.h"

namespace couplet::sidecar {

// The sidecar does not serve the table this job was prepared for, or in a convention we do not know.
class WrongTable : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

// A call that the sidecar refused or that did not reach it.
class CallFailed : public std::runtime_error {
 public:
  explicit CallFailed(const grpc::Status& status)
      : std::runtime_error(status.error_message()), code(status.error_code()) {}
  const grpc::StatusCode code;
};

inline std::string hex(const std::string& bytes) {
  static const char* digits = "0123456789abcdef";
  std::string text;
  for (const char byte : bytes) {
    text += digits[static_cast<unsigned char>(byte) >> 4];
    text += digits[static_cast<unsigned char>(byte) & 15];
  }
  return text;
}

// Widths at the masses of one batch: fractions[k][row] belongs to mass k.
struct Widths {
  std::vector<double> totals;
  std::vector<std::vector<double>> fractions;
};

class WidthsStream;

// A connection that is bound to one decay table from the start; every answer is checked to be from it.
class Sidecar {
 public:
  // address: HOST:PORT or unix:PATH. sha256: the table's digest in hexadecimal; empty: the only one served.
  explicit Sidecar(const std::string& address, const std::string& sha256 = "",
                   const std::shared_ptr<grpc::ChannelCredentials>& credentials = grpc::InsecureChannelCredentials())
      : stub_(v1::SidecarService::NewStub(grpc::CreateChannel(address, credentials))) {
    v1::ListTablesResponse listing;
    call(&v1::SidecarService::Stub::ListTables, v1::ListTablesRequest(), listing);
    std::string served;
    int matches = 0;
    for (const v1::ServedTable& table : listing.tables()) {
      if (table.kind() != "couplet.v1.DecayTables") continue;
      served += " " + hex(table.sha256()) + " (" + table.file() + ")";
      if (!sha256.empty() && hex(table.sha256()) != sha256) continue;
      table_ = table;
      ++matches;
    }
    if (matches != 1) throw WrongTable("expected " + (sha256.empty() ? "one decay table" : sha256) + ", got" + served);
    if (table_.header().convention() != "deswart-v1")
      throw WrongTable("unknown phase convention " + table_.header().convention());
  }

  const v1::ServedTable& table() const { return table_; }

  // Rows and daughters of a parent; widths, fractions and draws are in the order of the rows.
  v1::GetDecayTableResponse decay_table(const std::string& parent) const {
    v1::GetDecayTableRequest request;
    *request.mutable_parent() = key(parent);
    v1::GetDecayTableResponse answer;
    call(&v1::SidecarService::Stub::GetDecayTable, request, answer);
    return answer;
  }

  // Widths in MeV and fractions of every row at one mass in MeV.
  v1::EvaluateWidthsResponse widths(const std::string& parent, double mass) const {
    v1::EvaluateWidthsRequest request;
    *request.mutable_parent() = key(parent);
    request.set_mass(mass);
    v1::EvaluateWidthsResponse answer;
    call(&v1::SidecarService::Stub::EvaluateWidths, request, answer);
    return answer;
  }

  // Indices of rows drawn at the nominal mass; the same seed and batch give the same ones.
  std::vector<int> draw(const std::string& parent, std::uint64_t seed, std::uint64_t batch, unsigned count) const {
    v1::DrawChannelsRequest request = draws(parent, seed, batch);
    request.set_count(count);
    return drawn(request);
  }

  // One row for each mass in MeV; -1 where every row is closed.
  std::vector<int> draw_at(const std::string& parent, std::uint64_t seed, std::uint64_t batch,
                           const std::vector<double>& masses) const {
    v1::DrawChannelsRequest request = draws(parent, seed, batch);
    request.mutable_masses()->Assign(masses.begin(), masses.end());
    return drawn(request);
  }

  // A stream of width queries for one parent that stays open for a job.
  WidthsStream stream_widths(const std::string& parent) const;

  v1::ParentKey key(const std::string& parent) const {
    v1::ParentKey key;
    key.set_table_sha256(table_.sha256());
    key.set_name(parent);
    return key;
  }

  void require_table(const std::string& sha256) const {
    if (sha256 != table_.sha256())
      throw WrongTable("expected an answer from table " + hex(table_.sha256()) + ", got one from " + hex(sha256));
  }

 private:
  friend class WidthsStream;

  template <class Request, class Answer>
  void call(grpc::Status (v1::SidecarService::Stub::*method)(grpc::ClientContext*, const Request&, Answer*),
            const Request& request, Answer& answer) const {
    grpc::ClientContext context;
    context.set_deadline(std::chrono::system_clock::now() + std::chrono::seconds(10));
    const grpc::Status status = (stub_.get()->*method)(&context, request, &answer);
    if (!status.ok()) throw CallFailed(status);
  }

  v1::DrawChannelsRequest draws(const std::string& parent, std::uint64_t seed, std::uint64_t batch) const {
    v1::DrawChannelsRequest request;
    *request.mutable_parent() = key(parent);
    request.set_seed(seed);
    request.set_batch(batch);
    return request;
  }

  std::vector<int> drawn(const v1::DrawChannelsRequest& request) const {
    v1::DrawChannelsResponse answer;
    call(&v1::SidecarService::Stub::DrawChannels, request, answer);
    require_table(answer.table_sha256());
    return {answer.rows().begin(), answer.rows().end()};
  }

  std::unique_ptr<v1::SidecarService::Stub> stub_;
  v1::ServedTable table_;
};

// Batches of masses may be sent ahead of their answers, which come in the same order. Send at most some tens ahead: the
// sidecar stops reading from a client that does not read.
class WidthsStream {
 public:
  WidthsStream(const Sidecar& sidecar, const std::string& parent)
      : sidecar_(sidecar),
        rows_(static_cast<std::size_t>(sidecar.decay_table(parent).parent().rows_size())),
        context_(std::make_unique<grpc::ClientContext>()),
        stream_(sidecar.stub_->EvaluateWidthsStream(context_.get())) {
    *request_.mutable_parent() = sidecar.key(parent);
  }

  void send(const std::vector<double>& masses) {
    request_.mutable_masses()->Assign(masses.begin(), masses.end());
    if (!stream_->Write(request_)) fail();
  }

  Widths receive() {
    v1::EvaluateWidthsStreamResponse answer;
    if (!stream_->Read(&answer)) fail();
    sidecar_.require_table(answer.table_sha256());
    Widths widths;
    widths.totals.assign(answer.total_widths().begin(), answer.total_widths().end());
    for (std::size_t k = 0; k < widths.totals.size(); ++k) {
      const auto first = answer.fractions().begin() + static_cast<std::ptrdiff_t>(k * rows_);
      widths.fractions.emplace_back(first, first + static_cast<std::ptrdiff_t>(rows_));
    }
    return widths;
  }

  // No more requests; throws if the sidecar ended the stream otherwise.
  void finish() {
    stream_->WritesDone();
    const grpc::Status status = stream_->Finish();
    if (!status.ok()) throw CallFailed(status);
  }

 private:
  [[noreturn]] void fail() {
    const grpc::Status status = stream_->Finish();
    throw CallFailed(status.ok() ? grpc::Status(grpc::StatusCode::UNAVAILABLE, "the stream has ended") : status);
  }

  const Sidecar& sidecar_;
  std::size_t rows_;
  // The context has to outlive the stream.
  std::unique_ptr<grpc::ClientContext> context_;
  std::unique_ptr<grpc::ClientReaderWriter<v1::EvaluateWidthsStreamRequest, v1::EvaluateWidthsStreamResponse>> stream_;
  v1::EvaluateWidthsStreamRequest request_;
};

inline WidthsStream Sidecar::stream_widths(const std::string& parent) const { return WidthsStream(*this, parent); }

}  // namespace couplet::sidecar

#endif
