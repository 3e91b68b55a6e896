// SPDX-License-Identifier: MIT
#include "core/base/version.hpp"

#include "headband_build.hpp"  // written by record_build.cmake at build time

namespace headband::base {

std::string version() { return HEADBAND_BUILD_VERSION; }
std::string commit() { return HEADBAND_BUILD_COMMIT; }
std::string build_kind() { return HEADBAND_BUILD_KIND; }
std::string compiler() { return HEADBAND_BUILD_COMPILER; }
std::string flags() { return HEADBAND_BUILD_FLAGS; }
std::string libraries() { return HEADBAND_BUILD_LIBRARIES; }

}  // namespace headband::base
