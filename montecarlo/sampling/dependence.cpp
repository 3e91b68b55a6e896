// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/dependence.hpp"

#include "core/network/nearest_word.hpp"

#include <fmt/format.h>
#include <Eigen/Eigenvalues>
#include <algorithm>
#include <cmath>
#include <numbers>

namespace headband::montecarlo {

namespace {

constexpr double workable_eigenvalue = -1e-10;
constexpr double no_pivot = 1e-12;  ///< what is left of a variance of 1 under this is rounding

Eigen::MatrixXd to_eigen(const CorrelationMatrix& m) {
  const auto n = static_cast<Eigen::Index>(m.size);
  return Eigen::Map<const Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor>>(m.entry.data(), n, n);
}

int unknown_named(const network::Case& c, const std::string& name) {
  for (std::size_t i = 0; i < c.unknowns.size(); ++i)
    if (c.unknowns[i].name == name) return static_cast<int>(i);
  return -1;
}

/// Members in file order and their matrix.
Dependence collect(const network::Case& c) {
  std::vector<int> members;
  for (const auto& pair : c.together) {
    for (const auto& name : {pair.first, pair.second}) members.push_back(unknown_named(c, name));
  }
  std::sort(members.begin(), members.end());
  members.erase(std::unique(members.begin(), members.end()), members.end());
  Dependence d;
  for (const int unknown : members)
    if (unknown >= 0) d.members.push_back({.unknown = unknown, .terms = {}});
  auto& m = d.correlation;
  m.size = d.members.size();
  m.entry.assign(m.size * m.size, 0.0);
  for (std::size_t i = 0; i < m.size; ++i) m.at(i, i) = 1.0;
  const auto member_of = [&](const std::string& name) {
    const int unknown = unknown_named(c, name);
    std::size_t i = 0;
    while (i < m.size && d.members[i].unknown != unknown) ++i;
    return i;
  };
  for (const auto& pair : c.together) {
    const std::size_t i = member_of(pair.first), j = member_of(pair.second);
    if (i < m.size && j < m.size && i != j) m.at(i, j) = m.at(j, i) = copula_correlation(pair.rank_correlation);
  }
  return d;
}

/// The nearest workable rank correlations in two digits: rounded, then drawn towards zero until they hold.
std::string offer(const network::Case& c, const Dependence& d) {
  const CorrelationMatrix nearest = nearest_workable(d.correlation);
  for (double shrink = 1.0; shrink >= 0.0; shrink -= 0.01) {
    CorrelationMatrix rounded = nearest;
    std::string words;
    for (std::size_t i = 0; i < nearest.size; ++i) {
      for (std::size_t j = i + 1; j < nearest.size; ++j) {
        const double rank =
            std::trunc(rank_correlation(nearest.at(i, j)) * shrink * 100.0 + (nearest.at(i, j) < 0.0 ? -0.5 : 0.5)) /
            100.0;
        rounded.at(i, j) = rounded.at(j, i) = copula_correlation(rank);
        if (rank == 0.0) continue;
        const auto name = [&](std::size_t k) {
          return c.unknowns[static_cast<std::size_t>(d.members[k].unknown)].name;
        };
        words += fmt::format("{}\"{}, {}\" = {:.2f}", words.empty() ? "" : ", ", name(i), name(j), rank);
      }
    }
    if (least_eigenvalue(rounded) >= workable_eigenvalue) return words;
  }
  return {};
}

}  // namespace

double copula_correlation(double rank) {
  if (std::fabs(rank) == 1.0) return rank;
  return 2.0 * std::sin(std::numbers::pi / 6.0 * rank);
}

double rank_correlation(double copula) { return 6.0 / std::numbers::pi * std::asin(0.5 * copula); }

double least_eigenvalue(const CorrelationMatrix& m) {
  if (m.size == 0) return 1.0;
  const Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd> solver(to_eigen(m), Eigen::EigenvaluesOnly);
  return solver.eigenvalues().minCoeff();
}

CorrelationMatrix nearest_workable(const CorrelationMatrix& m) {
  Eigen::MatrixXd x = to_eigen(m);
  Eigen::MatrixXd correction = Eigen::MatrixXd::Zero(x.rows(), x.cols());
  for (int pass = 0; pass < 2000; ++pass) {
    const Eigen::MatrixXd start = x - correction;
    const Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd> solver(start);
    const Eigen::MatrixXd positive =
        solver.eigenvectors() * solver.eigenvalues().cwiseMax(0.0).asDiagonal() * solver.eigenvectors().transpose();
    correction = positive - start;
    Eigen::MatrixXd next = positive;
    next.diagonal().setOnes();
    const double change = (next - x).cwiseAbs().maxCoeff();
    x = next;
    if (change < 1e-12) break;
  }
  CorrelationMatrix nearest = m;
  for (std::size_t i = 0; i < m.size; ++i) {
    for (std::size_t j = 0; j < m.size; ++j) {
      const double entry = x(static_cast<Eigen::Index>(i), static_cast<Eigen::Index>(j));
      nearest.at(i, j) = i == j ? 1.0 : std::clamp(entry, -1.0, 1.0);
    }
  }
  return nearest;
}

base::Problems check_together(const network::Case& c) {
  base::Problems problems;
  std::vector<std::string> names;
  for (const auto& u : c.unknowns) names.push_back(u.name);
  for (std::size_t k = 0; k < c.together.size(); ++k) {
    const auto& pair = c.together[k];
    const std::string path = "together/" + pair.first + ", " + pair.second;
    const auto say =
        [&](const std::string& what, const std::string& value, const std::string& bound, const std::string& hint) {
          problems.push_back({pair.place, path, what, value, bound, hint});
        };
    for (const auto& name : {pair.first, pair.second}) {
      const int unknown = unknown_named(c, name);
      if (unknown < 0) {
        const std::string near = network::nearest_word(name, names);
        say("no unknown has this name",
            name,
            "",
            near.empty() ? "only a value with a spread is an unknown" : "did you mean `" + near + "`?");
      } else if (!c.unknowns[static_cast<std::size_t>(unknown)].random) {
        say("a range that is not random has no correlation",
            name,
            "",
            "leave the pair out, or give the value a spread");
      }
    }
    if (!(std::fabs(pair.rank_correlation) <= 1.0)) {
      say("a rank correlation lies between -1 and 1", fmt::format("{}", pair.rank_correlation), "-1 … 1", "");
    }
    if (pair.first == pair.second)
      say("an unknown is always together with itself", pair.first, "", "name two unknowns");
    for (std::size_t other = 0; other < k; ++other) {
      const auto& before = c.together[other];
      const bool same = (before.first == pair.first && before.second == pair.second) ||
                        (before.first == pair.second && before.second == pair.first);
      if (same) say("this pair is given twice", "", "", "keep one of the two");
    }
  }
  if (!problems.empty() || c.together.empty()) return problems;
  const Dependence d = collect(c);
  const double least = least_eigenvalue(d.correlation);
  if (least < workable_eigenvalue) {
    problems.push_back({c.together.front().place,
                        "together",
                        "no unknowns can have these rank correlations at the same time",
                        fmt::format("least eigenvalue {:.3g}", least),
                        "a least eigenvalue of 0",
                        "the nearest that work: " + offer(c, d)});
  }
  return problems;
}

Dependence make_dependence(const network::Case& c) {
  Dependence d = collect(c);
  const std::size_t n = d.correlation.size;
  CorrelationMatrix factor = d.correlation;  // its lower triangle, row by row (Cholesky; a pivot of zero ends a column)
  for (std::size_t i = 0; i < n; ++i) {
    for (std::size_t j = 0; j <= i; ++j) {
      double left = d.correlation.at(i, j);
      for (std::size_t k = 0; k < j; ++k) left -= factor.at(i, k) * factor.at(j, k);
      if (i == j) {
        factor.at(i, i) = left > no_pivot ? std::sqrt(left) : 0.0;
      } else {
        factor.at(i, j) = factor.at(j, j) > 0.0 ? left / factor.at(j, j) : 0.0;
      }
    }
    auto& member = d.members[i];
    for (std::size_t j = 0; j <= i; ++j)
      if (std::fabs(factor.at(i, j)) > no_pivot) member.terms.emplace_back(j, factor.at(i, j));
    for (std::size_t k = 0; k < i && member.same_as < 0; ++k) {
      if (std::fabs(d.correlation.at(i, k)) != 1.0 || d.members[k].same_as >= 0) continue;
      member.same_as = static_cast<int>(k);
      member.mirrored = d.correlation.at(i, k) < 0.0;
    }
  }
  return d;
}

}  // namespace headband::montecarlo
