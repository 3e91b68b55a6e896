// SPDX-License-Identifier: MIT
#include "montecarlo/sensitivity/exchange.hpp"

#include "core/base/spread.hpp"

#include <Eigen/QR>
#include <algorithm>

namespace headband::montecarlo {

namespace {

double to_score(double normal) { return std::clamp(base::normal_probability(normal), 0x1p-1000, 1.0 - 0x1p-53); }

/// Normal scores of the correlated unknowns.
void normals(const Dependence& d, const network::Scores<8>& scores, std::vector<Lanes<8>>& normal) {
  normal.resize(d.members.size());
  for (std::size_t i = 0; i < d.members.size(); ++i) {
    normal[i] = base::normal_quantile<8>(scores[static_cast<std::size_t>(d.members[i].unknown)]);
  }
}

}  // namespace

Exchanger::Exchanger(const Sampler& first, const Sampler& second)
    : first_(&first), second_(&second), member_(first.unknowns(), -1) {
  const Dependence& d = first.dependence();
  const std::size_t n = d.members.size();
  for (std::size_t i = 0; i < n; ++i) member_[static_cast<std::size_t>(d.members[i].unknown)] = static_cast<int>(i);
  for (std::size_t i = 0; i < n; ++i) {
    // conditional mean of member i given the others: weights w with R_others w = r_i (least squares where singular)
    const auto size = static_cast<Eigen::Index>(n - 1);
    Eigen::MatrixXd others(size, size);
    Eigen::VectorXd mine(size);
    const auto at = [i](std::size_t k) { return k < i ? k : k + 1; };
    for (std::size_t r = 0; r + 1 < n; ++r) {
      mine(static_cast<Eigen::Index>(r)) = d.correlation.at(i, at(r));
      for (std::size_t k = 0; k + 1 < n; ++k) {
        others(static_cast<Eigen::Index>(r), static_cast<Eigen::Index>(k)) = d.correlation.at(at(r), at(k));
      }
    }
    std::vector<double> weights(n, 0.0);
    if (n > 1) {
      const Eigen::VectorXd w = others.completeOrthogonalDecomposition().solve(mine);
      for (std::size_t r = 0; r + 1 < n; ++r) weights[at(r)] = w(static_cast<Eigen::Index>(r));
    }
    regression_.push_back(std::move(weights));
  }
}

void Exchanger::block(long long first, std::size_t unknown, Exchange way, network::Scores<8>& scores) const {
  thread_local network::Scores<8> other;
  thread_local std::vector<Lanes<8>> mine, theirs;
  first_->block(first, scores);
  second_->block(first, other);
  if (member_[unknown] < 0) {
    scores[unknown] = other[unknown];
    return;
  }
  const Dependence& d = first_->dependence();
  const auto m = static_cast<std::size_t>(member_[unknown]);
  normals(d, scores, mine);
  normals(d, other, theirs);
  if (way == Exchange::with_its_company) {
    const Lanes<8> change = theirs[m] - mine[m];
    for (std::size_t j = 0; j < mine.size(); ++j) {
      const double correlation = d.correlation.at(m, j);
      if (j == m || correlation == 0.0) continue;
      Lanes<8>& score = scores[static_cast<std::size_t>(d.members[j].unknown)];
      for (int lane = 0; lane < 8; ++lane) score.set(lane, to_score((mine[j] + correlation * change)[lane]));
    }
    scores[unknown] = other[unknown];
    return;
  }
  Lanes<8> own = theirs[m];
  for (std::size_t j = 0; j < mine.size(); ++j) own = own + regression_[m][j] * (mine[j] - theirs[j]);
  for (int lane = 0; lane < 8; ++lane) scores[unknown].set(lane, to_score(own[lane]));
}

}  // namespace headband::montecarlo
