// SPDX-License-Identifier: MIT
#include "core/casefile/grades.hpp"

#include "core/base/grades.hpp"
#include "core/casefile/quantity_text.hpp"

#include <fmt/format.h>

#include <algorithm>

namespace headband::casefile {

void apply_default_spread(base::Quantity& quantity, const KeyRule& rule) {
  const std::string_view key = rule.key.substr(rule.key.rfind(' ') + 1);
  const auto spread = base::default_spread(key, quantity.grade);
  if (!spread) return;
  const bool bare = rule.form == Form::scatter;  // "none" or a factor: the spread stands alone about it
  const std::string number = bare ? fmt::format("{}", quantity.value) : quantity.written;
  const ParsedQuantity parsed = parse_quantity(fmt::format("{} {}", number, spread->written()), rule);
  if (parsed.problem) return;
  const base::Cut stated = quantity.cut;
  quantity.spread = parsed.quantity.spread;
  quantity.cut = parsed.quantity.cut;
  quantity.cut.low = std::max(quantity.cut.low, stated.low);
  quantity.cut.high = std::min(quantity.cut.high, stated.high);
  quantity.written = fmt::format("{} {}", quantity.written, spread->written());
  quantity.source += fmt::format("{}default for grade {}", quantity.source.empty() ? "" : "; ", quantity.grade);
}

}  // namespace headband::casefile
