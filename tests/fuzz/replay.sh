#!/bin/sh
# Every file of a corpus through its fuzzer, once.
#
# Usage: replay.sh FUZZER CORPUS
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
fuzzer=${1:?usage: replay.sh FUZZER CORPUS}
corpus=${2:?usage: replay.sh FUZZER CORPUS}
set -- "$corpus"/*
[ -e "$1" ] || { echo "replay.sh: nothing in $corpus"; exit 1; }
"$fuzzer" -timeout=20 "$@"
