/* Reading cases: values, defaults, overrides, files, showing, starting.
 * Expected numbers are exact conversions (definitions of the units) or worked out beside them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case_text.h"

#include <sys/stat.h>
#include <unistd.h>

static char folder[] = "/tmp/swirlpot-case-XXXXXX";

static int begin(void **state)
{
    (void)state;
    units = sp_units_open();
    return units && mkdtemp(folder) ? 0 : 1;
}

static int end(void **state)
{
    (void)state;
    sp_units_close(units);
    char command[100];
    snprintf(command, sizeof command, "rm -r %s", folder);
    return system(command) == 0 ? 0 : 1;
}

/* ---- values ---------------------------------------------------------------------------------------- */

static void duct_case_in_si(void **state)
{
    (void)state;
    struct result r = must(DUCT_CASE, SP_FOR_DUCT);
    const struct sp_design *d = r.design;
    check_close(d->air.ambient, 306.15, 1e-14, 0.0);
    check_close(d->air.altitude, 240.0, 1e-14, 0.0);
    check_close(d->air.humidity, 0.45, 1e-14, 0.0);
    /* US Standard Atmosphere 1976, H = 239.990939 m geopotential:
     * 101325 (1 - 0.0065 H/288.15)^(9.80665 0.0289644/(8.31432 0.0065)), worked out apart */
    check_close(d->air.pressure, 98474.97, 1e-7, 0.0);
    check_close(d->duct[0].inlet.area, 0.045, 1e-14, 0.0);
    check_close(d->duct[0].inlet.recovery, 1.0, 0.0, 0.0);
    check_close(d->duct[0].inlet.lip_loss, 1.0, 0.0, 0.0);
    check_close(d->duct[0].core[0].coefficient, 8.0, 0.0, 0.0);
    check_close(d->duct[0].core[0].free_area_ratio, 1.0, 0.0, 0.0);
    check_close(d->duct[0].exit[0].loss, 0.0, 0.0, 0.0);
    assert_int_equal(d->duct[0].core[0].drop_law, SP_DROP_COEFFICIENT);
    assert_int_equal(d->duct[0].core[0].heat_law, SP_CORE_NO_HEAT);
    assert_int_equal(d->duct[0].diffuser.kind, SP_DIFFUSER_GIVEN);
    assert_false(d->duct[0].fan[0].fitted);
    assert_string_equal(d->file, "dir/c.json");
    drop(&r);
}

static void drive_case_in_si(void **state)
{
    (void)state;
    struct result r = must(DRIVE_CASE, SP_FOR_DRIVE);
    const struct sp_design *d = r.design;
    assert_int_equal(d->steps, 4);
    assert_int_equal(d->step[0].kind, SP_STEP_IDLE);
    check_close(d->step[0].time, 300.0, 1e-14, 0.0);
    check_close(d->step[0].repeat, 1.0, 0.0, 0.0);
    assert_int_equal(d->step[1].kind, SP_STEP_TRACE);
    assert_string_equal(d->step[1].trace, "dir/a/b.csv");
    check_close(d->step[1].repeat, 3.0, 0.0, 0.0);
    check_close(d->step[1].format.longest_gap, 30.0, 0.0, 0.0);
    assert_int_equal(d->step[2].kind, SP_STEP_HOLD);
    check_close(d->step[2].speed, 60.0 / 3.6, 1e-14, 0.0);
    check_close(d->step[2].power, 12e3, 1e-14, 0.0);
    assert_true(isnan(d->step[2].engine_speed));
    assert_int_equal(d->step[3].kind, SP_STEP_SOAK);
    check_close(d->limits.coolant.stop, 383.15, 1e-14, 0.0);
    assert_true(isnan(d->limits.boil_margin) && isnan(d->limits.gauge.stop));
    check_close(d->start.coolant, 306.15, 1e-14, 0.0); /* as ambient */
    assert_true(isnan(d->start.metal));
    assert_false(d->thermostat.none);
    drop(&r);
}

/* Defaults by rule, worked out by hand for 2 l. */
static void defaults_by_rule(void **state)
{
    (void)state;
    struct result r = must(DRIVE_CASE, SP_FOR_DRIVE);
    const struct sp_design *d = r.design;
    check_close(d->engine.metal_capacity, 60e3, 1e-12, 0.0);
    check_close(d->engine.coolant_volume, 2.5e-3, 1e-12, 0.0);
    check_close(d->engine.conductance, 2500.0, 1e-12, 0.0);
    check_close(d->engine.conductance_flow, 120e-3 / 60.0, 1e-12, 0.0);
    check_close(d->thermostat.full - d->thermostat.opens, 12.0, 1e-12, 0.0);
    check_close(d->coolant.share, 0.5, 0.0, 0.0);
    check_close(d->duct[0].core[0].louvre_length, 6.8e-3, 1e-12, 0.0);
    /* 6.8544 l of core: 0.33 kg/l and 2.5 kg of tanks at 0.34/0.4 of the height, at 900 J/kgK */
    check_close(d->duct[0].core[0].metal_capacity, 900.0 * (0.33 * 6.8544 + 2.5 * 0.85), 1e-12, 0.0);
    check_close(d->duct[0].core[0].coolant_volume, 1e-3 * (0.13 * 6.8544 + 1.3 * 0.85), 1e-12, 0.0);
    /* parabola: most power at Q0/sqrt 3, 0.3849 dp0 Q0 */
    check_close(d->pump.power, 0.38490018 * 120e3 * 0.2 / 60.0 / 0.32, 1e-8, 0.0);
    check_close(d->tank.volume, 2.0 * d->tank.air_space, 1e-12, 0.0);
    assert_true(isnan(d->duct[0].core[0].free_area_ratio) && isnan(d->duct[0].core[0].drop.flow));
    assert_int_equal(d->duct[0].core[0].heat_law, SP_CORE_FINS);
    /* friction: 1.55 bar + 0.046 bar N^2, N in 1000 rev/min: at 6000 rpm 3.206 bar (practice: 3.2) */
    const double *p = d->engine.friction_pressure;
    check_close(p[0] + p[1] * 100.0 + p[2] * 1e4, 3.206e5, 1e-12, 0.0);
    /* Barnes-Moss at 3000 rpm: 1.870 bar (published form, engine-and-coolant check) */
    p = d->engine.overrun_pressure;
    check_close(p[0] + p[1] * 50.0 + p[2] * 2500.0, 1.870e5, 1e-12, 0.0);
    drop(&r);
}

static void lips_thermostat_fan(void **state)
{
    (void)state;
    struct result r = must_set(DUCT_CASE, SP_FOR_DUCT,
                               (char *const[]){(char[]){"duct.inlet.lip=folded"}, (char[]){"thermostat=none"},
                                               (char[]){"duct.fan={\"curve\": [[\"0 m3/s\", \"160 Pa\"], "
                                                        "[\"0.63 m3/s\", \"0 Pa\"]], \"before\": \"core\","
                                                        "\"diameter\": \"305 mm\"}"}},
                               3);
    check_close(r.design->duct[0].inlet.lip_loss, 0.3, 0.0, 0.0);
    assert_true(r.design->thermostat.none);
    assert_true(r.design->duct[0].fan[0].fitted && r.design->duct[0].fan[0].before_core);
    assert_int_equal(r.design->duct[0].fan[0].curve.pairs.rows, 2);
    check_close(r.design->duct[0].fan[0].curve.pairs.cell[2], 0.63, 1e-14, 0.0);
    assert_true(isnan(r.design->duct[0].fan[0].curve.shutoff));
    check_close(r.design->duct[0].fan[0].hub, 0.35 * 0.305, 1e-12, 0.0);
    drop(&r);
    r = must_set(
        DUCT_CASE, SP_FOR_DUCT,
        (char *const[]){(char[]){"duct.inlet={\"area\": \"1 m2\", \"lip\": \"folded\", \"lip_loss\": 0.7}"}},
        1);
    check_close(r.design->duct[0].inlet.lip_loss, 0.7, 0.0, 0.0); /* the number wins over the word */
    drop(&r);
}

static void core_laws(void **state)
{
    (void)state;
    struct result r =
        must("{" AIR ", \"car\": {" DUCT_OF("\"pressure_drop\": {\"linear\": \"60 Pa.s/m\", "
                                            "\"quadratic\": \"12 Pa.s2/m2\", \"at_density\": \"1.1 kg/m3\", "
                                            "\"at_temperature\": \"20 degC\"}") "}}",
             SP_FOR_DUCT);
    assert_int_equal(r.design->duct[0].core[0].drop_law, SP_DROP_LINEAR);
    check_close(r.design->duct[0].core[0].linear, 60.0, 0.0, 0.0);
    check_close(r.design->duct[0].core[0].at_density, 1.1, 0.0, 0.0);
    check_close(r.design->duct[0].core[0].at_temperature, 293.15, 1e-14, 0.0);
    drop(&r);
    r = must("{" AIR ", \"car\": {" DUCT_OF(
                 "\"pressure_drop\": {\"table\": [[\"2 m/s\", \"35 Pa\"], [\"4 m/s\", \"100 Pa\"]]}, "
                 "\"heat\": {\"face_velocity\": [\"2 m/s\", \"4 m/s\"], \"coolant_flow\": [\"60 l/min\", "
                 "\"1.5 kg/s\"], "
                 "\"rejection\": [[\"500 W/K\", \"60 kW/100K\"], [\"700 W/K\", \"900 W/K\"]]}") "}}",
             SP_FOR_DUCT);
    const struct sp_core *c = &r.design->duct[0].core[0];
    assert_int_equal(c->drop_law, SP_DROP_TABLE);
    assert_int_equal(c->heat_law, SP_CORE_MAKER);
    assert_true(isnan(c->at_temperature));
    check_close(c->drop_table.cell[3], 100.0, 0.0, 0.0);
    check_close(c->heat_flow.cell[0], 1.03095, 1e-12,
                0.0); /* a litre a second of 50/50 at 90 degC, ASHRAE's table */
    check_close(c->heat_per_kelvin.cell[1], 600.0, 1e-12, 0.0);
    drop(&r);
}

/* ---- overrides ------------------------------------------------------------------------------------- */

static void settings(void **state)
{
    (void)state;
    struct result r =
        must_set(DRIVE_CASE, SP_FOR_DRIVE,
                 (char *const[]){(char[]){"duct.exit.area=450 cm2"},
                                 (char[]){"car.duct.inlet.area=\"300 cm2\""}, (char[]){"drive[1].repeat=7"},
                                 (char[]){"limits.boil_margin=8 K"}, (char[]){"start.coolant=0 degC"},
                                 (char[]){"title=a=b"}, (char[]){"drive[1].layout.delimiter=;"}},
                 7);
    check_close(r.design->duct[0].exit[0].area, 0.045, 1e-14, 0.0);
    check_close(r.design->duct[0].inlet.area, 0.03, 1e-14, 0.0);
    check_close(r.design->step[1].repeat, 7.0, 0.0, 0.0);
    check_close(r.design->limits.boil_margin, 8.0, 0.0, 0.0);
    check_close(r.design->start.coolant, 273.15, 1e-14, 0.0);
    assert_string_equal(r.design->title, "a=b");
    assert_int_equal(r.design->step[1].format.delimiter, ';');
    drop(&r);
}

static void pressure_drops_altitude(void **state)
{
    (void)state;
    struct result r = must_set(DUCT_CASE, SP_FOR_DUCT, (char *const[]){(char[]){"air.pressure=80 kPa"}}, 1);
    check_close(r.design->air.pressure, 80e3, 1e-14, 0.0);
    assert_true(isnan(r.design->air.altitude));
    drop(&r);
    r = must_set(DUCT_CASE, SP_FOR_DUCT,
                 (char *const[]){(char[]){"air.pressure=80 kPa"}, (char[]){"air.altitude=0 m"}}, 2);
    check_close(r.design->air.pressure, 101325.0, 1e-9, 0.0);
    drop(&r);
}

/* ---- files ----------------------------------------------------------------------------------------- */

static const char *write_file(const char *name, const char *text)
{
    static char path[200];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    FILE *f = fopen(path, "wb");
    assert_non_null(f);
    fputs(text, f);
    fclose(f);
    return path;
}

static struct result read_file(const char *name, char *const *set, size_t sets)
{
    struct result r = {0};
    char path[200];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    r.design = sp_case_read(units, path, set, sets, SP_FOR_DUCT, &r.complaints, &r.cautions);
    return r;
}

static void cars_in_files(void **state)
{
    (void)state;
    char path[200];
    snprintf(path, sizeof path, "%s/sub", folder);
    assert_int_equal(mkdir(path, 0777), 0);
    write_file("sub/base.json", "{" DUCT_OF(COEFFICIENT) "}");
    write_file("sub/car.json", "{\"from\": \"base.json\", \"duct\": {\"exit\": {\"loss\": 1.7}}}");
    write_file("case.json", "{" AIR ", \"car\": \"sub/car.json\"}");
    struct result r = read_file("case.json", NULL, 0);
    assert_non_null(r.design);
    check_close(r.design->duct[0].exit[0].loss, 1.7, 0.0, 0.0);
    check_close(r.design->duct[0].exit[0].area, 0.06, 1e-14, 0.0);
    drop(&r);
    r = read_file("case.json", (char *const[]){(char[]){"duct.exit.area=1 m2"}}, 1);
    assert_non_null(r.design);
    check_close(r.design->duct[0].exit[0].area, 1.0, 1e-14, 0.0);
    drop(&r);
    write_file("over.json",
               "{" AIR
               ", \"car\": {\"from\": \"sub/car.json\", \"duct\": {\"exit\": {\"area\": \"2 m2\"}}}}");
    r = read_file("over.json", NULL, 0);
    assert_non_null(r.design);
    check_close(r.design->duct[0].exit[0].area, 2.0, 1e-14, 0.0);
    check_close(r.design->duct[0].exit[0].loss, 1.7, 0.0, 0.0);
    drop(&r);
    r = read_file("case.json", (char *const[]){(char[]){"car=sub/base.json"}}, 1);
    assert_non_null(r.design);
    check_close(r.design->duct[0].exit[0].loss, 0.0, 0.0, 0.0);
    drop(&r);
}

static void faults_in_cars(void **state)
{
    (void)state;
    char car[200], path[200];
    snprintf(car, sizeof car, "%s/bad.json", folder);
    snprintf(path, sizeof path, "%s/names.json", folder);
    write_file("bad.json", "{\n\"duct\": {\n\"inlet\": {\"aera\": \"1 m2\",\n\"area\": \"450 m\"}, " EXIT
                           ",\n" CORE_START COEFFICIENT "}}}");
    write_file("names.json", "{" AIR ",\n \"car\": \"bad.json\",\n \"limit\": {}}");
    struct result r = read_file("names.json", NULL, 0);
    assert_null(r.design);
    assert_int_equal(r.complaints.count, 3);
    assert_true(has(&r.complaints, car, 3, "duct.inlet.aera", "an unknown key", NULL));
    assert_true(has(&r.complaints, car, 4, "duct.inlet.area", "450 m", "an area"));
    assert_true(has(&r.complaints, path, 3, "limit", "an unknown key", NULL));
    for (size_t i = 0; i < 3; ++i)
        if (!strcmp(r.complaints.list[i].file, car)) assert_string_equal(r.complaints.list[i].named_by, path);
    drop(&r);
    write_file("bad.json", "{\n\"duct\": {\n");
    write_file("names.json", "{" AIR ",\n \"car\": \"bad.json\"}");
    r = read_file("names.json", NULL, 0);
    assert_int_equal(r.complaints.count, 1); /* a syntax fault stands alone */
    assert_string_equal(r.complaints.list[0].file, car);
    assert_string_equal(r.complaints.list[0].named_by, path);
    drop(&r);
    write_file("bad.json", "[]");
    r = read_file("names.json", NULL, 0);
    assert_int_equal(r.complaints.count, 1);
    assert_true(has(&r.complaints, car, 1, NULL, "an array", "an object"));
    drop(&r);
    write_file("names.json", "{" AIR ", \"car\": \"nowhere.json\"}");
    r = read_file("names.json", (char *const[]){(char[]){"duct.exit.area=1 m2"}}, 1);
    assert_int_equal(r.complaints.count, 1);
    assert_string_equal(r.complaints.list[0].named_by, path);
    drop(&r);
}

static void cars_that_name_each_other(void **state)
{
    (void)state;
    write_file("loop.json", "{\"from\": \"loop.json\"}");
    write_file("round.json", "{" AIR ", \"car\": \"loop.json\"}");
    struct result r = read_file("round.json", NULL, 0);
    assert_int_equal(r.complaints.count, 1);
    assert_true(has(&r.complaints, NULL, 0, "from", NULL, "no more than 8 cars"));
    drop(&r);
    r = read_file("absent.json", NULL, 0);
    assert_null(r.design);
    assert_int_equal(r.complaints.count, 1);
    drop(&r);
}

static void engines_as_told(void **state)
{
    (void)state;
    struct result r =
        must_set(DRIVE_CASE, SP_FOR_DRIVE,
                 (char *const[]){(char[]){"engine.friction=[\"1 bar\", \"0.1 bar\", \"0.02 bar\"]"},
                                 (char[]){"engine.gas_temperature=none"}},
                 2);
    const double *p = r.design->engine.friction_pressure;
    check_close(p[0] + p[1] * 50.0 + p[2] * 2500.0, 1.48e5, 1e-12, 0.0); /* at 3000 rpm: 1 + 0.3 + 0.18 bar */
    assert_true(isnan(r.design->engine.gas_temperature));
    drop(&r);
    r = must(DRIVE_CASE, SP_FOR_DRIVE);
    check_close(r.design->engine.gas_temperature, 840.0, 0.0, 0.0);
    drop(&r);
}

static void columns_are_kept(void **state)
{
    (void)state;
    struct result r =
        must_set(DRIVE_CASE, SP_FOR_DRIVE,
                 (char *const[]){(char[]){"drive[1].columns={\"speed\": {\"name\": \"Vehicle Speed\", "
                                          "\"unit\": \"km/h\"}, \"gear\": \"Gang\"}"},
                                 (char[]){"drive[1].layout={\"decimal\": \"comma\", \"delimiter\": \"tab\", "
                                          "\"blanks\": \"hold\", \"repair\": true, "
                                          "\"skip_lines\": 2, \"longest_gap\": \"2 min\"}"}},
                 2);
    const struct sp_trace_format *f = &r.design->step[1].format;
    assert_string_equal(f->column[SP_COL_SPEED].heading, "Vehicle Speed");
    assert_string_equal(f->column[SP_COL_SPEED].unit, "km/h");
    assert_string_equal(f->column[SP_COL_GEAR].heading, "Gang");
    assert_null(f->column[SP_COL_GEAR].unit);
    assert_null(f->column[SP_COL_TIME].heading);
    assert_int_equal(f->decimal, ',');
    assert_int_equal(f->delimiter, '\t');
    assert_int_equal(f->blank, SP_BLANK_HOLD);
    assert_true(f->repair && !f->clock);
    assert_int_equal(f->skip_lines, 2);
    check_close(f->longest_gap, 120.0, 0.0, 0.0);
    drop(&r);
}

static void heat_tables_are_sorted(void **state)
{
    (void)state;
    struct result r = must_set(
        DRIVE_CASE, SP_FOR_DRIVE,
        (char *const[]){(char[]){"engine.heat={\"law\": \"table\", \"table\": [[\"2000 rpm\", \"2 kW\", \"4 "
                                 "kW\"], [\"1000 rpm\", \"1 kW\", \"1 kW\"], "
                                 "[\"2000 rpm\", \"1 kW\", \"3 kW\"], [\"1000 rpm\", \"2 kW\", \"2 kW\"]]}"}},
        1);
    for (size_t i = 0; i < 4; ++i)
        check_close(r.design->engine.heat_table.cell[3 * i + 2], 1e3 * (double)(i + 1), 1e-12, 0.0);
    drop(&r);
}

/* ---- showing, starting, examples ------------------------------------------------------------------- */

static void shown(void **state)
{
    (void)state;
    struct sp_complaints c = {0};
    char *text = NULL;
    size_t size = 0;
    FILE *to = open_memstream(&text, &size);
    const char *path = write_file("shown.json", DRIVE_CASE);
    assert_int_equal(sp_case_show(units, path, (char *const[]){(char[]){"air.wind=3 m/s"}}, 1, to, &c),
                     SP_OK);
    fclose(to);
    assert_non_null(strstr(text, "45 % = 0.45 "));
    assert_non_null(strstr(text, "3 m/s = 3 m/s  (--set air.wind=3 m/s)"));
    assert_non_null(strstr(text, "85 degC = 358.15 K  (default, common practice)"));
    assert_non_null(strstr(text, "drive[2].power"));
    free(text);
    to = open_memstream(&text, &size);
    assert_int_equal(sp_case_show_json(units, path, (char *const[]){(char[]){"air.wind=3 km"}}, 1, to, &c),
                     SP_INPUT);
    fclose(to);
    assert_int_equal(size, 0);
    assert_int_equal(c.count, 1);
    free(text);
    sp_complaints_free(&c);
}

static struct sp_design *read_example(const char *path)
{
    struct sp_complaints c = {0}, cautions = {0};
    struct sp_design *d = sp_case_read(units, path, NULL, 0, SP_FOR_DRIVE, &c, &cautions);
    if (!d || cautions.count) {
        sp_complaints_print(&c, false, stderr);
        sp_complaints_print(&cautions, true, stderr);
        fail_msg("%s", path);
    }
    sp_complaints_free(&c);
    sp_complaints_free(&cautions);
    return d;
}

/* A started case reads without complaint or caution for cars of all sizes; nothing is overwritten. */
static void started(void **state)
{
    (void)state;
    const struct sp_starter s[] = {
        {230.0, 0.6e-3, 60e3}, {620.0, 2e-3, 190e3}, {1250.0, 3e-3, 350e3}, {1100.0, 1.4e-3, 70e3}};
    for (size_t i = 0; i < 4; ++i) {
        struct sp_complaints c = {0};
        char dir[150], path[200];
        snprintf(dir, sizeof dir, "%s/new%zu", folder, i);
        snprintf(path, sizeof path, "%s/case.json", dir);
        if (sp_case_new(&s[i], dir, &c) != SP_OK) {
            sp_complaints_print(&c, false, stderr);
            fail();
        }
        struct sp_design *d = read_example(path);
        check_close(d->body.mass, s[i].mass, 1e-6, 0.0);
        check_close(d->engine.rated_power, s[i].rated_power, 1e-6, 0.0);
        sp_design_free(d);
        assert_int_equal(sp_case_new(&s[i], dir, &c), SP_INPUT);
        assert_int_equal(c.count, 3);
        sp_complaints_free(&c);
    }
    struct sp_complaints c = {0};
    assert_int_equal(sp_case_new(&(struct sp_starter){NAN, -1.0, INFINITY}, folder, &c), SP_INPUT);
    assert_int_equal(c.count, 3);
    sp_complaints_free(&c);
    assert_int_equal(sp_case_new(&s[0], "/dev/null/x", &c), SP_INPUT);
    sp_complaints_free(&c);
}

static void examples_read(void **state)
{
    (void)state;
    struct sp_design *d = read_example(SP_SOURCE_DIR "/docs/examples/harrowmoor.json");
    assert_int_equal(d->steps, 3);
    assert_true(access(d->step[1].trace, R_OK) == 0);
    check_close(d->air.ambient, 306.15, 1e-14, 0.0);
    sp_design_free(d);
    d = read_example(SP_SOURCE_DIR "/docs/examples/nedc.json");
    assert_true(access(d->step[0].trace, R_OK) == 0);
    sp_design_free(d);
}

static void doubts(void **state)
{
    (void)state;
    struct result r =
        must_set(DRIVE_CASE, SP_FOR_DRIVE,
                 (char *const[]){(char[]){"duct.exit.area=40 cm2"}, (char[]){"thermostat.opens=112 degC"},
                                 (char[]){"engine.rated_power=1000 kW"}},
                 3);
    assert_int_equal(r.cautions.count, 3);
    assert_true(has(&r.cautions, NULL, 0, "duct.exit.area", "40 cm2", NULL));
    drop(&r);
    r = must(DRIVE_CASE, SP_FOR_DRIVE);
    assert_int_equal(r.cautions.count, 0);
    drop(&r);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(duct_case_in_si),
        cmocka_unit_test(drive_case_in_si),
        cmocka_unit_test(defaults_by_rule),
        cmocka_unit_test(lips_thermostat_fan),
        cmocka_unit_test(core_laws),
        cmocka_unit_test(settings),
        cmocka_unit_test(pressure_drops_altitude),
        cmocka_unit_test(cars_in_files),
        cmocka_unit_test(faults_in_cars),
        cmocka_unit_test(cars_that_name_each_other),
        cmocka_unit_test(engines_as_told),
        cmocka_unit_test(columns_are_kept),
        cmocka_unit_test(heat_tables_are_sorted),
        cmocka_unit_test(shown),
        cmocka_unit_test(started),
        cmocka_unit_test(examples_read),
        cmocka_unit_test(doubts),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
