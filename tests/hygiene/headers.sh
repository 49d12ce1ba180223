#!/bin/sh
# Each public header compiles alone, as C and (where there is a compiler for it) as C++.
#
# Usage: headers.sh ROOT
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
root=${1:?usage: headers.sh ROOT}
bad=0

compile() { # compile COMPILER OPTIONS... HEADER
    "$@" -I "$root/include" -Wall -Wextra -Wpedantic -Werror -fsyntax-only || { echo "failed: $*"; bad=1; }
}

for header in "$root"/include/swirlpot/*.h; do
    for compiler in gcc clang; do
        command -v $compiler >/dev/null && compile $compiler -std=c11 -x c "$header"
    done
    for compiler in g++ clang++; do
        command -v $compiler >/dev/null && compile $compiler -std=c++11 -x c++ "$header"
    done
done
exit $bad
