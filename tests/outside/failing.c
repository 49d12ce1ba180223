/* Onset of boiling at a wall against values worked out by hand from the published correlation.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "circuit/failing.h"
#include "swirlpot/fluid.h"

#include <math.h>

/* Bergles & Rohsenow 1964, water: 1082 p^1.156 (1.8 dT)^(2.16/p^0.0234) with p in bar, evaluated apart. */
static void onset_in_water(void **state)
{
    (void)state;
    const struct {
        double over, flux;
    } at_two_bar[] = {{2.0, 36.7e3}, {4.0, 160e3}, {6.0, 379e3}, {8.0, 698e3}};
    for (int i = 0; i < 4; ++i) {
        check_close(sp_boil_onset_flux(2e5, at_two_bar[i].over), at_two_bar[i].flux, 2e-3, 0);
        check_close(sp_boil_onset_excess(2e5, at_two_bar[i].flux), at_two_bar[i].over, 2e-3, 0);
    }
    check_close(sp_boil_onset_excess(2e5, 375e3), 5.97, 1e-3, 0);
    /* At 1 bar the powers of p are 1: 1082 (1.8 5)^2.16. */
    check_close(sp_boil_onset_flux(1e5, 5.0), 1082.0 * exp(2.16 * log(9.0)), 1e-12, 0);
}

/* Water of 100 degC at 2 bar absolute, 14 334 W/m2K: the wall boils at the excess where flux and onset meet.
 */
static void onset_where_flux_meets(void **state)
{
    (void)state;
    double boils = 393.36, h = 14334.0, bulk = 373.15; /* IAPWS: 120.21 degC at 2 bar */
    double wall = boils + 5.97;
    check_close(sp_local_boil_margin(2e5, boils, wall, h * (wall - bulk)), 0.0, 0, 0.02);
    assert_true(sp_local_boil_margin(2e5, boils, wall + 1.0, h * (wall + 1.0 - bulk)) < 0.0);
    assert_true(sp_local_boil_margin(2e5, boils, wall - 1.0, h * (wall - 1.0 - bulk)) > 0.0);
}

static void onset_at_the_ends(void **state)
{
    (void)state;
    assert_true(sp_boil_onset_flux(2e5, 0.0) == 0.0 && sp_boil_onset_flux(2e5, -3.0) == 0.0);
    assert_true(sp_boil_onset_excess(2e5, 0.0) == 0.0 && sp_boil_onset_excess(2e5, -1e5) == 0.0);
    check_close(sp_local_boil_margin(2e5, 393.0, 380.0, 0.0), 13.0, 1e-12,
                0); /* no flux: it boils where bulk does */
    check_close(sp_boil_onset_flux(2e4, 5.0), sp_boil_onset_flux(1e5, 5.0), 1e-12, 0); /* held below 1 bar */
    for (double q = 1.0; q < 1e7; q *= 3.0)
        for (double p = 1e4; p < 2e7; p *= 2.0)
            check_close(sp_boil_onset_flux(p, sp_boil_onset_excess(p, q)), q, 1e-9, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(onset_in_water),
                                       cmocka_unit_test(onset_where_flux_meets),
                                       cmocka_unit_test(onset_at_the_ends)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
