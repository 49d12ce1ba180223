/* The drive cycles of the tree against the regulation's totals, a table published by others, and plain
 * mechanics worked out here from the numbers in drivecycles/README.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "swirlpot/trace.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static struct sp_units *units;

static struct sp_trace read_trace(const char *folder, const char *name, const struct sp_trace_format *format)
{
    static const struct sp_trace_format plain;
    char path[1024];
    struct sp_trace t;
    struct sp_complaints c = {0};
    snprintf(path, sizeof path, "%s/%s", folder, name);
    enum sp_status status = sp_trace_read(units, path, NULL, format ? format : &plain, &t, &c);
    sp_complaints_print(&c, false, stderr);
    sp_complaints_free(&c);
    assert_int_equal(status, SP_OK);
    return t;
}

static const char *own = SP_SOURCE_DIR "/drivecycles";

/* Where logs and cycles of others lie, NULL if they do not. */
static const char *data_folder(void)
{
    const char *named = getenv("SWIRLPOT_DATA"), *beside = SP_SOURCE_DIR "/../shared/data";
    const char *folder = named ? named : beside;
    return access(folder, R_OK) == 0 ? folder : NULL;
}

/* Trapezoid of speed over rows from..to. */
static double distance(const struct sp_trace *t, size_t from, size_t to)
{
    const double *s = t->column[SP_COL_TIME], *v = t->column[SP_COL_SPEED];
    double sum = 0;
    for (size_t i = from; i < to; i++)
        sum += 0.5 * (v[i] + v[i + 1]) * (s[i + 1] - s[i]);
    return sum;
}

static double highest(const struct sp_trace *t, enum sp_column c)
{
    double most = -1e300;
    for (size_t i = 0; i < t->rows; i++)
        most = fmax(most, t->column[c][i]);
    return most;
}

/* UN Regulation No. 83, type I test: urban cycle 195 s, 1.013 km, mean 19 km/h, at most 50; extra-urban 400
 * s, 6.955 km, mean 62.6 km/h, at most 120, greatest acceleration 0.833 m/s2, deceleration 1.389 m/s2; all
 * 1180 s, 11.007 km (totals from memory, the same as in any account of the cycle). */
static void nedc_totals(void **state)
{
    (void)state;
    struct sp_trace t = read_trace(own, "nedc.csv", NULL);
    const double *v = t.column[SP_COL_SPEED];
    assert_int_equal(t.rows, 1181);
    check_close(t.column[SP_COL_TIME][1180], 1180, 0, 1e-9);
    check_close(highest(&t, SP_COL_SPEED), 120 / 3.6, 1e-12, 0);
    for (size_t k = 0; k < 4; k++) {
        check_close(distance(&t, 195 * k, 195 * (k + 1)), 1013, 0.002, 0);
        check_close(v[195 * k + 150], 50 / 3.6, 1e-12, 0);
    }
    check_close(distance(&t, 780, 1180), 6955, 0.0005, 0);
    check_close(distance(&t, 780, 1180) / 400, 62.6 / 3.6, 0.001, 0);
    check_close(distance(&t, 0, 1180), 11007, 0.001, 0);
    double up = 0, down = 0;
    for (size_t i = 780; i < 1180; i++) {
        up = fmax(up, v[i + 1] - v[i]);
        down = fmax(down, v[i] - v[i + 1]);
    }
    check_close(up, 0.833, 0.005, 0);
    check_close(down, 1.389, 0.005, 0);
    sp_trace_free(&t);
}

/* Standing time, a total of its own: the operations at rest of the urban table last 11 + 21 + 21 + 7 s, those
 * of the extra-urban one 20 + 20 s. */
static void nedc_standing(void **state)
{
    (void)state;
    struct sp_trace t = read_trace(own, "nedc.csv", NULL);
    size_t still = 0;
    for (size_t i = 0; i < 1180; i++)
        still += t.column[SP_COL_SPEED][i] == 0 && t.column[SP_COL_SPEED][i + 1] == 0;
    assert_int_equal(still, 4 * 60 + 40);
    sp_trace_free(&t);
}

/* Row by row against a table made by others (JRCSTU/wltp), which gives the speed at the end of each second
 * and so runs one row ahead. Only the last figure may differ, by rounding. */
static void nedc_against_another_table(void **state)
{
    (void)state;
    if (!data_folder()) skip();
    struct sp_trace_format f = {0};
    f.column[SP_COL_TIME].heading = "time_s";
    f.column[SP_COL_TIME].unit = "s";
    f.column[SP_COL_SPEED].heading = "speed_kmh";
    f.column[SP_COL_SPEED].unit = "km/h";
    struct sp_trace t = read_trace(own, "nedc.csv", NULL),
                    other = read_trace(data_folder(), "cycle_nedc_1hz.csv", &f);
    assert_int_equal(other.rows, 1181);
    for (size_t i = 1; i < 1181; i++)
        check_close(t.column[SP_COL_SPEED][i], other.column[SP_COL_SPEED][i - 1], 0, 0.0051 / 3.6);
    check_close(other.column[SP_COL_SPEED][1180], 0, 0, 1e-12);
    sp_trace_free(&t);
    sp_trace_free(&other);
}

static size_t row_of(const struct sp_trace *t, const char *mark)
{
    for (size_t i = 0; i < t->marks; i++)
        if (strcmp(t->mark[i].text, mark) == 0) return t->mark[i].row;
    print_error("no mark %s\n", mark);
    fail();
    return 0;
}

struct car {
    double mass, area, rolling, rated, limit;
};

/* Where the engine gives most of its power before, at and after a row, the force at the wheels is what
 * accelerates, climbs, rolls and pushes air: F v = 0.92 P. A row's power is a mean over a second, so at the
 * ends of a pull half a second of part throttle is counted in: the fewer the rows, the looser the check. */
static void check_balance(const struct sp_trace *t, const struct car *car, double off)
{
    const double *v = t->column[SP_COL_SPEED], *p = t->column[SP_COL_POWER], *z = t->column[SP_COL_ALTITUDE];
    double sum = 0, need = 0;
    size_t rows = 0;
    for (size_t i = 1; i + 1 < t->rows; i++) {
        if (fmin(p[i - 1], fmin(p[i], p[i + 1])) < 0.6 * car->rated) continue;
        double climb = z ? (z[i + 1] - z[i - 1]) / 2 * car->mass * 9.81 : 0;
        double faster = 1.05 * car->mass * (v[i + 1] * v[i + 1] - v[i - 1] * v[i - 1]) / 4;
        need +=
            faster + climb + 0.6 * car->area * v[i] * v[i] * v[i] + car->rolling * car->mass * 9.81 * v[i];
        sum += 0.92 * (0.25 * p[i - 1] + 0.5 * p[i] + 0.25 * p[i + 1]);
        rows++;
    }
    check_within((double)rows, 6, 1e9);
    check_close(need / sum, 1, off, 0);
}

static void harrowmoor_is_a_hill_climb(void **state)
{
    (void)state;
    struct sp_trace t = read_trace(own, "harrowmoor.csv", NULL);
    const struct car climber = {660, 0.90, 0.018, 190e3, 8900 / 60.0};
    size_t finish = row_of(&t, "Finish");
    double length = distance(&t, 0, finish),
           rise = t.column[SP_COL_ALTITUDE][finish] - t.column[SP_COL_ALTITUDE][0];
    check_close(t.column[SP_COL_SPEED][0], 0, 0, 1e-12);
    check_close(t.column[SP_COL_SPEED][t.rows - 1], 0, 0, 1e-12);
    check_within(t.column[SP_COL_TIME][finish], 65, 80);
    check_within(length, 2000, 2450);
    check_within(rise / length, 0.070, 0.080);
    check_within(highest(&t, SP_COL_POWER), 150e3, 190e3);
    check_within(highest(&t, SP_COL_ENGINE_SPEED), 100, 8900 / 60.0);
    assert_int_equal(t.marks, 16);        /* start, 14 corners, finish */
    for (size_t i = 1; i < t.rows; i++) { /* 1.35 g is all the tyres hold; up the hill nothing helps */
        double a = t.column[SP_COL_SPEED][i] - t.column[SP_COL_SPEED][i - 1];
        check_within(a, -1.35 * 9.81 - 4, 0.64 * 1.35 * 9.81);
    }
    check_balance(&t, &climber, 0.07);
    sp_trace_free(&t);
}

static void stonemere_is_three_laps(void **state)
{
    (void)state;
    struct sp_trace t = read_trace(own, "stonemere.csv", NULL);
    const struct car racer = {1250, 0.80, 0.016, 350e3, 7300 / 60.0};
    size_t second = row_of(&t, "Lap 2"), third = row_of(&t, "Lap 3");
    check_within((double)second, 90, 110);
    assert_in_range(third - second, second - 1, second + 1);
    assert_in_range(t.rows - 1, 3 * second - 3, 3 * second + 3);
    check_close(distance(&t, 0, second), distance(&t, second, third), 0.02, 0);
    check_within(highest(&t, SP_COL_POWER), 300e3, 350e3);
    check_within(highest(&t, SP_COL_ENGINE_SPEED), 90, 7300 / 60.0);
    check_balance(&t, &racer, 0.02);
    sp_trace_free(&t);
}

/* A lap to be driven over and over: it ends in the row it begins with, and is as long as one of the three. */
static void stonemere_lap_closes(void **state)
{
    (void)state;
    struct sp_trace t = read_trace(own, "stonemere-lap.csv", NULL);
    struct sp_trace three = read_trace(own, "stonemere.csv", NULL);
    const enum sp_column all[] = {SP_COL_SPEED, SP_COL_POWER, SP_COL_ENGINE_SPEED};
    size_t last = t.rows - 1;
    for (size_t i = 0; i < sizeof all / sizeof *all; i++)
        check_close(t.column[all[i]][last], t.column[all[i]][0], 0, 0);
    check_close(t.column[SP_COL_TIME][last], 104.6, 0, 0.05);
    check_close(distance(&t, 0, last), 4355, 0.002, 0);
    check_close(distance(&t, 0, last), distance(&three, 0, three.rows - 1) / 3.0, 0.01, 0);
    sp_trace_free(&t);
    sp_trace_free(&three);
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
        cmocka_unit_test(nedc_totals),
        cmocka_unit_test(nedc_standing),
        cmocka_unit_test(nedc_against_another_table),
        cmocka_unit_test(harrowmoor_is_a_hill_climb),
        cmocka_unit_test(stonemere_is_three_laps),
        cmocka_unit_test(stonemere_lap_closes),
    };
    return cmocka_run_group_tests(tests, open_units, close_units);
}
