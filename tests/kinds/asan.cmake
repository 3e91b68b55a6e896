# Addresses and undefined behaviour checked at run time (g++ or clang); the first finding ends the program.
set(CMAKE_BUILD_TYPE Debug CACHE STRING "Kind of build")
set(CMAKE_CXX_FLAGS_DEBUG "-O1 -g1" CACHE STRING "Flags of this kind")
set(CMAKE_CXX_FLAGS
  "-fsanitize=address,undefined -fno-sanitize-recover=all -fno-omit-frame-pointer -D_GLIBCXX_ASSERTIONS"
  CACHE STRING "Flags of this kind")
set(HEADBAND_DEVELOPER_MODE ON CACHE BOOL "Build tests and benchmarks")
