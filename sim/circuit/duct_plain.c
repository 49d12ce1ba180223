/* The plain duct: one equation in the mass flow, equation (1) of docs/model.md.
 *
 * Every loss rises with mass flow and every gain falls with it, so that the balance of total pressure is a
 * falling function of mass flow with one root, forward or reverse (given heat apart, see
 * sp_plain_solve_heated). SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/duct_plain.h"

#include <math.h>
#include <string.h>

#include "part/cells.h"

/* Air heated to more than this many times its temperature is no answer but a sign that the flow breaks down.
 */
static const double hottest_ratio = 5.0;

/* All that follows from one mass flow; `balance` is total pressure gained less lost. */
struct flow {
    double tau, effectiveness, heat;
    double rho_in, rho_out;             /* density before and behind the core, in flow direction */
    double available, back;             /* Pa over ambient at the inlet, at the exit */
    struct sp_inlet_loss inlet;
    double fan, exit, exit_head;
    struct sp_core_loss core;
    double balance;
};

static struct sp_duct_problem pose(const struct sp_duct *d, const struct sp_duct_inputs *in)
{
    struct sp_duct_problem p = sp_duct_pose(d, in);
    /* Given heat makes the losses of nil flow linear by itself; the floor would leave a step there. */
    if (in->heat_given && in->heat > 0.0) p.floor = 0.0;
    return p;
}

static void heat_the_air(const struct sp_duct_problem *p, double m, struct flow *f)
{
    const struct sp_duct_inputs *in = p->in;
    double rate = fabs(m) * in->cp;
    if (in->heat_given) {
        f->heat = in->heat;
        f->tau = in->heat == 0.0 ? 1.0 : 1.0 + in->heat / (rate * in->temperature);
    } else if (sp_core_has_heat(&p->duct->core[0])) {
        double film = 0.5 * (in->temperature + in->wall[0]);
        double hA = sp_core_air_conductance(&p->duct->core[0], fabs(m) / p->duct->section, film);
        f->effectiveness = sp_cells_air_effectiveness(hA, rate);
        f->heat = rate * f->effectiveness * (in->wall[0] - in->temperature);
        f->tau = 1.0 + f->effectiveness * (in->wall[0] / in->temperature - 1.0);
    } else {
        f->tau = 1.0;
    }
    f->rho_in = p->density;
    f->rho_out = p->density / f->tau;
}

static void through_core(const struct sp_duct_problem *p, double m, struct flow *f)
{
    double T = p->in->temperature;
    f->core = sp_duct_core_loss(p, &p->duct->core[0], m, p->duct->core[0].face, T, f->tau * T, f->rho_in,
                                f->rho_out);
}

/* In reverse the air behind a fan is that of the front. */
static void through_fan(const struct sp_duct_problem *p, double m, struct flow *f)
{
    bool first = p->duct->design.fan[0].before_core;
    f->fan = sp_duct_fan(p, 0, m, first ? f->rho_in : f->rho_out, first ? f->rho_out : f->rho_in);
}

static void forward(const struct sp_duct_problem *p, double m, struct flow *f)
{
    const struct sp_exit *exit = &p->duct->design.exit[0];
    f->inlet = sp_duct_inlet_loss(p, m, f->rho_in);
    through_core(p, m, f);
    through_fan(p, m, f);
    f->exit_head = sp_duct_head(p, m, f->rho_out, exit->area);
    f->exit = exit->loss * f->exit_head;
    f->balance = f->available - f->back + f->fan - f->inlet.lip - f->inlet.screen - f->inlet.diffuser -
                 f->core.core - f->core.heating - f->exit - f->exit_head;
}

/* Air in at the exit, cold through the fan, heated from the back to the front, out of the inlet as a jet. */
static void reverse(const struct sp_duct_problem *p, double m, struct flow *f)
{
    const struct sp_exit *exit = &p->duct->design.exit[0];
    f->inlet = sp_duct_inlet_loss(p, m, f->rho_out);
    through_core(p, m, f);
    through_fan(p, m, f);
    f->exit = sp_duct_exit_loss(exit->loss, m, sp_duct_head(p, m, f->rho_in, exit->area));
    f->balance = f->available - f->back + f->fan + f->inlet.lip + f->inlet.screen + f->inlet.diffuser +
                 f->core.core + f->core.heating + f->exit;
}

static struct flow flow_at(const struct sp_duct_problem *p, double m)
{
    struct flow f = {.tau = 1.0, .available = sp_duct_available(p, m), .back = sp_duct_back(p, 0)};
    heat_the_air(p, m, &f);
    if (m >= 0.0) forward(p, m, &f);
    else reverse(p, m, &f);
    return f;
}

static double balance_at(double m, const void *context)
{
    /* Given heat in nil flow would be infinitely hot: its limit from either side is the unheated balance. */
    const struct sp_duct_problem *p = context;
    if (p->in->heat_given && m == 0.0) {
        struct sp_duct_inputs cold = *p->in;
        cold.heat = 0.0;
        struct sp_duct_problem q = *p;
        q.in = &cold;
        return flow_at(&q, 0.0).balance;
    }
    return flow_at(p, m).balance;
}

static void fill(const struct sp_duct_problem *p, double m, const struct flow *f, struct sp_duct_state *out)
{
    const struct sp_duct_design *d = &p->duct->design;
    double cos_a = p->duct->cos_angle[0];
    out->mass_flow = m;
    out->effectiveness = f->effectiveness;
    out->heat = f->heat;
    out->face_velocity = m / (p->density * p->duct->section);
    out->temperature_ratio = f->tau;
    out->exit_velocity = m / ((m >= 0.0 ? f->rho_out : f->rho_in) * d->exit[0].area);
    out->fan_pressure = f->fan;
    /* In reverse the air is swallowed from behind and leaves forwards as a jet: both are drag. */
    double jet = m >= 0.0 ? out->exit_velocity * cos_a : m / (f->rho_out * p->duct->inlet_area);
    out->drag = fabs(m) * (p->speed - jet) - f->back * d->exit[0].area * cos_a;
    out->diffuser_stalled = p->duct->diffuser_stalled && m > 0.0;
    out->fresh = out->exit_flow[0] = m;
    if (p->duct->fan[0].design) out->fan_flow[0] = m;
    out->inlet_temperature = p->in->temperature;
    out->bay_temperature = p->in->temperature * (m >= 0.0 ? f->tau : 1.0);
    out->bay_pressure = m >= 0.0 ? f->back + f->exit + f->exit_head : f->back - f->exit;
    double ahead = f->inlet.lip + f->inlet.screen + f->inlet.diffuser;
    out->front_pressure = m >= 0.0 ? f->available - ahead : f->available + ahead;
    out->front_temperature = p->in->temperature * (m >= 0.0 ? 1.0 : f->tau);
    out->thrust = sp_duct_thrust(m, f->back + f->exit_head, f->rho_out, f->tau, cos_a);
    sp_duct_add_outside(p, m / ((m >= 0.0 ? f->rho_in : f->rho_out) * p->duct->inlet_area), out);
    out->core[0] = (struct sp_core_air){.mass_flow = m,
                                        .rate = fabs(m) * p->in->cp * f->effectiveness,
                                        .heat = f->heat,
                                        .air_in = p->in->temperature,
                                        .face_velocity = out->face_velocity,
                                        .drop = f->core.core + f->core.heating};
}

enum sp_status sp_plain_solve(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                  struct sp_guess *guess, struct sp_duct_state *out)
{
    struct sp_duct_problem p = pose(d, in);
    memset(out, 0, sizeof *out);
    double typical = p.density * d->section;
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

/* Given heat, less air comes out hotter, and hot laminar air resists the more: below some flow the balance
 * turns back. What a duct settles to is the largest flow, on the way down from the unheated one. */
enum sp_status sp_plain_solve_heated(const struct sp_duct *d, const struct sp_duct_inputs *in, double cold,
                                   struct sp_duct_state *out)
{
    struct sp_duct_problem p = pose(d, in);
    double typical = p.density * d->section, before = cold, way = cold > 0.0 ? 1.0 : -1.0;
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

void sp_plain_stations(const struct sp_duct *d, const struct sp_duct_inputs *in,
                       const struct sp_duct_state *state, struct sp_station s[SP_STATIONS],
                       struct sp_duct_losses *losses)
{
    struct sp_duct_problem p = pose(d, in);
    double m = state->mass_flow, T2 = in->temperature, T3 = T2 * state->temperature_ratio;
    struct flow f = flow_at(&p, m);
    double face = d->section, inlet = d->inlet_area, exit = d->design.exit[0].area;
    bool ahead = m >= 0.0;
    double front = ahead ? T2 : T3, rear = ahead ? T3 : T2, way = ahead ? 1.0 : -1.0;
    /* From the front backwards; in reverse flow the losses run the other way. */
    double at_inlet = ahead ? f.available - f.inlet.lip : f.available + f.inlet.lip;
    double fan_front = d->design.fan[0].before_core ? f.fan : 0.0, fan_rear = f.fan - fan_front;
    double at_face = at_inlet - way * (f.inlet.screen + f.inlet.diffuser) + fan_front;
    double at_back = at_face - way * (f.core.core + f.core.heating);
    double at_fan = at_back + fan_rear;
    double at_exit = ahead ? at_fan - f.exit : f.back;
    s[0] = (struct sp_station){in->pressure + p.head, in->pressure, p.density, T2, p.speed};
    s[1] = sp_duct_station(&p, m, at_inlet, front, inlet);
    s[2] = sp_duct_station(&p, m, at_face, front, face);
    s[3] = sp_duct_station(&p, m, at_back, rear, face);
    s[4] = sp_duct_station(&p, m, at_fan, rear, face);
    s[5] = sp_duct_station(&p, m, at_exit, rear, exit);
    *losses = (struct sp_duct_losses){p.head - f.available, f.inlet.lip,    f.inlet.screen, f.inlet.diffuser,
                                      f.core.core,          f.core.heating, -f.fan,         f.exit,
                                      f.exit_head};
}
