#!/bin/sh
# Installs the Debian packages that are missing, and says beforehand which and how much.
#
# Usage: sh sim/packages.sh GROUP...
#   build   compiler and libraries, all that the program needs
#   tests   what tests/run.sh needs besides
#   lint    what tests/long.sh needs besides
# Needs root or sudo only when something is missing. 0: all there; 1: it could not be had.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u

build="gcc libc6-dev make cmake libsundials-dev libcjson-dev libgsl-dev libudunits2-dev libcsv-dev"
tests="libcmocka-dev clang libclang-rt-14-dev valgrind pkg-config
       locales python3 python3-scipy python3-iapws python3-fluids"
lint="clang-tidy cppcheck"

wanted=
for group in "$@"; do
    case $group in
    build) wanted="$wanted $build" ;;
    tests) wanted="$wanted $tests" ;;
    lint) wanted="$wanted $lint" ;;
    *)
        echo "usage: packages.sh build|tests|lint ..." >&2
        exit 1
        ;;
    esac
done

if ! command -v dpkg-query >/dev/null || ! command -v apt-get >/dev/null; then
    echo "This is no Debian, so nothing is installed. What is needed, by Debian's names:"
    echo "   " $wanted
    exit 0
fi

is_there() { # by its own name, or by another package that stands for it
    case $(dpkg-query -W -f '${Status}' "$1" 2>/dev/null) in *" installed") return 0 ;; esac
    return 1
}

missing=
for package in $wanted; do
    is_there "$package" || missing="$missing $package"
done
[ -n "$missing" ] || exit 0

if [ "$(id -u)" -eq 0 ]; then
    as_root=
elif command -v sudo >/dev/null; then
    as_root=sudo
else
    echo "Missing packages; have someone with root install them, then start again:" >&2
    echo "    apt-get install --no-install-recommends$missing" >&2
    exit 1
fi

log=$(mktemp) || exit 1
trap 'rm -f "$log"' EXIT

apt() { # apt VERB ARGUMENTS...: quiet, asks nothing, waits for another apt to finish
    $as_root env DEBIAN_FRONTEND=noninteractive LC_ALL=C apt-get -y -q \
        -o DPkg::Lock::Timeout=300 -o Dpkg::Use-Pty=0 --no-install-recommends "$@" >"$log" 2>&1
}

announce() { # says what would come; 1 when apt does not know the packages
    env LC_ALL=C apt-get -q --no-install-recommends --assume-no install $missing >"$log" 2>&1
    grep -q 'newly installed' "$log" || return 1
    echo "Missing:$missing"
    sed -n -e 's/^[0-9]* upgraded, \([0-9]*\) newly installed.*/With what they need: \1 packages./p' \
        -e 's/^Need to get \(.*\) of archives\./To download: \1./p' \
        -e 's/^After this operation, \(.*\) of additional disk space.*/On the disk: \1./p' "$log"
}

if ! announce; then
    echo "Fetching the list of packages ..."
    apt update
    announce || {
        cat "$log" >&2
        echo "packages.sh: these packages are not to be had:$missing" >&2
        exit 1
    }
fi
echo "Installing ${as_root:+(with sudo) }..."
if ! apt install $missing; then
    echo "That failed; fetching the list of packages afresh and trying once more ..."
    apt update
    if ! apt install $missing; then
        tail -n 30 "$log" >&2
        echo "packages.sh: the packages could not be installed" >&2
        exit 1
    fi
fi
echo "Installed."
