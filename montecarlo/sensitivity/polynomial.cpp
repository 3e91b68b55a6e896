// SPDX-License-Identifier: MIT
#include "montecarlo/sensitivity/polynomial.hpp"

#include "core/base/spread.hpp"

#include <Eigen/Cholesky>
#include <algorithm>
#include <cmath>
#include <numeric>

namespace headband::montecarlo {

namespace {

constexpr int highest_degree = 8;
constexpr int most_terms = 120;
constexpr double settled = 1e-9;  ///< share of the variance left open that no higher degree is worth trying for
constexpr int draws_a_term = 8;   ///< a fit rests on at least this many draws per coefficient

/// Functions of one input, orthonormal under its distribution: [degree - 1][draw].
using Functions = std::vector<std::vector<double>>;

/// Normal scores of all draws, eight at a time.
std::vector<double> normal_scores(const std::vector<double>& score) {
  std::vector<double> z(score.size());
  std::size_t i = 0;
  for (; i + 8 <= score.size(); i += 8) base::store_eight(base::normal_quantile<8>(base::load_eight(&score[i])), &z[i]);
  for (; i < score.size(); ++i) z[i] = base::normal_quantile<1>(base::Lanes<1>(score[i])).number;
  return z;
}

/// Functions by a recurrence of three terms, f_(k+1) = rise_k x f_k - fall_k f_(k-1), f_0 = 1; `norm_k` times f_k.
template <class Rise, class Fall, class Norm>
Functions recurrent(const std::vector<double>& x, const Rise& rise, const Fall& fall, const Norm& norm) {
  const std::size_t n = x.size();
  Functions f(highest_degree);
  std::vector<double> before(n, 1.0), now = x, next(n);
  for (int k = 1; k <= highest_degree; ++k) {
    const double up = rise(k), down = fall(k), factor = norm(k);
    auto& out = f[static_cast<std::size_t>(k - 1)];
    out.resize(n);
    for (std::size_t i = 0; i < n; ++i) out[i] = factor * now[i];
    for (std::size_t i = 0; i < n; ++i) next[i] = up * x[i] * now[i] - down * before[i];
    before.swap(now);
    now.swap(next);
  }
  return f;
}

Functions hermite(const std::vector<double>& score) {
  // h_(k+1) = (z h_k - sqrt(k) h_(k-1)) / sqrt(k + 1)
  return recurrent(
      normal_scores(score),
      [](int k) { return 1.0 / std::sqrt(k + 1.0); },
      [](int k) { return std::sqrt(k / (k + 1.0)); },
      [](int) { return 1.0; });
}

Functions legendre(const std::vector<double>& score) {
  std::vector<double> x(score.size());
  for (std::size_t i = 0; i < x.size(); ++i) x[i] = 2.0 * score[i] - 1.0;
  // (k + 1) P_(k+1) = (2k + 1) x P_k - k P_(k-1); norm 1 / sqrt(2k + 1)
  return recurrent(
      x,
      [](int k) { return (2.0 * k + 1.0) / (k + 1.0); },
      [](int k) { return k / (k + 1.0); },
      [](int k) { return std::sqrt(2.0 * k + 1.0); });
}

/// Steps between options: function k tells option k from all behind it.
Functions options(const std::vector<double>& score, const std::vector<double>& ends) {
  Functions f;
  double from = 0.0;
  for (std::size_t k = 0; k + 1 < ends.size() && k < static_cast<std::size_t>(highest_degree); ++k) {
    const double here = ends[k] - from, behind = 1.0 - ends[k];
    std::vector<double> column(score.size(), 0.0);
    if (here > 0.0 && behind > 0.0) {
      for (std::size_t i = 0; i < score.size(); ++i) {
        if (score[i] >= from)
          column[i] = (score[i] < ends[k] ? 1.0 / here : -1.0 / behind) / std::sqrt(1.0 / here + 1.0 / behind);
      }
      f.push_back(std::move(column));
    }
    from = ends[k];
  }
  return f;
}

/// A product of functions of some inputs.
using Term = std::vector<std::pair<std::size_t, int>>;  ///< input, degree >= 1

/// All terms of total degree up to `degree` in `inputs`, with `highest[i]` functions of input i.
void add_terms(const std::vector<std::size_t>& inputs,
               const std::vector<int>& highest,
               int degree,
               std::size_t from,
               Term& term,
               std::vector<Term>& terms) {
  for (std::size_t k = from; k < inputs.size(); ++k) {
    for (int d = 1; d <= std::min(degree, highest[inputs[k]]); ++d) {
      term.emplace_back(inputs[k], d);
      terms.push_back(term);
      add_terms(inputs, highest, degree - d, k + 1, term, terms);
      term.pop_back();
    }
  }
}

struct Fit {
  std::vector<Term> terms;
  Eigen::VectorXd coefficient;       ///< of 1 first, then of the terms
  double left_out_error = INFINITY;  ///< mean square error in draws left out
};

/// Some draws of the columns of a fit at a time: so many stay in the second-level cache.
class Columns {
 public:
  static constexpr Eigen::Index at_once = 256;

  Columns(const std::vector<Functions>& functions, const std::vector<Term>& terms, Eigen::Index draws)
      : functions_(&functions), terms_(&terms), room_(at_once, static_cast<Eigen::Index>(terms.size()) + 1) {
    room_.col(0).setOnes();
    left_ = draws;
  }

  /// Calls `use(first, rows)` with the draws from `first` on: a column of ones, then one per term.
  template <class Use>
  void for_each_part(const Use& use) {
    for (Eigen::Index first = 0; first < left_; first += at_once) {
      const Eigen::Index many = std::min(at_once, left_ - first);
      for (std::size_t t = 0; t < terms_->size(); ++t) {
        auto column = room_.col(static_cast<Eigen::Index>(t) + 1).head(many).array();
        bool product = false;
        for (const auto& [input, degree] : (*terms_)[t]) {
          const double* values = (*functions_)[input][static_cast<std::size_t>(degree - 1)].data() + first;
          const Eigen::Map<const Eigen::ArrayXd> factor(values, many);
          if (product) {
            column *= factor;
          } else {
            column = factor;
          }
          product = true;
        }
      }
      use(first, room_.topRows(many));
    }
  }

 private:
  const std::vector<Functions>* functions_;
  const std::vector<Term>* terms_;
  Eigen::MatrixXd room_;
  Eigen::Index left_ = 0;
};

Fit fit(const std::vector<Functions>& functions, std::vector<Term> terms, const Eigen::VectorXd& y) {
  const Eigen::Index n = y.size(), p = static_cast<Eigen::Index>(terms.size()) + 1;
  Columns columns(functions, terms, n);
  Eigen::MatrixXd gram = Eigen::MatrixXd::Zero(p, p);
  Eigen::VectorXd right = Eigen::VectorXd::Zero(p);
  columns.for_each_part([&](Eigen::Index first, const auto& rows) {
    gram.template selfadjointView<Eigen::Lower>().rankUpdate(rows.transpose());
    right.noalias() += rows.transpose() * y.segment(first, rows.rows());
  });
  gram.diagonal().array() += 1e-10 * static_cast<double>(n);
  const Eigen::LLT<Eigen::MatrixXd> factor(gram);
  Fit result{.terms = {}, .coefficient = factor.solve(right)};
  const Eigen::MatrixXd inverse = factor.matrixL().solve(Eigen::MatrixXd::Identity(p, p));
  Eigen::MatrixXd half(Columns::at_once, p);
  double sum = 0.0;
  columns.for_each_part([&](Eigen::Index first, const auto& rows) {
    const Eigen::Index many = rows.rows();
    half.topRows(many).noalias() = rows * inverse.transpose().template triangularView<Eigen::Upper>();
    const Eigen::ArrayXd leverage = half.topRows(many).rowwise().squaredNorm();
    const Eigen::VectorXd residual = y.segment(first, many) - rows * result.coefficient;
    sum += (residual.array() / (1.0 - leverage.min(0.999))).square().sum();
  });
  result.terms = std::move(terms);
  result.left_out_error = sum / static_cast<double>(n);
  return result;
}

/// Share of the variance that `best` finds in terms which `candidate` has not: being orthonormal, they cannot be made
/// up for by others, and the candidate leaves at least so much open.
double given_up(const Fit& best, const std::vector<Term>& candidate) {
  std::vector<Term> kept = candidate;
  std::ranges::sort(kept);
  double share = 0.0;
  for (std::size_t t = 0; t < best.terms.size(); ++t) {
    if (!std::ranges::binary_search(kept, best.terms[t]))
      share += std::pow(best.coefficient(static_cast<Eigen::Index>(t) + 1), 2.0);
  }
  return share;
}

long long terms_in(std::size_t inputs, int degree) {  // (inputs + degree over degree) - 1
  double count = 1.0;
  for (int k = 1; k <= degree; ++k) count *= static_cast<double>(inputs + static_cast<std::size_t>(k)) / k;
  return std::llround(count) - 1;
}

}  // namespace

FittedShares fit_shares(const std::vector<FitInput>& inputs, const std::vector<double>& answer) {
  FittedShares shares;
  shares.first.assign(inputs.size(), std::nan(""));
  shares.total = shares.first;
  std::vector<std::size_t> usable;
  for (std::size_t i = 0; i < answer.size(); ++i)
    if (!std::isnan(answer[i])) usable.push_back(i);
  const auto n = static_cast<Eigen::Index>(usable.size());
  const int affordable = std::min<int>(most_terms, static_cast<int>(n / draws_a_term));
  if (inputs.empty() || affordable < 2) return shares;

  Eigen::VectorXd y(n);
  for (Eigen::Index i = 0; i < n; ++i) y(i) = answer[usable[static_cast<std::size_t>(i)]];
  y.array() -= y.mean();
  const double variance = y.squaredNorm() / static_cast<double>(n);
  if (!(variance > 0.0)) {
    std::ranges::fill(shares.first, 0.0);
    std::ranges::fill(shares.total, 0.0);
    shares.explained = 1.0;
    return shares;
  }
  y /= std::sqrt(variance);

  std::vector<Functions> functions;
  std::vector<int> highest;
  std::vector<double> main_effect(inputs.size(), 0.0);
  for (std::size_t u = 0; u < inputs.size(); ++u) {
    std::vector<double> score;
    for (const std::size_t i : usable) score.push_back(inputs[u].score[i]);
    functions.push_back(!inputs[u].option_ends.empty() ? options(score, inputs[u].option_ends)
                        : inputs[u].normal             ? hermite(score)
                                                       : legendre(score));
    highest.push_back(static_cast<int>(functions.back().size()));
    for (std::size_t k = 0; k < std::min<std::size_t>(functions.back().size(), 3);
         ++k) {  // screening: plain projections
      const double projection =
          Eigen::Map<const Eigen::VectorXd>(functions[u][k].data(), n).dot(y) / static_cast<double>(n);
      main_effect[u] += projection * projection;
    }
  }
  std::vector<std::size_t> order(inputs.size());
  std::iota(order.begin(), order.end(), 0U);
  std::ranges::stable_sort(order, [&](std::size_t a, std::size_t b) { return main_effect[a] > main_effect[b]; });

  // candidates: every total degree in as many of the strongest inputs as are affordable, the others by a line each
  Fit best;
  for (int degree = 1; degree <= highest_degree; ++degree) {
    std::size_t strong = inputs.size();
    const auto cost = [&](std::size_t k) { return terms_in(k, degree) + static_cast<long long>(inputs.size() - k); };
    while (strong > 1 && cost(strong) > affordable) --strong;
    std::vector<std::size_t> chosen(order.begin(), order.begin() + static_cast<std::ptrdiff_t>(strong));
    std::vector<Term> terms;
    Term term;
    add_terms(chosen, highest, degree, 0, term, terms);
    for (std::size_t k = strong; k < order.size() && static_cast<int>(terms.size()) < affordable; ++k)
      if (highest[order[k]] > 0) terms.push_back({{order[k], 1}});
    if (static_cast<int>(terms.size()) > affordable) continue;
    if (given_up(best, terms) > 2.0 * best.left_out_error) continue;  // twice: both are known from the draws alone
    Fit candidate = fit(functions, std::move(terms), y);
    if (candidate.left_out_error < best.left_out_error) best = std::move(candidate);
    if (best.left_out_error < settled) break;
  }
  shares.explained = 1.0 - best.left_out_error;
  shares.terms = static_cast<int>(best.terms.size());
  std::ranges::fill(shares.first, 0.0);
  std::ranges::fill(shares.total, 0.0);
  // Parts over the model's own variance, not over the sample's: that one carries the noise of the draws, which the
  // coefficients of a good fit do not.
  const double whole = best.coefficient.tail(best.coefficient.size() - 1).squaredNorm() + best.left_out_error;
  for (std::size_t t = 0; t < best.terms.size(); ++t) {
    const double part = std::pow(best.coefficient(static_cast<Eigen::Index>(t) + 1), 2.0) / whole;
    for (const auto& [input, degree] : best.terms[t]) shares.total[input] += part;
    if (best.terms[t].size() == 1) shares.first[best.terms[t].front().first] += part;
  }
  for (auto* list : {&shares.first, &shares.total})
    for (double& s : *list) s = std::min(s, 1.0);
  return shares;
}

}  // namespace headband::montecarlo
