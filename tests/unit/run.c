/* A run: samples, events, accounts, play, tolerance, and what stops it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

static struct fixture fixture;

/* A car that switches all it can: hot enough for fan and thermostat to work, standing and going by turns. */
static struct sp_design busy(struct sp_step *s, int n)
{
    struct sp_design d = *fixture.base;
    for (int i = 0; i < n; ++i) {
        bool going = i % 2 == 0;
        s[i] = fixture_hold(going ? 70.0 : 50.0, going ? 35.0 : 0.0, going ? 55e3 : 8e3, going ? 90.0 : 20.0);
    }
    d.step = s;
    d.steps = (size_t)n;
    d.duct[0].fan[0].law = SP_FAN_SWITCHED;
    d.duct[0].fan[0].on = 362.0;
    d.duct[0].fan[0].off = 358.0;
    d.thermostat.opens = 352.0;
    d.thermostat.full = 362.0;
    d.thermostat.hysteresis = 3.0;
    d.thermostat.lag = 4.0;
    d.engine.metal_capacity = 25e3;
    d.start.coolant = 350.0;
    return d;
}

static struct fixture_drive run(const struct sp_design *d, double interval, double tolerance)
{
    struct fixture_drive r = fixture_run(&fixture, d, interval, tolerance);
    sp_complaints_print(&r.complaints, false, stderr);
    assert_true(r.status == SP_OK || r.status == SP_NOT);
    return r;
}

static void samples_on_the_grid(void **state)
{
    (void)state;
    struct sp_step s[2];
    struct sp_design d = busy(s, 2);
    s[1].time = 50.05; /* the end is off the grid */
    struct fixture_drive r = run(&d, 0.1, 0.0);
    assert_int_equal(r.series.count, 1202);
    for (size_t i = 0; i + 1 < r.series.count; ++i)
        check_close(r.series.row[i].value[SP_CH_TIME], 0.1 * (double)i, 0, 0);
    check_close(fixture_last(&r, SP_CH_TIME), 120.05, 0, 0);
    check_close(fixture_last(&r, SP_CH_DISTANCE), 35.0 * 70.0, 1e-12, 0);
    check_close(r.result.distance, 35.0 * 70.0, 1e-12, 0);
    fixture_drop(&r);
    s[1].time = 50.0; /* and on it: once only */
    r = run(&d, 0.1, 0.0);
    assert_int_equal(r.series.count, 1201);
    fixture_drop(&r);
    r = run(&d, 1000.0, 0.0);
    assert_int_equal(r.series.count, 2);
    fixture_drop(&r);
    r = run(&d, 0.0, 0.0);
    assert_int_equal(r.series.count, 0);
    fixture_drop(&r);
}

/* The lift follows the wax through 3 K of play: played again over the samples. */
static void lift_follows_the_play(void **state)
{
    (void)state;
    struct sp_step s[10];
    struct sp_design d = busy(s, 10);
    struct fixture_drive r = run(&d, 0.02, 1e-7);
    double effective = r.series.row[0].value[SP_CH_WAX], low = 1.0, high = 0.0;
    for (size_t i = 0; i < r.series.count; ++i) {
        const double *v = r.series.row[i].value;
        effective = fmin(fmax(effective, v[SP_CH_WAX]), v[SP_CH_WAX] + 3.0);
        double want = fmin(fmax((effective - 352.0) / 10.0, 0.0), 1.0);
        check_close(v[SP_CH_LIFT], want, 0, 1e-3);
        if (v[SP_CH_TIME] > 100.0) {
            low = fmin(low, v[SP_CH_LIFT]);
            high = fmax(high, v[SP_CH_LIFT]);
        }
    }
    assert_true(high - low > 0.2); /* it did move, both ways */
    fixture_drop(&r);
}

/* Same events, in order; on-times, over-times and peaks as the samples have them. */
static void accounts(void **state)
{
    (void)state;
    struct sp_step s[10];
    struct sp_design d = busy(s, 10);
    d.limits.coolant.stop = 361.0;
    struct fixture_drive r = run(&d, 0.05, 1e-7);
    assert_int_equal(r.status, SP_NOT);
    assert_string_equal(r.result.limit, "limits.coolant");
    double on = 0.0, over = 0.0, open = 0.0, since_on = NAN, since_over = NAN, since_full = NAN, before = 0.0;
    int fan = 0, steps = 0, peaks = 0, starts = 0;
    for (size_t i = 0; i < r.result.events; ++i) {
        const struct sp_event *e = &r.result.event[i];
        assert_true(e->time >= before);
        before = e->time;
        switch (e->kind) {
        case SP_EV_FAN_ON:
            since_on = e->time;
            ++fan;
            break;
        case SP_EV_FAN_OFF:
            on += e->time - since_on;
            since_on = NAN;
            break;
        case SP_EV_COOLANT_OVER:
            since_over = e->time;
            check_close(e->coolant, 361.0, 0, 1e-3);
            break;
        case SP_EV_COOLANT_BACK:
            over += e->time - since_over;
            since_over = NAN;
            break;
        case SP_EV_THERMOSTAT_FULL:
            since_full = e->time;
            break;
        case SP_EV_THERMOSTAT_REGULATES:
            open += e->time - since_full;
            since_full = NAN;
            break;
        case SP_EV_STEP:
            ++steps;
            break;
        case SP_EV_ENGINE_STARTS:
            ++starts;
            break;
        case SP_EV_PEAK:
            ++peaks;
            check_close(e->time, r.result.coolant.time, 0, 0);
            break;
        default:
            break;
        }
    }
    double end = r.result.duration;
    check_close(end, 600.0, 1e-12, 0);
    check_close(r.result.fan.on, on + (isnan(since_on) ? 0.0 : end - since_on), 1e-9, 1e-9);
    check_close(r.result.time_over_limit, over + (isnan(since_over) ? 0.0 : end - since_over), 1e-9, 1e-9);
    check_close(r.result.time_above_band, open + (isnan(since_full) ? 0.0 : end - since_full), 1e-9, 1e-9);
    assert_true(fan >= 2 && steps == 10 && peaks == 1 && starts == 1);
    double peak = 0.0, at = 0.0, metal = 0.0, margin = INFINITY, pressure = 0.0, seen_over = 0.0;
    for (size_t i = 0; i < r.series.count; ++i) {
        const double *v = r.series.row[i].value;
        if (v[SP_CH_ENGINE_OUT] > peak) {
            peak = v[SP_CH_ENGINE_OUT];
            at = v[SP_CH_TIME];
        }
        metal = fmax(metal, v[SP_CH_METAL]);
        margin = fmin(margin, v[SP_CH_BOIL_MARGIN]);
        pressure = fmax(pressure, v[SP_CH_TANK_PRESSURE]);
        seen_over += v[SP_CH_ENGINE_OUT] > 361.0 ? 0.05 : 0.0;
    }
    check_close(r.result.coolant.value, peak, 0, 1e-3);
    check_close(r.result.coolant.time, at, 0, 0.2);
    check_close(r.result.metal.value, metal, 0, 0.02);
    check_close(r.result.boil_margin.value, margin, 0, 0.02);
    check_close(r.result.tank_pressure.value, pressure, 1e-3, 0);
    check_close(r.result.time_over_limit, seen_over, 0, 0.3);
    check_close(r.result.margin, 361.0 - peak, 0, 1e-3);
    check_close(r.result.over_ambient, peak - d.air.ambient, 0, 1e-3);
    fixture_drop(&r);
}

/* The ledger's sides are integrals of the samples' heat. */
static void ledger_is_the_integral(void **state)
{
    (void)state;
    struct sp_step s[4];
    struct sp_design d = busy(s, 4);
    struct fixture_drive r = run(&d, 0.05, 1e-7);
    double in = 0.0, air = 0.0, skin = 0.0;
    for (size_t i = 0; i + 1 < r.series.count; ++i) {
        const double *a = r.series.row[i].value, *b = r.series.row[i + 1].value;
        double h = 0.5 * (b[SP_CH_TIME] - a[SP_CH_TIME]);
        in += h * (a[SP_CH_HEAT_IN] + b[SP_CH_HEAT_IN]);
        air += h * (a[SP_CH_HEAT_OUT] + b[SP_CH_HEAT_OUT]);
        skin += h * (a[SP_CH_HEAT_SKIN] + b[SP_CH_HEAT_SKIN]);
    }
    check_close(r.result.ledger.in, in, 1e-3, 0);
    check_close(r.result.ledger.out_air, air, 1e-3, 0);
    check_close(r.result.ledger.out_skin, skin, 1e-3, 0);
    check_close(r.result.ledger.stored, in - air - skin, 0, 3e-3 * in);
    assert_true(fabs(r.result.ledger.error) < 1e-6);
    fixture_drop(&r);
}

/* Tiers in the order they are passed: the alarm is first, the stop is worst, the caution is neither. Times and
 * amounts as the samples have them. */
static void failures(void **state)
{
    (void)state;
    struct sp_step s[10];
    struct sp_design d = busy(s, 10);
    d.limits.coolant = (struct sp_tiers){357.0, 359.0, 361.0};
    struct fixture_drive r = run(&d, 0.05, 1e-7);
    assert_int_equal(r.status, SP_NOT);
    assert_int_equal(r.result.failures, 3);
    const struct sp_failure *f = r.result.failure;
    assert_true(r.result.first == &f[1] && r.result.worst == &f[2]);
    const double limit[] = {357.0, 359.0, 361.0};
    for (int i = 0; i < 3; ++i) {
        double over = 0.0, first = NAN;
        assert_int_equal(f[i].severity, SP_SEVERITY_CAUTION + i);
        assert_string_equal(f[i].place, "jacket");
        for (size_t k = 1; k < r.series.count; ++k) {
            const double *v = r.series.row[k].value;
            if (v[SP_CH_ENGINE_OUT] <= limit[i]) continue;
            over += 0.05;
            if (isnan(first)) first = v[SP_CH_TIME];
        }
        check_close(f[i].time, first, 0, 0.06);
        check_close(f[i].over, over, 0, 1.0);
        check_close(f[i].worst, r.result.coolant.value - limit[i], 0, 0.05);
        check_close(f[i].share, f[i].worst / 10.0, 1e-12, 0);
    }
    fixture_drop(&r);
    d.limits.coolant = (struct sp_tiers){NAN, NAN, 400.0};
    r = run(&d, 0.0, 0.0);
    assert_true(r.result.failures == 0 && !r.result.first && !r.result.worst);
    fixture_drop(&r);
}

/* A pulsing pump below its target: it stands and runs by the clock, from 4 s on 3 s still, and so on. */
static void pump_pulses(void **state)
{
    (void)state;
    struct sp_step s[1];
    struct sp_design d = busy(s, 1);
    d.pump.electric = true;
    d.pump.law = SP_PUMP_PULSING;
    d.pump.rated_voltage = d.electrics.voltage_running;
    d.pump.target = 450.0;
    d.pump.pulse_on = 4.0;
    d.pump.pulse_off = 3.0;
    s[0].time = 30.0;
    struct fixture_drive r = run(&d, 0.5, 0.0);
    for (size_t k = 0; k < r.series.count; ++k) {
        const double *v = r.series.row[k].value;
        double phase = fmod(v[SP_CH_TIME], 7.0);
        if (fmin(fabs(phase - 4.0), fmin(phase, 7.0 - phase)) < 0.1) continue; /* at the very turn */
        assert_true((v[SP_CH_PUMP_FLOW] > 0.0) == (phase < 4.0));
    }
    fixture_drop(&r);
}

/* What the car does not have is no column: a plain car has the channels up to the drag, and no more. */
static void only_what_is_fitted(void **state)
{
    (void)state;
    struct sp_step s[2];
    struct sp_design d = busy(s, 2);
    struct fixture_drive r = run(&d, 10.0, 0.0);
    for (int c = SP_CH_OIL; c < SP_CHANNELS; ++c) assert_true(isnan(r.series.row[1].value[c]));
    fixture_drop(&r);
    d.pump.npsh = 3.0;
    d.engine.wetted_area = 0.05;
    r = run(&d, 10.0, 0.0);
    assert_true(isfinite(r.series.row[1].value[SP_CH_NPSH_MARGIN]));
    assert_true(isfinite(r.series.row[1].value[SP_CH_LOCAL_MARGIN]));
    assert_true(isnan(r.series.row[1].value[SP_CH_OIL]));
    fixture_drop(&r);
}

/* The default tolerance is good to 0.05 K against one a thousand times tighter, events and all; a run is the
 * same each time, to the last bit, with and without samples. */
static void tolerance_and_repeat(void **state)
{
    (void)state;
    struct sp_step s[10];
    struct sp_design d = busy(s, 10);
    struct fixture_drive a = run(&d, 5.0, 0.0), b = run(&d, 5.0, 0.0), tight = run(&d, 5.0, 1e-8),
                         bare = run(&d, 0.0, 0.0);
    assert_int_equal(a.series.count, b.series.count);
    for (size_t i = 0; i < a.series.count; ++i) {
        for (int c = 0; c < SP_CHANNELS; ++c) {
            double x = a.series.row[i].value[c], y = b.series.row[i].value[c];
            assert_true(x == y || (isnan(x) && isnan(y)));
        }
        double peak = tight.series.row[i].value[SP_CH_ENGINE_OUT];
        check_close(a.series.row[i].value[SP_CH_ENGINE_OUT], peak, 0, 0.05);
    }
    assert_true(a.result.coolant.value == b.result.coolant.value &&
                a.result.work.rates == b.result.work.rates);
    check_close(bare.result.coolant.value, a.result.coolant.value, 0, 1e-9);
    check_close(a.result.coolant.value, tight.result.coolant.value, 0, 0.05);
    check_close(a.result.fan.on, tight.result.fan.on, 0, 1.0);
    struct fixture_drive *all[] = {&a, &b, &tight, &bare};
    for (int i = 0; i < 4; ++i)
        fixture_drop(all[i]);
}

/* Engine off: the fan and an electric pump run on for their time, at the stopped voltage, and stop. */
static void soak_with_run_on(void **state)
{
    (void)state;
    struct sp_step s[2];
    struct sp_design d = busy(s, 2);
    s[0].time = 300.0;
    s[0].power = 100e3;
    s[1] = (struct sp_step){.kind = SP_STEP_SOAK, .time = 300.0, .repeat = 1.0};
    d.duct[0].fan[0].run_on = 60.0;
    d.duct[0].fan[0].off = 300.0;
    d.pump.electric = true;
    d.pump.run_on = 100.0;
    struct fixture_drive r = run(&d, 1.0, 0.0);
    const double *early = fixture_at(&r, 350.0)->value, *later = fixture_at(&r, 390.0)->value,
                 *late = fixture_at(&r, 450.0)->value;
    double stopped = pow(d.electrics.voltage_stopped / d.duct[0].fan[0].rated_voltage, 0.9);
    check_close(early[SP_CH_FAN_SPEED], stopped, 1e-6, 0);
    assert_true(later[SP_CH_FAN_SPEED] < 1e-3 && later[SP_CH_PUMP_FLOW] > 0.0 &&
                late[SP_CH_PUMP_FLOW] == 0.0);
    assert_true(late[SP_CH_HEAT_IN] == 0.0);
    double off = NAN, stops = NAN;
    for (size_t i = 0; i < r.result.events; ++i) {
        if (r.result.event[i].kind == SP_EV_FAN_OFF) off = r.result.event[i].time;
        if (r.result.event[i].kind == SP_EV_ENGINE_STOPS) stops = r.result.event[i].time;
    }
    check_close(off, 360.0, 1e-9, 0);
    check_close(stops, 300.0, 1e-9, 0);
    fixture_drop(&r);
}

static bool refuse_third(void *context, const struct sp_sample *s)
{
    int *left = context;
    (void)s;
    return --*left > 0;
}

static void sink_that_stops(void **state)
{
    (void)state;
    struct sp_step s[2];
    struct sp_design d = busy(s, 2);
    struct sp_complaints c = {0}, cautions = {0};
    struct sp_drive *drive = sp_drive_build(fixture.units, &d, &c, &cautions);
    assert_non_null(drive);
    int left = 3;
    struct sp_sink sink = {.context = &left, .row = refuse_third};
    struct sp_run_options options = {1.0, 0.0, &sink};
    struct sp_result out;
    assert_int_equal(sp_drive_run(drive, &options, &out, &c), SP_INPUT);
    assert_int_equal(left, 0);
    assert_int_equal(c.count, 0); /* the sink has its own words */
    sp_result_free(&out);
    options.sink = NULL; /* the drive is as good as before */
    assert_int_equal(sp_drive_run(drive, &options, &out, &c), SP_OK);
    sp_result_free(&out);
    sp_result_free(&out);
    sp_drive_free(drive);
    sp_drive_free(NULL);
    sp_complaints_free(&cautions);
}

static void drives_that_cannot_be_built(void **state)
{
    (void)state;
    struct sp_complaints c = {0}, cautions = {0};
    struct sp_design d = *fixture.base;
    d.steps = 0;
    assert_null(sp_drive_build(fixture.units, &d, &c, &cautions));
    assert_int_equal(c.count, 1);
    struct sp_step s = fixture_hold(60.0, NAN, 1e3, 50.0);
    d.step = &s;
    d.steps = 1;
    assert_null(sp_drive_build(fixture.units, &d, &c, &cautions));
    assert_int_equal(c.count, 2);
    d.duct[0].core[0].heat_law = SP_CORE_NO_HEAT; /* both the car and the drive: both are said */
    assert_null(sp_drive_build(fixture.units, &d, &c, &cautions));
    assert_int_equal(c.count, 4);
    sp_complaints_free(&c);
    sp_complaints_free(&cautions);
}

/* Which limit is named: the one broken first in time, else the one that came closest. */
static void which_limit(void **state)
{
    (void)state;
    struct sp_step s[4];
    struct sp_design d = busy(s, 4);
    d.limits = only_limits(500.0, 450.0, 520.0, NAN);
    struct fixture_drive r = run(&d, 0.0, 0.0);
    assert_true(r.result.survives && r.status == SP_OK);
    assert_string_equal(r.result.limit, "limits.gauge");
    double metal = r.result.metal.value, coolant = r.result.coolant.value;
    fixture_drop(&r);
    d.limits = only_limits(coolant - 0.5, NAN, metal - 8.0, NAN);
    r = run(&d, 0.0, 0.0);
    assert_false(r.result.survives);
    double first_metal = NAN, first_coolant = NAN;
    for (size_t i = r.result.events; i-- > 0;) {
        if (r.result.event[i].kind == SP_EV_METAL_OVER) first_metal = r.result.event[i].time;
        if (r.result.event[i].kind == SP_EV_COOLANT_OVER) first_coolant = r.result.event[i].time;
    }
    assert_true(isfinite(first_metal) && isfinite(first_coolant));
    assert_string_equal(r.result.limit, first_metal < first_coolant ? "limits.metal" : "limits.coolant");
    fixture_drop(&r);
    d.limits = only_limits(300.0, NAN, NAN, NAN); /* broken before it begins */
    r = run(&d, 0.0, 0.0);
    assert_int_equal(r.status, SP_NOT);
    check_close(r.result.time_over_limit, r.result.duration, 1e-9, 0);
    fixture_drop(&r);
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
        cmocka_unit_test(samples_on_the_grid),
        cmocka_unit_test(lift_follows_the_play),
        cmocka_unit_test(accounts), cmocka_unit_test(failures),
        cmocka_unit_test(pump_pulses), cmocka_unit_test(only_what_is_fitted),
        cmocka_unit_test(ledger_is_the_integral),
        cmocka_unit_test(tolerance_and_repeat),
        cmocka_unit_test(soak_with_run_on),
        cmocka_unit_test(sink_that_stops),
        cmocka_unit_test(drives_that_cannot_be_built),
        cmocka_unit_test(which_limit),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
