/* Real logs and published cycles through the trace reader. They lie outside the tree: in the folder that
 * SWIRLPOT_DATA names or in ../shared/data; without it all is skipped.
 *
 * kit: M. Weber, "Automotive OBD-II Dataset", KIT 2023, DOI 10.35097/1130. carobd: repository
 * eron93br/carOBD. accessport: sample in repository stevendaniluk/MotecLogGenerator. Each *_1hz.csv was made
 * from the raw log by another program (last value held at each whole second, or means), so the two readings
 * check each other. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "swirlpot/trace.h"

#include <dirent.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static struct sp_units *units;

static const char *data_folder(void)
{
    const char *named = getenv("SWIRLPOT_DATA"), *beside = SP_SOURCE_DIR "/../shared/data";
    const char *folder = named ? named : beside;
    return access(folder, R_OK) == 0 ? folder : NULL;
}

static struct sp_trace read_log(const char *name, const struct sp_trace_format *format)
{
    char path[1024];
    struct sp_trace t;
    struct sp_complaints c = {0};
    snprintf(path, sizeof path, "%s/%s", data_folder(), name);
    enum sp_status status = sp_trace_read(units, path, NULL, format, &t, &c);
    sp_complaints_print(&c, false, stderr);
    sp_complaints_free(&c);
    assert_int_equal(status, SP_OK);
    return t;
}

static void map(struct sp_trace_format *f, enum sp_column c, const char *heading, const char *unit)
{
    f->column[c].heading = heading;
    f->column[c].unit = unit;
}

static double distance(const struct sp_trace *t)
{
    const double *s = t->column[SP_COL_TIME], *v = t->column[SP_COL_SPEED];
    double sum = 0;
    for (size_t i = 1; i < t->rows; i++)
        sum += 0.5 * (v[i] + v[i - 1]) * (s[i] - s[i - 1]);
    return sum;
}

static double highest(const struct sp_trace *t, enum sp_column c)
{
    double most = -1e300;
    for (size_t i = 0; i < t->rows; i++)
        most = fmax(most, t->column[c][i]);
    return most;
}

static double duration(const struct sp_trace *t)
{
    return t->column[SP_COL_TIME][t->rows - 1];
}

static struct sp_trace_format cycle_format(void)
{
    struct sp_trace_format f = {0};
    map(&f, SP_COL_TIME, "time_s", "s");
    map(&f, SP_COL_SPEED, "speed_kmh", "km/h");
    return f;
}

static struct sp_trace_format resampled_format(const char *name)
{
    struct sp_trace_format f = cycle_format();
    if (strncmp(name, "cycle", 5) == 0) return f;
    map(&f, SP_COL_COOLANT, "coolant_C", "degC");
    map(&f, SP_COL_ENGINE_SPEED, "engine_rpm", "rpm");
    map(&f, SP_COL_THROTTLE, "throttle_pct", "%");
    if (strncmp(name, "kit", 3) != 0) return f;
    map(&f, SP_COL_AIR_FLOW, "maf_gps", "g/s");
    map(&f, SP_COL_AMBIENT, "ambient_C", "degC");
    return f;
}

/* Every resampled log reads without repair, at one row a second, with no row lost. */
static void all_resampled(void **state)
{
    (void)state;
    if (!data_folder()) skip();
    DIR *d = opendir(data_folder());
    assert_non_null(d);
    size_t files = 0;
    for (struct dirent *e; (e = readdir(d));) {
        if (!strstr(e->d_name, "_1hz.csv")) continue;
        struct sp_trace_format f = resampled_format(e->d_name);
        struct sp_trace t = read_log(e->d_name, &f);
        for (size_t i = 0; i < t.rows; i++)
            check_close(t.column[SP_COL_TIME][i], (double)i, 0, 1e-9);
        assert_int_equal(t.rows, t.repairs.rows_read);
        if (t.column[SP_COL_COOLANT]) check_within(highest(&t, SP_COL_COOLANT), 273.15 + 60, 273.15 + 115);
        sp_trace_free(&t);
        files++;
    }
    closedir(d);
    check_within((double)files, 20, 1000);
}

/* Totals: WLTC 3b 1800 s, 23.266 km, 131.3 km/h (UN GTR 15); UDDS 1369 s, 11.99 km, 91.2 km/h and NEDC 1180
 * s, 11.0 km, 120 km/h, as published. WLTC 3a 23.194 km, class 2 22.649 km and 123.1 km/h, FTP-75 17.77 km
 * (11.04 miles) in 1369 + 600 + 505 s: from memory. */
static void published_cycles(void **state)
{
    (void)state;
    if (!data_folder()) skip();
    static const struct {
        const char *name;
        double s, km, kmh, km_off;
    } at[] = {{"cycle_wltc_class3b_1hz.csv", 1800, 23.266, 131.3, 0.0002},
              {"cycle_udds_1hz.csv", 1369, 11.99, 91.2, 0.001},
              {"cycle_nedc_1hz.csv", 1180, 11.0, 120, 0.005},
              {"cycle_wltc_class3a_1hz.csv", 1800, 23.194, 131.3, 0.001},
              {"cycle_wltc_class2_1hz.csv", 1800, 22.649, 123.1, 0.001},
              {"cycle_ftp75_from_udds_1hz.csv", 2474, 17.77, 91.2, 0.003}};
    for (size_t i = 0; i < sizeof at / sizeof *at; i++) {
        struct sp_trace_format f = cycle_format();
        struct sp_trace t = read_log(at[i].name, &f);
        check_close(duration(&t), at[i].s, 0, 1);
        check_close(distance(&t) / 1e3, at[i].km, at[i].km_off, 0);
        check_close(highest(&t, SP_COL_SPEED) * 3.6, at[i].kmh, 0.001, 0);
        sp_trace_free(&t);
    }
}

/* Two readings of one drive: the raw log and what somebody else made of it. */
static void check_same_drive(struct sp_trace *raw, const char *resampled, double coolant_off)
{
    struct sp_trace_format f = resampled_format(resampled);
    struct sp_trace t = read_log(resampled, &f);
    print_message(
        "%s: raw %zu rows, %.1f s, %.0f m, %.2f K; resampled %.0f s, %.0f m, %.2f K; held %zu, doubles %zu\n",
        resampled, raw->rows, duration(raw), distance(raw), highest(raw, SP_COL_COOLANT), duration(&t),
        distance(&t), highest(&t, SP_COL_COOLANT), raw->repairs.cells_held, raw->repairs.doubles_dropped);
    check_close(duration(raw), duration(&t), 0, 2);
    check_close(distance(raw), distance(&t), 0.01, 0);
    check_close(highest(raw, SP_COL_COOLANT), highest(&t, SP_COL_COOLANT), 0, coolant_off);
    check_close(highest(raw, SP_COL_ENGINE_SPEED), highest(&t, SP_COL_ENGINE_SPEED), 0.06,
                0); /* a mean falls short */
    check_close(highest(raw, SP_COL_SPEED), highest(&t, SP_COL_SPEED), 0.03, 0);
    sp_trace_free(&t);
    sp_trace_free(raw);
}

/* A clock with milliseconds, a staircase of blanks at the beginning; one of the two files has its headings
 * encoded twice, and both are asked for by the same names. Units stand in brackets but for the speed of
 * the engine. */
static void raw_kit(void **state)
{
    (void)state;
    if (!data_folder()) skip();
    struct sp_trace_format f = {.clock = true, .blank = SP_BLANK_HOLD};
    map(&f, SP_COL_TIME, "Time", NULL);
    map(&f, SP_COL_COOLANT,
        "Engine Coolant Temperature [\xC2\xB0"
        "C]",
        "degC");
    map(&f, SP_COL_ENGINE_SPEED, "Engine RPM [RPM]", "rpm");
    map(&f, SP_COL_SPEED, "Vehicle Speed Sensor", NULL);
    map(&f, SP_COL_AIR_FLOW, "Air Flow Rate from Mass Flow Sensor [g/s]", NULL);
    map(&f, SP_COL_THROTTLE, "Absolute Throttle Position [%]", NULL);
    map(&f, SP_COL_AMBIENT,
        "Ambient Air Temperature [\xC2\xB0"
        "C]",
        "degC");
    struct sp_trace t = read_log("raw/2017-08-07_Seat_Leon_KA_RT_Frei.csv", &f);
    /* the sixth row's first air flow is 0.91 g/s; the rows before take it over, counted */
    check_close(t.column[SP_COL_AIR_FLOW][0], 0.91e-3, 1e-12, 0);
    check_close(t.column[SP_COL_TIME][1], 0.069, 0, 1e-9);
    assert_true(t.repairs.cells_held >= 6 + 3 + 4 + 8);
    check_same_drive(&t, "kit_2017-08-07_KA_RT_Frei_1hz.csv", 0.01);
    t = read_log("raw/2018-03-01_Seat_Leon_RT_S_Normal.csv", &f);
    check_same_drive(&t, "kit_2018-03-01_RT_S_Normal_1hz.csv", 0.01);
}

/* Rows that end in a comma, names with " ()", each sample about twice, a counter of whole seconds. */
static void raw_carobd(void **state)
{
    (void)state;
    if (!data_folder()) skip();
    struct sp_trace_format f = {.whole_seconds = true, .drop_doubles = true};
    map(&f, SP_COL_TIME, "ENGINE_RUN_TINE", "s");
    map(&f, SP_COL_SPEED, "VEHICLE_SPEED ()", "km/h");
    map(&f, SP_COL_ENGINE_SPEED, "ENGINE_RPM ()", "rpm");
    map(&f, SP_COL_THROTTLE, "THROTTLE ()", "%");
    map(&f, SP_COL_COOLANT, "COOLANT_TEMPERATURE ()", "degC");
    struct sp_trace t = read_log("raw/carobd_live23.csv", &f);
    check_close(t.column[SP_COL_COOLANT][0], 273.15 + 31, 0, 1e-9); /* not shifted by a column */
    check_same_drive(&t, "carobd_live23_1hz.csv", 0.01);
    t = read_log("raw/carobd_live31.csv", &f);
    check_same_drive(&t, "carobd_live31_1hz.csv", 0.01);
}

/* Units in parentheses; the last heading is a note of the logger's. */
static void raw_accessport(void **state)
{
    (void)state;
    if (!data_folder()) skip();
    struct sp_trace_format f = {0};
    map(&f, SP_COL_TIME, "Time (sec)", "s");
    map(&f, SP_COL_SPEED, "Vehicle Speed", NULL);
    map(&f, SP_COL_ENGINE_SPEED, "RPM (RPM)", "rpm");
    map(&f, SP_COL_THROTTLE, "Throttle Pos (%)", NULL);
    map(&f, SP_COL_COOLANT, "Coolant Temp (C)", "degC");
    map(&f, SP_COL_GEAR, "Gear Position (Gear)", "1");
    struct sp_trace t = read_log("raw/accessport_sample.csv", &f);
    check_same_drive(&t, "sti_accessport_1hz.csv", 0.01);
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
        cmocka_unit_test(all_resampled), cmocka_unit_test(published_cycles), cmocka_unit_test(raw_kit),
        cmocka_unit_test(raw_carobd),    cmocka_unit_test(raw_accessport),
    };
    return cmocka_run_group_tests(tests, open_units, close_units);
}
