#!/bin/sh
# The files of -o: whole or not there, the same bytes each time, told when they cannot be written.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"
write_case

want 0 run case.json --json -o one
for file in result.json series.csv events.csv; do
    [ -s "one/$file" ] || fail "no $file"
done
[ "$(ls -A one | wc -l)" -eq 3 ] || fail "more than three files: $(ls -A one)"
cmp -s out one/result.json || fail "result.json is not what --json prints"
cp out wanted
want 0 run case.json -o two/
want 0 run case.json -o one
for file in result.json series.csv events.csv; do
    cmp -s "one/$file" "two/$file" || fail "$file differs from run to run"
done

# The series: headings with units, time from 0 to the drive's end, no empty row, a number in each cell.
head -n 1 one/series.csv | grep -E -q '^time \[s\](,[a-z_]+ \[[^],]*\])+$' || fail "headings: $(head -n 1 one/series.csv)"
for name in speed power coolant_engine_out coolant_radiator_out metal thermostat_lift coolant_flow air_mass_flow \
    face_velocity fan_speed tank_pressure boil_margin heat_in heat_out drag; do
    head -n 1 one/series.csv | grep -q ",$name \[" || fail "no column $name"
done
awk -F, 'NR == 1 { n = NF; next }
    NF != n { print "row " NR " has " NF " cells"; exit 1 }
    NR == 2 && $1 != "0" { print "begins at " $1; exit 1 }
    NR > 2 && $1 <= last { print "time falls in row " NR; exit 1 }
    { last = $1; for (i = 1; i <= NF; ++i) if ($i !~ /^(-?[0-9.]+(e[-+][0-9]+)?)?$/ || $i == "-0") {
        print "cell " i " of row " NR ": " $i; exit 1 } }
    END { if (last != "510") { print "ends at " last; exit 1 } }' one/series.csv >why || fail "series: $(cat why)"
# What it holds is what the result says: peak, speed of the hold, heat by the trapezoid of the rows.
cp one/result.json out
awk -F, -v peak="$(number coolant_degC)" -v heat="$(number heat_in_J)" '
    NR == 1 { for (i = 1; i <= NF; ++i) { split($i, word, " "); at[word[1]] = i } next }
    { t = $1; q = $at["heat_in"]; T = $at["coolant_engine_out"]
      if (T > top) top = T
      if (NR > 2) sum += (t - before) * (q + qbefore) / 2
      before = t; qbefore = q
      if (t == 200 && ($at["speed"] - 110) ^ 2 > 1e-9) { print "speed in the hold: " $at["speed"]; exit 1 } }
    END { if (top > peak + 1e-6 || top < peak - 0.1) { print "peak " top " against " peak; exit 1 }
          if ((sum * 1000 / heat - 1) ^ 2 > 4e-6) { print "heat " sum * 1000 " against " heat; exit 1 } }
    ' one/series.csv >why || fail "series against result: $(cat why)"
head -n 1 one/events.csv | grep -q '^time \[s\],what,' || fail "headings: $(head -n 1 one/events.csv)"
grep -q 'coolant peak' one/events.csv || fail "no peak in events.csv"
[ "$(grep -c '"what"' one/result.json)" -eq "$(($(wc -l <one/events.csv) - 1))" ] ||
    fail "events.csv and result.json hold other events"

# What the solver leaves of nil is nil: after the engine stops the fan runs down, and no cell is 1e-30.
awk -F, 'NR == 1 { for (i = 1; i <= NF; ++i) { split($i, word, " "); name[i] = word[1] } next }
    { for (i = 1; i <= NF; ++i)
        if (name[i] ~ /^(fan_speed|fan_power|air_mass_flow|face_velocity|exit_velocity|drag|heat_.*|coolant_lost)$/ &&
            $i + 0 != 0 && $i ^ 2 < 1e-18) { print name[i] " in row " NR ": " $i; exit 1 } }' \
    one/series.csv >why || fail "noise: $(cat why)"

# Off the grid the end is there too.
want 0 run case.json -o coarse --every "7 s"
[ "$(tail -n 1 coarse/series.csv | cut -d, -f1)" = 510 ] || fail "the end is missing with --every 7 s"
[ "$(sed -n 3p coarse/series.csv | cut -d, -f1)" = 7 ] || fail "--every 7 s does not give rows 7 s apart"
cmp -s coarse/result.json one/result.json || fail "--every changes the result"

# An overheating drive writes its files too; a drive that is refused leaves none.
want 1 run case.json -o hot --set 'limits.coolant=90 degC'
grep -q '"verdict": "overheats"' hot/result.json || fail "no verdict in hot/result.json"
want 2 run case.json -o none --set 'limits.coolant=90 m'
[ -e none ] && fail "a refused case makes a directory"

# Places that cannot be.
want 2 run case.json -o case.json
says err "case.json"
want 2 run case.json -o case.json/below
says err "case.json: found something that is no directory"

# Parents are made on the way, and taken away again when the run fails.
want 0 run case.json -o deep/er//still/
[ -s deep/er/still/result.json ] || fail "missing parents are not made"
want 0 run case.json -o "$room/whole/path"
[ -s whole/path/series.csv ] || fail "missing parents of a whole path are not made"
want 2 run case.json -o fresh/one/two --set 'limits.coolant=90 m'
[ -e fresh ] && fail "a refused case makes parents"
mkdir -p old && mkdir old/kept
if (trap '' XFSZ && ulimit -f 8) 2>/dev/null; then
    for place in fresh/one//two/ old/kept/new/one; do
        (trap '' XFSZ; ulimit -f 8; exec "$command" run case.json -o "$place" >out 2>err)
        [ $? -eq 2 ] || fail "a full disk is no fault"
    done
    [ -e fresh ] && fail "a full disk leaves parents behind"
    [ -d old/kept ] || fail "a directory that was there is gone"
    [ -e old/kept/new ] && fail "a full disk leaves a parent behind"
fi
mkdir taken && mkdir taken/series.csv
want 2 run case.json -o taken
says err "taken/series.csv"
[ -e taken/result.json ] && fail "a result without its series"
mkdir shut && chmod a-w shut
if ! touch shut/probe 2>/dev/null; then
    want 2 run case.json -o shut
    says err "shut/"
    want 2 run case.json -o shut/below
    says err "shut/below"
    want 2 run case.json -o shut/far/below
    says err "shut/far"
else
    rm -f shut/probe # whoever runs this may write anywhere
fi
# A disk that fills up, played by a limit on the size of files: 8 blocks of 512 bytes hold no series.
if (trap '' XFSZ && ulimit -f 8) 2>/dev/null; then
    # shellcheck disable=SC3045
    (trap '' XFSZ; ulimit -f 8; exec "$command" run case.json -o full >out 2>err)
    [ $? -eq 2 ] || fail "a full disk is no fault"
    says err "full/series.csv"
    [ -e full ] && fail "a full disk leaves something behind: $(ls -A full)"
    mkdir kept && echo old >kept/series.csv
    (trap '' XFSZ; ulimit -f 8; exec "$command" run case.json -o kept >out 2>err)
    [ "$(cat kept/*)" = old ] || fail "a full disk touched what was there: $(ls -A kept)"
fi
# What was there before stays when a write fails.
cp one/result.json before
want 2 run case.json -o one --set 'air.ambient=nonsense'
cmp -s before one/result.json || fail "a refused run touched what was there"
finish
