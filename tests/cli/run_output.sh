#!/bin/sh
# What run prints: verdict, JSON and nothing else, what --set changes.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"
write_case

want 0 run case.json
head -n 1 out | grep -q '^Survives: .*degC' || fail "first line: $(head -n 1 out)"
awk 'length($0) > 80 { exit 1 }' out || fail "text wider than 80 columns"
LC_ALL=C grep -q '[^ -~]' out && fail "not plain ASCII"
says out "ledger closes to"
says out "none given for gauge, metal, boil margin"
says out "README.md"
sed -n 1,20p out | grep -q '[0-9]\.[0-9]* degC' && fail "temperatures are not whole degrees"
want 0 run case.json --exact
says out "degC"
sed -n 1p out | grep -q '[0-9]\.[0-9]* degC' || fail "--exact gives no more digits"

want 0 run case.json --json
is_json out
for name in verdict coolant_degC time_s distance_m step mark margin_K boil_margin_K time_over_limit_s over_ambient_K \
    heat_in_J heat_out_J heat_stored_J relative_error mean_coefficient energy_J on_s; do
    [ -n "$(number $name)" ] || fail "no $name in the JSON"
done
[ "$(number verdict)" = '"survives"' ] || fail "verdict $(number verdict)"
[ "$(number mark)" = null ] || fail "a mark where the drive has none: $(number mark)"
close "margin" "$(number margin_K)" "$(awk -v p="$(number coolant_degC)" 'BEGIN { printf "%.12g", 115 - p }')" 1e-9
close "duration" "$(number duration_s)" 510 1e-12
close "distance" "$(number distance_m)" 5500 1e-6
# In = out + stored, to 1e-4 of the heat turned over.
close "ledger" "$(number heat_in_J)" "$(awk -v o="$(number heat_out_J)" -v s="$(number heat_stored_J)" \
    'BEGIN { printf "%.12g", o + s }')" 2e-4
says out '"title": "A test of \"quotes\""'
cp out one
want 0 run --json case.json
cmp -s out one || fail "the same drive twice gives other bytes"

# Status 1 is a verdict too: JSON on standard output, nothing else there.
want 1 run case.json --json --set 'limits.coolant=90 degC'
is_json out
[ "$(number verdict)" = '"overheats"' ] || fail "verdict $(number verdict)"
[ "$(number limit)" = '"limits.coolant"' ] || fail "limit $(number limit)"
says out '"what": "coolant over limit"'
close "time over limit is positive" "$(awk -v t="$(number time_over_limit_s)" 'BEGIN { print (t > 0) }')" 1 0
want 1 run case.json --set 'limits.coolant=90 degC'
head -n 1 out | grep -q '^Overheats: ' || fail "first line: $(head -n 1 out)"

# A limit that is not given is undefined, not nil.
want 0 run case.json --json --set 'limits={"boil_margin": "1 K"}'
[ "$(number margin_K)" = null ] || fail "a margin to no limit: $(number margin_K)"
[ "$(number time_over_limit_s)" = null ] || fail "a time over no limit: $(number time_over_limit_s)"
[ "$(number limit)" = '"limits.boil_margin"' ] || fail "limit $(number limit)"

# The verdict on a boil margin, in words; limits as they were given.
want 0 run case.json --set 'limits={"boil_margin": "1.25 K", "coolant": "149.2 degC"}'
head -n 1 out | grep -E -q '^Survives: coolant stays [0-9]+ K short of boiling, [0-9]+ K over the 1\.25 K asked for\.$' ||
    fail "first line: $(head -n 1 out)"
grep -E -q '^ +boil margin asked for 1\.25 K: [0-9]+ K to spare, the one that binds$' out || fail "no limit of 1.25 K"
says out "coolant 149.2 degC: "
want 1 run case.json --set 'limits={"boil_margin": "60 K"}'
head -n 1 out | grep -E -q '^Overheats: coolant comes within [0-9]+ K of boiling; 60 K asked for\.$' ||
    fail "first line: $(head -n 1 out)"
grep -E -q 'boil margin asked for 60 K: short by [0-9]+ K, the one that binds$' out || fail "no limit of 60 K"
want 1 run case.json --set 'limits={"boil_margin": "2 K"}' --set 'drive=[{"hold": "10 min", "speed": "5 km/h",
    "power": "120 kW", "engine_speed": "6000 rpm"}]'
head -n 1 out | grep -E -q '^Overheats: coolant goes [0-9]+ K past boiling; 2 K asked for\.$' ||
    fail "first line: $(head -n 1 out)"
want 0 run case.json --set 'limits.coolant=239.36 degF' # 115.2 degC
head -n 1 out | grep -q 'its limit of 115.2 degC\.$' || fail "first line: $(head -n 1 out)"

# The thermostat: open for how long and how much of it in vain; never, because there is none or nothing runs.
want 0 run case.json --set 'thermostat={"opens": "40 degC", "full": "45 degC"}'
says out "Thermostat       fully open for 8 min 30 s, 4 min 00 s of it with the engine off"
says_not out "nothing left"
want 0 run case.json --set 'thermostat=none'
says out "Thermostat       none fitted"
want 0 run case.json --set 'drive=[{"soak": "2 min"}]' --set 'start.coolant=60 degC'
says out "Thermostat       never fully open; the engine never runs"
want 0 run case.json --set 'drive=[{"idle": "1 min"}]' --set 'start.coolant=60 degC'
says out "Thermostat       regulates all the way, never fully open"

# A standing car has no drag coefficient.
want 0 run case.json --json --set 'drive=[{"idle": "2 min"}]'
[ "$(number mean_coefficient)" = null ] || fail "drag coefficient of a standing car: $(number mean_coefficient)"

# Pressure stands for altitude, whichever is set last.
want 0 run case.json --json
cp out one
want 0 run case.json --json --set 'air.altitude=2000 m'
cmp -s out one && fail "altitude changes nothing"
cp out high
# 79501.425 Pa: US Standard Atmosphere 1976 at 2000 m geometric.
want 0 run case.json --json --set 'air.pressure=79501.425 Pa'
close "pressure for altitude" "$(number heat_out_J)" "$(sed -n 's/^ *"heat_out_J": \([^,]*\),$/\1/p' high)" 1e-6
want 0 run case.json --json --set 'air.pressure=90 kPa' --set 'air.altitude=200 m'
cmp -s out one || fail "altitude does not drop a pressure set before"

# A measured coolant is compared, with what no model at all would say beside it; marks name the places.
awk 'BEGIN { print "time [s],speed [km/h],power [kW],engine_speed [rpm],coolant [degC],mark"
    for (t = 0; t <= 300; t += 5) printf "%d,80,25,3500,%.2f,%s\n", t, 92 - 50 * exp(-t / 80),
        t < 200 ? "Lower, \"wet\" hairpin" : "Top" }' | sed 's/"wet"/""wet""/; s/Lower.*hairpin/"&"/' >trace.csv
set -- --set 'drive=[{"trace": "trace.csv"}]' --set 'start.coolant=42 degC'
want 0 run case.json --json "$@" -o traced
is_json out
# Warm-up as drawn: 92 - 50 exp(-t/80) passes 85 at t = 80 ln(50/7).
close "logged time to 85 degC" "$(number measured_time_to_85_s)" 157.29 1e-2
for name in rms_K warmup_rms_K no_model_rms_K no_model_warmup_rms_K; do
    close "$name" "$(awk -v x="$(number $name)" 'BEGIN { print (x > 0) }')" 1 0
done
says out '"mark": "Lower, \"wet\" hairpin"'
says traced/events.csv ',"Lower, ""wet"" hairpin"'
want 0 run case.json "$@"
says out "no model at all"
says out '(trace.csv), Top'

# Tiers of a limit: the first to be passed and the worst are named, in text, JSON and events.
set -- --set 'limits={"coolant_caution": "86 degC", "coolant_alarm": "88 degC", "coolant": "90 degC"}'
want 1 run case.json --json "$@" -o tiers
is_json out
says out '"what": "coolant over caution"'
says out '"severity": "caution"'
grep -A3 '"first_failure": {' out | grep -q '"what": "coolant over alarm"' || fail "the alarm is not first"
grep -A3 '"worst_failure": {' out | grep -q '"what": "coolant over limit"' || fail "the limit is not worst"
head -n 1 tiers/events.csv | grep -q ',mark,place,severity$' || fail "events end in $(head -n 1 tiers/events.csv)"
grep -q ',coolant over limit,.*,jacket,stop$' tiers/events.csv || fail "no place and severity in events.csv"
want 1 run case.json "$@"
says out "First alarm      coolant over alarm (jacket)"
says out "Fails first      coolant over limit (jacket)"
want 0 run case.json --set 'limits={"coolant_alarm": "88 degC", "coolant": "110 degC"}'
says out "First alarm      coolant over alarm (jacket)"
says_not out "Fails"
says out "of common practice"
awk 'length($0) > 80 { exit 1 }' out || fail "text wider than 80 columns"
want 0 run case.json
says_not out "Fails"
want 0 run case.json --json
says out '"failures": ['
says out '"first_failure": null'
want 2 run case.json --set 'limits.coolant_alarm=130 degC'
says err "limits.coolant: found"
want 2 run case.json --set 'limits.oil=130 degC'
says err "limits.oil: found"

# What changes on the way: seconds until the limit, in text and JSON.
set -- --set 'changes=[{"at": "10 s", "set": {"limits.coolant": "20 degC"}}, {"at": "9 d", "set": {"pump.failed": true}}]'
want 1 run case.json --json "$@"
is_json out
grep -A4 '"changes": \[' out | grep -q '"time_s": 10' || fail "no time of the change"
grep -A5 '"changes": \[' out | grep -q '"to_limit_s": 0' || fail "no seconds until the limit"
says out '"limit": "coolant over limit"'
says out '"set": "limits.coolant=20 degC"'
says out '"time_s": null'
want 1 run case.json "$@"
says out "changes: limits.coolant=20 degC; already"
want 0 run case.json --json
says out '"changes": []'

# A change after the end of the drive, with its place; one of a row of them.
sed 's/  "start": {/"changes": [ { "at": "500 min", "set": { "duct.inlet.blocked": "20 %" } },\
 { "at": "8 min", "every": "20 s", "times": 3, "add": { "duct.core.blocked": "1 %" } } ], &/' case.json >late.json
want 0 run late.json
says err "late.json, line 18, changes[0].at: found 500 min; expected a time within the drive, which ends at 8 min 30 s"
says err "late.json, line 19, changes[1].times: found 8 min 40 s"
[ "$(wc -l <err)" -eq 2 ] || fail "not two cautions: $(cat err)"
want 0 run case.json --set 'changes=[{"at": "510 s", "set": {"duct.inlet.blocked": "20 %"}}]'
says err "changes[0].at: found 8 min 30 s"
want 0 run case.json --set 'changes=[{"at": "509.9 s", "set": {"duct.inlet.blocked": "20 %"}}]'
says_not err "changes"

# Changes of the same keys make one line; the one before the failure stands whatever else is left out.
many='{"at": "5 s", "every": "2 s", "times": 100, "add": {"duct.core.blocked": "0.01 %"}}'
for t in 11 21 31 41 51 61 71 81 101 111 121 131; do
    many="$many, {\"at\": \"$t s\", \"set\": {\"duct.core.heat_factor\": 0.9$t, \"tank.bleed\": 0.0$t}}"
    many="$many, {\"at\": \"$t.5 s\", \"set\": {\"duct.inlet.lip_loss\": 0.$t, \"tank.cap\": \"1.$t bar\"}}"
done
want 1 run case.json --set "changes=[$many, {\"at\": \"3 min\", \"set\": {\"limits.coolant\": \"60 degC\"}}]"
says out "changes: limits.coolant=60 degC; already"
[ "$(grep -c "changes, 100 times: duct.core.blocked" out)" -eq 1 ] || fail "no line for a hundred changes"
[ "$(grep -c "changes, 12 times:" out)" -eq 2 ] || fail "no lines for twelve changes"
# All of other keys, more than there is room for.
many=
i=0
for key in inlet.area inlet.recovery inlet.lip_loss inlet.screen inlet.blocked diffuser.loss core.heat_factor \
    core.blocked exit.loss exit.pressure_coefficient fan.health core.air_fouling core.coolant_fouling; do
    i=$((i + 1))
    value=0.1
    [ $key = inlet.area ] && value='"480 cm2"'
    [ $key = fan.health ] && value='"sound"'
    [ $key = inlet.recovery ] || [ $key = core.heat_factor ] && value=0.9
    case $key in *fouling) value='"0.00001 m2.K/W"' ;; esac
    many="$many{\"at\": \"$((10 * i)) s\", \"set\": {\"duct.$key\": $value}}, "
done
want 1 run case.json --set "changes=[$many{\"at\": \"150 s\", \"set\": {\"limits.coolant\": \"60 degC\"}}]"
says out "changes: limits.coolant=60 degC; already"
says out "all events are in events.csv"

# Fans of several kinds, each with its own on-times, which are the same wherever they stand.
fan='"curve": {"shutoff": "170 Pa", "free_flow": "0.25 m3/s"}, "power": "140 W", "run_on": "3 min"'
want 0 run case.json --exact --set "duct.fans=[{$fan, \"switch\": {\"on\": \"88 degC\", \"off\": \"86 degC\"}},
    {$fan, \"switch\": {\"on\": \"90 degC\", \"off\": \"87 degC\"}}, {$fan, \"control\": \"never\"}]"
tr '\n' ' ' <out | tr -s ' ' >flat
for n in 1 2; do
    sum=$(grep -o "duct 1, fan $n ran [0-9]* times\{0,1\}, [0-9.]* s in all" flat | awk '{ print $(NF - 3) }')
    line=$(grep -o "fan runs (duct 1, fan $n)[^a-z]*[a-z]* *[a-z]*,* *[0-9.]* s" flat | awk '{ print $(NF - 1) }')
    [ -n "$sum" ] && [ "$sum" = "$line" ] || fail "fan $n ran '$sum' s and '$line' s: $(grep -n fan out)"
done
says out "duct 1, fan 3 never ran"

# Numbers without exponents; what adds and what takes away apart; what heat leaves by.
want 1 run case.json --set 'limits.coolant=1 degC' --set 'drive[1].power=100 kW' --set 'drive[1].hold=20 min' \
    --set 'duct.exit.area=80 cm2' --set duct.inlet.spill=true --set hoses.heater.flow='6 l/min' --set duct.count=2
says_not out "e+0"
grep -E -q 'Fails first +coolant over limit \(jacket\)' out || fail "no first failure"
tr '\n' ' ' <out | tr -s ' ' | grep -E -q '; [1-9][0-9][0-9] K beyond' || fail "no plain number: $(grep -A1 'Fails' out)"
grep -E -q '^ +spilled air [0-9.]+ [kM]?J of it$' out || fail "no line of spilled air"
grep -E -q '^ +the heat.s thrust gives back [0-9.]+ [kM]?J' out || fail "no line of thrust"
says out "out by the cores"
tr '\n' ' ' <out | tr -s ' ' | grep -q "by skin and heater" || fail "the heater is no skin"

# Defaults that nothing uses are not shown; the time of a change is no value.
want 0 show case.json --set 'changes=[{"at": "8 min", "set": {"duct.inlet.blocked": "30 %"}}]' \
    --set 'duct.core={"width": "480 mm", "height": "340 mm", "depth": "40 mm", "pressure_drop": {"coefficient": 8},
    "heat": {"air_conductance": "3 kW/K", "at_face_velocity": "8 m/s", "coolant_conductance": "9 kW/K",
    "at_coolant_flow": "1.6 kg/s"}}'
says out "duct.inlet.blocked=30 % at 480 s"
says_not out "core.fins."
says_not out "core.tubes."
want 0 show case.json
says out "core.fins.thickness"
says out "core.tubes.wall"

# Columns of what is fitted only.
want 0 run case.json -o plain
head -n 1 plain/series.csv | grep -q 'drag \[N\]$' || fail "columns that a plain car does not have"
want 0 run case.json --set 'car.pump.npsh=3 m' --set 'car.engine.wetted_area=500 cm2' -o more
head -n 1 more/series.csv | grep -q ',npsh_margin \[m\],local_boil_margin \[K\]$' || fail "no columns of what is fitted"
cut -d, -f1-33 more/series.csv | head -n 1 >one
head -n 1 plain/series.csv | cmp -s - one || fail "other columns changed"

# Other drives by --set.
want 0 run case.json --json --set 'drive[2].repeat=2'
close "a step repeated" "$(number duration_s)" 750 1e-12

# A full disk is no success.
if [ -w /dev/full ]; then
    for form in "run case.json" "run case.json --json" "show case.json" "duct case.json --speed 30m/s" --help; do
        # shellcheck disable=SC2086
        "$command" $form >/dev/full 2>err
        [ $? -eq 2 ] || fail "a full disk goes unnoticed: $form"
        says err "standard output"
    done
    "$command" run case.json >&- 2>err
    [ $? -eq 2 ] || fail "a closed output goes unnoticed"
fi
finish
