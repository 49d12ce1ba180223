/* Cars with every option at once, on random drives with fixed seeds: no option may break the ledger, lose
 * mass, give NaN, or stop the numerics.
 *
 * SP_DRIVES sets how many drives (500, a fifth under the sanitizers); the drive of seed N is the same whatever the
 * count. SP_FIRST is the first seed (1).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "random_whole.h"

static struct fixture fixture;
static long violations;

#define expect(w, holds, ...)                                                                                \
    do {                                                                                                     \
        if (!(holds) && ++violations <= 10) {                                                                \
            print_error("seed %lu (SP_FIRST=%lu SP_DRIVES=1): %s is broken: ", (w)->car.seed, (w)->car.seed, \
                        #holds);                                                                             \
            print_error(__VA_ARGS__);                                                                        \
            print_error("\n");                                                                               \
            show_whole(w);                                                                                   \
        }                                                                                                    \
    } while (0)

/* A channel of a part that is not fitted is NaN throughout; all others are numbers throughout. */
static void check_numbers(const struct whole *w, const struct fixture_drive *r)
{
    const struct sp_sample *first = r->series.row;
    for (size_t i = 0; i < r->series.count; ++i)
        for (int c = 0; c < SP_CHANNELS; ++c) {
            double x = r->series.row[i].value[c];
            bool absent = isnan(first->value[c]) && isnan(x);
            expect(w, absent || isfinite(x), "%s is %g at %g s", sp_channel_at((enum sp_channel)c)->name, x,
                   r->series.row[i].value[SP_CH_TIME]);
        }
    const enum sp_channel always[] = {
        SP_CH_ENGINE_OUT, SP_CH_RADIATOR_IN, SP_CH_RADIATOR_OUT, SP_CH_METAL,   SP_CH_TANK,
        SP_CH_PUMP_FLOW,  SP_CH_AIR_FLOW,    SP_CH_BOIL_MARGIN,  SP_CH_HEAT_IN, SP_CH_DRAG};
    for (size_t i = 0; i < sizeof always / sizeof *always; ++i)
        expect(w, isfinite(first->value[always[i]]), "%s from the start", sp_channel_at(always[i])->name);
}

/* What the pump sends out comes back by radiators, bypass, heater or tank. */
static void check_flows(const struct whole *w, const double *v)
{
    const struct sp_design *d = &w->d;
    double pump = v[SP_CH_PUMP_FLOW], split = v[SP_CH_RADIATOR_FLOW] + v[SP_CH_BYPASS_FLOW],
           give = 1e-9 * fabs(pump);
    bool heated = d->hoses.heater.flow > 0.0, bored = d->tank.bleed_bore > 0.0;
    double share = bored ? 0.0 : d->tank.bleed;
    expect(w, pump >= 0.0 && v[SP_CH_RADIATOR_FLOW] >= 0.0 && v[SP_CH_BYPASS_FLOW] >= 0.0, "flow %g at %g s",
           pump, v[SP_CH_TIME]);
    expect(w, split <= (1.0 - share) * pump + give, "flows at %g s: %g into %g", v[SP_CH_TIME], pump, split);
    if (!heated && !bored)
        expect(w, split >= (1.0 - share) * pump - give, "flows at %g s: %g into %g", v[SP_CH_TIME], pump,
               split);
}

static void check_samples(const struct whole *w, const struct fixture_drive *r)
{
    if (!r->series.count) return;
    check_numbers(w, r);
    for (size_t i = 0; i < r->series.count; ++i) {
        const double *v = r->series.row[i].value;
        check_flows(w, v);
        expect(w, v[SP_CH_LIFT] >= 0.0 && v[SP_CH_LIFT] <= 1.0, "lift %g", v[SP_CH_LIFT]);
        expect(w, v[SP_CH_ENGINE_OUT] > 200.0 && v[SP_CH_ENGINE_OUT] < 3000.0, "coolant %g K",
               v[SP_CH_ENGINE_OUT]);
    }
}

static void check_result(const struct whole *w, const struct fixture_drive *r)
{
    const struct sp_result *s = &r->result;
    expect(w, r->status == SP_OK || r->status == SP_NOT, "status %d", (int)r->status);
    if (r->status == SP_NUMERICS || r->status == SP_INPUT) {
        if (violations <= 10) sp_complaints_print(&r->complaints, false, stderr);
        return;
    }
    expect(w, fabs(s->ledger.error) <= 1e-4, "ledger %g", s->ledger.error);
    expect(w, s->duration == 60.0 && r->series.count == 13, "%g s, %zu samples", s->duration,
           r->series.count);
    expect(w,
           isfinite(s->coolant.value) && isfinite(s->gauge.value) && isfinite(s->metal.value) &&
               isfinite(s->boil_margin.value) && isfinite(s->tank_pressure.value) &&
               isfinite(s->over_ambient),
           "peaks");
    expect(w, s->fan.energy > -1e-9 && isfinite(s->drag.energy), "fan %g J", s->fan.energy);
    for (size_t i = 1; i < s->events; ++i)
        expect(w, s->event[i].time >= s->event[i - 1].time, "order of events %zu", i);
}

static void random_drives(void **state)
{
    (void)state;
    unsigned long count = setting("SP_DRIVES", 500 / SP_TESTS_SHARE), first = setting("SP_FIRST", 1);
    struct whole *w = malloc(sizeof *w);
    long steps = 0;
    violations = 0;
    assert_non_null(w);
    for (unsigned long i = 0; i < count; ++i) {
        draw_whole(fixture.base, first + i, w);
        struct fixture_drive r = fixture_run(&fixture, &w->d, 5.0, 0.0);
        check_result(w, &r);
        check_samples(w, &r);
        steps += r.result.work.steps;
        fixture_drop(&r);
    }
    print_message("%lu drives of 60 s, %.0f steps each, %ld violations\n", count,
                  (double)steps / (double)count, violations);
    free(w);
    assert_int_equal(violations, 0);
}

static int begin(void **state)
{
    (void)state;
    fixture = fixture_open();
    return 0;
}

static int end(void **state)
{
    (void)state;
    fixture_close(&fixture);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(random_drives)};
    return cmocka_run_group_tests(tests, begin, end);
}
