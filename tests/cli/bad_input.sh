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
