#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# consumer.sh CMAKE BUILD_DIR WORK_DIR
#
# Installs the build below WORK_DIR, moves the installation to another place, and builds and runs
# the program beside this script four times: by CMake package and by pkg-config, with the shared
# and with the static library. The program in README.md must print what README.md says.
set -euo pipefail

here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
cmake=$1
build=$2
work=$3

rm -rf "$work"
mkdir -p "$work"
"$cmake" --install "$build" --prefix "$work/first" >"$work/install.log"
mv "$work/first" "$work/moved"
prefix=$work/moved

"$cmake" -S "$here/program" -B "$work/package" -DCMAKE_PREFIX_PATH="$prefix" >"$work/package.log"
"$cmake" --build "$work/package" >>"$work/package.log"
"$work/package/with_shared"
"$work/package/with_static"

pc=$(find "$prefix" -name idspan.pc)
libdir=$(dirname "$(dirname "$pc")")
PKG_CONFIG_PATH=$(dirname "$pc")
export PKG_CONFIG_PATH
words() {
    read -ra flags <<<"$(pkg-config "$@" idspan)"
}
words --cflags --libs
cc -std=c11 -o "$work/pc_shared" "$here/program/main.c" "${flags[@]}"
LD_LIBRARY_PATH=$libdir "$work/pc_shared"
words --static --cflags --libs
cc -std=c11 -DIDS_STATIC_DEFINE -o "$work/pc_static" "$here/program/main.c" \
    "${flags[@]/#-lidspan/-l:libidspan.a}"
"$work/pc_static"

sed -n '/^```c$/,/^```$/{/^```/d;p}' "$here/../../README.md" >"$work/ranks.c"
words --cflags --libs
cc -std=c11 -Wall -Wextra -Werror -o "$work/ranks" "$work/ranks.c" "${flags[@]}"
sed -n '/^    \$ \.\/ranks$/,/^$/{/^    [^$]/s/^    //p}' "$here/../../README.md" >"$work/expected"
LD_LIBRARY_PATH=$libdir "$work/ranks" >"$work/got"
cmp "$work/expected" "$work/got"

soname='SONAME.*libidspan\.so\.[0-9]*\.[0-9]*\]'
if ! readelf -d "$libdir/libidspan.so" | grep "$soname" >/dev/null; then
    printf 'the shared library has no soname of the form libidspan.so.MAJOR.MINOR\n' >&2
    exit 1
fi
