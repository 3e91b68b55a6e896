# Writes headband_build.hpp; run at each build so that the commit is that of the sources. The file changes only where
# its words do. Needs: SOURCE, OUTPUT, VERSION, KIND, COMPILER, FLAGS, LIBRARIES.
find_program(git_program git)
set(commit "unknown")
if(git_program AND EXISTS ${SOURCE}/.git)
  execute_process(COMMAND ${git_program} rev-parse --short=12 HEAD WORKING_DIRECTORY ${SOURCE}
    OUTPUT_VARIABLE commit OUTPUT_STRIP_TRAILING_WHITESPACE ERROR_QUIET RESULT_VARIABLE failed)
  if(failed)
    set(commit "unknown")
  else()
    execute_process(COMMAND ${git_program} --no-optional-locks status --porcelain -uno WORKING_DIRECTORY ${SOURCE}
      OUTPUT_VARIABLE changed ERROR_QUIET)
    if(NOT changed STREQUAL "")
      string(APPEND commit "+changes")
    endif()
  endif()
endif()
set(text "// written by core/base/record_build.cmake
#pragma once
#define HEADBAND_BUILD_VERSION \"${VERSION}\"
#define HEADBAND_BUILD_COMMIT \"${commit}\"
#define HEADBAND_BUILD_KIND \"${KIND}\"
#define HEADBAND_BUILD_COMPILER \"${COMPILER}\"
#define HEADBAND_BUILD_FLAGS \"${FLAGS}\"
#define HEADBAND_BUILD_LIBRARIES \"${LIBRARIES}\"
")
set(before "")
if(EXISTS ${OUTPUT})
  file(READ ${OUTPUT} before)
endif()
if(NOT before STREQUAL text)
  file(WRITE ${OUTPUT} "${text}")
endif()
