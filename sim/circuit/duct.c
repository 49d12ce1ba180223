/* The air path of a duct: plain ones by one equation, all others as a network.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "circuit/duct_network.h"
#include "circuit/duct_plain.h"

static bool by_one_equation(const struct sp_duct *d, const struct sp_duct_inputs *in)
{
    return d->plain && in->cross_wind == 0.0 && in->bay_heat == 0.0 && in->blower == 0.0 && !in->bonnet_up;
}

enum sp_status sp_duct_solve_from(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                  struct sp_duct_guess *guess, struct sp_duct_state *out)
{
    if (by_one_equation(d, in)) return sp_plain_solve(d, in, &guess->plain, out);
    return sp_network_solve(d, in, guess, out);
}

enum sp_status sp_duct_solve(const struct sp_duct *d, const struct sp_duct_inputs *in,
                             struct sp_duct_state *out)
{
    struct sp_duct_guess guess = {
        .plain = {0.3 * in->speed * d->section * in->pressure / (in->R * in->temperature), 0.0}};
    if (!in->heat_given || !(in->heat > 0.0)) return sp_duct_solve_from(d, in, &guess, out);
    struct sp_duct_inputs cold = *in;
    cold.heat = 0.0;
    enum sp_status status = sp_duct_solve_from(d, &cold, &guess, out);
    if (status) return status;
    if (by_one_equation(d, in)) return sp_plain_solve_heated(d, in, out->mass_flow, out);
    return sp_network_solve_heated(d, in, &guess, out);
}

void sp_duct_stations(const struct sp_duct *d, const struct sp_duct_inputs *in,
                      const struct sp_duct_state *state, struct sp_station s[SP_STATIONS],
                      struct sp_duct_losses *losses)
{
    if (by_one_equation(d, in)) sp_plain_stations(d, in, state, s, losses);
    else sp_network_stations(d, in, state, s, losses);
}

double sp_duct_wake_drag(const struct sp_duct_state *state, const struct sp_station s[SP_STATIONS])
{
    bool one_way = state->exits <= 1 && state->fresh >= 0.0 && state->exit_flow[0] >= 0.0;
    if (state->mass_flow < 0.0 || (state->network && !one_way)) return NAN;
    double head = fmax(s[5].total_pressure - s[0].static_pressure, 0.0), v = sqrt(2.0 * head / s[5].density);
    if (state->network) return state->fresh * s[0].velocity - state->exit_flow[0] * v;
    return state->mass_flow * (s[0].velocity - v);
}
