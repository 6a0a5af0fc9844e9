# SPDX-License-Identifier: BSD-2-Clause
# libFuzzer targets; clang only. Every other preset replays data/corpus instead.
include("${CMAKE_CURRENT_LIST_DIR}/dev.cmake")
set(CMAKE_C_COMPILER clang CACHE STRING "")
set(CMAKE_C_FLAGS_DEBUG "-O1 -g" CACHE STRING "" FORCE)
set(IDSPAN_SANITIZE "address,undefined,fuzzer-no-link" CACHE STRING "")
set(IDSPAN_FUZZ ON CACHE BOOL "")
