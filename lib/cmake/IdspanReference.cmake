# SPDX-License-Identifier: BSD-2-Clause
#
# Target `reference`: the public headers as HTML in BUILD/reference/html. Warnings of Doxygen are
# errors. The test doc_reference builds it.
find_program(IDSPAN_DOXYGEN NAMES doxygen)
mark_as_advanced(IDSPAN_DOXYGEN)
if(IDSPAN_DOXYGEN)
    configure_file(
        "${CMAKE_CURRENT_LIST_DIR}/Doxyfile.in" "${PROJECT_BINARY_DIR}/Doxyfile" @ONLY
    )
    add_custom_target(
        reference COMMAND "${IDSPAN_DOXYGEN}" "${PROJECT_BINARY_DIR}/Doxyfile" VERBATIM
    )
    if(IDSPAN_TESTS)
        add_test(NAME doc_reference COMMAND "${IDSPAN_DOXYGEN}" "${PROJECT_BINARY_DIR}/Doxyfile")
        set_tests_properties(doc_reference PROPERTIES LABELS abi TIMEOUT 120)
    endif()
endif()
