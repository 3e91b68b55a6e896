// SPDX-License-Identifier: MIT
//
// compare: two results side by side; draw by draw where both drew the same way, for bands drawn separately are never
// subtracted.
#include "core/answers/study.hpp"
#include "core/resultfile/result_file.hpp"
#include "core/show/amounts.hpp"
#include "core/show/json_text.hpp"
#include "core/show/reported.hpp"
#include "montecarlo/program/failure.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include <algorithm>
#include <cmath>
#include <string>
#include <vector>

namespace headband::program {
namespace {

/// One number of two results side by side [SI].
struct Compared {
  std::string name, kind;
  double before = answers::missing, after = answers::missing, difference = answers::missing;  ///< central runs
  /// Band of the difference draw by draw, where both results drew the same way; NaN elsewhere.
  double difference_low = answers::missing, difference_median = answers::missing, difference_high = answers::missing;
  long long pairs = 0;
};

struct Comparison {
  std::vector<Compared> numbers;
  bool paired = false;     ///< draws of both belong together
  std::string not_paired;  ///< why not, in words
};

using answers::Bands;
using answers::Study;

/// Quantile of sorted numbers by a straight line between order statistics (type 7 of Hyndman & Fan 1996).
double quantile(const std::vector<double>& sorted, double probability) {
  if (sorted.empty()) return answers::missing;
  const double place = probability * static_cast<double>(sorted.size() - 1);
  const auto below = static_cast<std::size_t>(place);
  const auto above = std::min(below + 1, sorted.size() - 1);
  return sorted[below] + (place - static_cast<double>(below)) * (sorted[above] - sorted[below]);
}

void add_pairs(const Bands& before, std::size_t a, const Bands& after, std::size_t b, Compared& number) {
  const std::size_t columns_a = before.answers.size(), columns_b = after.answers.size();
  const std::size_t runs = std::min(before.output_value.size() / columns_a, after.output_value.size() / columns_b);
  std::vector<double> differences;
  for (std::size_t run = 0; run < runs; ++run) {
    const double d = after.output_value[run * columns_b + b] - before.output_value[run * columns_a + a];
    if (std::isfinite(d)) differences.push_back(d);
  }
  std::ranges::sort(differences);
  const double tail = (1.0 - before.coverage) / 2.0;
  number.pairs = static_cast<long long>(differences.size());
  number.difference_low = quantile(differences, tail);
  number.difference_median = quantile(differences, 0.5);
  number.difference_high = quantile(differences, 1.0 - tail);
}

std::string why_not_paired(const Study& before, const Study& after) {
  if (!before.bands || !after.bands) return "one of them is not sampled";
  const Bands &a = *before.bands, &b = *after.bands;
  if (a.seed != b.seed) return "the seeds differ";
  if (a.design != b.design) return "the designs differ";
  if (a.draws != b.draws || a.stride != b.stride) return "the numbers of draws differ";
  if (a.input_name != b.input_name) return "the unknowns differ";
  return "";
}

void add(Comparison& into, const std::string& name, const std::string& kind, double before, double after) {
  if (!std::isfinite(before) && !std::isfinite(after)) return;
  into.numbers.push_back({.name = name, .kind = kind, .before = before, .after = after, .difference = after - before});
}

template <class T>
const T* named(const std::vector<T>& list, const std::string& name) {
  const auto found = std::ranges::find(list, name, &T::name);
  return found == list.end() ? nullptr : &*found;
}

nlohmann::ordered_json number(double value) {
  return std::isfinite(value) ? nlohmann::ordered_json(value) : nlohmann::ordered_json(nullptr);
}

Comparison compare(const Study& before, const Study& after) {
  Comparison result;
  result.not_paired = why_not_paired(before, after);
  result.paired = result.not_paired.empty();
  for (const auto& pipe : before.pipes) {
    if (const auto* other = named(after.pipes, pipe.name)) {
      add(result, "flow " + pipe.name, "flow", pipe.flow, other->flow);
      add(result, "pressure drop " + pipe.name, "pressure_drop", pipe.pressure_drop, other->pressure_drop);
    }
  }
  if (before.highest && after.highest) {
    add(result, "highest pressure of the run", "highest_pressure", before.highest->pressure, after.highest->pressure);
  }
  if (before.lowest && after.lowest) {
    add(result, "lowest pressure of the run", "lowest_pressure", before.lowest->pressure, after.lowest->pressure);
  }
  if (before.bands && after.bands) {
    for (std::size_t a = 0; a < before.bands->answers.size(); ++a) {
      const auto& answer = before.bands->answers[a];
      const auto* other = named(after.bands->answers, answer.name);
      if (other == nullptr || other->kind != answer.kind) continue;
      add(result, answer.name, answer.kind, answer.central, other->central);
      if (result.paired && !result.numbers.empty()) {
        const auto b = static_cast<std::size_t>(other - after.bands->answers.data());
        add_pairs(*before.bands, a, *after.bands, b, result.numbers.back());
      }
    }
  }
  return result;
}

std::string comparison_text(const Study& before,
                            const Study& after,
                            const Comparison& comparison,
                            const std::string& units) {
  const show::Amounts amounts(before, units);
  const auto title = [](const Study& s) {
    return fmt::format("{} ({}, {})", s.title, show::file_name_of(s.provenance.case_file), s.verb);
  };
  std::string text = fmt::format("before: {}\nafter:  {}\n\n", title(before), title(after));
  for (const auto& n : comparison.numbers) {
    const auto dimension = show::dimension_of_kind(n.kind);
    text += fmt::format("  {}: {} -> {}, change {}",
                        n.name,
                        amounts.of(n.before, dimension),
                        amounts.of(n.after, dimension),
                        amounts.width(n.difference, dimension, 3));
    if (n.pairs > 0) {
      text += fmt::format("; by the same draws {} ({} to {}, {} pairs)",
                          amounts.width(n.difference_median, dimension, 3),
                          amounts.width(n.difference_low, dimension, 3),
                          amounts.width(n.difference_high, dimension, 3),
                          n.pairs);
    }
    text += "\n";
  }
  for (const auto& limit : before.limits) {
    if (const auto* other = named(after.limits, limit.name)) {
      text += fmt::format(
          "  limit {}: {} -> {}\n", limit.name, show::words_of(limit.verdict), show::words_of(other->verdict));
    }
  }
  if (!comparison.paired && (before.bands || after.bands)) {
    text += fmt::format("\nBands are not subtracted: {}.\n", comparison.not_paired);
  }
  return text;
}

std::string comparison_json(const Study& before, const Study& after, const Comparison& comparison) {
  using Json = nlohmann::ordered_json;
  const auto verdict = [](answers::Verdict v) {
    return v == answers::Verdict::none ? Json(nullptr) : Json(show::words_of(v));
  };
  Json numbers = Json::object();
  for (const auto& n : comparison.numbers) {
    std::string key = n.name;
    for (int i = 2; numbers.contains(key); ++i) key = fmt::format("{} {}", n.name, i);
    numbers[key] = {{"kind", n.kind},
                    {"before", number(n.before)},
                    {"after", number(n.after)},
                    {"difference", number(n.difference)},
                    {"pairs", n.pairs},
                    {"difference_band",
                     Json::array({number(n.difference_low), number(n.difference_median), number(n.difference_high)})}};
  }
  Json limits = Json::object();
  for (const auto& limit : before.limits) {
    if (const auto* other = named(after.limits, limit.name)) {
      limits[limit.name] = {{"before", verdict(limit.verdict)}, {"after", verdict(other->verdict)}};
    }
  }
  return show::json_text({{"headband", after.provenance.version},
                          {"verb", "compare"},
                          {"before", show::file_name_of(before.provenance.case_file)},
                          {"after", show::file_name_of(after.provenance.case_file)},
                          {"verdict", Json::array({verdict(before.verdict), verdict(after.verdict)})},
                          {"paired", comparison.paired},
                          {"numbers", std::move(numbers)},
                          {"limits", std::move(limits)}});
}

}  // namespace

ExitCode verb_compare(const Options& options) {
  const auto work = [&] {
    const answers::Study before = resultfile::read(options.words[0]), after = resultfile::read(options.words[1]);
    const Comparison comparison = compare(before, after);
    print(options.json ? comparison_json(before, after, comparison)
                       : comparison_text(before, after, comparison, options.units));
    return ExitCode::done;
  };
  return guarded(options.words[0] + " or " + options.words[1], [&] { return told(options, work); });
}

}  // namespace headband::program
