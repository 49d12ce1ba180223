#!/bin/sh
# Held speeds: pages and tables, status, what is refused, and a long drive at the same point.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"
write_case

narrow() {
    awk 'length($0) > 80 { exit 1 }' out || fail "$1 is wider than 80 columns"
}

# One point: a page.
want 0 hold case.json --speed "110 km/h" --power "30 kW" --engine-speed "4200 rpm"
narrow "a page"
for text in "Holds: settles at" "Hottest air" "SAE J1393" "limits.coolant" "core face" "where each pascal goes"; do
    says out "$text"
done
want 0 hold case.json --speed "110 km/h" --power "30 kW" --engine-speed "4200 rpm" --json
is_json out
rest=$(number coolant_degC)
[ "$(number kind)" = '"settles"' ] || fail "110 km/h does not settle"
awk -v e="$(number relative_error)" 'BEGIN { exit !(e < 1e-8 && e > -1e-8) }' || fail "the heat does not balance"
awk -v b="$(number boiling_degC)" -v w="$(number air_to_water_K)" -v a="$(number air_to_boil_degC)" \
    'BEGIN { d = b - w - a; exit !(d < 1e-9 && d > -1e-9) }' || fail "air to boil is not boiling less air to water"
close "ceiling" "$(number ceiling_degC)" "$(awk -v t="$rest" 'BEGIN { printf "%.12g", 115 - t + 30 }')" 1e-9

# The same held in a drive of 3 h ends there.
want 0 run case.json --set 'drive=[{"hold": "3 h", "speed": "110 km/h", "power": "30 kW", "engine_speed": "4200 rpm"}]' \
    -o long
last=$(awk -F, 'NR == 1 { for (i = 1; i <= NF; ++i) if ($i ~ /^coolant_engine_out/) c = i } { v = $c } END { print v }' \
    long/series.csv)
awk -v a="$rest" -v b="$last" 'BEGIN { d = a - b; exit !(d < 0.01 && d > -0.01) }' || fail "settles at $rest, the drive at $last"

# A grid: a line a point, speeds in the outer turn; one too hot makes status 1.
want 1 hold case.json --speed "20 km/h" --speed "110 km/h" --power "5 kW" --power "110 kW"
narrow "a table"
[ "$(grep -c '^ *[0-9][0-9.]* ' out)" -eq 4 ] || fail "not four lines"
grep -q '110.0 .* [0-9]* s$' out || fail "110 kW does not say how long it lasts"
want 1 hold case.json --speed "20 km/h" --speed "110 km/h" --power "5 kW" --power "110 kW" --json
is_json out
[ "$(grep -c '"kind"' out)" -eq 4 ] || fail "not four points"
[ "$(grep -c '"stations"' out)" -eq 4 ] || fail "not four ladders"
want 0 hold case.json --speed "60 km/h" --grade "0 %" --grade "5 %"
says out "  5.0 "
want 0 hold case.json --speed "0 km/h"
says out "0 kW at"

# The hottest air, solved anew: at it the coolant meets its limit.
want 0 hold case.json --speed "80 km/h" --power "55 kW" --engine-speed "5000 rpm" --ceiling --json
hot=$(number ceiling_solved_degC)
want 0 hold case.json --speed "80 km/h" --power "55 kW" --engine-speed "5000 rpm" --set "air.ambient=\"$hot degC\"" --json
awk -v t="$(number coolant_degC)" 'BEGIN { d = t - 115; exit !(d < 2e-3 && d > -2e-3) }' ||
    { want 1 hold case.json --speed "80 km/h" --power "55 kW" --engine-speed "5000 rpm" --set "air.ambient=\"$hot degC\"" --json
      awk -v t="$(number coolant_degC)" 'BEGIN { d = t - 115; exit !(d < 2e-3 && d > -2e-3) }' ||
          fail "not at the limit in air of $hot"; }

# Power and grade: the road load decides; a few per mille are let pass.
want 0 hold case.json --speed "60 km/h" --grade "5 %" --json
power=$(number power_W)
want 0 hold case.json --speed "60 km/h" --grade "5 %" --power "$(awk -v p="$power" 'BEGIN { printf "%.9g", p * 1.005 }') W"
want 2 hold case.json --speed "60 km/h" --grade "5 %" --power "$(awk -v p="$power" 'BEGIN { printf "%.9g", p * 1.02 }') W"
says err "--power: found"
says err "road load"
want 2 hold case.json --speed "60 km/h" --grade "5 %" --grade "6 %" --power "9 kW"
says err "--grade: found"

# What will not do.
want 2 hold case.json
says err "--speed: found none"
for bad in "--speed=-1 km/h" "--speed=30 m" "--speed=1000 km/h"; do want 2 hold case.json "$bad"; done
want 2 hold case.json --speed "60 km/h" --power "10"
want 2 hold case.json --speed "60 km/h" --grade "7 K"
want 2 hold case.json --speed "60 km/h" --engine-speed "7 km/h"
sed 's/"mass": "800 kg", //' case.json >light.json
want 2 hold light.json --speed "60 km/h"
says err "road load"
want 0 hold light.json --speed "60 km/h" --power "10 kW"

# Ducts by their number, and how many are equal.
part='"inlet": {"area": "300 cm2"}, "core": {"width": "300 mm", "height": "300 mm", "depth": "42 mm",
    "fins": {"pitch": "1.9 mm", "louvre_pitch": "1.4 mm", "louvre_angle": "23 deg"},
    "tubes": {"pitch": "10 mm", "height": "2 mm", "rows": 2}}, "exit": {"area": "500 cm2"}'
"$command" hold case.json --speed "110 km/h" --power "20 kW" --set "ducts=[{$part, \"count\": 2}, {$part}]" >out 2>err
grep -q "^Duct 1, one of 2 equal ones$" out || fail "no two equal ducts"
grep -q "^Duct 2$" out || fail "the second duct is one alone: $(grep Duct out)"
finish
