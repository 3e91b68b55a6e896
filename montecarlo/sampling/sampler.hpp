#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/values.hpp"
#include "montecarlo/sampling/dependence.hpp"
#include "montecarlo/sampling/philox.hpp"
#include "montecarlo/sampling/sobol.hpp"

#include <cstdint>
#include <span>
#include <vector>

namespace headband::montecarlo {

using base::Lanes;

/// The scores of every draw of a case: the design's points, correlated as the case says. Shared by all threads.
///
/// Draw i depends on (seed, i, name) alone in plain and Sobol' designs, on their number too in a Latin hypercube.
/// Unknowns that are not random get 0.5, the middle of their range.
class Sampler {
 public:
  /// @param draws how many there will be; what `draws_of_design` made of the wish
  /// @throws base::InputError with more unknowns than Sobol' points have dimensions, or draws than a hypercube takes
  Sampler(const network::Case& c, network::Design design, std::uint64_t seed, long long draws);

  /// Scores of the draws `first` … `first + 7`; lanes behind the last draw hold something valid.
  /// @param first a multiple of 8
  /// @param scores one entry per unknown; storage is kept
  void block(long long first, network::Scores<8>& scores) const;

  /// The same for the blocks that follow one another from `first` on, in less time than one by one.
  void blocks(long long first, std::span<network::Scores<8>> scores) const { spaced(first, 1, scores); }

  /// Scores of the draws `first`, `first + stride`, …, eight a block: the bits they have in their own blocks.
  void spaced(long long first, long long stride, std::span<network::Scores<8>> scores) const;

  /// Scores of one draw: the bits it has in its block.
  [[nodiscard]] network::Scores<1> draw(long long draw) const;

  /// A second, independent set of draws of the same design, for variance shares.
  [[nodiscard]] Sampler twin() const;

  [[nodiscard]] const Dependence& dependence() const { return dependence_; }
  [[nodiscard]] long long draws() const { return draws_; }
  [[nodiscard]] std::size_t unknowns() const { return names_.size(); }

 private:
  Sampler(network::Design design,
          std::uint64_t seed,
          long long draws,
          std::vector<std::uint64_t> names,
          std::vector<bool> random,
          Dependence dependence,
          std::size_t first_dimension);
  void make_points();
  template <int W>
  void depend(network::Scores<W>& scores) const;
  void fill(std::size_t unknown, long long first, long long stride, std::span<Lanes<8>> scores) const;

  static constexpr std::size_t at_once = 16;  ///< blocks whose scores stand in the first-level cache

  network::Design design_;
  std::uint64_t seed_;
  long long draws_;
  PhiloxKey key_;
  std::vector<std::uint64_t> names_;
  std::vector<bool> random_;
  Dependence dependence_;
  std::size_t first_dimension_ = 0;
  std::vector<ScrambledSobol> sobol_;               ///< per unknown, Sobol' design
  std::vector<std::vector<std::uint32_t>> strata_;  ///< per unknown, Latin hypercube
};

/// How many draws the design takes for a wish: Sobol' rounds up to 16·2^m, the others take what is asked.
[[nodiscard]] long long draws_of_design(network::Design design, long long asked);

}  // namespace headband::montecarlo
