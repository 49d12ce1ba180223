/* The pieces of a duct. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/duct_element.h"

#include <math.h>

#include "part/inlet.h"

/* Face velocity [m/s] below which quadratic losses turn linear, so that the flow's answer to pressure stays
 * finite at nil flow. At 1 m/s it changes a loss by 5e-7. */
static const double laminar_floor = 1e-3;

/* Face velocity [m/s] over which the fan's air changes from hot to fresh as the flow turns. */
static const double creeping = 0.02;

struct sp_duct_problem sp_duct_pose(const struct sp_duct *d, const struct sp_duct_inputs *in)
{
    struct sp_duct_problem p = {.duct = d, .in = in, .density = in->pressure / (in->R * in->temperature)};
    double left = sqrt(fmax(in->wake, 0.0)), across = in->cross_wind * left;
    p.speed = in->speed * left;
    p.head = 0.5 * p.density * p.speed * p.speed;
    p.across = 0.5 * p.density * across * across;
    /* A wind from behind leaves the inlet in the lee. */
    p.recovery = in->speed >= 0.0 ? sp_inlet_recovery(&d->design.inlet, 1.0) : 0.0;
    p.floor = laminar_floor;
    return p;
}

double sp_duct_available(const struct sp_duct_problem *p, double m)
{
    const struct sp_inlet *inlet = &p->duct->design.inlet;
    if (!(inlet->recovery_table.rows && p->speed > 0.0)) return p->recovery * p->head;
    return sp_inlet_recovery(inlet, m / (p->density * p->duct->inlet_area * p->speed)) * p->head;
}

double sp_duct_back(const struct sp_duct_problem *p, size_t exit)
{
    double Cp = p->duct->design.exit[exit].pressure_coefficient, cos_a = p->duct->cos_angle[exit];
    double along = p->in->speed >= 0.0 ? Cp : cos_a * cos_a;
    return along * p->head + Cp * p->across;
}

double sp_duct_back_leak(const struct sp_duct_problem *p)
{
    double Cp = p->duct->design.outside.pressure_coefficient;
    return Cp * ((p->in->speed >= 0.0 ? p->head : 0.0) + p->across);
}

double sp_duct_head(const struct sp_duct_problem *p, double m, double rho, double area)
{
    return sp_duct_head_of(p, m, rho, area, 1.0);
}

double sp_duct_head_of(const struct sp_duct_problem *p, double m, double rho, double area, double share)
{
    double floor = p->density * p->duct->section * p->floor * share;
    return fabs(m) * sqrt(m * m + floor * floor) / (2.0 * rho * area * area);
}

struct sp_inlet_loss sp_duct_inlet_loss(const struct sp_duct_problem *p, double m, double rho)
{
    const struct sp_inlet *inlet = &p->duct->design.inlet;
    double area = p->duct->inlet_area, head = sp_duct_head(p, m, rho, area);
    double lip = m < 0.0 ? head : sp_lip_loss(inlet->lip_loss, rho, m / (rho * area), fmax(p->speed, 0.0));
    return (struct sp_inlet_loss){lip, inlet->screen * head, p->duct->diffuser_loss * head};
}

struct sp_core_loss sp_duct_core_loss(const struct sp_duct_problem *p, const struct sp_core_ready *core,
                                      double m, double face, double T_in, double T_out, double rho_in,
                                      double rho_out)
{
    double floor = p->density * p->floor, G = fabs(m) / face;
    double lifted = sqrt(G * G + floor * floor);
    if (G == 0.0) return (struct sp_core_loss){0.0, 0.0};
    struct sp_core_loss loss = sp_core_air_loss(core, lifted, T_in, T_out, rho_in, rho_out);
    loss.core *= G / lifted;
    loss.heating *= G / lifted;
    return loss;
}

double sp_duct_fan(const struct sp_duct_problem *p, int i, double m, double before, double behind)
{
    const struct sp_fan *fan = &p->duct->design.fan[i];
    double ahead = fmin(fmax(0.5 + 0.5 * m / (p->density * p->duct->section * creeping), 0.0), 1.0);
    if (fan->before_core) ahead = 1.0 - ahead;
    double cold = fan->before_core ? before : behind, hot = fan->before_core ? behind : before;
    return sp_fan_pressure(&p->duct->fan[i], p->in->fan_speed[i], m, cold + (hot - cold) * ahead);
}

double sp_duct_exit_loss(double loss, double m, double head)
{
    return (m >= 0.0 ? loss : loss + SP_REVERSE_ENTRY) * head;
}

void sp_duct_add_outside(const struct sp_duct_problem *p, double inlet_velocity, struct sp_duct_state *out)
{
    const struct sp_duct_design *d = &p->duct->design;
    if (d->inlet.spill && p->speed > 0.0) {
        double ratio = inlet_velocity / p->speed;
        out->spill_drag = sp_spill_drag(p->head, p->duct->inlet_area, ratio, d->inlet.lip_suction);
        out->drag += out->spill_drag;
    }
    if (d->interference != 0.0) out->drag += copysign(p->head, p->speed) * d->interference / p->duct->count;
}

double sp_duct_thrust(double m, double total, double rho, double tau, double cos_a)
{
    if (!(m > 0.0 && total > 0.0 && tau > 0.0)) return 0.0;
    double v = sqrt(2.0 * total / rho);
    return m * v * (1.0 - 1.0 / sqrt(tau)) * cos_a;
}

struct sp_station sp_duct_station(const struct sp_duct_problem *p, double m, double total, double T,
                                  double area)
{
    double rho = p->in->pressure / (p->in->R * T);
    double v = m / (rho * area);
    return (struct sp_station){p->in->pressure + total, p->in->pressure + total - 0.5 * rho * v * v, rho, T,
                               v};
}
