# Running tests and keeping count; sourced by run.sh and long.sh.
#
# Each test program's output goes to a file and is shown only when something failed in it.
# SPDX-License-Identifier: GPL-3.0-or-later

passed=0 failed=0 skipped=0
tally_log=$(mktemp) || exit 2
trap 'rm -f "$tally_log"' EXIT

tally_say() { # tally_say LABEL PASSED FAILED SKIPPED
    passed=$((passed + $2)) failed=$((failed + $3)) skipped=$((skipped + $4))
    if [ "$3" -gt 0 ]; then
        echo "FAILED  $1: $2 passed, $3 failed, $4 skipped; it says:"
        tail -n 60 "$tally_log" | sed 's/^/    /'
    elif [ "$4" -gt 0 ]; then
        echo "ok      $1: $2 passed, $4 skipped$(sed -n 's/^skipped: /: /p' "$tally_log" | head -n 1)"
    else
        echo "ok      $1: $2 passed"
    fi
}

# Adds up the numbers that a sed script finds, 0 for none.
tally_sum() { sed -n "$1" "$tally_log" | awk '{ s += $1 } END { print s + 0 }'; }

# One cmocka program, its tests counted singly. tally_cmocka LABEL COMMAND...
tally_cmocka() {
    label=$1
    shift
    timeout "${TALLY_TIMEOUT:-600}" "$@" >"$tally_log" 2>&1 </dev/null
    status=$?
    p=$(tally_sum 's/^\[  PASSED  \] \([0-9]*\) test(s).*/\1/p')
    f=$(tally_sum 's/^\[  FAILED  \] \([0-9]*\) test(s).*/\1/p')
    s=$(tally_sum 's/^\[  SKIPPED \] \([0-9]*\) test(s).*/\1/p')
    if [ $status -ne 0 ] && [ "$f" -eq 0 ]; then # it fell over before it could sum up, or a set-up failed
        [ "$p" -gt 0 ] || p=$(grep -c '^\[       OK \]' "$tally_log")
        f=1
        echo "status $status" >>"$tally_log"
    elif [ $status -eq 0 ] && [ $((p + s)) -eq 0 ]; then
        f=1
        echo "it ran no test" >>"$tally_log"
    fi
    tally_say "$label" "$p" "$f" "$s"
}

# A script: its own closing line "N passed, N failed, N skipped" if it has one, else one test by its status
# (0 passed; 77, or a first word "skipped:", skipped). tally_script LABEL COMMAND...
tally_script() {
    label=$1
    shift
    timeout 600 "$@" >"$tally_log" 2>&1 </dev/null
    status=$?
    closing='s/^\([0-9]*\) passed, \([0-9]*\) failed, \([0-9]*\) skipped$/\1 \2 \3/p'
    numbers=$(tail -n 1 "$tally_log" | sed -n "$closing")
    if [ -n "$numbers" ]; then
        set -- $numbers
        if [ $status -ne 0 ] && [ "$2" -eq 0 ]; then set -- "$1" 1 "$3"; fi
    elif [ $status -eq 77 ] || { [ $status -eq 0 ] && grep -q '^skipped:' "$tally_log"; }; then
        set -- 0 0 1
    elif [ $status -eq 0 ]; then
        set -- 1 0 0
    else
        echo "status $status" >>"$tally_log"
        set -- 0 1 0
    fi
    tally_say "$label" "$1" "$2" "$3"
}

# One command that must end with a status. tally_status LABEL STATUS COMMAND...
tally_status() {
    label=$1 wanted=$2
    shift 2
    timeout 900 "$@" >"$tally_log" 2>&1 </dev/null
    status=$?
    if [ $status -eq "$wanted" ]; then
        tally_say "$label" 1 0 0
    else
        echo "status $status, expected $wanted" >>"$tally_log"
        tally_say "$label" 0 1 0
    fi
}

# The last line, and the status.
tally_close() {
    echo "$passed passed, $failed failed, $skipped skipped"
    [ $failed -eq 0 ]
}
