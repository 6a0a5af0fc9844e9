# SPDX-License-Identifier: BSD-2-Clause
#
# Install rules: libraries, headers, pkg-config and CMake package files, tool, data. What belongs
# to the tool (man pages, completion) is installed by tools/CMakeLists.txt.
include(CMakePackageConfigHelpers)

set(idspan_cmakedir "${CMAKE_INSTALL_LIBDIR}/cmake/idspan")

install(TARGETS idspan_shared idspan_static EXPORT idspan-targets)
install(DIRECTORY "${PROJECT_SOURCE_DIR}/include/idspan" "${PROJECT_BINARY_DIR}/include/idspan"
        DESTINATION "${CMAKE_INSTALL_INCLUDEDIR}" FILES_MATCHING PATTERN "*.h"
)
if(TARGET idspan_tool)
    install(TARGETS idspan_tool)
endif()
install(DIRECTORY "${PROJECT_SOURCE_DIR}/data/" DESTINATION "${CMAKE_INSTALL_DATADIR}/idspan"
        PATTERN "corpus" EXCLUDE
)

# The .pc file finds its prefix from its own place, so that the tree can be moved.
cmake_path(
    RELATIVE_PATH CMAKE_INSTALL_PREFIX
    BASE_DIRECTORY "${CMAKE_INSTALL_FULL_LIBDIR}/pkgconfig"
    OUTPUT_VARIABLE idspan_pc_prefix
)
string(REGEX REPLACE "/$" "" idspan_pc_prefix "${idspan_pc_prefix}")
configure_file(
    "${CMAKE_CURRENT_LIST_DIR}/idspan.pc.in" "${PROJECT_BINARY_DIR}/idspan.pc" @ONLY
)
install(FILES "${PROJECT_BINARY_DIR}/idspan.pc" DESTINATION "${CMAKE_INSTALL_LIBDIR}/pkgconfig")

configure_package_config_file(
    "${CMAKE_CURRENT_LIST_DIR}/idspan-config.cmake.in"
    "${PROJECT_BINARY_DIR}/idspan-config.cmake"
    INSTALL_DESTINATION "${idspan_cmakedir}"
    NO_SET_AND_CHECK_MACRO
)
# Before 1.0 a new minor version may change the interface.
write_basic_package_version_file(
    "${PROJECT_BINARY_DIR}/idspan-config-version.cmake" COMPATIBILITY SameMinorVersion
)
install(FILES "${PROJECT_BINARY_DIR}/idspan-config.cmake"
              "${PROJECT_BINARY_DIR}/idspan-config-version.cmake"
              "${CMAKE_CURRENT_LIST_DIR}/FindFLINT.cmake" "${CMAKE_CURRENT_LIST_DIR}/FindGMP.cmake"
        DESTINATION "${idspan_cmakedir}"
)
install(EXPORT idspan-targets NAMESPACE idspan:: DESTINATION "${idspan_cmakedir}")

add_custom_target(
    uninstall
    COMMAND "${CMAKE_COMMAND}" "-DMANIFEST=${PROJECT_BINARY_DIR}/install_manifest.txt" -P
            "${CMAKE_CURRENT_LIST_DIR}/IdspanUninstall.cmake"
    VERBATIM
)

# `cpack -G DEB` in the build folder: one Debian package with the tool and both libraries.
set(CPACK_PACKAGE_NAME "${PROJECT_NAME}")
set(CPACK_PACKAGE_VENDOR "idspan contributors")
set(CPACK_PACKAGE_CONTACT "idspan contributors <idspan@localhost>")
set(CPACK_PACKAGE_DESCRIPTION_SUMMARY "${PROJECT_DESCRIPTION}")
set(CPACK_PACKAGING_INSTALL_PREFIX /usr)
set(CPACK_GENERATOR DEB)
set(CPACK_STRIP_FILES ON)
set(CPACK_DEBIAN_FILE_NAME DEB-DEFAULT)
set(CPACK_DEBIAN_PACKAGE_SECTION math)
set(CPACK_DEBIAN_PACKAGE_SHLIBDEPS ON)
set(CPACK_DEBIAN_PACKAGE_GENERATE_SHLIBS ON)
set(CPACK_DEBIAN_PACKAGE_RECOMMENDS "libgmp-dev, libflint-dev, pkg-config")
set(CPACK_DEBIAN_PACKAGE_CONTROL_STRICT_PERMISSION ON)
include(CPack)
