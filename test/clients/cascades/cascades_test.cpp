// Tests of whole cascades: joint masses against integrated densities, frequencies down the chain, conservation, edges.
// Usage: cascades_test DEMO MESONS OCTET N1520   (the tables of the demo and of three studies in test/chain/studies)
#include <random>

#include "checks.hpp"
#include "chi_square.hpp"
#include "couplet_cascades.hpp"
#include "couplet_decays_plain.hpp"
#include "line_shapes.hpp"

using couplet::Cascades;
using couplet::CascadeParticle;
using couplet::End;
using couplet::Hadron;
using couplet::Parent;
using couplet::ParentWidths;
using couplet::Row;
using couplet::Tables;
using Cascade = std::vector<CascadeParticle>;

namespace {

constexpr double FALSE_ALARM = 1e-6;
constexpr std::uint64_t SEED = 20261202;
constexpr long DRAWS = 200'000;

double momentum(double m, double a, double b) {
  const double sum = m * m - (a + b) * (a + b), difference = m * m - (a - b) * (a - b);
  return sum > 0 ? std::sqrt(sum * difference) / (2 * m) : 0;
}

std::string shown(double chance) {
  char text[32];
  std::snprintf(text, sizeof text, "%.2g", chance);
  return text;
}

Hadron hadron(const std::string& name, double mass, std::uint32_t two_j) {
  Hadron made;
  made.name = name;
  made.mass = mass;
  made.two_j = two_j;
  return made;
}

Hadron unstable(const std::string& name, double mass, double width, double low, std::uint32_t two_j) {
  Hadron made = hadron(name, mass, two_j);
  made.width = width;
  made.line_shape = resonance(mass, width, low);
  return made;
}

// A parent of nominal mass 1900 with one row into these daughters.
Tables one_row(const std::vector<std::string>& daughters) {
  Tables tables;
  tables.header.policies.antiparticles = "implied";
  tables.externals = {unstable("vector", 770, 150, 280, 2), unstable("spinless", 980, 80, 690, 0),
                      unstable("baryon", 1232, 117, 1079, 3), hadron("pion", 139.57, 0)};
  Parent& parent = tables.parents.emplace_back();
  parent.hadron = hadron("parent", 1900, 2);
  Row& row = parent.rows.emplace_back();
  row.id = "row";
  row.parts_per_billion = couplet::WHOLE;
  row.identical_factor = 1;
  row.width.value = 100;
  for (const std::string& name : daughters) {
    row.daughters.push_back({name, std::nullopt});
    row.threshold = (std::isnan(row.threshold) ? 0 : row.threshold) + couplet::find_hadron(tables, name)->mass;
  }
  return tables;
}

couplet::Wave wave(const std::string& model, std::uint32_t l, double strength, double mass, double a, double b,
                   const std::vector<couplet::Option>& options) {
  couplet::Wave made;
  made.model = model;
  made.two_l = 2 * l;
  made.options = options;
  made.flavour_amplitude = std::sqrt(strength);
  const auto k = couplet::detail::width_model(made, {"row", 2, 2, 0});
  made.kinematic_factor = k({mass, a, b, momentum(mass, a, b)});
  made.re = std::sqrt(strength * made.kinematic_factor);
  made.im = 0;
  return made;
}

// Draws of two unstable daughters, with two wrong densities that must be refused.
void joint_pair(Checks& check, const std::string& what, const Tables& tables, double parent, std::size_t first,
                std::size_t second, const std::function<double(double, double)>& right,
                const std::vector<std::pair<std::string, std::function<double(double, double)>>>& wrong, long draws = DRAWS) {
  const Cascades cascades(tables);
  const auto& daughters = tables.parents[0].rows[0].daughters;
  double lowest = 0;
  for (const auto& daughter : daughters) {
    const Hadron& of = *couplet::find_hadron(tables, daughter.name);
    lowest += of.line_shape ? of.line_shape->low : of.mass;
  }
  const auto& shape1 = *couplet::find_hadron(tables, daughters[first].name)->line_shape;
  const auto& shape2 = *couplet::find_hadron(tables, daughters[second].name)->line_shape;
  const auto edges1 = mass_edges(shape1, parent - lowest + shape1.low, CELLS);
  const auto edges2 = mass_edges(shape2, parent - lowest + shape2.low, CELLS);
  std::mt19937_64 rng(SEED);
  std::vector<long> counts(CELLS * CELLS);
  bool fits = true;
  for (long k = 0; k < draws; ++k) {
    const Cascade cascade = cascades.draw("parent", rng, parent);
    double sum = 0;
    for (std::size_t d = 1; d <= daughters.size(); ++d) sum += cascade[d].mass;
    fits = fits && sum < parent && cascade.size() == daughters.size() + 1;
    ++counts[cell_of(edges1, cascade[1 + first].mass) * CELLS + cell_of(edges2, cascade[1 + second].mass)];
  }
  const auto chance = [&](const std::function<double(double, double)>& k) {
    return probability(counts, joint_chances(shape1, edges1, shape2, edges2, k), draws);
  };
  const double found = chance(right);
  check(fits && found >= FALSE_ALARM, what + ": both masses follow rho rho K (probability " + shown(found) + ")");
  for (const auto& [name, k] : wrong) check(chance(k) < FALSE_ALARM, what + ": " + name + " is refused");
}

void joint_masses(Checks& check) {
  constexpr double PARENT = 1780;
  const auto inside = [](double a, double b) { return a + b < PARENT ? 1.0 : 0.0; };
  {
    // A = g eps.eps': K = q (1 + (q/m_v)^2/3) up to what does not depend on the daughters; the vector is the first one.
    Tables tables = one_row({"vector", "spinless"});
    tables.parents[0].rows[0].waves = {wave("e", 0, 2, 1900, 770, 980, {})};
    const auto k = [](double v, double s) {
      const double q = momentum(PARENT, v, s);
      return q * (1 + q * q / (3 * v * v));
    };
    joint_pair(check, "an axial vector to two unstable daughters", tables, PARENT, 0, 1, k,
               {{"no K", inside}, {"the daughters exchanged in K", [&](double v, double s) { return k(s, v); }},
                {"a plain S wave", [](double v, double s) { return momentum(PARENT, v, s); }}});
  }
  {
    // Two waves with the barrier of model c: strengths 3 and 40.
    const auto barrier = [](double q, int l) {
      const double z = std::pow(0.8 * q / 197.3269804, 2);
      return l == 0 ? q : q * z * z / (9 + 3 * z + z * z);
    };
    const std::vector<couplet::Option> options = {{"radiusFm", 0.8, "fm"}, {"referenceMassMeV", 1000, "MeV"}};
    Tables tables = one_row({"vector", "spinless"});
    tables.parents[0].rows[0].waves = {wave("c", 0, 3, 1900, 770, 980, options), wave("c", 2, 40, 1900, 770, 980, options)};
    const auto with = [=](double s, double d) {
      return [=](double a, double b) {
        const double q = momentum(PARENT, a, b);
        return s * barrier(q, 0) + d * barrier(q, 2);
      };
    };
    joint_pair(check, "S and D waves", tables, PARENT, 0, 1, with(3, 40),
               {{"the S wave alone", with(1, 0)}, {"the D wave alone", with(0, 1)}, {"other strengths", with(6, 40)}});
  }
  {
    Tables tables = one_row({"vector", "pion", "spinless"});
    tables.parents[0].rows[0].power = 2;
    tables.parents[0].rows[0].threshold = 1500;
    const auto power = [](double p) {
      return [p](double v, double s) { return v + s + 139.57 < PARENT ? std::pow(PARENT - 139.57 - v - s, p) : 0.0; };
    };
    joint_pair(check, "three daughters outside the symmetry", tables, PARENT, 0, 2, power(2),
               {{"no K", power(0)}, {"another power", power(1.5)}}, DRAWS / 5);
  }
}

// The tables with one row alone of a parent: every decay of it is this one.
Tables only_row(Tables tables, const std::string& name, const std::string& id) {
  for (Parent& parent : tables.parents) {
    if (parent.hadron.name != name) continue;
    const auto other = [&](const Row& row) { return row.id != id; };
    parent.rows.erase(std::remove_if(parent.rows.begin(), parent.rows.end(), other), parent.rows.end());
  }
  return tables;
}

// Rows of real tables, at one mass of the parent.
void masses_in_tables(Checks& check, const Tables& n1520, const Tables& mesons) {
  const auto one = [&](const Tables& all, const std::string& parent, const std::string& id, double mass, double stable,
                       const std::function<double(double)>& right, const std::function<double(double)>& wrong) {
    const Tables tables = only_row(all, parent, id);
    const Cascades cascades(tables);
    const Row& row = couplet::parent_named(tables, parent).rows.at(0);
    const auto& shape = *couplet::find_hadron(tables, row.daughters[0].name)->line_shape;
    const auto edges = mass_edges(shape, mass - stable, CELLS);
    std::mt19937_64 rng(SEED);
    std::vector<long> counts(CELLS);
    for (long k = 0; k < DRAWS / 4; ++k) ++counts[cell_of(edges, cascades.draw(parent, rng, mass)[1].mass)];
    const double found = probability(counts, chances_of(shape, edges, right), DRAWS / 4);
    check(found >= FALSE_ALARM, id + ": the mass follows rho K (probability " + shown(found) + ")");
    check(probability(counts, chances_of(shape, edges, wrong), DRAWS / 4) < FALSE_ALARM, id + ": another K is refused");
  };
  const Row& delta_pi = couplet::parent_named(n1520, "N(1520)+").rows[0];
  const auto waves = [&](double mass, bool both) {
    return [&delta_pi, mass, both](double w) {
      const double q = momentum(mass, w, 139.57039), z = std::pow(q / 197.3269804, 2);
      const auto strength = [&](std::size_t k) { return std::pow(delta_pi.waves[k].flavour_amplitude, 2); };
      return strength(0) * q + (both ? strength(1) * q * z * z / (9 + 3 * z + z * z) : 0);
    };
  };
  one(n1520, "N(1520)+", "N(1520)+ -> Delta(1232)++ pi-", 1515, 139.57039, waves(1515, true), waves(1515, false));
  // Open only because a Delta can be lighter than its nominal mass.
  one(n1520, "N(1520)+", "N(1520)+ -> Delta(1232)++ pi-", 1300, 139.57039, waves(1300, true), [](double) { return 1.0; });
  one(mesons, "a2(1320)+", "a2(1320)+ -> rho(770)+ pi0", 1318.2, 134.9768,
      [](double w) { return std::pow(1318.2 - 134.9768 - w, 2.5); }, [](double w) { return momentum(1318.2, w, 134.9768); });
}

// Mass first, then the channel at that mass: the rows come out with their integrated fractions, not the nominal ones.
void first_rows(Checks& check, const std::string& file, const Tables& tables) {
  const Cascades cascades(tables);
  std::mt19937_64 rng(SEED);
  std::size_t follow = 0, nominal_refused = 0;
  constexpr long FEW = 10'000;
  for (const Parent& parent : tables.parents) {
    std::vector<double> nominal, integrated;
    std::vector<long> counts(parent.rows.size());
    for (const Row& row : parent.rows) {
      nominal.push_back(row.parts_per_billion / double{couplet::WHOLE});
      integrated.push_back(row.integrated_fraction.value_or(nominal.back()));
    }
    for (long k = 0; k < FEW; ++k) ++counts[static_cast<std::size_t>(cascades.draw(parent.hadron.name, rng)[0].row - parent.rows.data())];
    const double chance = probability(counts, integrated, FEW);
    follow += chance >= FALSE_ALARM / static_cast<double>(tables.parents.size());
    if (chance < 1e-4) std::printf("  %s: probability %.3g\n", parent.hadron.name.c_str(), chance);
    nominal_refused += probability(counts, nominal, FEW) < FALSE_ALARM;
  }
  check(follow == tables.parents.size(), file + ": rows of " + std::to_string(follow) + " parents have their integrated fractions");
  check(nominal_refused > 0, file + ": the nominal fractions are refused for " + std::to_string(nominal_refused) + " of them");
}

std::size_t row_index(const Tables& tables, const CascadeParticle& particle) {
  return static_cast<std::size_t>(particle.row - couplet::parent_named(tables, particle.name).rows.data());
}

// Narrow intermediate particles: the chance of a chain is the product of the fractions.
void products(Checks& check, const Tables& mesons) {
  const Cascades cascades(mesons);
  const Parent &omega = couplet::parent_named(mesons, "omega(782)"), &pi0 = couplet::parent_named(mesons, "pi0");
  const std::size_t n = pi0.rows.size() + 1;
  std::vector<double> expected(omega.rows.size() * n);
  for (std::size_t k = 0; k < omega.rows.size(); ++k) {
    const auto& daughters = omega.rows[k].daughters;
    const bool has_pi0 = std::any_of(daughters.begin(), daughters.end(), [](const auto& d) { return d.name == "pi0"; });
    const double fraction = omega.rows[k].integrated_fraction.value_or(0);
    if (!has_pi0) expected[k * n] = fraction;
    for (std::size_t j = 1; has_pi0 && j < n; ++j) {
      expected[k * n + j] = fraction * pi0.rows[j - 1].parts_per_billion / couplet::WHOLE;
    }
  }
  std::mt19937_64 rng(SEED);
  std::vector<long> counts(expected.size());
  for (long k = 0; k < DRAWS / 4; ++k) {
    const Cascade cascade = cascades.draw("omega(782)", rng);
    std::size_t second = 0;
    for (std::size_t d = 0; d < cascade[0].daughters; ++d) {
      const CascadeParticle& daughter = cascade[cascade[0].first_daughter + d];
      if (daughter.name == "pi0") second = 1 + row_index(mesons, daughter);
    }
    ++counts[row_index(mesons, cascade[0]) * n + second];
  }
  const double chance = probability(counts, expected, DRAWS / 4);
  check(chance >= FALSE_ALARM, "omega(782) and its pi0 decay with products of fractions (probability " + shown(chance) + ")");
  // Half as many again of the pi0 with an electron pair.
  for (std::size_t k = 0; k < omega.rows.size(); ++k) {
    const double more = expected[k * n + 1] / 2;
    expected[k * n + 1] += more;
    expected[k * n + 2] -= more;
  }
  check(probability(counts, expected, DRAWS / 4) < FALSE_ALARM, "other products are refused");
}

// A broad intermediate particle decays with its fractions at the masses its mother leaves it.
void broad_products(Checks& check, const Tables& all) {
  constexpr double MASS = 1535;
  const Tables octet = only_row(all, "Sigma(1775)+", "Sigma(1775)+ -> Sigma(1385)+ pi0");
  const Cascades cascades(octet);
  const Row& row = couplet::parent_named(octet, "Sigma(1775)+").rows.at(0);
  const Parent& sigma = couplet::parent_named(octet, "Sigma(1385)+");
  const ParentWidths widths(octet, sigma);
  const couplet::LineShape& shape = *sigma.hadron.line_shape;
  std::vector<double> expected(sigma.rows.size()), own;
  double sum = 0;
  const double high = std::min(shape.high, MASS - 134.9768);
  constexpr int FINE = 4000;
  for (int n = 0; n < FINE; ++n) {
    const double low = shape.low + (high - shape.low) * n / FINE, next = shape.low + (high - shape.low) * (n + 1) / FINE;
    const double w = (low + next) / 2;
    const double chance = (cumulative(shape, next) - cumulative(shape, low)) * std::pow(MASS - 134.9768 - w, *row.power);
    sum += chance;
    const std::vector<double> fractions = widths.fractions(w);
    for (std::size_t k = 0; k < expected.size(); ++k) expected[k] += chance * fractions[k];
  }
  for (double& each : expected) each /= sum;
  for (const Row& each : sigma.rows) own.push_back(*each.integrated_fraction);
  std::mt19937_64 rng(SEED);
  std::vector<long> counts(expected.size());
  for (long k = 0; k < DRAWS / 4; ++k) ++counts[row_index(octet, cascades.draw("Sigma(1775)+", rng, MASS)[1])];
  const double chance = probability(counts, expected, DRAWS / 4);
  check(chance >= FALSE_ALARM, "Sigma(1385)+ from Sigma(1775)+ decays with its fractions at the masses left to it (probability " + shown(chance) + ")");
  check(probability(counts, own, DRAWS / 4) < FALSE_ALARM, "its fractions over its own line shape are refused");
}

struct Charges {
  int charge = 0, baryon_number = 0;
};

// Of a hadron of the tables, or of the antiparticle of one.
Charges charges_of(const Tables& tables, const Cascades& cascades, const std::string& name) {
  const auto of = [](const Hadron& h, int sign) {
    return Charges{sign * h.charge.value_or(0), sign * h.baryon_number.value_or(0)};
  };
  if (const Hadron* own = couplet::find_hadron(tables, name)) return of(*own, 1);
  return of(*couplet::find_hadron(tables, cascades.antiparticle(name)), -1);
}

// What must hold of every cascade; the first thing that does not, or nothing.
std::string wrong_in(const Tables& tables, const Cascades& cascades, const Cascade& cascade) {
  Charges sum;
  for (std::size_t k = 0; k < cascade.size(); ++k) {
    const CascadeParticle& particle = cascade[k];
    if (!std::isfinite(particle.mass) || particle.mass < 0) return "mass of " + particle.name;
    if (k == 0 ? particle.mother.has_value() : *particle.mother >= k) return "order of " + particle.name;
    if (particle.end == End::decayed) {
      double masses = 0;
      for (std::size_t d = 0; d < particle.daughters; ++d) {
        const CascadeParticle& daughter = cascade[particle.first_daughter + d];
        masses += daughter.mass;
        if (*daughter.mother != k) return "mother of " + daughter.name;
        const std::string& name = particle.row->daughters[d].name;
        if (daughter.name != (particle.conjugate ? cascades.antiparticle(name) : name)) return "name of " + daughter.name;
      }
      if (!(masses < particle.mass)) return "sum of masses of " + particle.row->id;
      continue;
    }
    if ((particle.end == End::undecayable) != (particle.row != nullptr)) return "end of " + particle.name;
    const Charges own = charges_of(tables, cascades, particle.name);
    sum.charge += own.charge;
    sum.baryon_number += own.baryon_number;
  }
  const Charges first = charges_of(tables, cascades, cascade[0].name);
  if (sum.charge != first.charge) return "charge of " + cascade[0].name;
  if (sum.baryon_number != first.baryon_number) return "baryon number of " + cascade[0].name;
  return "";
}

void conservation(Checks& check, const std::string& file, const Tables& tables, bool is_closed, bool has_all) {
  const Cascades cascades(tables);
  std::mt19937_64 rng(SEED);
  std::string wrong;
  long drawn = 0, conjugate = 0, unfinished = 0;
  for (const Parent& parent : tables.parents) {
    for (const std::string& name : {parent.hadron.name, cascades.antiparticle(parent.hadron.name)}) {
      for (int k = 0; k < 1000; ++k, ++drawn) {
        const Cascade cascade = cascades.draw(name, rng);
        if (wrong.empty()) wrong = wrong_in(tables, cascades, cascade);
        for (const CascadeParticle& particle : cascade) {
          conjugate += particle.conjugate;
          unfinished += particle.end == End::undecayable || particle.end == End::closed;
        }
      }
    }
  }
  check(wrong.empty(), file + ": " + std::to_string(drawn) + " cascades of particles and antiparticles conserve charge and "
                       "baryon number, and daughters are lighter than mothers " + wrong);
  // The mesons have rows for every antiparticle.
  check((conjugate == 0) == has_all, file + ": " + std::to_string(conjugate) + " decays by rows of the antiparticle");
  if (is_closed) check(unfinished == 0, file + ": every branch ends in a particle without rows");
}

// At masses just above and below every threshold there is.
void thresholds(Checks& check, const std::string& file, const Tables& tables) {
  const Cascades cascades(tables);
  std::mt19937_64 rng(SEED);
  std::string wrong;
  long drawn = 0, closed = 0;
  for (const Parent& parent : tables.parents) {
    for (const Row& row : parent.rows) {
      double lowest = 0;
      for (const auto& daughter : row.daughters) {
        const Hadron& hadron = *couplet::find_hadron(tables, daughter.name);
        lowest += hadron.line_shape ? hadron.line_shape->low : hadron.mass;
      }
      for (const double threshold : {row.threshold, lowest, row.grid ? row.grid->threshold : row.threshold}) {
        for (const double shift : {-1e-3, -1e-13, 0.0, 1e-15, 1e-13, 1e-9, 1e-6, 1e-3}) {
          const double mass = threshold * (1 + shift);
          if (!(mass > 0) || (parent.hadron.line_shape && mass > parent.hadron.line_shape->high)) continue;
          for (int k = 0; k < 3; ++k, ++drawn) {
            const Cascade cascade = cascades.draw(parent.hadron.name, rng, mass);
            if (wrong.empty()) wrong = wrong_in(tables, cascades, cascade);
            closed += cascade[0].end == End::closed;
          }
        }
      }
    }
  }
  check(wrong.empty() && closed > 0 && closed < drawn,
        file + ": " + std::to_string(drawn) + " cascades at the thresholds, " + std::to_string(closed) + " of them closed " + wrong);
}

// Numbers of the tables replaced by others: refused, or cascades that are right.
void changed_numbers(Checks& check, const Tables& tables) {
  std::mt19937_64 rng(SEED);
  const auto below = [&](std::size_t n) { return static_cast<std::size_t>(couplet::detail::draw_below(rng, n)); };
  const auto change = [&](double& number) {
    const double others[] = {0, -1, couplet::MISSING, 1e300, 1e-300, number * 1.5, number / 2, std::numeric_limits<double>::infinity()};
    number = others[below(8)];
  };
  long refused = 0, right = 0;
  std::string wrong;
  for (int round = 0; round < 5000; ++round) {
    Tables other = tables;
    for (std::size_t k = 0; k <= below(3); ++k) {
      Parent& parent = other.parents[below(other.parents.size())];
      Row& row = parent.rows[below(parent.rows.size())];
      Hadron& hadron = below(2) ? parent.hadron : other.externals[below(other.externals.size())];
      switch (below(8)) {
        case 0: change(hadron.mass); break;
        case 1: change(row.threshold); break;
        case 2: change(row.power ? *row.power : row.width.value); break;
        case 3: change(row.waves.empty() ? row.width.value : row.waves[0].kinematic_factor); break;
        case 4: change(row.waves.empty() ? row.width.value : row.waves[0].flavour_amplitude); break;
        case 5: if (hadron.line_shape) change(hadron.line_shape->low); break;
        case 6: if (hadron.line_shape) hadron.line_shape->cumulative[below(hadron.line_shape->cumulative.size())] *= 2; break;
        default: row.daughters.assign(1 + below(3), {other.parents[below(other.parents.size())].hadron.name, std::nullopt});
      }
    }
    try {
      const Cascades cascades(other);
      for (const Parent& parent : other.parents) {
        const Cascade cascade = cascades.draw(parent.hadron.name, rng);
        const std::string found = wrong_in(other, cascades, cascade);
        // New daughters need not have the charges of their mother.
        if (wrong.empty() && found.find("charge") != 0 && found.find("baryon") != 0) wrong = found;
      }
      ++right;
    } catch (const couplet::Damaged&) {
      ++refused;
    } catch (const std::invalid_argument&) {
      ++refused;
    }
  }
  check(wrong.empty() && right > 500 && refused > 500,
        "changed numbers: " + std::to_string(right) + " tables give right cascades, " + std::to_string(refused) + " are refused " + wrong);
}

void refusals(Checks& check, const Tables& demo) {
  const Cascades cascades(demo);
  std::mt19937_64 rng(SEED);
  std::string names;
  for (const Parent& parent : demo.parents) names += (names.empty() ? "" : ", ") + parent.hadron.name;
  check.refused<couplet::NotOurs>([&] { cascades.draw("p", rng); }, "no rows for \"p\" in this table; there are: " + names,
                                  "a particle without rows is refused");
  for (const double mass : {0.0, -1.0, couplet::MISSING}) {
    check.refused<std::invalid_argument>([&] { cascades.draw("pi0", rng, mass); }, "mass: expected a finite number > 0 in MeV",
                                         "a mass of " + std::to_string(mass) + " is refused");
  }
  Tables single = one_row({"vector", "pion"});
  single.parents[0].rows[0].daughters.pop_back();
  check.refused<couplet::Damaged>([&] { Cascades{single}; }, "row: expected two daughters or more, got 1", "a single daughter is refused");
  // A particle without a lowest mass that decays into two of its kind.
  Tables endless = one_row({"pion", "pion"});
  endless.externals.clear();
  Hadron& parent = endless.parents[0].hadron;
  parent = unstable("pion", 139.57, 50, 0, 0);
  parent.line_shape->distances[0] = 1e-30f;
  endless.parents[0].rows[0].threshold = 0;
  const Cascades never(endless);
  bool ended = true;
  for (int k = 0; k < 10; ++k) {
    try {
      ended = ended && never.draw("pion", rng).size() < 1100;
    } catch (const couplet::Damaged& error) {
      ended = ended && std::string(error.what()) == "pion: expected decays that end, got 1000 particles";
    }
  }
  check(ended, "decays into oneself end, or are refused");
  Tables rows = demo;
  rows.header.policies.antiparticles = "rows";
  const Cascades without(rows);
  const std::string anti = without.antiparticle(demo.parents[0].hadron.name);
  check.refused<couplet::NotOurs>([&] { without.draw(anti, rng); }, "no rows for \"" + anti + "\" in this table; there are: " + names,
                                  "an antiparticle is refused where the table does not imply its rows");
  const Cascade light = cascades.draw("N(1577)+", rng, 500);
  check(light.size() == 1 && light[0].end == End::closed && light[0].mass == 500, "a mass at which all is closed ends the branch");
}

}  // namespace

int main(int argc, char** argv) {
  if (argc != 5) return 2;
  std::setvbuf(stdout, nullptr, _IOLBF, 0);
  std::vector<std::pair<std::string, Tables>> files;
  for (int k = 1; k < argc; ++k) {
    const std::string path = argv[k];
    files.emplace_back(path.substr(path.rfind('/') + 1), couplet::plain::read_tables(path));
  }
  const Tables &demo = files[0].second, &mesons = files[1].second, &octet = files[2].second, &n1520 = files[3].second;
  Checks check;
  joint_masses(check);
  masses_in_tables(check, n1520, mesons);
  products(check, mesons);
  broad_products(check, octet);
  for (const auto& [name, tables] : files) {
    first_rows(check, name, tables);
    conservation(check, name, tables, &tables == &mesons || &tables == &octet, &tables == &mesons);
    thresholds(check, name, tables);
  }
  changed_numbers(check, n1520);
  refusals(check, demo);
  std::printf("%d passed, %d failed\n", check.passed, check.failed);
  return check.failed == 0 ? 0 : 1;
}
