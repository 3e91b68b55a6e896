// SPDX-License-Identifier: MIT
//
// Lanes: a draw gives the same bits alone, in any lane of a batch, and in a run with everything kept; and the kernels
// agree with the plain oracle over random networks.
#include "tests/transient/march/run_case.hpp"
#include "transient/line/plain_march.hpp"

#include <gtest/gtest.h>

#include <bit>
#include <random>

namespace headband::test {
namespace {

using base::Lanes;

/// A random valid network: a chain or tree of pipes from a basin, a valve at its end, dead ends, off-takes, perhaps a
/// second basin.
class RandomCase {
 public:
  explicit RandomCase(unsigned seed, bool spreads) : random_(seed), spreads_(spreads) {
    b.basin("B0", uniform(25.0, 100.0));
    const int pipes = 1 + static_cast<int>(random_() % 5);
    for (int i = 0; i < pipes; ++i) {
      const int from = i == 0 ? -1 : static_cast<int>(random_() % static_cast<unsigned>(i));
      const double bore = uniform(0.2, 0.6);  // one after the other: compilers order arguments as they like
      const double length = uniform(200.0, 900.0);
      auto& p = b.pipe(
          "p" + std::to_string(i), from < 0 ? "B0" : "n" + std::to_string(from), "n" + std::to_string(i), length, bore);
      CaseBuilder::profile_point(p, 0.0, 0.0);
      CaseBuilder::profile_point(p, 0.37 * length, 0.0);
      CaseBuilder::profile_point(p, length, 0.0);
      p.wave_speed = exact(uniform(700.0, 1300.0), Dimension::velocity);
      p.wave_speed_change = exact(0.5, Dimension::share);
      if (spreads_) {
        p.wave_speed.spread = base::Normal{30.0};
        p.bore.spread = base::Normal{0.002};
        p.roughness.spread = base::LogNormal{0.3};
      }
      if (random_() % 3 == 0) CaseBuilder::fitting(p, "bend", 0.5, 3.0);
    }
    auto& valve = b.valve_by_flow("valve", "n" + std::to_string(pipes - 1), "air", uniform(0.02, 0.1));
    valve.near_seat = exact(1.0);
    if (spreads_) valve.near_seat.spread = base::Normal{0.04};
    if (random_() % 2 == 0) b.draw_off("take", "n0", uniform(0.005, 0.02));
    const double over = uniform(0.3, 4.0);
    const double to = random_() % 2 == 0 ? 0.0 : 0.2;
    auto& e = b.move_valve("valve", 0.0, to, over);
    if (spreads_) e.over.spread = base::Normal{0.1 * e.over.value};
    auto& surge = b.surge(8.0, 12);
    surge.cavities = random_() % 2 == 0 ? network::Cavities::vapour : network::Cavities::off;
    surge.friction_in_time = static_cast<network::FrictionInTime>(random_() % 3);
    surge.grid_check = false;
    b.answer(network::AnswerKind::highest_pressure, "high", {});
    b.answer(network::AnswerKind::lowest_pressure, "low", {CaseBuilder::along_pipe("p0")});
    b.answer(network::AnswerKind::velocity, "speed", {CaseBuilder::along_pipe("p0")});
    b.answer(network::AnswerKind::highest_pressure, "spot", {CaseBuilder::on_pipe("p0", 111.0)});
    b.answer(network::AnswerKind::highest_pressure, "end", {CaseBuilder::at_place("n" + std::to_string(pipes - 1))});
  }
  double uniform(double low, double high) { return std::uniform_real_distribution<double>(low, high)(random_); }
  std::mt19937& random() { return random_; }

  CaseBuilder b;

 private:
  std::mt19937 random_;
  bool spreads_;
};

std::uint64_t bits(double x) { return std::bit_cast<std::uint64_t>(x); }

TEST(Batch, SameBitsAloneInAnyLaneAndInAFullRun) {
  int cavities = 0, compared = 0;
  for (unsigned seed = 1; seed <= 40; ++seed) {
    RandomCase made(seed, true);
    const network::Case c = made.b.finish();
    const network::Plan plan = network::make_plan(c);
    network::Scores<8> scores(c.unknowns.size());
    for (auto& s : scores)
      for (int lane = 0; lane < 8; ++lane) s.set(lane, made.uniform(0.02, 0.98));
    network::Values<8> values;
    network::realise<8>(c, plan, scores, values);
    steady::SteadySolver solver(c, plan);
    steady::SteadyState<8> state;
    solver.solve<8>(values, state);
    transient::BatchMarcher marcher(c, plan);
    transient::DrawAnswers<8> batch;
    marcher.march<8>(values, state, batch);
    for (int lane = 0; lane < 8; ++lane) {
      const auto l = static_cast<std::size_t>(lane);
      network::Scores<1> own(scores.size());
      for (std::size_t i = 0; i < own.size(); ++i) own[i] = Lanes<1>(scores[i][lane]);
      network::Values<1> value;
      network::realise<1>(c, plan, own, value);
      steady::SteadySolver alone(c, plan);
      steady::SteadyState<1> one;
      alone.solve<1>(value, one);
      transient::DrawAnswers<1> answer;
      transient::BatchMarcher(c, plan).march<1>(value, one, answer);
      ASSERT_EQ(answer.status[0], batch.status[l]) << seed << " " << lane;
      if (batch.status[l] == 4) continue;
      ASSERT_EQ(batch.status[l], 0) << seed << " " << lane;
      const transient::SurgeRun run = transient::run_surge(c, plan, value, one);
      ASSERT_TRUE(run.completed) << seed;
      cavities += batch.cavity[l] ? 1 : 0;
      ASSERT_EQ(run.cavity, batch.cavity[l]);
      for (std::size_t k = 0; k < plan.answers.size(); ++k) {
        ASSERT_EQ(bits(answer.answer[k].number), bits(batch.answer[k][lane])) << seed << " " << plan.answers[k].name;
        ASSERT_EQ(bits(run.answer_value[k]), bits(batch.answer[k][lane])) << seed << " " << plan.answers[k].name;
        ++compared;
      }
      for (std::size_t k = 0; k < marcher.stations().size(); ++k) {
        ASSERT_EQ(bits(answer.head_max[k].number), bits(batch.head_max[k][lane])) << seed;
        ASSERT_EQ(bits(answer.head_min[k].number), bits(batch.head_min[k][lane])) << seed;
      }
    }
  }
  EXPECT_GT(compared, 1000);
  EXPECT_GT(cavities, 20);
}

// A marcher keeps what its draws have in common; draws of other laws before leave nothing behind.
TEST(Batch, AMarcherUsedBeforeGivesTheBitsOfAFreshOne) {
  RandomCase made(7, true);
  made.b.c.surge.friction_in_time = network::FrictionInTime::reynolds;
  made.b.c.friction.law.options = {{network::FrictionLaw::colebrook_white, 0.4},
                                   {network::FrictionLaw::haaland, 0.4},
                                   {network::FrictionLaw::smooth, 0.2}};
  const network::Case c = made.b.finish();
  const network::Plan plan = network::make_plan(c);
  steady::SteadySolver solver(c, plan);
  transient::BatchMarcher used(c, plan);
  bool laws_differ = false;
  network::FrictionLaw before = network::FrictionLaw::none;
  for (int block = 0; block < 6; ++block) {
    network::Scores<8> scores(c.unknowns.size());
    for (auto& s : scores) {
      const double all = made.uniform(0.02, 0.98);  // odd blocks: lanes alike, so one law for all of them
      for (int lane = 0; lane < 8; ++lane) s.set(lane, block % 2 == 0 ? made.uniform(0.02, 0.98) : all);
    }
    network::Values<8> values;
    network::realise<8>(c, plan, scores, values);
    steady::SteadyState<8> state;
    solver.solve<8>(values, state);
    transient::DrawAnswers<8> again, fresh;
    used.march<8>(values, state, again);
    transient::BatchMarcher(c, plan).march<8>(values, state, fresh);
    for (int lane = 0; lane < 8; ++lane) {
      laws_differ =
          laws_differ || (before != network::FrictionLaw::none && values.law[static_cast<std::size_t>(lane)] != before);
      before = values.law[static_cast<std::size_t>(lane)];
      ASSERT_EQ(fresh.status[static_cast<std::size_t>(lane)], 0);
      for (std::size_t k = 0; k < plan.answers.size(); ++k)
        ASSERT_EQ(bits(again.answer[k][lane]), bits(fresh.answer[k][lane])) << block << " " << plan.answers[k].name;
    }
  }
  EXPECT_TRUE(laws_differ);
}

/// What a case answers by a run with everything kept and by a batch: the same bits, or the batch forgets something.
void expect_batch_meets_run(CaseBuilder& b) {
  const Marched m(b);
  ASSERT_TRUE(m.run.completed);
  transient::DrawAnswers<1> draw;
  transient::BatchMarcher(m.c, m.plan).march<1>(m.values, m.steady, draw);
  ASSERT_EQ(draw.status[0], 0);
  for (std::size_t k = 0; k < m.plan.answers.size(); ++k)
    EXPECT_EQ(bits(draw.answer[k].number), bits(m.run.answer_value[k]))
        << m.plan.answers[k].name << ": " << draw.answer[k].number << " and " << m.run.answer_value[k];
}

TEST(Batch, ARigidPipeHasItsVelocity) {
  CaseBuilder b;
  b.basin("tank", 60.0);
  b.pipe("main", "tank", "mid", 1000.0, 0.4).wave_speed = exact(1000.0, Dimension::velocity);
  b.pipe("stub", "mid", "end", 4.0, 0.2).wave_speed = exact(1000.0, Dimension::velocity);
  b.valve_by_flow("valve", "end", "air", 0.1);
  b.move_valve("valve", 0.5, 0.0, 4.0);
  b.surge(8.0, 12).cavities = network::Cavities::off;
  b.answer(network::AnswerKind::velocity, "stub", {CaseBuilder::along_pipe("stub")});
  b.answer(network::AnswerKind::velocity, "everywhere", {});
  b.answer(network::AnswerKind::velocity, "at the end", {CaseBuilder::at_place("end")});
  expect_batch_meets_run(b);
}

TEST(Batch, TheStateRightAfterAnInstantCountsAtPointsOfPipesToo) {
  ValveLine line({.flow = 0.2});
  line.b.move_valve("valve", 0.5, 0.0, 0.0);
  line.b.move_valve("valve", 0.53, 1.0, 0.2);  // before the next row: the peak is over by then
  line.b.surge(2.0, 10).cavities = network::Cavities::off;
  for (const double x : {600.0, 590.0, 300.0})
    line.b.answer(network::AnswerKind::highest_pressure, std::to_string(x), {CaseBuilder::on_pipe("line", x)});
  line.b.answer(network::AnswerKind::highest_pressure, "end", {CaseBuilder::at_place("end")});
  line.b.answer(network::AnswerKind::lowest_pressure, "low", {CaseBuilder::on_pipe("line", 600.0)});
  expect_batch_meets_run(line.b);
}

TEST(Batch, AnInstantOnTheLastRowIsTheSameForARunAndABatch) {
  ValveLine line({.flow = 0.2});
  line.b.move_valve("valve", 2.0, 0.0, 0.0);
  line.b.surge(2.0, 10).cavities = network::Cavities::off;
  line.b.answer(network::AnswerKind::highest_pressure, "end", {CaseBuilder::at_place("end")});
  line.b.answer(network::AnswerKind::highest_pressure, "everywhere", {});
  line.b.answer(network::AnswerKind::velocity, "speed", {CaseBuilder::at_place("end")});
  expect_batch_meets_run(line.b);
}

/// Head of probe `k` in a run at a time between its rows.
double on_the_line(const answers::Transient& t, std::size_t k, double time) {
  const std::size_t probes = t.probe_name.size(), last = t.time.size() - 1;
  if (time >= t.time[last]) return t.probe_head[last * probes + k];
  std::size_t row = 0;
  while (t.time[row + 1] <= time) ++row;
  const double share = (time - t.time[row]) / (t.time[row + 1] - t.time[row]);
  const double before = t.probe_head[row * probes + k], after = t.probe_head[(row + 1) * probes + k];
  return before + share * (after - before);
}

TEST(Batch, HistoriesAtSharedTimesAreThoseOfFullRuns) {
  int compared = 0, exact = 0;
  for (unsigned seed = 1; seed <= 12; ++seed) {
    RandomCase made(seed, true);
    made.b.c.show.places.push_back(CaseBuilder::at_place("n0"));
    made.b.c.show.places.push_back(CaseBuilder::on_pipe("p0", 111.0));
    made.b.c.show.places.push_back(CaseBuilder::along_pipe("p0"));
    const network::Case c = made.b.finish();
    const network::Plan plan = network::make_plan(c);
    ASSERT_EQ(plan.probes.size(), 3U);
    network::Scores<8> scores(c.unknowns.size());
    for (auto& s : scores)
      for (int lane = 0; lane < 8; ++lane) s.set(lane, made.uniform(0.02, 0.98));
    network::Values<8> values;
    network::realise<8>(c, plan, scores, values);
    steady::SteadySolver solver(c, plan);
    steady::SteadyState<8> state;
    solver.solve<8>(values, state);
    // the rows of the first lane's own run, some of them: exact there, on lines between rows elsewhere
    std::vector<double> times;
    for (int lane = 0; lane < 8; ++lane) {
      const auto l = static_cast<std::size_t>(lane);
      network::Scores<1> own(scores.size());
      for (std::size_t i = 0; i < own.size(); ++i) own[i] = Lanes<1>(scores[i][lane]);
      network::Values<1> value;
      network::realise<1>(c, plan, own, value);
      steady::SteadySolver alone(c, plan);
      steady::SteadyState<1> one;
      alone.solve<1>(value, one);
      const transient::SurgeRun run = transient::run_surge(c, plan, value, one);
      ASSERT_TRUE(run.completed) << seed;
      if (lane == 0)
        for (std::size_t row = 0; row < run.transient.time.size() && run.transient.time[row] <= 8.0;
             row += 1 + seed % 4)
          times.push_back(run.transient.time[row]);
      transient::DrawAnswers<8> batch;
      transient::BatchMarcher(c, plan, times).march<8>(values, state, batch);
      transient::DrawAnswers<1> answer;
      transient::BatchMarcher(c, plan, times).march<1>(value, one, answer);
      ASSERT_EQ(batch.history.size(), 3 * times.size());
      ASSERT_EQ(answer.history.size(), 3 * times.size());
      ASSERT_EQ(batch.status[l], 0);
      for (std::size_t i = 0; i < times.size(); ++i) {
        for (std::size_t k = 0; k < 3; ++k) {
          const double h = batch.history[3 * i + k][lane], of_run = on_the_line(run.transient, k, times[i]);
          ASSERT_EQ(bits(answer.history[3 * i + k].number), bits(h)) << seed << " " << lane;
          ASSERT_NEAR(h, of_run, 1e-9 * (1.0 + std::fabs(of_run))) << seed << " " << lane << " at " << times[i];
          if (lane == 0) {
            ASSERT_EQ(bits(h), bits(of_run)) << seed << " row at " << times[i];
            ++exact;
          }
          ++compared;
        }
      }
    }
  }
  EXPECT_GT(compared, 5000);
  EXPECT_GT(exact, 500);
}

TEST(Batch, KeepsNoHistoriesUnlessAsked) {
  RandomCase made(3, false);
  const Marched m(made.b);
  transient::DrawAnswers<1> out;
  transient::BatchMarcher(m.c, m.plan).march<1>(m.values, m.steady, out);
  EXPECT_TRUE(out.history.empty());
  const double past = m.run.transient.time.back() + 5.0;
  transient::BatchMarcher(m.c, m.plan, {0.0, past}).march<1>(m.values, m.steady, out);
  const std::size_t probes = m.plan.probes.size();
  ASSERT_EQ(out.history.size(), 2 * probes);
  for (std::size_t k = 0; k < probes; ++k) {
    EXPECT_EQ(out.history[k].number, m.run.transient.probe_head[k]);  // the first steady state
    EXPECT_EQ(out.history[probes + k].number,
              m.run.transient.probe_head[m.run.transient.probe_head.size() - probes + k]);
  }
}

/// The oracle's network of a case on the grid of a run.
transient::PlainNetwork plain_of(const network::Case& c,
                                 const network::Plan& plan,
                                 const network::Values<1>& values,
                                 const steady::SteadyState<1>& state,
                                 const transient::SurgeRun& run) {
  transient::PlainNetwork net;
  const double gravity = values.gravity.number;
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    const auto& v = values.pipes[i];
    const double a = v.area.number, n = run.grid.reaches[i];
    transient::PlainPipe p;
    p.from = plan.pipes[i].from.index;
    p.to = plan.pipes[i].to.index;
    p.reaches = run.grid.reaches[i];
    p.impedance = run.grid.marched_wave_speed[i] / (gravity * a);
    const double per_square = 1.0 / (2.0 * gravity * a * a);
    const double friction = state.friction_factor[i].number * v.length.number / v.bore.number * per_square / n;
    p.first_flow = state.pipe_flow[i].number;
    p.resistance = v.spread_k.number * per_square / n;
    if (c.surge.friction_in_time == network::FrictionInTime::linear) {
      p.linear = friction * std::fabs(p.first_flow);
    } else {
      p.resistance += friction;
    }
    net.pipes.push_back(p);
  }
  for (std::size_t k = 0; k < plan.places.size(); ++k) {
    transient::PlainPlace p;
    p.first_head = state.place_head[k].number;
    if (plan.places[k].basin >= 0) p.held = values.places[k].held_head.number;
    net.places.push_back(p);
  }
  for (std::size_t d = 0; d < plan.devices.size(); ++d) {
    const auto& device = plan.devices[d];
    if (device.kind == network::DeviceKind::draw_off) {
      net.places[device.from.at()].draw += state.device_flow[d].number;
      continue;
    }
    transient::PlainValve v;
    v.from = device.from.index;
    v.air_head = values.places[device.from.at()].elevation.number;
    const double full = state.valve_coefficient[0].number, to = values.events[0].to.number,
                 over = values.events[0].over.number;
    v.coefficient = [=](double t) { return full * (t < over ? 1.0 + (to - 1.0) * t / over : to); };
    net.valves.push_back(v);
  }
  net.time_step = run.grid.time_step;
  net.steps = static_cast<int>(run.transient.time.size()) - 1;
  return net;
}

TEST(Batch, KernelsMeetThePlainOracle) {
  int compared = 0;
  for (unsigned seed = 1; seed <= 60; ++seed) {
    RandomCase made(seed, false);
    made.b.c.surge.cavities = network::Cavities::off;
    if (made.b.c.surge.friction_in_time == network::FrictionInTime::reynolds)
      made.b.c.surge.friction_in_time = network::FrictionInTime::fixed;
    const Marched m(made.b);
    // a pipe at rest follows f(Re), which the oracle does not know
    bool still = false;
    for (const auto& re : m.steady.reynolds) still = still || re.number < 1.0;
    if (still) continue;
    const transient::PlainResult oracle = transient::plain_march(plain_of(m.c, m.plan, m.values, m.steady, m.run));
    std::size_t station = 0;
    for (const auto& pipe : oracle.head_max)
      for (const double h : pipe) {
        // 4000 ulps of the head: the same sums in another order over some hundred steps
        ASSERT_NEAR(m.run.transient.head_max[station++], h, 1e-12 * (1.0 + std::fabs(h))) << seed;
        ++compared;
      }
  }
  EXPECT_GT(compared, 1000);
}

}  // namespace
}  // namespace headband::test
