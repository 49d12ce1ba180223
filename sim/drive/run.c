/* One run: stepping through the schedule, with events, peaks and samples.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/run.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

static const double coldest = 150.0, hottest = 5000.0; /* K: outside no trial value is worth a solve */

/* ---- what the integrator asks ----------------------------------------------------------------------- */

static bool sensible(const struct sp_run *r, const double *y)
{
    const struct sp_layout *l = &r->circuit->layout;
    for (int i = 0; i < l->count; ++i) {
        if (!isfinite(y[i])) return false;
        bool temperature = i <= SP_Y_WAX || i == SP_Y_GAUGE || i >= SP_Y_CHAIN;
        if (temperature && !(y[i] > coldest && y[i] < hottest)) return false;
    }
    return true;
}

static int rates(double t, const double *y, double *dydt, void *context)
{
    struct sp_run *r = context;
    struct sp_inputs in;
    struct sp_signals s;
    struct sp_coupling k;
    if (!sensible(r, y)) return 1;
    sp_schedule_at(r->schedule, r->segment, t, &in);
    sp_circuit_signals(r->circuit, y, &s);
    if (sp_circuit_couple(r->circuit, &in, &r->modes, &s, &r->guesses, &k)) return -1;
    sp_circuit_rates(r->circuit, &in, &r->modes, y, &k, dydt);
    return 0;
}

static int jacobian(double t, const double *y, struct sp_arrow *out, void *context)
{
    struct sp_run *r = context;
    struct sp_inputs in;
    int n = r->circuit->layout.count;
    if (!sensible(r, y)) return 1;
    sp_schedule_at(r->schedule, r->segment, t, &in);
    double *wall = r->means, *core = r->means + n;
    if (sp_circuit_jacobian(r->circuit, &in, &r->modes, y, &r->guesses, r->column, wall, core, r->scratch)) return -1;
    sp_arrow_fill(out, r->column, wall, core);
    return 0;
}

static int look(struct sp_run *r, double t, const double *y, struct sp_watched *out)
{
    struct sp_inputs in;
    struct sp_signals s;
    struct sp_coupling k; /* watches look at the coolant only */
    sp_schedule_at(r->schedule, r->segment, t, &in);
    sp_circuit_signals(r->circuit, y, &s);
    if (sp_circuit_split(r->circuit, &in, &r->modes, &s, &r->looking.loop, &k)) return -1;
    sp_watch(r->circuit, &in, &r->modes, y, &k, out);
    return 0;
}

static int watch(double t, const double *y, double *g, void *context)
{
    struct sp_run *r = context;
    if (look(r, t, y, &r->seen)) return -1;
    r->seen_at = t;
    memcpy(g, r->seen.g, sizeof r->seen.g);
    return 0;
}

/* ---- events ------------------------------------------------------------------------------------------- */

void sp_run_event(struct sp_run *r, enum sp_event_kind kind, double time, double coolant)
{
    struct sp_result *out = r->result;
    if (out->events == r->event_room) {
        size_t room = r->event_room ? 2 * r->event_room : 64;
        struct sp_event *more = realloc(out->event, room * sizeof *more);
        if (!more) {
            r->lost_event = true;
            return;
        }
        out->event = more;
        r->event_room = room;
    }
    struct sp_inputs in;
    sp_schedule_at(r->schedule, r->segment, time, &in);
    out->event[out->events++] = (struct sp_event){kind, time, in.distance, coolant, r->schedule->step[r->segment],
                                                  sp_schedule_mark(r->schedule, r->segment)};
}

static const double *now(const struct sp_run *r)
{
    return sp_integrator_state(r->integrator);
}

static void note(struct sp_run *r, enum sp_event_kind kind)
{
    if (kind != SP_EVENT_KINDS) sp_run_event(r, kind, r->time, now(r)[SP_Y_JACKET]);
}

/* Whether the controller lets the fan run now; its on-time and its events follow from this alone. */
static void follow_fan(struct sp_run *r)
{
    const struct sp_fan *f = &r->drive->design->duct.fan;
    bool allowed = f->fitted && (r->schedule->flags[r->segment] & SP_FLAG_FAN);
    bool asked = f->law == SP_FAN_ALWAYS || (f->law == SP_FAN_SWITCHED && r->modes.fan_on) ||
                 (f->law == SP_FAN_PROPORTIONAL && r->high[SP_W_FAN]);
    bool runs = allowed && asked;
    if (runs == r->fan_runs) return;
    r->fan_runs = runs;
    if (runs) r->fan_since = r->time;
    else r->result->fan.on += r->time - r->fan_since;
    note(r, runs ? SP_EV_FAN_ON : SP_EV_FAN_OFF);
}

/* A watch crossed. Returns true when the rates jump, so that the integrator must forget. */
static bool crossed(struct sp_run *r, int w, bool up)
{
    r->high[w] = up;
    note(r, up ? sp_watch_event[w].rise : sp_watch_event[w].fall);
    switch (w) {
    case SP_W_FAN:
        if (r->drive->design->duct.fan.law != SP_FAN_SWITCHED) return false;
        if (up == r->modes.fan_on) return false;
        r->modes.fan_on = up;
        return r->schedule->flags[r->segment] & SP_FLAG_FAN;
    case SP_W_PLAY:
    case SP_W_PLAY_SHUT:
        sp_watch_turn_play(&r->drive->design->thermostat, now(r)[SP_Y_WAX], w == SP_W_PLAY_SHUT, &r->modes);
        return false;
    case SP_W_COOLANT:
        if (up) r->over_since = r->time;
        else r->result->time_over_limit += r->time - r->over_since;
        return false;
    case SP_W_FULL:
        if (up) r->full_since = r->time;
        else r->result->time_above_band += r->time - r->full_since;
        return false;
    default: return false;
    }
}

/* After a jump of the inputs: a watch may stand on the other side without having crossed. */
static bool look_again(struct sp_run *r, bool first)
{
    struct sp_watched seen;
    if (look(r, r->time, now(r), &seen)) return false;
    for (int w = 0; w < SP_WATCHES; ++w) {
        bool up = seen.g[w] >= 0.0;
        if (w == SP_W_PLAY || w == SP_W_PLAY_SHUT) r->high[w] = up;
        else if (first ? up : up != r->high[w]) crossed(r, w, up);
    }
    r->seen_at = NAN;
    return true;
}

/* ---- peaks and samples ---------------------------------------------------------------------------------- */

static void track(struct sp_tracked *t, double value, double time)
{
    if (value > t->best) *t = (struct sp_tracked){value, time};
}

/* The top of the coolant's curve inside the last step, where its slope changes sign. */
static void track_summit(struct sp_run *r, double from, double slope)
{
    double low = from, high = r->time;
    if (!(r->slope_before > 0.0 && slope < 0.0)) return;
    for (int i = 0; i < 40 && high - low > 1e-9 * high; ++i) {
        double mid = 0.5 * (low + high);
        if (!sp_integrator_look_back(r->integrator, mid, 1, r->scratch)) return;
        if (r->scratch[SP_Y_JACKET] > 0.0) low = mid;
        else high = mid;
    }
    if (sp_integrator_look_back(r->integrator, low, 0, r->scratch)) track(&r->coolant, r->scratch[SP_Y_JACKET], low);
}

static bool track_all(struct sp_run *r)
{
    const double *y = now(r);
    double t = r->time;
    struct sp_inputs in;
    sp_schedule_at(r->schedule, r->segment, t, &in);
    if (r->seen_at != t) {
        if (look(r, t, y, &r->seen)) return false;
        r->seen_at = t;
    }
    track(&r->coolant, y[SP_Y_JACKET], t);
    track(&r->gauge, y[SP_Y_GAUGE] + r->drive->design->gauge.offset, t);
    track(&r->metal, y[SP_Y_METAL], t);
    track(&r->pressure, r->seen.tank_pressure, t);
    track(&r->margin, -r->seen.boil_margin, t);
    track(&r->over_ambient, y[SP_Y_JACKET] - in.in[SP_IN_AMBIENT], t);
    return true;
}

static enum sp_status give_sample(struct sp_run *r, double t, const double *y)
{
    struct sp_sample sample;
    enum sp_status status = sp_run_sample(r, r->segment, t, y, &sample);
    if (status) return status;
    ++r->samples;
    double logged = sample.value[SP_CH_MEASURED];
    if (isfinite(logged) && !sp_measured_add(&r->measured, t, logged, sample.value[SP_CH_GAUGE])) return SP_NUMERICS;
    return !r->sink || r->sink->row(r->sink->context, &sample) ? SP_OK : SP_INPUT;
}

/* All samples due up to the time reached; times are multiples of the interval, never sums. */
static enum sp_status sample_step(struct sp_run *r)
{
    if (!r->sink && !r->schedule->measured) return SP_OK;
    for (;;) {
        double due = (double)r->samples * r->interval;
        if (due > r->time) return SP_OK;
        if (!sp_integrator_look_back(r->integrator, due, 0, r->before)) return SP_NUMERICS;
        enum sp_status status = give_sample(r, due, r->before);
        if (status) return status;
    }
}

/* ---- stepping ------------------------------------------------------------------------------------------- */

static enum sp_status after_step(struct sp_run *r, double from)
{
    enum sp_status status = sample_step(r);
    if (status) return status;
    if (!sp_integrator_look_back(r->integrator, r->time, 1, r->scratch)) return SP_NUMERICS;
    double slope = r->scratch[SP_Y_JACKET];
    track_summit(r, from, slope);
    r->slope_before = slope;
    return track_all(r) ? SP_OK : SP_NUMERICS;
}

static bool restart(struct sp_run *r)
{
    ++r->result->work.restarts;
    r->slope_before = 0.0;
    r->seen_at = NAN;
    return sp_integrator_restart(r->integrator, r->time);
}

/* Handles what crossed, all at one instant. */
static bool take_crossings(struct sp_run *r, const int *sign)
{
    bool jump = false;
    ++r->result->work.roots;
    for (int w = 0; w < SP_WATCHES; ++w)
        if (sign[w]) jump = crossed(r, w, sign[w] > 0) || jump;
    r->seen_at = NAN;
    follow_fan(r);
    return !jump || restart(r);
}

static enum sp_status run_segment(struct sp_run *r)
{
    double end = r->schedule->time[r->segment + 1];
    int sign[SP_WATCHES];
    while (r->time < end) {
        double from = r->time;
        enum sp_advance how = sp_integrator_step(r->integrator, end, &r->time, sign);
        if (how == SP_ADV_FAILED) return SP_NUMERICS;
        enum sp_status status = after_step(r, from);
        if (status) return status;
        if (how == SP_ADV_CROSSED && !take_crossings(r, sign)) return SP_NUMERICS;
        if (how == SP_ADV_END) r->time = end;
    }
    return SP_OK;
}

static void announce(struct sp_run *r, size_t from)
{
    const struct sp_schedule *s = r->schedule;
    size_t to = r->segment;
    if (from == to || s->step[from] != s->step[to]) note(r, SP_EV_STEP);
    bool was = from != to && (s->flags[from] & SP_FLAG_ENGINE), is = s->flags[to] & SP_FLAG_ENGINE;
    if (from == to ? is : was != is) note(r, is ? SP_EV_ENGINE_STARTS : SP_EV_ENGINE_STOPS);
}

static enum sp_status run_all(struct sp_run *r)
{
    const struct sp_schedule *s = r->schedule;
    size_t last = SIZE_MAX; /* segment driven before */
    for (size_t k = 0; k + 1 < s->rows; ++k) {
        if (s->time[k + 1] <= s->time[k]) continue; /* a jump: no time passes */
        bool jump = last == SIZE_MAX || last + 1 != k || s->flags[last] != s->flags[k];
        r->segment = k;
        if (jump) {
            announce(r, last == SIZE_MAX ? k : last);
            if (!look_again(r, last == SIZE_MAX) || !track_all(r)) return SP_NUMERICS;
            follow_fan(r);
            if (last != SIZE_MAX && !restart(r)) return SP_NUMERICS;
        }
        enum sp_status status = run_segment(r);
        if (status) return status;
        last = k;
    }
    /* The last row is always there, also off the grid of samples. */
    double ended = s->time[s->rows - 1];
    if (!r->sink || (r->samples && (double)(r->samples - 1) * r->interval >= ended)) return SP_OK;
    return give_sample(r, ended, now(r));
}

/* ---- opening and closing ----------------------------------------------------------------------------------- */

static void set_tolerances(const struct sp_run *r, double tolerance, const double *y, double *absolute)
{
    const struct sp_layout *l = &r->circuit->layout;
    for (int i = 0; i < l->count; ++i) absolute[i] = 10.0 * tolerance; /* K */
    absolute[SP_Y_FAN] = 10.0 * tolerance;
    absolute[SP_Y_AIR] = tolerance * (y[SP_Y_AIR] + 1e-3);
    absolute[SP_Y_LOST] = 1e-3 * tolerance;
    for (int i = SP_Y_HEAT_IN; i <= SP_Y_HEAD_WORK; ++i) absolute[i] = 1e6 * tolerance;
}

static bool open_run(struct sp_run *r, double tolerance, double *start)
{
    const struct sp_layout *l = &r->circuit->layout;
    int n = l->count;
    r->absolute = start + n;
    r->before = start + 2 * n;
    r->means = start + 3 * n;
    r->scratch = start + 5 * n;
    for (int j = 0; j < n; ++j) r->column[j] = start + (8 + j) * n;
    const double nothing = -INFINITY;
    r->coolant.best = r->gauge.best = r->metal.best = r->margin.best = nothing;
    r->pressure.best = r->over_ambient.best = nothing;
    r->seen_at = NAN;
    r->modes.play = SP_PLAY_OPENING;
    struct sp_inputs in;
    sp_schedule_at(r->schedule, 0, r->schedule->time[0], &in);
    sp_circuit_start(r->circuit, &in, start);
    set_tolerances(r, tolerance, start, r->absolute);
    struct sp_problem p = {r, *l, SP_WATCHES, rates, jacobian, watch};
    r->integrator = sp_integrator_open(&p, 0.0, start, tolerance, r->absolute);
    return r->integrator != NULL;
}

static enum sp_status fail(struct sp_run *r, enum sp_status status, struct sp_complaints *complaints)
{
    char path[64], found[300];
    if (status == SP_INPUT) return status; /* the sink has complained itself */
    snprintf(path, sizeof path, "drive[%u] at %.3f s", r->schedule->step[r->segment], r->time);
    snprintf(found, sizeof found, "no solution (%s)", r->integrator ? sp_integrator_trouble(r->integrator) : "no memory");
    struct sp_place at = {.file = r->drive->design->file, .path = path};
    sp_complain(complaints, &at, found, "a drive that can be integrated; please send this case to the maintainers", NULL);
    return SP_NUMERICS;
}

enum sp_status sp_drive_run(const struct sp_drive *drive, const struct sp_run_options *options,
                            struct sp_result *out, struct sp_complaints *complaints)
{
    size_t n = (size_t)drive->circuit.layout.count;
    struct sp_run r = {.drive = drive, .circuit = &drive->circuit, .schedule = &drive->schedule, .result = out,
                       .interval = options->interval > 0.0 ? options->interval : 1.0, .sink = options->sink};
    double tolerance = options->tolerance > 0.0 ? options->tolerance : drive->design->solver.tolerance;
    memset(out, 0, sizeof *out);
    double *room = calloc((8 + n) * n, sizeof *room);
    r.column = calloc(n, sizeof *r.column);
    enum sp_status status = SP_NUMERICS;
    if (room && r.column && open_run(&r, tolerance, room)) {
        status = run_all(&r);
        struct sp_integrator_work w = sp_integrator_work(r.integrator);
        out->work.steps = w.steps;
        out->work.rates = w.rates;
        out->work.jacobians = w.jacobians;
    }
    if (status == SP_OK) status = sp_run_settle(&r, room, complaints);
    else status = fail(&r, status, complaints);
    sp_integrator_close(r.integrator);
    sp_measured_free(&r.measured);
    free(r.column);
    free(room);
    return status;
}

void sp_result_free(struct sp_result *r)
{
    free(r->event);
    memset(r, 0, sizeof *r);
}

struct sp_drive *sp_drive_build(struct sp_units *u, const struct sp_design *d, struct sp_complaints *complaints,
                                struct sp_complaints *cautions)
{
    struct sp_drive *drive = calloc(1, sizeof *drive);
    if (!drive) return NULL;
    drive->design = d;
    bool good = sp_circuit_build(d, &drive->circuit, complaints);
    good = sp_schedule_build(u, d, &drive->schedule, complaints, cautions) == SP_OK && good;
    if (good) return drive;
    sp_drive_free(drive);
    return NULL;
}

void sp_drive_free(struct sp_drive *drive)
{
    if (!drive) return;
    sp_circuit_free(&drive->circuit);
    sp_schedule_free(&drive->schedule);
    free(drive);
}

struct sp_work sp_drive_work(const struct sp_drive *drive)
{
    const struct sp_schedule *s = &drive->schedule;
    return (struct sp_work){s->power_from_road, s->work.wheel, s->work.kinetic, s->work.potential, s->work.drag,
                            s->work.rolling, s->work.brakes};
}
