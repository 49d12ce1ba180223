/* Engines, oils and charge air that will not do, those that raise doubts, and their defaults.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case_text.h"

#include "paper/case.h"

/* A motor and its inverter: no displacement, no rated power, an electric pump. */
#define PUMP                                                                                                 \
    "\"pump\": {\"drive\": \"electric\", \"curve\": {\"shutoff\": \"30 kPa\", \"free_flow\": \"30 "          \
    "l/min\"}}, "
#define SIZES                                                                                                \
    "\"metal_capacity\": \"20 kJ/K\", \"coolant_volume\": \"1.5 l\", \"conductance\": \"600 W/K\", "         \
    "\"conductance_flow\": \"12 l/min\""
#define ELECTRIC_CAR(heat, sizes, pump)                                                                      \
    "{" AIR ", \"car\": {\"body\": {\"frontal_area\": \"2 m2\"}, \"engine\": {\"heat\": {" heat "}, " sizes  \
    "}, " pump                                                                                               \
    DUCT_OF(FINS) "}"
#define GIVEN    "\"law\": \"given\", \"given\": \"1 kW\", \"loss\": 0.08"
#define NO_TRACE ", \"drive\": [{\"idle\": \"5 min\"}], \"limits\": {\"coolant\": \"65 degC\"}}"

struct opened {
    struct sp_complaints complaints, cautions;
    struct sp_engine engine;
    struct sp_oil oil, gearbox;
    struct sp_charge charge;
    struct sp_electrics electrics;
};

/* Reads the case with settings and looks at its engine; what is said twice counts once. */
static struct opened look(const char *text, const char *first, const char *second, const char *third)
{
    struct opened o = {.complaints = {0}};
    struct sp_reader r = {.units = units,
                          .name = "case",
                          .purpose = SP_FOR_DRIVE,
                          .complaints = &o.complaints,
                          .cautions = &o.cautions};
    char *set[] = {(char *)(size_t)first, (char *)(size_t)second, (char *)(size_t)third};
    sp_case_open(&r, text, strlen(text), set, third ? 3 : second ? 2 : first ? 1 : 0);
    if (r.design) {
        sp_case_check_engine(&r);
        o.engine = r.design->engine;
        o.oil = r.design->oil;
        o.gearbox = r.design->gearbox;
        o.charge = r.design->charge;
        o.electrics = r.design->electrics;
    }
    sp_case_close(&r);
    return o;
}

static void forget(struct opened *o)
{
    sp_complaints_free(&o->complaints);
    sp_complaints_free(&o->cautions);
}

/* At that path; of what was set on the command line the path goes without `car.`. */
static bool said(const struct sp_complaints *c, const char *path)
{
    for (size_t i = 0; i < c->count; ++i)
        if (!strcmp(c->list[i].path, path) || !strcmp(c->list[i].path, path + strlen("car."))) return true;
    return false;
}

static void refused(const char *text, const char *first, const char *second, const char *third,
                    const char *path)
{
    struct opened o = look(text, first, second, third);
    if (!said(&o.complaints, path)) {
        sp_complaints_print(&o.complaints, false, stderr);
        fail_msg("%s: want a complaint at %s", first ? first : "as it stands", path);
    }
    forget(&o);
}

static struct opened accepted(const char *text, const char *first, const char *second, const char *third)
{
    struct opened o = look(text, first, second, third);
    if (o.complaints.count) {
        sp_complaints_print(&o.complaints, false, stderr);
        fail_msg("%s is refused", first ? first : "as it stands");
    }
    return o;
}

static void doubted(const char *first, const char *second, const char *third, const char *path)
{
    struct opened o = accepted(DRIVE_CASE, first, second, third);
    if (!said(&o.cautions, path)) fail_msg("%s: want a caution at %s", first, path);
    forget(&o);
}

/* ---- a heat that is given -------------------------------------------------------------------------- */

static void given_needs_no_engine(void **state)
{
    (void)state;
    struct opened o = accepted(ELECTRIC_CAR(GIVEN, SIZES, PUMP) REST, NULL, NULL, NULL);
    assert_int_equal(o.engine.heat_law, SP_HEAT_GIVEN);
    check_close(o.engine.heat_given, 1e3, 0.0, 0.0);
    check_close(o.engine.heat_loss, 0.08, 0.0, 0.0);
    assert_true(isnan(o.engine.displacement) && isnan(o.engine.rated_power));
    forget(&o);
    /* with a trace the heat may come in a column */
    o = accepted(ELECTRIC_CAR("\"law\": \"given\"", SIZES, PUMP) REST, NULL, NULL, NULL);
    forget(&o);
}

static void given_faults(void **state)
{
    (void)state;
    const char *const plain = ELECTRIC_CAR(GIVEN, SIZES, PUMP) REST;
    refused(ELECTRIC_CAR("\"law\": \"given\"", SIZES, PUMP) NO_TRACE, NULL, NULL, NULL,
            "car.engine.heat.given");
    refused(plain, "pump.drive=belt", "pump.speed=6000 rpm", NULL, "car.pump.drive");
    refused(plain, "charge={\"pressure_ratio\": 2}", NULL, NULL, "car.charge");
    refused(ELECTRIC_CAR(GIVEN, "\"metal_capacity\": \"20 kJ/K\"", PUMP) REST, NULL, NULL, NULL,
            "car.engine.conductance");
    refused(ELECTRIC_CAR(GIVEN, "\"conductance\": \"1 kW/K\"", PUMP) REST, NULL, NULL, NULL,
            "car.engine.metal_capacity");
    /* an engine has to have its size */
    refused(ELECTRIC_CAR("\"fraction\": 0.5", SIZES, PUMP) REST, NULL, NULL, NULL, "car.engine.displacement");
    refused(ELECTRIC_CAR("\"law\": 3", SIZES, PUMP) REST, NULL, NULL, NULL, "car.engine.rated_power");
}

/* ---- faults and doubts of an engine ---------------------------------------------------------------- */

static void faults(void **state)
{
    (void)state;
    refused(DRIVE_CASE, "engine.bore=86 mm", "engine.stroke=100 mm", "engine.overrun.formula=petrol",
            "car.engine.cylinders");
    refused(DRIVE_CASE, "oil={\"opens\": \"95 degC\", \"full\": \"90 degC\"}", NULL, NULL, "car.oil.full");
    refused(DRIVE_CASE, "gearbox={\"full\": \"90 degC\"}", NULL, NULL, "car.gearbox.opens");
    refused(DRIVE_CASE, "charge={\"efficiency\": 0.7}", NULL, NULL, "car.charge.pressure_ratio");
    refused(DRIVE_CASE, "engine.heat.law=correlations", NULL, NULL, "car.engine.heat.law");
    struct opened o =
        accepted(DRIVE_CASE, "engine.bore=86 mm", "engine.stroke=100 mm", NULL); /* nothing uses them */
    forget(&o);
    o = accepted(DRIVE_CASE, "engine.bore=86 mm", "engine.stroke=86 mm", "engine.overrun.formula=petrol");
    forget(&o);
}

static void doubts(void **state)
{
    (void)state;
    doubted("engine.heat.law=correlation", NULL, NULL, "car.engine.heat.law");
    doubted("engine.heat.law=correlation", NULL, NULL, "car.engine.heat.fraction");
    doubted("engine.heat.law=correlation", "engine.heat.diesel=true", NULL, "car.engine.heat.air_fuel_ratio");
    doubted("engine.heat.given=1 kW", NULL, NULL, "car.engine.heat.given");
    doubted("engine.heat.loss=0.1", NULL, NULL, "car.engine.heat.loss");
    doubted("engine.heat.fraction=1.9", NULL, NULL, "car.engine.heat.fraction");
    doubted("engine.overrun.a=0.4 bar", NULL, NULL, "car.engine.overrun.a");
    doubted("engine.overrun.oil=20 degC", NULL, NULL, "car.engine.overrun.oil");
    doubted("engine.overrun.formula=diesel", "engine.overrun_friction=[\"1 bar\", \"0.1 bar\", \"0.1 bar\"]",
            NULL, "car.engine.overrun_friction");
    struct opened o = accepted(DRIVE_CASE, NULL, NULL, NULL);
    assert_false(said(&o.cautions, "car.engine.heat.law") || said(&o.cautions, "car.engine.heat.fraction"));
    forget(&o);
}

/* ---- defaults -------------------------------------------------------------------------------------- */

/* Two litres in four square cylinders: (4 x 0.5e-3/pi)^(1/3) = 86.025 mm; at 81 mm bore 97.03 mm of stroke.
 */
static void sizes(void **state)
{
    (void)state;
    struct opened o = accepted(DRIVE_CASE, NULL, NULL, NULL);
    check_close(o.engine.bore, 86.025e-3, 1e-5, 0.0);
    check_close(o.engine.stroke, 86.025e-3, 1e-5, 0.0);
    check_close(o.engine.gas_temperature, 840.0, 0.0, 0.0);
    check_close(o.engine.overrun_share, 0.40, 0.0, 0.0);
    check_close(o.engine.energy_cap, 0.75, 0.0, 0.0);
    assert_false(o.oil.fitted || o.gearbox.fitted || o.charge.fitted);
    forget(&o);
    o = accepted(DRIVE_CASE, "engine.bore=81 mm", "engine.overrun.formula=petrol", NULL);
    check_close(o.engine.stroke, 97.03e-3, 1e-4, 0.0);
    check_close(o.engine.overrun_share, 0.50, 0.0, 0.0);
    forget(&o);
    /* phi 14.7/12.6 = 1.1667: 845 - 900 x 0.1167^2 = 832.75 K */
    o = accepted(DRIVE_CASE, "engine.heat.law=correlation", "engine.heat.air_fuel_ratio=12.6", NULL);
    check_close(o.engine.gas_temperature, 832.75, 1e-9, 0.0);
    forget(&o);
    o = accepted(DRIVE_CASE, "engine.heat.law=correlation", "engine.gas_temperature=none", NULL);
    assert_true(isnan(o.engine.gas_temperature));
    forget(&o);
}

/* Barnes-Moss at 7000/min is 0.97 + 1.05 + 2.45 = 4.47 bar, 52.15 kW of 2 l; 0.12 of it is 6.258 kW or
 * 0.03294 of 190 kW, which leaves 0.05706 of the 0.09. */
static void oils(void **state)
{
    (void)state;
    struct opened o = accepted(DRIVE_CASE, "oil={}", "gearbox={\"opens\": \"80 degC\"}", NULL);
    assert_true(o.oil.fitted && o.gearbox.fitted);
    check_close(o.oil.volume, 4.5e-3, 1e-12, 0.0);
    check_close(o.oil.heat_share, 0.05706, 2e-4, 0.0);
    check_close(o.oil.flow_most, 25e-3 / 60.0, 1e-12, 0.0);
    assert_true(isnan(o.oil.opens));
    check_close(o.gearbox.heat_share, 0.025, 0.0, 0.0);
    check_close(o.gearbox.friction_share, 0.0, 0.0, 0.0);
    check_close(o.gearbox.full, SP_ZERO_C + 90.0, 1e-12, 0.0);
    forget(&o);
    o = accepted(DRIVE_CASE, "oil={\"friction_share\": 0}", NULL, NULL);
    check_close(o.oil.heat_share, 0.09, 0.0, 0.0);
    forget(&o);
}

/* By the Willans line: friction 1.55 + 0.046 x 49 = 3.804 bar, 44.38 kW; fuel (190 + 44.38)/0.4 = 585.95 kW,
 * at 42.6 MJ/kg 13.755 g/s, with 14.7 of air 0.2022 kg/s. */
static void charge_and_battery(void **state)
{
    (void)state;
    struct opened o = accepted(DRIVE_CASE, "charge={\"pressure_ratio\": 1.8}", "electrics.battery=20 Ah",
                               "electrics.idle_load=120 W");
    assert_true(o.charge.fitted);
    check_close(o.charge.air_flow, 0.2022, 2e-4, 0.0);
    check_close(o.electrics.battery, 72e3, 1e-12, 0.0);
    check_close(o.electrics.idle_load, 120.0, 0.0, 0.0);
    forget(&o);
    refused(DRIVE_CASE, "electrics.battery=20 A", NULL, NULL, "car.electrics.battery");
}

static int open_units(void **state)
{
    (void)state;
    units = sp_units_open();
    return units ? 0 : -1;
}

static int close_units(void **state)
{
    (void)state;
    sp_units_close(units);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(given_needs_no_engine),
        cmocka_unit_test(given_faults),
        cmocka_unit_test(faults),
        cmocka_unit_test(doubts),
        cmocka_unit_test(sizes),
        cmocka_unit_test(oils),
        cmocka_unit_test(charge_and_battery),
    };
    return cmocka_run_group_tests(tests, open_units, close_units);
}
