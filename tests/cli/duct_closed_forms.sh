#!/bin/sh
# Ducts against closed forms of the balance of total pressure, from the case file to the JSON.
#
# phi = face velocity over speed, K core coefficient, r_e = A_c/A_e, k losses on their own head:
#   phi^2 = (recovery - Cp_e) / (K + sum k (A_c/A)^2 + (1 + k_e) r_e^2)
# and with given heat, tau = T3/T2, K (1 + tau)/2 + (tau - 1) for K and tau (1 + k_e) r_e^2 for the exit.
# The numbers were worked out from these outside the program, to six digits; the heated ones by bisection.
# SPDX-License-Identifier: GPL-3.0-or-later
. "$(dirname "$0")/common"
tolerance=1e-5

# Core of 0.25 m2, air of 1.2 kg/m3: p = 1.2 R 290 K.
cat >case.json <<'CASE'
{ "car": { "duct": {
    "inlet": { "area": "0.25 m2" },
    "core": { "width": "0.5 m", "height": "0.5 m", "pressure_drop": { "coefficient": 8 } },
    "exit": { "area": "0.1 m2" } } },
  "air": { "ambient": "290 K", "pressure": "99894.39876 Pa" } }
CASE

want 0 duct case.json --json --speed "40 m/s"
is_json out
close "B2 phi" "$(number velocity_ratio)" 0.264906 $tolerance
close "B2 v_e/V" "$(number exit_velocity_m_s)" "$(awk 'BEGIN { printf "%.9g", 40 * 0.662266 }')" $tolerance
close "temperature ratio, cold" "$(number temperature_ratio)" 1 1e-12
close "density" "$(number density_kg_m3)" 1.2 1e-9

want 0 duct case.json --json --speed "40 m/s" --set duct.inlet.recovery=0.9 \
    --set duct.exit.pressure_coefficient=-0.2
close "B4 phi" "$(number velocity_ratio)" 0.277836 $tolerance

want 0 duct case.json --json --speed "40 m/s" --set 'duct.inlet.area=0.0833333333333 m2' \
    --set duct.diffuser.loss=0.444444444444 --set 'duct.exit.area=0.125 m2' \
    --set duct.exit.pressure_coefficient=-0.2 --set duct.exit.loss=0.05
close "B6 phi" "$(number velocity_ratio)" 0.272166 $tolerance

want 0 duct case.json --json --speed "40 m/s" --set 'duct.exit.area=0.125 m2' \
    --set duct.exit.pressure_coefficient=-0.15 --set 'duct.core.pressure_drop=
    {"linear": "60 Pa.s/m", "quadratic": "12 Pa.s2/m2", "at_density": "1.2 kg/m3"}'
close "B8 face velocity" "$(number face_velocity_m_s)" 6.917052 $tolerance
close "B8 core" "$(number core)" 989.1705 $tolerance

want 0 duct case.json --json --speed "50 m/s" --set 'duct.exit.area=0.125 m2'
close "D1 phi" "$(number velocity_ratio)" 0.288675 $tolerance
close "D1 mass flow" "$(number mass_flow_kg_s)" 4.330127 $tolerance
close "D1 drag" "$(number internal_drag_N)" 91.50635 $tolerance
want 0 duct case.json --json --speed "50 m/s" --set duct.exit.pressure_coefficient=-0.2
close "D2 exit velocity" "$(number exit_velocity_m_s)" 36.27381 $tolerance
close "D2 drag" "$(number internal_drag_N)" 89.74814 $tolerance

# Heat. Speeds in other units, more than one point in one go.
sed 's/290 K/300 K/; s/99894.39876 Pa/101325 Pa/; s/"0.1 m2"/"1250 cm2", "pressure_coefficient": -0.2/' \
    case.json >heat.json
set -- heat.json --json --set duct.inlet.recovery=0.95 --set duct.core.pressure_drop.coefficient=9
want 0 duct "$@" --speed "50 m/s"
close "H3 phi" "$(number velocity_ratio)" 0.297425 $tolerance
close "H3 mass flow" "$(number mass_flow_kg_s)" 4.374422 $tolerance
want 0 duct "$@" --speed "180 km/h" --heat "100 kW"
close "H4 phi" "$(number velocity_ratio)" 0.289297 $tolerance
close "H4 mass flow" "$(number mass_flow_kg_s)" 4.254875 $tolerance
close "H4 temperature ratio" "$(number temperature_ratio)" 1.077976 $tolerance
close "H4 exit velocity" "$(number exit_velocity_m_s)" 31.18548 $tolerance
want 0 duct "$@" --speed "25 m/s" --speed "50 m/s" --heat "0.1 MW"
close "H5 phi" "$(number velocity_ratio)" 0.281396 $tolerance
close "H5 mass flow" "$(number mass_flow_kg_s)" 2.069341 $tolerance
close "H5 temperature ratio" "$(number temperature_ratio)" 1.160331 $tolerance
close "H5 exit velocity" "$(number exit_velocity_m_s)" 16.32565 $tolerance
[ "$(grep -c '"velocity_ratio"' out)" -eq 2 ] || fail "two speeds do not give two points"

# A head wind is speed through the air.
want 0 duct case.json --json --speed "30 m/s" --set 'air.wind=10 m/s'
close "B2 with wind" "$(number face_velocity_m_s)" "$(awk 'BEGIN { printf "%.9g", 40 * 0.264906 }')" $tolerance

# Moist air at 20 degC, 101325 Pa, 50 %: 1.1988668 kg/m3 (dry 1.2041063), vapour by the Magnus form; 4300 m of
# the US Standard Atmosphere 1976, at its own 260.2189 K: 0.7937550 kg/m3.
want 0 duct case.json --json --speed "40 m/s" --set 'air={"ambient": "20 degC", "pressure": "101325 Pa",
    "humidity": "50 %"}'
close "moist air" "$(number density_kg_m3)" 1.1988668 1e-6
want 0 duct case.json --json --speed "40 m/s" --set 'air={"ambient": "260.2189 K", "altitude": "4300 m"}'
close "thin air" "$(number density_kg_m3)" 0.7937550 1e-6

# Wind from behind faster than the car: the air flows backwards, and no loss is a gain.
want 0 duct case.json --json --speed "0 m/s" --set 'air.wind=-10 m/s'
awk -v m="$(number mass_flow_kg_s)" 'BEGIN { exit !(m < 0) }' || fail "no reverse flow: $(number mass_flow_kg_s)"
# For a person the losses in reverse are listed with their sum, which is what drives the flow from behind the
# exit to before the inlet: (Cp - recovery) q, here 0.3 of 60 Pa.
want 0 duct case.json --speed "10 m/s" --set duct.inlet.screen=0.5 \
    --set duct.inlet.recovery=0.2 --set duct.exit.pressure_coefficient=0.5
says_not out "not recovered"
awk '/share of q/ { on = 1; next }
    on && $NF == "%" { if (/exit \(total\) to inlet \(static\)/) { total = $(NF - 2); exit } sum += $(NF - 2); ++n }
    END { exit !(n == 4 && (total - 18) ^ 2 < 1e-4 && (sum - total) ^ 2 < 9e-4) }' out ||
    fail "losses in reverse: $(cat out)"
want 0 duct case.json --json --speed "10 m/s" --set 'air.wind=-10 m/s'
[ "$(number velocity_ratio)" = null ] || fail "velocity ratio in still air is not null"

# Fan at a standstill: 250 Pa (1 - (Q/0.8)^2), K = 10 on 0.2 m2, lip 0.5 on 0.08 m2, exit 0.12 m2.
cat >fan.json <<'CASE'
{ "car": { "duct": {
    "inlet": { "area": "800 cm2", "lip_loss": 0.5 },
    "core": { "width": "500 mm", "height": "400 mm", "pressure_drop": { "coefficient": 10 } },
    "fan": { "curve": { "shutoff": "250 Pa", "free_flow": "0.80 m3/s" } },
    "exit": { "area": "1200 cm2" } } },
  "air": { "ambient": "290 K", "pressure": "99894.39876 Pa" } }
CASE
want 0 duct fan.json --json --speed "0 m/s" --fan on
is_json out
close "F1 flow" "$(number mass_flow_kg_s)" "$(awk 'BEGIN { printf "%.9g", 1.2 * 0.630358 }')" $tolerance
close "F1 face velocity" "$(number face_velocity_m_s)" 3.151789 $tolerance
close "F1 fan" "$(number fan_pressure_Pa)" 94.7848 $tolerance
[ "$(number velocity_ratio)" = null ] || fail "velocity ratio at a standstill is not null"
want 0 duct fan.json --json --speed "0 m/s"
[ "$(number mass_flow_kg_s)" = 0 ] || fail "flow without speed, fan or wind: $(number mass_flow_kg_s)"

# Leaks (B9, B10): front plenum to bay by gap and length, and to outside; two equal ducts carry twice the air.
leaking="--set duct.diffuser.loss=0.05 --set duct.exit.pressure_coefficient=-0.2"
want 0 duct case.json --json --speed "40 m/s" --set 'duct.inlet.area=0.0833333333333 m2' $leaking --set duct.count=2 \
    --set 'duct.leak={"past_core": {"gap": "6.25 mm", "length": "2 m", "coefficient": 2.5}}'
is_json out
close "B9 phi" "$(number velocity_ratio)" 0.274272 $tolerance
close "B9 leak" "$(number leak_past_core_kg_s)" "$(awk 'BEGIN { printf "%.9g", 0.089443 * 0.274272 * 40 * 0.3 }')" $tolerance
close "B9 two ducts" "$(number mass_flow_kg_s)" "$(awk 'BEGIN { printf "%.9g", 2 * 0.274272 * 40 * 0.3 }')" $tolerance
want 0 duct case.json --json --speed "40 m/s" --set 'duct.inlet.area=0.0833333333333 m2' $leaking \
    --set 'duct.leak={"outside": {"area": "125 cm2", "coefficient": 2.5}}'
close "B10 phi" "$(number velocity_ratio)" 0.284719 $tolerance
want 0 duct case.json --speed "40 m/s" --set 'duct.inlet.area=0.0833333333333 m2' $leaking \
    --set 'duct.leak={"outside": {"area": "125 cm2", "coefficient": 2.5}}'
says out "leak to outside"
awk 'length($0) > 80 { exit 1 }' out || fail "text wider than 80 columns: $(cat out)"
want 2 duct case.json --speed "40 m/s" --set 'duct.leak={"outside": {"area": "125 cm2", "gap": "1 mm"}}'
says err "either area, or gap and length"
says err "duct.leak.outside.length"

# Air hotter than the model is made for is a caution that names the speed: 20 kW into 0.03 kg/s.
want 0 duct fan.json --json --speed "1 m/s" --heat "20 kW"
says err "caution"
says err "at 1 m/s"
says err "outside the model's range"
is_json out
want 0 duct fan.json --speed "20 m/s" --speed "1 m/s" --heat "20 kW"
[ "$(grep -c "outside the model's range" err)" -eq 1 ] || fail "not one caution: $(cat err)"

# The same for a person: no wider than 80 columns, and the losses are there.
want 0 duct fan.json --speed "10 m/s" --heat "20 kW" --fan on
awk 'length($0) > 80 { exit 1 }' out || fail "text wider than 80 columns"
says out "share of q"
says out "core face"

# Equal ducts: heat and flow of all of them, in the text and in the JSON; each one's share of what is asked for.
write_case
want 0 duct case.json --speed "30 m/s" --heat "60 kW" --set duct.count=2
head -n 1 out | grep -q "60 kW to the air: 30 kW in each of 2 ducts" || fail "heat of two ducts: $(head -n 1 out)"
want 0 duct case.json --speed "30 m/s" --heat "30 kW" --json
m=$(number mass_flow_kg_s)
want 0 duct case.json --speed "30 m/s" --heat "60 kW" --json --set duct.count=2
close "heat of two ducts" "$(number heat_W)" 60000 1e-12
close "flow of two ducts" "$(number mass_flow_kg_s)" "$(awk -v m="$m" 'BEGIN { printf "%.15g", 2 * m }')" 1e-9

# Cores and exits with names of their own, and such without.
set -- --set 'duct.exits=[{"area": "400 cm2", "place": "wheel arch"}, {"area": "300 cm2"}]' --set duct.core.name=radiator
want 0 duct case.json --speed "30 m/s" "$@"
grep -q "^  exit wheel arch  *[0-9.]* kg/s" out || fail "no place of the exit"
grep -q "^  exit 2  *[0-9.]* kg/s" out || fail "no number of the exit"
grep -q "^  radiator  *[0-9.]* kg/s" out || fail "no name of the core"
want 0 duct case.json --speed "30 m/s" --json "$@"
is_json out
says out '"name": "radiator"'
says out '"wheel arch"'
finish
