#!/bin/sh
# A command line that cannot be meant: status 2, one line that says what is wrong, one where help is.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"
write_case

usage() {
    text=$1
    shift
    want 2 "$@"
    says err "$text"
    says err "try 'swirlpot --help'"
    [ "$(wc -l <err)" -eq 2 ] || fail "not two lines: swirlpot $*"
}

usage "no verb"
usage "nearest is 'run'" runn case.json
usage "nearest is 'duct'" duc case.json
usage "--jsn" --jsn
usage "an option of 'run'" run --colour case.json # no known one is near
says_not err "nearest"
usage "an unknown verb" sweep case.json
says_not err "nearest"
usage "an unknown verb" "" case.json
usage "nearest is '--json'" run --jsn case.json
usage "--speed" run case.json --speed "30 m/s"
usage "an unknown option" run --js case.json      # beginnings are not taken
usage "an unknown option" run --ou=here case.json
usage "-z" run -z case.json
usage "--json=3" run --json=3 case.json
usage "no operand" run
usage "no operand" run --json
usage "no operand" run ""
usage "one operand too many" run case.json other.json
usage "one operand too many" run case.json -- --json
usage "--set" run case.json --set
usage "-o" run case.json -o
usage "it twice" run case.json -o a --output b
usage "it twice" duct case.json --speed "30 m/s" --heat "1 kW" --heat "2 kW"
[ -e a ] && fail "a directory was made all the same"

# Values that will not do are complaints of their own option.
values() {
    option=$1
    shift
    want 2 "$@"
    says err "swirlpot: $option: found"
}
values --every run case.json --every "0 s"
values --every run case.json --every "1"
values --every run case.json --every "1 km"
values --speed duct case.json
values --speed duct case.json --speed "30 m"
values --speed duct case.json --speed "nan m/s"
values --speed duct case.json --speed "1000 m/s"
values --heat duct case.json --speed "30 m/s" --heat "-1 kW"
values --heat duct case.json --speed "30 m/s" --heat "60"
values --fan duct case.json --speed "30 m/s" --fan perhaps
values --mass new here --displacement "2 l" --power "100 kW"
[ -e here ] && fail "a directory was made all the same"

# Options may stand before and after the operand; what stands behind -- is none.
want 0 duct --speed "30 m/s" case.json --json
cp case.json ./--odd.json
want 0 duct --speed "30 m/s" -- --odd.json
want 0 duct --speed="30 m/s" case.json
# Control characters of the command line do not reach the terminal.
want 2 "$(printf 'a\033[31mb')"
says err "a?[31mb"
finish
