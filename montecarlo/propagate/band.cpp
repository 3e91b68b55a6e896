// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/band.hpp"

#include "core/base/error.hpp"
#include "montecarlo/bands/sample.hpp"
#include "montecarlo/bands/verdict.hpp"
#include "montecarlo/propagate/budget.hpp"
#include "montecarlo/propagate/draws.hpp"
#include "montecarlo/propagate/histories.hpp"
#include "montecarlo/propagate/inputs.hpp"
#include "montecarlo/propagate/judge_limits.hpp"
#include "montecarlo/propagate/model.hpp"
#include "montecarlo/propagate/stored_runs.hpp"
#include "montecarlo/sampling/sampler.hpp"
#include "transient/march/grid_request.hpp"

#include <fmt/format.h>
#include <algorithm>
#include <cmath>

namespace headband::montecarlo {

namespace {

using network::Design;

constexpr long long first_look = 256;        ///< draws before an `until` rule is asked for the first time
constexpr long long most_draws = 1LL << 20;  ///< where an `until` rule gives up

std::string design_word(Design design) {
  switch (design) {
    case Design::plain:
      return "plain";
    case Design::latin_hypercube:
      return "latin hypercube";
    case Design::sobol:
      return "sobol";
  }
  return {};
}

/// Everything one band works with.
class BandRun {
 public:
  BandRun(const network::Case& c, const network::Plan& plan, const CentralRun& central, const BandOptions& options)
      : case_(c),
        plan_(plan),
        central_(central),
        options_(options),
        seed_(options.seed.value_or(c.band.seed)),
        computed_(answers_computed(c, plan, options.surge)),
        inputs_(inputs_of(c)),
        ranges_(ranges_of(c)),
        stations_(model_stations(c, plan, options.surge)),
        wish_(c.band.until_share > 0.0 ? most_draws : c.band.draws),
        history_times_(times_of_histories()),
        table_(computed_.size(), plan.limits.size(), stations_.size(), history_times_.size() * plan.probes.size()) {
    make_models(history_times_);
    const bool until = c.band.until_share > 0.0;
    draws_ = draws_of_design(c.band.design, until ? first_look : wish_);
    if (until && c.band.design == Design::latin_hypercube) {
      throw base::InputError({{c.band.place,
                               "band/until",
                               "a Latin hypercube needs its number of draws beforehand",
                               "until",
                               "",
                               "use design = \"sobol\", or give draws"}});
    }
    if (!until && draws_ != c.band.draws) {
      warn(fmt::format(
          "draws: {} rounded up to {} (a Sobol' design takes 16 times a power of two)", c.band.draws, draws_));
    }
  }

  BandOutcome run() {
    start();
    if (!draw_all()) return stopped();
    if (!history_times_.empty()) make_models({});  // the band's own draws alone keep histories
    if (!outer_points()) return stopped();
    form_answers();
    if (!form_budget()) return stopped();
    form_profile();
    form_history();
    finish();
    return std::move(outcome_);
  }

 private:
  [[nodiscard]] std::vector<double> times_of_histories() {
    if (!options_.surge) return {};
    std::string warning;
    auto times = history_times(central_.time, case_.surge.duration.value, plan_.probes.size(), wish_, warning);
    if (!warning.empty()) warn(warning);
    return times;
  }

  void make_models(const std::vector<double>& times) {
    models_.clear();
    for (int t = 0; t < std::max(1, options_.threads); ++t)
      models_.push_back(make_model(case_, plan_, options_.surge, times));
  }

  void warn(const std::string& words) { outcome_.warnings.push_back(words); }
  [[nodiscard]] bool asked_to_stop() const { return options_.stop != nullptr && options_.stop->load(); }

  /// The source of the plain draws: scores of the sampler, ranges at a place.
  [[nodiscard]] ScoreSource source(const Sampler& sampler, const std::vector<double>& place) const {
    return [&sampler, &place, this](long long first, std::span<network::Scores<8>> blocks) {
      sampler.blocks(first, blocks);
      for (auto& scores : blocks)
        for (std::size_t i = 0; i < ranges_.unknown.size(); ++i) scores[ranges_.unknown[i]] = place[i];
    };
  }

  [[nodiscard]] DrawOptions draw_options(long long done_before) {
    DrawOptions o;
    o.blocks_at_once = options_.surge ? 1 : 64;
    o.stop = options_.stop;
    if (options_.progress) {
      o.progress = [this, done_before](long long done) {
        options_.progress(done_before + done, std::max(all_work_, done_before + done));
      };
    }
    return o;
  }

  void start() {
    answers::Bands& bands = outcome_.bands;
    bands.coverage = case_.band.coverage;
    bands.confidence = case_.band.confidence;
    bands.design = design_word(case_.band.design);
    bands.seed = seed_;
    bands.draws_asked = case_.band.draws;
    bands.surged = options_.surge;
    name_answers();
    name_runs(bands, inputs_, plan_, computed_);
    if (options_.surge && case_.surge.time_step.given()) {
      for (const auto& pipe : case_.pipes) {
        if (!transient::travel_time_is_uncertain(case_, pipe)) continue;
        warn(fmt::format(
            "time_step is given: the wave speed of {} is rounded to that grid in every draw (by 1 % at most, "
            "unless wave_speed_change allows more), and a spread smaller than that may not show; reaches in "
            "its place follow each draw",
            pipe.name));
        break;
      }
    }
    for (const auto& station : stations_) {
      bands.profile_station_pipe.push_back(station.pipe);
      bands.profile_share.push_back(station.share);
    }
    bands.history_time = history_times_;
    if (!history_times_.empty())
      for (const auto& probe : plan_.probes) bands.history_probe_name.push_back(probe.name);
    for (const auto& answer : plan_.answers) {
      if (!options_.surge && !case_.events.empty() && answer.needs_surge()) {
        outcome_.left_out.push_back(fmt::format("{}: needs band --surge", answer.name));
      }
    }
    if (options_.resumed) {
      taken_up_ = take_up_runs(*options_.resumed, table_);
      if (taken_up_ == 0 && !options_.resumed->run_status.empty())
        warn("the draws of the interrupted band do not fit this case: started anew");
    }
    const auto passes = static_cast<long long>(ranges_.points.size());
    all_work_ = draws_ * passes + budget_work(inputs_, std::min(draws_, budget_draws), options_.surge);
  }

  /// The draws at the middle of the ranges, all of them or until the rule is met.
  bool draw_all() {
    sampler_.emplace(case_, case_.band.design, seed_, draws_);
    const ScoreSource scores = source(*sampler_, ranges_.points.front().place);
    long long first = 0;
    for (;;) {
      if (first < taken_up_) first = std::min(draws_, take_up_runs(*options_.resumed, table_));
      table_.resize(draws_);
      if (first < draws_) {
        DrawOptions o = draw_options(0);
        if (options_.checkpoint) {
          o.checkpoint_seconds = options_.checkpoint_seconds;
          o.checkpoint = [this](long long done) {
            answers::Bands so_far = outcome_.bands;
            keep_runs(so_far, table_, done, inputs_, *sampler_, ranges_, 1, true);
            options_.checkpoint(so_far);
          };
        }
        const DrawSummary summary = run_draws(first, draws_, scores, models_, table_, o);
        if (!summary.complaint.empty()) warn("draws that broke off: " + summary.complaint);
        if (summary.stopped) {
          table_.resize(summary.done);
          return false;
        }
      }
      const double share = case_.band.until_share;
      if (share <= 0.0) return true;
      const double reached = widest_doubt();
      if (reached <= share) return true;
      if (draws_ >= most_draws) {
        warn(fmt::format("until: after {} draws the ends of a band are known to {:.3g} % of its width, not to {:.3g} %",
                         draws_,
                         100.0 * reached,
                         100.0 * share));
        return true;
      }
      first = draws_;
      draws_ *= 2;
      all_work_ = std::max(all_work_, draws_);
    }
  }

  [[nodiscard]] SampleShape shape() const {
    return {.replicates = case_.band.design == Design::sobol ? sobol_replicates : 1,
            .confidence = case_.band.confidence};
  }

  /// The largest half-width of a band end's interval over the answers, as a share of its band.
  [[nodiscard]] double widest_doubt() const {
    double widest = 0.0;
    for (const auto& column : table_.answer) {
      const Sample sample(column, table_.status, shape());
      const auto low = sample.quantile(0.5 * (1.0 - case_.band.coverage)),
                 high = sample.quantile(0.5 * (1.0 + case_.band.coverage));
      const double width = high.value - low.value;
      for (const auto& end : {low, high}) {
        const double doubt = 0.5 * (end.upper - end.lower) / width;
        widest = width == 0.0 ? widest : std::isfinite(doubt) ? std::max(widest, doubt) : 1.0;
      }
    }
    return widest;
  }

  /// The same draws at every other setting of the ranges.
  bool outer_points() {
    judged_.push_back(judge_limits(case_, plan_, central_, table_, options_.surge));
    medians_.assign(computed_.size(), {});
    if (ranges_.points.size() > 1) note_medians(table_);  // only a range of them is told
    for (std::size_t p = 1; p < ranges_.points.size(); ++p) {
      DrawTable there(computed_.size(), plan_.limits.size(), 0);
      there.resize(draws_);
      const ScoreSource scores = source(*sampler_, ranges_.points[p].place);
      const DrawSummary summary =
          run_draws(0, draws_, scores, models_, there, draw_options(static_cast<long long>(p) * draws_));
      if (summary.stopped) return false;
      if (!summary.complaint.empty()) warn("draws that broke off: " + summary.complaint);
      judged_.push_back(judge_limits(case_, plan_, central_, there, options_.surge));
      note_medians(there);
    }
    return true;
  }

  void note_medians(const DrawTable& table) {
    for (std::size_t i = 0; i < computed_.size(); ++i) {
      medians_[i].push_back(Sample(table.answer[i], table.status, {}).quantile(0.5).value);
    }
  }

  /// What is answered; the columns of stored draws hang on it.
  void name_answers() {
    for (const std::size_t i : computed_) {
      const network::AnswerPlan& plan = plan_.answers[i];
      answers::BandAnswer answer;
      answer.name = plan.name;
      answer.kind = kind_word(plan.kind);
      answer.unit = unit_word(plan.kind);
      answer.where = where_words(plan);
      if (i < central_.answer_value.size()) answer.central = central_.answer_value[i];
      outcome_.bands.answers.push_back(std::move(answer));
    }
  }

  void form_answers() {
    for (std::size_t i = 0; i < computed_.size(); ++i) {
      const Sample sample(table_.answer[i], table_.status, shape());
      answers::BandAnswer& answer = outcome_.bands.answers[i];
      answer.mean = sample.mean();
      answer.standard_deviation = sample.standard_deviation();
      answer.quantiles = sample.quantiles(asked_probabilities(case_.band.coverage));
      answer.modes = sample.modes();
      answer.draws = sample.draws();
      answer.failed = sample.failed();
      const auto median = std::ranges::find(answer.quantiles, 0.5, &answers::QuantileAnswer::probability);
      answer.budget_sampling = 0.5 * (median->upper - median->lower);
      answer.budget_grid =
          computed_[i] < central_.answer_grid_bound.size() ? central_.answer_grid_bound[computed_[i]] : 0.0;
      if (medians_[i].size() > 1) {
        const auto [least, most] = std::ranges::minmax(medians_[i]);
        answer.range = {least, most};
      }
    }
    outcome_.limits = over_ranges(ranges_, case_, judged_);
    outcome_.bands.whole_line.clear();
    if (outcome_.limits.size() > plan_.limits.size()) {
      outcome_.bands.whole_line.push_back(std::move(outcome_.limits.back()));
      outcome_.limits.pop_back();
    }
  }

  bool form_budget() {
    BudgetRequest request{
        .inputs = &inputs_, .ranges = &ranges_, .sampler = &*sampler_, .names = {}, .surge = options_.surge};
    for (const auto& answer : outcome_.bands.answers) request.names.push_back(answer.name);
    request.draw_options = draw_options(static_cast<long long>(ranges_.points.size()) * draws_);
    Budget budget = find_budget(request, table_, models_);
    for (const auto& words : budget.warnings) warn(words);
    for (std::size_t i = 0; i < budget.answers.size(); ++i) {
      auto& answer = outcome_.bands.answers[i];
      answer.budget_inputs = budget.answers[i].inputs;
      answer.budget_friction_law = budget.answers[i].friction_law;
      answer.budget_draws = budget.draws;
      answer.sensitivity = std::move(budget.answers[i].shares);
    }
    return !budget.stopped;
  }

  /// Quantiles of the envelopes at each station.
  void form_profile() {
    if (stations_.empty()) return;
    answers::Bands& bands = outcome_.bands;
    bands.profile_probability = band_probabilities(case_.band.coverage);
    for (const bool highest : {true, false}) {
      std::vector<double>& out = highest ? bands.profile_head_max : bands.profile_head_min;
      out.assign(3 * stations_.size(), answers::missing);
      for (std::size_t s = 0; s < stations_.size(); ++s) {
        const auto& column = highest ? table_.head_max[s] : table_.head_min[s];
        const std::span<const std::int8_t> status(table_.status.data(), column.size());
        const auto quantiles = plain_quantiles(column, status, bands.profile_probability);
        for (std::size_t p = 0; p < 3; ++p) out[p * stations_.size() + s] = quantiles[p];
      }
    }
    if (static_cast<long long>(table_.head_max.front().size()) < draws_) {
      warn(fmt::format("whole-line bands are those of the first {} draws", table_.head_max.front().size()));
    }
  }

  /// Quantiles of the head at each kept place over time.
  void form_history() {
    form_histories(table_, outcome_.bands);
    const long long kept = outcome_.bands.history_draws,
                    wanted = std::min<long long>(table_.draws(), most_history_draws);
    if (kept > 0 && kept < wanted) warn(fmt::format("bands of histories are those of the first {} draws", kept));
  }

  void count_runs() {
    answers::Bands& bands = outcome_.bands;
    bands.draws = table_.draws();
    std::array<long long, 5> by_status{};
    by_status[0] = std::ranges::count(table_.status, std::int8_t{0});
    bands.failed = bands.draws - by_status[0];
    for (std::size_t i = 0; bands.failed > 0 && i < table_.status.size(); ++i)
      if (table_.status[i] != 0) ++by_status[static_cast<std::size_t>(std::clamp<int>(table_.status[i], 1, 4))];
    bands.with_cavity = std::ranges::count(table_.cavity, 1);
    if (bands.failed > 0) {
      warn(fmt::format(
          "{} of {} draws failed: {} without a steady state, {} not finite, {} with a boundary that did not "
          "converge, {} refused by the grid; they count against every upper bound",
          bands.failed,
          bands.draws,
          by_status[1],
          by_status[2],
          by_status[3],
          by_status[4]));
    }
    if (bands.with_cavity > 0 && !central_.cavity) {
      warn(fmt::format("a cavity formed in {} of {} draws, none in the central run: its grid bound does not cover them",
                       bands.with_cavity,
                       bands.draws));
    }
    outcome_.all_failed = bands.draws > 0 && bands.failed == bands.draws;
  }

  void finish() {
    count_runs();
    keep_runs(outcome_.bands, table_, table_.draws(), inputs_, *sampler_, ranges_, stride_of(table_.draws()), false);
  }

  /// What a stopped run hands over: the draws done, and what they say so far.
  BandOutcome stopped() {
    outcome_.stopped = true;
    outcome_.limits.clear();
    if (table_.draws() > 0) {
      judged_.resize(std::min<std::size_t>(judged_.size(), 1));
      if (judged_.empty()) {
        judged_.push_back(judge_limits(case_, plan_, central_, table_, options_.surge));
        medians_.assign(computed_.size(), {});
      }
      for (auto& m : medians_) m.clear();
      form_answers();
      form_profile();
      form_history();
    }
    count_runs();
    outcome_.all_failed = false;
    keep_runs(outcome_.bands, table_, table_.draws(), inputs_, *sampler_, ranges_, 1, true);
    return std::move(outcome_);
  }

  const network::Case& case_;
  const network::Plan& plan_;
  const CentralRun& central_;
  const BandOptions& options_;
  BandOutcome outcome_;
  std::uint64_t seed_;
  std::vector<std::size_t> computed_;
  std::vector<Input> inputs_;
  Ranges ranges_;
  std::vector<transient::BatchStation> stations_;
  long long wish_ = 0;
  std::vector<double> history_times_;
  DrawTable table_;
  std::vector<BlockModel> models_;
  std::optional<Sampler> sampler_;
  long long draws_ = 0, taken_up_ = 0, all_work_ = 0;
  std::vector<PointJudgement> judged_;
  std::vector<std::vector<double>> medians_;
};

}  // namespace

BandOutcome run_band(const network::Case& c,
                     const network::Plan& plan,
                     const CentralRun& central,
                     const BandOptions& options) {
  base::Problems problems = check_together(c);
  if (!problems.empty()) throw base::InputError(std::move(problems));
  return BandRun(c, plan, central, options).run();
}

std::vector<double> scores_of_draw(const network::Case& c, unsigned long long seed, long long draws, long long draw) {
  const Sampler sampler(c, c.band.design, seed, draws);
  std::vector<double> scores;
  for (const auto& score : sampler.draw(draw)) scores.push_back(score.number);
  return scores;
}

}  // namespace headband::montecarlo
