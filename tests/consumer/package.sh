#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# package.sh CMAKE SOURCE_DIR WORK_DIR
#
# Makes the Debian package from a release build, installs it into a system folder of its own, runs
# the tool from there, and removes it: nothing may be left.
set -euo pipefail

cmake=$1
source=$2
work=$3

rm -rf "$work"
mkdir -p "$work/root/var/lib/dpkg/"{info,updates,triggers} "$work/root/tmp"
touch "$work/root/var/lib/dpkg/"{status,available}
"$cmake" -S "$source" -B "$work/build" -C "$source/lib/cmake/presets/release.cmake" \
    >"$work/build.log"
"$cmake" --build "$work/build" --parallel 2 >>"$work/build.log"
(cd "$work/build" && cpack -G DEB >>"$work/build.log")
package=$(find "$work/build" -maxdepth 1 -name '*.deb')
dpkg-deb --info "$package"
dpkg-deb --contents "$package" >"$work/contents"
awk '$2 != "root/root" { print "owned by " $2 ": " $6; bad = 1 } END { exit bad }' "$work/contents"

# The libraries that it depends on are those of the running system.
in_root() {
    PATH=$PATH:/sbin:/usr/sbin dpkg --root="$work/root" --force-not-root --force-depends \
        --force-script-chrootless --log="$work/dpkg.log" "$@"
}
before=$(cd "$work/root" && find . -path ./var/lib/dpkg -prune -o -print | sort)
in_root --install "$package"
root=$work/root/usr
LD_LIBRARY_PATH=$root/lib "$root/bin/idspan" count "$root/share/idspan/varieties/jordan.pres" \
    --degree 4 --format csv >"$work/got"
printf 'degree,types,monomials\n4,2,15\n' | diff - "$work/got" # OEIS A001190, A001147
[ -e "$root/lib/libidspan.so" ]
in_root --purge idspan
after=$(cd "$work/root" && find . -path ./var/lib/dpkg -prune -o -print | sort)
diff <(printf '%s\n' "$before") <(printf '%s\n' "$after")
