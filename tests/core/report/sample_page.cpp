// SPDX-License-Identifier: MIT
//
// Writes pages of the invented study into a folder, and beside them what a browser must read back from the first of
// them:
//   sample_page FOLDER

#include "core/report/report.hpp"
#include "tests/support/sample_study.hpp"

#include <nlohmann/json.hpp>

#include <filesystem>
#include <fstream>
#include <iostream>

namespace {

using headband::answers::Study;
using nlohmann::json;

void write(const std::filesystem::path& path, const std::string& text) {
  std::ofstream out(path, std::ios::binary);
  out << text;
  out.close();
  if (!out) throw std::runtime_error("cannot write " + path.string());
}

json number(double value) { return std::isfinite(value) ? json(value) : json(nullptr); }

/// Five rows of a row-major table's column, straight from the study.
json five(const std::vector<double>& x, const std::vector<double>& table, std::size_t columns, std::size_t column) {
  json points = json::array();
  for (int k = 0; k < 5; ++k) {
    const std::size_t row = (x.size() - 1) * static_cast<std::size_t>(k) / 4;
    points.push_back({number(x[row]), number(table[row * columns + column])});
  }
  return points;
}

/// Five sections of one pipe.
json five_stations(const Study& study, std::int32_t pipe, const std::vector<double>& y) {
  const auto& t = *study.transient;
  std::vector<std::size_t> rows;
  for (std::size_t i = 0; i < t.station_pipe.size(); ++i)
    if (t.station_pipe[i] == pipe) rows.push_back(i);
  json points = json::array();
  for (std::size_t k = 0; k < 5; ++k) {
    const std::size_t row = rows[(rows.size() - 1) * k / 4];
    points.push_back({number(t.chainage[row]), number(y[row])});
  }
  return points;
}

json expected(const Study& study) {
  json all;
  const auto& t = *study.transient;
  for (std::size_t i = 0; i < t.probe_name.size(); ++i) {
    const std::size_t n = t.probe_name.size();
    all["history-pressure"][t.probe_name[i]] = five(t.time, t.probe_pressure, n, i);
    all["history-head"][t.probe_name[i]] = five(t.time, t.probe_head, n, i);
    if (i != 2) all["history-flow"][t.probe_name[i]] = five(t.time, t.probe_flow, n, i);
  }
  all["device-opening"]["end valve"] = five(t.time, t.series, 3, 0);
  all["device-flow"]["end valve"] = five(t.time, t.series, 3, 1);
  all["device-gas-volume"]["vessel"] = five(t.time, t.series, 3, 2);
  const auto& b = *study.bands;
  for (const std::size_t run : {std::size_t{0}, std::size_t{5}, std::size_t{100}, std::size_t{333}, std::size_t{511}}) {
    all["scatter-peak-by-main-wall"]["draws"].push_back({b.input_value[run * 4], b.output_value[run * 3 + 1]});
    all["scatter-peak-by-main-wave__speed__scatter"]["draws"].push_back(
        {b.input_value[run * 4 + 2], b.output_value[run * 3 + 1]});
  }
  for (std::int32_t pipe = 0; pipe < 2; ++pipe) {
    const auto& p = study.pipes[static_cast<std::size_t>(pipe)];
    json& profile = all[pipe == 0 ? "profile-upper-main" : "profile-lower-main"];
    profile["highest"] = five_stations(study, pipe, t.head_max);
    profile["lowest"] = five_stations(study, pipe, t.head_min);
    profile["steady"] = five_stations(study, pipe, t.steady_head);
    profile["vapour line"] = five_stations(study, pipe, t.vapour_head);
    for (std::size_t k = 0; k < 5; ++k) profile["ground"].push_back({p.chainage[k], p.elevation[k]});
    const std::size_t stations = b.profile_share.size();
    for (std::size_t k = 0; k < 5; ++k) {
      const std::size_t at = static_cast<std::size_t>(pipe) * 11 + 2 * k;
      const double x = b.profile_share[at] * p.length;
      profile["highest, 2.5 %"].push_back({x, b.profile_head_max[at]});
      profile["highest, 97.5 %"].push_back({x, b.profile_head_max[2 * stations + at]});
      profile["lowest, 2.5 %"].push_back({x, b.profile_head_min[at]});
      profile["lowest, 97.5 %"].push_back({x, b.profile_head_min[2 * stations + at]});
    }
  }
  return all;
}

}  // namespace

int main(int argc, char** argv) {
  if (argc != 2) {
    std::cerr << "usage: sample_page FOLDER\n";
    return 64;
  }
  const std::filesystem::path folder = argv[1];
  std::filesystem::create_directories(folder);
  namespace support = headband::support;
  const Study study = support::sample_study();
  write(folder / "band.html", headband::report::page(study));
  write(folder / "band-us.html", headband::report::page(study, "us"));
  write(folder / "surge.html", headband::report::page(support::sample_surge()));
  write(folder / "flow.html", headband::report::page(support::sample_flow()));
  write(folder / "expected.json", expected(study).dump());

  Study hostile = study;
  const std::string script = "</script><script>alert(1)</script>";
  hostile.title = script;
  hostile.note = "\"'><img src=x onerror=alert(2)>" + script;
  hostile.provenance.case_text = "</pre>" + script + "\n# --> <!-- " + script;
  hostile.pipes[0].name = script;
  hostile.transient->probe_name[0] = script;
  hostile.bands->answers[1].name = script;
  hostile.events[0].what = script;
  hostile.guesses.push_back(script);
  write(folder / "hostile.html", headband::report::page(hostile));

  for (const auto& [name, text] : headband::report::pictures(study)) write(folder / name, text);
  return 0;
}
