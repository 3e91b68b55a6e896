#pragma once
// SPDX-License-Identifier: MIT
//
// Scores with one input taken from a second, independent set of draws. Where inputs are correlated (a Gaussian copula)
// there are two ways, and both are needed (Mara & Tarantola 2012, Reliab. Eng. Syst. Saf. 107, 115): x drags the others
// with it (its first-order share holds what it tells about them), or only what is its own changes (its total share).

#include "montecarlo/sampling/sampler.hpp"

#include <vector>

namespace headband::montecarlo {

enum class Exchange {
  with_its_company,  ///< x from the other set, the others moved as far as x explains them
  alone,             ///< the others stay; of x only the part they do not explain is new
};

/// Makes mixed blocks of two samplers of one case.
class Exchanger {
 public:
  /// @param first,second independent samplers (`second` = first.twin()); both must outlive this
  Exchanger(const Sampler& first, const Sampler& second);

  /// True where the two ways differ: the unknown has a correlated companion.
  [[nodiscard]] bool correlated(std::size_t unknown) const { return member_[unknown] >= 0; }

  /// Scores of eight draws of the first set with `unknown` exchanged.
  void block(long long first, std::size_t unknown, Exchange way, network::Scores<8>& scores) const;

 private:
  const Sampler* first_;
  const Sampler* second_;
  std::vector<int> member_;                      ///< per unknown: index among the correlated ones, or -1
  std::vector<std::vector<double>> regression_;  ///< per member: weights of the others in its conditional mean
};

}  // namespace headband::montecarlo
