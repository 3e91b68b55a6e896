#pragma once
// SPDX-License-Identifier: MIT
//
// How a section of `realise` asks a quantity for its number: the written value, or the value at W scores.

#include "core/network/values.hpp"

#include <limits>
#include <variant>

namespace headband::network::detail {

inline constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();

/// The number a single run uses: the written value; the middle of a not-random range.
[[nodiscard]] inline double central(const Quantity& quantity) {
  if (const auto* range = std::get_if<base::NotRandom>(&quantity.spread)) return 0.5 * (range->low + range->high);
  return quantity.value;
}

/// One group of W draws; without scores, the central run in every lane.
template <int W>
class Draw {
 public:
  explicit Draw(const Scores<W>* scores) : scores_(scores) {}
  /// @param drawn the value of each unknown at its score, where it is known already
  Draw(const Scores<W>& scores, const std::vector<Lanes<W>>& drawn) : scores_(&scores), drawn_(&drawn) {}

  /// Number of the quantity [SI]; NaN where it is not given.
  [[nodiscard]] Lanes<W> operator()(const Quantity& quantity) const {
    if (scores_ == nullptr || quantity.unknown < 0) return Lanes<W>(central(quantity));
    if (drawn_ != nullptr) return (*drawn_)[static_cast<std::size_t>(quantity.unknown)];
    return base::value<W>(quantity, (*scores_)[static_cast<std::size_t>(quantity.unknown)]);
  }
  /// The same with a default for what is not given.
  [[nodiscard]] Lanes<W> operator()(const Quantity& quantity, double missing) const {
    return quantity.given() ? (*this)(quantity) : Lanes<W>(missing);
  }
  /// Alternative of a model choice in one lane.
  template <class T>
  [[nodiscard]] const T& operator()(const Choice<T>& choice, int lane) const {
    if (scores_ == nullptr || choice.unknown < 0) return choice.central();
    return choice.at((*scores_)[static_cast<std::size_t>(choice.unknown)][lane]);
  }

 private:
  const Scores<W>* scores_;
  const std::vector<Lanes<W>>* drawn_ = nullptr;
};

/// True where some draw changes one of the quantities.
template <class... Q>
[[nodiscard]] bool varies(const Q&... quantities) {
  return ((quantities.unknown >= 0) || ...);
}

}  // namespace headband::network::detail
