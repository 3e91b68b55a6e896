// SPDX-License-Identifier: MIT
#include "core/base/grades.hpp"

#include <fmt/format.h>

#include <array>
#include <utility>

namespace headband::base {

namespace {

struct Row {
  GradeSubject what;
  GradeForm form;
  std::array<double, 4> size;  ///< A, B, C, D
};

constexpr std::array<Row, 12> rows{{
    {GradeSubject::flow, GradeForm::share, {0.01, 0.03, 0.05, 0.10}},
    {GradeSubject::bore, GradeForm::share, {0.003, 0.005, 0.01, 0.03}},
    {GradeSubject::wall, GradeForm::share, {0.02, 0.05, 0.12, 0.20}},
    {GradeSubject::roughness, GradeForm::factor, {1.3, 2.0, 3.0, 5.0}},
    {GradeSubject::wave_speed, GradeForm::share, {0.01, 0.03, 0.05, 0.10}},
    {GradeSubject::stroke_time, GradeForm::share, {0.03, 0.10, 0.20, 0.30}},
    {GradeSubject::near_seat, GradeForm::factor, {1.1, 1.3, 1.6, 2.0}},
    {GradeSubject::inertia, GradeForm::share, {0.05, 0.10, 0.25, 0.40}},
    {GradeSubject::viscosity, GradeForm::share, {0.02, 0.05, 0.10, 0.25}},
    {GradeSubject::level, GradeForm::length, {0.05, 0.2, 1.0, 3.0}},
    {GradeSubject::fitting_loss, GradeForm::share, {0.10, 0.20, 0.30, 0.50}},
    {GradeSubject::pump_head, GradeForm::share, {0.02, 0.03, 0.05, 0.08}},
}};

constexpr std::array<std::pair<std::string_view, GradeSubject>, 20> keys{{
    {"flow", GradeSubject::flow},
    {"bore", GradeSubject::bore},
    {"outside", GradeSubject::bore},
    {"wall", GradeSubject::wall},
    {"roughness", GradeSubject::roughness},
    {"wave_speed", GradeSubject::wave_speed},
    {"wave_speed_scatter", GradeSubject::wave_speed},
    {"over", GradeSubject::stroke_time},
    {"near_seat", GradeSubject::near_seat},
    {"inertia_mr2", GradeSubject::inertia},
    {"inertia_gd2", GradeSubject::inertia},
    {"inertia_wr2", GradeSubject::inertia},
    {"viscosity", GradeSubject::viscosity},
    {"viscosity_scatter", GradeSubject::viscosity},
    {"level", GradeSubject::level},
    {"elevation", GradeSubject::level},
    {"k", GradeSubject::fitting_loss},
    {"equivalent_length", GradeSubject::fitting_loss},
    {"head_scatter", GradeSubject::pump_head},
    {"thickness", GradeSubject::wall},
}};

/// 0 … 3, or -1.
int rank_of(std::string_view grade) {
  if (grade.size() != 1) return -1;
  const char g = grade[0];
  if (g >= 'A' && g <= 'D') return g - 'A';
  return -1;
}

}  // namespace

std::string GradeSpread::written() const {
  switch (form) {
    case GradeForm::share:
      return fmt::format("± {:g} %", 100.0 * size);
    case GradeForm::factor:
      return fmt::format("x/ {:g}", size);
    case GradeForm::length:
      return fmt::format("± {:g} m", size);
  }
  return {};
}

std::optional<GradeSpread> default_spread(GradeSubject what, std::string_view grade) {
  const int rank = rank_of(grade);
  if (rank < 0) return std::nullopt;
  for (const Row& r : rows)
    if (r.what == what) return GradeSpread{r.form, r.size[static_cast<std::size_t>(rank)]};
  return std::nullopt;
}

std::optional<GradeSpread> default_spread(std::string_view key, std::string_view grade) {
  for (const auto& [name, what] : keys)
    if (name == key) return default_spread(what, grade);
  return std::nullopt;
}

std::string_view grade_meaning(std::string_view grade) {
  constexpr std::array<std::string_view, 4> words{"measured here", "data sheet", "drawing or handbook", "guess"};
  const int rank = rank_of(grade);
  return rank < 0 ? std::string_view{} : words[static_cast<std::size_t>(rank)];
}

}  // namespace headband::base
