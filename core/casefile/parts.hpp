#pragma once
// SPDX-License-Identifier: MIT
//
// The parts of a case file, each read from the root table into the case.

#include "core/casefile/section.hpp"

namespace headband::casefile {

using network::Case;

/// The root table of the file: hands out sections and remembers which were asked for.
class Root {
 public:
  Root(Context& context, const toml::table& table) : context_(context), table_(table) {}
  /// `[name]`; null when left out, a problem when it is something else.
  [[nodiscard]] const toml::table* section(std::string_view name);
  /// `[[name]]`, in file order.
  [[nodiscard]] std::vector<const toml::table*> list(std::string_view name);
  [[nodiscard]] Context& context() { return context_; }
  [[nodiscard]] SourcePlace place(std::string_view name) const;
  void finish();

 private:
  Context& context_;
  const toml::table& table_;
  std::set<std::string, std::less<>> asked_;
};

/// The name of an element, checked for its characters; "KIND n" with a problem when it is missing.
[[nodiscard]] std::string element_name(Context& context,
                                       const toml::table& table,
                                       std::string_view kind,
                                       std::size_t index);

/// All of a spread times a factor above 0 (cv to kv, GD2 to I).
void scale(Quantity& quantity, double factor);

/// Kv by `kv` or `cv`, held as the flow in m3/s at 1 bar; both at once is a problem.
[[nodiscard]] Quantity read_flow_coefficient(Section& section);

/// A place, a pipe or "PIPE @ CHAINAGE"; `on_pipe` is settled once all pipes are known.
[[nodiscard]] network::Spot read_spot(Context& context, const toml::node& node, const std::string& path);

void read_frame(Root& root, Case& c);  // about, show, site
void read_liquid(Root& root, Case& c);
void read_places(Root& root, Case& c);  // basins, places
void read_pipes(Root& root, Case& c);
void read_valves(Root& root, Case& c);
void read_pumps(Root& root, Case& c);       // pumps, check valves
void read_protection(Root& root, Case& c);  // vessels, tanks, reliefs, air valves
void read_draw_offs(Root& root, Case& c);
void read_events(Root& root, Case& c);
void read_friction(Root& root, Case& c);  // friction, together
void read_surge(Root& root, Case& c);
void read_band(Root& root, Case& c);
void read_limits(Root& root, Case& c);
void read_other_verbs(Root& root, Case& c);

/// Everything that needs the whole case: names, spots, guesses.
void settle(Context& context, Case& c);

}  // namespace headband::casefile
