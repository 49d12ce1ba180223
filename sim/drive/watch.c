/* Watched conditions. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/watch.h"

#include <math.h>

#include "circuit/failing.h"

/* Kelvin that the wax must move back before the play counts as taken up: keeps a crossing off the very
 * point at which the wax turned. */
static const double slack = 1e-4;

/* m3 of liquid: less than a millilitre is the seat's own weeping. */
static const double lost_least = 1e-6;

static const double watts_a_kelvin = 1e3; /* makes a load and a temperature comparable; where it crosses nil is the same */

static const double nearly_all = 0.95; /* of the tank's liquid gone: empty; what is left only drips away */

const struct sp_watch_events sp_watch_event[SP_WATCH_KINDS] = {
    [SP_W_FAN] = {SP_EVENT_KINDS, SP_EVENT_KINDS},
    [SP_W_PLAY] = {SP_EVENT_KINDS, SP_EVENT_KINDS},
    [SP_W_PLAY_SHUT] = {SP_EVENT_KINDS, SP_EVENT_KINDS},
    [SP_W_OPENS] = {SP_EV_THERMOSTAT_OPENS, SP_EV_THERMOSTAT_SHUT},
    [SP_W_FULL] = {SP_EV_THERMOSTAT_FULL, SP_EV_THERMOSTAT_REGULATES},
    [SP_W_CAP] = {SP_EV_CAP_OPENS, SP_EV_CAP_SHUTS},
    [SP_W_COOLANT] = {SP_EV_COOLANT_OVER, SP_EV_COOLANT_BACK},
    [SP_W_GAUGE] = {SP_EV_GAUGE_OVER, SP_EV_GAUGE_BACK},
    [SP_W_METAL] = {SP_EV_METAL_OVER, SP_EV_METAL_BACK},
    [SP_W_MARGIN] = {SP_EV_BOIL_MARGIN_UNDER, SP_EV_BOIL_MARGIN_BACK},
    [SP_W_BOIL] = {SP_EV_BOILING, SP_EV_BOILING_ENDS},
    [SP_W_LOST] = {SP_EV_LOST, SP_EVENT_KINDS},
    [SP_W_TIER] = {SP_EVENT_KINDS, SP_EVENT_KINDS}, /* as many as there are tiers: sp_watch_info */
    [SP_W_COLD_COOLANT] = {SP_EV_COLD_COOLANT, SP_EV_COLD_COOLANT_ENDS},
    [SP_W_COLD_OIL] = {SP_EV_COLD_OIL, SP_EV_COLD_OIL_ENDS},
    [SP_W_LOCAL] = {SP_EV_LOCAL, SP_EV_LOCAL_ENDS},
    [SP_W_EMPTY] = {SP_EV_EMPTY, SP_EV_EMPTY_BACK},
    [SP_W_CAN] = {SP_EV_CAN, SP_EV_CAN_BACK},
    [SP_W_CAVITATES] = {SP_EV_CAVITATES, SP_EV_CAVITATION_ENDS},
    [SP_W_CURRENT] = {SP_EV_CURRENT, SP_EV_CURRENT_BACK},
    [SP_W_FLAT] = {SP_EV_FLAT, SP_EV_FLAT_BACK},
    [SP_W_PULSE] = {SP_EVENT_KINDS, SP_EVENT_KINDS},
};

/* ---- the values ------------------------------------------------------------------------------------- */

static double fan_watch(const struct sp_circuit *c, const struct sp_modes *m, const double *y, int kind)
{
    if (kind >= c->fans) return 1.0;
    const struct sp_fan *f = c->fan[kind].design;
    double T = sp_circuit_place(c, f->sensor, y);
    if (f->law == SP_FAN_SWITCHED) return T - (m->fan_on[kind] ? f->off : f->on);
    return f->law == SP_FAN_PROPORTIONAL ? T - f->from : 1.0;
}

static void play_watch(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *m, const double *y,
                       const struct sp_coupling *k, double g[])
{
    const struct sp_thermostat *t = &c->design->thermostat;
    g[SP_W_PLAY] = g[SP_W_PLAY_SHUT] = 1.0;
    if (t->none || t->restrictor > 0.0 || !(t->hysteresis > 0.0)) return;
    double wax = y[SP_Y_WAX];
    if (m->play == SP_PLAY_HELD) {
        g[SP_W_PLAY] = wax - m->held - slack;
        g[SP_W_PLAY_SHUT] = wax - m->held + t->hysteresis + slack;
    } else {
        g[SP_W_PLAY] = sp_circuit_wax_sees(c, in, y, k) - wax; /* its sign is the wax's direction */
    }
}

/* A thermostat that a map heats opens earlier; a plate in its place does not open. */
static void lift_watch(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *m,
                       const double *y, double g[])
{
    const struct sp_thermostat *t = &c->design->thermostat;
    g[SP_W_OPENS] = g[SP_W_FULL] = -1.0;
    if (t->none || t->restrictor > 0.0) return;
    double effective = sp_thermostat_effective(t, m->play, y[SP_Y_WAX], m->held) +
                       sp_thermostat_mapped(t, in->in[SP_IN_POWER]);
    g[SP_W_OPENS] = effective - t->opens;
    g[SP_W_FULL] = effective - t->full;
}

static double over(double value, double limit)
{
    return isfinite(limit) ? value - limit : -1.0;
}

static double limit_of(const struct sp_limits *l, int of, int tier)
{
    const struct sp_tiers *const all[] = {&l->coolant, &l->gauge, &l->metal, &l->oil, &l->gearbox, &l->charge};
    return tier == 0 ? all[of]->caution : (tier == 1 ? all[of]->alarm : all[of]->stop);
}

/* NAN where the car has no such thing. */
static double limited(const struct sp_circuit *c, const struct sp_inputs *in, const double *y, int of)
{
    switch (of) {
    case SP_LIMITED_COOLANT: return y[SP_Y_JACKET];
    case SP_LIMITED_GAUGE: return y[SP_Y_GAUGE] + c->design->gauge.offset;
    case SP_LIMITED_METAL: return y[SP_Y_METAL];
    case SP_LIMITED_OIL: return c->layout.oil >= 0 ? y[c->layout.oil] : NAN;
    case SP_LIMITED_GEARBOX: return c->layout.gearbox >= 0 ? y[c->layout.gearbox] : NAN;
    default: return sp_circuit_charge_out(c, in, y);
    }
}

static double local_margin(const struct sp_circuit *c, const double *y, const struct sp_coupling *k, double tank)
{
    const struct sp_coolant *f = &c->design->coolant.fluid;
    double pressure = fmin(fmax(tank + k->loop.rise - k->loop.jacket_drop, 1.0e3), 4.99e6); /* of the vapour curve */
    double flux = k->jacket_conductance * (y[SP_Y_METAL] - y[SP_Y_JACKET]) / c->design->engine.wetted_area;
    return sp_local_boil_margin(pressure, sp_coolant_boiling(f, pressure), y[SP_Y_METAL], flux);
}

static double cold(const struct sp_limits *l, const struct sp_engine *e, double power, double least, double T)
{
    double load = isfinite(l->load) ? l->load : 0.2 * e->rated_power;
    if (!isfinite(least) || !isfinite(load)) return -1.0;
    return fmin(least - T, (power - load) / watts_a_kelvin);
}

static double further(const struct sp_watch_one *w, const struct sp_circuit *c, const struct sp_inputs *in,
                      const struct sp_modes *modes, double t, const double *y, const struct sp_coupling *k,
                      const struct sp_watched *seen)
{
    const struct sp_design *d = c->design;
    const struct sp_limits *l = &d->limits;
    double power = in->in[SP_IN_POWER];
    switch (w->kind) {
    case SP_W_FAN: return fan_watch(c, modes, y, w->index);
    case SP_W_TIER: return over(limited(c, in, y, w->index), limit_of(l, w->index, w->tier));
    case SP_W_COLD_COOLANT: return cold(l, &d->engine, power, l->least_coolant, y[SP_Y_JACKET]);
    case SP_W_COLD_OIL: return c->layout.oil < 0 ? -1.0 : cold(l, &d->engine, power, l->least_oil, y[c->layout.oil]);
    case SP_W_LOCAL: return isfinite(seen->local_margin) ? -seen->local_margin : -1.0;
    case SP_W_CAN: return d->tank.catch_can > 0.0 ? y[SP_Y_LOST] - d->tank.catch_can : -1.0;
    case SP_W_CAVITATES: /* a pump that stands does not, however hot its inlet */
        return k->loop.npsh_required > 0.0 ? k->loop.npsh_required - k->loop.npsh_available : -1.0;
    case SP_W_CURRENT: {
        const struct sp_fan *f = c->fan[w->index].design;
        if (!(f->current_limit > 0.0)) return -1.0;
        return sp_fan_current(f, y[c->layout.fan[w->index]], sp_circuit_volts(c, in)) - f->current_limit;
    }
    case SP_W_FLAT: return y[c->layout.battery] - d->electrics.battery * d->electrics.voltage_stopped;
    default: /* the pulses of a pump, where it may run and is cool enough to pulse */
        return in->flags & SP_FLAG_PUMP && y[SP_Y_JACKET] < d->pump.target ? t - modes->pulse_until : -1.0;
    }
}

void sp_watch(const struct sp_watch_list *list, const struct sp_circuit *c, const struct sp_inputs *in,
              const struct sp_modes *modes, double t, const double *y, const struct sp_coupling *k,
              struct sp_watched *out)
{
    const struct sp_design *d = c->design;
    double *g = out->g;
    g[SP_W_FAN] = fan_watch(c, modes, y, 0);
    play_watch(c, in, modes, y, k, g);
    lift_watch(c, in, modes, y, g);
    struct sp_tank_inputs tank;
    out->tank_pressure = sp_circuit_tank(c, in, y, &tank).pressure;
    g[SP_W_CAP] = out->tank_pressure - tank.ambient - d->tank.cap;
    g[SP_W_COOLANT] = over(y[SP_Y_JACKET], d->limits.coolant.stop);
    g[SP_W_GAUGE] = over(y[SP_Y_GAUGE] + d->gauge.offset, d->limits.gauge.stop);
    g[SP_W_METAL] = over(y[SP_Y_METAL], d->limits.metal.stop);
    out->boil_margin = sp_circuit_boil_margin(c, in, y, k, out->tank_pressure);
    g[SP_W_MARGIN] = isfinite(d->limits.boil_margin) ? d->limits.boil_margin - out->boil_margin : -1.0;
    g[SP_W_BOIL] = -out->boil_margin;
    g[SP_W_LOST] = y[SP_Y_LOST] - lost_least;
    g[SP_W_EMPTY] = sp_circuit_missing(c, y) - nearly_all * sp_circuit_in_tank(c, y);
    out->local_margin = list->local && d->engine.wetted_area > 0.0 ? local_margin(c, y, k, out->tank_pressure) : NAN;
    out->head_left = k->loop.head_factor;
    for (int w = SP_WATCHES; w < list->count; ++w) g[w] = further(&list->of[w], c, in, modes, t, y, k, out);
}

void sp_watch_turn_play(const struct sp_thermostat *t, double wax, bool shut_side, struct sp_modes *modes)
{
    if (modes->play == SP_PLAY_HELD) {
        modes->play = shut_side ? SP_PLAY_SHUTTING : SP_PLAY_OPENING;
        return;
    }
    modes->held = sp_thermostat_effective(t, modes->play, wax, modes->held);
    modes->play = SP_PLAY_HELD;
}
