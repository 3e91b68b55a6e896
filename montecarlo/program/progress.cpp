// SPDX-License-Identifier: MIT
#include "montecarlo/program/progress.hpp"

#include "montecarlo/program/output.hpp"

#include <fmt/format.h>

#include <unistd.h>
#include <algorithm>
#include <cmath>
#include <cstdlib>

namespace headband::program {

std::string progress_line(long long done, long long all, double seconds, bool unicode) {
  constexpr int cells = 24;
  const double share = all > 0 ? std::clamp(static_cast<double>(done) / static_cast<double>(all), 0.0, 1.0) : 0.0;
  const int full = static_cast<int>(share * cells);
  std::string bar;
  for (int i = 0; i < cells; ++i) bar += i < full ? (unicode ? "━" : "#") : (unicode ? "─" : "-");
  std::string left = "time left unknown";
  if (done > 0 && seconds > 0.0) {
    const double rest = std::min(seconds * (1.0 - share) / std::max(share, 1e-12), 359999.0);
    const long whole = std::lround(rest);
    left = whole >= 3600 ? fmt::format("{} h {:02} min left", whole / 3600, whole / 60 % 60)
           : whole >= 60 ? fmt::format("{} min {:02} s left", whole / 60, whole % 60)
                         : fmt::format("{} s left", whole);
  }
  return fmt::format("{} {} of {} draws, {}", bar, done, all, left);
}

Progress::Progress(const Options& options) : start_(Clock::now()), last_(start_ - std::chrono::hours(1)) {
  const char* term = std::getenv("TERM");  // NOLINT(concurrency-mt-unsafe): read before any thread starts
  on_ = !options.quiet && ::isatty(STDERR_FILENO) != 0 && (term == nullptr || std::string(term) != "dumb");
  unicode_ = unicode_wanted();
}

Progress::~Progress() { clear(); }

void Progress::show(long long done, long long all) {
  if (!on_) return;
  const auto now = Clock::now();
  if (now - last_ < std::chrono::milliseconds(100)) return;
  last_ = now;
  drawn_ = true;
  const double seconds = std::chrono::duration<double>(now - start_).count();
  say("\r\033[K" + progress_line(done, all, seconds, unicode_));
}

void Progress::clear() {
  if (drawn_) say("\r\033[K");
  drawn_ = false;
}

}  // namespace headband::program
