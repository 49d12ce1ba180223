/* Designs and drives for the tests of the schedule, and looks into what comes of them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_TESTS_SCHEDULE_DRIVE_H
#define SP_TESTS_SCHEDULE_DRIVE_H

#include "check.h"

#include "drive/schedule.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static struct sp_units *units;
static char folder[] = "/tmp/sp_schedule_XXXXXX";

/* ---- a design and its drive ------------------------------------------------------------------- */

enum { MOST_STEPS = 4 };

struct drive {
    struct sp_design design;
    struct sp_step step[MOST_STEPS];
    char path[MOST_STEPS][64];
    struct sp_schedule s;
    struct sp_complaints complaints, cautions;
};

static inline void begin(struct drive *d)
{
    memset(d, 0, sizeof *d);
    d->design.air = (struct sp_air_design){.ambient = 300.0, .pressure = 101325.0};
    d->design.body = (struct sp_body){.mass = NAN,
                                      .frontal_area = 1.0,
                                      .drag_coefficient = NAN,
                                      .rolling = 0.011,
                                      .rotating = 1.03,
                                      .driveline = 1.0,
                                      .wheel_radius = NAN,
                                      .shift_speed = 90.0};
    d->design.engine = (struct sp_engine){.displacement = 2.0e-3,
                                          .rated_power = 100e3,
                                          .rated_speed = 100.0,
                                          .idle_speed = 14.0,
                                          .heat_fraction = 0.6,
                                          .heat_exponent = 0.85,
                                          .idle_heat = NAN,
                                          .fuel_share = 0.3,
                                          .air_fuel_ratio = 14.7,
                                          .heating_value = 42.6e6,
                                          .indicated_efficiency = 0.40,
                                          .friction_pressure = {1.55e5, 0.0, 16.6},
                                          .overrun_pressure = {0.97e5, 900.0, 18.0},
                                          .overrun_share = 0.4,
                                          .gas_temperature = NAN};
    d->design.step = d->step;
}

static inline struct sp_step *add(struct drive *d, enum sp_step_kind kind, double time)
{
    struct sp_step *s = &d->step[d->design.steps++];
    *s = (struct sp_step){.kind = kind,
                          .time = time,
                          .speed = NAN,
                          .power = NAN,
                          .engine_speed = NAN,
                          .grade = 0.0,
                          .repeat = 1.0};
    return s;
}

static inline FILE *add_trace(struct drive *d, const char *headings)
{
    size_t n = d->design.steps;
    snprintf(d->path[n], sizeof d->path[n], "%s/%zu.csv", folder, n);
    add(d, SP_STEP_TRACE, NAN)->trace = d->path[n];
    FILE *f = fopen(d->path[n], "w");
    assert_non_null(f);
    fprintf(f, "%s\n", headings);
    return f;
}

static inline void add_text(struct drive *d, const char *text)
{
    fclose(add_trace(d, text));
}

/* Flags change only where a row is doubled, times do not fall, only `measured` may be no number. */
static inline void check_sound(const struct sp_schedule *s)
{
    assert_true(s->rows >= 2);
    check_close(s->time[0], 0.0, 0.0, 0.0);
    for (size_t k = 0; k + 1 < s->rows; k++) {
        assert_true(s->time[k + 1] >= s->time[k]);
        if (k > 0 && s->flags[k] != s->flags[k - 1]) assert_true(s->time[k] == s->time[k - 1]);
        if (k > 0) assert_true(s->time[k + 1] > s->time[k - 1]);
        assert_true(s->step[k + 1] >= s->step[k]);
    }
    for (int c = 0; c < SP_INPUTS; c++)
        for (size_t k = 0; k < s->rows && c != SP_IN_MEASURED; k++)
            assert_true(isfinite(s->channel[c][k]));
    for (size_t i = 0; i < s->marks; i++)
        assert_true(s->mark[i].row < s->rows);
}

static inline void build(struct drive *d)
{
    enum sp_status status = sp_schedule_build(units, &d->design, &d->s, &d->complaints, &d->cautions);
    sp_complaints_print(&d->complaints, false, stderr);
    assert_int_equal(status, SP_OK);
    assert_int_equal(d->complaints.count, 0);
    check_sound(&d->s);
}

static inline void end(struct drive *d)
{
    sp_schedule_free(&d->s);
    sp_complaints_free(&d->complaints);
    sp_complaints_free(&d->cautions);
}

static inline void refused(struct drive *d, const char *found)
{
    assert_int_equal(sp_schedule_build(units, &d->design, &d->s, &d->complaints, &d->cautions), SP_INPUT);
    assert_int_equal(d->complaints.count, 1);
    if (!strstr(d->complaints.list[0].found, found)) sp_complaints_print(&d->complaints, false, stderr);
    assert_non_null(strstr(d->complaints.list[0].found, found));
    assert_int_equal(d->s.rows, 0);
    assert_null(d->s.time);
    end(d);
}

static inline bool cautioned(const struct drive *d, const char *found)
{
    for (size_t i = 0; i < d->cautions.count; i++)
        if (strstr(d->cautions.list[i].found, found)) return true;
    return false;
}

static inline double integral(const struct sp_schedule *s, enum sp_channel_in c)
{
    double sum = 0.0;
    for (size_t k = 0; k + 1 < s->rows; k++)
        sum += 0.5 * (s->channel[c][k] + s->channel[c][k + 1]) * (s->time[k + 1] - s->time[k]);
    return sum;
}

/* The segment in which t lies; at a jump the one after it. */
static inline size_t segment(const struct sp_schedule *s, double t)
{
    size_t k = s->rows - 2;
    while (k > 0 && s->time[k] > t)
        k--;
    return k;
}

static inline double at(const struct sp_schedule *s, enum sp_channel_in c, double t)
{
    struct sp_inputs in;
    sp_schedule_at(s, segment(s, t), t, &in);
    return in.in[c];
}

static inline unsigned flags(const struct sp_schedule *s, double t)
{
    return s->flags[segment(s, t)];
}

/* ---- units and a folder for all tests ---------------------------------------------------------- */

static inline int set_up(void **state)
{
    (void)state;
    units = sp_units_open();
    return units && mkdtemp(folder) ? 0 : -1;
}

static inline int tear_down(void **state)
{
    (void)state;
    for (int i = 0; i < MOST_STEPS; i++) {
        char path[64];
        snprintf(path, sizeof path, "%s/%d.csv", folder, i);
        unlink(path);
    }
    rmdir(folder);
    sp_units_close(units);
    return 0;
}

#endif
