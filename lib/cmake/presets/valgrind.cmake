# SPDX-License-Identifier: BSD-2-Clause
# Every test program under valgrind; run ctest with CK_FORK=no.
include("${CMAKE_CURRENT_LIST_DIR}/dev.cmake")
set(IDSPAN_TEST_WRAPPER "valgrind;--quiet;--leak-check=full;--error-exitcode=99" CACHE STRING "")
