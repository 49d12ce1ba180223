/* What changes during a drive: designs from time to time, and changes that will not do.
 * Expected numbers are exact conversions, or sums of them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
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

#define FAN       "\"fan\": {\"curve\": {\"shutoff\": \"100 Pa\", \"free_flow\": \"1 m3/s\"}}"
#define CORES     "\"cores\": [" CORE_BODY ", " CORE_BODY "]"
#define CORE_BODY "{\"width\": \"480 mm\", \"height\": \"340 mm\", \"depth\": \"42 mm\", " COEFFICIENT "}"
#define CAR_OF                                                                                               \
    "\"car\": {\"tank\": {\"cap\": \"1.2 bar\"}, \"duct\": {" INLET ", " CORES ", " FAN ", " EXIT "}}"
#define CHANGES(list)  "{" AIR ",\n" CAR_OF ",\n\"changes\": [" list "]}"
#define CHANGES_START  "{" AIR ", " CAR_OF ", \"changes\": [{\"at\": \"1 s\", \"set\": {"
#define AT(time, rest) "{\"at\": \"" time "\", " rest "}"
#define SET(values)    "\"set\": {" values "}"
#define ADD(values)    "\"add\": {" values "}"

static void one_complaint(const char *text, const char *path, const char *found, const char *expected,
                          int source)
{
    struct result r = parse_set(text, SP_FOR_DUCT, NULL, 0);
    if (r.complaints.count != 1 || !has(&r.complaints, "dir/c.json", 0, path, found, expected)) {
        print_error("at line %d: want one complaint, %s: %s; %s\n", source, path, found ? found : "",
                    expected ? expected : "");
        sp_complaints_print(&r.complaints, false, stderr);
        fail();
    }
    drop(&r);
}
#define refused(list, path, found, expected) one_complaint(CHANGES(list), path, found, expected, __LINE__)
/* A change of one value. */
#define set_refused(key, value, found, expected)                                                             \
    refused(AT("1 min", "\"set\": {\"" key "\": " value "}"), "changes[0].set.\"" key "\"", found, expected)
#define add_refused(key, value, found, expected)                                                             \
    refused(AT("1 min", "\"add\": {\"" key "\": " value "}"), "changes[0].add.\"" key "\"", found, expected)

/* ---- what is read ---------------------------------------------------------------------------------- */

static void changes_add_up(void **state)
{
    (void)state;
    struct result r = must(
        CHANGES(AT("12 min", SET("\"duct.inlet.blocked\": \"40 %\", \"duct.fan.health\": \"dead\"")) ", " AT(
            "2 min", SET("\"duct.cores[1].blocked\": 0.25")) ", " AT("20 min",
                                                                     SET("\"car.duct.inlet.blocked\": 0, "
                                                                         "\"limits.coolant\": \"99 degC\""))),
        SP_FOR_DUCT);
    const struct sp_design *d = r.design;
    assert_int_equal(d->changes, 3);
    const struct sp_change *c = d->change;
    check_close(c[0].at, 120.0, 0.0, 0.0);
    check_close(c[1].at, 720.0, 0.0, 0.0);
    check_close(c[2].at, 1200.0, 0.0, 0.0);
    assert_string_equal(c[0].text, "duct.cores[1].blocked=0.25");
    assert_string_equal(c[1].text, "duct.inlet.blocked=40 %, duct.fan.health=dead");
    assert_string_equal(c[2].text, "car.duct.inlet.blocked=0, limits.coolant=99 degC");
    static const double core[] = {0.25, 0.25, 0.25}, inlet[] = {0.0, 0.4, 0.0};
    for (size_t i = 0; i < 3; ++i) {
        const struct sp_design *to = c[i].to;
        check_close(to->duct[0].core[1].blocked, core[i], 1e-14, 0.0);
        check_close(to->duct[0].core[0].blocked, 0.0, 0.0, 0.0);
        check_close(to->duct[0].inlet.blocked, inlet[i], 1e-14, 0.0);
        assert_int_equal(to->duct[0].fan[0].health, i ? SP_FAN_DEAD : SP_FAN_SOUND);
        assert_true(isnan(to->limits.coolant.stop) == (i < 2));
        assert_true(!to->changes && !to->change && !to->steps);
        assert_int_equal(to->duct[0].cores, 2);
        check_close(to->duct[0].core[1].coolant_volume, d->duct[0].core[1].coolant_volume, 0.0, 0.0);
        check_close(to->coolant.fluid.density[0], d->coolant.fluid.density[0], 0.0, 0.0);
        check_close(to->air.pressure, d->air.pressure, 0.0, 0.0);
    }
    check_close(d->duct[0].core[1].blocked, 0.0, 0.0, 0.0);
    drop(&r);
}

/* Of one time: in the order of the file, however many. */
static void order_of_the_file(void **state)
{
    (void)state;
    struct result r =
        must(CHANGES(AT("1 min", SET("\"tank.cap\": \"1 bar\"")) ", " AT("60 s", SET("\"tank.cap\": \"2 "
                                                                                     "bar\"")) ", " AT(
                 "0 s", SET("\"tank.cap\": \"3 bar\"")) ", " AT("1 min", SET("\"tank.cap\": \"4 bar\""))),
             SP_FOR_DUCT);
    static const double cap[] = {3e5, 1e5, 2e5, 4e5};
    for (size_t i = 0; i < 4; ++i)
        check_close(r.design->change[i].to->tank.cap, cap[i], 1e-14, 0.0);
    drop(&r);
}

static void values_grow(void **state)
{
    (void)state;
    struct result r = must(
        CHANGES(AT(
            "100 s",
            "\"every\": \"100 s\", \"times\": 9, " ADD(
                "\"duct.cores[0].blocked\": \"1 %\"")) ", " AT("450 s",
                                                               SET("\"duct.cores[0].blocked\": \"50 %\""))),
        SP_FOR_DUCT);
    const struct sp_change *c = r.design->change;
    assert_int_equal(r.design->changes, 10);
    for (size_t i = 0; i < 10; ++i) {
        double blocked = i < 4 ? 0.01 * (double)(i + 1) : 0.5 + 0.01 * (double)(i - 4);
        check_close(c[i].to->duct[0].core[0].blocked, blocked, 1e-12, 0.0);
        check_close(c[i].at,
                    i < 4    ? 100.0 * (double)(i + 1)
                    : i == 4 ? 450.0
                             : 100.0 * (double)i,
                    1e-12, 0.0);
    }
    assert_string_equal(c[2].text, "duct.cores[0].blocked=3 %");
    assert_string_equal(c[9].text, "duct.cores[0].blocked=55 %");
    drop(&r);
}

/* To a default, to one by rule, to a word's number; temperatures by differences. */
static void values_grow_from_what_holds(void **state)
{
    (void)state;
    struct result r =
        must(CHANGES(AT("1 s", "\"every\": \"1 s\", \"times\": 2, " ADD(
                                   "\"thermostat.opens\": \"2 K\", \"tank.cap\": \"0.1 bar\", "
                                   "\"duct.cores[0].metal_capacity\": \"1 kJ/K\", "
                                   "\"duct.inlet.lip_loss\": -0.1, \"tank.filled_at\": \"9 degR\""))),
             SP_FOR_DUCT);
    for (size_t i = 0; i < 2; ++i) {
        const struct sp_design *to = r.design->change[i].to;
        double n = (double)(i + 1);
        check_close(to->thermostat.opens, 358.15 + 2.0 * n, 1e-11, 0.0);
        check_close(to->thermostat.full - to->thermostat.opens, 12.0, 1e-9, 0.0); /* a rule: follows */
        check_close(to->tank.cap, 1.2e5 + 1e4 * n, 1e-11, 0.0);
        check_close(to->tank.fill_temperature, 293.15 + 5.0 * n, 1e-11, 0.0);
        check_close(to->duct[0].core[0].metal_capacity, r.design->duct[0].core[0].metal_capacity + 1e3 * n,
                    1e-11, 0.0);
        check_close(to->duct[0].core[1].metal_capacity, r.design->duct[0].core[1].metal_capacity, 0.0, 0.0);
        check_close(to->duct[0].inlet.lip_loss, 1.0 - 0.1 * n, 1e-11, 0.0);
    }
    drop(&r);
}

static void settings_reach_changes(void **state)
{
    (void)state;
    const char *text = CHANGES(AT("1 min", SET("\"tank.cap\": \"1 bar\"")));
    struct result r =
        must_set(text, SP_FOR_DUCT,
                 (char *const[]){(char[]){"changes[0].at=2 min"},
                                 (char[]){"changes[0].set.\"tank.cap\"=2 bar"}, (char[]){"tank.bleed=1 %"}},
                 3);
    check_close(r.design->change[0].at, 120.0, 0.0, 0.0);
    check_close(r.design->change[0].to->tank.cap, 2e5, 1e-14, 0.0);
    check_close(r.design->change[0].to->tank.bleed, 0.01, 1e-14, 0.0);
    drop(&r);
    r = must_set(text, SP_FOR_DUCT, (char *const[]){(char[]){"changes=[]"}}, 1);
    assert_int_equal(r.design->changes, 0);
    drop(&r);
    r = parse_set(text, SP_FOR_DUCT, (char *const[]){(char[]){"changes[0].set={\"tank.cap\": \"1 kg\"}"}}, 1);
    assert_int_equal(r.complaints.count, 1);
    assert_true(has(&r.complaints, "--set changes[0].set={\"tank.cap\": \"1 kg\"}", 0,
                    "changes[0].set.\"tank.cap\"", "1 kg", "a gauge pressure"));
    drop(&r);
    r = parse_set(text, SP_FOR_DUCT, (char *const[]){(char[]){"changes[1].at=1 s"}}, 1);
    assert_true(has(&r.complaints, NULL, 0, "changes[1].at", "index 1", "there is 1"));
    drop(&r);
}

/* A whole drive with a curve as an object, and a steep way down the tree. */
static void a_drive_with_changes(void **state)
{
    (void)state;
    const char *text =
        "{" AIR ", \"car\": " CAR
        ", \"changes\": [" AT("1 min", SET("\"pump.curve.shutoff\": \"60 kPa\", \"duct.core.fins.pitch\": "
                                           "\"2.1 mm\"")) ", " AT(
            "2 min", SET("\"pump.curve\": [[\"0 l/min\", \"90 kPa\"], [\"200 l/min\", \"0 kPa\"]]")) "]" REST;
    struct result r = must(text, SP_FOR_DRIVE);
    const struct sp_change *c = r.design->change;
    assert_int_equal(r.design->steps, 4);
    check_close(c[0].to->pump.curve.shutoff, 60e3, 1e-14, 0.0);
    check_close(c[0].to->duct[0].core[0].fin_pitch, 2.1e-3, 1e-14, 0.0);
    assert_int_equal(c[1].to->pump.curve.pairs.rows, 2);
    check_close(c[1].to->pump.curve.pairs.cell[1], 90e3, 1e-14, 0.0);
    check_close(c[1].to->duct[0].core[0].fin_pitch, 2.1e-3, 1e-14, 0.0);
    drop(&r);
}

/* ---- what will not do ------------------------------------------------------------------------------ */

static void entries_that_will_not_do(void **state)
{
    (void)state;
    refused("3", "changes[0]", "3", "an object");
    refused("{" SET("\"tank.cap\": \"1 bar\"") "}", "changes[0].at", "nothing", "a time");
    refused(AT("-1 s", SET("\"tank.cap\": \"1 bar\"")), "changes[0].at", "-1 s", "0 s to");
    refused(AT("1 km", SET("\"tank.cap\": \"1 bar\"")), "changes[0].at", "1 km", "a time");
    refused("{\"at\": \"1 s\"}", "changes[0]", "neither", "one of them");
    refused(AT("1 s", "\"set\": {}"), "changes[0].set", "nothing in it", NULL);
    refused(AT("1 s", "\"set\": 3"), "changes[0].set", "3", "an object");
    refused(AT("1 s", "\"time\": 3, " SET("\"tank.cap\": \"1 bar\"")), "changes[0].time", "an unknown key",
            NULL);
    refused(AT("1 s", "\"every\": \"1 s\", " SET("\"tank.cap\": \"1 bar\"")), "changes[0].times", "nothing",
            NULL);
    refused(AT("1 s", "\"times\": 2, " SET("\"tank.cap\": \"1 bar\"")), "changes[0].every", "nothing", NULL);
    refused(AT("1 s", "\"every\": \"1 s\", \"times\": 1.5, " SET("\"tank.cap\": \"1 bar\"")),
            "changes[0].times", "1.5", "whole");
    refused(AT("1 s", "\"every\": \"1 s\", \"times\": 150, " ADD("\"tank.filled_at\": \"0.1 K\"")) ", " AT(
                "1 s", "\"every\": \"1 s\", \"times\": 51, " ADD("\"tank.filled_at\": \"0.1 K\"")),
            "changes", "201 changes", "at most 200");
    one_complaint("{" AIR ", " CAR_OF ", \"changes\": {}}", "changes", "an object", "a list of changes",
                  __LINE__);
}

/* Set by a path with or without quotes: the points of what a change sets are no levels of the file. */
static void settings_without_quotes(void **state)
{
    (void)state;
    static const char *const forms[] = {"changes[0].set.duct.cores[1].blocked=50 %",
                                        "changes[0].set.\"duct.cores[1].blocked\"=50 %"};
    for (size_t i = 0; i < 2; ++i) {
        char text[100];
        snprintf(text, sizeof text, "%s", forms[i]);
        struct result r = must_set(CHANGES(AT("1 s", SET("\"duct.cores[1].blocked\": 0.25"))), SP_FOR_DUCT,
                                   (char *const[]){text}, 1);
        assert_int_equal(r.design->changes, 1);
        check_close(r.design->change[0].to->duct[0].core[1].blocked, 0.5, 1e-14, 0.0);
        assert_int_equal(r.design->change[0].entry, 0);
        assert_int_equal(r.design->change[0].line, 3);
        assert_string_equal(r.design->change[0].file, "dir/c.json");
        drop(&r);
    }
    static const char *const empty[] = {"changes[0].set.=50 %", "changes[0].set={\"\": \"20 %\"}",
                                        "changes[0].add.\"\"=1", "changes=[{\"at\": \"1 s\", \"set\": {\"\": 1}}]"};
    for (size_t i = 0; i < 4; ++i) {
        char text[100];
        snprintf(text, sizeof text, "%s", empty[i]);
        struct result r = parse_set(CHANGES(AT("1 s", SET("\"duct.cores[1].blocked\": 0.25"))), SP_FOR_DUCT,
                                    (char *const[]){text}, 1);
        assert_int_equal(r.complaints.count, 1);
        drop(&r);
    }
}

static void keys_that_stay(void **state)
{
    (void)state;
    set_refused("engine.displacement", "\"3 l\"", "a change", "before the drive");
    set_refused("engine.heat.fraction", "0.5", "a change", "before the drive");
    set_refused("body.mass", "\"3 kg\"", "a change", "before the drive");
    set_refused("gauge.lag", "\"3 s\"", "a change", "no change");
    set_refused("coolant.kind", "\"water\"", "a change", "filled");
    set_refused("coolant.glycol", "\"3 %\"", "a change", "filled");
    static const char *const laid_out[] = {"duct.cores[0].cells", "duct.cores[1].carries",
                                           "duct.cores[0].feed",  "duct.count",
                                           "duct.coolant",        "duct.fan.count"};
    for (size_t i = 0; i < sizeof laid_out / sizeof *laid_out; ++i) {
        char text[1500], path[100];
        snprintf(text, sizeof text, "%s\"%s\": 1}}]}", CHANGES_START, laid_out[i]);
        snprintf(path, sizeof path, "changes[0].set.\"%s\"", laid_out[i]);
        one_complaint(text, path, "a change", "laid out", __LINE__);
    }
    set_refused("air.ambient", "\"3 degC\"", "a change", "read once");
    set_refused("drive[0].idle", "\"3 s\"", "a change", "read once");
    set_refused("changes[0].at", "\"3 s\"", "a change", "read once");
    set_refused("title", "\"3\"", "a change", "read once");
    set_refused("car.from", "\"3\"", "a change", "read once");
    set_refused("duct", "{}", "all of a group", "one by one");
    set_refused("duct.exit", "{}", "all of a group", "one by one");
    set_refused("duct.cores", "[]", "all of a group", "one by one");
    set_refused("thermostat", "\"none\"", "all of a group", "one by one");
    set_refused("limits", "{}", "all of a group", "one by one");
    set_refused("duct.inlet.aera", "3", "an unknown key", NULL);
    set_refused("duct.exits[1].area", "\"3 m2\"", "index 1", "there is 1");
    set_refused("duct.core.blocked", "0", "alone", "list of 2");
    set_refused("duct.cores[2].blocked", "0", "index 2", "0 to 1, for there are 2");
    set_refused("duct.fans[1].health", "\"dead\"", "index 1", "there is 1");
    set_refused("a..b", "3", NULL, NULL);
    set_refused("", "\"20 %\"", "an empty path", "a key");
    add_refused("", "\"20 %\"", "an empty path", "a key");
    set_refused("duct.cores[0].name", "\"cooler\"", "a change", "read once");
    set_refused("duct.exit.place", "\"arch\"", "a change", "read once");
    one_complaint("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) "}, \"changes\": [" AT(
                      "1 s", SET("\"duct.fan.health\": \"dead\"")) "]}",
                  "changes[0].set.\"duct.fan.health\"", "no fan from the start", "one that is there",
                  __LINE__);
    one_complaint(
        "{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) "}, \"changes\": [" AT(
            "1 s", SET("\"duct.core.heat.face_velocity\": [\"1 m/s\"], \"duct.core.heat.coolant_flow\": "
                       "[\"1 kg/s\"], \"duct.core.heat.rejection\": [[\"1 kW/K\"]]")) "]}",
        NULL, "another law", "from the start", __LINE__);
}

static void values_that_will_not_do(void **state)
{
    (void)state;
    set_refused("duct.inlet.blocked", "\"140 %\"", "140 %", "0 to 0.99");
    set_refused("duct.cores[1].blocked", "\"1 m\"", "1 m", NULL);
    set_refused("duct.fan.health", "\"ill\"", "ill", NULL);
    set_refused("duct.fan.curve", "[[\"0 m3/s\", \"1 Pa\"]]", "one pair", "two pairs");
    set_refused("thermostat.full", "\"70 degC\"", "70 degC", "above opens");
    set_refused("duct.fan.hub", "null", "null", "a length");
    add_refused("duct.fan.health", "1", "no single number", NULL);
    add_refused("duct.fan.curve", "1", "no single number", NULL);
    add_refused("duct.fan.diameter", "\"1 mm\"", "nothing to add to", NULL);
    add_refused("duct.inlet.area", "1", "1", "an area");
    add_refused("duct.inlet.area", "\"1 m\"", "1 m", "an area");
    add_refused("thermostat.opens", "\"1 degC\"", "1 degC", "a temperature difference");
    add_refused("duct.cores[7].blocked", "1", "index 7", "there are 2");
    add_refused("duct.inlet.blocked", "2", "2", "0 to 0.99");
    refused(AT("1 s", SET("\"tank.cap\": \"1 bar\", \"car.tank.cap\": \"2 bar\"")),
            "changes[0].set.\"car.tank.cap\"", "the same key again", NULL);
    refused(AT("1 s", SET("\"tank.cap\": \"1 bar\"") ", " ADD("\"tank.cap\": \"2 bar\"")),
            "changes[0].add.\"tank.cap\"", "the same key again", NULL);
    /* Said by the reader of JSON, and not again. */
    refused(AT("1 s", SET("\"tank.cap\": \"1 bar\", \"tank.cap\": \"2 bar\"")), "changes[0].set.tank.cap",
            "again, first on line", "once");
    /* Said once, though it stays wrong from then on; each new number of a growth is another fault. */
    refused(AT("1 s", SET("\"duct.inlet.blocked\": 3")) ", " AT("2 s", SET("\"tank.cap\": \"1 bar\"")),
            "changes[0].set.\"duct.inlet.blocked\"", "3", NULL);
    /* No value of a change is at fault, but what follows from it; that is no fault of the change after it. */
    refused(AT("1 s", SET("\"tank.air_space\": \"150 l\"")) ", " AT("2 s", SET("\"tank.cap\": \"1 bar\"")), NULL,
            NULL, NULL);
    refused(AT("1 s", SET("\"tank.air_space\": \"150 l\"")), NULL, NULL, NULL);
}

/* A hundred faults, a third each in lists, in changes and elsewhere: each is said, at its place. */
static void a_hundred_faults(void **state)
{
    (void)state;
    char *text = NULL;
    size_t size = 0;
    FILE *f = open_memstream(&text, &size);
    assert_non_null(f);
    fputs("{" AIR ",\n\"solver\": {", f);
    for (int i = 0; i < 30; ++i)
        fprintf(f, "%s\"x%d\": 1", i ? "," : "", i);
    fputs("},\n\"car\": {\"ducts\": [", f);
    for (int i = 0; i < 4; ++i) {
        fprintf(f, "%s{" INLET ", \"exits\": [", i ? "," : "");
        fputs("{\"area\": \"1 kg\"},{\"area\": \"600 cm2\", \"loss\": -1}],\n\"cores\": [", f);
        for (int k = 0; k < 4; ++k)
            fprintf(f,
                    "%s{\"width\": \"480 mm\", \"height\": \"340 mm\", \"depth\": \"%d m\", "
                    "\"pressure_drop\": "
                    "{\"coefficient\": 8}}",
                    k ? "," : "", k + 1);
        fputs("]}", f);
    }
    fputs("]},\n\"changes\": [", f);
    for (int i = 0; i < 46; ++i)
        fprintf(f, "%s\n{\"at\": \"%d s\", \"set\": {\"ducts[%d].cores[%d].blocked\": %d}}", i ? "," : "",
                46 - i, i % 4, i % 3, i + 1);
    fputs("]}", f);
    fclose(f);
    struct result r = parse_set(text, SP_FOR_DUCT, NULL, 0);
    if (r.complaints.count != 100) sp_complaints_print(&r.complaints, false, stderr);
    assert_int_equal(r.complaints.count, 100);
    assert_int_equal(r.complaints.dropped, 0);
    for (int i = 0; i < 46; ++i) {
        char path[80], found[20];
        snprintf(path, sizeof path, "changes[%d].set.\"ducts[%d].cores[%d].blocked\"", i, i % 4, i % 3);
        snprintf(found, sizeof found, "%d", i + 1);
        if (!has(&r.complaints, "dir/c.json", 0, path, found, "0 to 0.99")) fail_msg("%s", path);
    }
    assert_true(has(&r.complaints, NULL, 0, "car.ducts[3].cores[2].depth", "3 m", NULL));
    assert_true(has(&r.complaints, NULL, 0, "car.ducts[2].exits[1].loss", "-1", NULL));
    assert_true(has(&r.complaints, NULL, 2, "solver.x29", "an unknown key", NULL));
    drop(&r);
    free(text);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(changes_add_up),
        cmocka_unit_test(order_of_the_file),
        cmocka_unit_test(values_grow),
        cmocka_unit_test(values_grow_from_what_holds),
        cmocka_unit_test(settings_reach_changes),
        cmocka_unit_test(a_drive_with_changes),
        cmocka_unit_test(entries_that_will_not_do),
        cmocka_unit_test(keys_that_stay),
        cmocka_unit_test(settings_without_quotes),
        cmocka_unit_test(values_that_will_not_do),
        cmocka_unit_test(a_hundred_faults),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
