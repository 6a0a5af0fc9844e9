# SPDX-License-Identifier: BSD-2-Clause
# For daily work: optimised so that tests are quick, assertions on, warnings are errors.
set(CMAKE_BUILD_TYPE Debug CACHE STRING "")
set(CMAKE_C_FLAGS_DEBUG "-O2 -g" CACHE STRING "")
set(IDSPAN_WERROR ON CACHE BOOL "")
set(IDSPAN_TESTS ON CACHE BOOL "")
