#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# release.sh CMAKE SOURCE_DIR WORK_DIR
#
# Builds with the release preset; reads the symbols of that archive, in which assertions would be
# an abort; and lets a foreign program use it.
set -euo pipefail

here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
"$1" -S "$2" -B "$3/build" -C "$2/lib/cmake/presets/release.cmake"
"$1" --build "$3/build" --parallel 2
"$here/../abi/symbols.sh" "$3/build/lib/libidspan.a" 0
"$here/consumer.sh" "$1" "$3/build" "$3/work"
