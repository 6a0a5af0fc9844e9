# SPDX-License-Identifier: BSD-2-Clause
#
# idspan_test(NAME LABELS label ... [SOURCES file ...] [LIBRARIES target ...] [TIMEOUT seconds])
#
# One executable made of NAME.c (and SOURCES), and one ctest entry NAME. Labels: unit property
# published oom abi cli fuzz ref slow. The static archive has the hidden symbols too, so a test
# can include private headers ("core/core_private.h", "support.h"). IDSPAN_DATA_DIR is the data
# folder as a C string.
#
# idspan_fuzz(NAME CORPUS folder)
#
# NAME.c defines LLVMFuzzerTestOneInput(). With IDSPAN_FUZZ it becomes a libFuzzer program;
# otherwise a test that replays every file of data/corpus/<folder>.
include_guard()

# Sanitizers and valgrind make a test several times slower.
set(idspan_test_slowness 1)
if(IDSPAN_SANITIZE OR IDSPAN_COVERAGE)
    set(idspan_test_slowness 10)
elseif(IDSPAN_TEST_WRAPPER)
    set(idspan_test_slowness 40)
endif()

# What test programs have in common.
function(idspan_test_program name)
    target_compile_definitions(
        ${name} PRIVATE _POSIX_C_SOURCE=200809L "IDSPAN_DATA_DIR=\"${PROJECT_SOURCE_DIR}/data\""
    )
    target_include_directories(${name} PRIVATE "${PROJECT_SOURCE_DIR}/lib")
    target_link_libraries(
        ${name} PRIVATE idspan::static idspan_flags FLINT::FLINT GMP::GMP Threads::Threads m
    )
endfunction()

# Limits are there for tests that hang. They leave room for a machine that does other things too:
# Check's own limit of 4 seconds is for a quiet one.
function(idspan_test_entry name labels timeout)
    math(EXPR timeout "4 * ${timeout} * ${idspan_test_slowness}")
    math(EXPR patience "6 * ${idspan_test_slowness}")
    add_test(NAME ${name} COMMAND ${IDSPAN_TEST_WRAPPER} "$<TARGET_FILE:${name}>" ${ARGN})
    set_tests_properties(
        ${name}
        PROPERTIES LABELS "${labels}"
                   TIMEOUT ${timeout}
                   ENVIRONMENT "CK_TIMEOUT_MULTIPLIER=${patience}"
    )
endfunction()

function(idspan_test name)
    cmake_parse_arguments(PARSE_ARGV 1 arg "" "TIMEOUT" "LABELS;SOURCES;LIBRARIES")
    if(NOT arg_TIMEOUT)
        set(arg_TIMEOUT 30)
    endif()
    add_executable(${name} ${name}.c ${arg_SOURCES})
    target_link_libraries(${name} PRIVATE idspan_test_support ${arg_LIBRARIES})
    idspan_test_program(${name})
    idspan_test_entry(${name} "${arg_LABELS}" ${arg_TIMEOUT})
endfunction()

function(idspan_fuzz name)
    cmake_parse_arguments(PARSE_ARGV 1 arg "" "CORPUS" "")
    if(IDSPAN_FUZZ)
        add_executable(${name} ${name}.c)
        target_link_options(${name} PRIVATE -fsanitize=fuzzer)
    else()
        add_executable(${name} ${name}.c "${PROJECT_SOURCE_DIR}/tests/support/replay.c")
        idspan_test_entry(${name} fuzz 60 "${PROJECT_SOURCE_DIR}/data/corpus/${arg_CORPUS}")
    endif()
    idspan_test_program(${name})
endfunction()
