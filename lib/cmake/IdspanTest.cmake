# SPDX-License-Identifier: BSD-2-Clause
#
# idspan_test(NAME LABELS label ... [SOURCES file ...] [LIBRARIES target ...] [TIMEOUT seconds])
#
# One executable made of NAME.c (and SOURCES), and one ctest entry NAME. Labels: unit property
# published oom abi cli fuzz ref slow. The static archive has the hidden symbols too, so a test
# can include private headers ("core/core_private.h", "support.h").
include_guard()

# Sanitizers and valgrind make a test several times slower.
set(idspan_test_slowness 1)
if(IDSPAN_SANITIZE OR IDSPAN_COVERAGE)
    set(idspan_test_slowness 10)
endif()

function(idspan_test name)
    cmake_parse_arguments(PARSE_ARGV 1 arg "" "TIMEOUT" "LABELS;SOURCES;LIBRARIES")
    if(NOT arg_TIMEOUT)
        set(arg_TIMEOUT 30)
    endif()
    math(EXPR timeout "${arg_TIMEOUT} * ${idspan_test_slowness}")

    add_executable(${name} ${name}.c ${arg_SOURCES})
    set_target_properties(${name} PROPERTIES C_EXTENSIONS OFF)
    target_compile_definitions(
        ${name} PRIVATE _POSIX_C_SOURCE=200809L "IDSPAN_DATA_DIR=\"${PROJECT_SOURCE_DIR}/data\""
    )
    target_include_directories(${name} PRIVATE "${PROJECT_SOURCE_DIR}/lib")
    target_link_libraries(
        ${name} PRIVATE idspan_test_support ${arg_LIBRARIES} idspan::static idspan_flags
                        PkgConfig::CHECK FLINT::FLINT GMP::GMP
    )
    add_test(NAME ${name} COMMAND ${name})
    set_tests_properties(
        ${name}
        PROPERTIES LABELS "${arg_LABELS}"
                   TIMEOUT ${timeout}
                   ENVIRONMENT "CK_TIMEOUT_MULTIPLIER=${idspan_test_slowness}"
    )
endfunction()
