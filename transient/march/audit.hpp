#pragma once
// SPDX-License-Identifier: MIT
//
// The volume audit: what came in, went out, is stored and stands empty, by the trapezoid rule.

#include "core/answers/study.hpp"
#include "transient/march/march.hpp"

namespace headband::transient {

/// Sums the volumes of one run. Flows are those of the rows, never the scheme's own flux.
class AuditSums {
 public:
  void begin(const March<1>& march);
  void step(const March<1>& march);
  void before_jump(const March<1>& march);
  void after_jump(const March<1>& march);
  [[nodiscard]] answers::Audit result(const March<1>& march) const;

 private:
  struct Exchange {
    double in = 0.0;       ///< into the line [m3/s]
    double passing = 0.0;  ///< half the sum of all exchanges, sign aside [m3/s]
  };
  [[nodiscard]] static Exchange exchange(const March<1>& march);
  [[nodiscard]] double stored(const March<1>& march) const;

  std::vector<double> first_head_;  ///< per row [m]
  Exchange last_;
  double in_ = 0.0, passed_ = 0.0;  ///< [m3]
  double base_ = 0.0;               ///< stored volume the sums start from [m3]
  double before_jump_ = 0.0;
};

}  // namespace headband::transient
