// SPDX-License-Identifier: MIT
#include "transient/line/interior.hpp"

#include "tests/transient/line/pipe_state.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <cstring>
#include <random>

namespace {

using namespace headband;
using base::Lanes;
using friction::FrictionLaw;
using test::PipeState;
using transient::Form;
using transient::Resistance;
using Joint = friction::Transition::Kind;

constexpr double impedance = 400.0;  // [s/m2]

/// Every kind of friction the march knows.
struct Friction {
  Form form;
  FrictionLaw law = FrictionLaw::colebrook_white;
  Joint joint = Joint::blend;
};
constexpr std::array<Friction, 8> frictions{{{Form::quadratic},
                                             {Form::darcy, FrictionLaw::colebrook_white, Joint::blend},
                                             {Form::darcy, FrictionLaw::colebrook_white, Joint::sudden},
                                             {Form::darcy, FrictionLaw::smooth, Joint::blend},
                                             {Form::darcy, FrictionLaw::haaland, Joint::blend},
                                             {Form::darcy, FrictionLaw::colebrook_white, Joint::churchill},
                                             {Form::darcy, FrictionLaw::swamee_jain, Joint::blend},
                                             {Form::power}}};

Resistance<1> resistance(const Friction& f, int draw = 0) {
  return test::resistance_of(f.form, f.law, f.joint, impedance, draw);
}
bool same_bits(double a, double b) { return std::memcmp(&a, &b, sizeof a) == 0; }

TEST(interior, still_water_stays_still) {
  for (const Friction& f : frictions)
    for (const std::size_t rows : {3U, 10U, 41U}) {
      PipeState<1> pipe(rows);
      pipe.roots = true;
      for (auto& h : pipe.head) h = 31.7;
      for (int step = 0; step < 5; ++step) pipe.march(resistance(f), true);
      for (std::size_t i = 0; i < rows; ++i) {
        EXPECT_EQ(pipe.head[i].number, 31.7);
        EXPECT_EQ(pipe.flow[i].number, 0.0);
      }
      EXPECT_FALSE(pipe.cavities);
    }
}

// H + BQ goes one row down and H - BQ one row up: exact where every number is a small multiple of a power of two.
TEST(interior, without_friction_waves_move_by_one_row_exactly) {
  constexpr double b = 64.0;
  for (std::size_t rows = 3; rows <= 40; ++rows) {
    std::mt19937 bits(static_cast<unsigned>(rows));
    PipeState<1> pipe(rows);
    for (std::size_t i = 0; i < rows; ++i) {
      pipe.head[i] = static_cast<double>(bits() % 4096) / 8.0;
      pipe.flow[i] = (static_cast<double>(bits() % 4096) - 2048.0) / 1024.0;
    }
    const auto head = pipe.head, flow = pipe.flow;
    Resistance<1> r;
    r.carry = r.damp = b;
    pipe.march(r, false);
    for (std::size_t i = 1; i + 1 < rows; ++i) {
      EXPECT_EQ(pipe.head[i].number + b * pipe.flow[i].number, head[i - 1].number + b * flow[i - 1].number);
      EXPECT_EQ(pipe.head[i].number - b * pipe.flow[i].number, head[i + 1].number - b * flow[i + 1].number);
    }
  }
}

/// Random but smooth heads and flows; flows of both signs, some near rest.
template <int W>
void fill(PipeState<W>& pipe, int lane, unsigned seed) {
  std::mt19937_64 bits(seed);
  std::uniform_real_distribution<double> u(-1.0, 1.0);
  const double a = u(bits), b = u(bits), c = 3.0 + 2.0 * u(bits);
  for (std::size_t i = 0; i < pipe.head.size(); ++i) {
    const double x = static_cast<double>(i) / 20.0;
    pipe.head[i].set(lane, 60.0 + 30.0 * std::sin(c * x + a) + u(bits));
    pipe.flow[i].set(lane, 0.2 * std::cos(c * x + b) + 0.004 * u(bits));
    pipe.flow_before[i].set(lane, pipe.flow[i][lane]);
    pipe.fitting[i].set(lane, i % 7 == 3 ? 2.0 + a : 0.0);
    pipe.longer[i].set(lane, i % 5 == 2 ? 0.3 : 0.0);
  }
}

// Turned round, a pipe gives its mirror image; to rounding, because a head is worked out from the wave that comes on.
TEST(interior, a_pipe_turned_round_gives_the_mirror_image) {
  for (const Friction& f : frictions)
    for (const std::size_t rows : {4U, 11U, 30U, 31U}) {
      PipeState<1> pipe(rows);
      fill(pipe, 0, 7);
      PipeState<1> turned(rows);
      for (std::size_t i = 0; i < rows; ++i) {
        turned.head[i] = pipe.head[rows - 1 - i];
        turned.flow[i] = -pipe.flow[rows - 1 - i];
      }
      const Resistance<1> r = resistance(f);
      pipe.march(r, false);
      turned.march(r, false);
      for (std::size_t i = 1; i + 1 < rows; ++i) {
        const std::size_t j = rows - 1 - i;
        EXPECT_NEAR(turned.head[j].number, pipe.head[i].number, 1e-13 * 200.0);
        EXPECT_NEAR(turned.flow[j].number, -pipe.flow[i].number, 1e-13);
        EXPECT_EQ(turned.head_max[j].number, std::max(-1e9, turned.head[j].number));
      }
    }
}

// The plain formula of the oracle at each row: 6 units in the last place of the largest term that enters.
TEST(interior, each_row_is_the_plain_formula_to_some_ulps) {
  constexpr double unit = std::numeric_limits<double>::epsilon();
  for (std::size_t rows = 3; rows <= 40; ++rows) {
    PipeState<1> pipe(rows);
    fill(pipe, 0, static_cast<unsigned>(rows));
    const auto head = pipe.head, flow = pipe.flow;
    const Resistance<1> r = resistance({Form::quadratic}, 1);
    const double carry = r.carry.number, damp = r.damp.number, loss = r.quadratic.number;
    pipe.march(r, false);
    for (std::size_t i = 1; i + 1 < rows; ++i) {
      const double on = head[i - 1].number + carry * flow[i - 1].number;
      const double back = head[i + 1].number - carry * flow[i + 1].number;
      const double on_damp = damp + loss * std::fabs(flow[i - 1].number);
      const double back_damp = damp + loss * std::fabs(flow[i + 1].number);
      const double q = (on - back) / (on_damp + back_damp), h = on - on_damp * q;
      const double largest = std::max(std::fabs(on), std::fabs(back));
      EXPECT_NEAR(pipe.flow[i].number, q, 6.0 * unit * largest / damp);
      EXPECT_NEAR(pipe.head[i].number, h, 6.0 * unit * largest);
    }
  }
}

/// Flow along the whole pipe alike, heads alike: it dies down by friction alone, dQ/dt = -loss(Q)/(B dt).
double decayed(const Resistance<1>& r, double flow, int steps) {
  constexpr std::size_t rows = 23;
  PipeState<1> pipe(rows);
  pipe.roots = true;
  for (auto& q : pipe.flow) q = flow;
  for (int k = 0; k < steps; ++k) {
    pipe.march(r, false);
    pipe.flow.front() = pipe.flow.back() = pipe.flow[rows / 2];
    EXPECT_NEAR(pipe.head[rows / 2].number, 0.0, 1e-12);
  }
  return pipe.flow[rows / 2].number;
}

TEST(interior, quadratic_friction_lets_a_flow_die_down_exactly) {
  // dQ/dt = -c Q^2 has the solution Q0/(1 + c t Q0), and each step is that solution
  Resistance<1> r;
  r.carry = r.damp = impedance;
  r.quadratic = 2.0;
  EXPECT_NEAR(decayed(r, 0.3, 5000) / (0.3 / (1.0 + 5000.0 * 2.0 / impedance * 0.3)), 1.0, 1e-12);
}

// Half the reach, half the step: the error must fall to a quarter. Outside value: dQ/dt by many small steps of the
// classical fourth-order rule with the plain solver of Colebrook-White, 64/Re where the flow is laminar.
TEST(interior, friction_that_follows_reynolds_is_of_second_order) {
  struct Range {
    double reynolds, first;
  };
  for (const Range& range : {Range{3e5, 0.3}, Range{3000.0, 0.3}}) {  // Re 9e4 and 900
    const double e = 1e-4, darcy = range.reynolds > 1e4 ? 2000.0 : 200.0;
    const auto rate = [&](double q) {
      const double re = range.reynolds * q;
      const double f = re > 4000.0 ? friction::colebrook_plain(e, re).factor : 64.0 / re;
      return -darcy * f * q * q / impedance;
    };
    double exact = range.first;
    constexpr int fine = 4000;
    constexpr double length = 4.0;  // in steps of the coarsest grid
    for (int k = 0; k < fine; ++k) {
      const double h = length / fine;
      const double k1 = rate(exact), k2 = rate(exact + 0.5 * h * k1), k3 = rate(exact + 0.5 * h * k2),
                   k4 = rate(exact + h * k3);
      exact += h / 6.0 * (k1 + 2.0 * k2 + 2.0 * k3 + k4);
    }
    double last = 0.0;
    for (const int split : {1, 2, 4, 8}) {
      Resistance<1> r = resistance({Form::darcy});
      r.carry = r.damp = impedance;
      r.quadratic = 0.0;
      r.darcy = darcy / split;
      r.reynolds = range.reynolds;
      friction::FactorRule<1> rule;
      rule.relative_roughness = e;
      r.rule = friction::prepare<1>(rule);
      const double error = decayed(r, range.first, 4 * split) - exact;
      if (split > 1) {
        EXPECT_NEAR(last / error, 4.0, 0.25) << range.reynolds << ' ' << split;
      }
      last = error;
    }
  }
}

/// Eight pipes together and each alone, step by step with ends that swing; every number must agree to the last bit.
void expect_same_bits(const Friction& f, std::size_t rows, bool limited, bool placed, bool envelopes, bool roots) {
  std::vector<Resistance<1>> alone_r;
  std::vector<PipeState<1>> alone(8, PipeState<1>(rows));
  PipeState<8> batch(rows);
  batch.placed = placed;
  batch.envelopes = envelopes;
  batch.roots = roots;
  for (int lane = 0; lane < 8; ++lane) {
    PipeState<1>& one = alone[static_cast<std::size_t>(lane)];
    one.placed = placed;
    one.envelopes = envelopes;
    one.roots = roots;
    alone_r.push_back(resistance(f, lane));
    fill(one, 0, 100U + static_cast<unsigned>(lane));
    fill(batch, lane, 100U + static_cast<unsigned>(lane));
    for (std::size_t i = 0; i < rows; ++i) {
      const double limit = 34.0 + 3.0 * std::sin(static_cast<double>(i));
      one.vapour[i] = limit;
      batch.vapour[i].set(lane, limit);
    }
  }
  const Resistance<8> batch_r = test::together(alone_r, f.law, f.joint);
  bool some_cavity = false;
  for (int step = 0; step < 60; ++step) {
    const auto swing = [&](auto& pipe, int lane, int at) {
      const double phase = 0.11 * step + at;
      pipe.head.front().set(lane, 60.0 + 20.0 * std::sin(phase));
      pipe.flow.front().set(lane, 0.1 * std::sin(1.3 * phase));
      pipe.head.back().set(lane, 55.0 + 20.0 * std::cos(phase));
      pipe.flow.back().set(lane, 0.05 * std::cos(0.7 * phase));
      pipe.flow_before.front().set(lane, pipe.flow.front()[lane]);
      pipe.flow_before.back().set(lane, pipe.flow.back()[lane]);
    };
    for (int lane = 0; lane < 8; ++lane) {
      swing(alone[static_cast<std::size_t>(lane)], 0, lane);
      swing(batch, lane, lane);
    }
    batch.march(batch_r, limited);
    for (int lane = 0; lane < 8; ++lane) {
      PipeState<1>& one = alone[static_cast<std::size_t>(lane)];
      one.march(alone_r[static_cast<std::size_t>(lane)], limited);
      some_cavity = some_cavity || one.cavities;
      for (std::size_t i = 0; i < rows; ++i) {
        ASSERT_TRUE(same_bits(one.head[i].number, batch.head[i][lane])) << rows << ' ' << step << ' ' << i;
        ASSERT_TRUE(same_bits(one.flow[i].number, batch.flow[i][lane])) << rows << ' ' << step << ' ' << i;
        if (one.cavities) {
          ASSERT_TRUE(same_bits(one.flow_before[i].number, batch.flow_before[i][lane])) << step << ' ' << i;
          ASSERT_TRUE(same_bits(one.volume[i].number, batch.volume[i][lane])) << step << ' ' << i;
        }
        if (envelopes) {
          ASSERT_TRUE(same_bits(one.head_max[i].number, batch.head_max[i][lane])) << step << ' ' << i;
          ASSERT_TRUE(same_bits(one.head_min[i].number, batch.head_min[i][lane])) << step << ' ' << i;
        }
        if (roots) {
          ASSERT_TRUE(same_bits(one.root[i].number, batch.root[i][lane])) << rows << ' ' << step << ' ' << i;
        }
      }
      ASSERT_TRUE(same_bits(one.tally.allowance.number, batch.tally.allowance[lane]));
      ASSERT_TRUE(same_bits(one.tally.share.number, batch.tally.share[lane]));
      ASSERT_EQ(one.tally.closed[0], batch.tally.closed[lane]);
    }
  }
  if (limited && rows > 8) {
    EXPECT_TRUE(some_cavity) << "the limits were meant to be reached";
  }
}

TEST(interior, one_draw_and_eight_give_the_same_bits_in_every_length) {
  for (const Friction& f : {frictions[0], frictions[1], frictions[7]})
    for (std::size_t rows = 2; rows <= 52; ++rows) expect_same_bits(f, rows, rows % 2 == 0, false, true, true);
  // a batch's halves take turns every 64 rows
  for (const std::size_t rows : {64U, 65U, 66U, 67U, 128U, 129U, 130U, 131U, 200U})
    expect_same_bits(frictions[0], rows, false, false, true, true);
}

TEST(interior, one_draw_and_eight_give_the_same_bits_in_every_form) {
  for (const Friction& f : frictions)
    for (const std::size_t rows : {9U, 10U, 11U, 33U, 46U})
      for (const bool limited : {false, true})
        for (const bool placed : {false, true})
          for (const bool envelopes : {false, true}) expect_same_bits(f, rows, limited, placed, envelopes, true);
}

TEST(interior, one_draw_and_eight_give_the_same_bits_in_long_pipes) {
  for (const Friction& f : {frictions[1], frictions[3], frictions[4]})
    for (const bool limited : {false, true}) expect_same_bits(f, 141, limited, false, true, true);
}

TEST(interior, one_draw_and_eight_give_the_same_bits_without_kept_roots) {
  for (const bool limited : {false, true}) expect_same_bits(frictions[1], 37, limited, false, true, false);
}

template <int W>
void expect_blocks_give_the_bits_of_single_rows(const Friction& f, std::size_t rows) {
  PipeState<W> blocks(rows);
  for (int lane = 0; lane < W; ++lane) fill(blocks, lane, static_cast<unsigned>(rows) + static_cast<unsigned>(lane));
  blocks.roots = true;
  PipeState<W> one_by_one = blocks;
  one_by_one.uneven = true;
  one_by_one.reaches = static_cast<double>(rows - 1);
  Resistance<W> r;
  if constexpr (W == 1) {
    r = resistance(f);
  } else {
    std::vector<Resistance<1>> alone;
    for (int lane = 0; lane < W; ++lane) alone.push_back(resistance(f, lane));
    r = test::together(alone, f.law, f.joint);
  }
  for (int step = 0; step < 20; ++step) {
    blocks.march(r, false);
    one_by_one.march(r, false);
  }
  for (std::size_t i = 0; i < rows; ++i)
    for (int lane = 0; lane < W; ++lane) {
      ASSERT_TRUE(same_bits(blocks.head[i][lane], one_by_one.head[i][lane])) << rows << ' ' << i;
      ASSERT_TRUE(same_bits(blocks.flow[i][lane], one_by_one.flow[i][lane])) << rows << ' ' << i;
      ASSERT_TRUE(same_bits(blocks.root[i][lane], one_by_one.root[i][lane])) << rows << ' ' << i;
      ASSERT_TRUE(same_bits(blocks.head_max[i][lane], one_by_one.head_max[i][lane])) << rows << ' ' << i;
    }
}

// The rows of a run alone are marched in blocks, and so are those of draws with a law of friction; told that lanes may
// end at other rows, one by one.
TEST(interior, blocks_of_rows_give_the_bits_of_one_row_after_the_other) {
  for (const Friction& f : frictions)
    for (std::size_t rows = 10; rows <= 60; ++rows) {
      expect_blocks_give_the_bits_of_single_rows<1>(f, rows);
      expect_blocks_give_the_bits_of_single_rows<8>(f, rows);
    }
  for (const Friction& f : frictions)
    for (const std::size_t rows : {66U, 67U, 139U}) expect_blocks_give_the_bits_of_single_rows<1>(f, rows);
}

// What the other draws of a batch do leaves a draw alone: laminar, turbulent, at rest, not a number.
TEST(interior, a_draw_does_not_feel_the_others_of_its_batch) {
  constexpr std::size_t rows = 24;
  for (const Friction& f : frictions) {
    const std::vector<Resistance<1>> alone_r(8, resistance(f));
    const Resistance<8> r = test::together(alone_r, f.law, f.joint);
    std::vector<PipeState<8>> batches;
    for (int other = 0; other < 4; ++other) {
      PipeState<8>& pipe = batches.emplace_back(rows);
      pipe.roots = true;
      for (int lane = 0; lane < 8; ++lane) {
        fill(pipe, lane, lane == 5 ? 9U : 20U + static_cast<unsigned>(lane));
        if (lane == 5) continue;
        for (auto& q : pipe.flow) {
          if (other == 1) q.set(lane, 0.0);
          if (other == 2) q.set(lane, 0.002 * q[lane]);
          if (other == 3) q.set(lane, std::numeric_limits<double>::quiet_NaN());
        }
      }
      for (int step = 0; step < 20; ++step) pipe.march(r, false);
    }
    for (std::size_t i = 0; i < rows; ++i)
      for (int other = 1; other < 4; ++other) {
        EXPECT_TRUE(same_bits(batches[0].head[i][5], batches[static_cast<std::size_t>(other)].head[i][5])) << other;
        EXPECT_TRUE(same_bits(batches[0].flow[i][5], batches[static_cast<std::size_t>(other)].flow[i][5])) << other;
      }
  }
}

// What a wave brings to an end at steady flow is the head beside it less the loss of one reach, by the law itself.
TEST(interior, a_wave_reaches_the_end_less_the_loss_of_a_reach) {
  constexpr std::size_t rows = 12;
  for (const Friction& f : {frictions[0], frictions[1]}) {
    const Resistance<1> r = resistance(f);
    for (const double q : {0.2, -0.2, 0.05}) {
      PipeState<1> pipe(rows);
      for (std::size_t i = 0; i < rows; ++i) {
        pipe.head[i] = 50.0 - static_cast<double>(i);
        pipe.flow[i] = q;
      }
      const double factor = friction::colebrook_plain(1e-4, 3e5 * std::fabs(q)).factor;
      const double loss =
          (f.form == Form::darcy ? 40.0 * factor + 0.2 : 1.7) * q * std::fabs(q) + (r.damp.number - r.carry.number) * q;
      const auto from = transient::arriving_at_from<1>(r, pipe.rows(), false);
      const auto to = transient::arriving_at_to<1>(r, pipe.rows(), {static_cast<int>(rows) - 1}, true);
      EXPECT_NEAR(from.head.number + from.impedance.number * q, 49.0 + loss, 1e-11);
      EXPECT_NEAR(to.head.number - to.impedance.number * q, 40.0 - loss, 1e-11);
    }
  }
}

}  // namespace
