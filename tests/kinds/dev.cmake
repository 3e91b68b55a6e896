# Everyday work: optimised a little, assertions on, warnings are errors.  cmake -C tests/kinds/dev.cmake -S . -B build/dev
set(CMAKE_BUILD_TYPE Debug CACHE STRING "Kind of build")
set(CMAKE_CXX_FLAGS_DEBUG "-Og -g -D_GLIBCXX_ASSERTIONS" CACHE STRING "Flags of this kind")
set(HEADBAND_WERROR ON CACHE BOOL "Warnings are errors")
set(HEADBAND_DEVELOPER_MODE ON CACHE BOOL "Build tests and benchmarks")
