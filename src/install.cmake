# What `cmake --install` puts where: the command with its manual, the library with its headers, the docs,
# and the files by which pkg-config and find_package see it.
include(CMakePackageConfigHelpers)

set(PF_PACKAGE_FOLDER ${CMAKE_INSTALL_LIBDIR}/cmake/passfet)
file(RELATIVE_PATH PF_PREFIX_FROM_PC /${CMAKE_INSTALL_LIBDIR}/pkgconfig /)
configure_file(passfet.pc.in passfet.pc @ONLY)
configure_package_config_file(passfetConfig.cmake.in passfetConfig.cmake
  INSTALL_DESTINATION ${PF_PACKAGE_FOLDER} PATH_VARS CMAKE_INSTALL_INCLUDEDIR CMAKE_INSTALL_LIBDIR)
write_basic_package_version_file(passfetConfigVersion.cmake COMPATIBILITY SameMinorVersion)

install(TARGETS passfet RUNTIME)
install(TARGETS libpassfet ARCHIVE)
install(DIRECTORY ${PROJECT_SOURCE_DIR}/include/passfet TYPE INCLUDE)
install(FILES ${PROJECT_SOURCE_DIR}/docs/passfet.1 DESTINATION ${CMAKE_INSTALL_MANDIR}/man1)
install(FILES ${PROJECT_SOURCE_DIR}/README.md TYPE DOC)
install(DIRECTORY ${PROJECT_SOURCE_DIR}/docs TYPE DOC FILES_MATCHING PATTERN "*.md")
install(FILES ${CMAKE_CURRENT_BINARY_DIR}/passfet.pc DESTINATION ${CMAKE_INSTALL_LIBDIR}/pkgconfig)
install(FILES ${CMAKE_CURRENT_BINARY_DIR}/passfetConfig.cmake
              ${CMAKE_CURRENT_BINARY_DIR}/passfetConfigVersion.cmake
        DESTINATION ${PF_PACKAGE_FOLDER})
