#!/bin/sh
# All tests: installs what is missing, builds three ways into build-tests/, runs everything that takes minutes.
#
# Usage: sh tests/run.sh          all of it; what every change must pass
#        sh tests/run.sh quick    one build, with unit, outside and command-line tests only
# The last line reads "N passed, N failed, N skipped". 0: none failed; 1: some did; 2: it could not begin.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
cd "$(dirname "$0")/.." || exit 2
case ${1:-all} in
all | quick) ;;
*)
    sed -n 's/^# \{0,1\}//; 2,7p' "$0"
    exit 2
    ;;
esac
. tests/tally.sh
. tests/stages.sh

sh sim/packages.sh build tests || exit 2
comma_locale

say "Build: gcc, release"
build_release || {
    tally_close
    exit
}
say "Unit and outside tests, gcc release"
unit_and_outside release
python_outside release
say "Command line, gcc release"
command_line release
[ "${1:-all}" = all ] || {
    echo
    tally_close
    exit
}

say "How the tree and the library are made"
hygiene release

say "Build: clang, debug, address and undefined-behaviour sanitizers"
if build_sanitize; then
    say "Unit and outside tests under the sanitizers"
    unit_and_outside sanitize
    python_outside sanitize
    say "Command line under the sanitizers"
    command_line sanitize
fi

say "Build: fuzzers"
if build_fuzz; then
    say "Fuzzing"
    fuzz 20
fi

say "Valgrind"
memcheck version 0 --version
memcheck duct 0 duct docs/examples/harrowmoor.json --speed "30 m/s" --heat "60 kW" --fan on
memcheck run 0 run docs/examples/harrowmoor.json --json
memcheck "a bad value" 2 run docs/examples/harrowmoor.json --set duct.exit.area=much
memcheck "no such case" 2 run docs/examples/none.json

say "Done"
tally_close
