#pragma once
// SPDX-License-Identifier: MIT
//
// Everything kept of one run: histories, envelopes, cavities, events, audit. An observer of March<1>.

#include "transient/march/audit.hpp"
#include "transient/march/peak.hpp"
#include "transient/march/spots.hpp"
#include "transient/march/surge.hpp"

#include <optional>
#include <string>
#include <vector>

namespace headband::transient {

/// A computed section of the line, or a profile point between two of them.
struct Station {
  Spot spot;
  bool section = true;     ///< false: a profile or answer point
  bool end = false;        ///< a pipe end: its head is the place's
  Extremes head;           ///< [m]
  double top_speed = 0.0;  ///< largest |velocity| [m/s]
  double top_speed_time = 0.0;
};

/// An extreme of one answer: value in the answer's unit, how its history changes beside it.
struct AnswerPeak {
  double value = answers::missing;
  double time = answers::missing, beside = 0.0;
  double head = answers::missing;
  int pipe = -1;
  double chainage = answers::missing;
  double missed = 0.0;  ///< how much more it may be between the rows, see Peak::missed
};

/// Observer that keeps a whole run.
class Record {
 public:
  /// @param histories false: extremes only (finer grids of the grid bound)
  Record(const network::Values<1>& values, bool histories) : values_(&values), histories_(histories) {}

  void begin(March<1>& march);
  bool step(March<1>& march, long long row);
  void before_jump(March<1>& march, long long row);
  void after_jump(March<1>& march, long long row);

  /// Fills the blocks of the run that one grid decides (not the bounds).
  void finish(March<1>& march, SurgeRun& run);

  /// The extreme an answer or limit asks for. Only for answers that need a march.
  [[nodiscard]] AnswerPeak extreme_of(const March<1>& march, const network::AnswerPlan& what) const;
  /// Highest or lowest pressure of the whole line.
  [[nodiscard]] AnswerPeak extreme_everywhere(const March<1>& march, bool highest) const;
  /// What limit `limit` asks for, as it stood in the last row before a cavity formed; nothing where none formed.
  [[nodiscard]] std::optional<AnswerPeak> extreme_before_vapour(std::size_t limit) const;
  [[nodiscard]] bool finished() const { return finished_; }
  [[nodiscard]] bool cavity(const March<1>& march) const;

 private:
  struct OpenCavity {
    bool open = false;
    double opens = 0.0;     ///< [s]
    double volume = 0.0;    ///< largest of this opening [m3]
    double largest = 0.0;   ///< of the run [m3]
    double standing = 0.0;  ///< time with a cavity [s]
  };
  struct SeriesSource {
    enum class What { flow, head, opening, speed, torque } what;
    int device;
  };
  void add_stations(const March<1>& march);
  void add_series(const March<1>& march);
  void keep_row(March<1>& march);
  void watch_stations(const March<1>& march, long long row, bool instant);
  void watch_cavities(const March<1>& march);
  void watch_cavity(OpenCavity& c, double volume, double scale, const March<1>& march, int pipe, double chainage);
  void close_cavity(OpenCavity& c, double scale, double closes, const std::string& pipe, double chainage);
  void finish_cavities(const March<1>& march);
  void watch_devices(const March<1>& march);
  void watch_limits(const March<1>& march);
  void watch_first_vapour(const March<1>& march);
  void plan_events(const March<1>& march);
  [[nodiscard]] double series_value(const March<1>& march, const SeriesSource& s) const;
  [[nodiscard]] double device_flow(const March<1>& march, int device) const;
  [[nodiscard]] double device_head(const March<1>& march, int device) const;
  [[nodiscard]] double probe_flow(const March<1>& march, std::size_t probe) const;
  [[nodiscard]] bool finite(const March<1>& march) const;
  void take_extreme(const March<1>& march, const Station& s, bool highest, AnswerPeak& best) const;
  void finish_stations(const March<1>& march, SurgeRun& run) const;
  void finish_devices(const March<1>& march, SurgeRun& run) const;
  void add_event(double time, const std::string& subject, const std::string& kind, const std::string& what);

  const network::Values<1>* values_;
  bool histories_;
  bool finished_ = true;
  std::vector<Station> stations_;
  std::vector<Extremes> place_head_;
  std::vector<double> place_speed_, place_speed_time_;
  std::vector<OpenCavity> row_cavity_, place_cavity_;
  std::vector<Spot> probe_spots_;  ///< per probe; pipe < 0: a place
  std::vector<SeriesSource> series_;
  std::vector<Extremes> device_flow_, device_speed_;
  std::vector<double> first_flow_, first_head_, first_speed_;
  std::vector<char> was_shut_, was_refused_, was_forward_, limit_crossed_;
  bool vapour_seen_ = false;
  std::vector<AnswerPeak> before_vapour_;  ///< per limit; empty: no cavity formed
  answers::Transient out_;
  std::vector<answers::EventAnswer> events_;
  AuditSums audit_;
};

}  // namespace headband::transient
