# The commands clang-tidy reads (tests/run.sh --all); nothing is built of this kind.
set(CMAKE_C_COMPILER clang-19 CACHE STRING "Compiler of this kind")
set(CMAKE_CXX_COMPILER clang++-19 CACHE STRING "Compiler of this kind")
set(CMAKE_BUILD_TYPE Debug CACHE STRING "Kind of build")
set(HEADBAND_DEVELOPER_MODE OFF CACHE BOOL "Build tests and benchmarks")
