/* The air path: one equation in the mass flow, equation (1) of docs/model.md.
 *
 * Every loss rises with mass flow and every gain falls with it, so that the balance of total pressure is a
 * falling function of mass flow with one root, forward or reverse (given heat apart, see solve_heated).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/duct_solve.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "part/cells.h"
#include "part/diffuser.h"
#include "part/inlet.h"

/* Face velocity [m/s] below which quadratic losses turn linear, so that the flow's answer to pressure stays
 * finite at nil flow. At 1 m/s it changes a loss by 5e-7. */
static const double laminar_floor = 1e-3;

/* Face velocity [m/s] over which the fan's air changes from hot to fresh as the flow turns. */
static const double creeping = 0.02;

/* Air heated to more than this many times its temperature is no answer but a sign that the flow breaks down. */
static const double hottest_ratio = 5.0;

/* Loss of air drawn in through the exit, on the head there: a sharp edge in a wall. Common practice. */
static const double reverse_entry = 0.5;

/* All that follows from one mass flow; `balance` is total pressure gained less lost. */
struct flow {
    double tau, effectiveness, heat;
    double rho_in, rho_out;             /* density before and behind the core, in flow direction */
    double available, back;             /* Pa over ambient at the inlet, at the exit */
    double lip, screen, diffuser, fan, exit, exit_head;
    struct sp_core_loss core;
    double balance;
};

struct problem {
    const struct sp_duct *duct;
    const struct sp_duct_inputs *in;
    double density, head, speed; /* kg/m3, Pa, m/s */
    double recovery, back;       /* coefficients of total pressure at the inlet and of pressure at the exit */
    double floor;                /* m/s of face velocity; see laminar_floor */
};

static struct problem pose(const struct sp_duct *d, const struct sp_duct_inputs *in)
{
    struct problem p = {.duct = d, .in = in, .density = in->pressure / (in->R * in->temperature)};
    p.speed = in->speed * sqrt(fmax(in->wake, 0.0));
    p.head = 0.5 * p.density * p.speed * p.speed;
    bool ahead = in->speed >= 0.0;
    /* A wind from behind rams the exit, as far as it looks that way, and leaves the inlet in the lee. */
    p.recovery = ahead ? d->design.inlet.recovery : 0.0;
    p.back = ahead ? d->design.exit[0].pressure_coefficient : d->cos_angle * d->cos_angle;
    /* Given heat makes the losses of nil flow linear by itself; the floor would leave a step there. */
    p.floor = in->heat_given && in->heat > 0.0 ? 0.0 : laminar_floor;
    return p;
}

/* Head [Pa] of mass flow m in area A: m|m| / (2 rho A^2), linear below the floor. Always >= 0. */
static double head_in(const struct problem *p, double m, double rho, double area)
{
    double floor = p->density * p->duct->core.face * p->floor;
    return fabs(m) * sqrt(m * m + floor * floor) / (2.0 * rho * area * area);
}

static void heat_the_air(const struct problem *p, double m, struct flow *f)
{
    const struct sp_duct_inputs *in = p->in;
    double rate = fabs(m) * in->cp;
    if (in->heat_given) {
        f->heat = in->heat;
        f->tau = in->heat == 0.0 ? 1.0 : 1.0 + in->heat / (rate * in->temperature);
    } else if (sp_core_has_heat(&p->duct->core)) {
        double film = 0.5 * (in->temperature + in->wall[0]);
        double hA = sp_core_air_conductance(&p->duct->core, fabs(m) / p->duct->core.face, film);
        f->effectiveness = sp_cells_air_effectiveness(hA, rate);
        f->heat = rate * f->effectiveness * (in->wall[0] - in->temperature);
        f->tau = 1.0 + f->effectiveness * (in->wall[0] / in->temperature - 1.0);
    } else {
        f->tau = 1.0;
    }
    f->rho_in = p->density;
    f->rho_out = p->density / f->tau;
}

/* Loss of the core; through the floor, so that it too is linear at nil flow. */
static struct sp_core_loss through_core(const struct problem *p, double m, const struct flow *f)
{
    const struct sp_core_ready *core = &p->duct->core;
    double floor = p->density * p->floor, G = fabs(m) / core->face;
    double lifted = sqrt(G * G + floor * floor);
    if (G == 0.0) return (struct sp_core_loss){0.0, 0.0};
    struct sp_core_loss loss = sp_core_air_loss(core, lifted, p->in->temperature, f->tau * p->in->temperature,
                                                f->rho_in, f->rho_out);
    loss.core *= G / lifted;
    loss.heating *= G / lifted;
    return loss;
}

/* A fan behind the core sees hot air forwards and fresh air in reverse; between, over a creeping flow, one goes
 * over into the other, so that the balance has no step at nil flow. */
static double fan_at(const struct problem *p, double m, const struct flow *f)
{
    double ahead = fmin(fmax(0.5 + 0.5 * m / (p->density * p->duct->core.face * creeping), 0.0), 1.0);
    if (p->duct->design.fan[0].before_core) ahead = 1.0 - ahead;
    double cold = f->rho_in, hot = f->rho_out;
    return sp_fan_pressure(&p->duct->fan, p->in->fan_speed[0], m, cold + (hot - cold) * ahead);
}

static void forward(const struct problem *p, double m, struct flow *f)
{
    const struct sp_duct_design *d = &p->duct->design;
    double inlet_head = head_in(p, m, f->rho_in, d->inlet.area);
    double inlet_speed = m / (f->rho_in * d->inlet.area);
    f->lip = sp_lip_loss(d->inlet.lip_loss, f->rho_in, inlet_speed, fmax(p->speed, 0.0));
    f->screen = d->inlet.screen * inlet_head;
    f->diffuser = p->duct->diffuser_loss * inlet_head;
    f->core = through_core(p, m, f);
    f->fan = fan_at(p, m, f);
    f->exit_head = head_in(p, m, f->rho_out, d->exit[0].area);
    f->exit = d->exit[0].loss * f->exit_head;
    f->balance = f->available - f->back + f->fan - f->lip - f->screen - f->diffuser - f->core.core -
                 f->core.heating - f->exit - f->exit_head;
}

/* Air in at the exit, cold through the fan, heated from the back to the front, out of the inlet as a jet. */
static void reverse(const struct problem *p, double m, struct flow *f)
{
    const struct sp_duct_design *d = &p->duct->design;
    double inlet_head = head_in(p, m, f->rho_out, d->inlet.area);
    f->lip = inlet_head; /* the jet out of the mouth is lost */
    f->screen = d->inlet.screen * inlet_head;
    f->diffuser = p->duct->diffuser_loss * inlet_head;
    f->core = through_core(p, m, f);
    f->fan = fan_at(p, m, f);
    f->exit = (d->exit[0].loss + reverse_entry) * head_in(p, m, f->rho_in, d->exit[0].area);
    f->balance = f->available - f->back + f->fan + f->lip + f->screen + f->diffuser + f->core.core +
                 f->core.heating + f->exit;
}

static struct flow flow_at(const struct problem *p, double m)
{
    struct flow f = {.tau = 1.0, .available = p->recovery * p->head, .back = p->back * p->head};
    heat_the_air(p, m, &f);
    if (m >= 0.0) forward(p, m, &f);
    else reverse(p, m, &f);
    return f;
}

static double balance_at(double m, const void *context)
{
    /* Given heat in nil flow would be infinitely hot: its limit from either side is the unheated balance. */
    const struct problem *p = context;
    if (p->in->heat_given && m == 0.0) {
        struct sp_duct_inputs cold = *p->in;
        cold.heat = 0.0;
        struct problem q = *p;
        q.in = &cold;
        return flow_at(&q, 0.0).balance;
    }
    return flow_at(p, m).balance;
}

static void fill(const struct problem *p, double m, const struct flow *f, struct sp_duct_state *out)
{
    const struct sp_duct_design *d = &p->duct->design;
    double cos_a = p->duct->cos_angle;
    out->mass_flow = m;
    out->effectiveness = f->effectiveness;
    out->heat = f->heat;
    out->face_velocity = m / (p->density * p->duct->core.face);
    out->temperature_ratio = f->tau;
    out->exit_velocity = m / ((m >= 0.0 ? f->rho_out : f->rho_in) * d->exit[0].area);
    out->fan_pressure = f->fan;
    /* In reverse the air is swallowed from behind and leaves forwards as a jet: both are drag. */
    double jet = m >= 0.0 ? out->exit_velocity * cos_a : m / (f->rho_out * d->inlet.area);
    out->drag = fabs(m) * (p->speed - jet) - f->back * d->exit[0].area * cos_a;
    out->diffuser_stalled = p->duct->diffuser_stalled && m > 0.0;
    out->fresh = out->fan_flow[0] = m;
    out->inlet_temperature = p->in->temperature;
    out->bay_temperature = p->in->temperature * (m >= 0.0 ? f->tau : 1.0);
    out->core[0] = (struct sp_core_air){.mass_flow = m, .rate = fabs(m) * p->in->cp * f->effectiveness, .heat = f->heat,
                                        .air_in = p->in->temperature, .face_velocity = out->face_velocity,
                                        .drop = f->core.core + f->core.heating};
}

enum sp_status sp_duct_solve_from(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                  struct sp_guess *guess, struct sp_duct_state *out)
{
    struct problem p = pose(d, in);
    memset(out, 0, sizeof *out);
    double typical = p.density * d->core.face;
    if (balance_at(0.0, &p) == 0.0) { /* nothing drives: the answer is exactly nil */
        *guess = (struct sp_guess){0.0, 0.0};
        if (in->heat_given && in->heat > 0.0) return SP_INPUT;
        struct flow still = flow_at(&p, 0.0);
        fill(&p, 0.0, &still, out);
        return SP_OK;
    }
    enum sp_status status = sp_root_falling(balance_at, &p, typical, guess);
    if (status) return status;
    struct flow f = flow_at(&p, guess->x);
    fill(&p, guess->x, &f, out);
    return isfinite(out->mass_flow) && isfinite(out->heat) ? SP_OK : SP_NUMERICS;
}

/* Given heat, less air comes out hotter, and hot laminar air resists the more: below some flow the balance turns
 * back. What a duct settles to is the largest flow, on the way down from the unheated one. */
static enum sp_status solve_heated(const struct sp_duct *d, const struct sp_duct_inputs *in, double cold,
                                   struct sp_duct_state *out)
{
    struct problem p = pose(d, in);
    double typical = p.density * d->core.face, before = cold, way = cold > 0.0 ? 1.0 : -1.0;
    for (double m = cold; fabs(m) * in->cp * in->temperature * (hottest_ratio - 1.0) > in->heat; m *= 0.98) {
        if (way * balance_at(m, &p) > 0.0 || (m == cold && balance_at(m, &p) == 0.0)) {
            double root = m;
            double low = fmin(m, before), high = fmax(m, before);
            if (m != before && sp_root_between(balance_at, &p, low, high, typical, &root)) return SP_NUMERICS;
            struct flow f = flow_at(&p, root);
            fill(&p, root, &f, out);
            return SP_OK;
        }
        before = m;
    }
    return SP_INPUT;
}

enum sp_status sp_duct_solve(const struct sp_duct *d, const struct sp_duct_inputs *in, struct sp_duct_state *out)
{
    struct sp_guess guess = {0.3 * in->speed * d->core.face * in->pressure / (in->R * in->temperature), 0.0};
    if (!in->heat_given || !(in->heat > 0.0)) return sp_duct_solve_from(d, in, &guess, out);
    struct sp_duct_inputs cold = *in;
    cold.heat = 0.0;
    enum sp_status status = sp_duct_solve_from(d, &cold, &guess, out);
    return status ? status : solve_heated(d, in, out->mass_flow, out);
}

static struct sp_station station(const struct problem *p, double m, double total, double T, double area)
{
    double rho = p->in->pressure / (p->in->R * T);
    double v = m / (rho * area);
    return (struct sp_station){p->in->pressure + total, p->in->pressure + total - 0.5 * rho * v * v, rho, T, v};
}

void sp_duct_stations(const struct sp_duct *d, const struct sp_duct_inputs *in, const struct sp_duct_state *state,
                      struct sp_station s[SP_STATIONS], struct sp_duct_losses *losses)
{
    struct problem p = pose(d, in);
    double m = state->mass_flow, T2 = in->temperature, T3 = T2 * state->temperature_ratio;
    struct flow f = flow_at(&p, m);
    double face = d->core.face, inlet = d->design.inlet.area, exit = d->design.exit[0].area;
    bool ahead = m >= 0.0;
    double front = ahead ? T2 : T3, rear = ahead ? T3 : T2, way = ahead ? 1.0 : -1.0;
    /* From the front backwards; in reverse flow the losses run the other way. */
    double at_inlet = ahead ? f.available - f.lip : f.available + f.lip;
    double fan_front = d->design.fan[0].before_core ? f.fan : 0.0, fan_rear = f.fan - fan_front;
    double at_face = at_inlet - way * (f.screen + f.diffuser) + fan_front;
    double at_back = at_face - way * (f.core.core + f.core.heating);
    double at_fan = at_back + fan_rear;
    double at_exit = ahead ? at_fan - f.exit : f.back;
    s[0] = (struct sp_station){in->pressure + p.head, in->pressure, p.density, T2, p.speed};
    s[1] = station(&p, m, at_inlet, front, inlet);
    s[2] = station(&p, m, at_face, front, face);
    s[3] = station(&p, m, at_back, rear, face);
    s[4] = station(&p, m, at_fan, rear, face);
    s[5] = station(&p, m, at_exit, rear, exit);
    *losses = (struct sp_duct_losses){p.head - f.available, f.lip, f.screen, f.diffuser, f.core.core,
                                      f.core.heating, -f.fan, f.exit, f.exit_head};
}

double sp_duct_wake_drag(const struct sp_duct_state *state, const struct sp_station s[SP_STATIONS])
{
    if (state->mass_flow < 0.0) return NAN;
    double head = fmax(s[5].total_pressure - s[0].static_pressure, 0.0);
    return state->mass_flow * (s[0].velocity - sqrt(2.0 * head / s[5].density));
}

/* The core's loss coefficient on its face head, at a speed where cores are tested. */
static double core_coefficient(const struct sp_duct *d)
{
    const double rho = 1.2, v = 6.0, T = 293.15;
    struct sp_core_loss loss = sp_core_air_loss(&d->core, rho * v, T, T, rho, rho);
    return loss.core / (0.5 * rho * v * v);
}

static void set_diffuser(struct sp_duct *d)
{
    const struct sp_diffuser_design *g = &d->design.diffuser;
    d->diffuser_loss = g->loss;
    if (g->kind == SP_DIFFUSER_GIVEN) return;
    d->diffuser_loss = 0.0;
    if (d->core.face <= d->design.inlet.area) return;
    struct sp_diffuser shape = {.kind = g->kind == SP_DIFFUSER_SUDDEN ? SP_DIFFUSER_STEP : SP_DIFFUSER_CONE,
                                .inlet_area = d->design.inlet.area, .outlet_area = d->core.face,
                                .length = g->length, .damped = g->core_damping};
    struct sp_diffuser_loss loss = sp_diffuser_loss(&shape, core_coefficient(d));
    d->diffuser_loss = loss.loss;
    d->diffuser_stalled = loss.stalled;
}

struct sp_duct *sp_duct_build(const struct sp_duct_design *design, const struct sp_coolant *coolant,
                              const struct sp_place *at, struct sp_complaints *complaints)
{
    struct sp_duct *d = calloc(1, sizeof *d);
    if (!d) {
        sp_complain(complaints, at, "no memory", "room for the duct", NULL);
        return NULL;
    }
    d->design = *design;
    bool good = sp_core_build(&d->design.core[0], coolant, &d->core, at, complaints);
    good = sp_fan_build(&d->design.fan[0], d->core.face, &d->fan, at, complaints) && good;
    d->cos_angle = cos(design->exit[0].angle);
    if (good) set_diffuser(d);
    if (good) return d;
    sp_duct_free(d);
    return NULL;
}

void sp_duct_free(struct sp_duct *d)
{
    if (!d) return;
    sp_core_free(&d->core);
    sp_fan_free(&d->fan);
    free(d);
}
