#!/bin/sh
# Static checkers over the library and the command; what they are asked stands in .clang-tidy and below.
#
# Usage: lint.sh tidy|cppcheck BUILD    BUILD: a folder with compile_commands.json
# 0: quiet.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
cd "$(dirname "$0")/.." || exit 2
build=${2:?usage: lint.sh tidy|cppcheck BUILD}
case $1 in
tidy)
    found=$(find sim -name '*.c' | LC_ALL=C sort |
        xargs -n 8 -P "$(nproc)" clang-tidy --quiet -p "$build" 2>/dev/null | grep -E ': (warning|error):' | sort -u)
    ;;
cppcheck)
    # Switched off: missingIncludeSystem speaks of headers it is not shown. Then, file by file:
    #   schedule_rows.c, memleak            the copy is kept in the table, within a compound literal
    #   trace_finish.c, memleakOnRealloc    when the block cannot be made smaller, the old one stays in its place
    #   jacobian.c, invalidPointerCast      a member of a struct of doubles by its offset
    found=$(cppcheck --std=c11 --enable=warning,performance,portability --inline-suppr --quiet -j "$(nproc)" \
        --suppress=missingIncludeSystem \
        --suppress=memleak:sim/drive/schedule_rows.c --suppress=memleakOnRealloc:sim/drive/trace_finish.c \
        --suppress=invalidPointerCast:sim/circuit/jacobian.c \
        -DSP_VERSION='"0"' -I include -I sim sim 2>&1 |
        grep -E ': (error|warning|performance|portability):')
    ;;
*)
    echo "usage: lint.sh tidy|cppcheck BUILD" >&2
    exit 2
    ;;
esac
[ -z "$found" ] && exit 0
printf '%s\n' "$found" | sed "s|$PWD/||"
exit 1
