// Load on one gRPC method, the same bytes again and again, by the C++ client; prints one line of JSON.
//
//     load-client ADDRESS PATH unary|stream CONCURRENCY SECONDS REQUEST_HEX
//
// Messages stay bytes, as in load-client.ts: what is compared is the servers.
#include <grpcpp/grpcpp.h>
#include <grpcpp/impl/client_unary_call.h>
#include <grpcpp/support/byte_buffer.h>
#include <grpcpp/support/sync_stream.h>

#include <algorithm>
#include <atomic>
#include <chrono>
#include <cstdio>
#include <deque>
#include <mutex>
#include <string>
#include <thread>
#include <vector>

using Clock = std::chrono::steady_clock;
using grpc::ByteBuffer;

static std::string unhex(const std::string& text) {
  std::string bytes;
  for (size_t k = 0; k + 1 < text.size(); k += 2) bytes.push_back(char(std::stoi(text.substr(k, 2), nullptr, 16)));
  return bytes;
}

int main(int argc, char** argv) {
  if (argc != 7) return 2;
  const std::string address = argv[1], path = argv[2], mode = argv[3], bytes = unhex(argv[6]);
  const int concurrency = std::stoi(argv[4]);
  const double seconds = std::stod(argv[5]);
  auto channel = grpc::CreateChannel(address, grpc::InsecureChannelCredentials());
  grpc::Slice slice(bytes);
  const ByteBuffer request(&slice, 1);
  const auto start = Clock::now() + std::chrono::seconds(1);
  const auto end = start + std::chrono::duration_cast<Clock::duration>(std::chrono::duration<double>(seconds));
  std::vector<double> latencies;
  std::mutex mutex;
  std::atomic<long> answers{0};
  auto note = [&](std::vector<double>& own, Clock::time_point began) {
    const auto now = Clock::now();
    answers++;
    if (began >= start && now <= end) own.push_back(std::chrono::duration<double, std::milli>(now - began).count());
    return now < end;
  };
  if (mode == "stream") {
    grpc::internal::RpcMethod method(path.c_str(), grpc::internal::RpcMethod::BIDI_STREAMING, channel);
    grpc::ClientContext context;
    std::unique_ptr<grpc::ClientReaderWriter<ByteBuffer, ByteBuffer>> call(
        grpc::internal::ClientReaderWriterFactory<ByteBuffer, ByteBuffer>::Create(channel.get(), method, &context));
    std::deque<Clock::time_point> began;
    auto ask = [&] { began.push_back(Clock::now()); return call->Write(request); };
    for (int k = 0; k < concurrency; k++) if (!ask()) return 1;
    ByteBuffer answer;
    while (!began.empty() && call->Read(&answer)) {
      const auto first = began.front();
      began.pop_front();
      if (note(latencies, first) && !ask()) return 1;
    }
    call->WritesDone();
    if (!call->Finish().ok()) return 1;
  } else {
    std::vector<std::thread> threads;
    bool failed = false;
    for (int k = 0; k < concurrency; k++) threads.emplace_back([&] {
      grpc::internal::RpcMethod method(path.c_str(), grpc::internal::RpcMethod::NORMAL_RPC, channel);
      std::vector<double> own;
      for (;;) {
        grpc::ClientContext context;
        ByteBuffer answer;
        const auto began = Clock::now();
        if (!grpc::internal::BlockingUnaryCall<ByteBuffer, ByteBuffer>(channel.get(), method, &context, request, &answer).ok()) {
          failed = true;
          break;
        }
        if (!note(own, began)) break;
      }
      std::lock_guard<std::mutex> lock(mutex);
      latencies.insert(latencies.end(), own.begin(), own.end());
    });
    for (auto& thread : threads) thread.join();
    if (failed) return 1;
  }
  std::sort(latencies.begin(), latencies.end());
  auto at = [&](double q) { return latencies.empty() ? 0 : latencies[std::min(latencies.size() - 1, size_t(q * latencies.size()))]; };
  std::printf("{\"perSecond\": %.1f, \"p50Ms\": %.4f, \"p99Ms\": %.4f, \"answers\": %ld}\n", latencies.size() / seconds, at(0.5), at(0.99), answers.load());
}
