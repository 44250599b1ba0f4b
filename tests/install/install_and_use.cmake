# SPDX-License-Identifier: Apache-2.0
# The steps of the install test, each of which must succeed.
cmake_minimum_required(VERSION 3.25)

function(run)
  execute_process(COMMAND ${ARGV} OUTPUT_VARIABLE output ERROR_VARIABLE output RESULT_VARIABLE status)
  message("${output}")
  if(NOT status EQUAL 0)
    list(JOIN ARGV " " command)
    message(FATAL_ERROR "failed (${status}): ${command}")
  endif()
  set(output "${output}" PARENT_SCOPE)
endfunction()

file(REMOVE_RECURSE ${SCRATCH})
unset(ENV{LD_LIBRARY_PATH})  # the run path alone must find OpenBLAS
run(${CMAKE_COMMAND} --install ${BUILD} --config ${CONFIG} --prefix ${SCRATCH}/prefix)
# Another place than the one installed to: nothing in the package may name the prefix.
file(RENAME ${SCRATCH}/prefix ${SCRATCH}/moved)
run(${CMAKE_COMMAND} -S ${OUTSIDE} -B ${SCRATCH}/build -G ${GENERATOR}
  -D CMAKE_PREFIX_PATH=${SCRATCH}/moved -D CMAKE_BUILD_TYPE=${CONFIG}
  -D CMAKE_CXX_COMPILER=${COMPILER} -D CMAKE_CXX_FLAGS=${FLAGS})
run(${CMAKE_COMMAND} --build ${SCRATCH}/build --config ${CONFIG})
run(${SCRATCH}/build/outside ${DATA}/spectra.csv ${DATA}/reference.csv)

if(PROGRAM)
  run(${SCRATCH}/moved/bin/bandwright --version)
  string(STRIP "${output}" output)
  if(NOT output STREQUAL "bandwright ${VERSION}")
    message(FATAL_ERROR "the installed program calls itself \"${output}\", wanted \"bandwright ${VERSION}\"")
  endif()
  run(${SCRATCH}/moved/bin/bandwright --version --json)
  if(NOT output MATCHES "\"safe_for_threads\": ?true")
    message(FATAL_ERROR "the installed program found another OpenBLAS than the pthread build")
  endif()
endif()
