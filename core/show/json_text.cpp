// SPDX-License-Identifier: MIT
#include "core/show/json_text.hpp"

#include <nlohmann/json.hpp>

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <cstddef>

namespace headband::show {

namespace {

using Json = nlohmann::ordered_json;

/// Quoted and escaped by the library, so that no escaping rule lives here.
std::string quoted(const std::string& text) { return Json(text).dump(-1, ' ', false, Json::error_handler_t::replace); }

bool all_plain(const Json& array) {
  return std::none_of(array.begin(), array.end(), [](const Json& item) { return item.is_structured(); });
}

void append(std::string& out, const Json& value, std::size_t depth);

void append_array(std::string& out, const Json& array, std::size_t depth) {
  const bool one_line = all_plain(array);
  out += '[';
  bool first = true;
  for (const auto& item : array) {
    if (!first) out += one_line ? ", " : ",";
    first = false;
    if (!one_line) out.append(1, '\n').append(2 * depth + 2, ' ');
    append(out, item, depth + 1);
  }
  if (!one_line) out.append(1, '\n').append(2 * depth, ' ');
  out += ']';
}

void append_object(std::string& out, const Json& object, std::size_t depth) {
  if (object.empty()) {
    out += "{}";
    return;
  }
  out += '{';
  bool first = true;
  for (const auto& [key, item] : object.items()) {
    if (!first) out += ',';
    first = false;
    out.append(1, '\n').append(2 * depth + 2, ' ').append(quoted(key)).append(": ");
    append(out, item, depth + 1);
  }
  out.append(1, '\n').append(2 * depth, ' ').append(1, '}');
}

void append(std::string& out, const Json& value, std::size_t depth) {
  if (value.is_object()) {
    append_object(out, value, depth);
  } else if (value.is_array()) {
    append_array(out, value, depth);
  } else if (value.is_string()) {
    out += quoted(value.get_ref<const std::string&>());
  } else if (value.is_number_float()) {
    out += shortest(value.get<double>());
  } else {
    out += value.dump();  // whole numbers, true, false, null
  }
}

}  // namespace

std::string shortest(double value) {
  if (!std::isfinite(value)) return "null";
  if (value == 0.0) return "0";
  std::array<char, 32> digits{};
  const auto end = std::to_chars(digits.data(), digits.data() + digits.size(), value);
  return {digits.data(), end.ptr};
}

std::string shortest_decimal(double value) {
  std::array<char, 400> digits{};  // the longest double without an exponent has under 350 characters
  const auto end = std::to_chars(digits.data(), digits.data() + digits.size(), value, std::chars_format::fixed);
  return {digits.data(), end.ptr};
}

std::string json_text(const nlohmann::ordered_json& value) {
  std::string out;
  append(out, value, 0);
  out += '\n';
  return out;
}

}  // namespace headband::show
