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
    sp_watch(r->circuit, &in, &r->modes, y, &k, out);
    return 0;
}

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
    if (!sp_integrator_look_back(r->integrator, low, 0, r->scratch)) return;
    struct sp_inputs in;
    sp_schedule_at(r->schedule, r->segment, low, &in);
    track(&r->coolant, r->scratch[SP_Y_JACKET], low);
    track(&r->over_ambient, r->scratch[SP_Y_JACKET] - in.in[SP_IN_AMBIENT], low);
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
    return true;
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

