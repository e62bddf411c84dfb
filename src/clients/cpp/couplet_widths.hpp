// Partial widths and fractions of a parent at any mass, from the rows of a decay table. C++17, standard library only.
//
// The partial width of a row at the parent's mass m is the sum over its waves of
//
//     (re^2 + im^2) K(m)/K(m0)                    where K(m0) > 0, m0 the nominal mass in the table, or else
//     identical_factor flavour_amplitude^2 K(m)   where the row is closed at m0, so that re = im = 0,
//
// with K the closed form of the wave's width model at the masses of the daughters in the table. So at m0 it is the
// row's width exactly, measured or predicted; a measured row keeps its measured value and takes its shape from the
// model. For a predicted row both lines are the same number. Below the sum of the daughters' masses it is 0.
//
// A row that is averaged over the line shapes of its daughters (flag `folded`), or has a width at m0 where K(m0) = 0, is
// evaluated from its grid, by the rule that the schema states and to its accuracy of 1e-4. A row without waves grows with
// its `power` of the distance from its threshold; without a power it is constant above its threshold, since nothing is
// known of its shape. A remainder is constant above the parent's lowest threshold, or everywhere if that lies above m0.
#ifndef COUPLET_WIDTHS_HPP
#define COUPLET_WIDTHS_HPP

#include <array>
#include <cmath>
#include <functional>
#include <initializer_list>
#include <sstream>
#include <utility>

#include "couplet_tables.hpp"

namespace couplet {

// Momentum of either daughter in the parent's rest frame, in MeV; 0 at and below threshold, never NaN.
// Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Kinematics".
inline double breakup_momentum(double parent, double first, double second) {
  const double heavy = std::max(first, second), light = std::min(first, second);
  // The heavier daughter is subtracted first: near threshold no digit is lost then.
  const double excess = parent - heavy - light;
  if (!(excess > 0)) return 0;
  const double difference = heavy - light;
  const double other = (parent - difference) * (parent + difference);
  return std::sqrt(excess * (parent + heavy + light)) * (std::sqrt(other) / (2 * parent));
}

namespace detail {

inline constexpr double PI = 3.141592653589793238462643;
// hbar c in MeV fm; fixed by the SI of 2019, here to ten digits.
inline constexpr double HBAR_C = 197.3269804;
inline constexpr unsigned LARGEST_L = 12;

// Masses and momentum of a decay above its threshold, in MeV.
struct TwoBody {
  double parent, first, second, momentum;
};

// K of one wave of one row; the closed forms and their sources are the ones of src/widths/ in Couplet.
using WidthModel = std::function<double(const TwoBody&)>;

// What a model may know of a decay besides its masses: twice the spins of parent and daughters.
struct Vertex {
  std::string row;
  std::optional<std::uint32_t> parent, first, second;
};

inline double power(double base, unsigned exponent) { return std::pow(base, static_cast<double>(exponent)); }

[[noreturn]] inline void refuse_wave(const std::string& row, const std::string& expected, const std::string& got) {
  throw Damaged(row + ": expected " + expected + ", got " + got + ". Read the table with a newer reader.");
}

// An option of a model; one that joined its model later has the value that a table without it means.
struct WantedOption {
  const char* name;
  const char* unit;
  std::optional<double> absent = std::nullopt;
};

// The values of a model's options in the order asked for; refuses others, missing ones and other units, since a model
// with a constant of unknown meaning is another model.
inline std::vector<double> option_values(const Wave& wave, const Vertex& vertex,
                                         std::initializer_list<WantedOption> wanted) {
  std::string expected;
  for (const auto& [name, unit, absent] : wanted) {
    expected += std::string(expected.empty() ? "" : ", ") + name + " in " + unit + (absent ? " or none" : "");
  }
  std::string got;
  for (const Option& option : wave.options) got += (got.empty() ? "" : ", ") + option.name + " in " + option.unit;
  std::vector<double> values;
  std::size_t known = 0;
  for (const auto& [name, unit, absent] : wanted) {
    std::optional<double> value = absent;
    for (const Option& option : wave.options) {
      if (option.name != name || option.unit != unit || !std::isfinite(option.value)) continue;
      value = option.value;
      ++known;
      // A second one of the name is one too many below.
      break;
    }
    if (value) values.push_back(*value);
  }
  if (values.size() != wanted.size() || wave.options.size() != known) {
    refuse_wave(vertex.row, "width model " + wave.model + " with the options [" + expected + "]", "[" + got + "]");
  }
  return values;
}

// Model a: K = q_ref (q/q_ref)^(2L+1) (M_ref/M)^n.
inline WidthModel power_law(unsigned l, double n, double q_ref, double m_ref) {
  return [=](const TwoBody& of) {
    return q_ref * power(of.momentum / q_ref, 2 * l + 1) * std::pow(m_ref / of.parent, n);
  };
}

// Model b: K = (q^2/(q^2 + X^2))^L q M_N/M.
inline WidthModel range_model(unsigned l, double range, double nucleon) {
  return [=](const TwoBody& of) {
    const double ratio = range / of.momentum;
    return of.momentum * (nucleon / of.parent) / power(1 + ratio * ratio, l);
  };
}

// |theta_L(i sqrt z)|^2 with the reverse Bessel polynomials theta_L: 1, 1 + z, 9 + 3z + z^2, ...
inline double barrier_polynomial(unsigned l, double z) {
  if (l == 0) return 1;
  double previous_re = 1, previous_im = 0, re = 1, im = std::sqrt(z);
  for (unsigned order = 2; order <= l; ++order) {
    const double weight = 2 * order - 1;
    const double next_re = weight * re - z * previous_re, next_im = weight * im - z * previous_im;
    previous_re = re, previous_im = im, re = next_re, im = next_im;
  }
  return re * re + im * im;
}

// Model c: K = F_L^2(R q) q M_ref/M, F_L^2 = z^L/P_L(z), z = (R q/hbar c)^2.
inline WidthModel barrier_model(unsigned l, double radius, double m_ref) {
  return [=](const TwoBody& of) {
    const double root_z = radius * of.momentum / HBAR_C;
    const double z = root_z * root_z;
    return of.momentum * (m_ref / of.parent) * (power(z, l) / barrier_polynomial(l, z));
  };
}

// Model d: K = n!/((2n+1)!! 4 pi) q (q/m_s)^2n (E +- m)/M for spin J = n + 1/2 into 1/2 and 0, + for L = n, - for n + 1.
// With the derivative form times ((M -+ m)/m_s)^2 for J = 1/2, with no effect for higher spins.
inline WidthModel effective_baryon(unsigned l, double scale, double derivative_form, const Vertex& vertex) {
  if (derivative_form != 0 && derivative_form != 1) {
    std::ostringstream got;
    got << derivative_form;
    refuse_wave(vertex.row, "derivativeForm 0 or 1 of width model d", got.str());
  }
  const unsigned n = vertex.parent.value_or(0) / 2;
  const bool spins = vertex.parent.value_or(0) % 2 == 1 && vertex.first == 1u && vertex.second == 0u;
  if (!spins || (l != n && l != n + 1)) {
    refuse_wave(vertex.row, "spin n + 1/2 into 1/2 and 0 with L = n or n + 1 for width model d", "another vertex");
  }
  double prefactor = 1 / (4 * PI);
  for (unsigned k = 1; k <= n; ++k) prefactor *= k / (2.0 * k + 1);
  return [=](const TwoBody& of) {
    const double sum = std::hypot(of.first, of.momentum) + of.first;
    // E - m without the cancellation of the plain difference.
    const double energy = l == n ? sum : of.momentum / sum * of.momentum;
    const double factor = prefactor * of.momentum * power(of.momentum / scale, 2 * n) * (energy / of.parent);
    if (n > 0 || derivative_form == 0) return factor;
    const double ratio = (l == 0 ? of.parent - of.first : of.parent + of.first) / scale;
    return factor * ratio * ratio;
  };
}

// Model e: effective Lagrangians of mesons; the spins and L choose the coupling.
inline WidthModel effective_meson(unsigned l, const Vertex& vertex) {
  const std::uint32_t none = std::numeric_limits<std::uint32_t>::max();
  const std::uint32_t first = vertex.first.value_or(none), second = vertex.second.value_or(none);
  const std::array<std::uint32_t, 4> got = {vertex.parent.value_or(none), std::max(first, second),
                                            std::min(first, second), l};
  const auto is = [&](std::uint32_t parent, std::uint32_t high, std::uint32_t low, std::uint32_t wave) {
    return got == std::array<std::uint32_t, 4>{parent, high, low, wave};
  };
  const auto cube = [](double q) { return q * q * q; };
  const auto square = [](double x) { return x * x; };
  // Vector to two spinless: A = g eps.(p1 - p2).
  if (is(2, 0, 0, 1)) return [=](const TwoBody& of) { return of.momentum / (6 * PI) * square(of.momentum / of.parent); };
  // Tensor to two spinless: A = g eps_mn q^m q^n, q = (p1 - p2)/2.
  if (is(4, 0, 0, 2))
    return [=](const TwoBody& of) { return cube(of.momentum) / (60 * PI) * square(of.momentum / of.parent); };
  // Vector to vector or photon and spinless, antisymmetric tensor.
  if (is(2, 2, 0, 1)) return [=](const TwoBody& of) { return cube(of.momentum) / (12 * PI); };
  // Scalar to two spinless: A = g.
  if (is(0, 0, 0, 0)) return [=](const TwoBody& of) { return of.momentum / (8 * PI * square(of.parent)); };
  // Axial vector to massive vector and spinless: A = g eps.eps'.
  if (is(2, 2, 0, 0)) {
    const bool first_is_vector = first == 2;
    return [=](const TwoBody& of) {
      const double vector = first_is_vector ? of.first : of.second;
      return of.momentum * (1 + square(of.momentum / vector) / 3) / (8 * PI * square(of.parent));
    };
  }
  // Spinless to two vectors or photons, antisymmetric tensor.
  if (is(0, 2, 2, 1)) return [=](const TwoBody& of) { return cube(of.momentum) / (4 * PI); };
  refuse_wave(vertex.row, "spins and L that width model e has a coupling for", "others");
}

// K of a wave; refuses models, options and vertices this reader does not know.
inline WidthModel width_model(const Wave& wave, const Vertex& vertex) {
  if (wave.two_l % 2 != 0 || wave.two_l > 2 * LARGEST_L) {
    refuse_wave(vertex.row, "an even 2L up to " + std::to_string(2 * LARGEST_L), std::to_string(wave.two_l));
  }
  const unsigned l = wave.two_l / 2;
  if (wave.model == "a") {
    const auto o = option_values(wave, vertex, {{"n", "1"}, {"referenceMomentumMeV", "MeV"}, {"referenceMassMeV", "MeV"}});
    return power_law(l, o[0], o[1], o[2]);
  }
  if (wave.model == "b") {
    const auto o = option_values(wave, vertex, {{"rangeMeV", "MeV"}, {"nucleonMassMeV", "MeV"}});
    return range_model(l, o[0], o[1]);
  }
  if (wave.model == "c") {
    const auto o = option_values(wave, vertex, {{"radiusFm", "fm"}, {"referenceMassMeV", "MeV"}});
    return barrier_model(l, o[0], o[1]);
  }
  if (wave.model == "d") {
    const auto o = option_values(wave, vertex, {{"scaleMeV", "MeV"}, {"derivativeForm", "1", 0.0}});
    return effective_baryon(l, o[0], o[1], vertex);
  }
  if (wave.model == "e") return option_values(wave, vertex, {}), effective_meson(l, vertex);
  refuse_wave(vertex.row, "a width model among a, b, c, d, e", '"' + wave.model + '"');
}

// Width of a grid at a mass, in MeV: C. Hermite's cubic in ln width against ln distance, the threshold law below it.
inline double grid_width(const MassGrid& grid, double mass) {
  const std::vector<float>&distances = grid.distances, &y = grid.log_widths, &s = grid.slopes;
  const double x = mass - grid.threshold;
  if (x <= 0) return 0;
  if (!(x <= distances.back())) throw std::invalid_argument("mass: expected one up to the end of a row's grid, got more");
  const double t = std::log(x);
  if (x < distances[0]) return std::exp(y[0] + s[0] * (t - std::log(double{distances[0]})));
  const auto above = std::upper_bound(distances.begin() + 1, distances.end() - 1, x) - distances.begin();
  const auto k = static_cast<std::size_t>(above) - 1;
  const double t_k = std::log(double{distances[k]}), h = std::log(double{distances[k + 1]}) - t_k, u = (t - t_k) / h;
  const double d = double{y[k + 1]} - y[k], a = h * s[k], b = h * s[k + 1];
  return std::exp(y[k] + u * (a + u * (3 * d - 2 * a - b + u * (a + b - 2 * d))));
}

// The grid itself, if it can be evaluated.
inline const MassGrid& checked(const MassGrid& grid, const std::string& row) {
  const std::vector<float>& x = grid.distances;
  const bool sizes = x.size() >= 2 && grid.log_widths.size() == x.size() && grid.slopes.size() == x.size();
  const auto descends = [](float a, float b) { return !(a < b); };
  const bool ascending = std::adjacent_find(x.begin(), x.end(), descends) == x.end();
  if (sizes && ascending && x[0] > 0 && std::isfinite(grid.threshold)) return grid;
  throw Damaged(row + ": expected a grid of two points or more in ascending order, got another");
}

// One row made ready for many masses: closed form, grid, or a power of the distance from a threshold.
struct ReadyRow {
  double threshold = 0;
  // Without waves: width = constant ((m - threshold)/distance)^power.
  double constant = 0, distance = 1, power = 0;
  double first = 0, second = 0;
  // The sum of scale times K is the partial width.
  std::vector<std::pair<double, WidthModel>> waves;
  std::optional<MassGrid> grid;

  double width(double mass) const {
    if (grid) return grid_width(*grid, mass);
    if (waves.empty()) return mass > threshold ? constant * std::pow((mass - threshold) / distance, power) : 0;
    const double momentum = breakup_momentum(mass, first, second);
    if (momentum == 0) return 0;
    double sum = 0;
    for (const auto& [scale, k] : waves) sum += scale * k({mass, first, second, momentum});
    return sum;
  }
};

inline const Hadron& daughter_of(const Tables& tables, const Row& row, const Daughter& daughter) {
  const Hadron* hadron = find_hadron(tables, daughter.name);
  if (hadron == nullptr || !(hadron->mass >= 0) || !std::isfinite(hadron->mass)) {
    throw Damaged(row.id + ": expected " + daughter.name + " among the hadrons of the table with its mass, got none");
  }
  return *hadron;
}

inline ReadyRow ready_row(const Tables& tables, const Parent& parent, const Row& row) {
  ReadyRow ready;
  ready.threshold = row.threshold;
  if (row.grid && std::count(row.flags.begin(), row.flags.end(), Flag::folded) > 0) {
    ready.grid = checked(*row.grid, row.id);
    return ready;
  }
  if (row.waves.empty()) {
    ready.constant = row.width.value;
    if (row.power) {
      ready.power = *row.power;
      ready.distance = parent.hadron.mass - row.threshold;
      if (std::isfinite(ready.constant) && ready.constant >= 0 && ready.distance > 0 && ready.power >= 0) return ready;
      throw Damaged(row.id + ": expected a width, a threshold below the parent's mass and a power >= 0, got others");
    }
    if (std::isfinite(ready.constant) && std::isfinite(ready.threshold)) return ready;
    throw Damaged(row.id + ": expected a row without waves to have a width and a threshold, got none");
  }
  const double nominal = parent.hadron.mass;
  if (row.daughters.size() != 2 || !(nominal > 0)) {
    throw Damaged(row.id + ": expected two daughters and a parent's mass > 0 of a row with waves, got others");
  }
  const Hadron& first = daughter_of(tables, row, row.daughters[0]);
  const Hadron& second = daughter_of(tables, row, row.daughters[1]);
  ready.first = first.mass;
  ready.second = second.mass;
  const double momentum = breakup_momentum(nominal, first.mass, second.mass);
  for (const Wave& wave : row.waves) {
    WidthModel k = width_model(wave, {row.id, parent.hadron.two_j, first.two_j, second.two_j});
    const double open = momentum > 0 ? k({nominal, first.mass, second.mass, momentum}) : 0;
    const double width = wave.re * wave.re + wave.im * wave.im;
    if (open == 0 && width > 0) {
      if (!row.grid) refuse_wave(row.id, "a grid, since the nominal masses forbid the decay", "a width without one");
      ready.grid = checked(*row.grid, row.id);
      return ready;
    }
    const double scale =
        open > 0 ? width / open : row.identical_factor * wave.flavour_amplitude * wave.flavour_amplitude;
    if (!std::isfinite(scale) || !std::isfinite(open)) throw Damaged(row.id + ": expected finite amplitudes, got others");
    ready.waves.emplace_back(scale, std::move(k));
  }
  return ready;
}

// All rows; a remainder is constant above the lowest threshold of the rows that have daughters, unless the nominal mass
// lies below it: then it is all there is of the parent's width.
inline std::vector<ReadyRow> ready_rows(const Tables& tables, const Parent& parent) {
  std::vector<ReadyRow> ready;
  double lowest = std::numeric_limits<double>::infinity();
  for (const Row& row : parent.rows) {
    const ReadyRow& last = ready.emplace_back(ready_row(tables, parent, row));
    if (!row.daughters.empty()) lowest = std::min(lowest, last.grid ? last.grid->threshold : last.threshold);
  }
  for (std::size_t k = 0; k < ready.size(); ++k) {
    if (parent.rows[k].daughters.empty() && lowest < parent.hadron.mass) ready[k].threshold = lowest;
  }
  return ready;
}

}  // namespace detail

// Partial widths and fractions of one parent at any mass, made ready once. It keeps no reference to the tables.
//
// Throws Damaged for a width model, an option or a vertex this reader does not know.
class ParentWidths {
 public:
  ParentWidths(const Tables& tables, const Parent& parent) : rows_(detail::ready_rows(tables, parent)) {}

  // Partial width of a row, by its place in parent.rows, in MeV; mass in MeV. Throws std::invalid_argument for a mass
  // that is not a finite number > 0, past the end of a grid, or so large that a width overflows, std::out_of_range for a row there is not.
  double width(std::size_t row, double mass) const {
    if (!std::isfinite(mass) || !(mass > 0)) throw std::invalid_argument("mass: expected a finite number > 0 in MeV");
    const double width = rows_.at(row).width(mass);
    if (!std::isfinite(width)) throw std::invalid_argument("mass: expected one at which widths are finite, got more");
    return width;
  }

  // Partial widths of all rows, in MeV.
  std::vector<double> widths(double mass) const {
    std::vector<double> widths;
    for (std::size_t row = 0; row < rows_.size(); ++row) widths.push_back(width(row, mass));
    return widths;
  }

  // Total width, in MeV: the sum of all rows.
  double total(double mass) const {
    double sum = 0;
    for (const double width : widths(mass)) sum += width;
    return sum;
  }

  // Fractions of all rows; they add up to 1, or are all 0 at a mass where every row is closed.
  std::vector<double> fractions(double mass) const {
    std::vector<double> fractions = widths(mass);
    double sum = 0;
    for (const double width : fractions) sum += width;
    if (sum > 0) {
      for (double& fraction : fractions) fraction /= sum;
    }
    return fractions;
  }

 private:
  std::vector<detail::ReadyRow> rows_;
};

}  // namespace couplet

#endif
