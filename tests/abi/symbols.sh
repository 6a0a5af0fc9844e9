#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# symbols.sh ARCHIVE ASSERTIONS   (ASSERTIONS: 1 when the build has them, else 0)
#
# What the objects of the static library refer to and define: nothing that ends the process,
# prints, reads the environment, jumps, or has state of the whole process; no writable data; no
# global name without our prefix, which could meet another one in a static program.
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
# shellcheck source-path=SCRIPTDIR source=common.sh
. "$here/common.sh"

archive=$1
assertions=$2

forbidden=(
    abort exit _exit _Exit quick_exit raise kill
    printf vprintf puts putchar putc fputs fputc perror stdout stderr stdin
    rand srand random srandom drand48
    setjmp _setjmp longjmp _longjmp siglongjmp
    getenv secure_getenv setenv putenv setlocale signal sigaction
    lgamma lgammaf lgammal strtok strerror gmtime localtime asctime ctime
)
# Process-wide hooks of the libraries below belong to the program, never to us.
hooks=(
    flint_set_abort flint_set_throw flint_set_num_threads __flint_set_memory_functions
    __gmp_set_memory_functions
)
if [ "$assertions" = 0 ]; then
    forbidden+=(__assert_fail)
fi

pattern=
for name in "${forbidden[@]}"; do
    pattern+="|$name|__${name}_chk"
done
forbidden_pattern="^(${pattern#|})\$"
pattern=$(printf '|%s' "${hooks[@]}")
hooks_pattern="^(${pattern#|})\$"

# Lines "object symbol". The border to FLINT takes in inline functions of FLINT's headers, so
# it may refer to what those do; the hooks are forbidden there too.
undefined=$(nm -A -u "$archive" | awk '{ sub(/:$/, "", $1); n = split($1, part, ":")
                                         print part[n], $NF }')
while read -r object symbol; do
    if [[ $symbol =~ $hooks_pattern ]]; then
        complain "$object refers to the hook $symbol"
    elif [[ $object != flint_border.* && $symbol =~ $forbidden_pattern ]]; then
        complain "$object refers to $symbol"
    fi
done <<<"$undefined"

# .data.rel.ro is constant data with addresses in it: read-only once the program is loaded.
writable=$(objdump -t "$archive" | awk '
    /file format/ { object = $1 }
    NF >= 4 && $(NF - 2) ~ /^(\.data|\.bss|\.tdata|\.tbss|\*COM\*)/ &&
        $(NF - 2) !~ /^\.data\.rel\.ro/ && $(NF - 1) !~ /^0+$/ { print object, $NF }')
while read -r object symbol; do
    if [ -n "$object" ]; then
        complain "$object has writable data: $symbol"
    fi
done <<<"$writable"

while read -r name; do
    [[ -z $name || $name == ids_* || $name == idsi_* ]] || complain "global name $name"
done < <(nm -g --defined-only "$archive" | awk 'NF == 3 { print $3 }')
finish
