// SPDX-License-Identifier: MIT
#include "montecarlo/sensitivity/exchange.hpp"

#include "core/friction/factor.hpp"
#include "montecarlo/sensitivity/shares.hpp"
#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <fmt/format.h>
#include <cmath>
#include <functional>
#include <limits>
#include <map>
#include <numbers>
#include <sstream>
#include <string>

namespace headband::montecarlo {
namespace {

using Function = std::function<double(const std::vector<double>&)>;

network::Case case_of(std::size_t unknowns) {
  network::Case c;
  for (std::size_t i = 0; i < unknowns; ++i) {
    c.unknowns.push_back({.name = fmt::format("x{}", i + 1), .path = {}, .place = {}, .random = true});
  }
  return c;
}

using BlockOf = std::function<void(long long, network::Scores<8>&)>;

std::vector<double> evaluate(const Function& f, long long n, std::size_t unknowns, const BlockOf& block) {
  std::vector<double> y;
  network::Scores<8> scores;
  std::vector<double> x(unknowns);
  for (long long first = 0; first < n; first += 8) {
    block(first, scores);
    for (int lane = 0; lane < 8; ++lane) {
      for (std::size_t u = 0; u < unknowns; ++u) x[u] = scores[u][lane];
      y.push_back(f(x));
    }
  }
  return y;
}

struct Shares {
  std::vector<double> first, total;
  double mean = 0.0, variance = 0.0;
};

Shares shares_of(const network::Case& c, const Function& f, long long n) {
  const Sampler sampler(c, network::Design::sobol, 1, n), twin = sampler.twin();
  const Exchanger exchanger(sampler, twin);
  const std::size_t d = c.unknowns.size();
  const auto one = evaluate(f, n, d, [&](long long i, network::Scores<8>& s) { sampler.block(i, s); });
  const auto other = evaluate(f, n, d, [&](long long i, network::Scores<8>& s) { twin.block(i, s); });
  Shares shares;
  for (const double y : one) shares.mean += y / static_cast<double>(n);
  shares.variance = variance_of(one);
  for (std::size_t u = 0; u < d; ++u) {
    const auto company = evaluate(
        f, n, d, [&](long long i, network::Scores<8>& s) { exchanger.block(i, u, Exchange::with_its_company, s); });
    const auto alone =
        evaluate(f, n, d, [&](long long i, network::Scores<8>& s) { exchanger.block(i, u, Exchange::alone, s); });
    shares.first.push_back(first_share(other, company));
    shares.total.push_back(total_share(one, alone));
  }
  return shares;
}

/// a=7 b=0.1 and a=0 1 4.5 … of the reference file.
std::map<std::string, std::vector<double>> parameters(const std::string& text) {
  std::map<std::string, std::vector<double>> all;
  std::istringstream words(text);
  std::string word, name;
  while (words >> word) {
    if (const auto at = word.find('='); at != std::string::npos) {
      name = word.substr(0, at);
      word = word.substr(at + 1);
    }
    all[name].push_back(std::stod(word));
  }
  return all;
}

struct Known {
  std::size_t unknowns = 0;
  Function f;
};

Known known(const std::string& name, const std::string& text) {
  auto p = parameters(text);
  if (name.starts_with("Ishigami")) {
    const double a = p["a"][0], b = p["b"][0];
    return {3, [a, b](const std::vector<double>& u) {
              const auto x = [&](std::size_t i) { return std::numbers::pi * (2.0 * u[i] - 1.0); };
              return std::sin(x(0)) + a * std::sin(x(1)) * std::sin(x(1)) + b * std::pow(x(2), 4.0) * std::sin(x(0));
            }};
  }
  if (name.starts_with("Sobol' G")) {
    const auto a = p["a"];
    return {a.size(), [a](const std::vector<double>& u) {
              double product = 1.0;
              for (std::size_t i = 0; i < a.size(); ++i) product *= (std::fabs(4.0 * u[i] - 2.0) + a[i]) / (1.0 + a[i]);
              return product;
            }};
  }
  const auto normal = [](double u) { return base::normal_quantile(base::Lanes<1>(u)).number; };
  const bool linear = name.starts_with("linear sum");
  if (linear || name.starts_with("product")) {
    const auto m = linear ? std::vector<double>{0.0, 0.0, 0.0} : p["m"];
    const auto c = linear ? p["c"] : std::vector<double>{1.0, 1.0, 1.0};
    const auto sd = p["s"];
    return {3, [=](const std::vector<double>& u) {
              double sum = 0.0, product = 1.0;
              for (std::size_t i = 0; i < 3; ++i) {
                sum += c[i] * sd[i] * normal(u[i]);
                product *= m[i] + sd[i] * normal(u[i]);
              }
              return linear ? sum : product;
            }};
  }
  return {};
}

TEST(Sensitivity, SharesMatchAnalyticFunctions) {
  std::map<std::string, Shares> done;
  int checked = 0;
  for (const auto& row : test::reference_rows("uq_sensitivity_analytic.csv")) {
    const Known k = known(row[0], row[1]);
    if (k.unknowns == 0) continue;
    const std::string id = row[0] + row[1];
    if (!done.contains(id)) done[id] = shares_of(case_of(k.unknowns), k.f, 1 << 14);
    const Shares& s = done[id];
    const std::string& what = row[2];
    const double expected = std::stod(row[3]);
    double seen = std::numeric_limits<double>::quiet_NaN();
    if (what == "mean") {
      EXPECT_NEAR(s.mean, expected, 0.01 * std::fabs(expected));
    } else if (what == "variance") {
      EXPECT_NEAR(s.variance, expected, 0.01 * expected);
    } else {
      const bool total = what.starts_with("ST");
      const std::string index = what.substr(total ? 2 : 1);
      if (index.size() != 1) continue;  // shares of pairs are not computed
      seen = (total ? s.total : s.first)[static_cast<std::size_t>(index[0] - '1')];
      EXPECT_NEAR(seen, expected, 0.01) << row[0] << " " << what;
    }
    ++checked;
  }
  EXPECT_EQ(checked, 46);
}

/// The reference pressure drop: the indices of its three inputs at the budget's 4096 draws.
TEST(Sensitivity, SharesOfTheReferencePressureDrop) {
  const double density = 998.2, bore = 0.254, flow = 0.075, length = 1850.0;
  const double log_sd = std::sqrt(std::log1p(0.01));
  const double speed = flow / (std::numbers::pi * bore * bore / 4.0);
  const Function drop = [&](const std::vector<double>& u) {
    const auto z = [&](std::size_t i) { return base::normal_quantile(base::Lanes<1>(u[i])).number; };
    const double roughness = 4.6e-5 / std::sqrt(1.01) * std::exp(log_sd * z(0));
    const double viscosity = 0.0010016 / std::sqrt(1.01) * std::exp(log_sd * z(1));
    friction::FactorRule<1> rule;
    rule.law = {friction::FrictionLaw::colebrook_white};
    rule.relative_roughness = roughness / bore;
    const double f = friction::darcy_factor<1>(rule, base::Lanes<1>(density * speed * bore / viscosity)).factor.number;
    return (1.0 + 0.05 * z(2)) * f * length / bore * density * speed * speed / 2.0;
  };
  const Shares s = shares_of(case_of(3), drop, 4096);
  std::map<std::string, double> expected;
  for (const auto& row : test::reference_rows("montecarlo_pressure_drop_results.csv"))
    expected[row[1]] = std::stod(row[3]);
  const char* names[] = {"roughness", "viscosity", "correlation"};
  for (std::size_t i = 0; i < 3; ++i) {
    EXPECT_NEAR(s.first[i], expected.at(fmt::format("S_{}", names[i])), 0.01);
    EXPECT_NEAR(s.total[i], expected.at(fmt::format("ST_{}", names[i])), 0.01);
  }
  EXPECT_NEAR(s.mean, expected.at("mean"), 4.0 * 6512.24 / 64.0);
  EXPECT_NEAR(std::sqrt(s.variance), expected.at("sd"), 4.0 * 4608.55 / 64.0);
}

/// A linear function of correlated normals (closed form): y = z1 + z2 + z3, correlation rho of the first two.
TEST(Sensitivity, CorrelatedInputsAreNotCountedTwice) {
  auto c = case_of(3);
  const double rho = 0.8;
  c.together.push_back({.first = "x1", .second = "x2", .rank_correlation = rank_correlation(rho), .place = {}});
  const Function sum = [](const std::vector<double>& u) {
    double y = 0.0;
    for (const double x : u) y += base::normal_quantile(base::Lanes<1>(x)).number;
    return y;
  };
  const Shares s = shares_of(c, sum, 1 << 14);
  const double variance = 3.0 + 2.0 * rho;
  EXPECT_NEAR(s.variance, variance, 0.01 * variance);
  // E[y | z1] = (1 + rho) z1; Var(y | z2, z3) = 1 - rho^2
  EXPECT_NEAR(s.first[0], (1.0 + rho) * (1.0 + rho) / variance, 0.01);
  EXPECT_NEAR(s.first[1], (1.0 + rho) * (1.0 + rho) / variance, 0.01);
  EXPECT_NEAR(s.first[2], 1.0 / variance, 0.01);
  EXPECT_NEAR(s.total[0], (1.0 - rho * rho) / variance, 0.01);
  EXPECT_NEAR(s.total[2], 1.0 / variance, 0.01);
}

/// Exchanged scores keep their even margins and their correlation, whichever way.
TEST(Sensitivity, ExchangeKeepsTheDistribution) {
  auto c = case_of(3);
  c.together.push_back({.first = "x1", .second = "x2", .rank_correlation = 0.6, .place = {}});
  c.together.push_back({.first = "x2", .second = "x3", .rank_correlation = -0.4, .place = {}});
  const Sampler sampler(c, network::Design::sobol, 1, 1 << 14), twin = sampler.twin();
  const Exchanger exchanger(sampler, twin);
  for (const auto way : {Exchange::with_its_company, Exchange::alone}) {
    double sum = 0.0, squares = 0.0, product = 0.0;
    network::Scores<8> scores;
    for (long long first = 0; first < (1 << 14); first += 8) {
      exchanger.block(first, 1, way, scores);
      for (int lane = 0; lane < 8; ++lane) {
        const double a = base::normal_quantile(base::Lanes<1>(scores[0][lane])).number;
        const double b = base::normal_quantile(base::Lanes<1>(scores[1][lane])).number;
        sum += b;
        squares += b * b;
        product += a * b;
      }
    }
    const double n = 1 << 14;
    EXPECT_NEAR(sum / n, 0.0, 4.0 / std::sqrt(n));
    EXPECT_NEAR(squares / n, 1.0, 4.0 * std::sqrt(2.0 / n));
    EXPECT_NEAR(product / n, copula_correlation(0.6), 4.0 * std::sqrt(2.0 / n));
  }
}

}  // namespace
}  // namespace headband::montecarlo
