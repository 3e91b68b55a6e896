# The release build with every assertion on: the same bits, checked.
set(CMAKE_BUILD_TYPE Release CACHE STRING "Kind of build")
set(CMAKE_CXX_FLAGS "-D_GLIBCXX_ASSERTIONS -DHEADBAND_CHECKED" CACHE STRING "Flags of this kind")
set(HEADBAND_WERROR ON CACHE BOOL "Warnings are errors")
set(HEADBAND_DEVELOPER_MODE ON CACHE BOOL "Build tests and benchmarks")
