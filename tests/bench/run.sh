#!/bin/sh
# How fast it is, how much memory it takes, and how exact the default tolerance is; all from one run.
#
# Usage: sh tests/bench/run.sh BUILD [HOURS]
#   BUILD   a Release build with -DSWIRLPOT_TESTS=ON, such as build-tests/release
#   HOURS   length of the long log; default 24. The folder for temporary files needs 250 MB.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
build=${1:?usage: run.sh BUILD [HOURS]}
root=$(cd "$(dirname "$0")/../.." && pwd) || exit 2
build=$(cd "$build" && pwd) || exit 2
work=$(mktemp -d) || exit 2
trap 'rm -rf "$work"' EXIT

sed -n 's/^model name[^:]*: /machine: /p' /proc/cpuinfo 2>/dev/null | head -n 1
"$build/swirlpot" --version
"$build/tests/bench_drive" "$root/docs/examples/harrowmoor.json" "$root/docs/examples/nedc.json" \
    "$root/docs/examples/stonemere-race.json" >"$work/drive" || exit 1
cat "$work/drive"

# The restatement in SciPy at about the same accuracy, on the same drive.
python=/usr/bin/python3
[ -x $python ] || python=python3
if $python -c 'import scipy' 2>/dev/null; then
    $python -B "$root/tests/outside/twin.py" --bench "$build/swirlpot" >"$work/twin" && cat "$work/twin"
    ours=$(sed -n 's/.* s in \([0-9.]*\) ms:.*/\1/p' "$work/drive" | head -n 1)
    theirs=$(sed -n "s/.*default.*: \([0-9.]*\) s, coolant off.*/\1/p" "$work/twin" | head -n 1)
    [ -z "$theirs" ] || awk "BEGIN { printf \"  ratio to it                   %.0f\\n\", 1000 * $theirs / $ours }"
fi
"$build/tests/bench_trace" "$root/drivecycles/stonemere.csv" "$root/docs/examples/corvid.json" \
    "$build/swirlpot" "$work" "${2:-24}"
