// Pearson's chi-square test of drawn counts against fractions.
#ifndef COUPLET_TEST_CHI_SQUARE_HPP
#define COUPLET_TEST_CHI_SQUARE_HPP

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <vector>

// Q(ndf/2, chi2/2), by the recurrence in ndf from its closed forms for ndf 1 and 2.
inline double chi_square_tail(double chi2, int ndf) {
  const double x = chi2 / 2;
  double q = ndf % 2 ? std::erfc(std::sqrt(x)) : std::exp(-x);
  for (double a = ndf % 2 ? 0.5 : 1; a < ndf / 2.0; a += 1) {
    if (x > 0) q += std::exp(a * std::log(x) - x - std::lgamma(a + 1));
  }
  return q;
}

// Probability of counts at least as far from the fractions; cells that expect under 10 draws are put together. A count
// in a cell that expects nothing gives 0.
inline double probability(const std::vector<long>& counts, const std::vector<double>& fractions, long draws) {
  double chi2 = 0, rare_count = 0, rare_expected = 0;
  int cells = 0;
  const auto add = [&](double count, double expected) {
    chi2 += (count - expected) * (count - expected) / expected;
    ++cells;
  };
  for (std::size_t k = 0; k < counts.size(); ++k) {
    const double expected = fractions[k] * static_cast<double>(draws);
    if (expected == 0 && counts[k] > 0) return 0;
    if (expected < 10) {
      rare_count += static_cast<double>(counts[k]);
      rare_expected += expected;
    } else {
      add(static_cast<double>(counts[k]), expected);
    }
  }
  if (rare_expected >= 10) add(rare_count, rare_expected);
  // Over 60 where under 10 are expected has a Poisson probability below 1e-25.
  if (rare_expected < 10 && rare_count > 60) return 0;
  return cells > 1 ? chi_square_tail(chi2, cells - 1) : 1;
}

// The two largest fractions moved towards each other by a fiftieth of the smaller: a wrong table.
inline std::vector<double> shifted(std::vector<double> fractions) {
  std::vector<std::size_t> order(fractions.size());
  for (std::size_t k = 0; k < order.size(); ++k) order[k] = k;
  std::sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) { return fractions[a] > fractions[b]; });
  const double step = fractions[order[1]] / 50;
  fractions[order[0]] -= step;
  fractions[order[1]] += step;
  return fractions;
}

#endif
