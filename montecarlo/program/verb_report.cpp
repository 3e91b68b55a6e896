// SPDX-License-Identifier: MIT
#include "core/report/report.hpp"
#include "core/resultfile/result_file.hpp"
#include "core/show/show.hpp"
#include "montecarlo/program/failure.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/study_case.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>

#include <filesystem>
#include <map>

namespace headband::program {
namespace {

/// Writes `files` into `folder`, made where it is missing. Tables and pictures carry no mark: replaced only with -f.
void write_folder(const Options& options, const std::string& folder, const std::map<std::string, std::string>& files) {
  std::error_code error;
  std::filesystem::create_directories(folder, error);
  for (const auto& [name, text] : files) {
    check_can_create(folder + "/" + name, {.force = options.force, .own_name = false, .mark = {}});
  }
  for (const auto& [name, text] : files) {
    write_text(folder + "/" + name, text, {.force = options.force, .own_name = false, .mark = {}});
    remark(options, fmt::format("file: {}/{}\n", folder, name));
  }
}

ExitCode report(const Options& options) {
  const std::string& result = options.words.front();
  const answers::Study study = resultfile::read(result);
  const bool tables = options.json || !options.csv_folder.empty() || !options.svg_folder.empty();
  if (options.json) print(show::json(study));
  if (!options.csv_folder.empty()) write_folder(options, options.csv_folder, show::csv(study));
  if (!options.svg_folder.empty()) write_folder(options, options.svg_folder, report::pictures(study, options.units));
  if (!tables || !options.report.empty()) {
    const bool own_name = options.report.empty();
    const std::string page = own_name ? stem(result) + ".html" : options.report;
    const Replace replace{.force = options.force, .own_name = own_name, .mark = page_mark};
    check_can_create(page, replace);
    write_text(page, report::page(study, options.units), replace);
    remark(options, fmt::format("report: {}\n", page));
  }
  return ExitCode::done;
}

}  // namespace

ExitCode verb_report(const Options& options) {
  return guarded(options.words.front(), [&] { return told(options, [&] { return report(options); }); });
}

}  // namespace headband::program
