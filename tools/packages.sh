# SPDX-License-Identifier: BSD-2-Clause
# shellcheck shell=bash
#
# Sourced by tools/start and tests/run: makes sure that what a build needs is there.

# Is the thing there that a Debian package would bring? Asks for the thing, not for the package,
# so that other ways to install it count as well.
is_there() {
    case $1 in
    build-essential) command -v cc && command -v c++ && command -v make ;;
    cmake | pkg-config | valgrind | clang-tidy | cppcheck | shellcheck | groff) command -v "$1" ;;
    libgmp-dev) cc -E -x c - <<<'#include <gmp.h>' ;;
    libflint-dev) cc -E -x c - <<<'#include <flint/flint.h>' ;;
    check) pkg-config --exists check ;;
    *) false ;;
    esac >/dev/null 2>&1
}

# need_packages NAME...: installs what is missing, or says what to do and ends the script.
need_packages() {
    local package missing=() as_root=()
    for package in "$@"; do
        is_there "$package" || missing+=("$package")
    done
    if [ "${#missing[@]}" -eq 0 ]; then
        return
    fi
    if [ "$(id -u)" -ne 0 ]; then
        as_root=(sudo)
    fi
    if ! command -v apt-get >/dev/null; then
        printf 'Missing: %s (names of Debian packages).\n' "${missing[*]}" >&2
        printf 'This system has no apt-get: please install their equivalents and start again.\n' >&2
        exit 1
    fi
    if [ "${#as_root[@]}" -gt 0 ] && ! command -v sudo >/dev/null; then
        printf 'Missing: %s. There is no sudo here, so please run as root:\n' "${missing[*]}" >&2
        printf '    apt-get install %s\n' "${missing[*]}" >&2
        exit 1
    fi
    printf 'Installing %s\n' "${missing[*]}"
    # Package lists that are a little old do no harm, so a failed update is not the end.
    "${as_root[@]}" apt-get update -q || printf 'apt-get update failed; trying anyway\n' >&2
    if ! "${as_root[@]}" env DEBIAN_FRONTEND=noninteractive \
        apt-get install -q -y --no-install-recommends "${missing[@]}"; then
        printf 'apt-get could not install %s\n' "${missing[*]}" >&2
        exit 1
    fi
}

# configure SOURCE BUILD PRESET: a build folder for a preset, with ninja where there is one.
configure() {
    local source=$1 build=$2 options=(-C "$1/lib/cmake/presets/$3.cmake")
    if [ -e "$build/CMakeCache.txt" ]; then
        # A tree that was moved or copied brings a cache that belongs to the old place.
        grep -qxF "CMAKE_HOME_DIRECTORY:INTERNAL=$source" "$build/CMakeCache.txt" ||
            options+=(--fresh)
    fi
    if [ ! -e "$build/CMakeCache.txt" ] || [ "${options[-1]}" = --fresh ]; then
        if command -v ninja >/dev/null; then
            options+=(-G Ninja)
        else
            options+=(-G "Unix Makefiles")
        fi
    fi
    cmake -S "$source" -B "$build" "${options[@]}"
}
