#!/bin/sh
# Being hot is a verdict, never a failure of the numerics; above boiling the peak is marked and not clipped.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"
write_case

hot() {
    want 1 run case.json --json "$@"
    is_json out
    [ "$(number verdict)" = '"overheats"' ] || fail "verdict $(number verdict) with $*"
    awk -v e="$(number relative_error)" 'BEGIN { exit !(e < 1e-4 && e > -1e-4) }' ||
        fail "ledger $(number relative_error) with $*"
}

hot --set 'limits.coolant=86 degC'
hot --set 'air.ambient=55 degC' --set 'drive[1].power=100 kW'
hot --set 'pump.curve.shutoff=0.5 kPa' --set 'pump.curve.free_flow=3 l/min' --set 'drive[1].power=80 kW'
hot --set 'duct.inlet.area=5 cm2' --set 'drive[1].power=100 kW' --set 'drive[1].hold=20 min'
[ "$(number boils)" = true ] || fail "boiling is not marked"
awk -v p="$(number coolant_degC)" 'BEGIN { exit !(p > 140) }' || fail "the peak is clipped: $(number coolant_degC)"
awk -v m="$(number boil_margin_K)" 'BEGIN { exit !(m < 0) }' || fail "boil margin $(number boil_margin_K)"
says out '"what": "coolant boils"'
want 1 run case.json --set 'duct.inlet.area=5 cm2' --set 'drive[1].power=100 kW' --set 'drive[1].hold=20 min'
says out "past boiling"
awk 'length($0) > 80 { exit 1 }' out || fail "text wider than 80 columns"
hot --set 'limits={"boil_margin": "80 K"}'
[ "$(number limit)" = '"limits.boil_margin"' ] || fail "limit $(number limit)"
hot --set 'limits={"metal": "90 degC"}'
hot --set 'limits={"gauge": "86 degC"}'
finish
