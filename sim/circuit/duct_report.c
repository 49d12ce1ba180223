/* What is told of a solved network: flows, each core's air, drag, and the ladder of stations.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "circuit/duct_lanes.h"
#include "circuit/duct_network.h"

/* ---- cores ----------------------------------------------------------------------------------------- */

/* Sums over the lanes of one core. */
struct sums { double flow, size, rate, warm_rate, warm_size, front, heat, drop, heating; };

static void add_lane(const struct sp_network *n, int b, const struct sp_net_state *x,
                     const struct sp_net_look *look, struct sums *sum)
{
    const struct sp_lane *l = &n->p.duct->lane[n->p.duct->branch[b].index];
    struct sp_lane_core part[SP_CORES];
    double m = x->flow[b], upstream = sp_network_end(n, b, m < 0.0, x);
    sp_network_lane(n, l, m, upstream, look, part);
    for (int i = 0; i < l->cores; ++i) {
        const struct sp_lane_core *c = &part[i];
        struct sums *s = &sum[l->core[i]];
        s->flow += m;
        s->size += fabs(m);
        s->rate += c->rate;
        s->warm_rate += c->rate * c->T_in;
        s->warm_size += fabs(m) * c->T_in;
        s->front += m * c->T_in; /* volume flow at the front, over R/p */
        s->heat += c->heat;
        s->drop += fabs(m) * c->drop;
        s->heating += fabs(m) * c->heating;
    }
}

static void tell_cores(const struct sp_network *n, const struct sp_net_state *x,
                       const struct sp_net_look *look, struct sp_duct_state *out)
{
    const struct sp_duct *d = n->p.duct;
    struct sums sum[SP_CORES];
    memset(sum, 0, sizeof sum);
    for (int b = 0; b < n->branches; ++b)
        if (d->branch[b].kind == SP_BRANCH_LANE) add_lane(n, b, x, look, sum);
    for (int i = 0; i < d->cores; ++i) {
        const struct sums *s = &sum[i];
        double T = s->rate > 0.0 ? s->warm_rate / s->rate
                                 : (s->size > 0.0 ? s->warm_size / s->size : x->temperature[SP_NODE_FRONT]);
        double volume = s->front / (n->p.density * n->p.in->temperature);
        out->core[i] = (struct sp_core_air){.mass_flow = s->flow,
                                            .rate = s->rate,
                                            .air_in = T,
                                            .heat = s->heat,
                                            .face_velocity = volume / d->core[i].face,
                                            .drop = s->size > 0.0 ? s->drop / s->size : 0.0};
        out->heat += s->heat;
        out->heating_loss += s->heating;
    }
    double all = 0.0;
    for (int b = 0; b < n->branches; ++b)
        if (d->branch[b].kind == SP_BRANCH_LANE) all += fabs(x->flow[b]);
    out->heating_loss = all > 0.0 ? out->heating_loss / all : 0.0;
}

/* ---- flows ----------------------------------------------------------------------------------------- */

static double upstream_density(const struct sp_network *n, int b, const struct sp_net_state *x)
{
    return sp_network_density(n, sp_network_end(n, b, x->flow[b] < 0.0, x));
}

static double area_of(const struct sp_network *n, const struct sp_branch *b)
{
    return b->kind == SP_BRANCH_EXIT && n->p.in->bonnet_up ? n->p.duct->section : b->area;
}

static double share_of(const struct sp_network *n, const struct sp_branch *b)
{
    return n->p.in->bonnet_up ? 1.0 : b->share;
}

static void tell_flows(const struct sp_network *n, const struct sp_net_state *x, struct sp_duct_state *out)
{
    for (int b = 0; b < n->branches; ++b) {
        const struct sp_branch *branch = &n->p.duct->branch[b];
        double m = x->flow[b];
        switch (branch->kind) {
        case SP_BRANCH_INLET: out->fresh = m; break;
        case SP_BRANCH_LANE:
            out->mass_flow += m;
            if (m < 0.0) out->backwards -= m;
            break;
        case SP_BRANCH_FAN: out->fan_flow[branch->index] = m; break;
        case SP_BRANCH_FLAP: out->flap_flow += m; break;
        case SP_BRANCH_LEAK: *(branch->index ? &out->leak_outside : &out->leak_past) = m; break;
        case SP_BRANCH_EXIT:
            out->exit_flow[branch->index] = m;
            if (branch->index == 0) out->exit_velocity = m / (upstream_density(n, b, x) * area_of(n, branch));
        }
    }
    if (out->mass_flow >= 0.0) return;
    out->backwards =
        0.0; /* all of it is, which is no recirculation: what comes back is what goes forwards too */
    for (int b = 0; b < n->branches; ++b)
        if (n->p.duct->branch[b].kind == SP_BRANCH_LANE && x->flow[b] > 0.0) out->backwards += x->flow[b];
}

/* Mean temperature that the air has behind the cores, as they blow; that ahead where nothing moves. */
static double behind_cores(const struct sp_network *n, const struct sp_net_state *x,
                           const struct sp_net_look *look, bool ahead)
{
    double flow = 0.0, warm = 0.0;
    for (int b = 0; b < n->branches; ++b) {
        if (n->p.duct->branch[b].kind != SP_BRANCH_LANE || (x->flow[b] >= 0.0) != ahead) continue;
        flow += fabs(x->flow[b]);
        warm += fabs(x->flow[b]) * look->out[b];
    }
    return flow > 0.0 ? warm / flow : NAN;
}

static void tell_heat(const struct sp_network *n, const struct sp_net_state *x,
                      const struct sp_net_look *look, struct sp_duct_state *out)
{
    bool ahead = out->mass_flow >= 0.0;
    double T2 = x->temperature[ahead ? SP_NODE_FRONT : SP_NODE_BAY], T3 = behind_cores(n, x, look, ahead);
    out->temperature_ratio = isfinite(T3) ? T3 / T2 : 1.0;
    double span = fabs(out->mass_flow) * n->p.in->cp * (n->p.in->wall[0] - T2);
    if (out->core[0].rate > 0.0 && span != 0.0) out->effectiveness = out->heat / span;
}

/* ---- drag ------------------------------------------------------------------------------------------ */

/* What is taken in has the stream's momentum, wherever; a jet out of an exit gives back what looks rearwards,
 * one out of the inlet goes forwards, a leak gives nothing. */
static void tell_exit_drag(const struct sp_network *n, int b, const struct sp_net_state *x,
                           struct sp_duct_state *out)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    double m = x->flow[b], rho = upstream_density(n, b, x), area = area_of(n, branch);
    double cos_a = n->p.in->bonnet_up ? 0.0 : n->p.duct->cos_angle[branch->index], v = m / (rho * area);
    out->drag -= n->outside[b] * area * cos_a;
    if (m < 0.0) return;
    double total = n->outside[b] + sp_duct_head_of(&n->p, m, rho, area, share_of(n, branch));
    out->drag -= m * v * cos_a;
    out->thrust += sp_duct_thrust(m, total, rho, x->temperature[SP_NODE_BAY] / n->fresh, cos_a);
}

static void tell_drag(const struct sp_network *n, const struct sp_net_state *x, struct sp_duct_state *out)
{
    double inlet_velocity = 0.0;
    for (int b = 0; b < n->branches; ++b) {
        const struct sp_branch *branch = &n->p.duct->branch[b];
        double m = x->flow[b], taken = branch->kind == SP_BRANCH_INLET ? m : -m;
        if (branch->from >= 0 && branch->to >= 0) continue;
        out->drag += fmax(taken, 0.0) * n->p.speed;
        if (branch->kind == SP_BRANCH_EXIT) tell_exit_drag(n, b, x, out);
        if (branch->kind != SP_BRANCH_INLET) continue;
        inlet_velocity = m / (upstream_density(n, b, x) * branch->area);
        if (m < 0.0) out->drag += m * inlet_velocity;
    }
    sp_duct_add_outside(&n->p, inlet_velocity, out);
}

/* ---- pressures ------------------------------------------------------------------------------------- */

/* Mean over the air that passes the cores of what stands ahead of them and behind. */
static void tell_pressures(const struct sp_network *n, const struct sp_net_state *x,
                           struct sp_duct_state *out)
{
    double flow = 0.0, face = 0.0, back = 0.0;
    for (int b = 0; b < n->branches; ++b) {
        const struct sp_branch *branch = &n->p.duct->branch[b];
        if (branch->kind != SP_BRANCH_LANE) continue;
        double weight = fabs(x->flow[b]) + 1e-12 * n->small;
        flow += weight;
        face += weight * x->pressure[branch->from];
        back += weight * x->pressure[branch->to];
    }
    out->front_pressure = x->pressure[SP_NODE_FRONT];
    out->bay_pressure = x->pressure[SP_NODE_BAY];
    out->face_pressure = face / flow;
    out->back_pressure = back / flow;
    const struct sp_fan *f = &n->p.duct->design.fan[0];
    int shroud = n->p.duct->shroud[0];
    if (!n->p.duct->fan[0].design) return;
    out->fan_pressure = f->before_core ? x->pressure[shroud] - x->pressure[SP_NODE_FRONT]
                                       : x->pressure[SP_NODE_BAY] - x->pressure[shroud];
}

/* The first core that carries coolant, whose face velocity the duct is judged by; the first of all without one. */
static int radiator(const struct sp_duct *d)
{
    for (int i = 0; i < d->cores; ++i)
        if (d->design.core[i].carries == SP_CARRIES_COOLANT) return i;
    return 0;
}

void sp_network_report(const struct sp_network *n, const struct sp_net_state *x,
                       const struct sp_net_look *look, struct sp_duct_state *out)
{
    const struct sp_duct *d = n->p.duct;
    out->network = true;
    out->cores = d->cores;
    out->fans = d->fans;
    out->exits = d->exits;
    tell_cores(n, x, look, out);
    tell_flows(n, x, out);
    tell_heat(n, x, look, out);
    tell_drag(n, x, out);
    tell_pressures(n, x, out);
    out->inlet_temperature = x->temperature[SP_INLET_AIR];
    out->front_temperature = x->temperature[SP_NODE_FRONT];
    out->bay_temperature = x->temperature[SP_NODE_BAY];
    out->face_velocity = out->core[radiator(d)].face_velocity;
    out->diffuser_stalled = d->diffuser_stalled && out->fresh > 0.0;
}

/* ---- stations -------------------------------------------------------------------------------------- */

/* The ladder along the mean path: what stands at each node, and the mean over the air that passes the cores.
 */
void sp_network_stations(const struct sp_duct *d, const struct sp_duct_inputs *in,
                         const struct sp_duct_state *state, struct sp_station s[SP_STATIONS],
                         struct sp_duct_losses *losses)
{
    struct sp_network n = sp_network_pose(d, in);
    const struct sp_duct_problem *p = &n.p;
    bool ahead = state->mass_flow >= 0.0, in_ahead = state->fresh >= 0.0,
         out_ahead = state->exit_flow[0] >= 0.0;
    double T1 = in_ahead ? state->inlet_temperature : state->front_temperature,
           T5 = out_ahead ? state->bay_temperature : in->temperature;
    double T2 = ahead ? state->front_temperature : state->bay_temperature, T3 = T2 * state->temperature_ratio;
    struct sp_inlet_loss inlet = sp_duct_inlet_loss(p, state->fresh, sp_network_density(&n, T1));
    double available = sp_duct_available(p, state->fresh), through = 0.0, heating = state->heating_loss;
    const struct sp_branch *exit = &d->branch[d->branches - d->exits];
    double area = area_of(&n, exit), m5 = state->exit_flow[0],
           head = sp_duct_head_of(p, m5, sp_network_density(&n, T5), area, share_of(&n, exit));
    double k = in->bonnet_up ? 0.0 : exit->loss, back = n.outside[d->branches - d->exits];
    for (int i = 0; i < d->exits; ++i) through += state->exit_flow[i];
    s[0] = (struct sp_station){in->pressure + p->head, in->pressure, p->density, in->temperature, p->speed};
    s[1] = sp_duct_station(p, state->fresh, in_ahead ? available - inlet.lip : available + inlet.lip, T1,
                           d->inlet_area);
    s[2] = sp_duct_station(p, state->mass_flow, state->face_pressure, ahead ? T2 : T3, d->section);
    s[3] = sp_duct_station(p, state->mass_flow, state->back_pressure, ahead ? T3 : T2, d->section);
    s[4] = sp_duct_station(p, through, state->bay_pressure, state->bay_temperature, d->section);
    s[5] = sp_duct_station(p, m5, out_ahead ? back + head : back, T5, area);
    double drop = fabs(state->face_pressure - state->back_pressure);
    double gain = state->face_pressure - state->front_pressure + state->bay_pressure - state->back_pressure;
    *losses = (struct sp_duct_losses){
        p->head - available,   inlet.lip, inlet.screen, inlet.diffuser,
        drop - heating,        heating,   -gain,        sp_duct_exit_loss(k, m5, head),
        out_ahead ? head : 0.0};
}
