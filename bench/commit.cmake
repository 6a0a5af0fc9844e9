# SPDX-License-Identifier: BSD-2-Clause
#
# cmake -DSOURCE=folder -DOUTPUT=file -P commit.cmake: writes a header that names the commit.
execute_process(
    COMMAND git -C "${SOURCE}" describe --always --dirty --abbrev=10
    OUTPUT_VARIABLE commit
    OUTPUT_STRIP_TRAILING_WHITESPACE ERROR_QUIET
    RESULT_VARIABLE result
)
if(NOT result EQUAL 0)
    set(commit "unknown")
endif()
file(CONFIGURE OUTPUT "${OUTPUT}" CONTENT "#define BENCH_COMMIT \"${commit}\"\n" @ONLY)
