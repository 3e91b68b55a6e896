// SPDX-License-Identifier: MIT
#include "montecarlo/program/provenance.hpp"

#include "core/base/hash.hpp"
#include "core/base/version.hpp"

#include <fmt/chrono.h>
#include <fmt/format.h>

#include <chrono>

namespace headband::program {
namespace {

/// ISO 8601 in UTC with milliseconds, so that the wall time can be told again.
std::string timestamp(std::chrono::system_clock::time_point when) {
  const auto seconds = std::chrono::floor<std::chrono::seconds>(when);
  const auto rest = std::chrono::duration_cast<std::chrono::milliseconds>(when - seconds).count();
  return fmt::format("{:%Y-%m-%dT%H:%M:%S}.{:03}Z", fmt::gmtime(std::chrono::system_clock::to_time_t(seconds)), rest);
}

void add_file(answers::Provenance& provenance, const network::Table& table) {
  if (table.file.empty()) return;
  for (const auto& known : provenance.side_files) {
    if (known[0] == table.file) return;
  }
  provenance.side_files.push_back({table.file, base::sha256_hex(table.text), table.text});
}

}  // namespace

answers::Provenance begin_provenance(const network::Case& c, const Options& options, const std::string& verb) {
  answers::Provenance p;
  p.case_file = c.file_name;
  p.case_text = c.text;
  p.case_sha256 = base::sha256_hex(c.text);
  for (const auto& basin : c.basins) add_file(p, basin.level_table);
  for (const auto& pipe : c.pipes) add_file(p, pipe.profile_table);
  for (const auto& pump : c.pumps) {
    add_file(p, pump.curve);
    add_file(p, pump.torque);
    add_file(p, pump.suter);
  }
  for (const auto& event : c.events) add_file(p, event.travel);
  p.verb = verb;
  p.command = options.command;
  p.seed = options.seed.value_or(c.band.seed);
  p.version = base::version();
  p.commit = base::commit();
  p.build_kind = base::build_kind();
  p.compiler = base::compiler();
  p.flags = base::flags();
  p.libraries = base::libraries();
  p.started = timestamp(std::chrono::system_clock::now());
  p.wall_time = std::chrono::duration<double>(std::chrono::steady_clock::now().time_since_epoch()).count();
  p.threads = threads_for(options);
  return p;
}

void end_provenance(answers::Provenance& p) {
  // `wall_time` held the steady clock at the start.
  p.wall_time = std::chrono::duration<double>(std::chrono::steady_clock::now().time_since_epoch()).count() - p.wall_time;
  p.finished = timestamp(std::chrono::system_clock::now());
}

}  // namespace headband::program
