/* Own behaviour of the schedule where engine speeds are lost and powers are too high.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "schedule_drive.h"

/* Three rows of 30 kW whose engine stands (0.29 of idle speed in the last), before them one that is off. */
static const char lost_speeds[] =
    "time [s],speed [m/s],power [kW],engine_speed [rev/s]\n"
    "0,0,0,0\n1,0,0,14\n2,20,30,50\n3,20,30,0\n4,20,30,0\n5,20,30,4.1\n6,20,30,60\n7,20,0,0\n8,20,0,0";

static void engine_speed_lost(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add_text(&d, lost_speeds);
    assert_int_equal(sp_schedule_build(units, &d.design, &d.s, &d.complaints, &d.cautions), SP_INPUT);
    assert_int_equal(d.complaints.count, 1);
    const struct sp_complaint *c = &d.complaints.list[0];
    assert_string_equal(c->file, d.path[0]);
    assert_string_equal(c->path, "engine_speed");
    assert_string_equal(c->found, "0 rpm with 30 kW at 3 s, row 4");
    assert_non_null(strstr(c->expected, "252 rpm")); /* 0.3 of 840 rpm */
    assert_non_null(strstr(c->expected, "3 rows"));
    assert_non_null(strstr(c->hint, "layout.repair"));
    end(&d);
    begin(&d);
    add_text(&d, lost_speeds);
    d.step[0].format.repair = true;
    build(&d);
    assert_true(cautioned(&d, "power without engine speed at 3 rows"));
    assert_int_equal(d.s.repairs.range_held, 3);
    for (double t = 3.0; t < 5.5; t += 1.0) { /* held, and running */
        check_close(at(&d.s, SP_IN_ENGINE_SPEED, t), 50.0, 1e-12, 0.0);
        check_close(at(&d.s, SP_IN_POWER, t), 30e3, 1e-12, 0.0);
        assert_int_not_equal(flags(&d.s, t) & SP_FLAG_ENGINE, 0);
    }
    assert_int_equal(flags(&d.s, 0.5) & SP_FLAG_ENGINE, 0); /* off is off, held or not */
    assert_int_equal(flags(&d.s, 7.5) & SP_FLAG_ENGINE, 0);
    check_close(at(&d.s, SP_IN_ENGINE_SPEED, 7.5), 0.0, 0.0, 0.0);
    end(&d);
}

static void engine_speed_lost_throughout(void **state)
{
    (void)state;
    struct drive d;
    const char *text[] = {"time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,9,30,0\n1,9,30,0",
                          "time [s],speed [m/s],torque [N m],engine_speed [rpm]\n0,9,150,0\n1,9,150,0",
                          "time [s],speed [m/s],fuel_flow [g/s],engine_speed [rpm]\n0,9,3,0\n1,9,3,0",
                          "time [s],speed [m/s],air_flow [g/s],engine_speed [rpm]\n0,9,44,0\n1,9,44,0"};
    for (size_t i = 0; i < 8; i++) {
        begin(&d);
        add_text(&d, text[i / 2]);
        d.step[0].format.repair = i % 2; /* nothing to hold from */
        refused(&d, "0 rpm with ");
    }
    begin(&d); /* good rows behind only */
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rev/s]\n0,9,30,0\n1,9,30,0\n2,9,30,40");
    d.step[0].format.repair = true;
    build(&d);
    check_close(at(&d.s, SP_IN_ENGINE_SPEED, 0.0), 40.0, 1e-12, 0.0);
    end(&d);
}

/* What a standing engine may show: nothing, a breath of flow, a pressed pedal, a rolling car. */
static void engine_off_stays_off(void **state)
{
    (void)state;
    struct drive d;
    const char *text[] = {"time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,9,1.99,0\n1,9,1.99,0",
                          "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,9,-30,0\n1,9,-30,0",
                          "time [s],speed [m/s],fuel_flow [g/s],engine_speed [rpm]\n0,9,0,0\n1,9,0.01,0",
                          "time [s],speed [m/s],throttle [%],engine_speed [rpm]\n0,9,100,0\n1,9,100,0",
                          "time [s],speed [m/s],engine_speed [rpm]\n0,0,0\n10,30,0"};
    for (size_t i = 0; i < sizeof text / sizeof *text; i++) {
        begin(&d);
        d.design.body.mass = 1500.0;
        d.design.body.drag_coefficient = 0.65;
        add_text(&d, text[i]);
        build(&d);
        assert_int_equal(flags(&d.s, 0.5) & SP_FLAG_ENGINE, 0);
        assert_false(cautioned(&d, "without engine speed"));
        end(&d);
    }
    begin(&d); /* just above: 2 % of 100 kW */
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,9,2.01,0\n1,9,2.01,0");
    refused(&d, "0 rpm with 2.01 kW");
}

static void hold_that_stands(void **state)
{
    (void)state;
    struct drive d;
    for (int i = 0; i < 3; i++) {
        const double power[] = {12e3, 2.1e3, 1.9e3}, speed[] = {0.0, 4.1, 0.0};
        begin(&d);
        struct sp_step *h = add(&d, SP_STEP_HOLD, 10.0);
        h->speed = 20.0, h->power = power[i], h->engine_speed = speed[i];
        if (i < 2) {
            refused(&d, i ? "246 rpm with a power of 2.1 kW" : "0 rpm with a power of 12 kW");
            continue;
        }
        build(&d);
        assert_int_equal(flags(&d.s, 5.0) & SP_FLAG_ENGINE, 0);
        end(&d);
    }
}

/* Once a step, with the most there was. */
static void too_much_power(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rev/s]\n"
                 "0,20,140,60\n1,20,900,60\n2,20,150,60");
    d.step[0].repeat = 3.0;
    struct sp_step *h = add(&d, SP_STEP_HOLD, 10.0);
    h->speed = 20.0, h->power = 131e3, h->engine_speed = 40.0;
    h = add(&d, SP_STEP_HOLD, 10.0);
    h->speed = 20.0, h->power = 129e3, h->engine_speed = 40.0;
    build(&d);
    assert_int_equal(d.cautions.count, 2);
    assert_string_equal(d.cautions.list[0].found, "power up to 900 kW");
    assert_string_equal(d.cautions.list[0].path, "drive[0]");
    assert_non_null(strstr(d.cautions.list[0].expected, "100 kW"));
    assert_string_equal(d.cautions.list[1].found, "power up to 131 kW");
    assert_string_equal(d.cautions.list[1].path, "drive[1]");
    end(&d);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(engine_speed_lost),    cmocka_unit_test(engine_speed_lost_throughout),
        cmocka_unit_test(engine_off_stays_off), cmocka_unit_test(hold_that_stands),
        cmocka_unit_test(too_much_power),
    };
    return cmocka_run_group_tests(tests, set_up, tear_down);
}
