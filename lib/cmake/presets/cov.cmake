# SPDX-License-Identifier: BSD-2-Clause
# Coverage with gcov.
include("${CMAKE_CURRENT_LIST_DIR}/dev.cmake")
set(CMAKE_C_FLAGS_DEBUG "-O0 -g" CACHE STRING "" FORCE)
set(IDSPAN_COVERAGE ON CACHE BOOL "")
