# Lines and branches the tests reach; read with gcovr -r . build/coverage
set(CMAKE_BUILD_TYPE Debug CACHE STRING "Kind of build")
set(CMAKE_CXX_FLAGS_DEBUG "-O1 -g1 --coverage -fprofile-update=atomic" CACHE STRING "Flags of this kind")
set(HEADBAND_DEVELOPER_MODE ON CACHE BOOL "Build tests and benchmarks")
