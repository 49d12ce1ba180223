/* One run: stepping through the schedule, with events, peaks and samples.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/run.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

/* Restarts of the integrator in a drive, and for each second of it, beyond which something switches to and fro without
 * end: a drive that would crawl on for hours is a failure of the numerics. */
static const double restless = 10000.0, restless_rate = 100.0;
static const double shortest = 1e-9;                   /* s: rows closer than this are one instant */
static const double coldest = 150.0, hottest = 5000.0; /* K: outside no trial value is worth a solve */

/* ---- what the integrator asks ----------------------------------------------------------------------- */

static bool sensible(const struct sp_run *r, const double *y)
{
    const struct sp_layout *l = &r->circuit->layout;
    for (int i = 0; i < l->count; ++i) {
        if (!isfinite(y[i])) return false;
        if (sp_layout_kelvin(l, i) && !(y[i] > coldest && y[i] < hottest)) return false;
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
    sp_circuit_signals(r->circuit, &in, y, &s);
    if (sp_circuit_couple(r->circuit, &in, &r->modes, &s, &r->guesses, &k)) return 1; /* a smaller step may do */
    sp_circuit_rates(r->circuit, &in, &r->modes, y, &k, dydt);
    return 0;
}

static int jacobian(double t, const double *y, struct sp_arrow *out, void *context)
{
    struct sp_run *r = context;
    struct sp_inputs in;
    if (!sensible(r, y)) return 1;
    sp_schedule_at(r->schedule, r->segment, t, &in);
    double **mean = r->column + r->circuit->layout.count;
    if (sp_circuit_jacobian(r->circuit, &in, &r->modes, y, &r->guesses, r->column, mean, r->scratch))
        return 1; /* a smaller step may do */
    sp_arrow_fill(out, r->column, mean);
    return 0;
}

static int watch(double t, const double *y, double *g, void *context)
{
    struct sp_run *r = context;
    if (sp_run_look(r, t, y, &r->seen)) return -1;
    r->seen_at = t;
    /* Slow temperatures can stand exactly at nil over many clock ticks, which the root finder takes for an
     * endless crossing: nil counts as not yet crossed. */
    for (int w = 0; w < r->watches.count; ++w) g[w] = r->seen.g[w] != 0.0 ? r->seen.g[w] : (r->high[w] ? 1e-300 : -1e-300);
    return 0;
}

/* ---- stepping ------------------------------------------------------------------------------------------- */

static bool restart(struct sp_run *r)
{
    ++r->result->work.restarts;
    r->slope_before = 0.0;
    r->seen_at = NAN;
    return sp_integrator_restart(r->integrator, r->time);
}

static enum sp_status run_segment(struct sp_run *r)
{
    double end = r->schedule->time[r->segment + 1];
    int sign[SP_WATCHES_MOST];
    while (r->time < end) {
        double from = r->time;
        enum sp_advance how = sp_integrator_step(r->integrator, end, &r->time, sign);
        if (how == SP_ADV_FAILED) return SP_NUMERICS;
        enum sp_status status = sp_run_after_step(r, from);
        if (status) return status;
        if (how == SP_ADV_END) r->time = end;
        r->ended = r->hook && r->hook->step(r->hook->context, r, from);
        if (r->ended) return SP_OK;
        if (how == SP_ADV_CROSSED && sp_run_take_crossings(r, sign) && !restart(r)) return SP_NUMERICS;
        if ((double)r->result->work.restarts > restless + restless_rate * r->time) return SP_NUMERICS;
    }
    return SP_OK;
}

static enum sp_status run_all(struct sp_run *r)
{
    const struct sp_schedule *s = r->schedule;
    size_t last = SIZE_MAX; /* segment driven before */
    for (size_t k = 0; k + 1 < s->rows; ++k) {
        if (s->time[k + 1] - s->time[k] <= shortest) { /* a jump: no time passes */
            r->time = s->time[k + 1];
            continue;
        }
        bool jump = last == SIZE_MAX || last + 1 != k || s->flags[last] != s->flags[k];
        r->segment = k;
        sp_run_change(r);
        bool next_step = last != SIZE_MAX && s->step[last] != s->step[k];
        if (jump || next_step) sp_run_announce(r, last == SIZE_MAX ? k : last);
        if (jump) {
            if (!sp_run_look_again(r, last == SIZE_MAX) || !sp_run_track(r)) return SP_NUMERICS;
            sp_run_follow_fan(r);
            if (last != SIZE_MAX && !restart(r)) return SP_NUMERICS;
        }
        enum sp_status status = run_segment(r);
        if (status || r->ended) return status;
        last = k;
    }
    /* The last row is always there, also off the grid of samples. */
    double ended = s->time[s->rows - 1];
    if (!r->sink || (r->samples && (double)(r->samples - 1) * r->interval >= ended)) return SP_OK;
    return sp_run_give_sample(r, ended, sp_integrator_state(r->integrator));
}

/* ---- opening and closing ----------------------------------------------------------------------------------- */

/* Charge air has next to no mass and the metal of its cooler follows it in seconds: they swing with every pedal, and
 * are held to tenths and hundredths of a kelvin, or their steps would be those of the whole drive. */
static void charge_tolerances(const struct sp_circuit *c, double tolerance, double *absolute)
{
    for (int e = 0; e < c->exchangers; ++e) {
        const struct sp_cells_at *at = &c->layout.exchanger[e];
        if (c->exchanger[e].carries != SP_CARRIES_CHARGE) continue;
        for (int i = 0; i < at->cells; ++i) {
            absolute[at->fluid + i] = 3e4 * tolerance;
            absolute[at->wall + i] = 5e3 * tolerance;
        }
    }
}

static void set_tolerances(const struct sp_run *r, double tolerance, const double *y, double *absolute)
{
    const struct sp_layout *l = &r->circuit->layout;
    for (int i = 0; i < l->count; ++i) absolute[i] = 10.0 * tolerance; /* K */
    for (int f = 0; f < l->fans; ++f) absolute[l->fan[f]] = 10.0 * tolerance;
    absolute[SP_Y_AIR] = tolerance * (y[SP_Y_AIR] + 1e-3);
    absolute[SP_Y_LOST] = 1e-3 * tolerance;
    for (int i = SP_Y_HEAT_IN; i <= SP_Y_HEAD_WORK; ++i) absolute[i] = 1e6 * tolerance;
    if (l->battery >= 0) absolute[l->battery] = 1e6 * tolerance;
    charge_tolerances(r->circuit, tolerance, absolute);
}

static bool open_run(struct sp_run *r, double tolerance, double *start)
{
    const struct sp_layout *l = &r->circuit->layout;
    int n = l->count;
    r->absolute = start + n;
    r->before = start + 2 * n;
    r->scratch = start + 3 * n;
    for (int j = 0; j < n + 2 * l->exchangers; ++j) r->column[j] = start + (6 + j) * n; /* then the means */
    const double nothing = -INFINITY;
    r->coolant.best = r->gauge.best = r->metal.best = r->margin.best = nothing;
    r->oil.best = r->gearbox.best = r->charge.best = nothing;
    r->pressure.best = r->over_ambient.best = r->head_lost.best = nothing;
    for (int i = 0; i < SP_ROOMS; ++i) r->room[i] = (struct sp_room){NAN, NAN, INFINITY};
    r->seen_at = NAN;
    struct sp_inputs in;
    sp_schedule_at(r->schedule, 0, r->schedule->time[0], &in);
    sp_circuit_start(r->circuit, &in, start);
    r->modes = (struct sp_modes){.play = SP_PLAY_HELD, .held = start[SP_Y_WAX]}; /* as if it had come up to here */
    sp_run_list(r);
    set_tolerances(r, tolerance, start, r->absolute);
    struct sp_problem p = {r, *l, r->watches.count, rates, jacobian, watch};
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

/* One attempt; *open tells that only the ledger failed. */
static enum sp_status attempt(const struct sp_drive *drive, const struct sp_run_options *options,
                              const struct sp_run_hook *hook, double tolerance, struct sp_result *out,
                              struct sp_complaints *complaints, bool *open)
{
    size_t n = (size_t)drive->circuit.layout.count;
    struct sp_run r = {.drive = drive, .circuit = &drive->circuit, .schedule = &drive->schedule, .result = out,
                       .interval = options->interval > 0.0 ? options->interval : 1.0, .sink = options->sink,
                       .hook = hook};
    memset(out, 0, sizeof *out);
    size_t columns = n + 2 * (size_t)drive->circuit.layout.exchangers;
    double *room = calloc((6 + columns) * n, sizeof *room);
    r.column = calloc(columns, sizeof *r.column);
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
    *open = r.ledger_open && !r.lost_event;
    return status;
}

/* Quiet drives turn over so little heat that what the error control lets pass can show in the ledger. */
enum sp_status sp_run_hooked(const struct sp_drive *drive, const struct sp_run_options *options,
                             const struct sp_run_hook *hook, struct sp_result *out, struct sp_complaints *complaints)
{
    double tolerance = options->tolerance > 0.0 ? options->tolerance : drive->design->solver.tolerance;
    const struct sp_sink *sink = options->sink;
    for (int left = 2;; --left, tolerance *= 0.1) {
        struct sp_complaints said = {0};
        bool open = false;
        enum sp_status status = attempt(drive, options, hook, tolerance, out, &said, &open);
        bool last = !open || left == 0 || (sink && !(sink->again && sink->again(sink->context)));
        if (last) sp_complaints_copy(&said, complaints);
        else sp_result_free(out);
        sp_complaints_free(&said);
        if (last) return status;
    }
}

enum sp_status sp_drive_run(const struct sp_drive *drive, const struct sp_run_options *options,
                            struct sp_result *out, struct sp_complaints *complaints)
{
    return sp_run_hooked(drive, options, NULL, out, complaints);
}

void sp_result_free(struct sp_result *r)
{
    free(r->event);
    free(r->failure);
    free(r->change);
    memset(r, 0, sizeof *r);
}

/* A change may not add or take away what is followed: the state vector is the same throughout. */
static bool same_layout(const struct sp_layout *a, const struct sp_layout *b)
{
    bool same = a->count == b->count && a->exchangers == b->exchangers && a->chained == b->chained && a->fans == b->fans &&
                a->oil == b->oil && a->gearbox == b->gearbox && a->battery == b->battery;
    for (int e = 0; same && e < a->exchangers; ++e) same = a->exchanger[e].cells == b->exchanger[e].cells;
    return same;
}

static bool build_changed(struct sp_drive *drive, struct sp_complaints *complaints)
{
    const struct sp_design *d = drive->design;
    if (!d->changes) return true;
    struct sp_place at = {.file = d->file, .path = "changes"};
    drive->changed = calloc(d->changes, sizeof *drive->changed);
    if (!drive->changed) {
        sp_complain(complaints, &at, "no memory", "room for the changed designs", NULL);
        return false;
    }
    for (size_t i = 0; i < d->changes; ++i) {
        drive->changes = i + 1;
        if (!sp_circuit_build(d->change[i].to, &drive->changed[i], complaints)) return false;
        if (same_layout(&drive->circuit.layout, &drive->changed[i].layout)) continue;
        sp_complain(complaints, &at, d->change[i].text, "a change that adds or takes away no core, fan, oil or battery", NULL);
        return false;
    }
    return true;
}

struct sp_drive *sp_drive_build(struct sp_units *u, const struct sp_design *d, struct sp_complaints *complaints,
                                struct sp_complaints *cautions)
{
    struct sp_drive *drive = calloc(1, sizeof *drive);
    if (!drive) {
        struct sp_place at = {.file = d->file};
        sp_complain(complaints, &at, "no memory", "room for a drive", NULL);
        return NULL;
    }
    drive->design = d;
    bool good = sp_circuit_build(d, &drive->circuit, complaints) && build_changed(drive, complaints);
    good = sp_schedule_build(u, d, &drive->schedule, complaints, cautions) == SP_OK && good;
    if (good) return drive;
    sp_drive_free(drive);
    return NULL;
}

void sp_drive_free(struct sp_drive *drive)
{
    if (!drive) return;
    sp_circuit_free(&drive->circuit);
    for (size_t i = 0; i < drive->changes; ++i) sp_circuit_free(&drive->changed[i]);
    free(drive->changed);
    sp_schedule_free(&drive->schedule);
    free(drive);
}

struct sp_work sp_drive_work(const struct sp_drive *drive)
{
    const struct sp_schedule *s = &drive->schedule;
    return (struct sp_work){s->power_from_road, s->work.wheel, s->work.kinetic, s->work.potential, s->work.drag,
                            s->work.rolling, s->work.brakes};
}
