#!/bin/sh
# Help and version stand on standard output at status 0, in lines a terminal holds.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"

narrow() {
    [ -s err ] && fail "$1 says something on standard error"
    awk 'length($0) > 80 { exit 1 }' out || fail "$1 is wider than 80 columns"
}

want 0 --help
narrow "help"
for verb in run hold duct show new; do
    says out "$verb"
done
for verb in run hold duct show new; do
    want 0 "$verb" --help
    narrow "help of $verb"
    says out "usage: swirlpot $verb"
    want 0 "$verb" -h
    want 0 "$verb" operand --help
done
want 0 run --help
for option in --set --output --json --every --exact; do says out "$option"; done
want 0 hold --help
for option in --speed --power --grade --engine-speed --ceiling --set --json; do says out "$option"; done
want 0 duct --help
for option in --speed --heat --fan --set --json; do says out "$option"; done

want 0 --version
narrow "version"
grep -E -q '^swirlpot [0-9]+\.[0-9]+\.[0-9]+$' out || fail "no version of the program"
for library in SUNDIALS GSL cJSON UDUNITS; do says out "$library"; done

# The manual names every option.
for verb in run hold duct show new; do
    want 0 "$verb" --help
    for option in $(sed -n 's/^.* --\([a-z]*\).*$/\1/p' out); do
        grep -q "\\\\-\\\\-$option" "$root/docs/swirlpot.1" || fail "--$option is not in the manual"
    done
done
finish
