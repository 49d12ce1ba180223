/* Watched conditions: signs, the play's modes, what does not apply.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

#include "drive/watch.h"

static struct fixture fixture;

struct rig {
    struct sp_design d;
    struct sp_circuit c;
    struct sp_inputs in;
    struct sp_modes modes;
    double y[SP_Y_MOST];
    struct sp_watch_list list;
    struct sp_watched seen;
};

static void prepare(struct rig *r)
{
    struct sp_complaints c = {0};
    assert_true(sp_circuit_build(&r->d, &r->c, &c));
    r->in = (struct sp_inputs){.flags = SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN};
    r->in.in[SP_IN_SPEED] = r->in.in[SP_IN_AIR_SPEED] = 20.0;
    r->in.in[SP_IN_WAKE] = 1.0;
    r->in.in[SP_IN_AMBIENT] = 298.15;
    r->in.in[SP_IN_PRESSURE] = 101325.0;
    r->in.in[SP_IN_ENGINE_SPEED] = 60.0;
    sp_circuit_start(&r->c, &r->in, r->y);
}

static const double *look(struct rig *r)
{
    struct sp_signals s;
    struct sp_guesses guesses;
    memset(&guesses, 0, sizeof guesses);
    struct sp_coupling k;
    sp_circuit_signals(&r->c, &r->in, r->y, &s);
    assert_int_equal(sp_circuit_couple(&r->c, &r->in, &r->modes, &s, &guesses, &k), SP_OK);
    sp_watch_add(&r->list, &r->c);
    sp_watch(&r->list, &r->c, &r->in, &r->modes, 0.0, r->y, &k, &r->seen);
    for (int i = 0; i < r->list.count; ++i)
        assert_true(isfinite(r->seen.g[i]));
    return r->seen.g;
}

static void fan_switch(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    struct sp_fan *f = &r.d.duct[0].fan[0];
    f->law = SP_FAN_SWITCHED;
    f->on = 369.0;
    f->off = 364.0;
    prepare(&r);
    r.y[SP_Y_JACKET] = 368.0;
    check_close(look(&r)[SP_W_FAN], -1.0, 1e-12, 0);
    r.modes.fan_on[0] = true; /* now it waits for `off` */
    check_close(look(&r)[SP_W_FAN], 4.0, 1e-12, 0);
    f->sensor = SP_AT_RADIATOR_OUT;
    r.y[r.c.layout.core + r.c.layout.cells - 1] = 350.0;
    check_close(look(&r)[SP_W_FAN], -14.0, 1e-12, 0);
    f->law = SP_FAN_PROPORTIONAL;
    f->from = 348.0;
    check_close(look(&r)[SP_W_FAN], 2.0, 1e-12, 0);
    const enum sp_fan_law steady[] = {SP_FAN_ALWAYS, SP_FAN_NEVER};
    for (int i = 0; i < 2; ++i) {
        f->law = steady[i];
        assert_true(look(&r)[SP_W_FAN] > 0.0);
    }
    f->fitted = false;
    assert_true(look(&r)[SP_W_FAN] > 0.0);
    sp_circuit_free(&r.c);
}

/* Warm, turn, cool by the play, shut, turn, warm again: the modes of an operator with 3 K of play. */
static void round_the_play(void **state)
{
    (void)state;
    struct sp_thermostat t = fixture.base->thermostat;
    t.hysteresis = 3.0;
    struct sp_modes m = {.play = SP_PLAY_OPENING};
    sp_watch_turn_play(&t, 360.0, false, &m);
    assert_true(m.play == SP_PLAY_HELD && m.held == 360.0);
    sp_watch_turn_play(&t, 357.0, true, &m);
    assert_true(m.play == SP_PLAY_SHUTTING);
    check_close(sp_thermostat_effective(&t, m.play, 357.0, m.held), 360.0, 0, 0);
    sp_watch_turn_play(&t, 352.0, false, &m);
    assert_true(m.play == SP_PLAY_HELD && m.held == 355.0);
    sp_watch_turn_play(&t, 355.0, false, &m);
    assert_true(m.play == SP_PLAY_OPENING);
    check_close(sp_thermostat_effective(&t, m.play, 355.0, m.held), 355.0, 0, 0);
}

static void play_watches(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.thermostat.hysteresis = 3.0;
    prepare(&r);
    r.y[SP_Y_WAX] = 360.0;
    r.y[SP_Y_JACKET] = 362.0;
    r.modes.play = SP_PLAY_OPENING;
    assert_true(look(&r)[SP_W_PLAY] > 0.0); /* the wax warms */
    r.y[SP_Y_JACKET] = 358.0;
    assert_true(look(&r)[SP_W_PLAY] < 0.0);
    r.modes = (struct sp_modes){.play = SP_PLAY_HELD, .held = 360.0};
    assert_true(look(&r)[SP_W_PLAY] < 0.0 &&
                r.seen.g[SP_W_PLAY_SHUT] > 0.0); /* just turned: between the sides */
    r.y[SP_Y_WAX] = 358.5;
    assert_true(look(&r)[SP_W_PLAY] < 0.0 && r.seen.g[SP_W_PLAY_SHUT] > 0.0);
    r.y[SP_Y_WAX] = 356.9;
    assert_true(look(&r)[SP_W_PLAY_SHUT] < 0.0);
    r.y[SP_Y_WAX] = 360.1;
    assert_true(look(&r)[SP_W_PLAY] > 0.0);
    r.d.thermostat.hysteresis = 0.0;
    assert_true(look(&r)[SP_W_PLAY] == 1.0 && r.seen.g[SP_W_PLAY_SHUT] == 1.0);
    r.d.thermostat.none = true;
    r.y[SP_Y_WAX] = 250.0; /* what does not apply never changes sign */
    double opens = look(&r)[SP_W_OPENS], full = r.seen.g[SP_W_FULL];
    r.y[SP_Y_WAX] = 450.0;
    assert_true(look(&r)[SP_W_OPENS] * opens > 0.0 && r.seen.g[SP_W_FULL] * full > 0.0);
    sp_circuit_free(&r.c);
}

static void limits(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.limits = only_limits(370.0, 380.0, 390.0, 10.0);
    r.d.gauge.offset = 2.0;
    prepare(&r);
    r.y[SP_Y_JACKET] = 371.0;
    r.y[SP_Y_GAUGE] = 379.0;
    r.y[SP_Y_METAL] = 389.0;
    const double *g = look(&r);
    check_close(g[SP_W_COOLANT], 1.0, 1e-12, 0);
    check_close(g[SP_W_GAUGE], 1.0, 1e-12, 0); /* the offset counts: it is what the driver reads */
    check_close(g[SP_W_METAL], -1.0, 1e-12, 0);
    check_close(g[SP_W_MARGIN], 10.0 - r.seen.boil_margin, 1e-12, 0);
    check_close(g[SP_W_BOIL], -r.seen.boil_margin, 1e-12, 0);
    check_close(g[SP_W_CAP], r.seen.tank_pressure - 101325.0 - r.d.tank.cap, 1e-12, 1e-9);
    r.d.limits = only_limits(NAN, NAN, NAN, NAN);
    g = look(&r);
    assert_true(g[SP_W_COOLANT] < 0.0 && g[SP_W_GAUGE] < 0.0 && g[SP_W_METAL] < 0.0 && g[SP_W_MARGIN] < 0.0);
    sp_circuit_free(&r.c);
}

/* The margin is against the boiling point at its own pressure: at the jacket with the pump's rise, at the
 * pump's inlet at the tank's. */
static void boil_margin(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    prepare(&r);
    r.in.flags = 0; /* nothing flows: jacket at tank pressure */
    for (double T = 300.0; T < 420.0; T += 20.0) {
        for (int i = 0; i < r.c.layout.count; ++i)
            if (i <= SP_Y_WAX || i >= SP_Y_CHAIN) r.y[i] = T;
        look(&r);
        double boils = sp_coolant_boiling(&r.d.coolant.fluid, fmin(r.seen.tank_pressure, 4.99e6));
        check_close(r.seen.boil_margin, boils - T, 1e-9, 1e-9);
    }
    sp_circuit_free(&r.c);
}

/* Where a watch stands in the list; fails when it is not there. */
static double value_of(const struct rig *r, enum sp_watch kind, int index, int tier)
{
    for (int w = 0; w < r->list.count; ++w)
        if (r->list.of[w].kind == kind && r->list.of[w].index == index && r->list.of[w].tier == tier)
            return r->seen.g[w];
    fail_msg("no watch %d", (int)kind);
    return NAN;
}

/* A plain car is watched for no more than what every car has; each further limit brings one watch. */
static void only_what_applies(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.limits = only_limits(370.0, NAN, NAN, 10.0);
    prepare(&r);
    look(&r);
    assert_int_equal(r.list.count, SP_WATCHES);
    r.d.limits.metal.caution = 380.0;
    r.d.limits.metal.alarm = 385.0;
    r.d.limits.oil.stop = 400.0; /* of oil that the car does not have */
    r.d.limits.least_coolant = 330.0;
    r.d.tank.catch_can = 5e-4;
    look(&r);
    assert_int_equal(r.list.count, SP_WATCHES + 4);
    look(&r); /* added again: nothing new */
    assert_int_equal(r.list.count, SP_WATCHES + 4);
    sp_circuit_free(&r.c);
}

static void tiers_and_failing(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.limits = only_limits(370.0, NAN, NAN, 10.0);
    r.d.limits.metal.caution = 380.0;
    r.d.limits.metal.alarm = 385.0;
    r.d.limits.least_coolant = 330.0;
    r.d.tank.catch_can = 5e-4;
    prepare(&r);
    r.y[SP_Y_METAL] = 381.0;
    r.y[SP_Y_LOST] = 7e-4;
    r.y[SP_Y_JACKET] = 329.0;
    r.in.in[SP_IN_POWER] = 0.19 * r.d.engine.rated_power; /* not yet a fifth of it */
    look(&r);
    check_close(value_of(&r, SP_W_TIER, SP_LIMITED_METAL, 0), 1.0, 1e-12, 0);
    check_close(value_of(&r, SP_W_TIER, SP_LIMITED_METAL, 1), -4.0, 1e-12, 0);
    check_close(value_of(&r, SP_W_CAN, 0, 0), 2e-4, 1e-9, 0);
    assert_true(value_of(&r, SP_W_COLD_COOLANT, 0, 0) < 0.0);
    assert_true(r.seen.g[SP_W_LOST] > 0.0);
    r.in.in[SP_IN_POWER] = 0.21 * r.d.engine.rated_power;
    look(&r);
    assert_true(value_of(&r, SP_W_COLD_COOLANT, 0, 0) > 0.0);
    r.d.limits.load = 0.5 * r.d.engine.rated_power;
    look(&r);
    assert_true(value_of(&r, SP_W_COLD_COOLANT, 0, 0) < 0.0);
    sp_circuit_free(&r.c);
}

/* Amperes of a fan at full speed: its power over its volts; the limit counts for one fan. */
static void fan_current(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    struct sp_fan *f = &r.d.duct[0].fan[0];
    f->rated_voltage = r.d.electrics.voltage_running;
    f->current_limit = 10.0;
    prepare(&r);
    r.y[SP_Y_FAN] = 1.0;
    look(&r);
    check_close(value_of(&r, SP_W_CURRENT, 0, 0), f->power / f->rated_voltage - 10.0, 1e-12, 0);
    r.y[SP_Y_FAN] = 0.5;
    look(&r);
    check_close(value_of(&r, SP_W_CURRENT, 0, 0), 0.125 * f->power / f->rated_voltage - 10.0, 1e-12, 0);
    sp_circuit_free(&r.c);
}

/* Bubbles form at a wall well before the coolant boils: more heat through less of it, sooner. */
static void local_boiling(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.engine.wetted_area = 0.1;
    prepare(&r);
    r.y[SP_Y_JACKET] = 380.0;
    double before = INFINITY;
    for (double metal = 381.0; metal < 460.0; metal += 5.0) {
        r.y[SP_Y_METAL] = metal;
        look(&r);
        assert_true(r.seen.local_margin < before);
        check_close(value_of(&r, SP_W_LOCAL, 0, 0), -r.seen.local_margin, 1e-12, 0);
        before = r.seen.local_margin;
    }
    assert_true(before < 0.0);
    sp_circuit_free(&r.c);
}

static void events_have_texts(void **state)
{
    (void)state;
    for (int w = 0; w < SP_WATCH_KINDS; ++w) {
        struct sp_watch_events e = sp_watch_event[w];
        if (w != SP_W_LOST) assert_true((e.rise == SP_EVENT_KINDS) == (e.fall == SP_EVENT_KINDS)); /* lost is lost */
        if (e.rise != SP_EVENT_KINDS) assert_true(e.rise != e.fall && strlen(sp_event_text(e.rise)) > 3);
    }
    assert_string_equal(sp_event_text(SP_EVENT_KINDS), "?");
    for (int k = 0; k < SP_EVENT_KINDS; ++k) {
        const char *text = sp_event_text((enum sp_event_kind)k);
        assert_true(text && strlen(text) > 3);
        for (int j = 0; j < k; ++j)
            if (k >= SP_EV_LOST) assert_true(strcmp(text, sp_event_text((enum sp_event_kind)j)) || j < SP_EV_TIER);
    }
    assert_string_equal(sp_event_text((enum sp_event_kind)(SP_EV_TIER + 6 * SP_LIMITED_OIL + 5)),
                        "oil back under limit");
    for (int c = 0; c < SP_CHANNELS; ++c)
        assert_true(sp_channel_at((enum sp_channel)c)->name && sp_channel_at((enum sp_channel)c)->scale > 0.0);
    assert_null(sp_channel_at(SP_CHANNELS));
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
    const struct CMUnitTest tests[] = {cmocka_unit_test(fan_switch),   cmocka_unit_test(round_the_play),
                                       cmocka_unit_test(play_watches), cmocka_unit_test(limits),
                                       cmocka_unit_test(boil_margin),  cmocka_unit_test(events_have_texts),
                                       cmocka_unit_test(only_what_applies), cmocka_unit_test(tiers_and_failing),
                                       cmocka_unit_test(fan_current),  cmocka_unit_test(local_boiling)};
    return cmocka_run_group_tests(tests, begin, end);
}
