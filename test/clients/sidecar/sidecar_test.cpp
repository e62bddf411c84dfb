// Tests of couplet_sidecar.hpp against a running sidecar: sidecar_test ADDRESS SHA256.
//
// Draws are compared with the table's fractions by Pearson's chi-square: false-alarm rate 1e-6 in all, fixed seed, and
// shifted fractions have to be refused, so that the test can fail.
#include "couplet_sidecar.hpp"

#include "../cpp/checks.hpp"
#include "../cpp/chi_square.hpp"

namespace sidecar = couplet::sidecar;

static const double LIMIT = 1e-6 / 6;
static const std::uint64_t SEED = 20261201;

static double chance(const std::vector<int>& rows, const std::vector<double>& fractions) {
  std::vector<long> counts(fractions.size());
  for (const int row : rows) ++counts.at(static_cast<std::size_t>(row));
  return probability(counts, fractions, static_cast<long>(rows.size()));
}

// The two largest fractions moved towards each other by a fifth of the smaller: a wrong table.
static std::vector<double> wrong(std::vector<double> fractions) {
  const auto first = std::max_element(fractions.begin(), fractions.end());
  const double largest = *first;
  *first = 0;
  const auto second = std::max_element(fractions.begin(), fractions.end());
  const double step = *second / 5;
  *first = largest - step;
  *second += step;
  return fractions;
}

static void draws_of(Checks& check, const sidecar::Sidecar& server, const std::string& parent) {
  const auto table = server.decay_table(parent).parent();
  std::vector<double> fractions;
  for (const auto& row : table.rows()) fractions.push_back(row.parts_per_billion() / 1e9);
  const std::vector<int> rows = server.draw(parent, SEED, 0, 100000);
  check(chance(rows, fractions) >= LIMIT, parent + ": draws at the nominal mass");
  check(chance(rows, wrong(fractions)) < LIMIT, parent + ": shifted fractions are refused");
  check(server.draw(parent, SEED, 0, 1000) == std::vector<int>(rows.begin(), rows.begin() + 1000),
        parent + ": the same seed draws the same");
  const double mass = table.hadron().mass() + 20;
  const auto off = server.widths(parent, mass).fractions();
  std::vector<int> drawn;
  for (std::uint64_t batch = 0; batch < 50; ++batch) {
    const auto more = server.draw_at(parent, SEED, batch, std::vector<double>(1000, mass));
    drawn.insert(drawn.end(), more.begin(), more.end());
  }
  check(chance(drawn, {off.begin(), off.end()}) >= LIMIT, parent + ": draws 20 MeV above it");
}

static void stream_of(Checks& check, const sidecar::Sidecar& server) {
  const std::string parent = "Sigma(1385)0";
  auto stream = server.stream_widths(parent);
  std::vector<std::vector<double>> batches;
  for (int k = 0; k < 20; ++k) {
    batches.emplace_back();
    for (int j = 0; j < 10; ++j) batches.back().push_back(1300 + 10 * k + j);
    stream.send(batches.back());
  }
  bool agree = true;
  for (const auto& masses : batches) {
    const auto widths = stream.receive();
    const auto single = server.widths(parent, masses[3]);
    agree = agree && widths.totals.size() == 10 && widths.totals[3] == single.total_width() &&
            widths.fractions[3] == std::vector<double>(single.fractions().begin(), single.fractions().end());
  }
  stream.finish();
  check(agree, "a stream of 20 batches gives what single queries give");
}

template <class Action>
static grpc::StatusCode code_of(Action action) {
  try {
    action();
  } catch (const sidecar::CallFailed& failed) {
    return failed.code;
  }
  return grpc::StatusCode::OK;
}

int main(int argc, char** argv) {
  if (argc != 3) return 2;
  Checks check;
  try {
    const sidecar::Sidecar server(argv[1], argv[2]);
    check(sidecar::hex(server.table().sha256()) == argv[2], "convention and digest are checked");
    try {
      const sidecar::Sidecar other(argv[1], std::string(64, 'a'));
      check(false, "a table that is not served is refused");
    } catch (const sidecar::WrongTable&) {
      check(true, "a table that is not served is refused");
    }
    for (const char* parent : {"Sigma(1385)0", "Delta(1232)+", "K*(892)+"}) draws_of(check, server, parent);
    stream_of(check, server);
    check(code_of([&] { server.widths("nobody", 1); }) == grpc::StatusCode::INVALID_ARGUMENT,
          "an unknown parent is INVALID_ARGUMENT");
    check(code_of([&] { server.draw("Sigma(1385)0", 1, 0, 1000000); }) == grpc::StatusCode::RESOURCE_EXHAUSTED,
          "too many draws are RESOURCE_EXHAUSTED");
    auto stream = server.stream_widths("Sigma(1385)0");
    stream.send({-1});
    check(code_of([&] { stream.receive(); }) == grpc::StatusCode::INVALID_ARGUMENT,
          "a stream with an impossible mass ends with INVALID_ARGUMENT");
  } catch (const std::exception& error) {
    check(false, std::string("an exception: ") + error.what());
  }
  std::printf("%d passed, %d failed\n", check.passed, check.failed);
  return check.failed == 0 ? 0 : 1;
}
