// SPDX-License-Identifier: MIT
#include "core/resultfile/schema.hpp"

#include <algorithm>
#include <cmath>

namespace headband::resultfile {

namespace {

double at_or_missing(const std::vector<double>& values, std::size_t i) {
  return i < values.size() ? values[i] : answers::missing;
}

bool all_missing(const std::vector<double>& values) {
  return std::all_of(values.begin(), values.end(), [](double x) { return std::isnan(x); });
}

/// Index of `probability` in the ascending list, exact: the same double was put in.
std::size_t column_of(const std::vector<double>& probabilities, double probability) {
  const auto found = std::lower_bound(probabilities.begin(), probabilities.end(), probability);
  return static_cast<std::size_t>(found - probabilities.begin());
}

}  // namespace

ProfilePoints profile_points(const std::vector<answers::PipeAnswer>& pipes) {
  ProfilePoints points;
  for (std::size_t i = 0; i < pipes.size(); ++i) {
    const auto& pipe = pipes[i];
    for (std::size_t j = 0; j < pipe.chainage.size(); ++j) {
      points.pipe.push_back(static_cast<std::int32_t>(i));
      points.chainage.push_back(pipe.chainage[j]);
      points.elevation.push_back(at_or_missing(pipe.elevation, j));
      points.steady_head.push_back(at_or_missing(pipe.steady_head, j));
    }
  }
  return points;
}

bool set_profile_points(const ProfilePoints& points, std::vector<answers::PipeAnswer>& pipes) {
  const std::size_t count = points.pipe.size();
  if (points.chainage.size() != count || points.elevation.size() != count || points.steady_head.size() != count) {
    return false;
  }
  for (std::size_t j = 0; j < count; ++j) {
    if (points.pipe[j] < 0 || static_cast<std::size_t>(points.pipe[j]) >= pipes.size()) return false;
    auto& pipe = pipes[static_cast<std::size_t>(points.pipe[j])];
    pipe.chainage.push_back(points.chainage[j]);
    pipe.elevation.push_back(points.elevation[j]);
    pipe.steady_head.push_back(points.steady_head[j]);
  }
  for (auto& pipe : pipes) {
    if (all_missing(pipe.elevation)) pipe.elevation.clear();
    if (all_missing(pipe.steady_head)) pipe.steady_head.clear();  // never computed
  }
  return true;
}

DeviceNumbers device_numbers(const std::vector<answers::DeviceAnswer>& devices) {
  DeviceNumbers numbers;
  for (std::size_t i = 0; i < devices.size(); ++i) {
    for (const auto& [key, value] : devices[i].numbers) {
      numbers.device.push_back(static_cast<std::int32_t>(i));
      numbers.key.push_back(key);
      numbers.value.push_back(value);
    }
  }
  return numbers;
}

bool set_device_numbers(const DeviceNumbers& numbers, std::vector<answers::DeviceAnswer>& devices) {
  const std::size_t count = numbers.device.size();
  if (numbers.key.size() != count || numbers.value.size() != count) return false;
  for (std::size_t i = 0; i < count; ++i) {
    if (numbers.device[i] < 0 || static_cast<std::size_t>(numbers.device[i]) >= devices.size()) return false;
    devices[static_cast<std::size_t>(numbers.device[i])].numbers.emplace_back(numbers.key[i], numbers.value[i]);
  }
  return true;
}

QuantileTable quantile_table(const std::vector<answers::BandAnswer>& rows) {
  QuantileTable table;
  for (const auto& row : rows) {
    for (const auto& q : row.quantiles) table.probability.push_back(q.probability);
  }
  std::sort(table.probability.begin(), table.probability.end());
  table.probability.erase(std::unique(table.probability.begin(), table.probability.end()), table.probability.end());
  const std::size_t columns = table.probability.size();
  table.value.assign(rows.size() * columns, answers::missing);
  table.bound.assign(2 * rows.size() * columns, answers::missing);
  table.given.assign(rows.size() * columns, 0);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    for (const auto& q : rows[i].quantiles) {
      const std::size_t cell = i * columns + column_of(table.probability, q.probability);
      table.value[cell] = q.value;
      table.bound[2 * cell] = q.lower;
      table.bound[2 * cell + 1] = q.upper;
      table.given[cell] = 1;
    }
  }
  return table;
}

void set_quantiles(const QuantileTable& table, std::vector<answers::BandAnswer>& rows) {
  const std::size_t columns = table.probability.size();
  for (std::size_t i = 0; i < rows.size(); ++i) {
    for (std::size_t j = 0; j < columns; ++j) {
      const std::size_t cell = i * columns + j;
      if (table.given[cell] != 1) continue;
      rows[i].quantiles.push_back(
          {table.probability[j], table.value[cell], table.bound[2 * cell], table.bound[2 * cell + 1]});
    }
  }
}

SensitivityTable sensitivity_table(const std::vector<answers::BandAnswer>& rows) {
  SensitivityTable table;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    for (const auto& share : rows[i].sensitivity) {
      table.output.push_back(static_cast<std::int32_t>(i));
      table.input.push_back(share.input);
      table.first.push_back(share.first);
      table.total.push_back(share.total);
    }
  }
  return table;
}

bool set_sensitivity(const SensitivityTable& table, std::vector<answers::BandAnswer>& rows) {
  const std::size_t count = table.output.size();
  if (table.input.size() != count || table.first.size() != count || table.total.size() != count) return false;
  for (std::size_t i = 0; i < count; ++i) {
    if (table.output[i] < 0 || static_cast<std::size_t>(table.output[i]) >= rows.size()) return false;
    rows[static_cast<std::size_t>(table.output[i])].sensitivity.push_back(
        {table.input[i], table.first[i], table.total[i]});
  }
  return true;
}

}  // namespace headband::resultfile
