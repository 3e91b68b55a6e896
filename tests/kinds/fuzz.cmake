# Fuzzing of the readers with libFuzzer (clang 19), addresses and undefined behaviour checked.
set(CMAKE_C_COMPILER clang-19 CACHE STRING "C compiler of this kind")
set(CMAKE_CXX_COMPILER clang++-19 CACHE STRING "C++ compiler of this kind")
set(CMAKE_BUILD_TYPE Debug CACHE STRING "Kind of build")
set(CMAKE_CXX_FLAGS_DEBUG "-O1 -g1" CACHE STRING "Flags of this kind")
set(CMAKE_CXX_FLAGS
  "-fsanitize=fuzzer-no-link,address,undefined -fno-sanitize-recover=all -fno-omit-frame-pointer"
  CACHE STRING "Flags of this kind")
set(HEADBAND_FUZZ ON CACHE BOOL "Build the fuzz programs")
set(HEADBAND_DEVELOPER_MODE ON CACHE BOOL "Build tests and benchmarks")
