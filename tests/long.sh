#!/bin/sh
# The long versions of the tests: an hour or so, now and then, and before a release.
#
# Usage: sh tests/long.sh [fuzz SECONDS] [drives N]
#   fuzz SECONDS   how long each fuzz target searches; default 300
#   drives N       random designs for the invariants; default 100000
# The last line reads "N passed, N failed, N skipped". 0: none failed; 1: some did; 2: it could not begin.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
cd "$(dirname "$0")/.." || exit 2
seconds=300 drives=100000
while [ $# -gt 0 ]; do
    case $1 in
    fuzz) seconds=${2:?fuzz SECONDS} ;;
    drives) drives=${2:?drives N} ;;
    *)
        sed -n 's/^# \{0,1\}//; 2,7p' "$0"
        exit 2
        ;;
    esac
    shift 2
done
. tests/tally.sh
. tests/stages.sh

sh sim/packages.sh build tests lint || exit 2
comma_locale

say "Build: gcc, release"
build_release || {
    tally_close
    exit
}

say "Lint"
tally_script clang-tidy sh tests/lint.sh tidy "$out/release"
tally_script cppcheck sh tests/lint.sh cppcheck "$out/release"

if [ -x "$out/release/tests/test_invariants" ]; then
    say "Invariants over $drives random drives"
    SP_DRIVES=$drives TALLY_TIMEOUT=20000 tally_cmocka "invariants, $drives drives" "$out/release/tests/test_invariants"
    SP_DRIVES=$drives TALLY_TIMEOUT=20000 tally_cmocka "whole cars, $drives drives" "$out/release/tests/test_whole_car"
fi

say "Planted faults: each must turn an outside test red"
TALLY_TIMEOUT=3000 tally_script "planted faults" $python tests/faults/run.py

say "Valgrind"
memcheck version 0 --version
memcheck help 0 --help
memcheck duct 0 duct docs/examples/harrowmoor.json --speed "30 m/s" --speed "0 m/s" --heat "60 kW" --fan on --json
for case in docs/examples/harrowmoor.json docs/examples/nedc.json; do
    memcheck "show $case" 0 show "$case"
    memcheck "run $case" 0 run "$case" -o "$out/valgrind"
done
memcheck "a bad value" 2 run docs/examples/harrowmoor.json --set duct.exit.area=much
memcheck "no such case" 2 run docs/examples/none.json
memcheck "no such trace" 2 run docs/examples/harrowmoor.json --set 'drive[1].trace=none.csv'
for program in "$out"/release/tests/test_*; do
    case $program in */test_number | */test_invariants | */test_whole_car | */test_logs) continue ;; esac # hours under valgrind
    tally_status "valgrind $(basename "$program")" 0 valgrind -q --error-exitcode=99 --leak-check=full \
        --errors-for-leak-kinds=definite --suppressions=tests/valgrind.supp "$program"
done

say "Build: fuzzers"
if build_fuzz; then
    say "Fuzzing, $seconds s a target"
    fuzz "$seconds"
fi

say "Done"
tally_close
