#!/bin/sh
# The first case that `new` writes runs as it is, and nothing is ever overwritten.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"

try() {
    want 0 new "$1" --mass "$2" --displacement "$3" --power "$4"
    says out "$1/case.json"
    "$command" run "$1/case.json" --json >out 2>err
    got=$?
    [ $got -le 1 ] || { fail "case for $2, $3, $4: status $got"; cat err; }
    is_json out
    want 0 show "$1/case.json"
    want 0 show "$1/case.json" --json
    is_json out
}
try road "1100 kg" "1.4 l" "70 kW"
try hill "660 kg" "2.0 l" "190 kW"
try student "290 kg" "600 cm3" "80 hp"
try big "1800 kg" "6.2 l" "480 kW"

cp road/case.json before
want 2 new road --mass "900 kg" --displacement "2.0 l" --power "150 kW"
says err "road/case.json"
cmp -s before road/case.json || fail "a case was overwritten"

want 2 new other --mass "900 kg" --displacement "2.0 l"
says err "--power"
want 2 new other --mass "900" --displacement "2.0 m" --power "150 l"
for option in --mass --displacement --power; do says err "$option"; done
want 2 new other --mass "1 g" --displacement "2.0 l" --power "150 kW"
[ -e other ] && fail "a directory was made all the same"
want 2 new missing/below --mass "900 kg" --displacement "2.0 l" --power "150 kW"
says err "missing/below"
finish
