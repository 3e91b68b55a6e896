#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/case.hpp"

#include <fmt/format.h>

#include <string>
#include <utility>

namespace headband::network::detail {

/// Collects problems of a case and words their values.
class ProblemList {
 public:
  /// @param path element and key
  void add(
      SourcePlace place, std::string path, std::string what, std::string value, std::string bound, std::string hint) {
    problems_.push_back({place, std::move(path), std::move(what), std::move(value), std::move(bound), std::move(hint)});
  }
  /// The same about a number of an element: its own place and path where it has them.
  void add(const Quantity& q,
           SourcePlace element,
           const std::string& path,
           std::string what,
           std::string bound,
           std::string hint) {
    add(q.place.line > 0 ? q.place : element,
        q.path.empty() ? path : q.path,
        std::move(what),
        shown(q),
        std::move(bound),
        std::move(hint));
  }
  void missing(SourcePlace element, const std::string& path, std::string what, std::string form, std::string hint) {
    add(element, path, std::move(what), "", std::move(form), std::move(hint));
  }
  [[nodiscard]] static std::string shown(const Quantity& q) {
    if (!q.written.empty() || !q.given()) return q.written;
    return fmt::format("{:.6g}", q.value);
  }
  [[nodiscard]] base::Problems take() { return std::move(problems_); }

 private:
  base::Problems problems_;
};

void check_names_and_places(const Case& c, ProblemList& problems);
void check_parts_and_elevations(const Case& c, ProblemList& problems);
void check_pipes(const Case& c, ProblemList& problems);
void check_devices(const Case& c, ProblemList& problems);
void check_liquid(const Case& c, ProblemList& problems);
void check_events(const Case& c, ProblemList& problems);
void check_question(const Case& c, ProblemList& problems);

}  // namespace headband::network::detail
