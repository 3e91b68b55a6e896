// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/sampler.hpp"

#include "core/base/error.hpp"
#include "core/base/hash.hpp"
#include "montecarlo/sampling/latin.hpp"

#include <fmt/format.h>
#include <algorithm>
#include <bit>
#include <utility>

namespace headband::montecarlo {

namespace {

constexpr long long most_latin_draws = (1LL << 30) - 1;
/// Names of the twin's numbers: the same name with one bit turned, so that no draw is used twice.
constexpr std::uint64_t twin_bit = 1;

/// (point + 1/2) / 2^52 of a 52-bit fraction, by the mantissa of 2^52: exact.
HEADBAND_INLINE double score_of_point(std::uint64_t point) {
  return (std::bit_cast<double>(point | 0x4330000000000000U) - 0x1p52 + 0.5) * 0x1p-52;
}

}  // namespace

Sampler::Sampler(const network::Case& c, network::Design design, std::uint64_t seed, long long draws)
    : design_(design), seed_(seed), draws_(draws), key_(seed), dependence_(make_dependence(c)) {
  for (const auto& unknown : c.unknowns) {
    names_.push_back(base::name_number(unknown.name));
    random_.push_back(unknown.random);
  }
  const auto& place = c.band.place;
  if (design == network::Design::sobol && 2 * names_.size() > most_sobol_dimensions) {
    throw base::InputError({{place,
                             "band/design",
                             "a Sobol' design takes at most 1833 unknowns",
                             fmt::format("{} unknowns", names_.size()),
                             "1833",
                             "use design = \"plain\""}});
  }
  if (design == network::Design::latin_hypercube && draws > most_latin_draws) {
    throw base::InputError({{place,
                             "band/draws",
                             "a Latin hypercube takes at most 1073741823 draws",
                             fmt::format("{}", draws),
                             "1073741823",
                             "use design = \"sobol\""}});
  }
  make_points();
}

Sampler::Sampler(network::Design design,
                 std::uint64_t seed,
                 long long draws,
                 std::vector<std::uint64_t> names,
                 std::vector<bool> random,
                 Dependence dependence,
                 std::size_t first_dimension)
    : design_(design),
      seed_(seed),
      draws_(draws),
      key_(seed),
      names_(std::move(names)),
      random_(std::move(random)),
      dependence_(std::move(dependence)),
      first_dimension_(first_dimension) {
  make_points();
}

Sampler Sampler::twin() const {
  std::vector<std::uint64_t> names = names_;
  for (auto& name : names) name ^= twin_bit;
  return {design_, seed_, draws_, std::move(names), random_, dependence_, first_dimension_ + names_.size()};
}

void Sampler::make_points() {
  if (design_ == network::Design::sobol) {
    const SobolDirections directions = sobol_directions(first_dimension_ + names_.size());
    for (std::size_t u = 0; u < names_.size(); ++u) {
      sobol_.emplace_back(directions[first_dimension_ + u], seed_, names_[u]);
    }
  }
  if (design_ == network::Design::latin_hypercube) {
    for (const std::uint64_t name : names_)
      strata_.push_back(latin_strata(seed_, name, static_cast<std::uint32_t>(draws_)));
  }
}

template <int W>
void Sampler::depend(network::Scores<W>& scores) const {
  const auto& members = dependence_.members;
  if (members.empty()) return;
  thread_local std::vector<Lanes<W>> normal;
  normal.resize(members.size());
  for (std::size_t i = 0; i < members.size(); ++i) {
    normal[i] = base::normal_quantile<W>(scores[static_cast<std::size_t>(members[i].unknown)]);
  }
  for (std::size_t i = 0; i < members.size(); ++i) {
    const DependentScore& member = members[i];
    Lanes<W>& score = scores[static_cast<std::size_t>(member.unknown)];
    if (member.same_as >= 0) {
      const auto other = static_cast<std::size_t>(members[static_cast<std::size_t>(member.same_as)].unknown);
      score = member.mirrored ? 1.0 - scores[other] : scores[other];
      continue;
    }
    if (member.independent(i)) continue;
    Lanes<W> sum = 0.0;
    for (const auto& [other, weight] : member.terms) sum += weight * normal[other];
    for (int lane = 0; lane < W; ++lane) {
      score.set(lane, std::clamp(base::normal_probability(sum[lane]), 0x1p-1000, 1.0 - 0x1p-53));
    }
  }
}

void Sampler::block(long long first, network::Scores<8>& scores) const { spaced(first, 1, {&scores, 1}); }

/// Scores of one unknown, before the case's correlations.
void Sampler::fill(std::size_t unknown, long long first, long long stride, std::span<Lanes<8>> scores) const {
  const auto start = static_cast<std::uint64_t>(first), step = static_cast<std::uint64_t>(stride);
  if (!random_[unknown]) {
    std::ranges::fill(scores, Lanes<8>(0.5));
    return;
  }
  if (design_ == network::Design::sobol) {
    for (std::size_t k = 0; k < scores.size(); ++k) {
      std::array<std::uint64_t, 8> point{};
      if (stride == 1) {
        sobol_[unknown].points(start + 8 * k, point);
      } else {
        for (std::size_t lane = 0; lane < 8; ++lane) point[lane] = sobol_[unknown].point(start + (8 * k + lane) * step);
      }
      for (int lane = 0; lane < 8; ++lane) scores[k].set(lane, score_of_point(point[static_cast<std::size_t>(lane)]));
    }
    return;
  }
  philox_scores(key_, start, names_[unknown], scores, step);
  if (design_ != network::Design::latin_hypercube) return;
  long long draw = first;
  for (auto& block : scores) {
    for (int lane = 0; lane < 8; ++lane, draw += stride) {
      const auto here = static_cast<std::size_t>(std::min(draw, draws_ - 1));
      block.set(lane, latin_score(strata_[unknown][here], block[lane], static_cast<std::uint32_t>(draws_)));
    }
  }
}

void Sampler::spaced(long long first, long long stride, std::span<network::Scores<8>> scores) const {
  std::array<Lanes<8>, at_once> column;
  for (; !scores.empty(); scores = scores.subspan(std::min(at_once, scores.size()))) {
    const auto here = scores.first(std::min(at_once, scores.size()));
    for (auto& block : here)
      if (block.size() != names_.size()) block.resize(names_.size());
    for (std::size_t u = 0; u < names_.size(); ++u) {
      fill(u, first, stride, std::span(column).first(here.size()));
      for (std::size_t k = 0; k < here.size(); ++k) here[k][u] = column[k];
    }
    if (!dependence_.members.empty())
      for (auto& block : here) depend<8>(block);
    first += 8 * stride * static_cast<long long>(here.size());
  }
}

network::Scores<1> Sampler::draw(long long draw) const {
  network::Scores<1> scores(names_.size());
  const auto number = static_cast<std::uint64_t>(draw);
  for (std::size_t u = 0; u < names_.size(); ++u) {
    double score = 0.5;
    if (random_[u]) {
      if (design_ == network::Design::sobol) {
        score = score_of_point(sobol_[u].point(number));
      } else {
        score = score_of_bits(philox_bits(seed_, number, names_[u]));
        if (design_ == network::Design::latin_hypercube) {
          score = latin_score(strata_[u].at(static_cast<std::size_t>(draw)), score, static_cast<std::uint32_t>(draws_));
        }
      }
    }
    scores[u] = score;
  }
  depend<1>(scores);
  return scores;
}

long long draws_of_design(network::Design design, long long asked) {
  return design == network::Design::sobol ? sobol_draws(asked) : std::max(1LL, asked);
}

}  // namespace headband::montecarlo
