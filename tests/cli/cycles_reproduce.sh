#!/bin/sh
# The drive cycles in the tree are what make_cycles.py writes, byte for byte.
# Usage: cycles_reproduce.sh; 0 also when there is no Python 3 to ask.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
root=$(cd "$(dirname "$0")/../.." && pwd) || exit 1
if ! python3 -c 'import sys; sys.exit(sys.version_info < (3, 6))' 2>/dev/null; then
    echo "skipped: no python3"
    exit 0
fi
made=$(mktemp -d) || exit 1
trap 'rm -rf "$made"' EXIT
python3 -B "$root/drivecycles/make_cycles.py" "$made" || exit 1
status=0
for file in "$root"/drivecycles/*.csv; do
    if ! cmp "$file" "$made/$(basename "$file")"; then status=1; fi
done
for file in "$made"/*.csv; do
    if ! [ -f "$root/drivecycles/$(basename "$file")" ]; then
        echo "not in the tree: $(basename "$file")"
        status=1
    fi
done
exit $status
