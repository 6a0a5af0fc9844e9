# SPDX-License-Identifier: BSD-2-Clause
#
# Finds FLINT; gives the target FLINT::FLINT. Looks for the files themselves, because FLINT 2
# has neither a pkg-config file nor CMake package files on several systems.
find_path(FLINT_INCLUDE_DIR flint/flint.h)
find_library(FLINT_LIBRARY flint)
mark_as_advanced(FLINT_INCLUDE_DIR FLINT_LIBRARY)

if(FLINT_INCLUDE_DIR)
    file(STRINGS "${FLINT_INCLUDE_DIR}/flint/flint.h" flint_line
         REGEX "^#define FLINT_VERSION \"[0-9.]+"
    )
    if(flint_line MATCHES "\"([0-9.]+)")
        set(FLINT_VERSION "${CMAKE_MATCH_1}")
    endif()
    unset(flint_line)
endif()

include(CMakeFindDependencyMacro)
find_dependency(GMP)

include(FindPackageHandleStandardArgs)
find_package_handle_standard_args(
    FLINT REQUIRED_VARS FLINT_LIBRARY FLINT_INCLUDE_DIR GMP_FOUND VERSION_VAR FLINT_VERSION
)

if(FLINT_FOUND AND NOT TARGET FLINT::FLINT)
    add_library(FLINT::FLINT UNKNOWN IMPORTED)
    set_target_properties(
        FLINT::FLINT
        PROPERTIES IMPORTED_LOCATION "${FLINT_LIBRARY}"
                   INTERFACE_INCLUDE_DIRECTORIES "${FLINT_INCLUDE_DIR}"
                   INTERFACE_LINK_LIBRARIES GMP::GMP
    )
endif()
