// Whole decay cascades from a decay table: rows and masses of every generation. C++17, standard library only.
//
// A particle's row is drawn with the partial widths at its mass, of the rows whose daughters can be light enough, and never
// drawn again. The masses of a row's daughters are drawn jointly with chance
//
//     rho(w1) ... rho(wn) K(M, w1, ..., wn)    where w1 + ... + wn < M,
//
// rho the daughters' line shapes in the table, K the sum over the row's waves of strength times width model at these masses,
// or (M - w1 - ... - wn)^power for a row without waves (power 0 if it has none). A daughter that has no line shape or is
// narrower than 1 MeV has its nominal mass, as for the widths in the table. Each daughter then decays at the mass drawn.
//
// Only masses are drawn. Momenta, and whatever correlates them, are the generator's; flat phase space fits every decay,
// since the daughters' masses always add up to less than the mother's.
#ifndef COUPLET_CASCADES_HPP
#define COUPLET_CASCADES_HPP

#include <map>

#include "couplet_tables.hpp"
#include "couplet_widths.hpp"

namespace couplet {

// What becomes of a particle of a cascade.
enum class End {
  // It has a row and daughters.
  decayed,
  // The table has no rows for it: it is stable, flies on, or is left to the generator.
  left,
  // The row drawn has no daughters: a remainder.
  undecayable,
  // No row is open at its mass.
  closed
};

struct CascadeParticle {
  std::string name;
  // MeV.
  double mass = MISSING;
  // Place of the mother in the list; none for the first particle.
  std::optional<std::size_t> mother;
  End end = End::left;
  // The row drawn, in the tables; null unless it decayed or is undecayable.
  const Row* row = nullptr;
  // True where the row is one of the antiparticle: every daughter is the antiparticle of the row's.
  bool conjugate = false;
  // The daughters are in the list from `first_daughter` on, as many as the row has, in its order.
  std::size_t first_daughter = 0, daughters = 0;
};

namespace detail {

// A daughter narrower than this, in MeV, has its nominal mass.
inline constexpr double NARROW = 1;
// Tries after which a draw of masses takes the one that came nearest; the least efficient channels need thousands.
inline constexpr int MOST_TRIES = 100'000;
// No table of real hadrons comes near this.
inline constexpr std::size_t MOST_PARTICLES = 1000;

// What a mass is drawn from: a line shape, or else the only mass.
struct MassSource {
  double nominal = MISSING;
  const LineShape* shape = nullptr;

  double lowest() const { return shape ? shape->low : nominal; }
};

inline MassSource mass_source(const Hadron& hadron) {
  if (!hadron.line_shape) return {hadron.mass, nullptr};
  check_points(*hadron.line_shape);
  if (!(hadron.line_shape->low >= 0)) throw Damaged(hadron.name + ": line shape: expected a lowest mass >= 0, got another");
  return {hadron.mass, &*hadron.line_shape};
}

inline double sum_of(const std::vector<double>& numbers) {
  double sum = 0;
  for (const double number : numbers) sum += number;
  return sum;
}

// One row made ready for drawing the masses of its daughters.
struct JointMasses {
  std::vector<MassSource> sources;
  double lowest = 0;
  double power = 0;
  // Strength and model of each wave.
  std::vector<std::pair<double, WidthModel>> waves;

  // What the chance of these masses is weighted with at a mass of the parent.
  double factor(double parent, const std::vector<double>& masses) const {
    if (waves.empty()) return std::pow(parent - sum_of(masses), power);
    const double momentum = breakup_momentum(parent, masses[0], masses[1]);
    if (momentum == 0) return 0;
    double sum = 0;
    for (const auto& [strength, k] : waves) sum += strength * k({parent, masses[0], masses[1], momentum});
    return sum;
  }

  // By rejection: each mass from the part of its line shape that the others leave at their lowest masses; those that do
  // not fit are thrown away; one more number v accepts the others if v K(lowest masses) < K, which is largest there in
  // every model. (Model d in an S wave may pass that bound by less than 1 %.) After MOST_TRIES the ones with the largest
  // K/v are taken: they are accepted first if the bound is lowered step by step, so that their chance is the right one
  // but for terms of order 1/MOST_TRIES.
  template <class Generator>
  std::vector<double> draw(double parent, Generator& rng) const {
    std::vector<double> low, part(sources.size());
    for (const MassSource& source : sources) low.push_back(source.lowest());
    bool all_nominal = true;
    for (std::size_t k = 0; k < sources.size(); ++k) {
      if (!sources[k].shape) continue;
      all_nominal = false;
      double others = 0;
      for (std::size_t i = 0; i < low.size(); ++i) others += i == k ? 0 : low[i];
      part[k] = chance_up_to(*sources[k].shape, parent - others);
    }
    if (all_nominal) return low;
    const double bound = factor(parent, low);
    std::vector<double> nearest = low, masses = low;
    double ratio = 0;
    for (int tries = 0; tries < MOST_TRIES; ++tries) {
      for (std::size_t k = 0; k < sources.size(); ++k) {
        if (sources[k].shape) masses[k] = mass_at(*sources[k].shape, draw_uniform(rng) * part[k]);
      }
      if (!(sum_of(masses) < parent)) continue;
      const double v = draw_uniform(rng), weight = factor(parent, masses);
      if (v * bound < weight) return masses;
      if (weight > ratio * v) {
        nearest = masses;
        ratio = weight / v;
      }
    }
    return nearest;
  }
};

// What K of a wave is multiplied with to give its width at the nominal mass, or in the fit where that is 0.
inline double strength_of(const Row& row, const Wave& wave) {
  const double width = wave.re * wave.re + wave.im * wave.im;
  if (width > 0 && wave.kinematic_factor > 0) return width / wave.kinematic_factor;
  return row.identical_factor * wave.flavour_amplitude * wave.flavour_amplitude;
}

inline JointMasses joint_masses(const Tables& tables, const Parent& parent, const Row& row) {
  if (row.daughters.size() == 1) throw Damaged(row.id + ": expected two daughters or more, got 1");
  JointMasses joint;
  std::vector<const Hadron*> hadrons;
  for (const Daughter& daughter : row.daughters) {
    const Hadron& hadron = *hadrons.emplace_back(&daughter_of(tables, row, daughter));
    const bool narrow = hadron.width && *hadron.width < NARROW;
    joint.sources.push_back(narrow ? MassSource{hadron.mass, nullptr} : mass_source(hadron));
    joint.lowest += joint.sources.back().lowest();
  }
  joint.power = row.power.value_or(0);
  if (hadrons.size() != 2) return joint;
  double sum = 0;
  for (const Wave& wave : row.waves) {
    const Vertex vertex{row.id, parent.hadron.two_j, hadrons[0]->two_j, hadrons[1]->two_j};
    joint.waves.emplace_back(strength_of(row, wave), width_model(wave, vertex));
    sum += joint.waves.back().first;
  }
  // Without strengths the waves count alike.
  if (!(sum > 0 && std::isfinite(sum))) {
    for (auto& [strength, k] : joint.waves) strength = 1;
  }
  return joint;
}

}  // namespace detail

// Draws whole cascades from one table, made ready once. The tables must outlive it and what it draws.
//
// Throws Damaged for a row this reader cannot evaluate, or one with a single daughter.
class Cascades {
 public:
  explicit Cascades(const Tables& tables) : implied_(tables.header.policies.antiparticles == "implied") {
    for (const Parent& parent : tables.parents) {
      Ready ready{&parent, ParentWidths(tables, parent), {}};
      for (const Row& row : parent.rows) ready.rows.push_back(detail::joint_masses(tables, parent, row));
      parents_.emplace(parent.hadron.name, std::move(ready));
      names_ += (names_.empty() ? "" : ", ") + parent.hadron.name;
      know(parent.hadron);
    }
    for (const Hadron& hadron : tables.externals) know(hadron);
  }
  explicit Cascades(Tables&&) = delete;

  // A cascade down to particles without rows, as a list in which every mother comes before her daughters.
  //
  // `name` is a parent of the table, or the antiparticle of one if the table says that these are implied; `mass` of the
  // first particle in MeV is drawn from its line shape if not given, and nominal if it has none. Random numbers are used
  // in this order: one for that mass, if it is drawn; then for every particle with rows, in the order of the list, one
  // for the row and those for its daughters' masses.
  //
  // Throws NotOurs for a name without rows, std::invalid_argument for a mass that is not a finite number > 0 or past the
  // end of a grid, Damaged for a table whose decays do not end.
  template <class Generator>
  std::vector<CascadeParticle> draw(const std::string& name, Generator& rng,
                                    std::optional<double> mass = std::nullopt) const {
    const Ready* first = rows_of(name).first;
    if (!first) throw NotOurs("no rows for \"" + name + "\" in this table; there are: " + names_);
    if (mass && !(std::isfinite(*mass) && *mass > 0)) {
      throw std::invalid_argument("mass: expected a finite number > 0 in MeV");
    }
    const detail::MassSource source = detail::mass_source(first->parent->hadron);
    if (!mass) mass = source.shape ? detail::mass_at(*source.shape, detail::draw_uniform(rng)) : source.nominal;
    std::vector<CascadeParticle> cascade(1);
    cascade[0].name = name;
    cascade[0].mass = *mass;
    for (std::size_t k = 0; k < cascade.size(); ++k) {
      const auto [ready, conjugate] = rows_of(cascade[k].name);
      if (!ready) continue;
      cascade[k].conjugate = conjugate;
      const std::size_t row = draw_row(*ready, cascade[k].mass, detail::draw_uniform(rng));
      if (row == ready->rows.size()) {
        cascade[k].end = End::closed;
        continue;
      }
      cascade[k].row = &ready->parent->rows[row];
      cascade[k].end = cascade[k].row->daughters.empty() ? End::undecayable : End::decayed;
      if (cascade[k].end == End::undecayable) continue;
      cascade[k].first_daughter = cascade.size();
      cascade[k].daughters = cascade[k].row->daughters.size();
      const std::vector<double> masses = ready->rows[row].draw(cascade[k].mass, rng);
      for (std::size_t d = 0; d < masses.size(); ++d) {
        const std::string& daughter = cascade[k].row->daughters[d].name;
        CascadeParticle& particle = cascade.emplace_back();
        particle.name = conjugate ? antiparticle(daughter) : daughter;
        particle.mass = masses[d];
        particle.mother = k;
      }
      if (cascade.size() > detail::MOST_PARTICLES) {
        throw Damaged(name + ": expected decays that end, got " + std::to_string(detail::MOST_PARTICLES) + " particles");
      }
    }
    return cascade;
  }

  // The name of the antiparticle of a hadron in the tables; its own name if it is its own.
  const std::string& antiparticle(const std::string& name) const {
    const auto found = antiparticles_.find(name);
    return found == antiparticles_.end() ? name : found->second;
  }

 private:
  struct Ready {
    const Parent* parent;
    ParentWidths widths;
    std::vector<detail::JointMasses> rows;
  };

  // The names both ways round; what a hadron of the table says of itself counts first.
  void know(const Hadron& hadron) {
    if (!hadron.antiparticle) return;
    antiparticles_[hadron.name] = *hadron.antiparticle;
    antiparticles_.emplace(*hadron.antiparticle, hadron.name);
  }

  // The rows of a hadron, and whether they are its antiparticle's; null if there are none.
  std::pair<const Ready*, bool> rows_of(const std::string& name) const {
    const auto own = parents_.find(name);
    if (own != parents_.end()) return {&own->second, false};
    const auto other = implied_ ? parents_.find(antiparticle(name)) : parents_.end();
    return {other == parents_.end() ? nullptr : &other->second, true};
  }

  // A row by its partial width at a mass, of those whose daughters can be light enough; past the last row if all are closed.
  static std::size_t draw_row(const Ready& ready, double mass, double u) {
    // A mass from the very end of a line shape may be 0.
    if (!(mass > 0)) return ready.rows.size();
    std::vector<double> widths = ready.widths.widths(mass);
    for (std::size_t k = 0; k < widths.size(); ++k) {
      if (!(ready.rows[k].lowest < mass)) widths[k] = 0;
    }
    const double wanted = u * detail::sum_of(widths);
    double sum = 0;
    std::size_t drawn = widths.size();
    for (std::size_t k = 0; k < widths.size(); ++k) {
      if (widths[k] == 0) continue;
      sum += widths[k];
      drawn = k;
      if (wanted < sum) break;
    }
    return drawn;
  }

  bool implied_;
  // Of the parents, for messages.
  std::string names_;
  std::map<std::string, Ready> parents_;
  std::map<std::string, std::string> antiparticles_;
};

}  // namespace couplet

#endif
