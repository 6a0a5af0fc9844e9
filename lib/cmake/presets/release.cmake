# SPDX-License-Identifier: BSD-2-Clause
# What users install.
set(CMAKE_BUILD_TYPE Release CACHE STRING "")
set(CMAKE_C_FLAGS_RELEASE "-O2 -DNDEBUG" CACHE STRING "")
set(IDSPAN_TESTS OFF CACHE BOOL "")
