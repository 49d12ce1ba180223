/* The coolant loop as a network: strings of cores, heater, bleed, restrictor plate, and a pump that
 * cavitates, against closed forms, published coefficients and the trade's figures.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include <stdlib.h>
#include <string.h>

#include "circuit/loop.h"

static const double pi = 3.14159265358979323846, density = 1022.9, viscosity = 0.7e-3;
static const double litre_a_minute = 1e-3 / 60.0;

/* Coolant of one density and viscosity, so that the sums can be done on paper. */
static struct sp_coolant plain_coolant(void)
{
    struct sp_coolant c;
    assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, 0.5, &c));
    memset(c.density, 0, sizeof c.density);
    memset(c.ln_viscosity, 0, sizeof c.ln_viscosity);
    c.density[0] = density;
    c.ln_viscosity[0] = log(1e3 * viscosity);
    return c;
}

/* A loop with hoses that cost nothing and no thermostat. */
static struct sp_design plain(void)
{
    struct sp_design d = {
        .thermostat = {.none = true, .bypass_shut = 2.0, .discharge = 0.6, .bore = 0.035, .lift = 0.008}};
    d.pump.curve = (struct sp_curve_design){.shutoff = 100e3, .free_flow = 4e-3};
    d.hoses = (struct sp_hoses){.length_out = 1e-12,
                                .length_back = 1e-12,
                                .bore_out = 0.034,
                                .bore_back = 0.034,
                                .jacket = {1e-3, 15e3},
                                .bypass = {1e-3, 45e3}};
    d.coolant.fluid = plain_coolant();
    return d;
}

/* A core that only resists. */
struct resisting {
    struct sp_core design;
    struct sp_core_ready ready;
};

static const struct sp_core_ready *resist(struct resisting *r, double drop)
{
    memset(r, 0, sizeof *r);
    r->design.drop = (struct sp_resistance){1e-3, drop};
    r->ready.design = &r->design;
    return &r->ready;
}

static struct sp_loop_state solve_in(const struct sp_design *d, const struct sp_loop_string *strings, int n,
                                     struct sp_loop_inputs in)
{
    struct sp_loop l;
    struct sp_complaints c = {0};
    struct sp_place at = {.path = "car.pump.curve"};
    struct sp_loop_guess guess = {.flow = {0.0, 0.0}};
    struct sp_loop_state s;
    assert_true(sp_loop_build(d, strings, n, &l, &at, &c));
    for (int i = 1; i < n && !(in.cool[i] > 0.0); ++i)
        in.cool[i] = in.cool[0];
    assert_int_equal(sp_loop_solve(&l, &in, &guess, &s), SP_OK);
    sp_loop_free(&l);
    return s;
}

static struct sp_loop_state solve(const struct sp_design *d, const struct sp_loop_string *strings, int n,
                                  double speed, double lift)
{
    return solve_in(d, strings, n,
                    (struct sp_loop_inputs){.speed = speed, .lift = lift, .hot = 363.0, .cool = {350.0}});
}

/* Blasius' law as the design states it: rho^0.75 mu^0.25 V^1.75, from 1000 kg/m3 and 0.7 mPa s at 1 l/s. */
static double blasius(double drop, double flow)
{
    return drop * pow(density / 1000.0, 0.75) * pow(viscosity / 0.7e-3, 0.25) * pow(flow / 1e-3, 1.75);
}

/* ---- strings ----------------------------------------------------------------------------------------- */

/* Equal ducts side by side are one with copies, whichever way they are written; and either satisfies the
 * loop's own equation, 100 kPa (1 - (Q/4 l/s)^2) = jacket + core at a third of the flow. */
static void equal_strings(void **state)
{
    (void)state;
    struct resisting r;
    struct sp_design d = plain();
    const struct sp_core_ready *core = resist(&r, 20e3);
    const struct sp_loop_string one = {.core = {core}, .cores = 1, .copies = 3.0};
    const struct sp_loop_string three[] = {
        {.core = {core}, .cores = 1}, {.core = {core}, .cores = 1}, {.core = {core}, .cores = 1}};
    const struct sp_loop_string two[] = {{.core = {core}, .cores = 1, .copies = 1.0},
                                         {.core = {core}, .cores = 1, .copies = 2.0}};
    struct sp_loop_state a = solve(&d, &one, 1, 1.0, 1.0), b = solve(&d, three, 3, 1.0, 1.0),
                         c = solve(&d, two, 2, 1.0, 1.0);
    double left = 100e3 * (1.0 - pow(a.pump / 4e-3, 2.0)) - 15e3 * density / 1000.0 * pow(a.pump / 1e-3, 2.0);
    check_close(blasius(20e3, a.pump / 3.0), left, 1e-9, 0);
    check_close(b.pump, a.pump, 1e-10, 0);
    check_close(c.pump, a.pump, 1e-10, 0);
    for (int i = 0; i < 3; ++i)
        check_close(b.string[i], a.pump / 3.0, 1e-10, 0);
    check_close(c.string[1], 2.0 * c.string[0], 1e-10, 0);
    assert_true(a.string[0] == a.radiator);
}

/* Unlike strings share as (copies k^(-1/1.75)) of their resistances k: 1.75 from Blasius. */
static void unlike_strings(void **state)
{
    (void)state;
    struct resisting r[3];
    struct sp_design d = plain();
    const double drop[] = {12e3, 40e3, 3e3}, copies[] = {1.0, 2.0, 1.0};
    struct sp_loop_string s[3];
    for (int i = 0; i < 3; ++i)
        s[i] = (struct sp_loop_string){.core = {resist(&r[i], drop[i])}, .cores = 1, .copies = copies[i]};
    for (double speed = 0.002; speed < 2.0; speed *= 2.0) {
        struct sp_loop_state st = solve(&d, s, 3, speed, 1.0);
        for (int i = 1; i < 3; ++i)
            check_close(st.string[i] / st.string[0], copies[i] * pow(drop[0] / drop[i], 1.0 / 1.75), 1e-9, 0);
        check_close(st.string[0] + st.string[1] + st.string[2], st.radiator, 1e-12, 0);
    }
}

/* Two equal cores one after the other drop twice as much: they are one of twice the resistance, and with
 * twice as many copies in each of two strings the flow is that of one core at half the flow, twice. */
static void cores_in_a_row(void **state)
{
    (void)state;
    struct resisting r, twice;
    struct sp_design d = plain();
    const struct sp_core_ready *core = resist(&r, 20e3), *long_one = resist(&twice, 40e3);
    const struct sp_loop_string row = {.core = {core, core}, .cores = 2},
                                single = {.core = {long_one}, .cores = 1};
    struct sp_loop_state a = solve(&d, &row, 1, 0.7, 1.0), b = solve(&d, &single, 1, 0.7, 1.0);
    check_close(a.pump, b.pump, 1e-12, 0);
    check_close(a.rise - a.jacket_drop, 2.0 * blasius(20e3, a.radiator), 1e-9, 0);
}

/* A core that does not resist cannot stand beside another. */
static void no_resistance(void **state)
{
    (void)state;
    struct resisting r, none;
    struct sp_design d = plain();
    const struct sp_loop_string s[] = {{.core = {resist(&r, 20e3)}, .cores = 1},
                                       {.core = {resist(&none, 0.0)}, .cores = 1}};
    none.design.drop.flow = 0.0;
    struct sp_loop l;
    struct sp_complaints c = {0};
    struct sp_place at = {.path = "car.pump.curve"};
    assert_false(sp_loop_build(&d, s, 2, &l, &at, &c));
    assert_int_equal(c.count, 1);
    sp_complaints_free(&c);
}

/* ---- branches ------------------------------------------------------------------------------------------ */

/* With the valve shut bypass and heater are quadratic and in parallel: k = (k_b^-1/2 + k_h^-1/2)^-2 on the
 * sum, and the flow of the whole loop is n sqrt(shutoff/(a + k_j + k)). */
static void heater_beside_bypass(void **state)
{
    (void)state;
    struct resisting r;
    struct sp_design d = plain();
    d.thermostat.none = false;
    const struct sp_loop_string s = {.core = {resist(&r, 20e3)}, .cores = 1};
    struct sp_loop_state without = solve(&d, &s, 1, 1.0, 0.0);
    d.hoses.heater = (struct sp_resistance){0.2e-3, 30e3};
    struct sp_loop_state with = solve(&d, &s, 1, 1.0, 0.0);
    double rho = density / 1000.0, own = 100e3 / 16e-6, jacket = 15e3 * rho / 1e-6;
    double kb = 45e3 * rho / 1e-6, kh = 30e3 * rho / 0.04e-6;
    double k = pow(1.0 / sqrt(kb) + 1.0 / sqrt(kh), -2.0);
    check_close(without.pump, sqrt(100e3 / (own + jacket + kb)), 1e-5, 0);
    check_close(with.pump, sqrt(100e3 / (own + jacket + k)), 1e-5, 0);
    check_close(with.heater / with.bypass, sqrt(kb / kh), 1e-9, 0);
    check_close(with.heater + with.bypass + with.radiator, with.pump, 1e-12, 0);
    assert_true(with.bypass < without.bypass);
    d.hoses.heater_off = true;
    struct sp_loop_state off = solve(&d, &s, 1, 1.0, 0.0);
    assert_memory_equal(&off, &without, sizeof off);
}

/* A bleed line's restrictor passes what a sharp hole does: 0.6 A sqrt(2 dp/rho) between engine out and pump.
 * The trade's 0.5, 2 and 6 l/min through 1.5, 2.5 and 4 mm. */
static void bleed_through_a_bore(void **state)
{
    (void)state;
    struct resisting r;
    struct sp_design d = plain();
    d.tank.bleed = 0.5; /* the share does not count where a bore is given */
    const struct sp_loop_string s = {.core = {resist(&r, 20e3)}, .cores = 1};
    const double bore[] = {1.5e-3, 2.5e-3, 4e-3}, usual[] = {0.5, 2.0, 6.0};
    for (int i = 0; i < 3; ++i) {
        d.tank.bleed_bore = bore[i];
        struct sp_loop_state st = solve(&d, &s, 1, 1.0, 1.0);
        double drop = st.rise - st.jacket_drop;
        check_close(st.bleed, 0.6 * pi / 4.0 * bore[i] * bore[i] * sqrt(2.0 * drop / density), 1e-6, 0);
        check_close(st.radiator + st.bleed, st.pump, 1e-12, 0);
        check_within(st.bleed / litre_a_minute / usual[i], 0.5, 1.7);
    }
}

static double plate_drop(double bore, double flow)
{
    struct resisting r;
    struct sp_design d = plain();
    d.thermostat.none = false;
    d.thermostat.bypass_shut = 0.8;
    d.thermostat.restrictor = bore;
    const struct sp_loop_string s = {.core = {resist(&r, 1e-6)}, .cores = 1};
    struct sp_loop_state st = solve(&d, &s, 1, 1.0, 1.0);
    assert_true(st.bypass == 0.0);
    return (st.rise - st.jacket_drop) * pow(flow / st.radiator, 2.0);
}

/* A small hole contracts the jet to about pi/(pi + 2) (Kirchhoff) and loses its whole head; a bore as wide as
 * the hose is a sharp inlet, half a head (every handbook). Discs at 100 l/min: 51 kPa by the trade at 18 mm;
 * at 25 mm 14 kPa, of which the housing, not counted here, is 5 at least. */
static void restrictor_plate(void **state)
{
    (void)state;
    double flow = 100.0 * litre_a_minute;
    const double small = 1e-3, wide = 0.034;
    double head = 0.5 * density * pow(flow / (pi / 4.0 * small * small), 2.0);
    check_close(1.0 / sqrt(plate_drop(small, flow) / head), pi / (pi + 2.0), 0.05, 0);
    head = 0.5 * density * pow(flow / (pi / 4.0 * wide * wide), 2.0);
    check_close(plate_drop(wide, flow) / head, 0.5, 2e-3, 0);
    check_within(plate_drop(18e-3, flow), 0.8 * 51e3, 51e3);
    check_within(plate_drop(25e-3, flow), 14e3 - 10e3, 14e3 - 5e3);
    check_close(plate_drop(18e-3, 2.0 * flow), 4.0 * plate_drop(18e-3, flow), 1e-12, 0);
}

/* On the inlet side the valve passes cool, denser coolant: at the same drop less volume, as sqrt of density.
 */
static void valve_on_the_inlet(void **state)
{
    (void)state;
    struct resisting r;
    struct sp_design d = plain();
    assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, 0.5, &d.coolant.fluid));
    d.thermostat.none = false;
    d.thermostat.lift = 1e-4; /* all of the drop is in the valve, and the pump does not feel it */
    d.hoses.bypass = (struct sp_resistance){1.0, 1e3};
    d.hoses.jacket = (struct sp_resistance){1e-3, 150e3};
    const struct sp_loop_string s = {.core = {resist(&r, 1e-9)}, .cores = 1};
    struct sp_loop_inputs in = {.speed = 1.0, .lift = 1.0, .hot = 373.15, .cool = {313.15}};
    d.thermostat.bypass_shut = 2.0;
    struct sp_loop_state hot = solve_in(&d, &s, 1, in);
    d.thermostat.inlet_side = true;
    struct sp_loop_state cold = solve_in(&d, &s, 1, in);
    double want = sqrt(1022.95 / 1063.66); /* ASHRAE, 50 %, at 100 and 40 degC */
    check_close(cold.radiator / hot.radiator *
                    sqrt((hot.rise - hot.jacket_drop) / (cold.rise - cold.jacket_drop)),
                want, 2e-4, 0);
}

/* ---- cavitation ------------------------------------------------------------------------------------------
 */

/* A cap at 100 kPa gauge, 30 kPa lost on the way in, 50/50: 10.6, 7.9, 4.2, 1.9 m of head over the vapour
 * pressure at 95, 105, 115, 120 degC by modified Raoult. */
static void head_at_the_inlet(void **state)
{
    (void)state;
    struct sp_design d = plain();
    assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, 0.5, &d.coolant.fluid));
    d.pump.suction_flow = 2e-3;
    const double degrees[] = {95, 105, 115, 120}, head[] = {10.6, 7.88, 4.2, 1.93};
    for (int i = 0; i < 4; ++i) {
        double T = SP_ZERO_C + degrees[i], flow = 1.5e-3;
        d.pump.suction_drop = 30e3 * pow(2.0 / 1.5, 2.0) * 1000.0 / sp_coolant_density(&d.coolant.fluid, T);
        check_close(sp_npsh_available(&d, 201.325e3, T, flow), head[i], 0, 0.06);
        check_close(sp_npsh_available(&d, 201.325e3, T, 0.0) - sp_npsh_available(&d, 201.325e3, T, flow),
                    30e3 / (sp_coolant_density(&d.coolant.fluid, T) * 9.80665), 1e-9, 0);
    }
}

/* 3 % of the head is lost where available equals required, which defines it; none far above; it only falls.
 */
static void head_lost(void **state)
{
    (void)state;
    assert_true(sp_npsh_factor(-5.0, 0.0) == 1.0 && sp_npsh_factor(40.0, 4.0) == 1.0);
    for (double required = 1.0; required < 8.0; required *= 2.0)
        check_close(sp_npsh_factor(required, required), 0.97, 1e-4, 0);
    check_close(sp_npsh_factor(2.0, 4.0), 0.5, 1e-3, 0);
    double before = 0.0;
    for (double available = -3.0; available < 20.0; available += 0.01) {
        double now = sp_npsh_factor(available, 4.0);
        assert_true(now >= before && now <= 1.0);
        check_within(now - before, 0.0, 0.0027); /* a slope of 1 over required at most, no step */
        before = now;
    }
    check_within(1.0 - sp_npsh_factor(8.0, 4.0), 1e-9, 1e-7); /* still a trace at twice, so none is cut off */
    check_within(sp_npsh_factor(-1.0, 4.0), 0.0, 1e-4);
    assert_true(sp_npsh_factor(-1e4, 4.0) == 0.0);
}

static struct sp_loop_inputs at_pressure(double speed, double tank)
{
    return (struct sp_loop_inputs){
        .speed = speed, .lift = 1.0, .hot = 373.15, .cool = {368.15}, .tank = tank, .returns = 365.15};
}

/* Rotation at which the flow stops rising: with speed squared the required head meets the available at n =
 * sqrt(a/r); above, the head left hardly grows. And with pressure enough nothing changes, to the last bit. */
static void flow_stops_rising(void **state)
{
    (void)state;
    struct resisting r;
    struct sp_design d = plain();
    assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, 0.5, &d.coolant.fluid));
    const struct sp_loop_string s = {.core = {resist(&r, 20e3)}, .cores = 1};
    struct sp_loop_state unwatched = solve_in(&d, &s, 1, at_pressure(1.0, 150e3));
    assert_true(unwatched.npsh_available == 0.0 && unwatched.npsh_required == 0.0);
    d.pump.npsh = 4.0;
    struct sp_loop_state high = solve_in(&d, &s, 1, at_pressure(1.0, 400e3));
    assert_true(high.head_factor == 1.0 && high.pump == unwatched.pump &&
                high.string[0] == unwatched.string[0]);
    check_close(high.npsh_required, 4.0, 1e-15, 0);
    struct sp_loop_state knee = solve_in(&d, &s, 1, at_pressure(1.0, 110e3));
    double n = sqrt(knee.npsh_available / 4.0);
    struct sp_loop_state at = solve_in(&d, &s, 1, at_pressure(n, 110e3));
    check_close(at.head_factor, 0.97, 3e-3, 0);
    struct sp_loop_state above = solve_in(&d, &s, 1, at_pressure(1.5 * n, 110e3));
    struct sp_loop_state below = solve_in(&d, &s, 1, at_pressure(n / 1.5, 110e3));
    check_within(above.pump / at.pump, 1.0, 1.08); /* the head lost takes of the pump's own losses too */
    check_within(at.pump / below.pump, 1.47, 1.53);
    /* The rise is the curve's, less what is lost. */
    check_close(above.rise,
                above.head_factor * (2.25 * n * n * 100e3 - 100e3 / 16e-6 * above.pump * above.pump), 1e-9,
                0);
}

/* ---- whatever comes --------------------------------------------------------------------------------------
 */

static unsigned long dice = 20240607;

static double draw(double low, double high)
{
    dice = (dice * 6364136223846793005UL + 1442695040888963407UL) & 0xffffffffffffffffUL;
    return low + (high - low) * (double)(dice >> 33) / 2147483648.0;
}

static double draw_log(double low, double high)
{
    return low * pow(high / low, draw(0.0, 1.0));
}

struct random_loop {
    struct sp_design d;
    struct resisting core[24];
    struct sp_loop_string string[SP_LOOP_STRINGS];
    int strings;
    struct sp_loop_inputs in;
};

static void draw_loop(struct random_loop *x)
{
    int core = 0;
    struct sp_design *d = &x->d;
    *d = plain();
    assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, draw(0.0, 0.6), &d->coolant.fluid));
    d->thermostat.none = draw(0, 1) < 0.3;
    d->thermostat.restrictor = draw(0, 1) < 0.3 ? draw_log(3e-3, 33e-3) : 0.0;
    d->thermostat.leak = draw(0, 1) < 0.5 ? 0.003 : 0.0;
    d->thermostat.bypass_shut = draw(0.5, 1.5);
    d->thermostat.inlet_side = draw(0, 1) < 0.5;
    d->hoses.heater =
        (struct sp_resistance){draw(0, 1) < 0.5 ? draw_log(1e-5, 1e-3) : 0.0, draw_log(1e3, 1e5)};
    d->hoses.length_out = d->hoses.length_back = draw_log(0.1, 10.0);
    d->hoses.bends = draw(0.0, 20.0);
    d->tank.bleed = draw(0.0, 0.1);
    d->tank.bleed_bore = draw(0, 1) < 0.5 ? draw_log(1e-3, 1e-2) : 0.0;
    d->pump.npsh = draw(0, 1) < 0.5 ? draw_log(0.1, 20.0) : 0.0;
    d->pump.suction_drop = draw(0, 1) < 0.5 ? draw_log(1e3, 1e5) : 0.0;
    d->pump.suction_flow = 1e-3;
    x->strings = 1 + (int)draw(0.0, 4.999);
    x->in = (struct sp_loop_inputs){.speed = draw_log(1e-3, 2.0),
                                    .lift = draw(0.0, 1.0),
                                    .hot = draw(243.0, 410.0),
                                    .tank = draw_log(2e4, 6e5)};
    x->in.returns = x->in.hot - draw(0.0, 30.0);
    for (int i = 0; i < x->strings; ++i) {
        x->string[i] =
            (struct sp_loop_string){.cores = 1 + (int)draw(0.0, 2.999), .copies = floor(draw(0.0, 4.0))};
        x->in.cool[i] = x->in.hot - draw(0.0, 40.0);
        for (int k = 0; k < x->string[i].cores; ++k, ++core)
            x->string[i].core[k] = resist(&x->core[core], draw_log(1e2, 3e5));
    }
}

/* Drop of a string by the stated law, at the properties the library gives. */
static double string_drop(const struct random_loop *x, int i, double flow)
{
    const struct sp_loop_string *s = &x->string[i];
    double rho = sp_coolant_density(&x->d.coolant.fluid, x->in.cool[i]);
    double mu = sp_coolant_viscosity(&x->d.coolant.fluid, x->in.cool[i]), sum = 0.0;
    for (int k = 0; k < s->cores; ++k)
        sum += s->core[k]->design->drop.drop;
    return sum * pow(rho / 1000.0, 0.75) * pow(mu / 0.7e-3, 0.25) *
           pow(flow / fmax(s->copies, 1.0) / 1e-3, 1.75);
}

static double friction(const struct sp_hoses *h, double length, double flow, double rho, double mu)
{
    double u = flow / (pi / 4.0 * h->bore_out * h->bore_out), re = rho * u * h->bore_out / mu;
    return (fmax(64.0 / re, 0.3164 * pow(re, -0.25)) * length / h->bore_out + 0.5 * h->bends) * 0.5 * rho *
           u * u;
}

/* What the pump has left over, as a share of what it gives at nil flow; written anew from the equations. */
static double residual(const struct random_loop *x, const struct sp_loop_state *s)
{
    const struct sp_design *d = &x->d;
    const struct sp_coolant *f = &d->coolant.fluid;
    double sum = 0.0, weight = 0.0, T = 0.0;
    for (int i = 0; i < x->strings; ++i) {
        check_close(string_drop(x, i, s->string[i]), string_drop(x, 0, s->string[0]), 1e-9, 1e-250);
        T += fmax(x->string[i].copies, 1.0) * x->in.cool[i];
        weight += fmax(x->string[i].copies, 1.0);
        sum += s->string[i];
    }
    check_close(sum, s->radiator, 1e-12, 0);
    check_close(s->radiator + s->bypass + s->heater + s->bleed, s->pump, 1e-12, 0);
    T /= weight;
    double rho = sp_coolant_density(f, x->in.hot), mu = sp_coolant_viscosity(f, x->in.hot);
    double cool = sp_coolant_density(f, T), thick = sp_coolant_viscosity(f, T);
    double side = d->thermostat.inlet_side ? cool : rho, valve = 0.0, q = s->radiator;
    double bore = d->thermostat.restrictor;
    if (!d->thermostat.none && bore > 0.0) {
        double loss = 1.707 - pow(bore / d->hoses.bore_out, 2.0);
        valve = 0.5 * side * pow(loss * q / (pi / 4.0 * bore * bore), 2.0);
    } else if (!d->thermostat.none) {
        double open = fmax(x->in.lift + d->thermostat.leak * (1.0 - x->in.lift), 1e-6);
        valve = 0.5 * side * pow(q / (open * 0.6 * pi * 0.035 * 0.008), 2.0);
    }
    double hoses = q > 0.0 ? friction(&d->hoses, d->hoses.length_out, q, rho, mu) +
                                 friction(&d->hoses, d->hoses.length_back, q, cool, thick)
                           : 0.0;
    double n = x->in.speed, rise = 100e3 * n * n - 100e3 / 16e-6 * s->pump * s->pump;
    double drop =
        valve + hoses + string_drop(x, 0, s->string[0]) + 15e3 * rho / 1000.0 * pow(s->pump / 1e-3, 2.0);
    return (s->head_factor * rise - drop) / (100e3 * n * n);
}

static void whatever_comes(void **state)
{
    (void)state;
    static struct random_loop x;
    struct sp_loop_guess kept = {.flow = {0.0, 0.0}};
    int starved = 0;
    for (int i = 0; i < 20000; ++i) {
        draw_loop(&x);
        struct sp_loop l;
        struct sp_complaints c = {0};
        struct sp_place at = {.path = "car.pump.curve"};
        struct sp_loop_guess fresh = {.flow = {0.0, 0.0}};
        struct sp_loop_state s, again;
        assert_true(sp_loop_build(&x.d, x.string, x.strings, &l, &at, &c));
        assert_int_equal(sp_loop_solve(&l, &x.in, &fresh, &s), SP_OK);
        check_within(residual(&x, &s), -1e-9, 1e-9);
        assert_int_equal(sp_loop_solve(&l, &x.in, &kept, &again), SP_OK);
        check_close(again.pump, s.pump, 1e-8, 1e-14);
        for (int k = 0; k < x.strings; ++k)
            check_close(again.string[k], s.string[k], 1e-8, 1e-14);
        starved += s.head_factor < 0.9;
        sp_loop_free(&l);
    }
    assert_true(starved > 1000);
}

/* Faster, more copies, more pressure at the tank: never less flow. */
static void more_gives_more(void **state)
{
    (void)state;
    static struct random_loop x;
    for (int i = 0; i < 500; ++i) {
        draw_loop(&x);
        x.d.pump.npsh = i % 2 ? 4.0 : 0.0;
        struct sp_loop_state s = solve_in(&x.d, x.string, x.strings, x.in), more;
        struct sp_loop_inputs in = x.in;
        in.tank *= 1.3;
        more = solve_in(&x.d, x.string, x.strings, in);
        assert_true(more.pump >= s.pump * (1.0 - 1e-9) && more.head_factor >= s.head_factor - 1e-9);
        x.string[0].copies = fmax(x.string[0].copies, 1.0) + 1.0;
        if (!(x.d.pump.npsh > 0.0)) {
            for (int k = 1; k < x.strings; ++k)
                x.in.cool[k] = x.in.cool[0];
            s = solve_in(&x.d, x.string, x.strings, x.in);
            in = x.in;
            in.speed *= 1.1;
            more = solve_in(&x.d, x.string, x.strings, in);
            assert_true(more.radiator > s.radiator && more.string[0] > s.string[0]);
            x.string[0].copies += 1.0;
            more = solve_in(&x.d, x.string, x.strings, x.in);
            assert_true(more.radiator > s.radiator && more.string[0] > s.string[0]);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equal_strings),        cmocka_unit_test(unlike_strings),
        cmocka_unit_test(cores_in_a_row),       cmocka_unit_test(no_resistance),
        cmocka_unit_test(heater_beside_bypass), cmocka_unit_test(bleed_through_a_bore),
        cmocka_unit_test(restrictor_plate),     cmocka_unit_test(valve_on_the_inlet),
        cmocka_unit_test(head_at_the_inlet),    cmocka_unit_test(head_lost),
        cmocka_unit_test(flow_stops_rising),    cmocka_unit_test(whatever_comes),
        cmocka_unit_test(more_gives_more),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
