/* The coolant loop. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/loop.h"

#include "part/fan.h"

#include <gsl/gsl_math.h>
#include <math.h>
#include <string.h>

static const double soft_pressure = 1.0; /* Pa, below which branches beside the radiator answer linearly */
static const double still = 1e-4;        /* pump speed, over rated, that counts as standing */
static const double reference_density = 1000.0;
static const double tight = 1e-6;          /* share of the full opening that a valve without leak still has */
static const double least_drop = 1e-200;   /* Pa, below which strings share as their copies do */
static const double bleed_discharge = 0.6; /* common practice */
static const double trial_flow = 1e-3;     /* m3/s, at which a string must resist */

/* What is fixed while one split is sought. */
struct split {
    const struct sp_loop *loop;
    const struct sp_loop_inputs *in;
    const struct sp_guess *ratio; /* where searches among the strings begin: all at the same, so that the
                                   * surplus is one and the same function throughout */
    struct sp_guess *kept;        /* where they ended; NULL: not asked */
    double speed, lift;
    double rho_hot, mu_hot, rho_cool, mu_cool;
    double bypass_gain, heater_gain, bleed_gain; /* m3/s per sqrt(Pa) */
    double bleed;                                /* share of the pump's flow */
    double inlet;                                /* K at the pump; 0: whether it cavitates is not asked */
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
    double rho = t->inlet_side ? s->rho_cool : s->rho_hot;
    if (t->none) return 0.0;
    if (s->loop->plate > 0.0) return s->loop->plate * rho * flow * flow;
    double area = s->loop->valve_full * fmax(s->lift + t->leak * (1.0 - s->lift), tight);
    double u = flow / area;
    return 0.5 * rho * u * u;
}

/* ---- strings of cores ------------------------------------------------------------------------------ */

static double copies_of(const struct sp_loop_string *s)
{
    return s->copies > 0.0 ? s->copies : 1.0;
}

static double string_drop(const struct sp_loop *l, int i, double flow, double T)
{
    const struct sp_loop_string *s = &l->string[i];
    double each = flow / copies_of(s), sum = 0.0;
    for (int k = 0; k < s->cores; ++k)
        sum += sp_core_coolant_drop(s->core[k], &l->design->coolant.fluid, each, T);
    return sum;
}

/* Flow of string i over that of the first, which drops `drop` at `first`. */
struct beside {
    const struct split *split;
    int i;
    double first, drop;
};

static double beside_surplus(double ratio, const void *context)
{
    const struct beside *b = context;
    double flow = ratio * b->first, T = b->split->in->cool[b->i];
    return 1.0 - copysign(string_drop(b->split->loop, b->i, fabs(flow), T), flow) / b->drop;
}

static double flow_beside(const struct split *s, int i, double first, double drop)
{
    const struct sp_loop *l = s->loop;
    double by_copies = copies_of(&l->string[i]) / copies_of(&l->string[0]);
    if (!(drop > least_drop)) return by_copies * first;
    struct beside b = {s, i, first, drop};
    struct sp_guess guess = s->ratio[i];
    if (!(guess.x > 0.0)) guess = (struct sp_guess){by_copies, 0.0};
    if (sp_root_falling(beside_surplus, &b, by_copies, &guess)) return NAN;
    if (s->kept) s->kept[i] = guess;
    return guess.x * first;
}

/* Flows of all strings when the first has `first` >= 0, and their common drop. */
static double string_flows(const struct split *s, double first, double *flow, double *drop)
{
    double sum = flow[0] = first;
    *drop = string_drop(s->loop, 0, first, s->in->cool[0]);
    for (int i = 1; i < s->loop->strings; ++i)
        sum += flow[i] = flow_beside(s, i, first, *drop);
    return sum;
}

/* ---- the split ------------------------------------------------------------------------------------- */

static double radiator_drop(const struct split *s, double flow, double cores)
{
    const struct sp_hoses *h = &s->loop->design->hoses;
    return valve_drop(s, flow) +
           hose_drop(h->length_out, h->bore_out, 0.5 * h->bends, flow, s->rho_hot, s->mu_hot) +
           hose_drop(h->length_back, h->bore_back, 0.5 * h->bends, flow, s->rho_cool, s->mu_cool) +
           cores;
}

static double branch_flow(double gain, double drop)
{
    return gain > 0.0 ? gain * drop / sqrt(sqrt(drop * drop + soft_pressure * soft_pressure)) : 0.0;
}

/* What cavitation takes of the pump's rise. Of a rise below nil, beyond free flow, there is none to take. */
static void cavitate(const struct split *s, struct sp_loop_state *st)
{
    const struct sp_design *d = s->loop->design;
    st->head_factor = 1.0;
    if (!(s->inlet > 0.0)) return;
    st->npsh_required = d->pump.npsh * s->speed * s->speed;
    st->npsh_available = sp_npsh_available(d, s->in->tank, s->inlet, st->pump);
    st->head_factor = sp_npsh_factor(st->npsh_available, st->npsh_required);
    if (st->rise > 0.0) st->rise *= st->head_factor;
}

static struct sp_loop_state state_at(const struct split *s, double first, double *parallel)
{
    struct sp_loop_state st = {0};
    double cores, radiator = string_flows(s, fabs(first), st.string, &cores);
    *parallel = copysign(radiator_drop(s, radiator, cores), first);
    st.radiator = copysign(radiator, first);
    st.bypass = branch_flow(s->bypass_gain, *parallel);
    st.heater = branch_flow(s->heater_gain, *parallel);
    st.bleed = branch_flow(s->bleed_gain, *parallel);
    st.pump = (st.radiator + st.bypass + st.heater + st.bleed) / (1.0 - s->bleed);
    st.bleed += s->bleed * st.pump;
    st.rise = sp_curve_at(&s->loop->pump, s->speed, st.pump);
    const struct sp_resistance *jacket = &s->loop->design->hoses.jacket;
    st.jacket_drop =
        copysign(sp_resistance_drop(jacket, true, fabs(st.pump), s->rho_hot, s->mu_hot), st.pump);
    cavitate(s, &st);
    return st;
}

static double surplus(double first, const void *context)
{
    double parallel;
    struct sp_loop_state st = state_at(context, first, &parallel);
    return st.rise - st.jacket_drop - parallel;
}

/* The bypass disc shuts as the main valve opens; without a thermostat the bypass is blocked. */
static double bypass_gain(const struct sp_design *d, double lift, double density)
{
    if (d->thermostat.none) return 0.0;
    double open = d->thermostat.bypass_shut > 1.0 ? 1.0 : fmax(1.0 - lift / d->thermostat.bypass_shut, 0.0);
    return open * d->hoses.bypass.flow * sqrt(reference_density / (density * d->hoses.bypass.drop));
}

/* The coolant between core and pump, where strings are of several temperatures. */
static double mean_cool(const struct sp_loop *l, const double *cool)
{
    double sum = 0.0, copies = 0.0;
    if (l->strings == 1) return cool[0];
    for (int i = 0; i < l->strings; ++i) {
        sum += copies_of(&l->string[i]) * cool[i];
        copies += copies_of(&l->string[i]);
    }
    return sum / copies;
}

static struct split prepare(const struct sp_loop *l, const struct sp_loop_inputs *in, double cool,
                            const struct sp_guess *ratio)
{
    const struct sp_design *d = l->design;
    const struct sp_coolant *fluid = &d->coolant.fluid;
    struct split s = {.loop = l, .in = in, .ratio = ratio, .speed = in->speed, .lift = in->lift};
    s.rho_hot = sp_coolant_density(fluid, in->hot);
    s.mu_hot = sp_coolant_viscosity(fluid, in->hot);
    s.rho_cool = sp_coolant_density(fluid, cool);
    s.mu_cool = sp_coolant_viscosity(fluid, cool);
    s.bypass_gain = bypass_gain(d, in->lift, s.rho_hot);
    double thinner = sqrt(reference_density / s.rho_hot);
    s.heater_gain = l->heater_gain * thinner;
    s.bleed_gain = l->bleed_gain * thinner;
    s.bleed = l->bleed_gain > 0.0 ? 0.0 : d->tank.bleed;
    return s;
}

static enum sp_status search(const struct split *s, struct sp_guess *guess, struct sp_guess *ratio,
                             struct sp_loop_state *out)
{
    double typical = 0.5 * s->speed * s->loop->pump.free_flow, parallel;
    if (!(guess->x > 0.0)) *guess = (struct sp_guess){0.01 * typical, 0.0};
    enum sp_status status = sp_root_falling(surplus, s, typical, guess);
    if (status) return status;
    struct split found = *s;
    found.kept = ratio;
    *out = state_at(&found, fmax(guess->x, 0.0), &parallel); /* nil, where no head is left, may come as -0 */
    return SP_OK;
}

/* Seeks the split again with a pump that cavitates, if it does. The temperature at its inlet is that of the
 * split found without: how branches share hardly depends on the flow, and so the equation keeps one root. */
static enum sp_status starve(struct split *s, double returns, struct sp_loop_guess *guess,
                             struct sp_loop_state *out)
{
    double hot = s->in->hot;
    s->inlet = out->pump > 0.0 ? hot + out->radiator / out->pump * (returns - hot) : hot;
    struct sp_loop_state asked = *out;
    cavitate(s, &asked);
    if (asked.head_factor < 1.0) return search(s, &guess->starved, guess->ratio, out);
    *out = asked;
    return SP_OK;
}

enum sp_status sp_loop_solve(const struct sp_loop *l, const struct sp_loop_inputs *in,
                             struct sp_loop_guess *guess, struct sp_loop_state *out)
{
    const struct sp_design *d = l->design;
    bool watched = d->pump.npsh > 0.0;
    *out = (struct sp_loop_state){.head_factor = 1.0};
    if (!(in->speed > still)) {
        if (watched) out->npsh_available = sp_npsh_available(d, in->tank, in->hot, 0.0);
        return SP_OK;
    }
    double cool = mean_cool(l, in->cool);
    struct sp_guess ratio[SP_LOOP_STRINGS];
    memcpy(ratio, guess->ratio, sizeof ratio);
    struct split s = prepare(l, in, cool, ratio);
    enum sp_status status = search(&s, &guess->flow, guess->ratio, out);
    if (status || !watched) return status;
    return starve(&s, in->returns > 0.0 ? in->returns : cool, guess, out);
}

/* ---- building -------------------------------------------------------------------------------------- */

/* Drop of a sharp plate between a chamber and a hose, over density and flow squared: Idelchik's form for a
 * sharp orifice, (1 + 0.707 - f)^2 on the head in the bore, f the bore's share of the hose (from memory). */
static double plate_of(const struct sp_design *d)
{
    double bore = d->thermostat.restrictor, hose = d->hoses.bore_out;
    if (d->thermostat.none || !(bore > 0.0)) return 0.0;
    double area = M_PI / 4.0 * bore * bore, share = fmin(bore * bore / (hose * hose), 1.0);
    double root = 1.707 - share;
    return 0.5 * root * root / (area * area);
}

static double heater_of(const struct sp_hoses *h)
{
    return h->heater.flow > 0.0 && !h->heater_off ? h->heater.flow / sqrt(h->heater.drop) : 0.0;
}

static double bleed_of(const struct sp_tank *t)
{
    double bore = t->bleed_bore;
    return bore > 0.0 ? bleed_discharge * M_PI / 4.0 * bore * bore * sqrt(2.0 / reference_density) : 0.0;
}

static bool strings_resist(const struct sp_loop *l, const struct sp_place *at,
                           struct sp_complaints *complaints)
{
    for (int i = 0; l->strings > 1 && i < l->strings; ++i) {
        if (string_drop(l, i, trial_flow, SP_ZERO_C + 90.0) > 0.0) continue;
        sp_complain(complaints, at, "a core without resistance to the coolant beside others",
                    "a coolant side drop for every core", NULL);
        return false;
    }
    return true;
}

bool sp_loop_build(const struct sp_design *d, const struct sp_loop_string *strings, int count,
                   struct sp_loop *out, const struct sp_place *at, struct sp_complaints *complaints)
{
    *out = (struct sp_loop){.design = d, .strings = count};
    memcpy(out->string, strings, (size_t)count * sizeof *strings);
    out->valve_full = d->thermostat.discharge * M_PI * d->thermostat.bore * d->thermostat.lift;
    out->plate = plate_of(d);
    out->heater_gain = heater_of(&d->hoses);
    out->bleed_gain = bleed_of(&d->tank);
    return strings_resist(out, at, complaints) && sp_curve_build(&d->pump.curve, &out->pump, at, complaints);
}

void sp_loop_free(struct sp_loop *l)
{
    sp_curve_free(&l->pump);
}
