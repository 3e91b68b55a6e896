#pragma once
// SPDX-License-Identifier: MIT
//
// The words of the case file for choices, for echoing and writing cases back.

#include "core/network/case.hpp"

#include <string>

namespace headband::casefile {

[[nodiscard]] std::string words_of(network::FrictionLaw law);
[[nodiscard]] std::string words_of(const network::Transition& transition);
[[nodiscard]] std::string words_of(network::Joint joint);
/// A table is "table of n points".
[[nodiscard]] std::string words_of(const network::ValveLaw& law);
[[nodiscard]] std::string words_of(network::AnswerKind kind);

}  // namespace headband::casefile
