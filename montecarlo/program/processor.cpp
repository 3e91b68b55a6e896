// SPDX-License-Identifier: MIT
//
// The release is built for x86-64-v3. On an older processor the first such instruction would end the program without a
// word, so this file is built for plain x86-64 and looks before any other code of ours runs, constructors included.

#include <unistd.h>
#include <cstring>

#if !defined(HEADBAND_PORTABLE) && (defined(__x86_64__) || defined(_M_X64))

namespace {

[[gnu::constructor(101)]] void look_at_processor() {
  __builtin_cpu_init();
  // NOLINTBEGIN(readability-implicit-bool-conversion): an int for one compiler, a bool for the other
  const bool fits = __builtin_cpu_supports("avx2") != 0 && __builtin_cpu_supports("bmi") != 0 &&
                    __builtin_cpu_supports("bmi2") != 0 && __builtin_cpu_supports("fma") != 0;
  // NOLINTEND(readability-implicit-bool-conversion)
  if (fits) return;
  static const char text[] =
      "headband: this build needs a processor of level x86-64-v3 (AVX2, BMI, FMA; made since about 2013 to 2015);\n"
      "          build it with -DHEADBAND_PORTABLE=ON for this machine\n";
  [[maybe_unused]] const ssize_t written = ::write(STDERR_FILENO, text, std::strlen(text));
  ::_exit(70);
}

}  // namespace

#endif
