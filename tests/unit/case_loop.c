/* Coolant loops that will not do, and those that will. SPDX-License-Identifier: GPL-3.0-or-later */
#include "case_text.h"

#include "paper/case.h"

struct opened {
    struct sp_complaints complaints, cautions;
};

/* Reads the case with settings and looks at its loop, once. */
static struct opened look(char *const *set, size_t sets)
{
    struct opened o = {.complaints = {0}};
    struct sp_reader r = {.units = units,
                          .name = "case",
                          .purpose = SP_FOR_DRIVE,
                          .complaints = &o.complaints,
                          .cautions = &o.cautions};
    if (sp_case_open(&r, DRIVE_CASE, sizeof DRIVE_CASE - 1, set, sets)) sp_case_check_loop(&r);
    sp_case_close(&r);
    return o;
}

static void forget(struct opened *o)
{
    sp_complaints_free(&o->complaints);
    sp_complaints_free(&o->cautions);
}

static void refused(const char *first, const char *second, const char *path)
{
    char *set[] = {(char *)(size_t)first, (char *)(size_t)second};
    struct opened o = look(set, second ? 2 : 1);
    if (o.complaints.count != 1 || strcmp(o.complaints.list[0].path, path)) {
        sp_complaints_print(&o.complaints, false, stderr);
        fail_msg("%s: want one complaint, at %s", first, path);
    }
    forget(&o);
}

static void accepted(const char *first, const char *second)
{
    char *set[] = {(char *)(size_t)first, (char *)(size_t)second};
    struct opened o = look(set, second ? 2 : 1);
    if (o.complaints.count) {
        sp_complaints_print(&o.complaints, false, stderr);
        fail_msg("%s is refused", first);
    }
    forget(&o);
}

static void faults(void **state)
{
    (void)state;
    refused("pump.control=pulsing", NULL, "pump.control");
    refused(
        "pump={\"drive\": \"electric\", \"curve\": {\"shutoff\": \"60 kPa\", \"free_flow\": \"100 l/min\"}, "
        "\"control\": \"temperature\"}",
        "pump.temperature={\"from\": \"96 degC\"}", "pump.temperature.from");
    refused("thermostat.restrictor=34 mm", NULL, "thermostat.restrictor");
    refused("thermostat.mapped.shift=10 K", NULL, "thermostat.mapped.power");
    refused("hoses.heater.conductance=60 W/K", NULL, "hoses.heater.flow");
    refused("tank.bleed_bore=2 mm", "tank.bleed=3 %", "tank.bleed_bore");
    refused("tank.bleed_bore=40 mm", NULL, "tank.bleed_bore");
    refused("pump.ratio=0", NULL, "pump.ratio"); /* a belt that is off is `failed` */
}

static void right_ones(void **state)
{
    (void)state;
    accepted(
        "pump={\"drive\": \"electric\", \"curve\": {\"shutoff\": \"60 kPa\", \"free_flow\": \"100 l/min\"}, "
        "\"control\": \"engine speed\"}",
        "pump.full_at=3000 rpm");
    accepted("thermostat.restrictor=18 mm", "thermostat.bypass_shut=2");
    accepted("thermostat.mapped.power=60 kW", "thermostat.side=inlet");
    accepted("hoses.heater.flow=8 l/min", "hoses.heater.off=true");
    accepted("tank.bleed_bore=2 mm", "pump.failed=true");
    accepted("pump.npsh=4 m", "pump.suction.drop=20 kPa");
}

static void too_much_lost(void **state)
{
    (void)state;
    char *little[] = {(char *)(size_t) "tank.lost=0.1 l"}, *much[] = {(char *)(size_t) "tank.lost=5 l"};
    struct opened a = look(little, 1), b = look(much, 1);
    size_t said = 0;
    for (size_t i = 0; i < b.cautions.count; ++i)
        said += !strcmp(b.cautions.list[i].path, "tank.lost");
    for (size_t i = 0; i < a.cautions.count; ++i)
        assert_string_not_equal(a.cautions.list[i].path, "tank.lost");
    assert_true(a.complaints.count == 0 && b.complaints.count == 0 && said > 0);
    forget(&a);
    forget(&b);
}

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

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(faults), cmocka_unit_test(right_ones),
                                       cmocka_unit_test(too_much_lost)};
    return cmocka_run_group_tests(tests, begin, end);
}
