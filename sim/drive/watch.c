/* Watched conditions. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/watch.h"

#include <math.h>

/* Kelvin that the wax must move back before the play counts as taken up: keeps a crossing off the very
 * point at which the wax turned. */
static const double slack = 1e-4;

const struct sp_watch_events sp_watch_event[SP_WATCHES] = {
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
};

static double fan_watch(const struct sp_circuit *c, const struct sp_modes *m, const double *y)
{
    const struct sp_fan *f = &c->design->duct[0].fan[0];
    if (!f->fitted) return 1.0;
    double T = sp_circuit_place(c, f->sensor, y);
    if (f->law == SP_FAN_SWITCHED) return T - (m->fan_on[0] ? f->off : f->on);
    return f->law == SP_FAN_PROPORTIONAL ? T - f->from : 1.0;
}

static void play_watch(const struct sp_thermostat *t, const struct sp_modes *m, const double *y, double g[])
{
    g[SP_W_PLAY] = g[SP_W_PLAY_SHUT] = 1.0;
    if (t->none || !(t->hysteresis > 0.0)) return;
    double wax = y[SP_Y_WAX];
    if (m->play == SP_PLAY_HELD) {
        g[SP_W_PLAY] = wax - m->held - slack;
        g[SP_W_PLAY_SHUT] = wax - m->held + t->hysteresis + slack;
    } else {
        g[SP_W_PLAY] = y[SP_Y_JACKET] - wax; /* its sign is the wax's direction */
    }
}

static double over(double value, double limit)
{
    return isfinite(limit) ? value - limit : -1.0;
}

void sp_watch(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
              const double *y, const struct sp_coupling *k, struct sp_watched *out)
{
    const struct sp_design *d = c->design;
    double *g = out->g;
    g[SP_W_FAN] = fan_watch(c, modes, y);
    play_watch(&d->thermostat, modes, y, g);
    double effective = sp_thermostat_effective(&d->thermostat, modes->play, y[SP_Y_WAX], modes->held);
    g[SP_W_OPENS] = d->thermostat.none ? -1.0 : effective - d->thermostat.opens;
    g[SP_W_FULL] = d->thermostat.none ? -1.0 : effective - d->thermostat.full;
    struct sp_tank_inputs tank;
    out->tank_pressure = sp_circuit_tank(c, in, y, &tank).pressure;
    g[SP_W_CAP] = out->tank_pressure - tank.ambient - d->tank.cap;
    g[SP_W_COOLANT] = over(y[SP_Y_JACKET], d->limits.coolant.stop);
    g[SP_W_GAUGE] = over(y[SP_Y_GAUGE] + d->gauge.offset, d->limits.gauge.stop);
    g[SP_W_METAL] = over(y[SP_Y_METAL], d->limits.metal.stop);
    out->boil_margin = sp_circuit_boil_margin(c, y, k, out->tank_pressure);
    g[SP_W_MARGIN] = isfinite(d->limits.boil_margin) ? d->limits.boil_margin - out->boil_margin : -1.0;
    g[SP_W_BOIL] = -out->boil_margin;
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
