/* What a run keeps of where it went: peaks and samples. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "drive/run.h"

int sp_run_look(struct sp_run *r, double t, const double *y, struct sp_watched *out)
{
    struct sp_inputs in;
    struct sp_signals s;
    struct sp_coupling k; /* watches look at the coolant only */
    sp_schedule_at(r->schedule, r->segment, t, &in);
    sp_circuit_signals(r->circuit, &in, y, &s);
    if (sp_circuit_split(r->circuit, &in, &r->modes, &s, &r->looking.loop, &k)) return -1;
    if (r->watches.local) sp_circuit_fluids(r->circuit, &in, &s, &k);
    sp_watch(&r->watches, r->circuit, &in, &r->modes, t, y, &k, out);
    return 0;
}

static void track(struct sp_tracked *t, double value, double time)
{
    if (value > t->best) *t = (struct sp_tracked){value, time};
}

/* How far what is beyond its limit is beyond it. */
static void track_spells(struct sp_run *r, const double *y)
{
    for (int w = 0; w < r->watches.count; ++w) {
        struct sp_spell *s = &r->spell[w];
        if (!r->high[w] || !isfinite(s->first)) continue;
        double excess = sp_watch_excess(r->circuit, &r->watches.of[w], y, r->seen.g[w]);
        if (!(excess > s->worst)) continue;
        s->worst = excess;
        s->worst_time = r->time;
    }
}

/* How near each limit is, as it now stands. */
static void track_rooms(struct sp_run *r, const struct sp_inputs *in, const double *y)
{
    const struct sp_layout *l = &r->circuit->layout;
    double limit[SP_ROOMS];
    const double now[SP_ROOMS] = {y[SP_Y_JACKET],
                                  y[SP_Y_GAUGE] + r->circuit->design->gauge.offset,
                                  y[SP_Y_METAL],
                                  r->seen.boil_margin,
                                  l->oil >= 0 ? y[l->oil] : NAN,
                                  l->gearbox >= 0 ? y[l->gearbox] : NAN,
                                  sp_circuit_charge_out(r->circuit, in, y)};
    sp_run_limits(&r->circuit->design->limits, limit);
    for (int i = 0; i < SP_ROOMS; ++i) {
        double left = i == SP_ROOM_BOIL ? now[i] - limit[i] : limit[i] - now[i];
        if (left < r->room[i].left) r->room[i] = (struct sp_room){limit[i], now[i], left};
    }
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
    if (!sp_integrator_look_back(r->integrator, low, 0, r->scratch)) return;
    struct sp_inputs in;
    sp_schedule_at(r->schedule, r->segment, low, &in);
    track(&r->coolant, r->scratch[SP_Y_JACKET], low);
    track(&r->over_ambient, r->scratch[SP_Y_JACKET] - in.in[SP_IN_AMBIENT], low);
}

static const double spill_step = 0.5; /* s */

/* Work of spilled air and of the heat's thrust, by trapezoid over rows, or half seconds where they are longer:
 * nothing feeds back from them, and the drag itself, which holds both, is integrated with the state. */
static bool track_spill(struct sp_run *r, const struct sp_inputs *in, const double *y)
{
    struct sp_coupling k;
    double power = 0.0, thrust = 0.0, half = 0.5 * (r->time - r->spill.time);
    if (!r->fitted[SP_CH_SPILL]) return true;
    bool ends = r->time >= r->schedule->time[r->segment + 1];
    if (r->time - r->spill.time < spill_step && !ends) return true;
    if (sp_run_couple(r, in, y, &k)) return false;
    for (int i = 0; i < r->circuit->runs; ++i) {
        power += r->circuit->run[i].copies * k.duct[i].spill_drag * in->in[SP_IN_SPEED];
        thrust += r->circuit->run[i].copies * k.duct[i].thrust * in->in[SP_IN_SPEED];
    }
    r->result->drag.spill += half * (power + r->spill.power);
    r->result->drag.thrust += half * (thrust + r->spill.thrust);
    r->spill.time = r->time;
    r->spill.power = power;
    r->spill.thrust = thrust;
    return true;
}

bool sp_run_track(struct sp_run *r)
{
    const double *y = sp_integrator_state(r->integrator);
    double t = r->time;
    struct sp_inputs in;
    sp_schedule_at(r->schedule, r->segment, t, &in);
    if (r->seen_at != t) {
        if (sp_run_look(r, t, y, &r->seen)) return false;
        r->seen_at = t;
    }
    track(&r->coolant, y[SP_Y_JACKET], t);
    track(&r->gauge, y[SP_Y_GAUGE] + r->drive->design->gauge.offset, t);
    track(&r->metal, y[SP_Y_METAL], t);
    track(&r->pressure, r->seen.tank_pressure, t);
    track(&r->margin, -r->seen.boil_margin, t);
    track(&r->over_ambient, y[SP_Y_JACKET] - in.in[SP_IN_AMBIENT], t);
    const struct sp_layout *l = &r->circuit->layout;
    if (l->oil >= 0) track(&r->oil, y[l->oil], t);
    if (l->gearbox >= 0) track(&r->gearbox, y[l->gearbox], t);
    if (r->circuit->design->charge.fitted) track(&r->charge, sp_circuit_charge_out(r->circuit, &in, y), t);
    if (r->circuit->design->pump.npsh > 0.0) track(&r->head_lost, 1.0 - r->seen.head_left, t);
    if (r->drive->changes) track_rooms(r, &in, y);
    track_spells(r, y);
    return track_spill(r, &in, y);
}

enum sp_status sp_run_give_sample(struct sp_run *r, double t, const double *y)
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
        enum sp_status status = sp_run_give_sample(r, due, r->before);
        if (status) return status;
    }
}

enum sp_status sp_run_after_step(struct sp_run *r, double from)
{
    enum sp_status status = sample_step(r);
    if (status) return status;
    if (!sp_integrator_look_back(r->integrator, r->time, 1, r->scratch)) return SP_NUMERICS;
    double slope = r->scratch[SP_Y_JACKET];
    track_summit(r, from, slope);
    r->slope_before = slope;
    return sp_run_track(r) ? SP_OK : SP_NUMERICS;
}

