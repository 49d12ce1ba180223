/* A hold: followed until it rests, swings or runs away, and judged. SPDX-License-Identifier: GPL-3.0-or-later
 */
#include "drive/hold.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "drive/schedule.h"

static const double longest = 12.0 * 3600.0; /* s that are followed */
static const double slow = 2e-4;             /* K/s: what is slower may be close to its rest */
static const double close_enough =
    1e-3;                             /* K from its rest: a thermostat with play keeps what overshoots it */
static const double far_at_end = 0.1; /* K: the same when the time is over */
static const double try_again = 120.0, look_again = 300.0; /* s */
static const double last_stretch = 3600.0;                 /* s */
static const double hottest_coolant = SP_ZERO_C + 500.0,
                    hottest_metal = SP_ZERO_C + 1200.0; /* K: beyond is no car */
static const double within = 1.0;                       /* K: coolant counts as come to rest */
static const double same_power = 0.01;                  /* of power and of what the grade asks for */

/* ---- the end of the way ---------------------------------------------------------------------------- */

/* From when on the coolant stays near its rest. */
static double rest_after(const struct sp_holding *h, double T)
{
    size_t i = h->records;
    while (i > 0 && fabs(h->record[i - 1].value[SP_HOLD_COOLANT] - T) <= within)
        --i;
    return i < h->records ? h->record[i].time : NAN;
}

static bool describe(struct sp_holding *h, struct sp_run *r, const double *y, enum sp_hold_kind kind)
{
    h->out->kind = kind;
    h->out->followed = r->time;
    h->failed = sp_hold_describe(r, y, h->out) != SP_OK;
    if (!h->failed) sp_hold_judge(h->out);
    return true;
}

/* h->state rests. */
static bool settles(struct sp_holding *h, struct sp_run *r)
{
    double value[SP_HOLD_LIMITS], T = h->state[SP_Y_JACKET];
    bool fan = h->record[h->records - 1].fan;
    if (!sp_hold_values(r, r->time, h->state, value)) return false;
    for (int j = 0; j < SP_HOLD_LIMITS; ++j)
        h->out->limit[j].value = value[j];
    h->out->rest_after = rest_after(h, T);
    h->out->coolant.least = h->out->coolant.most = h->out->coolant.mean = T;
    h->out->coolant.period = 0.0;
    h->out->coolant.fan = fan ? 1.0 : 0.0;
    return describe(h, r, h->state, SP_HOLD_SETTLES);
}

static bool ends(struct sp_holding *h, struct sp_run *r, const struct sp_hold_cycle *c,
                 enum sp_hold_kind kind)
{
    sp_hold_sum_up(h, c, h->out);
    return describe(h, r, sp_integrator_state(r->integrator), kind);
}

/* A cycle was found, and its hottest moment seen since. */
static bool swings(struct sp_holding *h, struct sp_run *r)
{
    struct sp_modes now = r->modes;
    sp_hold_sum_up(h, &h->cycle, h->out);
    r->modes = h->hottest_modes;
    bool done = describe(h, r, h->hottest, SP_HOLD_SWINGS);
    r->modes = now;
    return done;
}

/* ---- on the way ------------------------------------------------------------------------------------ */

static bool is_slow(struct sp_holding *h, struct sp_run *r)
{
    if (!sp_integrator_look_back(r->integrator, r->time, 1, h->rates)) return false;
    for (int i = 0; i < r->circuit->layout.count; ++i)
        if (sp_hold_rests(&r->circuit->layout, i) && fabs(h->rates[i]) > slow) return false;
    return true;
}

/* Solves for rest from where the drive is; true when it is as near as `near`. */
static bool rests(struct sp_holding *h, struct sp_run *r, double near)
{
    double moved;
    memcpy(h->state, sp_integrator_state(r->integrator), (size_t)r->circuit->layout.count * sizeof *h->state);
    h->next_try = r->time + try_again;
    return sp_hold_steady(r, h->state, &moved) && moved <= near;
}

static void begin_cycle(struct sp_holding *h, double t)
{
    h->watch_until = t + 1.05 * h->cycle.period;
    h->hottest_at = -INFINITY;
}

static bool over(struct sp_holding *h, struct sp_run *r)
{
    struct sp_hold_cycle c = sp_hold_last(h, last_stretch);
    if (isnan(c.period) && is_slow(h, r) && rests(h, r, far_at_end)) return settles(h, r);
    return ends(h, r, &c, isnan(c.period) ? SP_HOLD_DRIFTS : SP_HOLD_SWINGS);
}

static bool runs_away(const double *y)
{
    return y[SP_Y_JACKET] > hottest_coolant || y[SP_Y_METAL] > hottest_metal;
}

/* A drive may begin anew, at a smaller tolerance. */
static void begin(struct sp_holding *h, const struct sp_design *d)
{
    h->records = 0;
    h->next_look = look_again;
    h->next_try = 0.0;
    h->watch_until = NAN;
    sp_hold_limits(d, h->out->limit);
}

bool sp_hold_step(void *context, struct sp_run *r, double from)
{
    struct sp_holding *h = context;
    if (from <= 0.0) begin(h, r->drive->design);
    h->failed = !sp_hold_note(h, r, from);
    if (h->failed) return true;
    if (runs_away(sp_integrator_state(r->integrator))) {
        struct sp_hold_cycle c = {h->records - 2, h->records - 1, NAN};
        return ends(h, r, &c, SP_HOLD_RUNS_AWAY);
    }
    if (!isnan(h->watch_until)) return r->time >= h->watch_until && swings(h, r);
    if (r->time >= longest) return over(h, r);
    if (r->time >= h->next_try && is_slow(h, r) && rests(h, r, close_enough)) return settles(h, r);
    if (r->time < h->next_look) return false;
    h->next_look = r->time + look_again;
    if (sp_hold_find_cycle(h, &h->cycle)) begin_cycle(h, r->time);
    return false;
}

/* ---- the drive ------------------------------------------------------------------------------------- */

static struct sp_step step_of(const struct sp_hold_wish *w)
{
    bool idles = w->speed == 0.0 && isnan(w->power) && isnan(w->engine_speed);
    return (struct sp_step){.kind = idles ? SP_STEP_IDLE : SP_STEP_HOLD,
                            .time = longest,
                            .speed = w->speed,
                            .power = w->power,
                            .engine_speed = w->engine_speed,
                            .repeat = 1.0,
                            .grade = isnan(w->grade) ? 0.0 : w->grade,
                            .following = NAN};
}

/* The design with nothing but this hold to drive. */
static struct sp_design design_of(const struct sp_design *d, struct sp_step *step)
{
    struct sp_design copy = *d;
    copy.step = step;
    copy.steps = 1;
    copy.change = NULL;
    copy.changes = 0;
    return copy;
}

/* What is said of the one step of the drive is said of the hold. */
static void pass_on(const struct sp_complaints *from, struct sp_complaints *to)
{
    static const char step[] = "drive[0]";
    for (size_t i = 0; i < from->count; ++i) {
        const struct sp_complaint *c = &from->list[i];
        char path[200];
        bool own = c->path && !strncmp(c->path, step, sizeof step - 1);
        if (own) snprintf(path, sizeof path, "hold%s", c->path + sizeof step - 1);
        struct sp_place at = {
            .file = c->file, .line = c->line, .path = own ? path : c->path, .named_by = c->named_by};
        sp_complain(to, &at, c->found, c->expected, c->hint);
    }
}

/* Power and grade both given: they must mean the same. */
static bool agree(struct sp_units *u, const struct sp_design *d, const struct sp_hold_wish *w,
                  struct sp_complaints *complaints)
{
    if (isnan(w->power) || isnan(w->grade)) return true;
    struct sp_hold_wish road = *w;
    road.power = NAN;
    struct sp_step step = step_of(&road);
    struct sp_design copy = design_of(d, &step);
    struct sp_schedule s;
    struct sp_complaints wrong = {0}, cautions = {0};
    enum sp_status status = sp_schedule_build(u, &copy, &s, &wrong, &cautions);
    pass_on(&wrong, complaints);
    sp_complaints_free(&wrong);
    sp_complaints_free(&cautions);
    if (status) return false;
    double asked = s.channel[SP_IN_POWER][0];
    sp_schedule_free(&s);
    if (fabs(asked - w->power) <= same_power * fmax(fabs(asked), fabs(w->power))) return true;
    char found[120], expected[120];
    struct sp_place at = {.file = d->file, .path = "--power"};
    snprintf(found, sizeof found, "%.4g kW with a grade of %.4g %% at %.4g km/h", w->power / 1e3,
             100.0 * w->grade, 3.6 * w->speed);
    snprintf(expected, sizeof expected,
             "%.4g kW, which the road load asks for there; or one of the two alone", asked / 1e3);
    sp_complain(complaints, &at, found, expected, NULL);
    return false;
}

static bool open_holding(struct sp_holding *h, size_t n, const struct sp_design *d, struct sp_hold_point *out)
{
    *h = (struct sp_holding){.out = out};
    begin(h, d);
    h->state = calloc(3 * n, sizeof *h->state);
    h->rates = h->state ? h->state + n : NULL;
    h->hottest = h->state ? h->state + 2 * n : NULL;
    return h->state != NULL;
}

/* Heat that outruns the integrator is no fault of the numbers. */
static bool ran_away(const struct sp_holding *h)
{
    const double surely = SP_ZERO_C + 350.0;
    return h->records > 1 && h->record[h->records - 1].value[SP_HOLD_COOLANT] > surely;
}

static enum sp_status follow(const struct sp_drive *drive, struct sp_holding *h,
                             struct sp_complaints *complaints)
{
    struct sp_run_hook hook = {h, sp_hold_step};
    struct sp_run_options options = {.interval = longest};
    struct sp_result result = {0};
    struct sp_complaints said = {0};
    enum sp_status status = sp_run_hooked(drive, &options, &hook, &result, &said);
    sp_result_free(&result);
    if (status == SP_NUMERICS && !h->failed && ran_away(h)) {
        struct sp_hold_cycle c = {h->records - 2, h->records - 1, NAN};
        sp_hold_sum_up(h, &c, h->out);
        h->out->kind = SP_HOLD_RUNS_AWAY;
        sp_hold_judge(h->out);
        status = SP_NOT;
    } else {
        sp_complaints_copy(&said, complaints);
    }
    sp_complaints_free(&said);
    return h->failed ? SP_NUMERICS : status;
}

static struct sp_drive *build(struct sp_units *u, const struct sp_design *d, struct sp_complaints *complaints,
                              struct sp_complaints *cautions)
{
    struct sp_complaints wrong = {0}, doubtful = {0};
    struct sp_drive *drive = sp_drive_build(u, d, &wrong, &doubtful);
    pass_on(&wrong, complaints);
    pass_on(&doubtful, cautions);
    sp_complaints_free(&wrong);
    sp_complaints_free(&doubtful);
    return drive;
}

enum sp_status sp_hold_solve(struct sp_units *u, const struct sp_design *d, const struct sp_hold_wish *w,
                             struct sp_hold_point *out, struct sp_complaints *complaints,
                             struct sp_complaints *cautions)
{
    struct sp_step step = step_of(w);
    struct sp_design copy = design_of(d, &step);
    memset(out, 0, sizeof *out);
    out->wish = *w;
    out->rest_after = NAN;
    if (!agree(u, d, w, complaints)) return SP_INPUT;
    struct sp_drive *drive = build(u, &copy, complaints, cautions);
    if (!drive) return SP_INPUT;
    struct sp_holding h;
    enum sp_status status = SP_NUMERICS;
    if (open_holding(&h, (size_t)drive->circuit.layout.count, d, out)) status = follow(drive, &h, complaints);
    free(h.state);
    free(h.record);
    sp_drive_free(drive);
    if (status == SP_NUMERICS && !complaints->count) {
        struct sp_place at = {.file = d->file};
        sp_complain(complaints, &at, "no solution of a held speed",
                    "one; please send this case to the maintainers", NULL);
    }
    if (status == SP_NUMERICS || status == SP_INPUT) return status;
    return out->holds ? SP_OK : SP_NOT;
}
