/* The coolant loop. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/loop.h"

#include "part/fan.h"

#include <gsl/gsl_math.h>
#include <math.h>
#include <string.h>

static const double soft_pressure = 1.0;         /* Pa, below which the bypass answers linearly */
static const double still = 1e-4;                /* pump speed, over rated, that counts as standing */
static const double reference_density = 1000.0;
static const double tight = 1e-6;                /* share of the full opening that a valve without leak still has */

/* What is fixed while one split is sought. */
struct split {
    const struct sp_loop *loop;
    double speed, lift;
    double rho_hot, mu_hot, rho_cool, mu_cool, T_cool;
    double bypass_gain; /* m3/s per sqrt(Pa) */
    double bleed;       /* share of the pump's flow */
};

/* Fixed pipe: wall friction with Blasius' factor (laminar below), and bends shared over the two hoses. */
static double hose_drop(double length, double bore, double bends, double flow, double rho, double mu)
{
    if (!(flow > 0.0)) return 0.0;
    double area = M_PI / 4.0 * bore * bore, u = flow / area, re = rho * u * bore / mu;
    double factor = fmax(64.0 / re, 0.3164 / sqrt(sqrt(re)));
    return (factor * length / bore + bends) * 0.5 * rho * u * u;
}

static double valve_drop(const struct split *s, double flow)
{
    const struct sp_thermostat *t = &s->loop->design->thermostat;
    if (t->none) return 0.0;
    double area = s->loop->valve_full * fmax(s->lift + t->leak * (1.0 - s->lift), tight);
    double u = flow / area;
    return 0.5 * s->rho_hot * u * u;
}

static double radiator_drop(const struct split *s, double flow)
{
    const struct sp_hoses *h = &s->loop->design->hoses;
    const struct sp_coolant *fluid = &s->loop->design->coolant.fluid;
    return valve_drop(s, flow) +
           hose_drop(h->length_out, h->bore_out, 0.5 * h->bends, flow, s->rho_hot, s->mu_hot) +
           hose_drop(h->length_back, h->bore_back, 0.5 * h->bends, flow, s->rho_cool, s->mu_cool) +
           sp_core_coolant_drop(s->loop->core, fluid, flow, s->T_cool);
}

static double bypass_flow(const struct split *s, double drop)
{
    return s->bypass_gain * drop / sqrt(sqrt(drop * drop + soft_pressure * soft_pressure));
}

static struct sp_loop_state state_at(const struct split *s, double radiator, double *parallel)
{
    struct sp_loop_state st = {.radiator = radiator};
    *parallel = copysign(radiator_drop(s, fabs(radiator)), radiator);
    st.bypass = bypass_flow(s, *parallel);
    st.pump = (st.radiator + st.bypass) / (1.0 - s->bleed);
    st.bleed = s->bleed * st.pump;
    st.rise = sp_curve_at(&s->loop->pump, s->speed, st.pump);
    st.jacket_drop = copysign(sp_resistance_drop(&s->loop->design->hoses.jacket, true, fabs(st.pump), s->rho_hot,
                                                 s->mu_hot), st.pump);
    return st;
}

static double surplus(double radiator, const void *context)
{
    double parallel;
    struct sp_loop_state st = state_at(context, radiator, &parallel);
    return st.rise - st.jacket_drop - parallel;
}

/* The bypass disc shuts as the main valve opens; without a thermostat the bypass is blocked. */
static double bypass_gain(const struct sp_design *d, double lift, double density)
{
    if (d->thermostat.none) return 0.0;
    double open = d->thermostat.bypass_shut > 1.0 ? 1.0 : fmax(1.0 - lift / d->thermostat.bypass_shut, 0.0);
    return open * d->hoses.bypass.flow * sqrt(reference_density / (density * d->hoses.bypass.drop));
}

enum sp_status sp_loop_solve(const struct sp_loop *l, double speed, double lift, double hot, double cool,
                             struct sp_guess *guess, struct sp_loop_state *out)
{
    const struct sp_design *d = l->design;
    const struct sp_coolant *fluid = &d->coolant.fluid;
    memset(out, 0, sizeof *out);
    if (!(speed > still)) return SP_OK;
    struct split s = {.loop = l, .speed = speed, .lift = lift, .T_cool = cool, .bleed = d->tank.bleed};
    s.rho_hot = sp_coolant_density(fluid, hot);
    s.mu_hot = sp_coolant_viscosity(fluid, hot);
    s.rho_cool = sp_coolant_density(fluid, cool);
    s.mu_cool = sp_coolant_viscosity(fluid, cool);
    s.bypass_gain = bypass_gain(d, lift, s.rho_hot);
    double typical = 0.5 * speed * l->pump.free_flow;
    if (!(guess->x > 0.0)) *guess = (struct sp_guess){0.01 * typical, 0.0};
    enum sp_status status = sp_root_falling(surplus, &s, typical, guess);
    if (status) return status;
    double parallel;
    *out = state_at(&s, guess->x, &parallel);
    return SP_OK;
}

double sp_pump_speed(const struct sp_design *d, double engine_speed, bool engine_on, bool allowed)
{
    const struct sp_pump *p = &d->pump;
    if (!p->electric) return engine_on ? p->ratio * engine_speed / p->speed : 0.0;
    if (!allowed) return 0.0;
    double volts = engine_on ? d->electrics.voltage_running : d->electrics.voltage_stopped;
    return sp_motor_speed(volts, p->rated_voltage);
}

bool sp_loop_build(const struct sp_design *d, const struct sp_core_ready *core, struct sp_loop *out,
                   const struct sp_place *at, struct sp_complaints *complaints)
{
    *out = (struct sp_loop){.design = d, .core = core};
    out->valve_full = d->thermostat.discharge * M_PI * d->thermostat.bore * d->thermostat.lift;
    return sp_curve_build(&d->pump.curve, &out->pump, at, complaints);
}

void sp_loop_free(struct sp_loop *l)
{
    sp_curve_free(&l->pump);
}
