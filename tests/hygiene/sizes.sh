#!/bin/sh
# How long files and functions are. Prints a few lines; fails on what has grown out of hand.
#
# Usage: sizes.sh ROOT
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
cd "${1:?usage: sizes.sh ROOT}" || exit 2
file_most=700     # lines of a file of the library or the command
test_most=1000    # of a test
function_most=120 # lines of a function of the library or the command

work=$(mktemp -d) || exit 2
trap 'rm -rf "$work"' EXIT

find sim include tests \( -name '*.c' -o -name '*.h' \) -exec wc -l {} + | awk '$2 != "total"' |
    sort -rn >"$work/files"
awk -v most=$file_most -v test=$test_most '
    { limit = $2 ~ /^tests\// ? test : most
      if ($1 > limit) { print $2 " has " $1 " lines, more than " limit; bad = 1 } }
    END { exit bad }' "$work/files"
bad=$?

# A function begins at its "{" in the first column and ends at its "}" there; its name is the last one before a "("
# in the lines above.
find sim -name '*.c' -exec awk '
    FNR == 1 { name = ""; inside = 0 }
    /^[a-z].*\(/ { name = $0; sub(/\(.*/, "", name); sub(/.*[ *]/, "", name) }
    /^[a-z].*\).*\{.*\}$/ { print 1, name, FILENAME }
    /^\{/ { start = FNR; inside = 1 }
    /^\}/ { if (inside) print FNR - start + 1, name, FILENAME; inside = 0 }' {} + | sort -rn >"$work/functions"
awk -v most=$function_most '$1 > most { print $3 ": " $2 " has " $1 " lines, more than " most; bad = 1 }
    END { exit bad }' "$work/functions" || bad=1

awk '$2 ~ /^sim\/.*\.c$/ { n[++k] = $1; s += $1 }
    END { printf "sim: %d files, %d lines; a file has %d at the median, %d at most\n",
          k, s, n[int((k + 1) / 2)], n[1] }' "$work/files"
awk '{ n[++k] = $1; name[k] = $2 }
    END { printf "sim: %d functions; lines: median %d, nine in ten up to %d, longest %d (%s), then %d (%s)\n",
          k, n[int((k + 1) / 2)], n[int(k / 10) + 1], n[1], name[1], n[2], name[2] }' "$work/functions"
exit $bad
