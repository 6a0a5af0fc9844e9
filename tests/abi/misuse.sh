#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# misuse.sh CC SOURCE_INCLUDE BUILD_INCLUDE
#
# Prints C for test_misuse.c: a function that calls every public function with nothing but NULL and
# 0, and then with a context and nothing else. What can fail must refuse with IDS_ERR_ARG, what
# gives a pointer or a number of an object must give none, and nothing may crash.
set -euo pipefail
export LC_ALL=C

compiler=$1
source_include=$2
build_include=$3
for header in "$source_include"/idspan/*.h; do
    printf '#include <idspan/%s>\n' "$(basename "$header")"
done
cat <<'END'

size_t misuse(ids_ctx *context)
{
    size_t functions = 0;

END
for header in "$source_include"/idspan/*.h; do
    printf '#include <idspan/%s>\n' "$(basename "$header")"
done |
    "$compiler" -std=c11 -E -P -DIDS_API=IDS_API_MARK -I"$source_include" -I"$build_include" \
        -x c - | tr '\n' ' ' | tr ';' '\n' | awk '
    # Calls that are not about an object, or for which NULL has a meaning of its own.
    BEGIN {
        split("ids_follows_certainty ids_presentation_equal ids_algebra_equal ids_status_name " \
              "ids_status_text ids_ctx_message ids_ctx_memory ids_ctx_last_place " \
              "ids_automorphisms_structure ids_partition_count ids_version", list, " ")
        for (i in list) other[list[i]] = 1
    }
    !/IDS_API_MARK/ { next }
    {
        sub(/.*IDS_API_MARK */, "")
        fails = /warn_unused_result/ || /^ids_status ids_ctx_last_status/
        gsub(/__attribute__ *\(\([^)]*\)\) */, "")
        match($0, /ids_[a-z0-9_]+ *\(/)
        name = substr($0, RSTART, RLENGTH - 1)
        gsub(/ /, "", name)
        result = substr($0, 1, RSTART - 1)
        parameters = substr($0, RSTART + RLENGTH)
        sub(/\) *$/, "", parameters)
        if (parameters ~ /^ *void *$/) parameters = ""
        count = split(parameters, part, ",")
        plain = with = ""
        contexts = 0
        for (i = 1; i <= count; i++) {
            separator = i > 1 ? ", " : ""
            pointer = part[i] ~ /[*\[]/ || part[i] ~ /_fn |mpz_t/
            zero = pointer ? "NULL" : "0"
            if (part[i] ~ /^ *ids_ctx \*[a-z]/) {
                contexts++
                with = with separator "context"
            } else {
                with = with separator zero
            }
            plain = plain separator zero
        }
        printf "    functions++;\n"
        emit(plain)
        if (contexts && name != "ids_ctx_free" && name !~ /^ids_ctx_cancel/) emit(with)
    }
    function emit(arguments,    call) {
        call = name "(" arguments ")"
        if (fails) printf "    REFUSED(%s);\n", call
        else if (result ~ /^ *void *$/) printf "    %s;\n", call
        else if (name in other) printf "    (void)%s;\n", call
        else printf "    NOTHING(%s);\n", call
    }
    '
cat <<'END'
    return functions;
}
END
