/* The circuit's single balances, each against a sum on paper: what goes round, what the core's cells pass on,
 * what is lost to the air, what the engine gives, and how thermostat, gauge, tank and boiling are reckoned at
 * one instant.
 *
 * Sources stand beside the tests. Coolant values are those of the ASHRAE table for 50 % ethylene glycol,
 * steam those of IAPWS-IF97. SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

static struct fixture fixture;

struct rig {
    struct sp_design d;
    struct sp_circuit c;
    struct sp_inputs in;
    struct sp_modes modes;
    double y[SP_Y_MOST];
};

/* The fixture's car with the engine on at 30 m/s; tests change what they need, then prepare(). */
static void take(struct rig *r)
{
    memset(r, 0, sizeof *r);
    r->d = *fixture.base;
    r->in.in[SP_IN_SPEED] = r->in.in[SP_IN_AIR_SPEED] = 30.0;
    r->in.in[SP_IN_WAKE] = 1.0;
    r->in.in[SP_IN_AMBIENT] = 298.15;
    r->in.in[SP_IN_PRESSURE] = 101325.0;
    r->in.in[SP_IN_ENGINE_SPEED] = 80.0;
    r->in.in[SP_IN_MEASURED] = NAN;
    r->in.flags = SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN;
}

static void prepare(struct rig *r)
{
    struct sp_complaints c = {0};
    assert_true(sp_circuit_build(&r->d, &r->c, &c));
    sp_circuit_start(&r->c, &r->in, r->y);
}

static void rates(struct rig *r, struct sp_coupling *k, double *dydt)
{
    struct sp_signals s;
    struct sp_guesses guesses;
    memset(&guesses, 0, sizeof guesses);
    sp_circuit_signals(&r->c, &r->in, r->y, &s);
    assert_int_equal(sp_circuit_couple(&r->c, &r->in, &r->modes, &s, &guesses, k), SP_OK);
    sp_circuit_rates(&r->c, &r->in, &r->modes, r->y, k, dydt);
}

static struct fixture_drive drive(struct sp_design *d, struct sp_step *step, double interval)
{
    d->step = step;
    d->steps = 1;
    struct fixture_drive r = fixture_run(&fixture, d, interval, 1e-8);
    sp_complaints_print(&r.complaints, false, stderr);
    assert_true(r.status == SP_OK || r.status == SP_NOT);
    return r;
}

/* ---- coolant ------------------------------------------------------------------------------------------ */

/* Dittus-Boelter, h = 0.023 k/D Re^0.8 Pr^0.4, at one mass flow in one tube: h goes with k^0.6 c^0.4 mu^-0.4.
 * ASHRAE, 20 and 90 degC: 0.380, 0.414 W/mK; 3281, 3551 J/kgK; 3.94, 0.82 mPa s. So 0.4912 of the warm one.
 */
static void cold_film_is_weaker(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    r.d.duct[0].core[0].heat_law = SP_CORE_POWER;
    r.d.duct[0].core[0].air_conductance = 1e3;
    r.d.duct[0].core[0].air_exponent = 0.5;
    r.d.duct[0].core[0].at_face_velocity = 5.0;
    r.d.duct[0].core[0].heat_at_density = 1.2;
    r.d.duct[0].core[0].coolant_conductance = 5e3;
    r.d.duct[0].core[0].coolant_exponent = 0.8;
    r.d.duct[0].core[0].at_coolant_flow = 1.5;
    prepare(&r);
    double re_ratio = 0.82 / 3.94, pr_ratio = (3281.0 * 3.94 / 0.380) / (3551.0 * 0.82 / 0.414);
    double want = 0.380 / 0.414 * pow(re_ratio, 0.8) * pow(pr_ratio, 0.4);
    check_close(want, 0.4912, 0, 6e-5);
    const struct sp_coolant *f = &r.d.coolant.fluid;
    double warm = sp_core_coolant_conductance(&r.c.duct[0]->core[0], f, 2.0, 363.15);
    check_close(sp_core_coolant_conductance(&r.c.duct[0]->core[0], f, 2.0, 293.15) / warm, want, 6e-3, 0);
    check_close(sp_core_coolant_conductance(&r.c.duct[0]->core[0], f, 4.0, 363.15) / warm, pow(2.0, 0.8), 1e-6, 0);
    sp_circuit_free(&r.c);
}

/* Blasius: a drop goes with rho^0.75 mu^0.25 Q^1.75. ASHRAE, 20 and 90 degC: 1073.35, 1030.95 kg/m3. */
static void cold_coolant_is_harder_to_pump(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    r.d.duct[0].core[0].drop = (struct sp_resistance){1e-3, 15e3};
    prepare(&r);
    const struct sp_core_ready *core = &r.c.duct[0]->core[0];
    const struct sp_coolant *f = &r.d.coolant.fluid;
    double warm = sp_core_coolant_drop(core, f, 1e-3, 363.15);
    double want = pow(1073.35 / 1030.95, 0.75) * pow(3.94 / 0.82, 0.25);
    check_close(sp_core_coolant_drop(core, f, 1e-3, 293.15) / warm, want, 4e-3, 0);
    check_close(sp_core_coolant_drop(core, f, 2e-3, 363.15) / warm, 3.363586, 1e-6, 0); /* 2^1.75 */
    check_close(warm, 15e3 * pow(1.03095, 0.75) * pow(0.82 / 0.7, 0.25), 3e-3, 0); /* ASHRAE at 90 degC */
    sp_circuit_free(&r.c);
}

/* Settled, the air takes what the coolant brings: volume flow times 1030.95 kg/m3 times 3551 J/kgK times the
 * difference over the core; and what came in is what goes out by core and skin. */
static void coolant_carries_the_heat(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    fixture_freeze(&d.coolant.fluid);
    struct sp_step s = fixture_hold(4000.0, 30.0, 60e3, 80.0);
    struct fixture_drive r = drive(&d, &s, 4000.0);
    double carried = 1030.95 * fixture_last(&r, SP_CH_RADIATOR_FLOW) * 3551.0 *
                     (fixture_last(&r, SP_CH_RADIATOR_IN) - fixture_last(&r, SP_CH_RADIATOR_OUT));
    check_close(fixture_last(&r, SP_CH_HEAT_OUT), carried, 1e-6, 0);
    check_close(fixture_last(&r, SP_CH_HEAT_IN),
                fixture_last(&r, SP_CH_HEAT_OUT) + fixture_last(&r, SP_CH_HEAT_SKIN), 1e-6, 0);
    fixture_drop(&r);
}

/* The same with real properties: heat is the integral of c, ASHRAE's line 3203.4 + 3.8616 t J/kgK, over what
 * the core takes off, and density that of the table at the jacket. */
static void enthalpy_goes_round(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    struct sp_step s = fixture_hold(4000.0, 30.0, 60e3, 80.0);
    struct fixture_drive r = drive(&d, &s, 4000.0);
    double in = fixture_last(&r, SP_CH_RADIATOR_IN) - 273.15,
           out = fixture_last(&r, SP_CH_RADIATOR_OUT) - 273.15;
    double hot = fixture_last(&r, SP_CH_ENGINE_OUT) - 273.15;
    double rho = 1038.46 + (hot - 80.0) * (1030.95 - 1038.46) / 10.0; /* between 80 and 90 degC */
    double carried =
        rho * fixture_last(&r, SP_CH_RADIATOR_FLOW) * (3203.4 + 3.8616 * 0.5 * (in + out)) * (in - out);
    assert_true(hot > 75.0 && hot < 95.0 && in - out > 2.0);
    check_close(fixture_last(&r, SP_CH_HEAT_OUT), carried, 3e-4, 0);
    fixture_drop(&r);
}

/* Past a wall of one temperature coolant cools by T - W = (T_0 - W) e^(-B x/(m c)), whatever the number of
 * cells: with these temperatures laid along the core nothing changes, and the wall gets what the coolant
 * loses. */
static void core_cells_along_an_even_wall(void **state)
{
    (void)state;
    for (double cells = 1.0; cells <= 9.0; cells += 4.0) {
        struct rig r;
        take(&r);
        fixture_freeze(&r.d.coolant.fluid);
        r.d.thermostat.none = true;
        r.d.duct[0].core[0].cells = cells;
        prepare(&r);
        const struct sp_layout *l = &r.c.layout;
        int n = l->cells;
        struct sp_coupling k;
        double dydt[SP_Y_MOST], inlet = 363.15, wall = 333.15;
        r.y[SP_Y_JACKET] = inlet;
        for (int i = 0; i < SP_HOSE_CELLS; ++i)
            r.y[l->out + i] = inlet;
        for (int i = 0; i < n; ++i)
            r.y[l->wall + i] = wall;
        rates(&r, &k,
              dydt); /* for the flow and the conductance, which the frozen coolant leaves as they are */
        double rate = k.mass_radiator * 3551.0, number = k.core[0].conductance / rate;
        for (int i = 0; i < n; ++i)
            r.y[l->core + i] = wall + (inlet - wall) * exp(-number * (i + 1) / n);
        rates(&r, &k, dydt);
        check_close(k.core[0].conductance / (k.mass_radiator * 3551.0), number, 1e-9, 0);
        assert_true(number > 0.1);
        double into_wall = 0.0;
        for (int i = 0; i < n; ++i) {
            check_close(dydt[l->core + i] * r.c.exchanger[0].mass / n * 3551.0, 0.0, 0, 1e-8 * rate * (inlet - wall));
            into_wall += dydt[l->wall + i] * r.d.duct[0].core[0].metal_capacity / n;
        }
        check_close(into_wall + k.duct[0].heat, rate * (inlet - r.y[l->core + n - 1]), 1e-8, 0);
        sp_circuit_free(&r.c);
    }
}

/* What stands around in the air at 25 degC: engine 20 W/K standing, 55 at 100 km/h, hoses 6, tank 2. */
static void skin(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    r.d.engine.skin_standing = 20.0;
    r.d.engine.skin_moving = 55.0;
    r.d.hoses.skin = 6.0;
    r.d.tank.skin = 2.0;
    prepare(&r);
    r.y[SP_Y_METAL] = 378.15;
    r.y[SP_Y_TANK] = 338.15;
    for (int i = 0; i < SP_HOSE_CELLS; ++i) {
        r.y[r.c.layout.out + i] = 368.15;
        r.y[r.c.layout.back + i] = 348.15;
    }
    const double speed[] = {0.0, 50.0 / 3.6, 100.0 / 3.6, 60.0}, engine[] = {20.0, 37.5, 55.0, 55.0};
    for (int i = 0; i < 4; ++i) {
        struct sp_coupling k;
        double dydt[SP_Y_MOST];
        r.in.in[SP_IN_AIR_SPEED] = speed[i];
        rates(&r, &k, dydt);
        check_close(dydt[SP_Y_HEAT_SKIN], engine[i] * 80.0 + 6.0 * 60.0 + 2.0 * 40.0, 1e-12, 0);
    }
    sp_circuit_free(&r.c);
}

/* ---- engine ------------------------------------------------------------------------------------------- */

/* Heat goes with gas less metal (Taylor & Toong 1957): gas 840 K, law for metal at 105 degC; at 20 degC it is
 * (840 - 293.15)/(840 - 378.15) = 1.184042 of it, at 130 degC 0.945870. Friction's heat knows nothing of
 * that. */
static void cold_metal_takes_more(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    r.d.engine.gas_temperature = 840.0;
    r.d.engine.gas_reference = 378.15;
    r.in.in[SP_IN_HEAT_GAS] = 30e3;
    r.in.in[SP_IN_HEAT_FRICTION] = 2e3;
    prepare(&r);
    const double metal[] = {293.15, 378.15, 403.15}, factor[] = {1.184042, 1.0, 0.945870};
    for (int i = 0; i < 3; ++i) {
        struct sp_coupling k;
        double dydt[SP_Y_MOST];
        r.y[SP_Y_METAL] = metal[i];
        rates(&r, &k, dydt);
        check_close(dydt[SP_Y_HEAT_IN], 30e3 * factor[i] + 2e3, 0, 0.03);
    }
    sp_circuit_free(&r.c);
}

/* A fan of 300 W at full speed, by an alternator of 0.55, loads the crank with 545.45 W; at 0.4 W/W that is
 * 218.18 W of heat; at half speed an eighth, by the fan laws. With the engine off the battery drives it. */
static void fan_loads_the_engine(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    r.d.engine.gas_temperature = NAN;
    r.d.electrics.alternator_efficiency = 0.55;
    r.d.duct[0].fan[0].power = 300.0;
    r.in.in[SP_IN_HEAT_SLOPE] = 0.4;
    prepare(&r);
    struct sp_coupling k;
    double dydt[SP_Y_MOST];
    const double speed[] = {0.0, 0.5, 1.0}, heat[] = {0.0, 27.27273, 218.18182};
    for (int i = 0; i < 3; ++i) {
        r.y[SP_Y_FAN] = speed[i];
        rates(&r, &k, dydt);
        check_close(dydt[SP_Y_HEAT_IN], heat[i], 0, 1e-4);
        check_close(dydt[SP_Y_FAN_ENERGY], 300.0 * pow(speed[i], 3.0), 1e-12, 0);
    }
    r.in.flags = SP_FLAG_FAN;
    rates(&r, &k, dydt);
    assert_true(dydt[SP_Y_HEAT_IN] == 0.0);
    sp_circuit_free(&r.c);
}

/* ---- thermostat and gauge -------------------------------------------------------------------------------
 */

/* Lift goes by the wax, not by the coolant round it; and a thermostat shuts some kelvin below where it
 * opened. */
static void lift_follows_the_wax(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    r.d.thermostat.opens = 355.15;
    r.d.thermostat.full = 367.15;
    r.d.thermostat.hysteresis = 3.0;
    prepare(&r);
    r.y[SP_Y_JACKET] = 369.15;
    r.y[SP_Y_WAX] = 358.15;
    struct sp_coupling k;
    double dydt[SP_Y_MOST];
    r.modes.play = SP_PLAY_OPENING;
    rates(&r, &k, dydt);
    check_close(k.lift, 3.0 / 12.0, 1e-12, 0);
    r.modes.play = SP_PLAY_SHUTTING; /* cooling: as open as it was 3 K hotter on its way up */
    rates(&r, &k, dydt);
    check_close(k.lift, 6.0 / 12.0, 1e-12, 0);
    sp_circuit_free(&r.c);
}

/* A sensor with a lag of 9 s stands 9 s behind a steady rise: at a rate of 0.8 K/s by 7.2 K. */
static void gauge_lags(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    r.d.gauge.lag = 9.0;
    r.d.gauge.place = SP_AT_ENGINE_OUT;
    prepare(&r);
    r.y[SP_Y_JACKET] = 363.15;
    r.y[SP_Y_GAUGE] = 363.15 - 7.2;
    struct sp_coupling k;
    double dydt[SP_Y_MOST];
    rates(&r, &k, dydt);
    check_close(dydt[SP_Y_GAUGE], 0.8, 1e-9, 0);
    sp_circuit_free(&r.c);
}

/* ---- tank and boiling ------------------------------------------------------------------------------------
 */

/* 50 % ethylene glycol is 0.7578 water by moles. Vapour by Raoult's law: of water 2.339 kPa at 20 degC
 * and 47.415 at 80 (IAPWS-IF97), of glycol some 0.01 and 0.7 (practice): 1.77 and 36.1 kPa. Filled at 20 degC
 * and 101.325 kPa, the tank's gas heated to 80 degC, no room lost: 99.55 kPa * 353.15/293.15 + 36.1 kPa =
 * 156.0 kPa. */
static void tank_gas_and_vapour(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    check_close(r.d.coolant.fluid.water_mole, 0.7578, 0, 2e-4);
    memset(r.d.coolant.fluid.density, 0, sizeof r.d.coolant.fluid.density);
    r.d.coolant.fluid.density[0] = 1050.0;
    r.d.tank.compliance = 1e-18;
    r.d.tank.fill_temperature = 293.15;
    r.d.start = (struct sp_start){.coolant = 293.15, .metal = NAN, .radiator = NAN};
    prepare(&r);
    struct sp_tank_inputs inputs;
    check_close(sp_circuit_tank(&r.c, &r.in, r.y, &inputs).pressure, 101.325e3, 1e-9, 0);
    r.y[SP_Y_TANK] = 353.15;
    check_close(sp_circuit_tank(&r.c, &r.in, r.y, &inputs).pressure, 156.0e3, 0, 0.3e3);
    sp_circuit_free(&r.c);
}

/* Water boils at 120.21 degC under 200 kPa and at 99.97 degC under 101.325 kPa (IAPWS-IF97). The engine's
 * outlet stands under the tank's pressure, the pump's rise more and the jacket's drop less; the pump's inlet
 * under the tank's. */
static void pump_holds_off_boiling(void **state)
{
    (void)state;
    struct rig r;
    take(&r);
    assert_true(sp_coolant_mix(SP_WATER, 0.0, &r.d.coolant.fluid));
    r.d.coolant.kind = SP_WATER;
    r.d.coolant.share = 0.0;
    prepare(&r);
    struct sp_coupling k = {.mass_pump = 2.0, .mass_radiator = 2.0};
    k.loop.rise = 118.675e3;
    k.loop.jacket_drop = 20e3;
    r.y[SP_Y_JACKET] = 118.0 + 273.15;
    for (int i = 0; i < SP_HOSE_CELLS; ++i)
        r.y[r.c.layout.back + i] = 70.0 + 273.15;
    check_close(sp_circuit_boil_margin(&r.c, &r.in, r.y, &k, 101.325e3), 2.21, 0, 0.1);
    for (int i = 0; i < SP_HOSE_CELLS; ++i)
        r.y[r.c.layout.back + i] = 99.0 + 273.15;
    check_close(sp_circuit_boil_margin(&r.c, &r.in, r.y, &k, 101.325e3), 0.97, 0, 0.1);
    k.mass_radiator = 1.0; /* half comes back from the bypass, as hot as it left: (99 + 118)/2 */
    k.mass_bypass = 1.0;
    check_close(sp_circuit_boil_margin(&r.c, &r.in, r.y, &k, 101.325e3), 99.97 - 108.5, 0, 0.1);
    sp_circuit_free(&r.c);
}

static int begin(void **state)
{
    (void)state;
    fixture = fixture_open();
    return 0;
}

static int end(void **state)
{
    (void)state;
    fixture_close(&fixture);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(cold_film_is_weaker),           cmocka_unit_test(cold_coolant_is_harder_to_pump),
        cmocka_unit_test(coolant_carries_the_heat),      cmocka_unit_test(enthalpy_goes_round),
        cmocka_unit_test(core_cells_along_an_even_wall), cmocka_unit_test(skin),
        cmocka_unit_test(cold_metal_takes_more),         cmocka_unit_test(fan_loads_the_engine),
        cmocka_unit_test(lift_follows_the_wax),          cmocka_unit_test(gauge_lags),
        cmocka_unit_test(tank_gas_and_vapour),           cmocka_unit_test(pump_holds_off_boiling),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
