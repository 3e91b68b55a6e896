// SPDX-License-Identifier: MIT
#include "core/casefile/choice_words.hpp"
#include "core/casefile/read.hpp"

#include <fmt/format.h>

#include <string_view>

namespace headband::casefile {
namespace {

using namespace network;
using base::Dimension;

/// SI unit in the spelling the reader understands with factor 1 and offset 0: the same bits come back.
std::string_view plain_unit(Dimension dimension, bool gauge) {
  switch (dimension) {
    case Dimension::number:
    case Dimension::share:
    case Dimension::factor:
    case Dimension::year:
      return "";
    case Dimension::length:
      return "m";
    case Dimension::area:
      return "m2";
    case Dimension::volume:
      return "m3";
    case Dimension::time:
      return "s";
    case Dimension::velocity:
      return "m/s";
    case Dimension::flow:
    case Dimension::kv:
      return "m3/s";
    case Dimension::pressure:
      return gauge ? "Pa g" : "Pa abs";
    case Dimension::pressure_difference:
    case Dimension::modulus:
      return "Pa";
    case Dimension::compliance:
      return "1/Pa";
    case Dimension::temperature:
      return "K";
    case Dimension::density:
      return "kg/m3";
    case Dimension::kinematic_viscosity:
      return "m2/s";
    case Dimension::dynamic_viscosity:
      return "Pa s";
    case Dimension::acceleration:
      return "m/s2";
    case Dimension::rotational_speed:
      return "rad/s";
    case Dimension::inertia:
      return "kg m2";
    case Dimension::growth_rate:
      return "m/year";
    case Dimension::energy_price:
      return "/J";
    case Dimension::price_per_length:
      return "/m";
    case Dimension::hours_per_year:
      return "h/year";
  }
  return "";
}

std::string quoted(std::string_view text) {
  std::string out = "\"";
  for (const char c : text) {
    if (c == '"' || c == '\\') out += '\\';
    if (c == '\n') {
      out += "\\n";
    } else if (static_cast<unsigned char>(c) < 0x20U || c == 0x7f) {
      out += fmt::format("\\u{:04x}", static_cast<unsigned>(static_cast<unsigned char>(c)));
    } else {
      out += c;
    }
  }
  return out + "\"";
}

/// Writes one case; every quantity is the number of the draw.
class Writer {
 public:
  Writer(const Case& c, const std::vector<double>& scores) : case_(c), scores_(scores) {}

  std::string write(const std::string& note) {
    frame(note);
    liquid();
    places();
    for (const Pipe& p : case_.pipes) pipe(p);
    for (const Valve& v : case_.valves) valve(v);
    for (const Pump& p : case_.pumps) pump(p);
    for (const CheckValve& v : case_.check_valves) check_valve(v);
    protection();
    for (const DrawOff& d : case_.draw_offs) {
      head("[[draw_off]]");
      text("name", d.name);
      text("at", d.at);
      number("flow", d.flow);
      if (d.pressure_dependent) raw("pressure_dependent", "true");
    }
    for (const Event& e : case_.events) event(e);
    friction();
    surge();
    for (const Limit& l : case_.limits) limit(l);
    return std::move(out_);
  }

 private:
  [[nodiscard]] double drawn(const Quantity& q) const {
    if (scores_.empty() || q.unknown < 0) return q.value;
    return base::value<1>(q, base::Lanes<1>(scores_[static_cast<std::size_t>(q.unknown)]))[0];
  }
  [[nodiscard]] std::string written(const Quantity& q) const {
    const std::string_view unit = plain_unit(q.dimension, q.gauge);
    const std::string digits = fmt::format("{}", drawn(q));
    return unit.empty() ? digits : fmt::format("\"{} {}\"", digits, unit);
  }
  void head(std::string_view section) { out_ += fmt::format("\n{}\n", section); }
  void raw(std::string_view key, std::string_view value) { out_ += fmt::format("{} = {}\n", key, value); }
  void text(std::string_view key, const std::string& value) {
    if (!value.empty()) raw(key, quoted(value));
  }
  /// Defaults nobody changed stay unwritten.
  void number(std::string_view key, const Quantity& q) {
    if (!q.given() || (q.source == "default" && q.exact())) return;
    raw(key, written(q));
  }
  [[nodiscard]] std::string rows(const std::vector<std::pair<Quantity, Quantity>>& list) const {
    std::string cells;
    for (const auto& [first, second] : list)
      cells += fmt::format("{}[{}, {}]", cells.empty() ? "" : ", ", written(first), written(second));
    return "[" + cells + "]";
  }
  void table(std::string_view key, const std::vector<std::pair<Quantity, Quantity>>& list) {
    if (!list.empty()) raw(key, rows(list));
  }
  /// `{ a = …, b = … }` of the quantities that are given.
  [[nodiscard]] std::string inner(std::initializer_list<std::pair<std::string_view, const Quantity*>> list) const {
    std::string cells;
    for (const auto& [key, q] : list)
      if (q->given()) cells += fmt::format("{}{} = {}", cells.empty() ? "" : ", ", key, written(*q));
    return "{ " + cells + " }";
  }
  [[nodiscard]] double drawn_length(const Pipe& p) const {
    return p.length.given() || p.profile.empty() ? drawn(p.length) : drawn(p.profile.back().first);
  }
  /// As the user wrote it; a chainage beyond the end of a pipe drawn shorter is that end, as in the draw.
  [[nodiscard]] std::string spot(const Spot& s) const {
    for (const Pipe& p : case_.pipes)
      if (s.chainage && p.name == s.element && *s.chainage > drawn_length(p))
        return quoted(fmt::format("{} @ {} m", s.element, drawn_length(p)));
    return quoted(s.written);
  }
  [[nodiscard]] std::string cells_of(const std::vector<Spot>& list) const {
    std::string cells;
    for (const Spot& s : list) cells += fmt::format("{}{}", cells.empty() ? "" : ", ", spot(s));
    return cells;
  }
  [[nodiscard]] std::string spots(const std::vector<Spot>& list) const {
    return list.size() == 1 ? cells_of(list) : fmt::format("[{}]", cells_of(list));
  }

  void frame(const std::string& note) {
    out_ += "# Written by headband: every value is the number of one draw, in SI.\n";
    head("[about]");
    text("title", case_.about.title);
    text("note", case_.about.note.empty() || note.empty() ? case_.about.note + note : case_.about.note + "; " + note);
    head("[show]");
    raw("units", case_.show.units == base::UnitFamily::us ? "\"us\"" : "\"si\"");
    if (!case_.show.places.empty()) raw("places", fmt::format("[{}]", cells_of(case_.show.places)));
    head("[site]");
    raw("atmosphere", written(case_.site.atmosphere));
    raw("gravity", written(case_.site.gravity));
  }

  void liquid() {
    const Liquid& l = case_.liquid;
    head("[liquid]");
    text("name", l.name);
    number("temperature", l.temperature);
    number("density", l.density);
    number("viscosity", l.viscosity);
    table("viscosity_points", l.viscosity_points);
    number("viscosity_scatter", l.viscosity_scatter);
    number("bulk_modulus", l.bulk_modulus);
    number("vapour_pressure", l.vapour_pressure);
    number("free_gas", l.free_gas);
  }

  /// A drawn level shifts the whole table, as in the march of the draw.
  void level_table(const Basin& b) {
    auto rows = b.level_table.rows;
    const double shift = b.level.given() ? drawn(b.level) - b.level.value : 0.0;
    for (auto& [time, level] : rows) level.value += shift;
    table("level_table", rows);
  }

  void places() {
    for (const Basin& b : case_.basins) {
      head("[[basin]]");
      text("name", b.name);
      number("level", b.level);
      level_table(b);
      number("surface_pressure", b.surface_pressure);
    }
    for (const PlaceEntry& p : case_.places) {
      head("[[place]]");
      text("name", p.name);
      number("elevation", p.elevation);
      number("head", p.head);
    }
  }

  void pipe(const Pipe& p) {
    head("[[pipe]]");
    text("name", p.name);
    text("from", p.from);
    text("to", p.to);
    number("length", p.length);
    table("profile", p.profile);
    number("outside", p.outside);
    number("wall", p.wall);
    if (p.lining_thickness.given())
      raw("lining", inner({{"thickness", &p.lining_thickness}, {"modulus", &p.lining_modulus}}));
    number("bore", p.bore);
    text("material", p.material);
    number("modulus", p.modulus);
    number("poisson", p.poisson);
    if (p.joint_given) text("joint", words_of(p.joint));
    number("restraint_factor", p.restraint_factor);
    if (p.wall_formula == WallFormula::thin) text("wall_formula", "thin");
    number("wave_speed_change", p.wave_speed_change);
    number("wave_speed", p.wave_speed);
    number("wave_speed_scatter", p.wave_speed_scatter);
    number("roughness", p.roughness);
    number("hazen_williams", p.hazen_williams);
    number("manning", p.manning);
    number("friction_factor", p.friction_factor);
    fittings(p);
    number("rating", p.rating);
    if (case_.friction.scatter_per_pipe) {
      const auto index = static_cast<std::size_t>(&p - case_.pipes.data());
      if (index < case_.friction.pipe_scatter.size())
        raw("friction_scatter", written(case_.friction.pipe_scatter[index]));
    }
    if (p.creep.empty()) return;
    std::string cells;
    for (const CreepElement& e : p.creep)
      cells += (cells.empty() ? "" : ", ") + inner({{"compliance", &e.compliance}, {"time", &e.time}});
    raw("creep", "[" + cells + "]");
  }

  void fittings(const Pipe& p) {
    if (p.fittings.empty()) return;
    std::string cells;
    for (const Fitting& f : p.fittings) {
      Quantity end;  // a fitting beyond the end of a pipe drawn shorter acts in its last reach
      end.value = drawn_length(p);
      end.dimension = Dimension::length;
      const Quantity* at = f.at.given() && drawn(f.at) > end.value ? &end : &f.at;
      const std::string numbers =
          inner({{"count", &f.count}, {"k", &f.k}, {"equivalent_length", &f.equivalent_length}, {"at", at}});
      cells += fmt::format("{}{{ name = {}, {}", cells.empty() ? "" : ", ", quoted(f.name), numbers.substr(2));
    }
    raw("fittings", "[" + cells + "]");
  }

  void valve(const Valve& v) {
    head("[[valve]]");
    text("name", v.name);
    text("from", v.from);
    text("to", v.to);
    number("kv", v.kv);
    number("k", v.k);
    number("bore", v.bore);
    number("area", v.area);
    number("discharge_coefficient", v.discharge_coefficient);
    number("flow", v.flow);
    if (v.law.kind == ValveLawKind::table) {
      std::string cells;
      for (const auto& [travel, share] : v.law.points)
        cells += fmt::format("{}[{}, {}]", cells.empty() ? "" : ", ", travel, share);
      raw("law", "[" + cells + "]");
    } else {
      text("law", words_of(v.law));
    }
    number("near_seat", v.near_seat);
    number("opening", v.opening);
  }

  [[nodiscard]] std::string check_rule(const CheckValveRule& rule) const {
    switch (rule.kind) {
      case CheckValveKind::ideal:
        return "\"ideal\"";
      case CheckValveKind::none:
        return "\"none\"";
      case CheckValveKind::reverse_velocity:
        return inner({{"reverse_velocity", &rule.reverse_velocity}, {"bore", &rule.bore}});
      case CheckValveKind::delay:
        return inner({{"delay", &rule.delay}, {"bore", &rule.bore}});
    }
    return "\"ideal\"";
  }

  void pump(const Pump& p) {
    head("[[pump]]");
    text("name", p.name);
    text("from", p.from);
    text("to", p.to);
    raw("count", fmt::format("{}", p.count));
    table("curve", p.curve.rows);
    number("head_scatter", p.head_scatter);
    number("efficiency", p.efficiency);
    number("speed", p.speed);
    number("inertia_mr2", p.inertia);
    number("shut_off_torque", p.shut_off_torque);
    table("torque", p.torque.rows);
    raw("check_valve", check_rule(p.check_valve));
    if (p.rated_flow.given()) raw("rated", inner({{"flow", &p.rated_flow}, {"head", &p.rated_head}}));
    if (p.characteristic == Characteristic::none) text("characteristic", "none");
    if (p.characteristic != Characteristic::table) return;
    std::string cells;
    for (std::size_t i = 0; i < p.suter.rows.size() && i < p.suter_torque.size(); ++i)
      cells += fmt::format("{}[{}, {}, {}]",
                           cells.empty() ? "" : ", ",
                           p.suter.rows[i].first.value,
                           p.suter.rows[i].second.value,
                           p.suter_torque[i]);
    raw("characteristic", "[" + cells + "]");
  }

  void check_valve(const CheckValve& v) {
    head("[[check_valve]]");
    text("name", v.name);
    text("from", v.from);
    text("to", v.to);
    number("kv", v.kv);
    number("k", v.k);
    number("bore", v.bore);
    number("reverse_velocity", v.rule.reverse_velocity);
    number("delay", v.rule.delay);
  }

  void protection() {
    for (const AirVessel& v : case_.air_vessels) {
      head("[[air_vessel]]");
      text("name", v.name);
      text("at", v.at);
      number("gas_volume", v.gas_volume);
      number("precharge", v.precharge);
      number("shell_volume", v.shell_volume);
      number("area", v.area);
      number("exponent", v.exponent);
      number("water_level", v.water_level);
      number("throttle_in", v.throttle_in);
      number("throttle_out", v.throttle_out);
      number("connection_bore", v.connection_bore);
    }
    for (const SurgeTank& t : case_.surge_tanks) {
      head("[[surge_tank]]");
      text("name", t.name);
      text("at", t.at);
      number("area", t.area);
      if (t.throttle_bore.given() || t.throttle_k.given())
        raw("throttle", inner({{"bore", &t.throttle_bore}, {"k", &t.throttle_k}}));
      number("overflow_level", t.overflow_level);
      number("level", t.level);
      if (t.one_way) raw("one_way", "true");
    }
    for (const Relief& r : case_.reliefs) {
      head("[[relief]]");
      text("name", r.name);
      text("at", r.at);
      text("to", r.to);
      number("set_pressure", r.set_pressure);
      number("full_open_over", r.full_open_over);
      number("kv", r.kv);
      number("area", r.area);
      number("discharge_coefficient", r.discharge_coefficient);
      number("reset", r.reset);
      number("back_pressure", r.back_pressure);
      number("lag", r.lag);
    }
    for (const AirValve& v : case_.air_valves) {
      head("[[air_valve]]");
      text("name", v.name);
      text("at", v.at);
      number("in_bore", v.in_bore);
      number("out_bore", v.out_bore);
      number("discharge_coefficient", v.discharge_coefficient);
    }
  }

  void event(const Event& e) {
    head("[[event]]");
    text("name", e.name);
    number("at", e.at);
    if (e.when) text("when", e.when->written);
    number("delay", e.delay);
    switch (e.kind) {
      case EventKind::move_valve:
      case EventKind::swing_valve:
        text("valve", e.subject);
        break;
      case EventKind::trip_pump:
        text("trip", e.subject);
        break;
      case EventKind::start_pump:
        text("start", e.subject);
        break;
      case EventKind::move_draw_off:
        text("draw_off", e.subject);
        break;
      case EventKind::move_basin:
        text("basin", e.subject);
        break;
    }
    number("to", e.to);
    if (e.instant) text("over", "instant");
    number("over", e.over);
    if (e.travel.given()) {
      std::string cells;
      for (const auto& [time, opening] : e.travel.rows)
        cells += fmt::format("{}[{}, {}]", cells.empty() ? "" : ", ", written(time), written(opening));
      raw("travel", "[" + cells + "]");
    }
    number("swing", e.swing);
    number("period", e.period);
    if (e.tripping > 0) raw("tripping", fmt::format("{}", e.tripping));
  }

  void friction() {
    const Friction& f = case_.friction;
    const auto settled = [&](const auto& choice) {
      return scores_.empty() || choice.unknown < 0 ? choice.central()
                                                   : choice.at(scores_[static_cast<std::size_t>(choice.unknown)]);
    };
    head("[friction]");
    text("law", words_of(settled(f.law)));
    text("transition", words_of(settled(f.transition)));
    if (!f.scatter_per_pipe) raw("scatter", written(f.scatter));
    if (f.scatter_per_pipe) text("scatter", "none");
    number("laminar_scatter", f.laminar_scatter);
    number("fixed_factor", f.fixed_factor);
  }

  void surge() {
    const SurgeRequest& s = case_.surge;
    if (!s.given) return;
    head("[surge]");
    number("duration", s.duration);
    number("time_step", s.time_step);
    if (!s.time_step.given()) raw("reaches", fmt::format("{}", s.reaches));
    static constexpr std::string_view cavities[] = {"vapour", "gas", "both", "off"};
    static constexpr std::string_view in_time[] = {"reynolds", "fixed", "linear"};
    text("cavities", std::string(cavities[static_cast<int>(s.cavities)]));
    text("friction_in_time", std::string(in_time[static_cast<int>(s.friction_in_time)]));
    if (s.unsteady_friction) text("unsteady_friction", "on");
    if (!s.unsteady_each_step) text("unsteady_weighting", "first flow");
    raw("grid_check", s.grid_check ? "true" : "false");
  }

  void limit(const Limit& l) {
    if (!l.rule.empty()) return;  // a rule's numbers are its own; the plain case keeps the plain limits
    head("[[limit]]");
    text("name", l.name);
    const std::string kind = words_of(l.subject.kind);
    if (l.subject.kind == AnswerKind::pressure_drop || l.subject.kind == AnswerKind::flow ||
        l.subject.kind == AnswerKind::head) {
      raw(kind, spots(l.subject.where));
      number(l.not_over ? "not_over" : "not_under", l.bound);
    } else {
      number(kind, l.bound);
      if (!l.subject.where.empty()) raw("where", spots(l.subject.where));
    }
  }

  const Case& case_;
  const std::vector<double>& scores_;
  std::string out_;
};

}  // namespace

std::string write_case(const Case& c, const std::vector<double>& scores, const std::string& note) {
  return Writer(c, scores).write(note);
}

}  // namespace headband::casefile
