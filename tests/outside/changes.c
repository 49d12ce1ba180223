/* What a change of the car starts, what a standing car uses, and what a tank remembers: against the samples
 * of the same drive and closed forms. SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

static struct fixture fixture;

static struct sp_step soak(double time)
{
    return (struct sp_step){.kind = SP_STEP_SOAK, .time = time, .repeat = 1.0, .following = NAN};
}

static struct fixture_drive drive(const struct sp_design *d, double interval)
{
    struct fixture_drive r = fixture_run(&fixture, d, interval, 1e-7);
    sp_complaints_print(&r.complaints, false, stderr);
    assert_true(r.status == SP_OK || r.status == SP_NOT);
    return r;
}

/* When a channel first goes from at most `level` to above it, after `from`; linear between samples. */
static double rises(const struct fixture_drive *r, enum sp_channel c, double level, double from)
{
    for (size_t i = 1; i < r->series.count; ++i) {
        const double *a = r->series.row[i - 1].value, *b = r->series.row[i].value;
        if (a[SP_CH_TIME] < from || !(a[c] <= level && b[c] > level)) continue;
        return a[SP_CH_TIME] + (level - a[c]) / (b[c] - a[c]) * (b[SP_CH_TIME] - a[SP_CH_TIME]);
    }
    return NAN;
}

static const struct sp_event *event_of(const struct fixture_drive *r, enum sp_event_kind kind, double from)
{
    for (size_t i = 0; i < r->result.events; ++i)
        if (r->result.event[i].kind == kind && r->result.event[i].time >= from) return &r->result.event[i];
    return NULL;
}

/* ---- changes ------------------------------------------------------------------------------------------ */

static char blocked[] = "duct.inlet.blocked=90 %", more[] = "duct.inlet.blocked=95 %", never[] = "never";

/* Seconds from the change to the limit; nought when it is passed already; nothing after the end. */
static void seconds_to_the_limit(void **state)
{
    (void)state;
    struct sp_step step[1] = {fixture_hold(600.0, 30.0, 80e3, 80.0)};
    struct sp_design d = *fixture.base, to[3];
    d.step = step;
    d.steps = 1;
    d.limits = only_limits(380.0, NAN, NAN, NAN);
    for (int i = 0; i < 3; ++i)
        to[i] = d;
    to[0].duct[0].inlet.blocked = 0.90;
    to[1].duct[0].inlet.blocked = to[2].duct[0].inlet.blocked = 0.95;
    struct sp_change change[3] = {{.at = 100.0, .text = blocked, .to = &to[0]},
                                  {.at = 400.0, .text = more, .to = &to[1]},
                                  {.at = 700.0, .text = never, .to = &to[2]}};
    d.change = change;
    d.changes = 3;
    struct fixture_drive r = drive(&d, 0.5);
    const struct sp_told_change *told = r.result.change;
    assert_int_equal(r.result.changes, 3);
    double passed = rises(&r, SP_CH_ENGINE_OUT, 380.0, 0.0);
    assert_true(passed > 110.0 && passed < 390.0);
    check_close(told[0].time + told[0].to_limit, passed, 0, 0.02);
    assert_int_equal(told[0].broken, SP_EV_COOLANT_OVER);
    assert_string_equal(told[0].text, blocked);
    assert_true(told[1].time == 400.0 && told[1].to_limit == 0.0);
    assert_true(isnan(told[2].time) && isnan(told[2].to_limit) && told[2].broken == SP_EVENT_KINDS);
    fixture_drop(&r);
    d.limits.coolant.stop = 600.0;
    to[0].limits = to[1].limits = to[2].limits = d.limits;
    r = drive(&d, 0.0);
    assert_true(isnan(r.result.change[0].to_limit) && isnan(r.result.change[1].to_limit));
    fixture_drop(&r);
}

/* A limit that a change lowers below where the car stands is broken there and then; one that it lifts decides
 * from then on, and what was broken before stays so. */
static void limits_that_move(void **state)
{
    (void)state;
    struct sp_step step[1] = {fixture_hold(600.0, 30.0, 60e3, 80.0)};
    struct sp_design d = *fixture.base, low, high;
    d.step = step;
    d.steps = 1;
    d.limits = only_limits(400.0, NAN, NAN, NAN);
    struct fixture_drive plain = drive(&d, 1.0);
    double stands = fixture_at(&plain, 300.0)->value[SP_CH_ENGINE_OUT];
    low = high = d;
    low.limits.coolant.stop = stands - 3.0;
    high.limits.coolant.stop = 420.0;
    struct sp_change change[2] = {{.at = 300.0, .text = never, .to = &low}, {.at = 310.0, .text = never, .to = &high}};
    d.change = change;
    d.changes = 2;
    struct fixture_drive r = drive(&d, 1.0);
    assert_int_equal(plain.status, SP_OK);
    assert_int_equal(r.status, SP_NOT);
    assert_string_equal(r.result.limit, "limits.coolant");
    assert_true(r.result.change[0].to_limit == 0.0 && isnan(r.result.change[1].to_limit));
    check_close(r.result.time_over_limit, 10.0, 0, 1e-6);
    double hottest = stands;
    for (size_t i = 0; i < r.series.count; ++i)
        if (fabs(r.series.row[i].value[SP_CH_TIME] - 305.0) <= 5.0)
            hottest = fmax(hottest, r.series.row[i].value[SP_CH_ENGINE_OUT]);
    check_close(r.result.margin, stands - 3.0 - hottest, 0, 1e-3);
    assert_true(r.result.room[0].limit == low.limits.coolant.stop);
    d.changes = 0;
    d.change = NULL;
    fixture_drop(&plain);
    fixture_drop(&r);
}

/* Coolant that a change takes out is gone from the tank at that instant: by its volume, and not from
 * elsewhere. */
static void water_lost(void **state)
{
    (void)state;
    struct sp_step step[1] = {fixture_hold(120.0, 30.0, 40e3, 60.0)};
    struct sp_design d = *fixture.base, to;
    d.step = step;
    d.steps = 1;
    to = d;
    to.tank.lost = 0.3e-3;
    struct sp_change change = {.at = 60.0, .text = never, .to = &to};
    d.change = &change;
    d.changes = 1;
    struct fixture_drive r = drive(&d, 0.01);
    const double *before = fixture_at(&r, 59.99)->value, *after = fixture_at(&r, 60.01)->value;
    /* hoses that give less under the lower pressure hold less, so that the tank is left with more */
    double give = d.tank.compliance * (before[SP_CH_TANK_PRESSURE] - after[SP_CH_TANK_PRESSURE]);
    check_close(before[SP_CH_TANK_LEVEL] - after[SP_CH_TANK_LEVEL], 0.3e-3 - give, 0, 2e-7);
    assert_true(after[SP_CH_TANK_PRESSURE] < before[SP_CH_TANK_PRESSURE]);
    check_close(after[SP_CH_ENGINE_OUT], before[SP_CH_ENGINE_OUT], 0, 0.05);
    assert_true(r.result.ledger.error < 1e-6);
    fixture_drop(&r);
}

/* ---- standing ----------------------------------------------------------------------------------------- */

/* With nothing but the consumers on, a battery of C volts times coulombs is flat after C over their power. */
static void battery_runs_flat(void **state)
{
    (void)state;
    struct sp_step step[3] = {fixture_hold(60.0, 30.0, 40e3, 60.0), soak(600.0),
                              fixture_hold(30.0, 30.0, 40e3, 60.0)};
    struct sp_design d = *fixture.base;
    d.step = step;
    d.steps = 3;
    d.duct[0].fan[0].law = SP_FAN_NEVER;
    d.electrics.idle_load = 80.0;
    d.electrics.battery = 2000.0;
    double holds = d.electrics.battery * d.electrics.voltage_stopped;
    step[1].key_on = true;
    struct fixture_drive r = drive(&d, 10.0);
    const struct sp_event *flat = event_of(&r, SP_EV_FLAT, 0.0);
    assert_non_null(flat);
    check_close(flat->time, 60.0 + holds / 80.0, 0, 1e-3);
    check_close(r.result.battery.used, 600.0 * 80.0, 1e-9, 0);
    assert_true(r.result.battery.left == 0.0);
    assert_true(r.result.first && r.result.first->kind == SP_EV_FLAT);
    fixture_drop(&r);
    step[1].key_on = false;
    r = drive(&d, 0.0);
    assert_true(r.result.battery.used == 0.0 && r.result.battery.left == 1.0);
    fixture_drop(&r);
    /* the fan's draw comes on top, as its power says */
    step[1].key_on = true;
    d.duct[0].fan[0].law = SP_FAN_ALWAYS;
    d.electrics.battery = 1e5;
    holds = d.electrics.battery * d.electrics.voltage_stopped;
    r = drive(&d, 10.0);
    const double *a = fixture_at(&r, 100.0)->value, *b = fixture_at(&r, 200.0)->value;
    check_close((a[SP_CH_BATTERY] - b[SP_CH_BATTERY]) * holds, 100.0 * (80.0 + b[SP_CH_FAN_POWER]), 1e-6, 0);
    assert_true(b[SP_CH_FAN_POWER] > 50.0);
    fixture_drop(&r);
}

/* Two drives with minutes between: the engine stops and starts again, the second begins with what the first
 * and the pause have left, and a pause in two parts is the same pause. */
static void two_drives(void **state)
{
    (void)state;
    struct sp_step step[4] = {fixture_hold(240.0, 30.0, 70e3, 80.0), soak(400.0),
                              fixture_hold(240.0, 30.0, 70e3, 80.0)};
    struct sp_design d = *fixture.base;
    d.step = step;
    d.steps = 3;
    struct fixture_drive whole = drive(&d, 5.0);
    assert_true(event_of(&whole, SP_EV_ENGINE_STOPS, 0.0)->time == 240.0);
    assert_true(event_of(&whole, SP_EV_ENGINE_STARTS, 1.0)->time == 640.0);
    double in = 0.0;
    for (size_t i = 0; i < whole.series.count; ++i) {
        const double *v = whole.series.row[i].value;
        if (v[SP_CH_TIME] > 240.0 && v[SP_CH_TIME] < 640.0) in = fmax(in, fabs(v[SP_CH_HEAT_IN]));
    }
    assert_true(in == 0.0);
    /* warmer at the second start than a car that was never driven, and so all along the second drive */
    double started = fixture_at(&whole, 640.0)->value[SP_CH_METAL];
    assert_true(started > fixture_at(&whole, 0.0)->value[SP_CH_METAL] - 40.0);
    step[3] = step[2];
    step[1].time = 150.0;
    step[2] = soak(250.0);
    d.steps = 4;
    struct fixture_drive parts = drive(&d, 5.0);
    assert_int_equal(whole.series.count, parts.series.count);
    for (size_t i = 0; i < whole.series.count; ++i)
        check_close(parts.series.row[i].value[SP_CH_ENGINE_OUT], whole.series.row[i].value[SP_CH_ENGINE_OUT],
                    0, 1e-3);
    fixture_drop(&whole);
    fixture_drop(&parts);
}

/* What went through the cap does not come back: cold again, the tank lacks it, and stands at a lower pressure
 * than one that kept it. */
static void tank_remembers(void **state)
{
    (void)state;
    struct sp_step step[2] = {fixture_hold(600.0, 20.0, 90e3, 80.0), soak(2e5)};
    struct sp_design d = *fixture.base;
    d.step = step;
    d.steps = 2;
    d.duct[0].fan[0].law = SP_FAN_ALWAYS; /* else the core stays hot in still air */
    step[1].key_on = true;
    d.tank.volume = 0.9e-3;
    d.tank.air_space = 0.15e-3;
    d.tank.fill_temperature = d.air.ambient;
    d.tank.vacuum = 100e3; /* lets nothing in */
    d.tank.catch_can = 1e-5;
    d.limits.least_coolant = d.limits.least_oil = NAN;
    struct sp_design kept = d;
    kept.tank.cap = 60e5;
    struct fixture_drive lost = drive(&d, 1e4), sealed = drive(&kept, 1e4);
    double gone = lost.result.liquid_lost;
    assert_true(gone > 2e-5 && sealed.result.liquid_lost < 1e-9);
    check_close(lost.result.tank_left, 0.75e-3 - gone, 1e-9, 0);
    check_close(fixture_last(&lost, SP_CH_ENGINE_OUT), d.air.ambient, 0, 0.1);
    double give = d.tank.compliance * (101325.0 - fixture_last(&lost, SP_CH_TANK_PRESSURE));
    check_close(fixture_last(&lost, SP_CH_TANK_LEVEL), 0.75e-3 - gone + give, 0, 1e-6);
    assert_true(fixture_last(&lost, SP_CH_TANK_PRESSURE) < fixture_last(&sealed, SP_CH_TANK_PRESSURE) - 1e3);
    assert_non_null(event_of(&lost, SP_EV_CAN, 0.0));
    assert_non_null(event_of(&lost, SP_EV_LOST, 0.0));
    fixture_drop(&lost);
    fixture_drop(&sealed);
}

/* What cavitation takes of the pump's head: nothing asked, nothing told; the more it needs, the less is left.
 */
static void head_that_cavitation_costs(void **state)
{
    (void)state;
    struct sp_step step[1] = {fixture_hold(300.0, 20.0, 80e3, 120.0)};
    struct sp_design d = *fixture.base;
    d.step = step;
    d.steps = 1;
    d.tank.cap = 0.0;
    struct fixture_drive r = drive(&d, 0.0);
    assert_true(isnan(r.result.pump_head_left));
    fixture_drop(&r);
    double before = 1.0;
    for (double needs = 0.1; needs < 30.0; needs *= 4.0) {
        d.pump.npsh = needs;
        r = drive(&d, 1.0);
        assert_true(needs < 1.0 ? r.result.pump_head_left > 0.97 : r.result.pump_head_left < before);
        double least =
            INFINITY; /* by definition 3 % of the head are gone where there is just what it needs */
        for (size_t i = 0; i < r.series.count; ++i)
            least = fmin(least, r.series.row[i].value[SP_CH_NPSH_MARGIN]);
        assert_true((least < 0.0) == (r.result.pump_head_left < 0.97 - 1e-6) || fabs(least) < 0.05);
        assert_true((event_of(&r, SP_EV_CAVITATES, 0.0) != NULL) == (least < 0.0) || fabs(least) < 0.05);
        before = r.result.pump_head_left;
        fixture_drop(&r);
    }
    assert_true(before < 0.9);
}

/* ---- the thermostat's events and play -------------------------------------------------------------------
 */

static struct sp_design pulsating(struct sp_step *step)
{
    struct sp_design d = *fixture.base;
    for (int i = 0; i < 6; ++i)
        step[i] = fixture_hold(80.0, 30.0, i % 2 ? 8e3 : 70e3, 80.0);
    d.step = step;
    d.steps = 6;
    d.start.coolant = 345.0;
    return d;
}

/* "Opens" is when the lift leaves nil and "fully open" when it comes to one, whatever thermostat it is. */
static void events_are_the_lifts(void **state)
{
    (void)state;
    for (int k = 0; k < 4; ++k) {
        struct sp_step step[6];
        struct sp_design d = pulsating(step), to;
        struct sp_change change = {.at = 30.0, .text = never, .to = &to};
        if (k == 1) d.thermostat.mapped_shift = 8.0, d.thermostat.mapped_power = 30e3;
        if (k == 2) d.thermostat.inlet_side = true;
        to = d;
        if (k == 3)
            to.thermostat.opens = 349.0, to.thermostat.full = 355.0, d.change = &change, d.changes = 1;
        struct fixture_drive r = drive(&d, 0.05);
        double opens = rises(&r, SP_CH_LIFT, 0.0, 0.0), full = rises(&r, SP_CH_LIFT, 1.0 - 1e-9, 0.0);
        assert_true(isfinite(opens));
        check_close(event_of(&r, SP_EV_THERMOSTAT_OPENS, 0.0)->time, opens, 0, 0.051);
        const struct sp_event *said = event_of(&r, SP_EV_THERMOSTAT_FULL, 0.0);
        assert_true((said != NULL) == isfinite(full));
        if (said) check_close(said->time, full, 0, 0.051);
        fixture_drop(&r);
    }
}

/* With play, a wax that has risen by more than the play opens as without it, one that has fallen by more
 * shuts that much later; on the inlet side it is the mix there that decides which way it moves. */
static void play_follows_the_wax(void **state)
{
    (void)state;
    for (int k = 0; k < 3; ++k) {
        struct sp_step step[6];
        struct sp_design d = pulsating(step), to;
        struct sp_change change = {.at = 100.0, .text = never, .to = &to};
        const double play = 2.0;
        d.thermostat.hysteresis = play;
        if (k == 1) d.thermostat.inlet_side = true;
        if (k == 1) d.thermostat.opens = 345.0, d.thermostat.full = 357.0;
        to = d;
        if (k == 2) d.thermostat.hysteresis = 6.0, d.change = &change, d.changes = 1;
        struct fixture_drive r = drive(&d, 0.1);
        int risen = 0, fallen = 0;
        for (size_t i = 0; i < r.series.count; ++i) {
            const double *v = r.series.row[i].value;
            double wax = v[SP_CH_WAX];
            if (v[SP_CH_TIME] < 101.0) continue;
            double as_risen =
                fmin(fmax((wax - d.thermostat.opens) / (d.thermostat.full - d.thermostat.opens), 0.0), 1.0);
            double as_fallen = fmin(
                fmax((wax + play - d.thermostat.opens) / (d.thermostat.full - d.thermostat.opens), 0.0), 1.0);
            /* never outside the two */
            assert_true(v[SP_CH_LIFT] > as_risen - 1e-3 && v[SP_CH_LIFT] < as_fallen + 1e-3);
            if (as_fallen > as_risen + 0.1) {
                risen += fabs(v[SP_CH_LIFT] - as_risen) < 1e-3;
                fallen += fabs(v[SP_CH_LIFT] - as_fallen) < 1e-3;
            }
        }
        assert_true(risen > 50 && fallen > 50);
        fixture_drop(&r);
    }
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
        cmocka_unit_test(seconds_to_the_limit),
        cmocka_unit_test(limits_that_move),
        cmocka_unit_test(water_lost),
        cmocka_unit_test(battery_runs_flat),
        cmocka_unit_test(two_drives),
        cmocka_unit_test(tank_remembers),
        cmocka_unit_test(head_that_cavitation_costs),
        cmocka_unit_test(events_are_the_lifts),
        cmocka_unit_test(play_follows_the_wax),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
