#!/bin/sh
# Lets a fuzzer search for a while from its corpus. What it grows and what it finds go to FOLDER, never into the tree.
#
# Usage: search.sh FUZZER CORPUS SECONDS FOLDER
# The last line says how much was tried. 1: something was found; the input lies in FOLDER and belongs, once mended,
# into the corpus.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
[ $# -eq 4 ] || { echo "usage: search.sh FUZZER CORPUS SECONDS FOLDER"; exit 2; }
mkdir -p "$4/grown" || exit 2
"$1" -max_total_time="$3" -max_len=8192 -timeout=20 -rss_limit_mb=2048 -print_final_stats=1 -verbosity=1 \
    -artifact_prefix="$4/" "$4/grown" "$2" >"$4/full" 2>&1
status=$?
if [ $status -ne 0 ]; then
    tail -n 60 "$4/full"
    exit 1
fi
awk '/cov: / { for (i = 1; i < NF; i++) if ($i == "cov:") covered = $(i + 1) }
     /stat::number_of_executed_units/ { runs = $2 }
     /^INFO: Seed:/ { seed = $3 }
     END { if (runs == 0) { print "it tried nothing"; exit 1 }
           print runs " inputs tried, " covered " edges reached, seed " seed }' "$4/full"
