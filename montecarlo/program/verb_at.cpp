// SPDX-License-Identifier: MIT
//
// at: everything a result says for one spot. PLACE is a place, a pipe, or "PIPE @ CHAINAGE" with a unit.
#include "core/base/units.hpp"
#include "core/resultfile/result_file.hpp"
#include "core/show/show.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/failure.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/spot_answer.hpp"
#include "montecarlo/program/verbs.hpp"

namespace headband::program {

ExitCode verb_at(const Options& options) {
  return guarded(options.words.front(), [&] {
    return told(options, [&] {
      const answers::Study study = resultfile::read(options.words.front());
      const SpotAnswer spot = spot_answer(study, options.words[1]);
      print(options.json ? spot_json(study, spot) : spot_text(study, spot, options.units));
      return ExitCode::done;
    });
  });
}

}  // namespace headband::program
