# What users get.  cmake -C tests/kinds/release.cmake -S . -B build/release
set(CMAKE_BUILD_TYPE Release CACHE STRING "Kind of build")
