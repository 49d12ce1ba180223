# The stages of testing; sourced by run.sh and long.sh, which stand at the root and have tally.sh loaded.
# All that is written goes to build-tests/.
# SPDX-License-Identifier: GPL-3.0-or-later

cores=$(nproc 2>/dev/null || echo 2)
out=build-tests
python=/usr/bin/python3
[ -x $python ] || python=python3
export PYTHONDONTWRITEBYTECODE=1
export UBSAN_OPTIONS=print_stacktrace=1

say() { printf '\n== %s (%d s)\n' "$1" $(($(date +%s) - began)); }
began=$(date +%s)

# build NAME CMAKE-OPTIONS...: into build-tests/NAME; counts as a test. 1 when it failed.
build() {
    name=$1
    shift
    mkdir -p "$out/$name"
    if cmake -S . -B "$out/$name" "$@" >"$out/$name.log" 2>&1 &&
        cmake --build "$out/$name" -j "$cores" >>"$out/$name.log" 2>&1; then
        echo "ok      build $name"
        passed=$((passed + 1))
    else
        echo "FAILED  build $name; it says:"
        grep -nE -A 6 'error|Error' "$out/$name.log" | head -n 60 | sed 's/^/    /'
        failed=$((failed + 1))
        return 1
    fi
}

build_release() { build release -DCMAKE_C_COMPILER=gcc -DCMAKE_BUILD_TYPE=Release -DSWIRLPOT_TESTS=ON; }
build_sanitize() {
    build sanitize -DCMAKE_C_COMPILER=clang -DCMAKE_BUILD_TYPE=Debug -DSWIRLPOT_TESTS=ON -DSWIRLPOT_SANITIZE=ON
}
build_fuzz() {
    build fuzz -DCMAKE_C_COMPILER=clang -DCMAKE_BUILD_TYPE=RelWithDebInfo -DSWIRLPOT_FUZZ=ON -DSWIRLPOT_SANITIZE=ON
}

# A comma for the decimal point, for the test that asks whether that matters.
comma_locale() {
    [ -d "$out/locale/de_DE.UTF-8" ] && return
    mkdir -p "$out/locale"
    localedef -i de_DE -f UTF-8 "$out/locale/de_DE.UTF-8" >/dev/null 2>&1 || true
}

# unit_and_outside NAME: the cmocka programs of a build.
unit_and_outside() {
    for program in "$out/$1"/tests/test_*; do
        LOCPATH=$PWD/$out/locale tally_cmocka "$(basename "$program")" "$program"
    done
}

# python_outside NAME: the Python checks; one asks the probe, the others the command.
python_outside() {
    for script in tests/outside/*.py; do
        case $script in
        */reference_libraries.py) program=$out/$1/tests/probe ;;
        *) program=$out/$1/swirlpot ;;
        esac
        tally_script "$(basename "$script")" $python "$script" "$program"
    done
}

# command_line NAME: each script gets the built command.
command_line() {
    for script in tests/cli/*.sh tests/cli/*.py; do
        [ -f "$script" ] || continue
        case $script in
        *.sh) shell=sh ;;
        *.py) shell=$python ;;
        esac
        tally_script "$(basename "$script")" "$shell" "$script" "$PWD/$out/$1/swirlpot"
    done
}

# hygiene NAME: how the tree and the library are made; NAME is a build without sanitizers.
hygiene() {
    for script in tests/hygiene/*.sh; do
        tally_script "$(basename "$script")" sh "$script" "$PWD" "$PWD/$out/$1"
        case $script in */sizes.sh) sed 's/^/        /' "$tally_log" ;; esac
    done
}

# fuzz SECONDS: replays each target's corpus, then lets the targets search, as many at a time as there are cores.
fuzz() {
    seconds=$1 running=0
    for program in "$out"/fuzz/tests/fuzz_*; do
        target=${program##*/fuzz_}
        tally_script "replay $target" sh tests/fuzz/replay.sh "$program" "tests/fuzz/corpus/$target"
    done
    for program in "$out"/fuzz/tests/fuzz_*; do
        target=${program##*/fuzz_}
        mkdir -p "$out/search/$target"
        {
            sh tests/fuzz/search.sh "$program" "tests/fuzz/corpus/$target" "$seconds" "$out/search/$target"
            echo $? >"$out/search/$target/status"
        } >"$out/search/$target/log" 2>&1 </dev/null &
        running=$((running + 1))
        [ $((running % cores)) -ne 0 ] || wait
    done
    wait
    for program in "$out"/fuzz/tests/fuzz_*; do
        target=${program##*/fuzz_}
        folder=$out/search/$target
        tally_script "search $target, $seconds s" sh -c 'cat "$1/log"; exit "$(cat "$1/status")"' - "$folder"
        tail -n 1 "$tally_log" | sed 's/^/        /'
    done
}

memcheck() { # memcheck LABEL STATUS ARGUMENTS...: the release build's command under valgrind
    label=$1 wanted=$2
    shift 2
    tally_status "valgrind $label" "$wanted" valgrind -q --error-exitcode=99 --leak-check=full \
        --errors-for-leak-kinds=definite,indirect,possible --suppressions=tests/valgrind.supp \
        "$out/release/swirlpot" "$@"
}
