// SPDX-License-Identifier: MIT
#include "core/casefile/choice_words.hpp"

#include <fmt/format.h>

namespace headband::casefile {

using namespace network;

std::string words_of(FrictionLaw law) {
  switch (law) {
    case FrictionLaw::colebrook_white:
      return "colebrook-white";
    case FrictionLaw::haaland:
      return "haaland";
    case FrictionLaw::swamee_jain:
      return "swamee-jain";
    case FrictionLaw::serghides:
      return "serghides";
    case FrictionLaw::zigrang_sylvester:
      return "zigrang-sylvester";
    case FrictionLaw::churchill:
      return "churchill";
    case FrictionLaw::smooth:
      return "smooth";
    case FrictionLaw::hazen_williams:
      return "hazen-williams";
    case FrictionLaw::manning:
      return "manning";
    case FrictionLaw::none:
      return "none";
  }
  return "";
}

std::string words_of(const Transition& t) {
  switch (t.kind) {
    case Transition::Kind::blend:
      return fmt::format("blend {} {}", t.from, t.to);
    case Transition::Kind::sudden:
      return fmt::format("switch {}", t.from);
    case Transition::Kind::churchill:
      return "churchill";
  }
  return "";
}

std::string words_of(Joint joint) {
  switch (joint) {
    case Joint::anchored:
      return "anchored";
    case Joint::upstream_anchored:
      return "upstream anchored";
    case Joint::expansion_joints:
      return "expansion joints";
  }
  return "";
}

std::string words_of(const ValveLaw& law) {
  switch (law.kind) {
    case ValveLawKind::linear:
      return "linear";
    case ValveLawKind::power:
      return fmt::format("power {}", law.parameter);
    case ValveLawKind::equal_percentage:
      return fmt::format("equal percentage {}", law.parameter);
    case ValveLawKind::quick_opening:
      return "quick opening";
    case ValveLawKind::table:
      return fmt::format("table of {} points", law.points.size());
  }
  return "";
}

std::string words_of(AnswerKind kind) {
  switch (kind) {
    case AnswerKind::pressure_drop:
      return "pressure_drop";
    case AnswerKind::flow:
      return "flow";
    case AnswerKind::head:
      return "head";
    case AnswerKind::highest_pressure:
      return "highest_pressure";
    case AnswerKind::lowest_pressure:
      return "lowest_pressure";
    case AnswerKind::velocity:
      return "velocity";
  }
  return "";
}

}  // namespace headband::casefile
