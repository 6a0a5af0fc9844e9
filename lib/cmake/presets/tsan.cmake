# SPDX-License-Identifier: BSD-2-Clause
# Thread sanitizer.
include("${CMAKE_CURRENT_LIST_DIR}/dev.cmake")
set(CMAKE_C_FLAGS_DEBUG "-O1 -g" CACHE STRING "" FORCE)
set(IDSPAN_SANITIZE "thread" CACHE STRING "")
