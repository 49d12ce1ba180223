#!/bin/sh
# Faults of files: each with file, line, path, what stands there and what should; all of them in one go.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"
write_case

# spoil SED-SCRIPT: a copy of the case with one thing changed.
spoil() {
    sed "$1" case.json >bad.json
    cmp -s case.json bad.json && fail "nothing spoilt by $1"
}

want 2 run missing.json
says err "swirlpot: missing.json: found No such file or directory; expected"
want 2 run .
says err "a directory"

printf '{ "car": {},\n  "air": { "ambient" "30 degC" } }\n' >bad.json
want 2 run bad.json
says err "swirlpot: bad.json, line 2"
[ "$(wc -l <err)" -eq 1 ] || fail "a syntax fault does not stand alone"

spoil 's/"mass": "800 kg"/"mas": "800 kg"/'
want 2 run bad.json
says err "swirlpot: bad.json, line 3, car.body.mas: found"
says err 'mass'

spoil 's/"500 cm2"/"500 cm"/'
want 2 run bad.json
says err 'swirlpot: bad.json, line 9, car.duct.inlet.area: found "500 cm"'
want 2 duct bad.json --speed "30 m/s"
says err "car.duct.inlet.area"
want 2 show bad.json
says err "car.duct.inlet.area"

spoil 's/"30 degC"/"30"/'
want 2 run bad.json
says err "air.ambient"

# Several at once, none hidden by another.
spoil 's/"500 cm2"/"500 cm"/; s/"800 kg"/"-800 kg"/; s/"90 s"/"90 degC"/; s/"limits"/"limit"/'
want 2 run bad.json --every "1 km"
for path in car.duct.inlet.area car.body.mass "drive[0].idle" "limit" --every; do says err "$path"; done

# A car where a case belongs.
printf '{ "body": { "mass": "800 kg" },\n  "engine": {}, "duct": {} }\n' >acar.json
want 2 run acar.json
says err 'swirlpot: acar.json, line 1, body: found a key of a car'
says err 'this looks like a car; name it under "car"'
[ "$(wc -l <err)" -eq 1 ] || fail "a car for a case is more than one complaint"

# A hint only where a known key is near.
spoil 's/"limits"/"zzzzzz"/'
want 2 run bad.json
says_not err "nearest"

# Two values in the wrong order, in the user's own words.
want 2 run case.json --set 'thermostat.full=176 degF'
says err 'thermostat.full: found "176 degF"; expected full above opens, which is 85 degC by default'

# Power from an engine that stands: a complaint, or held with repair.
printf 'time [s],speed [km/h],power [kW],engine_speed [rpm]\n0,50,20,3000\n1,50,20,0\n2,50,20,3000\n' >lost.csv
want 2 run case.json --set 'drive=[{"trace": "lost.csv"}]'
says err 'swirlpot: lost.csv, engine_speed: found 0 rpm with 20 kW at 1 s, row 2; expected above 255 rpm'
says err 'layout.repair'
want 0 run case.json --set 'drive=[{"trace": "lost.csv", "layout": {"repair": true}}]'
says err 'power without engine speed at 1 row'
want 2 run case.json --set 'drive[1].engine_speed=0 rpm'
says err 'drive[1].engine_speed: found 0 rpm with a power of 30 kW'
want 0 run case.json --set 'drive[1].power=150 kW' --set 'limits.coolant=200 degC'
says err 'drive[1]: found power up to 150 kW; expected no more than 1.3 times car.engine.rated_power'
want 0 run case.json
[ -s err ] && fail "cautions where nothing is doubtful: $(cat err)"

want 2 run case.json --set duct.exit.aera="600 cm2"
says err "area"
want 2 run case.json --set duct.exit.area
want 2 run case.json --set duct.exit.area="600 cm"
says err "duct.exit.area"

# A fault in a file that the case names also names the case.
printf '{ "duct": { "inlet": { "area": "500 cm" } } }\n' >car.json
printf '{ "car": "car.json", "air": { "ambient": "30 degC" } }\n' >named.json
want 2 duct named.json --speed "30 m/s"
says err "car.json, line 1"
says err "named by named.json"
printf 'time [s],speed [km/h]\n0,0\n1,oops\n' >trace.csv
sed 's/{ "idle": "90 s" }/{ "trace": "trace.csv" }/' case.json >traced.json
want 2 run traced.json
says err "trace.csv, line 3"
says err "traced.json"

# A key that stands twice does not hide the file's other faults.
printf '{ "air": { "ambient": "30 degC", "ambient": "31 degC" }, "widht": 3,
 "car": { "duct": { "inlet": { "area": "5 kg" } } } }\n' >twice.json
want 2 duct twice.json --speed "30 m/s"
says err "twice.json, line 1, air.ambient"
says err "widht"
says err "twice.json, line 2, car.duct.inlet.area"

# Heat into standing air, and a fan that is not there.
want 2 duct case.json --speed "0 m/s" --heat "60 kW"
says err "--heat"
printf '{ "car": { "duct": { "inlet": { "area": "500 cm2" }, "exit": { "area": "800 cm2" },
  "core": { "width": "500 mm", "height": "350 mm", "pressure_drop": { "coefficient": 8 } } } },
  "air": { "ambient": "30 degC" } }\n' >plain.json
want 2 duct plain.json --speed "30 m/s" --fan on
says err "no fan"
want 0 duct plain.json --speed "30 m/s" --fan off
finish
