#!/bin/sh
# From a bare Debian 12 to a verdict: installs what is missing, builds into build/, drives the example climb.
#
# Usage: sh sim/quickstart.sh
# Ends with the status of the run: 0 survives, 1 does not, 2 input, 3 numerics; 4 when it came to no run.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
root=$(cd "$(dirname "$0")/.." && pwd) || exit 4
cd "$root" || exit 4

sh sim/packages.sh build || exit 4

mkdir -p build || exit 4
log=build/quickstart.log
echo "Building into build/ ..."
if ! { cmake -S . -B build -DCMAKE_BUILD_TYPE=Release && cmake --build build -j "$(nproc)"; } >"$log" 2>&1; then
    tail -n 40 "$log" >&2
    echo "quickstart.sh: the build failed; all of it stands in $log" >&2
    exit 4
fi

echo "build/swirlpot run docs/examples/harrowmoor.json"
echo
build/swirlpot run docs/examples/harrowmoor.json
