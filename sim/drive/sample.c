/* Samples of everything. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "drive/run.h"

enum sp_status sp_run_couple(struct sp_run *r, const struct sp_inputs *in, const double *y, struct sp_coupling *k)
{
    struct sp_signals s;
    sp_circuit_signals(r->circuit, in, y, &s);
    return sp_circuit_couple(r->circuit, in, &r->modes, &s, &r->looking, k);
}

static void temperatures(const struct sp_run *r, const struct sp_inputs *in, const double *y,
                         const struct sp_coupling *k, double *v)
{
    const struct sp_layout *l = &r->circuit->layout;
    v[SP_CH_ENGINE_OUT] = y[SP_Y_JACKET];
    v[SP_CH_RADIATOR_IN] = y[l->core - 1];
    v[SP_CH_RADIATOR_OUT] = y[l->core + l->cells - 1];
    v[SP_CH_METAL] = y[SP_Y_METAL];
    v[SP_CH_TANK] = y[SP_Y_TANK];
    v[SP_CH_WAX] = y[SP_Y_WAX];
    v[SP_CH_GAUGE] = y[SP_Y_GAUGE] + r->drive->design->gauge.offset;
    v[SP_CH_PUMP_IN] = sp_circuit_pump_inlet(r->circuit, in, y, k);
}

static void flows(const struct sp_run *r, const struct sp_inputs *in, const double *y, const struct sp_coupling *k,
                  double *v)
{
    v[SP_CH_LIFT] = k->lift;
    v[SP_CH_PUMP_FLOW] = k->loop.pump;
    v[SP_CH_RADIATOR_FLOW] = k->loop.radiator;
    v[SP_CH_BYPASS_FLOW] = k->loop.bypass;
    v[SP_CH_AIR_FLOW] = 0.0;
    for (int i = 0; i < r->circuit->runs; ++i) v[SP_CH_AIR_FLOW] += r->circuit->run[i].copies * k->duct[i].mass_flow;
    v[SP_CH_FACE_VELOCITY] = k->duct[0].face_velocity;
    v[SP_CH_EXIT_VELOCITY] = k->duct[0].exit_velocity;
    v[SP_CH_AIR_OUT] = in->in[SP_IN_AMBIENT] * k->duct[0].temperature_ratio;
    v[SP_CH_FAN_SPEED] = y[SP_Y_FAN];
    v[SP_CH_FAN_PRESSURE] = k->duct[0].fan_pressure;
    v[SP_CH_FAN_POWER] = sp_circuit_fan_power(r->circuit, in, y);
    v[SP_CH_DRAG] = sp_circuit_drag(r->circuit, k);
}

enum sp_status sp_run_sample(struct sp_run *r, size_t k, double t, const double *y, struct sp_sample *out)
{
    struct sp_inputs in;
    struct sp_coupling coupling;
    struct sp_watched seen;
    double *v = out->value, *rates = r->scratch + r->circuit->layout.count;
    sp_schedule_at(r->schedule, k, t, &in);
    enum sp_status status = sp_run_couple(r, &in, y, &coupling);
    if (status) return status;
    sp_circuit_rates(r->circuit, &in, &r->modes, y, &coupling, rates);
    sp_watch(&r->watches, r->circuit, &in, &r->modes, t, y, &coupling, &seen);
    out->fitted = r->fitted;
    v[SP_CH_TIME] = t;
    v[SP_CH_DISTANCE] = in.distance;
    v[SP_CH_SPEED] = in.in[SP_IN_SPEED];
    v[SP_CH_POWER] = in.in[SP_IN_POWER];
    v[SP_CH_ENGINE_SPEED] = in.in[SP_IN_ENGINE_SPEED];
    v[SP_CH_AMBIENT] = in.in[SP_IN_AMBIENT];
    v[SP_CH_MEASURED] = in.in[SP_IN_MEASURED];
    temperatures(r, &in, y, &coupling, v);
    flows(r, &in, y, &coupling, v);
    v[SP_CH_TANK_PRESSURE] = seen.tank_pressure;
    v[SP_CH_BOIL_MARGIN] = seen.boil_margin;
    v[SP_CH_LOST] = y[SP_Y_LOST];
    v[SP_CH_HEAT_IN] = rates[SP_Y_HEAT_IN];
    v[SP_CH_HEAT_OUT] = rates[SP_Y_HEAT_AIR];
    v[SP_CH_HEAT_SKIN] = rates[SP_Y_HEAT_SKIN];
    sp_run_sample_fitted(r, &in, y, &coupling, v);
    v[SP_CH_LOCAL_MARGIN] = seen.local_margin;
    return SP_OK;
}
