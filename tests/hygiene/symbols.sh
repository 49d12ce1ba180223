#!/bin/sh
# The library keeps no state and shows no more than its headers: no symbol of ours lies where it could be
# written, and the shared library exports just the functions declared SP_API.
#
# Usage: symbols.sh ROOT BUILD    BUILD: without sanitizers, which bring data of their own
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
root=${1:?usage: symbols.sh ROOT BUILD}
build=${2:?usage: symbols.sh ROOT BUILD}
work=$(mktemp -d) || exit 2
trap 'rm -rf "$work"' EXIT
bad=0

# Tables with pointers in them lie in .data.rel.ro: written by the loader once, then locked.
objdump -t "$build/libswirlpot.a" >"$work/table" || exit 2
awk '/^[0-9a-f]+ / {
        section = ""
        for (i = 2; i <= NF; i++) if ($i ~ /^[.*]/) { section = $i; break }
        if (section ~ /^\.data\.rel\.ro/ || $NF == section) next
        if (section ~ /^\.(data|bss|tdata|tbss|sdata|sbss)/ || section == "*COM*") print $NF " in " section
    }' "$work/table" >"$work/mutable"
if [ -s "$work/mutable" ]; then
    echo "data that can be written:"
    cat "$work/mutable"
    bad=1
fi
[ "$(wc -l <"$work/table")" -gt 200 ] || { echo "symbols.sh: hardly a symbol in $build/libswirlpot.a"; bad=1; }

nm -D --defined-only "$build/libswirlpot.so" | awk '{ print $3 }' | LC_ALL=C sort >"$work/exported"
cat "$root"/include/swirlpot/*.h | grep -v '^#' | tr '\n' ' ' | tr ';' '\n' |
    sed -n 's/.*SP_API \([^(]*[^a-zA-Z0-9_(]\)\([a-z0-9_]*\)(.*/\2/p' | LC_ALL=C sort >"$work/declared"
if ! diff "$work/declared" "$work/exported" >"$work/difference"; then
    echo "declared SP_API (<) against exported (>):"
    cat "$work/difference"
    bad=1
fi
[ -s "$work/declared" ] || { echo "symbols.sh: no SP_API function found"; bad=1; }
exit $bad
