// SPDX-License-Identifier: MIT
#include "core/casefile/quantity_text.hpp"

#include "core/base/units.hpp"
#include "core/casefile/unit_hints.hpp"

#include <fmt/format.h>
#include <boost/math/special_functions/erf.hpp>

#include <array>
#include <charconv>
#include <cmath>
#include <numbers>
#include <utility>

namespace headband::casefile {
namespace {

using base::Dimension;
using base::Quantity;
using base::Unit;

/// Standard normal quantile of 97.5 %: half the width of the central 95 % in standard deviations.
constexpr double z_of_95_percent = 1.959963984540054;

/// Thrown and caught inside this file only: the grammar is a short recursive descent.
struct Stop {
  TextProblem problem;
};

int code_points(std::string_view text) {
  int count = 0;
  for (const char c : text)
    if ((static_cast<unsigned char>(c) & 0xC0U) != 0x80U) ++count;
  return count;
}

bool is_digit(char c) { return c >= '0' && c <= '9'; }

/// A number with the unit that followed it; `percent` where that unit was "%".
struct Amount {
  double number = 0.0;
  std::optional<base::FoundUnit> unit;
  bool percent = false;
  std::size_t at = 0;  ///< where it begins in the text
};

class Grammar {
 public:
  Grammar(std::string_view text, const KeyRule& rule) : text_(text), rule_(rule) {}

  Quantity read() {
    quantity_.dimension = rule_.dimension;
    quantity_.written = std::string(text_);
    skip_spaces();
    if (done()) fail("the value is empty", quoted_form(), fmt::format("write a value such as \"{}\"", right_form()));
    if (rule_.form == Form::scatter && text_.substr(at_) == "none") {
      quantity_.value = 1.0;
      return std::move(quantity_);
    }
    if (take_word("as ")) return read_shared();
    central_at_ = at_;
    if (rule_.form == Form::scatter && !number_ahead()) {
      quantity_.value = 1.0;
    } else {
      for (const std::string_view word : {"±", "+/-", "x/", "between", "likely"})
        if (text_.substr(at_).starts_with(word))
          fail("the value before the spread is missing",
               right_form_with_spread(),
               "write the value a single run uses, then its spread");
      central_ = amount();
      if (take_word("..")) return read_range(central_);
      quantity_.value = central_value(central_);
    }
    read_spread();
    skip_spaces();
    if (!done())
      fail(fmt::format("'{}' is not understood here", text_.substr(at_)),
           right_form_with_spread(),
           "write the spread as one of the forms shown");
    finish();
    return std::move(quantity_);
  }

 private:
  [[noreturn]] void fail_at(std::size_t at, std::string what, std::string bound, std::string hint) const {
    throw Stop{{code_points(text_.substr(0, at)), std::move(what), std::move(bound), std::move(hint)}};
  }
  [[noreturn]] void fail(std::string what, std::string bound, std::string hint) const {
    fail_at(at_, std::move(what), std::move(bound), std::move(hint));
  }
  [[nodiscard]] bool done() const { return at_ >= text_.size(); }
  void skip_spaces() {
    while (!done() && (text_[at_] == ' ' || text_[at_] == '\t')) ++at_;
  }
  bool take_word(std::string_view word) {
    skip_spaces();
    if (text_.substr(at_).starts_with(word)) {
      at_ += word.size();
      skip_spaces();
      return true;
    }
    return false;
  }
  [[nodiscard]] bool number_ahead() const {
    const char c = text_[at_];
    return is_digit(c) || c == '.' ||
           ((c == '-' || c == '+') && at_ + 1 < text_.size() && (is_digit(text_[at_ + 1]) || text_[at_ + 1] == '.'));
  }
  [[nodiscard]] std::string right_form() const {
    return std::string(rule_.example.empty() ? base::example_of(rule_.dimension) : rule_.example);
  }
  [[nodiscard]] std::string quoted_form() const { return fmt::format("\"{}\"", right_form()); }
  [[nodiscard]] std::string right_form_with_spread() const {
    if (rule_.spread == SpreadUse::refused) return fmt::format("\"{}\"", right_form());
    if (rule_.form == Form::scatter) return "\"± 10 %\", \"x/ 1.1\", \"between -10 % and 10 %\" or \"none\"";
    return fmt::format("\"{0}\", \"{0} ± 5 %\", \"{0} x/ 2\", \"{0} between A and B\" or \"A .. B, not random\"",
                       right_form());
  }

  double number() {
    skip_spaces();
    const std::size_t begin = at_;
    std::size_t from = at_;
    if (!done() && text_[from] == '+') ++from;
    double value = 0.0;
    const char* end = text_.data() + text_.size();
    const auto [stopped, error] = std::from_chars(text_.data() + from, end, value);
    if (error == std::errc::result_out_of_range)
      fail_at(begin,
              "the number is too large or too small to hold",
              "a number between 1e-300 and 1e300",
              "check the exponent");
    if (error != std::errc() || !std::isfinite(value))
      fail_at(begin,
              fmt::format("a finite number is expected, not '{}'", text_.substr(begin)),
              quoted_form(),
              fmt::format("write a value such as \"{}\"", right_form()));
    at_ = static_cast<std::size_t>(stopped - text_.data());
    if (!done() && text_[at_] == ',' && at_ + 1 < text_.size() && is_digit(text_[at_ + 1]))
      fail(fmt::format("a comma stands inside the number '{}'", text_.substr(begin)),
           "a decimal point, no separator of thousands",
           "write 0.046 or 3200");
    const std::size_t after = at_;
    skip_spaces();
    if (after != at_ && !done() && is_digit(text_[at_]) && !text_.substr(at_).starts_with("1/"))
      fail("two numbers stand side by side", "one number without spaces inside", "write 12000, not 12 000");
    return value;
  }

  /// The words up to the next sign of the grammar.
  std::string_view unit_text() {
    static constexpr std::array<std::string_view, 11> ends{
        "±", "+/-", "+-", " x/", "×/", "between", "likely", "..", ",", "(", " and "};
    const std::string_view rest = text_.substr(at_);
    if (rest.starts_with("and ")) return {};
    std::size_t length = rest.size();
    for (const std::string_view end : ends) length = std::min(length, rest.find(end));
    std::string_view unit = rest.substr(0, length);
    while (unit.ends_with(' ') || unit.ends_with('\t')) unit.remove_suffix(1);
    return unit;
  }

  Amount amount() {
    Amount a;
    skip_spaces();
    a.at = at_;
    a.number = number();
    skip_spaces();
    const std::size_t unit_at = at_;
    const std::string_view name = unit_text();
    if (name.empty()) return a;
    a.unit = base::find_unit(name);
    if (!a.unit) {
      const UnitHint hint = hint_for_unit(name, rule_.dimension);
      fail_at(unit_at, hint.what, quoted_form(), hint.hint);
    }
    a.percent = a.unit->unit.kind == base::UnitKind::share;
    at_ = unit_at + name.size();
    skip_spaces();
    unit_at_ = unit_at;
    return a;
  }

  [[nodiscard]] bool takes_percent() const {
    return rule_.dimension == Dimension::share || rule_.dimension == Dimension::factor;
  }

  /// The unit of a full value: of the right kind, with g or abs where a pressure needs it.
  void check_unit(const Amount& a) {
    const std::size_t at = a.unit ? unit_at_ : a.at;
    const auto kind = base::kind_of(rule_.dimension);
    if (!a.unit) {
      if (!kind || takes_percent()) return;
      fail_at(at,
              fmt::format("the unit is missing: {} needs one", base::words_of(*kind)),
              quoted_form(),
              missing_unit_hint(a.number, rule_));
    }
    const Unit& unit = a.unit->unit;
    if (!kind) {
      if (rule_.dimension == Dimension::factor && a.percent) return;
      fail_at(at,
              fmt::format("'{}' is {}, a number without a unit is needed", unit.name, base::words_of(unit.kind)),
              quoted_form(),
              "write the number alone");
    }
    if (rule_.form == Form::viscosity &&
        (unit.kind == base::UnitKind::kinematic_viscosity || unit.kind == base::UnitKind::dynamic_viscosity)) {
      quantity_.dimension = unit.kind == base::UnitKind::kinematic_viscosity ? Dimension::kinematic_viscosity
                                                                             : Dimension::dynamic_viscosity;
      return;
    }
    if (unit.kind != *kind) {
      const UnitHint hint = hint_for_kind(unit, rule_);
      fail_at(at, hint.what, quoted_form(), hint.hint);
    }
    if (const auto hint = hint_for_coefficient(unit, rule_)) fail_at(at, hint->what, quoted_form(), hint->hint);
    check_reference(*a.unit, at);
  }

  void check_reference(const base::FoundUnit& found, std::size_t at) {
    const bool counted = found.reference != base::PressureReference::unnamed;
    if (rule_.dimension == Dimension::pressure) {
      if (!counted)
        fail_at(at,
                "gauge or absolute is not named",
                fmt::format("\"{0} g\" (above the atmosphere) or \"{0} abs\" (above vacuum)", found.unit.name),
                "is this counted from the atmosphere (g) or from vacuum (abs)? Write it after the unit");
    } else if (counted && found.unit.kind == base::UnitKind::pressure) {
      fail_at(at,
              fmt::format("{} has no gauge or absolute",
                          rule_.dimension == Dimension::modulus ? "a modulus" : "a difference of pressures"),
              quoted_form(),
              "leave out g or abs");
    }
  }

  double central_value(const Amount& a) {
    check_unit(a);
    if (rule_.form == Form::scatter) {
      if (a.percent)
        fail_at(a.at,
                "a scatter is a factor about 1; a bare percentage could mean a shift or a spread",
                "\"± 10 %\", or a factor such as 1.05",
                "write \"± N %\" for a spread, or the factor as a number");
      return a.number;
    }
    if (!a.unit) return a.number;
    quantity_.gauge = a.unit->reference == base::PressureReference::gauge;
    return base::to_si(a.unit->unit, a.number);
  }

  Quantity read_shared() {
    quantity_.same_as = std::string(text_.substr(at_));
    while (quantity_.same_as.ends_with(' ')) quantity_.same_as.pop_back();
    if (quantity_.same_as.empty())
      fail("the name after 'as' is missing",
           "\"as upper main wall\"",
           "name the element and the key it shares the value with");
    refuse_spread(0);
    return std::move(quantity_);
  }

  void refuse_spread(std::size_t at) const {
    if (rule_.spread == SpreadUse::refused)
      fail_at(at, "a spread is not taken here", quoted_form(), std::string(rule_.instead));
  }

  void read_spread() {
    skip_spaces();
    if (done()) return;
    if (text_.substr(at_).starts_with("(")) return;
    const std::size_t begin = at_;
    if (take_word("±") || take_word("+/-") || take_word("+-")) return read_plus_minus(begin);
    if (take_word("x/") || take_word("×/")) return read_factor(begin);
    bool likely = false;
    if (take_word("likely")) {
      likely = true;
      (void)take_word(",");
      if (!text_.substr(at_).starts_with("between"))
        fail("'likely' is not followed by its bounds",
             fmt::format("\"{} likely, between A and B\"", right_form()),
             "name the least and the most");
    }
    if (take_word("between")) return read_between(begin, likely);
    if (take_word(",") && text_.substr(at_).starts_with("not random"))
      fail_at(begin,
              "'not random' belongs to a range",
              "\"A .. B, not random\"",
              "write the least and the most with two points between");
  }

  /// Half-width in standard deviations of the stated coverage; 95 % when none is stated.
  double coverage() {
    if (!take_word("(")) return z_of_95_percent;
    const std::size_t begin = at_;
    const double share = number();
    if (take_word("sigma")) {
      if (!(share > 0.0))
        fail_at(begin,
                "the number of standard deviations must be above 0",
                "\"(1 sigma)\"",
                "write \"(1 sigma)\" or \"(68 %)\"");
      if (!take_word(")")) fail("the bracket is not closed", "\"(1 sigma)\"", "add ')'");
      return share;
    }
    if (!take_word("%") || !take_word(")"))
      fail("the coverage is not understood",
           "\"(68 %)\"",
           "write the share of the cases inside ± in brackets, as in \"± 3 K (68 %)\"");
    if (!(share > 0.0 && share < 100.0))
      fail_at(begin,
              fmt::format("a coverage of {} % is not possible", share),
              "above 0 % and under 100 %",
              "for hard limits write \"between A and B\"");
    if (share == 95.0) return z_of_95_percent;
    return std::numbers::sqrt2 * boost::math::erf_inv(share / 100.0);
  }

  void read_plus_minus(std::size_t begin) {
    refuse_spread(begin);
    const Amount half = amount();
    const double width = half_width(half);
    if (!(width >= 0.0))
      fail_at(half.at, "the half-width after ± is negative", "a width above 0", "leave out the sign");
    const double z = coverage();
    if (width > 0.0) quantity_.spread = base::Normal{width / z};
  }

  double half_width(const Amount& half) {
    if (half.percent && rule_.dimension == Dimension::share) {
      // Points of per cent, unless that is senseless: "0.01 % ± 50 %" cannot be read without asking.
      if (quantity_.value != 0.0 && half.number / 100.0 > std::abs(quantity_.value))
        fail_at(
            half.at,
            fmt::format("'± {} %' of a share is unclear: points of per cent, or a share of the value?", half.number),
            "\"A % between B % and C %\" or \"A % x/ 2\"",
            "write the bounds themselves");
      return half.number / 100.0;
    }
    if (half.percent) {
      if (rule_.form == Form::scatter) return half.number / 100.0 * quantity_.value;
      if (rule_.dimension == Dimension::temperature)
        fail_at(
            half.at, "a percentage of a temperature has no meaning", "\"15 degC ± 3 K\"", "state the half-width in K");
      if (quantity_.value == 0.0)
        fail_at(half.at,
                "a percentage of zero is no spread",
                fmt::format("\"± 1 {}\"", unit_name()),
                "state the half-width with its unit");
      return half.number / 100.0 * std::abs(quantity_.value);
    }
    if (!half.unit) {
      if (!base::kind_of(rule_.dimension) || (rule_.dimension == Dimension::share && !central_.unit))
        return half.number;
      fail_at(half.at,
              "the unit after ± is missing",
              fmt::format("\"± {0} {1}\" or \"± {0} %\"", half.number, unit_name()),
              "write the unit or %");
    }
    const auto kind = base::kind_of(quantity_.dimension);
    if (!kind || half.unit->unit.kind != *kind)
      fail_at(half.at,
              fmt::format("'{}' after ± is {}, not the kind of the value",
                          half.unit->unit.name,
                          base::words_of(half.unit->unit.kind)),
              fmt::format("\"± N {}\" or \"± N %\"", unit_name()),
              "use % or a unit of the same kind");
    return base::to_si(half.unit->unit, half.number, true);
  }

  [[nodiscard]] std::string unit_name() const {
    return central_.unit ? std::string(central_.unit->unit.name) : std::string("%");
  }

  void read_factor(std::size_t begin) {
    refuse_spread(begin);
    const std::size_t number_at = at_;
    const double factor = number();
    if (!(factor > 1.0))
      fail_at(number_at,
              fmt::format("a factor of {} after x/ is no spread", factor),
              "a factor above 1",
              "\"x/ 2\": 95 % of the cases lie between half and twice the value");
    if (!(quantity_.value > 0.0))
      fail_at(begin,
              "x/ needs a value above 0",
              "a value above 0",
              "use ± or bounds for values that may be zero or negative");
    quantity_.spread = base::LogNormal{std::log(factor) / coverage()};
  }

  double bound(const Amount& a, const std::optional<base::FoundUnit>& unit) {
    if (a.percent && !unit_is_percent()) {
      if (rule_.form == Form::scatter) return 1.0 + a.number / 100.0;
      if (rule_.dimension == Dimension::temperature || quantity_.value == 0.0)
        fail_at(a.at, "a percentage of this value has no meaning", quoted_form(), "state the bounds with their unit");
      return quantity_.value + a.number / 100.0 * std::abs(quantity_.value);
    }
    Amount whole = a;
    if (!whole.unit) whole.unit = unit;
    if (rule_.form == Form::scatter || !whole.unit) {
      if (rule_.form != Form::scatter) check_unit(whole);
      return whole.number;
    }
    if (rule_.dimension == Dimension::pressure && whole.unit->reference == base::PressureReference::unnamed && unit) {
      whole.unit->reference = unit->reference;
      if (whole.unit->reference == base::PressureReference::unnamed && central_.unit)
        whole.unit->reference = central_.unit->reference;
    }
    check_unit(whole);
    if (rule_.dimension == Dimension::pressure && central_.unit &&
        central_.unit->reference != base::PressureReference::unnamed &&
        whole.unit->reference != central_.unit->reference)
      fail_at(a.at, "gauge and absolute are mixed in one value", "one of the two throughout", "write g or abs alike");
    quantity_.gauge = whole.unit->reference == base::PressureReference::gauge;
    return base::to_si(whole.unit->unit, whole.number);
  }
  [[nodiscard]] bool unit_is_percent() const { return rule_.dimension == Dimension::share; }

  void read_between(std::size_t begin, bool likely) {
    refuse_spread(begin);
    const Amount first = amount();
    if (!take_word("and"))
      fail("the second bound is missing", "\"between A and B\"", "write the least, 'and', the most");
    const Amount second = amount();
    const auto& fallback = second.unit ? second.unit : central_.unit;
    const double low = bound(first, fallback);
    const double high = bound(second, central_.unit ? central_.unit : first.unit);
    check_bounds(first, second, low, high);
    if (!(low <= quantity_.value && quantity_.value <= high))
      fail_at(central_at_,
              "the value lies outside its own bounds",
              "a value between its bounds",
              "correct the value or the bounds");
    if (likely)
      quantity_.spread = base::Triangle{low, high};
    else
      quantity_.spread = base::Even{low, high};
  }

  void check_bounds(const Amount& first, const Amount& second, double low, double high) {
    if (!(low < high))
      fail_at(second.at,
              "the second bound is not above the first",
              "\"between A and B\" with A < B",
              "write the least first");
    if (const auto p = outside_limits(low, rule_)) fail_at(first.at, p->what, p->bound, p->hint);
    if (const auto p = outside_limits(high, rule_)) fail_at(second.at, p->what, p->bound, p->hint);
  }

  Quantity read_range(const Amount& first) {
    refuse_spread(first.at);
    quantity_.value = rule_.form == Form::scatter ? 1.0 : 0.0;
    const Amount second = amount();
    const double low = bound(first, second.unit);
    const double high = bound(second, second.unit ? second.unit : first.unit);
    if (rule_.form != Form::scatter && first.percent != second.percent && second.percent && !unit_is_percent())
      fail_at(second.at, "a range has its bounds in one unit", quoted_form(), "write both bounds with their unit");
    check_bounds(first, second, low, high);
    if (!take_word(",")) missing_not_random();
    if (!take_word("not random")) missing_not_random();
    skip_spaces();
    if (!done())
      fail(fmt::format("'{}' is not understood here", text_.substr(at_)), "\"A .. B, not random\"", "leave it out");
    quantity_.spread = base::NotRandom{low, high};
    quantity_.value = low + 0.5 * (high - low);
    return std::move(quantity_);
  }
  [[noreturn]] void missing_not_random() const {
    fail("a range must say whether it is chance",
         "\"A .. B, not random\" or \"V between A and B\"",
         "add ', not random' for lack of knowledge, or use 'between' for an even chance");
  }

  void finish() {
    if (const auto p = outside_limits(quantity_.value, rule_)) fail_at(central_at_, p->what, p->bound, p->hint);
    // Tails are cut at the physical limits. Scores lie inside 1e-16 .. 1 - 1e-16, that is 8.3 standard deviations: a
    // limit farther out cuts nothing and stays out of the arithmetic.
    constexpr double reach = 8.5;
    if (const auto* normal = std::get_if<base::Normal>(&quantity_.spread)) {
      if (rule_.low > quantity_.value - reach * normal->standard_deviation) quantity_.cut.low = rule_.low;
      if (rule_.high < quantity_.value + reach * normal->standard_deviation) quantity_.cut.high = rule_.high;
    } else if (const auto* lognormal = std::get_if<base::LogNormal>(&quantity_.spread)) {
      if (rule_.low > 0.0) quantity_.cut.low = rule_.low;
      if (rule_.high < quantity_.value * std::exp(reach * lognormal->log_standard_deviation))
        quantity_.cut.high = rule_.high;
    }
  }

  std::string_view text_;
  const KeyRule& rule_;
  std::size_t at_ = 0, central_at_ = 0, unit_at_ = 0;
  Amount central_;
  Quantity quantity_;
};

}  // namespace

std::optional<TextProblem> outside_limits(double value, const KeyRule& rule) {
  const auto in_words = [&](double limit) {
    return rule.form == Form::kv || rule.form == Form::cv
               ? base::significant(limit)
               : base::shown(limit, rule.dimension, base::UnitFamily::si, false);
  };
  const bool too_low = rule.low_open ? !(value > rule.low) : !(value >= rule.low);
  if (too_low)
    return TextProblem{0,
                       "the value is too small",
                       fmt::format("{} {}", rule.low_open ? "above" : "at least", in_words(rule.low)),
                       "check the sign and the unit"};
  if (!(value <= rule.high)) {
    return TextProblem{0, "the value is too large", "at most " + in_words(rule.high), "check the unit"};
  }
  return std::nullopt;
}

ParsedQuantity parse_quantity(std::string_view text, const KeyRule& rule) {
  ParsedQuantity parsed;
  try {
    parsed.quantity = Grammar(text, rule).read();
  } catch (Stop& stop) {
    parsed.quantity = Quantity{};
    parsed.problem = std::move(stop.problem);
  }
  return parsed;
}

ParsedQuantity parse_number(double number, const std::string& written, const KeyRule& rule) {
  ParsedQuantity parsed;
  const auto kind = base::kind_of(rule.dimension);
  if (!std::isfinite(number)) {
    parsed.problem = TextProblem{0, "the number is not finite", "a finite number", "write the number itself"};
  } else if (kind && rule.dimension != Dimension::share) {
    const std::string form(rule.example.empty() ? base::example_of(rule.dimension) : rule.example);
    parsed.problem =
        TextProblem{0,
                    fmt::format("a bare number where a unit belongs: {} needs one",
                                rule.dimension == Dimension::kv ? "a flow coefficient" : base::words_of(*kind)),
                    fmt::format("\"{}\"", form),
                    missing_unit_hint(number, rule)};
  } else {
    parsed.problem = outside_limits(number, rule);
    if (parsed.problem && number > rule.high && rule.dimension == Dimension::share)
      parsed.problem->hint = fmt::format("for a percentage write \"{} %\"", number);
    parsed.quantity.value = number;
    parsed.quantity.dimension = rule.dimension;
    parsed.quantity.written = written;
  }
  return parsed;
}

}  // namespace headband::casefile
