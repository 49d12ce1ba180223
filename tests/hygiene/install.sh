#!/bin/sh
# What `cmake --install` lays down is enough for a stranger: a small program finds it by pkg-config, links shared
# and static, and prints the page of keys, which is docs/case-file.md.
#
# Usage: install.sh ROOT BUILD
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
root=${1:?usage: install.sh ROOT BUILD}
build=${2:?usage: install.sh ROOT BUILD}
work=$(mktemp -d) || exit 2
trap 'rm -rf "$work"' EXIT
bad=0

cmake --install "$build" --prefix "$work/prefix" >"$work/log" 2>&1 || { cat "$work/log"; exit 1; }
file=$(find "$work/prefix" -name swirlpot.pc)
[ -n "$file" ] || { echo "install.sh: no swirlpot.pc installed"; exit 1; }

ask() { # ask OPTIONS...: the file names the prefix it was made for; here it is another
    pkg-config --define-variable=prefix="$work/prefix" "$@" "$file"
}
[ "$(ask --modversion)" = "$(sed -n 's/^project(swirlpot VERSION \([0-9.]*\).*/\1/p' "$root/CMakeLists.txt")" ] ||
    { echo "install.sh: swirlpot.pc has version $(ask --modversion)"; bad=1; }
lib=$(ask --variable=libdir)

compile() { # compile OUT LIBRARIES...
    out=$1
    shift
    gcc -std=c11 -Wall -Wextra -Wpedantic -Werror $(ask --cflags) "$root/tests/hygiene/client.c" -o "$out" "$@"
}
compile "$work/shared" $(ask --libs) || bad=1
compile "$work/static" "$lib/libswirlpot.a" $(ask --libs --static | sed 's/-lswirlpot//') || bad=1
LD_LIBRARY_PATH="$lib" "$work/shared" >"$work/page" 2>"$work/log" ||
    { cat "$work/log"; echo "install.sh: the shared client failed"; bad=1; }
"$work/static" >"$work/page2" 2>"$work/log" ||
    { cat "$work/log"; echo "install.sh: the static client failed"; bad=1; }
cmp "$work/page" "$work/page2" || bad=1
cmp "$work/page" "$root/docs/case-file.md" ||
    { echo "install.sh: docs/case-file.md is not what the program writes"; bad=1; }

if [ -e "$work/prefix/bin/swirlpot" ]; then
    "$work/prefix/bin/swirlpot" --version >/dev/null || { echo "install.sh: the installed command fails"; bad=1; }
else
    echo "install.sh: no command installed"
    bad=1
fi
exit $bad
