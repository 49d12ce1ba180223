/* What a lane does to the air: its cores one behind the other. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "circuit/duct_lanes.h"
#include "circuit/duct_network.h"
#include "part/cells.h"

/* Heat that is a core's, whatever its metal: a load, or given from outside. W. */
static double own_heat(const struct sp_network *n, int core)
{
    const struct sp_core *c = &n->p.duct->design.core[core];
    double heat = n->takes_given[core] ? n->given * n->p.duct->core[core].face : 0.0;
    return c->carries == SP_CARRIES_LOAD ? heat + c->heat_load : heat;
}

static bool is_wall(const struct sp_network *n, int core)
{
    return !n->p.in->heat_given && sp_core_has_heat(&n->p.duct->core[core]) &&
           n->p.duct->design.core[core].carries != SP_CARRIES_LOAD;
}

/* Temperature behind a core; a load is shared by all the air that passes the core, wherever it does. */
static void heat_in_lane(const struct sp_network *n, const struct sp_lane *l, int i, double m,
                         const struct sp_net_look *look, struct sp_lane_core *c)
{
    const struct sp_duct_inputs *in = n->p.in;
    int k = l->core[i];
    double rate = m * in->cp;
    c->T_out = c->T_in;
    if (is_wall(n, k)) {
        double flux = m / sp_lane_face(n->p.duct, l, i), film = 0.5 * (c->T_in + in->wall[k]);
        double hA = sp_core_air_conductance(&n->p.duct->core[k], flux, film) * l->share[i];
        double eps = sp_cells_air_effectiveness(hA, rate);
        c->rate = rate * eps;
        c->T_out = c->T_in + eps * (in->wall[k] - c->T_in);
        c->heat = c->rate * (in->wall[k] - c->T_in);
        return;
    }
    double heat = own_heat(n, k);
    if (heat == 0.0) return;
    bool alone = l->share[i] > 1.0 - 1e-9;
    double rise = sp_network_rise(heat, (alone ? m : look->passing[k]) * in->cp,
                                  n->most_rise - (c->T_in - in->temperature));
    c->T_out = c->T_in + rise;
    c->heat = rate * rise;
}

/* Where a core's face is larger than that of the one the air comes from, the jet between is lost
 * (Borda-Carnot). */
static double jet_loss(const struct sp_network *n, double m, double T, double before, double face)
{
    if (!(face > before)) return 0.0;
    double left = 1.0 - before / face;
    return sp_duct_head(&n->p, m, sp_network_density(n, T), before) * left * left;
}

struct sp_branch_does sp_network_lane(const struct sp_network *n, const struct sp_lane *l, double m,
                                      double upstream, const struct sp_net_look *look,
                                      struct sp_lane_core *core)
{
    double T = upstream, lost = 0.0, before = INFINITY, size = fabs(m);
    for (int step = 0; step < l->cores; ++step) {
        int i = m >= 0.0 ? step : l->cores - 1 - step;
        struct sp_lane_core c = {.T_in = T};
        double face = sp_lane_face(n->p.duct, l, i);
        heat_in_lane(n, l, i, size, look, &c);
        struct sp_core_loss loss =
            sp_duct_core_loss(&n->p, &n->p.duct->core[l->core[i]], size, face, c.T_in, c.T_out,
                              sp_network_density(n, c.T_in), sp_network_density(n, c.T_out));
        c.heating = loss.heating;
        c.drop = loss.core + loss.heating + jet_loss(n, size, T, before, face);
        lost += c.drop;
        T = c.T_out;
        before = face;
        if (core) core[i] = c;
    }
    return (struct sp_branch_does){copysign(lost, m), T};
}
