/* Cores, fans, inlets and diffusers beyond the plain ones in a case: what is read, and what does not go
 * together. SPDX-License-Identifier: GPL-3.0-or-later */
#include "case_text.h"

static int begin(void **state)
{
    (void)state;
    units = sp_units_open();
    return units ? 0 : 1;
}

static int end(void **state)
{
    (void)state;
    sp_units_close(units);
    return 0;
}

#define PART_FAN(from, to)                                                                                   \
    "{\"curve\": {\"shutoff\": \"100 Pa\", \"free_flow\": \"1 m3/s\"}, \"span_from\": " from ", \"span_to\": " to \
    "}"

static void refused_at(const char *set, const char *more, const char *path, const char *found,
                       const char *expected, int source)
{
    char *const sets[] = {(char *)(size_t)set, (char *)(size_t)more};
    struct result r = parse_set(DRIVE_CASE, SP_FOR_DRIVE, sets, more ? 2 : 1);
    if (r.design || r.complaints.count != 1 || !has(&r.complaints, NULL, 0, path, found, expected)) {
        print_error("at line %d: want one complaint, %s: %s; %s\n", source, path, found ? found : "",
                    expected);
        sp_complaints_print(&r.complaints, false, stderr);
        fail();
    }
    drop(&r);
}
#define refused(set, path, found, expected)        refused_at(set, NULL, path, found, expected, __LINE__)
#define refused2(set, more, path, found, expected) refused_at(set, more, path, found, expected, __LINE__)

#define POWER_LAWS                                                                                           \
    "duct.core.heat={\"air_conductance\": \"900 W/K\", \"at_face_velocity\": \"6 m/s\", "                    \
    "\"coolant_conductance\": \"4000 W/K\", \"at_coolant_flow\": \"1 kg/s\"}"
#define PLATES                                                                                               \
    "duct.core.fins={\"kind\": \"plate\", \"pitch\": \"1.4 mm\"}",                                           \
        "duct.core.tubes={\"pitch\": \"19 mm\", \"diameter\": \"7.5 mm\", \"pitch_along\": \"16 mm\", "      \
        "\"rows\": 2}"

static void read_as_written(void **state)
{
    (void)state;
    char *const sets[] = {
        (char[]){"duct.core.blocked=20 %"},
        (char[]){"duct.core.angle=45 deg"},
        (char[]){"duct.core.coolant_fouling=1.76e-4 m2K/W"},
        (char[]){"duct.core.air_fouling=0.0002 m2.K/W"},
        (char[]){"duct.core.flow=down"},
        (char[]){"duct.inlet.blocked=0.1"},
        (char[]){"duct.inlet.preheat_standing=5 K"},
        (char[]){"duct.inlet.recovery_table=[[0.2, 0.6], [0.6, 0.9], [1.2, 0.7]]"},
        (char[]){"duct.diffuser={\"kind\": \"one plane\", \"length\": \"300 mm\", \"height\": \"80 mm\"}"},
        (char[]){"duct.fan={\"curve\": {\"shutoff\": \"200 Pa\", \"free_flow\": \"0.6 m3/s\"}, "
                 "\"health\": \"locked\", \"wiring_drop\": \"0.5 V\", \"current_limit\": \"20 A\"}"}};
    struct result r = must_set(DRIVE_CASE, SP_FOR_DRIVE, sets, sizeof sets / sizeof *sets);
    const struct sp_duct_design *d = &r.design->duct[0];
    check_close(d->core[0].blocked, 0.2, 1e-15, 0);
    check_close(d->core[0].angle, 0.78539816339744831, 1e-15, 0);
    check_close(d->core[0].coolant_fouling, 1.76e-4, 1e-15, 0);
    check_close(d->core[0].air_fouling, 2e-4, 1e-15, 0);
    assert_true(d->core[0].down_flow && isnan(d->core[0].unevenness) && d->core[0].angle_loss == 1.0);
    check_close(d->inlet.preheat_standing, 5.0, 1e-15, 0);
    check_close(d->inlet.recirculation_ends, 50.0 / 3.6, 1e-12, 0);
    assert_true(d->inlet.recovery_table.rows == 3 && d->inlet.recovery_table.cell[3] == 0.9);
    assert_int_equal(d->diffuser.kind, SP_DIFFUSER_ONE_PLANE);
    check_close(d->diffuser.height, 0.08, 1e-12, 0);
    assert_int_equal(d->fan[0].health, SP_FAN_LOCKED);
    assert_true(d->fan[0].locked_loss == 3.0 && d->fan[0].current_limit == 20.0 &&
                d->fan[0].wiring_drop == 0.5);
    drop(&r);
}

/* Nothing of it in a plain car. */
static void absent(void **state)
{
    (void)state;
    struct result r = must(DRIVE_CASE, SP_FOR_DRIVE);
    const struct sp_duct_design *d = &r.design->duct[0];
    const struct sp_core *c = &d->core[0];
    assert_true(c->carries == SP_CARRIES_COOLANT && !c->in_series && !c->down_flow &&
                c->fin_kind == SP_FINS_LOUVRED);
    assert_true(c->blocked == 0.0 && c->angle == 0.0 && isnan(c->unevenness) && c->air_fouling == 0.0 &&
                c->coolant_fouling == 0.0 && c->span_from == 0.0 && c->span_to == 0.0);
    assert_true(d->inlet.blocked == 0.0 && d->inlet.layer_thickness == 0.0 &&
                d->inlet.recovery_table.rows == 0 && d->inlet.recirculated == 0.0 &&
                d->inlet.preheat_standing == 0.0 && d->inlet.preheat_moving == 0.0 && !d->inlet.spill &&
                d->inlet.lip_suction == 0.0 && d->diffuser.jet_share == 0.0);
    assert_true(d->fan[0].health == SP_FAN_SOUND && d->fan[0].wiring_drop == 0.0 &&
                d->fan[0].flap_area == 0.0 && d->fan[0].current_limit == 0.0);
    drop(&r);
}

static void plates_are_read(void **state)
{
    (void)state;
    char *const sets[] = {PLATES};
    struct result r = must_set(DRIVE_CASE, SP_FOR_DRIVE, sets, 2);
    const struct sp_core *c = &r.design->duct[0].core[0];
    assert_true(c->fin_kind == SP_FINS_PLATE && c->heat_law == SP_CORE_FINS && c->drop_law == SP_DROP_FINS);
    check_close(c->tube_diameter, 7.5e-3, 1e-12, 0);
    drop(&r);
}

static void bad_cores(void **state)
{
    (void)state;
    refused("duct.core.blocked=1", "duct.core.blocked", "1", "0 to 0.99");
    refused("duct.core.angle=80 deg", "duct.core.angle", "80 deg", "75 deg");
    refused("duct.core.span_from=0.5", "car.duct.core.span_to", NULL, "above span_from");
    refused("duct.core.feed=after the one before", "duct.core.feed", "after", "parallel");
    refused("duct.core.heat_load=5 kW", "duct.core.heat_load", "5 kW", "carries");
    refused("duct.core.carries=engine oil", "car.duct.core.heat", "nothing", "power laws");
    refused2(POWER_LAWS, "duct.core.coolant_fouling=1e-4 m2K/W", "duct.core.coolant_fouling", NULL,
             "heat_factor");
    refused2(POWER_LAWS, "duct.core.air_fouling=1e-4 m2K/W", "duct.core.air_fouling", NULL, "heat_factor");
    refused("duct.core.tubes.diameter=7 mm", "duct.core.tubes.diameter", "7 mm", "plate");
    refused("duct.core.fins={\"pitch\": \"1.4 mm\", \"louvre_angle\": \"25 deg\"}",
            "duct.core.fins.louvre_pitch", "nothing", "a length");
    refused("duct.core.tubes={\"pitch\": \"10 mm\"}", "duct.core.tubes.height", "nothing", "a length");
    refused2("duct.core.fins={\"kind\": \"plate\", \"pitch\": \"1.4 mm\"}",
             "duct.core.tubes={\"pitch\": \"19 mm\", \"diameter\": \"7.5 mm\", \"rows\": 2}",
             "duct.core.tubes.pitch_along", "nothing", "a length");
    refused2("duct.core.fins={\"kind\": \"plate\", \"pitch\": \"1.4 mm\", \"louvre_pitch\": \"1 mm\"}",
             "duct.core.tubes={\"pitch\": \"19 mm\", \"diameter\": \"7.5 mm\"}",
             "duct.core.fins.louvre_pitch", "1 mm", "plate");
    refused2("duct.core.fins={\"kind\": \"plate\", \"pitch\": \"1.4 mm\"}",
             "duct.core.tubes={\"pitch\": \"19 mm\", \"diameter\": \"18.9 mm\"}", "duct.core.tubes.diameter",
             "18.9", "below the tube pitch");
}

static void bad_inlets(void **state)
{
    (void)state;
    refused("duct.inlet.layer_thickness=20 mm", "car.duct.inlet.height", "nothing", "a length");
    refused("duct.inlet.height=20 mm", "car.duct.inlet.layer_thickness", "nothing", "thickness");
    refused("duct.inlet.lip_suction=0.8", "duct.inlet.lip_suction", "0.8", "spill");
    refused("duct.inlet.recovery_table=[[0.5, 0.6], [0.5, 0.9]]", "duct.inlet.recovery_table", "not rise",
            "rising");
    refused("duct.inlet.recovery_table=[[0, 0.1], [0.4, 0.2], [0.6, 0.9]]", "duct.inlet.recovery_table",
            "steeper", "several flows");
    refused2("duct.inlet.recovery_table=[[0, 0.6], [0.5, 0.9]]", "duct.inlet.recovery=0.8",
             "duct.inlet.recovery", "recovery and its table", "one");
    refused2("duct.inlet.recovery=0.8", "duct.fans=[" PART_FAN("0", "0.5") ", " PART_FAN("0.4", "1") "]",
             "duct.fans[1].span_from", "a shroud over part", "another");
    refused2("duct.inlet.recovery=0.8", "duct.fans=[" PART_FAN("0", "0.5") ", " PART_FAN("0", "0") "]",
             "duct.fans[1].span_from", "a shroud over part", "another");
    refused("duct.diffuser={\"kind\": \"one plane\", \"length\": \"0.3 m\"}", "duct.diffuser.height",
            "nothing", "a length");
    refused("duct.diffuser={\"loss\": 0.3, \"jet_share\": 0.4}", "duct.diffuser.jet_share", "0.4", "kind");
    refused("duct.fan={\"curve\": {\"shutoff\": \"100 Pa\", \"free_flow\": \"1 m3/s\"}, \"span_from\": 0.6, "
            "\"span_to\": 0.5}",
            "duct.fan.span_to", "0.5", "above span_from");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(read_as_written), cmocka_unit_test(absent),     cmocka_unit_test(plates_are_read),
        cmocka_unit_test(bad_cores),       cmocka_unit_test(bad_inlets),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
