// Weights that turn a simulation made with decay tables into one made with another set of numbers, a replica of the
// tables: drawn within their errors, another minimum of the fit, or another width model. C++17, standard library only.
//
// The weight of a decay is the fraction of its row in the replica over that in the table, at the parent's mass; a chain's
// weight is the product over its decays. An antiparticle without rows of its own has the weights of its particle.
#ifndef COUPLET_REPLICAS_HPP
#define COUPLET_REPLICAS_HPP

#include "couplet_tables.hpp"
#include "couplet_widths.hpp"

namespace couplet {

// Weights of the decays of one parent, made ready once. It keeps no reference to the tables.
//
// Throws Damaged for a row whose ratios are not one for each replica, finite and >= 0, and as ParentWidths does.
class ReplicaWeights {
 public:
  ReplicaWeights(const Tables& tables, const Parent& parent)
      : name_(parent.hadron.name), count_(tables.replicas.size()), widths_(tables, parent) {
    for (const Row& row : parent.rows) {
      ids_.push_back(row.id);
      ratios_.push_back(row.replica_ratios);
      const auto wrong = [](float ratio) { return !(ratio >= 0) || !std::isfinite(ratio); };
      const std::vector<float>& ratios = ratios_.back();
      if (ratios.empty() || (ratios.size() == count_ && std::none_of(ratios.begin(), ratios.end(), wrong))) continue;
      throw Damaged(row.id + ": expected one finite ratio >= 0 for each of " + std::to_string(count_) +
                    " replicas, got others");
    }
  }

  // The weights of a decay by a row, in the order of Tables::replicas, at the parent's mass in MeV. Where a replica
  // leaves no width, its weight is 0. Throws NotOurs for a row of another parent, std::invalid_argument as ParentWidths.
  std::vector<double> of(const Row& row, double mass) const {
    const auto found = std::find(ids_.begin(), ids_.end(), row.id);
    if (found == ids_.end()) throw NotOurs("expected a row of " + name_ + ", got \"" + row.id + "\"");
    const auto chosen = static_cast<std::size_t>(found - ids_.begin());
    const std::vector<double> widths = widths_.widths(mass);
    double total = 0;
    for (const double width : widths) total += width;
    std::vector<double> weights(count_);
    for (std::size_t k = 0; k < count_; ++k) {
      double sum = 0;
      for (std::size_t j = 0; j < widths.size(); ++j) sum += ratio(j, k) * widths[j];
      weights[k] = sum > 0 ? ratio(chosen, k) * total / sum : 0;
    }
    return weights;
  }

 private:
  double ratio(std::size_t row, std::size_t replica) const { return ratios_[row].empty() ? 1 : ratios_[row][replica]; }

  std::string name_;
  std::size_t count_;
  ParentWidths widths_;
  std::vector<std::string> ids_;
  std::vector<std::vector<float>> ratios_;
};

// Multiplies the weights of one more decay into those of a chain; a chain that is empty takes them.
inline void multiply_weights(std::vector<double>& chain, const std::vector<double>& decay) {
  if (chain.empty()) {
    chain = decay;
    return;
  }
  if (chain.size() != decay.size()) throw std::invalid_argument("weights: expected as many in both lists, got others");
  for (std::size_t k = 0; k < chain.size(); ++k) chain[k] *= decay[k];
}

}  // namespace couplet

#endif
