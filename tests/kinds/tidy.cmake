# clang-tidy over every source while it is built by clang; findings are errors (.clang-tidy).
set(CMAKE_C_COMPILER clang-19 CACHE STRING "Compiler of this kind")
set(CMAKE_CXX_COMPILER clang++-19 CACHE STRING "Compiler of this kind")
set(CMAKE_BUILD_TYPE Debug CACHE STRING "Kind of build")
set(CMAKE_CXX_CLANG_TIDY "clang-tidy-19;--quiet" CACHE STRING "Analyser of this kind")
set(HEADBAND_DEVELOPER_MODE OFF CACHE BOOL "Build tests and benchmarks")
