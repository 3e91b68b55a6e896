// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"
#include "core/casefile/choice_words.hpp"
#include "core/casefile/read.hpp"
#include "core/casefile/spread_words.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <tuple>

namespace headband::casefile {
namespace {

using namespace network;
using answers::ValueEcho;

struct Placed {
  SourcePlace place;
  ValueEcho echo;
};

class Echoes {
 public:
  void add(const Quantity& q) {
    if (!q.given() && q.same_as.empty()) return;
    ValueEcho e;
    e.path = q.path;
    e.name = q.name;
    e.written = q.written;
    e.value = q.value;
    e.unit = std::string(base::si_name(q.dimension));
    e.spread = words_of_spread(q, base::UnitFamily::si);
    e.source = q.source;
    e.grade = q.grade;
    e.guess = q.guess;
    e.shown_si = words(q, base::UnitFamily::si);
    e.shown_us = words(q, base::UnitFamily::us);
    list_.push_back({q.place, std::move(e)});
  }

  void add_choice(
      SourcePlace place, const std::string& path, const std::string& name, const std::string& written, bool guess) {
    ValueEcho e;
    e.path = path;
    e.name = name;
    e.written = e.shown_si = e.shown_us = written;
    e.guess = guess;
    list_.push_back({place, std::move(e)});
  }

  /// Rotor inertia in all three forms, whichever was written: they differ by a factor four or by the unit.
  void tell_inertia(const Quantity& q) {
    for (Placed& p : list_) {
      if (p.echo.path != q.path) continue;
      const auto in = [](double value, base::UnitFamily family) {
        return base::shown(value, base::Dimension::inertia, family);
      };
      p.echo.shown_si =
          fmt::format("GD2 {} = mr2 {}", in(4.0 * q.value, base::UnitFamily::si), in(q.value, base::UnitFamily::si));
      p.echo.shown_us = "WR2 " + p.echo.shown_us;
    }
  }

  std::vector<ValueEcho> take() {
    std::sort(list_.begin(), list_.end(), [](const Placed& a, const Placed& b) {
      return std::tie(a.place, a.echo.path) < std::tie(b.place, b.echo.path);
    });
    std::vector<ValueEcho> echoes;
    echoes.reserve(list_.size());
    for (Placed& p : list_) echoes.push_back(std::move(p.echo));
    return echoes;
  }

 private:
  static std::string words(const Quantity& q, base::UnitFamily family) {
    std::string text = base::shown(q.value, q.dimension, family, q.gauge);
    if (family == base::UnitFamily::si) return text;  // `spread` holds the rest
    const std::string spread = words_of_spread(q, family);
    if (!spread.empty()) text.append(", ").append(spread);
    return text;
  }
  std::vector<Placed> list_;
};

template <class T, class Words>
std::string weights(const Choice<T>& choice, const Words& words) {
  if (choice.options.size() == 1) return words(choice.options.front().choice);
  std::string text;
  for (const auto& option : choice.options)
    text += fmt::format("{}{} (weight {})", text.empty() ? "" : ", ", words(option.choice), option.weight);
  return text;
}

}  // namespace

std::vector<ValueEcho> echo(const Case& c) {
  Echoes echoes;
  for_each_quantity(c, [&](const Quantity& q) { echoes.add(q); });
  for (const Pipe& p : c.pipes) {
    echoes.add(p.wave_speed_change);
    if (!p.restraint_factor.given() && !p.wave_speed.given() && p.wall.given())
      echoes.add_choice(p.place, "pipe/" + p.name + "/joint", p.name + " joint", words_of(p.joint), !p.joint_given);
  }
  for (const Basin& b : c.basins)
    for (const auto& [time, level] : b.level_table.rows) {
      echoes.add(time);
      echoes.add(level);
    }
  for (const Pump& p : c.pumps)
    if (p.inertia.given()) echoes.tell_inertia(p.inertia);
  for (const Pump& p : c.pumps)
    if (p.check_valve.guess)
      echoes.add_choice(p.place, "pump/" + p.name + "/check_valve", p.name + " check_valve", "ideal", true);
  for (const Valve& v : c.valves)
    echoes.add_choice(v.place, "valve/" + v.name + "/law", v.name + " law", words_of(v.law), false);
  for (const Event& e : c.events)
    if (e.instant)
      echoes.add_choice(e.place,
                        "event/" + (e.name.empty() ? e.subject : e.name) + "/over",
                        (e.name.empty() ? e.subject : e.name) + " over",
                        "instant",
                        false);
  echoes.add_choice(c.friction.law.place,
                    "friction/law",
                    "friction law",
                    weights(c.friction.law, [](FrictionLaw law) { return words_of(law); }),
                    false);
  echoes.add_choice(c.friction.transition.place,
                    "friction/transition",
                    "friction transition",
                    weights(c.friction.transition, [](const Transition& t) { return words_of(t); }),
                    false);
  echoes.add(c.surge.duration);
  echoes.add(c.surge.time_step);
  for (const Limit& l : c.limits) echoes.add(l.bound);
  return echoes.take();
}

}  // namespace headband::casefile
