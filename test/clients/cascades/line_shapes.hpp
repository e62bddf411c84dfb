// Line shapes made for the tests, and densities of drawn masses by integration that uses nothing of the draws.
#ifndef COUPLET_TEST_LINE_SHAPES_HPP
#define COUPLET_TEST_LINE_SHAPES_HPP

#include <functional>

#include "couplet_tables.hpp"

// The chance of a mass up to this one, read off the points of a shape by the rule of the schema.
inline double cumulative(const couplet::LineShape& shape, double mass) {
  const double x = mass - shape.low;
  if (x <= 0) return 0;
  if (x <= shape.distances[0]) return shape.cumulative[0] * std::pow(x / shape.distances[0], shape.power);
  for (std::size_t k = 1; k < shape.distances.size(); ++k) {
    const double x0 = shape.distances[k - 1], x1 = shape.distances[k], f0 = shape.cumulative[k - 1], f1 = shape.cumulative[k];
    if (x <= x1) return std::exp(std::log(f0) + std::log(x / x0) / std::log(x1 / x0) * std::log(f1 / f0));
  }
  return 1;
}

// A Breit-Wigner form times sqrt(m - low), from low to mass + 4 widths.
inline couplet::LineShape resonance(double mass, double width, double low) {
  couplet::LineShape shape;
  shape.low = low;
  shape.high = mass + 4 * width;
  shape.normalisation = 1;
  shape.power = 1.5;
  constexpr int POINTS = 300;
  std::vector<double> sums;
  double sum = 0;
  for (int k = 1; k <= POINTS; ++k) {
    const double step = (shape.high - low) / POINTS, m = low + (k - 0.5) * step;
    sum += std::sqrt(m - low) / ((m - mass) * (m - mass) + width * width / 4);
    shape.distances.push_back(static_cast<float>(k * step));
    sums.push_back(sum);
  }
  for (const double each : sums) shape.cumulative.push_back(static_cast<float>(each / sum));
  return shape;
}

// Edges of mass cells: equal steps from the lowest mass to the highest that is left at this mass of the parent.
inline std::vector<double> mass_edges(const couplet::LineShape& shape, double left, int cells) {
  std::vector<double> edges;
  const double high = std::min(left, shape.high);
  for (int k = 0; k <= cells; ++k) edges.push_back(shape.low + (high - shape.low) * k / cells);
  return edges;
}

inline constexpr int CELLS = 12;
// Steps of the integration in each cell and direction.
inline constexpr int STEPS = 60;

// Chances of CELLS x CELLS cells of two masses, row by row, for the density rho1 rho2 K.
inline std::vector<double> joint_chances(const couplet::LineShape& first, const std::vector<double>& edges1,
                                         const couplet::LineShape& second, const std::vector<double>& edges2,
                                         const std::function<double(double, double)>& k) {
  const auto steps = [](const couplet::LineShape& shape, const std::vector<double>& edges) {
    std::vector<std::pair<double, double>> all;
    double before = cumulative(shape, edges[0]);
    for (int n = 0; n < CELLS * STEPS; ++n) {
      const double low = edges[0] + (edges[CELLS] - edges[0]) * n / (CELLS * STEPS);
      const double high = edges[0] + (edges[CELLS] - edges[0]) * (n + 1) / (CELLS * STEPS);
      const double after = cumulative(shape, high);
      all.emplace_back((low + high) / 2, after - before);
      before = after;
    }
    return all;
  };
  const auto steps1 = steps(first, edges1), steps2 = steps(second, edges2);
  std::vector<double> chances(CELLS * CELLS);
  double sum = 0;
  for (std::size_t i = 0; i < steps1.size(); ++i) {
    for (std::size_t j = 0; j < steps2.size(); ++j) {
      const double part = steps1[i].second * steps2[j].second * k(steps1[i].first, steps2[j].first);
      chances[i / STEPS * CELLS + j / STEPS] += part;
      sum += part;
    }
  }
  for (double& chance : chances) chance /= sum;
  return chances;
}

// The same for one mass: CELLS cells.
inline std::vector<double> chances_of(const couplet::LineShape& shape, const std::vector<double>& edges,
                                      const std::function<double(double)>& k) {
  std::vector<double> chances(CELLS);
  double sum = 0;
  constexpr int FINE = 10 * STEPS;
  double before = cumulative(shape, edges[0]);
  for (std::size_t cell = 0; cell < CELLS; ++cell) {
    for (int n = 0; n < FINE; ++n) {
      const double step = (edges[cell + 1] - edges[cell]) / FINE, middle = edges[cell] + (n + 0.5) * step;
      const double after = cumulative(shape, middle + step / 2);
      chances[cell] += (after - before) * k(middle);
      before = after;
    }
    sum += chances[cell];
  }
  for (double& chance : chances) chance /= sum;
  return chances;
}

inline std::size_t cell_of(const std::vector<double>& edges, double mass) {
  const auto above = std::upper_bound(edges.begin() + 1, edges.end() - 1, mass);
  return static_cast<std::size_t>(above - edges.begin()) - 1;
}

#endif
