# SPDX-License-Identifier: Apache-2.0
# The pthread build of OpenBLAS as bandwright::openblas, found in its own folder: the system's default BLAS
# may be the serial build (wrong numbers when called from several threads) or the OpenMP build (ignores our
# thread setting). Installed beside the package file, since a program that links the static library needs
# the same build.
if(NOT TARGET bandwright::openblas)
  find_library(OPENBLAS_PTHREAD openblas PATH_SUFFIXES openblas-pthread REQUIRED)
  find_path(OPENBLAS_INCLUDE_DIR cblas.h PATH_SUFFIXES openblas-pthread REQUIRED)
  cmake_path(GET OPENBLAS_PTHREAD PARENT_PATH OPENBLAS_DIR)
  if(NOT OPENBLAS_DIR MATCHES "openblas-pthread$")
    message(FATAL_ERROR "bandwright needs the pthread build of OpenBLAS (Debian: libopenblas-pthread-dev); found ${OPENBLAS_PTHREAD}")
  endif()
  add_library(bandwright::openblas INTERFACE IMPORTED)
  set_target_properties(bandwright::openblas PROPERTIES
    INTERFACE_LINK_LIBRARIES ${OPENBLAS_PTHREAD}
    INTERFACE_INCLUDE_DIRECTORIES ${OPENBLAS_INCLUDE_DIR})
endif()
