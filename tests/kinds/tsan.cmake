# Data races between threads. clang, whose runtime knows std::atomic waits.
set(CMAKE_C_COMPILER clang-19 CACHE STRING "Compiler of this kind")
set(CMAKE_CXX_COMPILER clang++-19 CACHE STRING "Compiler of this kind")
set(CMAKE_BUILD_TYPE Debug CACHE STRING "Kind of build")
set(CMAKE_CXX_FLAGS_DEBUG "-O1 -g1" CACHE STRING "Flags of this kind")
set(CMAKE_CXX_FLAGS "-fsanitize=thread -fno-omit-frame-pointer" CACHE STRING "Flags of this kind")
set(HEADBAND_DEVELOPER_MODE ON CACHE BOOL "Build tests and benchmarks")
