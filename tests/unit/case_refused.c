/* Cases that will not do: each fault with its place, what stands there and what belongs there.
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

static void refused_at(const char *text, enum sp_purpose purpose, char *const *set, size_t sets,
                       const char *path, const char *found, const char *expected, int source)
{
    struct result r = parse_set(text, purpose, set, sets);
    if (r.design || r.complaints.count != 1 || !has(&r.complaints, NULL, 0, path, found, expected)) {
        print_error("at line %d: want one complaint, %s: %s; %s\n", source, path, found ? found : "",
                    expected ? expected : "");
        sp_complaints_print(&r.complaints, false, stderr);
        fail();
    }
    drop(&r);
}
/* One complaint, at that path. */
#define refused(text, path, found, expected)                                                                 \
    refused_at(text, SP_FOR_DUCT, NULL, 0, path, found, expected, __LINE__)
#define set_refused(value, path, found, expected)                                                            \
    refused_at(DRIVE_CASE, SP_FOR_DRIVE, (char *const[]){(char *)(size_t)(value)}, 1, path, found, expected, \
               __LINE__)

#define FAN_SET(rest) "duct.fan={\"curve\": {\"shutoff\": \"100 Pa\", \"free_flow\": \"1 m3/s\"}, " rest "}"

static void bad_settings(void **state)
{
    (void)state;
    set_refused("duct.exit.aera=3", "duct.exit.aera", "an unknown key", NULL);
    set_refused("duct.exit.area=450 cm", "duct.exit.area", "450 cm", "an area");
    set_refused("car.duct.exit.area=450 cm", "car.duct.exit.area", "450 cm", "an area");
    set_refused("duct.exit.area=3", "duct.exit.area", "3", "an area");
    set_refused("drive[4].repeat=2", "drive[4].repeat", "index 4", "0 to 3");
    set_refused("drive[1].repeat=0", "drive[1].repeat", "0", "1 to 100000");
    set_refused("drive[1].repeat=1.5", "drive[1].repeat", "1.5", "whole");
    set_refused("drive.repeat=2", "drive.repeat", "an unknown key", NULL);
    set_refused("limits.coolant=null", "limits.coolant", "null", "temperature");
    set_refused("air.ambient=NaN degC", "air.ambient", "NaN", NULL);
    set_refused("air.ambient=33 C", "air.ambient", "33 C", NULL);
    set_refused("limits.boil_margin=8 degC", "limits.boil_margin", "8 degC", NULL);
    set_refused("pump.curve[0]=3", "pump.curve[0]", "an object", "list");
    set_refused("nothing", NULL, "no path", "PATH=VALUE");
    set_refused("=3", NULL, "no path", "PATH=VALUE");
    set_refused("air..ambient=3", "air..ambient", NULL, NULL);
    set_refused("drive[=3", "drive[", NULL, NULL);
    set_refused("drive[99999999999999999999]=3", NULL, NULL, NULL);
    set_refused("[0]=3", "[0]", NULL, NULL);
    struct result r = parse_set(DUCT_CASE, SP_FOR_DUCT, (char *const[]){(char[]){"duct.exit.aera=3"}}, 1);
    assert_string_equal(r.complaints.list[0].file, "--set duct.exit.aera=3");
    assert_string_equal(r.complaints.list[0].hint, "nearest known key is \"area\"");
    drop(&r);
    r = parse_set(DUCT_CASE, SP_FOR_DUCT, (char *const[]){(char[]){"duct.exit.quux=3"}}, 1);
    assert_null(r.complaints.list[0].hint); /* nothing is near */
    drop(&r);
    r = parse_set(DUCT_CASE, SP_FOR_DUCT, (char *const[]){(char[]){"bodi.mass=3"}}, 1);
    assert_string_equal(r.complaints.list[0].hint, "nearest known key is \"body\""); /* of the car */
    drop(&r);
}

static void cars_for_cases(void **state)
{
    (void)state;
    refused(CAR, "body", "a key of a car", "air, car, drive, limits");
    refused("{" DUCT_OF(COEFFICIENT) "}", "duct", "a key of a car", NULL);
    struct result r = parse_set(CAR, SP_FOR_DRIVE, NULL, 0);
    assert_string_equal(r.complaints.list[0].hint, "this looks like a car; name it under \"car\"");
    drop(&r);
    r = parse_set("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) "}, \"pump\": {}, \"drlve\": [], \"x\": 1}",
                  SP_FOR_DUCT, NULL, 0);
    assert_int_equal(r.complaints.count, 3);
    assert_string_equal(r.complaints.list[0].hint, "a key of the car: it belongs under \"car\"");
    assert_string_equal(r.complaints.list[1].hint, "nearest known key is \"drive\"");
    assert_null(r.complaints.list[2].hint);
    drop(&r);
    r = parse_set(DRIVE_CASE, SP_FOR_DRIVE,
                  (char *const[]){(char[]){"drive[1].columns={\"zzz\": \"v\"}"}}, 1);
    assert_int_equal(r.complaints.count, 1);
    assert_null(r.complaints.list[0].hint);
    drop(&r);
}

/* Two values the wrong way round: the one the user set is blamed, in the words of the user. */
static void orders(void **state)
{
    (void)state;
    set_refused("thermostat.full=70 degC", "thermostat.full", "70 degC",
                "full above opens, which is 85 degC by default");
    set_refused("thermostat={\"opens\": \"194 degF\", \"full\": \"80 degC\"}", "thermostat.opens",
                "194 degF", "opens below full, which is 80 degC");
    set_refused("engine.rated_speed=600 rpm", "engine.rated_speed", "600 rpm",
                "rated_speed above idle_speed, which is 850 rpm by default");
    set_refused("engine.idle_speed=117 Hz", NULL, NULL, "100 rpm to 6000 rpm");
    set_refused("engine={\"displacement\": \"2 l\", \"rated_power\": \"90 kW\", "
                "\"rated_speed\": \"2000 rpm\", \"idle_speed\": \"40 Hz\", \"heat\": {\"fraction\": 0.6}}",
                "engine.idle_speed", "40 Hz", "idle_speed below rated_speed, which is 2000 rpm");
    set_refused(FAN_SET("\"switch\": {\"on\": \"60 degC\"}"), "duct.fan.switch.on", "60 degC",
                "on above off, which is 91 degC by default");
    set_refused(FAN_SET("\"control\": \"proportional\", \"proportional\": {\"from\": \"373.15 K\"}"),
                "duct.fan.proportional.from", "373.15 K", "from below to, which is 100 degC by default");
    /* Both stand in the car, one is set over it. */
    const char *with = "{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) ", "
                       "\"thermostat\": {\"opens\": \"88 degC\", \"full\": \"99 degC\"}}}";
    refused_at(with, SP_FOR_DUCT, (char *const[]){(char[]){"thermostat.full=87 degC"}}, 1, "thermostat.full",
               "87 degC", "full above opens, which is 88 degC", __LINE__);
    refused_at(with, SP_FOR_DUCT, (char *const[]){(char[]){"thermostat.opens=99 degC"}}, 1,
               "thermostat.opens", "99 degC", "opens below full, which is 99 degC", __LINE__);
}

/* ---- complaints ------------------------------------------------------------------------------------ */

static void what_is_missing(void **state)
{
    (void)state;
    refused("{" AIR "}", "car", "nothing", "object");
    refused("{\"car\": {" DUCT_OF(COEFFICIENT) "}}", "air", "nothing", "ambient");
    refused("{\"air\": {}, \"car\": {" DUCT_OF(COEFFICIENT) "}}", "air.ambient", "nothing", "temperature");
    refused("{" AIR ", \"car\": {}}", "car.duct", "nothing", "inlet");
    refused("{" AIR ", \"car\": {\"duct\": {" INLET ", " CORE_START COEFFICIENT "}}}}", "car.duct.exit",
            "nothing", "area");
    refused("{" AIR ", \"car\": {" DUCT_OF("\"cells\": 4") "}}", "car.duct.core.pressure_drop", "nothing",
            "coefficient");
    refused("{" AIR ", \"car\": {" DUCT_OF("\"pressure_drop\": {}") "}}", "car.duct.core.pressure_drop",
            "no law", NULL);
    refused("{" AIR ", \"car\": 3}", "car", "3", NULL);
    refused("[]", NULL, "an array", "an object");
    refused("{", NULL, NULL, NULL);
    refused("", NULL, NULL, NULL);
    struct result r = parse_set(DUCT_CASE, SP_FOR_DRIVE, NULL, 0);
    assert_true(
        has(&r.complaints, NULL, 0, "car.engine", "nothing", "displacement, rated_power, rated_speed, heat"));
    assert_true(has(&r.complaints, NULL, 0, "car.pump", "nothing", "curve"));
    assert_true(has(&r.complaints, NULL, 0, "car.body", "nothing", "frontal_area"));
    assert_true(has(&r.complaints, NULL, 0, "drive", "nothing", NULL));
    assert_true(has(&r.complaints, NULL, 0, "limits", "nothing", NULL));
    assert_true(has(&r.complaints, NULL, 0, "car.duct.core.heat", "nothing", NULL));
    assert_int_equal(r.complaints.count, 6);
    drop(&r);
}

static void what_does_not_belong(void **state)
{
    (void)state;
    refused("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) "}, \"title\": null}", "title", "null", "a text");
    refused("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) ", \"engine\": null}}", "car.engine", "null",
            "an object");
    refused("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT ", \"fins\": 7") "}}", "car.duct.core.fins", "7",
            "an object");
    refused("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) ", \"a.b[0]\": 1}}", "car.a.b[0]", "an unknown key",
            NULL);
    refused("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) ", \"thermostat\": \"stuck\"}}", "car.thermostat",
            "stuck", "none");
    refused("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) ", \"duct.exit\": {}}}", "car.duct.exit",
            "an unknown key", NULL);
    refused("{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) ", \"\": 1}}", "car.", "an unknown key", NULL);
    refused("{\"car\": {" DUCT_OF(COEFFICIENT) "}, \"air\": {\"ambient\": 33}}", "air.ambient", "33",
            "temperature");
    refused("{\"car\": {" DUCT_OF(COEFFICIENT) "}, \"air\": {\"ambient\": \"33 degC\", \"pressure\": \"1 "
                                               "bar\", \"altitude\": \"0 m\"}}",
            "air.pressure", "both", "one");
    refused("{\"car\": {" DUCT_OF(COEFFICIENT) "}, \"air\": {\"ambient\": \"120 degC\"}}", "air.ambient",
            "120 degC", "-60 degC to 70 degC");
}

static void cores_that_will_not_do(void **state)
{
    (void)state;
#define CORE_CASE(core) "{" AIR ", \"car\": {" DUCT_OF(core) "}}"
    refused(CORE_CASE("\"pressure_drop\": {\"linear\": \"60 Pa.s/m\"}"),
            "car.duct.core.pressure_drop.quadratic", "nothing", NULL);
    refused(CORE_CASE("\"pressure_drop\": {\"coefficient\": 8, \"table\": [[\"1 m/s\", \"1 Pa\"]]}"),
            "car.duct.core.pressure_drop", "more than one law", NULL);
    refused(CORE_CASE("\"pressure_drop\": {\"table\": [[\"2 m/s\", \"30 Pa\"], [\"3 m/s\", \"30 Pa\"]]}"),
            "car.duct.core.pressure_drop.table[1]", NULL, "rising");
    refused(CORE_CASE("\"pressure_drop\": {\"table\": []}"), "car.duct.core.pressure_drop.table",
            "an empty list", NULL);
    refused(CORE_CASE("\"pressure_drop\": {\"table\": [[\"2 m/s\"]]}"),
            "car.duct.core.pressure_drop.table[0]", "a row of 1", "a row of 2");
    refused(CORE_CASE("\"pressure_drop\": {\"table\": [[\"2 Pa\", \"2 Pa\"]]}"),
            "car.duct.core.pressure_drop.table[0][0]", "2 Pa", "speed");
    refused(CORE_CASE("\"pressure_drop\": {\"coefficient\": -1}"), "car.duct.core.pressure_drop.coefficient",
            "-1", "0 to");
    refused(
        CORE_CASE(
            "\"fins\": {\"pitch\": \"1.9 mm\", \"louvre_pitch\": \"1.4 mm\", \"louvre_angle\": \"23 deg\"}"),
        "car.duct.core.tubes", "nothing", NULL);
    refused(CORE_CASE(COEFFICIENT ", \"tubes\": {\"pitch\": \"2 mm\", \"height\": \"2 mm\"}"),
            "car.duct.core.tubes.height", NULL, NULL);
    refused(CORE_CASE(COEFFICIENT ", \"heat\": {}"), "car.duct.core.heat", "neither", NULL);
    refused(CORE_CASE(COEFFICIENT
                      ", \"heat\": {\"air_conductance\": \"1 kW/K\", \"at_face_velocity\": \"5 m/s\", "
                      "\"coolant_conductance\": \"3 kW/K\"}"),
            "car.duct.core.heat.at_coolant_flow", "nothing", NULL);
    refused(CORE_CASE(COEFFICIENT
                      ", \"heat\": {\"face_velocity\": [\"2 m/s\"], \"coolant_flow\": [\"1 kg/s\"], "
                      "\"rejection\": [[\"1 kW/K\", \"2 kW/K\"]]}"),
            "car.duct.core.heat.rejection", "1 rows of 2", "1 rows of 1");
    refused(
        CORE_CASE(COEFFICIENT
                  ", \"heat\": {\"face_velocity\": [\"2 m/s\", \"2 m/s\"], \"coolant_flow\": [\"1 kg/s\"], "
                  "\"rejection\": [[\"1 kW/K\"], [\"2 kW/K\"]]}"),
        "car.duct.core.heat.face_velocity[1]", NULL, "rises");
}

static void fans_that_will_not_do(void **state)
{
    (void)state;
    set_refused(FAN_SET("\"diameter\": \"300 mm\", \"hub\": \"300 mm\""), "duct.fan.hub", NULL,
                "below diameter");
    set_refused(FAN_SET("\"switch\": {\"on\": \"90 degC\", \"off\": \"90 degC\"}"), "duct.fan.switch.off",
                NULL, "below on");
    set_refused(FAN_SET("\"basis\": \"static\""), "duct.fan.diameter", "nothing", NULL);
    set_refused(FAN_SET("\"before\": \"engine\""), "duct.fan.before", "engine", "core");
    set_refused("duct.fan={\"diameter\": \"300 mm\"}", "duct.fan.curve", "nothing", "table");
    set_refused("duct.fan={\"curve\": {\"shutoff\": \"1 Pa\"}}", "duct.fan.curve.free_flow", "nothing",
                "volume flow");
    set_refused("duct.fan={\"curve\": [[\"0 m3/s\", \"9 Pa\"], [\"0 m3/s\", \"8 Pa\"]]}",
                "duct.fan.curve[1][0]", NULL, "rising");
    set_refused("duct.fan={\"curve\": [[\"0 m3/s\", \"9 Pa\"], [\"1 m3/s\", \"9 Pa\"]]}", "duct.fan.curve",
                NULL, "falling");
    set_refused("duct.fan={\"curve\": [[\"1 m3/s\", \"9 Pa\"]]}", "duct.fan.curve", "one pair", NULL);
}

static void circuits_that_will_not_do(void **state)
{
    (void)state;
    set_refused("thermostat={\"opens\": \"90 degC\", \"full\": \"90 degC\"}", "thermostat.opens", NULL,
                "below full");
    set_refused("coolant={\"kind\": \"propylene glycol\", \"glycol\": \"55 %\"}", "coolant.glycol", "55 %",
                "50 %");
    set_refused("coolant={\"kind\": \"water\", \"glycol\": \"30 %\"}", "coolant.glycol", "30 %",
                "the coolant is water");
    set_refused("coolant.glycol=70 %", "coolant.glycol", "70 %", "60 %");
    set_refused("tank={\"volume\": \"1 l\", \"air_space\": \"1 l\"}", "tank.air_space", NULL, "below volume");
    set_refused("pump={\"curve\": {\"shutoff\": \"1 bar\", \"free_flow\": \"100 l/min\"}}", "pump.speed",
                "nothing", "rotation");
    set_refused("engine.heat={\"law\": \"rated\"}", "engine.heat.fraction", "nothing", NULL);
    set_refused("engine.heat={\"law\": \"table\"}", "engine.heat.table", "nothing", NULL);
    set_refused("engine.heat={\"law\": \"table\", \"table\": [[\"1000 rpm\", \"1 kW\", \"1 kW\"], [\"1000 "
                "rpm\", \"2 kW\", \"1 kW\"], "
                "[\"2000 rpm\", \"1 kW\", \"1 kW\"]]}",
                "engine.heat.table", "no full grid", NULL);
    set_refused("engine.heat={\"law\": \"table\", \"table\": [[\"1000 rpm\", \"1 kW\", \"1 kW\"], [\"1000 "
                "rpm\", \"1 kW\", \"2 kW\"], "
                "[\"2000 rpm\", \"1 kW\", \"1 kW\"], [\"2000 rpm\", \"1 kW\", \"2 kW\"]]}",
                "engine.heat.table", "no full grid", NULL);
    set_refused("pump.curve=[[\"0 l/min\", \"4 kPa\"], [\"9 l/min\", \"5 kPa\"], [\"10 l/min\", \"4 kPa\"]]",
                "pump.curve[1][1]", "5 kPa", "never rises");
    set_refused("electrics=none", "electrics", "none", "an object");
    set_refused("engine.idle_speed=1 Hz", "engine.idle_speed", "1 Hz", "100 rpm");
    set_refused(
        "engine={\"displacement\": \"2 l\", \"rated_power\": \"90 kW\", \"rated_speed\": \"600 rpm\", "
        "\"heat\": {\"fraction\": 0.6}}",
        "engine.rated_speed", "600 rpm", "rated_speed above idle_speed, which is 850 rpm");
    set_refused("engine.friction=[\"1 bar\", \"0 bar\"]", "engine.friction", "a row of 2", "a row of 3");
    set_refused("body={\"frontal_area\": \"2 m2\", \"wheel_radius\": \"30 cm\", \"gears\": [3, 4]}",
                "body.gears[1]", "4", "falling");
    set_refused("body.gears=[4, 3]", NULL, "nothing", "a length");
    set_refused("engine.displacement=3 ml", NULL, "by the default", NULL);
    struct result r = must_set(DRIVE_CASE, SP_FOR_DRIVE, (char *const[]){(char[]){"coolant.kind=water"}}, 1);
    check_close(r.design->coolant.share, 0.0, 0.0, 0.0);
    drop(&r);
}

static void steps_that_will_not_do(void **state)
{
    (void)state;
    set_refused("drive[0].soak=3 s", "drive[0]", "more than one kind", NULL);
    set_refused("drive[0]={\"repeat\": 3}", "drive[0]", "no kind", NULL);
    set_refused("drive[0]={}", "drive[0]", "no kind", NULL);
    set_refused("drive[0]=3", "drive[0]", "3", "an object");
    set_refused("drive=[]", "drive", "an empty list", NULL);
    set_refused("drive={}", "drive", "an object", "a list");
    set_refused("drive[0].speed=3 km/h", "drive[0].speed", NULL, "hold");
    set_refused("drive[0].columns={}", "drive[0].columns", NULL, "trace");
    set_refused("drive[2]={\"hold\": \"3 s\"}", "drive[2].speed", "nothing", NULL);
    set_refused("drive[0].idle=0 s", "drive[0].idle", "0 s", "above 0 s");
    set_refused("drive[0].idle=5", "drive[0].idle", "5", "time");
    set_refused("drive[1].trace=\"\"", "drive[1].trace", "\"\"", NULL);
    set_refused("drive[1].layout={\"delimiter\": \",\", \"decimal\": \"comma\"}", "drive[1].layout", NULL,
                NULL);
    set_refused("drive[1].layout.delimiter=pipe", "drive[1].layout.delimiter", "pipe", "semicolon");
    set_refused("drive[1].layout.skip_lines=1001", "drive[1].layout.skip_lines", "1001", "0 to 1000");
    set_refused("drive[1].layout.repair=yes", "drive[1].layout.repair", "yes", "true or false");
    set_refused("drive[1].columns={\"sped\": \"v\"}", "drive[1].columns.sped", "an unknown key", NULL);
    set_refused("drive[1].columns={\"speed\": {\"name\": \"v\", \"unit\": \"kW\"}}",
                "drive[1].columns.speed.unit", "kW", "speed");
    set_refused("drive[1].columns={\"speed\": {\"unit\": \"km/h\"}}", "drive[1].columns.speed", "no name",
                NULL);
    set_refused("limits={}", "limits", "no limit", "coolant, gauge, metal, boil_margin");
    struct result r = parse_set(DRIVE_CASE, SP_FOR_DRIVE,
                                (char *const[]){(char[]){"limits={}"}, (char[]){"oil={}"}, (char[]){"gearbox={}"}}, 3);
    assert_true(has(&r.complaints, NULL, 0, "limits", "no limit", "boil_margin, oil, gearbox"));
    drop(&r);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(bad_settings),           cmocka_unit_test(what_is_missing),
        cmocka_unit_test(what_does_not_belong),   cmocka_unit_test(cores_that_will_not_do),
        cmocka_unit_test(fans_that_will_not_do),  cmocka_unit_test(circuits_that_will_not_do),
        cmocka_unit_test(steps_that_will_not_do), cmocka_unit_test(cars_for_cases),
        cmocka_unit_test(orders),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
