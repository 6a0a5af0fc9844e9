#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# consumer.sh CMAKE BUILD_DIR WORK_DIR
#
# Installs the build below WORK_DIR, moves the installation to another place, and builds and runs
# the programs beside this script against it: by CMake package and by pkg-config, with the shared
# and with the static library, as C11 and as C++17. They must print what expected/ says, and the
# program in README.md what README.md says. Then the uninstall target must leave nothing.
set -euo pipefail

here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
cmake=$1
build=$2
work=$3

rm -rf "$work"
mkdir -p "$work/bin"

# ---- install, move --------------------------------------------------------------------------

"$cmake" --install "$build" --prefix "$work/first" >"$work/install.log"
for file in bin/idspan share/man/man1/idspan.1 share/man/man3/idspan.3 share/man/man5/idspan.5 \
    share/bash-completion/completions/idspan share/idspan/varieties/jordan.pres \
    share/idspan/rank-table.sbatch; do
    if [ ! -s "$work/first/$file" ]; then
        printf 'the installation has no %s\n' "$file" >&2
        exit 1
    fi
done
mv "$work/first" "$work/moved"
prefix=$work/moved
pc=$(find "$prefix" -name idspan.pc)
libdir=$(dirname "$(dirname "$pc")")
PKG_CONFIG_PATH=$(dirname "$pc")
export PKG_CONFIG_PATH LD_LIBRARY_PATH=$libdir

soname='SONAME.*libidspan\.so\.[0-9]*\.[0-9]*\]'
if ! readelf -d "$libdir/libidspan.so" | grep "$soname" >/dev/null; then
    printf 'the shared library has no soname of the form libidspan.so.MAJOR.MINOR\n' >&2
    exit 1
fi

# ---- the programs -----------------------------------------------------------------------------

"$cmake" -S "$here/program" -B "$work/package" -DCMAKE_PREFIX_PATH="$prefix" >"$work/package.log"
"$cmake" --build "$work/package" --parallel 2 >>"$work/package.log"

words() {
    read -ra flags <<<"$(pkg-config "$@")"
}
warnings=(-Wall -Wextra -Wpedantic -Werror)
for name in enumerate follows ranks budget; do
    packages=(idspan)
    [ "$name" != enumerate ] || packages+=(gmp) # it includes <idspan/gmp.h>
    for language in "c -std=c11" "c++ -std=c++17"; do
        read -r compiler standard <<<"$language"
        if [ "$compiler" = c++ ] && ! command -v c++ >/dev/null; then
            printf 'no C++ compiler: the programs are tried as C only\n'
            continue
        fi
        source=(-x "$compiler" "$here/program/$name.c" -x none)
        [ "$compiler" != c ] || compiler=cc
        words --cflags --libs "${packages[@]}"
        "$compiler" "$standard" "${warnings[@]}" -o "$work/bin/${name}_shared_$compiler" \
            "${source[@]}" "${flags[@]}"
        words --static --cflags --libs "${packages[@]}"
        "$compiler" "$standard" "${warnings[@]}" -DIDS_STATIC_DEFINE \
            -o "$work/bin/${name}_static_$compiler" \
            "${source[@]}" "${flags[@]/#-lidspan/-l:libidspan.a}"
    done
done

runs=0
for program in "$work"/package/*_{shared,static}_* "$work"/bin/*; do
    name=$(basename "$program")
    if [ ! -f "$program" ] || [ ! -x "$program" ]; then
        continue
    fi
    "$program" >"$work/got" 2>"$work/messages" || {
        printf '%s failed: %s\n' "$name" "$(cat "$work/messages")" >&2
        exit 1
    }
    diff "$here/expected/${name%%_*}" "$work/got" || {
        printf '%s printed something else\n' "$name" >&2
        exit 1
    }
    runs=$((runs + 1))
done
printf '%d programs built and run\n' "$runs"
[ "$runs" -ge 16 ]

sed -n '/^```c$/,/^```$/{/^```/d;p}' "$here/../../README.md" >"$work/readme.c"
words --cflags --libs idspan
cc -std=c11 -Wall -Wextra -Werror -o "$work/readme" "$work/readme.c" "${flags[@]}"
sed -n '/^    \$ \.\/ranks$/,/^$/{/^    [^$]/s/^    //p}' "$here/../../README.md" >"$work/expected"
"$work/readme" >"$work/got"
cmp "$work/expected" "$work/got"

# ---- uninstall --------------------------------------------------------------------------------

DESTDIR=$work/stage "$cmake" --install "$build" --prefix /opt/idspan >>"$work/install.log"
[ -x "$work/stage/opt/idspan/bin/idspan" ]
printf 'of another package\n' >"$work/stage/opt/idspan/bin/other"
DESTDIR=$work/stage "$cmake" --build "$build" --target uninstall >>"$work/install.log"
left=$(cd "$work/stage/opt/idspan" && find . \( -type f -o -type l -o -name 'idspan*' \) | sort)
if [ "$left" != ./bin/other ]; then
    printf 'uninstall left, beside the file of another package:\n%s\n' "$left" >&2
    exit 1
fi
