# SPDX-License-Identifier: Apache-2.0
# What `cmake --install` puts where, and the package that find_package(bandwright) reads.
include(CMakePackageConfigHelpers)
set(package_dir ${CMAKE_INSTALL_LIBDIR}/cmake/bandwright)

install(TARGETS bandwright EXPORT bandwrightTargets
  ARCHIVE DESTINATION ${CMAKE_INSTALL_LIBDIR}
  LIBRARY DESTINATION ${CMAKE_INSTALL_LIBDIR}
  FILE_SET HEADERS DESTINATION ${CMAKE_INSTALL_INCLUDEDIR}/bandwright)
install(EXPORT bandwrightTargets NAMESPACE bandwright:: DESTINATION ${package_dir})
if(TARGET bandwright_cli)
  install(TARGETS bandwright_cli RUNTIME DESTINATION ${CMAKE_INSTALL_BINDIR})
endif()

configure_package_config_file(${CMAKE_CURRENT_LIST_DIR}/bandwrightConfig.cmake.in
  ${PROJECT_BINARY_DIR}/bandwrightConfig.cmake INSTALL_DESTINATION ${package_dir})
# Before 1.0 a new minor version may change the interface.
write_basic_package_version_file(${PROJECT_BINARY_DIR}/bandwrightConfigVersion.cmake COMPATIBILITY SameMinorVersion)
install(FILES
  ${PROJECT_BINARY_DIR}/bandwrightConfig.cmake
  ${PROJECT_BINARY_DIR}/bandwrightConfigVersion.cmake
  ${CMAKE_CURRENT_LIST_DIR}/OpenBlas.cmake
  DESTINATION ${package_dir})
install(FILES ${PROJECT_SOURCE_DIR}/LICENSE ${PROJECT_SOURCE_DIR}/NOTICE DESTINATION ${CMAKE_INSTALL_DOCDIR})
