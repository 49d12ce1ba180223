#!/bin/sh
# No room looks up: base < fluid < part < circuit < drive < paper; the command sees public headers only.
#
# Usage: rooms.sh ROOT
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
cd "${1:?usage: rooms.sh ROOT}" || exit 2

# Five public headers are no room's own. trace.h is the form of a table, without a word of cars, and counts to the
# ground floor although the reader lives in drive/. design.h puts the parts' designs together: above part, which does
# not know it, below circuit. duct.h is the first half of part.h. result.h is what paper/ writes. hold.h is drive's second one.
grep -rHn '^ *# *include *"' sim include --include='*.c' --include='*.h' | LC_ALL=C sort | awk -F: '
    BEGIN {
        split("base fluid part circuit drive paper", rooms, " ")
        for (i in rooms) floor[rooms[i]] = i + 0
        floor["trace"] = floor["base"]
        floor["design"] = floor["part"] + 0.5
        floor["duct"] = floor["part"] - 0.5
        floor["result"] = floor["paper"]
        floor["hold"] = floor["drive"]
    }
    {
        file = $1
        split($3, quoted, "\"")
        wanted = quoted[2]
        from = file
        sub(/^(sim|include)\//, "", from)
        sub(/^swirlpot\//, "", from)
        sub(/[\/.].*/, "", from)
        to = wanted
        public = sub(/^swirlpot\//, "", to)
        if (to !~ /\//) {
            if (!public) to = from # beside the file itself
        }
        sub(/[\/.].*/, "", to)
        count++
        if (from == "command") {
            if (public || to == "command") next
            print file ":" $2 ": the command includes " wanted ", which is no public header"
            bad++
        } else if (!(from in floor) || !(to in floor)) {
            print file ":" $2 ": no known room: " from " includes " wanted
            bad++
        } else if (floor[to] > floor[from]) {
            print file ":" $2 ": " from " looks up to " wanted
            bad++
        }
    }
    END {
        if (count < 50) { print "rooms.sh: only " count + 0 " includes seen; is this the root?"; bad++ }
        exit bad > 0
    }'
