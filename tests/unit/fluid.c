/* Own behaviour of the fluid room: limits, inverses, integrals, signs.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "swirlpot/fluid.h"

static void atmosphere_limits(void **state)
{
    (void)state;
    for (double z = -2000; z <= 11000; z += 125)
        check_close(sp_isa_altitude(sp_isa_pressure(z)), z, 0, 1e-6);
    const double outside[] = {-2000.1, 11000.1, NAN, INFINITY, -INFINITY, -6356766.0};
    for (size_t i = 0; i < 6; i++) {
        assert_true(isnan(sp_isa_pressure(outside[i])));
        assert_true(isnan(sp_isa_temperature(outside[i])));
    }
    const double pressures[] = {0, -1, NAN, 1e3, 1e9, INFINITY};
    for (size_t i = 0; i < 6; i++)
        assert_true(isnan(sp_isa_altitude(pressures[i])));
}

static void moist_air_limits(void **state)
{
    (void)state;
    struct sp_moist dry = sp_moist_air(300, 1e5, 0);
    check_close(dry.R, SP_R_DRY, 1e-15, 0);
    check_close(dry.cp, SP_CP_DRY, 1e-15, 0);
    check_close(sp_air_density(800, 1e5, 0), 1e5 / (SP_R_DRY * 800), 1e-14, 0); /* dry: any temperature */
    /* cap: at 60 degC and 10 kPa saturation would be twice the pressure; half the molecules are vapour */
    double half = 5e3 / SP_R_DRY + 5e3 / SP_R_VAPOUR;
    check_close(sp_air_density(333.15, 1e4, 1), half / 333.15, 1e-13, 0);
    /* wetter is lighter and holds more heat */
    double rho = 2, cp = 0;
    for (double humidity = 0; humidity <= 1; humidity += 0.125) {
        struct sp_moist m = sp_moist_air(310, 95e3, humidity);
        assert_true(sp_air_density(310, 95e3, humidity) < rho && m.cp > cp);
        rho = sp_air_density(310, 95e3, humidity);
        cp = m.cp;
    }
    const double bad[][3] = {{0, 1e5, 0},      {300, 0, 0},     {300, 1e5, -0.01},
                             {300, 1e5, 1.01}, {NAN, 1e5, 0},   {300, NAN, 0},
                             {300, 1e5, NAN},  {400, 1e5, 0.5}, {200, 1e5, 0.5}};
    for (size_t i = 0; i < sizeof bad / sizeof *bad; i++)
        assert_true(isnan(sp_air_density(bad[i][0], bad[i][1], bad[i][2])));
}

static void films_are_held(void **state)
{
    (void)state;
    double (*const films[])(double) = {sp_air_viscosity, sp_air_conductivity, sp_air_cp_film, sp_air_prandtl};
    for (size_t i = 0; i < 4; i++) {
        check_close(films[i](100), films[i](240), 0, 0);
        check_close(films[i](900), films[i](420), 0, 0);
        assert_true(films[i](240) != films[i](420));
        assert_true(isnan(films[i](NAN)));
    }
}

static void refused_mixes(void **state)
{
    (void)state;
    struct sp_coolant c;
    const double shares[] = {-0.01, 0.61, NAN, INFINITY, 50};
    for (size_t i = 0; i < 5; i++) {
        assert_false(sp_coolant_mix(SP_ETHYLENE_GLYCOL, shares[i], &c));
        assert_false(sp_coolant_mix(SP_PROPYLENE_GLYCOL, shares[i], &c));
        assert_false(sp_coolant_mix(SP_WATER, shares[i], &c));
    }
    assert_false(sp_coolant_mix(SP_WATER, 0.3, &c));
    assert_false(sp_coolant_mix(SP_PROPYLENE_GLYCOL, 0.51, &c));
    assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, 60 * 0.01, &c));
    assert_true(sp_coolant_mix(SP_PROPYLENE_GLYCOL, 0.5, &c));
}

/* No glycol is water, whatever it is called. */
static void nil_share_is_water(void **state)
{
    (void)state;
    struct sp_coolant w, e, p;
    assert_true(sp_coolant_mix(SP_WATER, 0, &w) && sp_coolant_mix(SP_ETHYLENE_GLYCOL, 0, &e) &&
                sp_coolant_mix(SP_PROPYLENE_GLYCOL, 0, &p));
    for (double T = 260; T < 430; T += 7) {
        check_close(sp_coolant_density(&e, T), sp_coolant_density(&w, T), 0, 0);
        check_close(sp_coolant_viscosity(&p, T), sp_coolant_viscosity(&w, T), 0, 0);
        check_close(sp_coolant_enthalpy(&p, T), sp_coolant_enthalpy(&w, T), 0, 0);
        check_close(sp_coolant_vapour_pressure(&e, T), sp_coolant_vapour_pressure(&w, T), 0, 0);
    }
    check_close(w.water_mole, 1, 0, 0);
    check_close(p.water_mole, 1, 0, 0);
}

/* Calls `check` for every kind over its shares, 2 % apart. */
static void every_mix(void (*check)(const struct sp_coolant *))
{
    struct sp_coolant c;
    assert_true(sp_coolant_mix(SP_WATER, 0, &c));
    check(&c);
    for (int i = 0; i <= 30; i++) {
        assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, 0.02 * i, &c));
        check(&c);
    }
    for (int i = 0; i <= 25; i++) {
        assert_true(sp_coolant_mix(SP_PROPYLENE_GLYCOL, 0.02 * i, &c));
        check(&c);
    }
}

/* Central differences of the enthalpy give the heat capacity, beyond both ends too, and properties
 * stand still there. */
static void check_enthalpy(const struct sp_coolant *c)
{
    check_close(sp_coolant_enthalpy(c, SP_ZERO_C), 0, 0, 1e-9);
    for (double T = 220; T < 480; T += 3.7) {
        double d = 1e-2, slope = (sp_coolant_enthalpy(c, T + d) - sp_coolant_enthalpy(c, T - d)) / (2 * d);
        check_close(slope, sp_coolant_cp(c, T), 1e-5, 0); /* 1e-5: the kink at an end of the range */
    }
    double low = c->t_low + SP_ZERO_C, high = c->t_high + SP_ZERO_C;
    check_close(sp_coolant_cp(c, low - 40), sp_coolant_cp(c, low), 1e-14, 0);
    check_close(sp_coolant_density(c, high + 40), sp_coolant_density(c, high), 1e-14, 0);
    check_close(sp_coolant_viscosity(c, low - 40), sp_coolant_viscosity(c, low), 1e-13, 0);
    check_close(sp_coolant_conductivity(c, high + 40), sp_coolant_conductivity(c, high), 1e-14, 0);
}

static void enthalpy(void **state)
{
    (void)state;
    every_mix(check_enthalpy);
}

/* Physical sense over the whole range: hotter is thinner and lighter. */
static void check_sense(const struct sp_coolant *c)
{
    double rho = 1e9, mu = 1e9, h = -1e9, p = 0;
    for (double T = c->t_low + SP_ZERO_C; T <= c->t_high + SP_ZERO_C; T += 1.3) {
        /* water is densest at 4 degC, its fit at 0 */
        assert_true(sp_coolant_density(c, T) < rho && sp_coolant_viscosity(c, T) < mu);
        assert_true(sp_coolant_enthalpy(c, T) > h && sp_coolant_vapour_pressure(c, T) > p);
        rho = sp_coolant_density(c, T);
        mu = sp_coolant_viscosity(c, T);
        h = sp_coolant_enthalpy(c, T);
        p = sp_coolant_vapour_pressure(c, T);
        check_within(rho, 900, 1120);
        check_within(sp_coolant_cp(c, T), 2800, 4300);
        check_within(sp_coolant_conductivity(c, T), 0.3, 0.7);
        check_within(mu, 0.18e-3, 0.2);
        check_close(sp_coolant_prandtl(c, T), sp_coolant_cp(c, T) * mu / sp_coolant_conductivity(c, T), 1e-14,
                    0);
    }
}

static void sense(void **state)
{
    (void)state;
    every_mix(check_sense);
}

static void check_boiling(const struct sp_coolant *c)
{
    for (double ln = log(1.0001e3); ln < log(5e6); ln += 0.11) {
        double p = exp(ln), T = sp_coolant_boiling(c, p);
        check_close(sp_coolant_vapour_pressure(c, T), p, 1e-12, 0);
        check_close(sp_coolant_boiling(c, sp_coolant_vapour_pressure(c, T)), T, 1e-13, 0);
    }
    check_close(sp_coolant_vapour_pressure(c, sp_coolant_boiling(c, 1e3)), 1e3, 1e-12, 0);
    check_close(sp_coolant_vapour_pressure(c, sp_coolant_boiling(c, 5e6)), 5e6, 1e-12, 0);
    const double bad[] = {0, -1e5, 999, 5.1e6, NAN, INFINITY};
    for (size_t i = 0; i < 6; i++)
        assert_true(isnan(sp_coolant_boiling(c, bad[i])));
    /* never infinite, never falling, whatever the temperature */
    double p = 0;
    for (double T = 1; T < 3000; T *= 1.05) {
        assert_true(sp_coolant_vapour_pressure(c, T) >= p && isfinite(sp_coolant_vapour_pressure(c, T)));
        p = sp_coolant_vapour_pressure(c, T);
    }
    assert_true(isnan(sp_coolant_vapour_pressure(c, NAN)) && isnan(sp_coolant_density(c, NAN)) &&
                isnan(sp_coolant_enthalpy(c, NAN)) && isnan(sp_coolant_viscosity(c, NAN)));
}

static void boiling(void **state)
{
    (void)state;
    every_mix(check_boiling);
}

/* Along the share: water content falls, boiling rises, nothing jumps. */
static void along_the_share(void **state)
{
    (void)state;
    const enum sp_coolant_kind kinds[] = {SP_ETHYLENE_GLYCOL, SP_PROPYLENE_GLYCOL};
    for (int k = 0; k < 2; k++) {
        struct sp_coolant before, now;
        assert_true(sp_coolant_mix(kinds[k], 0, &before));
        for (int i = 1; i <= (k == 0 ? 600 : 500); i++) {
            assert_true(sp_coolant_mix(kinds[k], 1e-3 * i, &now));
            assert_true(now.water_mole < before.water_mole);
            assert_true(sp_coolant_boiling(&now, 1.5e5) > sp_coolant_boiling(&before, 1.5e5));
            check_close(sp_coolant_density(&now, 350), sp_coolant_density(&before, 350), 1e-3, 0);
            check_close(sp_coolant_cp(&now, 350), sp_coolant_cp(&before, 350), 1e-3, 0);
            check_close(sp_coolant_viscosity(&now, 350), sp_coolant_viscosity(&before, 350), 6e-3, 0);
            before = now;
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(atmosphere_limits),
        cmocka_unit_test(moist_air_limits),
        cmocka_unit_test(films_are_held),
        cmocka_unit_test(refused_mixes),
        cmocka_unit_test(nil_share_is_water),
        cmocka_unit_test(enthalpy),
        cmocka_unit_test(sense),
        cmocka_unit_test(boiling),
        cmocka_unit_test(along_the_share),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
