# SPDX-License-Identifier: Apache-2.0
# How our own code is compiled: warnings, sanitizers, floating point. Not passed on to users of the library.
add_library(bandwright_options INTERFACE)
target_compile_features(bandwright_options INTERFACE cxx_std_20)
target_compile_options(bandwright_options INTERFACE
  -Wall -Wextra -Wpedantic -Wconversion -Wshadow -Wnon-virtual-dtor -Woverloaded-virtual
  # False alarms of an optimising GCC 12: inside Eigen, and in the addition of std::string (GCC bug 105651).
  $<$<CXX_COMPILER_ID:GNU>:-Wno-error=array-bounds -Wno-error=maybe-uninitialized>
  $<$<AND:$<CXX_COMPILER_ID:GNU>,$<NOT:$<CONFIG:Debug>>>:-Wno-restrict>
  -ffp-contract=off)  # results depend less on the machine
if(PROJECT_IS_TOP_LEVEL)
  target_compile_options(bandwright_options INTERFACE -Werror)
endif()
if(BANDWRIGHT_SANITIZE)
  target_compile_options(bandwright_options INTERFACE -fsanitize=${BANDWRIGHT_SANITIZE} -fno-sanitize-recover=all -fno-omit-frame-pointer)
  target_link_options(bandwright_options INTERFACE -fsanitize=${BANDWRIGHT_SANITIZE})
endif()
target_compile_definitions(bandwright_options INTERFACE
  ARMA_DONT_USE_WRAPPER ARMA_WARN_LEVEL=0 EIGEN_DONT_PARALLELIZE JSON_USE_IMPLICIT_CONVERSIONS=0)
