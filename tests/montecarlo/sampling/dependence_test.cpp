// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/dependence.hpp"

#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace headband::montecarlo {
namespace {

network::Case with_unknowns(const std::vector<std::string>& names) {
  network::Case c;
  for (const auto& name : names) c.unknowns.push_back({.name = name, .path = {}, .place = {}, .random = true});
  return c;
}

void together(network::Case& c, const std::string& a, const std::string& b, double r) {
  c.together.push_back({.first = a, .second = b, .rank_correlation = r, .place = {7, 1}});
}

TEST(Dependence, FormulaMatchesReference) {
  for (const auto& row : test::reference_rows("uq_gaussian_copula.csv")) {
    const double rho = std::stod(row[0]), spearman = std::stod(row[1]);
    EXPECT_NEAR(rank_correlation(rho), spearman, 1e-12);
    EXPECT_NEAR(copula_correlation(spearman), rho, 1e-12);
  }
  EXPECT_EQ(copula_correlation(1.0), 1.0);
  EXPECT_EQ(copula_correlation(-1.0), -1.0);
}

TEST(Dependence, FactorGivesBackTheMatrix) {
  auto c = with_unknowns({"a", "b", "c", "d"});
  together(c, "a", "b", 0.7);
  together(c, "b", "c", -0.3);
  together(c, "a", "d", 0.5);
  ASSERT_TRUE(check_together(c).empty());
  const Dependence d = make_dependence(c);
  ASSERT_EQ(d.members.size(), 4U);
  for (std::size_t i = 0; i < 4; ++i) {
    for (std::size_t j = 0; j < 4; ++j) {
      double sum = 0.0;
      for (const auto& [k, w] : d.members[i].terms)
        for (const auto& [l, v] : d.members[j].terms)
          if (k == l) sum += w * v;
      EXPECT_NEAR(sum, d.correlation.at(i, j), 1e-14);
    }
  }
  EXPECT_NEAR(d.correlation.at(0, 1), 2.0 * std::sin(M_PI * 0.7 / 6.0), 1e-15);
}

TEST(Dependence, RankOneRepeatsTheScore) {
  auto c = with_unknowns({"a", "b", "c"});
  together(c, "b", "a", 1.0);
  together(c, "a", "c", -1.0);
  together(c, "b", "c", -1.0);
  ASSERT_TRUE(check_together(c).empty());
  const Dependence d = make_dependence(c);
  EXPECT_EQ(d.members[1].same_as, 0);
  EXPECT_FALSE(d.members[1].mirrored);
  EXPECT_EQ(d.members[2].same_as, 0);
  EXPECT_TRUE(d.members[2].mirrored);
}

TEST(Dependence, ImpossibleMatrixIsRefusedWithAWorkableOne) {
  auto c = with_unknowns({"a", "b", "c"});
  together(c, "a", "b", 0.9);
  together(c, "b", "c", 0.9);
  together(c, "a", "c", -0.9);
  const auto problems = check_together(c);
  ASSERT_EQ(problems.size(), 1U);
  EXPECT_EQ(problems[0].place.line, 7);
  EXPECT_NE(problems[0].hint.find("\"a, b\" = 0."), std::string::npos) << problems[0].hint;
  // what is offered works: put it back in
  auto again = with_unknowns({"a", "b", "c"});
  for (const auto* pair : {"a, b", "a, c", "b, c"}) {
    const auto at = problems[0].hint.find(std::string("\"") + pair + "\" = ");
    if (at == std::string::npos) continue;
    together(again, std::string(1, pair[0]), std::string(1, pair[3]), std::stod(problems[0].hint.substr(at + 9)));
  }
  EXPECT_GE(again.together.size(), 2U);
  EXPECT_TRUE(check_together(again).empty()) << problems[0].hint;
}

TEST(Dependence, NearestOfAWorkableMatrixIsItself) {
  CorrelationMatrix m{.size = 3, .entry = {1, 0.5, 0.2, 0.5, 1, 0.1, 0.2, 0.1, 1}};
  const auto near = nearest_workable(m);
  for (std::size_t i = 0; i < 9; ++i) EXPECT_NEAR(near.entry[i], m.entry[i], 1e-12);
  // Higham 2002, section 1: the nearest to the tridiagonal matrix of ones has 0.7607 beside and 0.1573 off (4 digits)
  const CorrelationMatrix ones{.size = 3, .entry = {1, 1, 0, 1, 1, 1, 0, 1, 1}};
  const auto nearest = nearest_workable(ones);
  EXPECT_NEAR(nearest.at(0, 1), 0.7607, 5e-5);
  EXPECT_NEAR(nearest.at(0, 2), 0.1573, 5e-5);
  EXPECT_GE(least_eigenvalue(nearest), -1e-10);
}

TEST(Dependence, WrongPairsAreNamed) {
  auto c = with_unknowns({"main wall", "main roughness"});
  c.unknowns.push_back({.name = "vessel exponent", .path = {}, .place = {}, .random = false});
  together(c, "main wal", "main roughness", 0.5);
  together(c, "main wall", "vessel exponent", 0.5);
  together(c, "main wall", "main wall", 0.5);
  together(c, "main wall", "main roughness", 1.5);
  together(c, "main roughness", "main wall", 0.5);
  const auto problems = check_together(c);
  ASSERT_EQ(problems.size(), 5U);
  EXPECT_NE(problems[0].hint.find("main wall"), std::string::npos);
  EXPECT_NE(problems[1].what.find("not random"), std::string::npos);
}

}  // namespace
}  // namespace headband::montecarlo
