#pragma once
// SPDX-License-Identifier: MIT
//
// HEADBAND_ASSERT(condition): a bug of ours when it fails, never a user's mistake. On in debug builds and in the
// `audit` kind (HEADBAND_CHECKED), gone in release; the condition must have no effect.

#include <cstdio>
#include <cstdlib>

#if !defined(NDEBUG) || defined(HEADBAND_CHECKED)
#define HEADBAND_ASSERT(condition) \
  ((condition)                     \
       ? static_cast<void>(0)      \
       : (std::fprintf(stderr, "%s:%d: assertion failed: %s\n", __FILE__, __LINE__, #condition), std::abort()))
#else
#define HEADBAND_ASSERT(condition) static_cast<void>(0)
#endif
