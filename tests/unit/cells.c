/* Cells: ends of the ranges, and the relations between their functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/cells.h"

static void air_effectiveness(void **state)
{
    (void)state;
    check_close(sp_cells_air_effectiveness(1.0, 1.0), 0.632121, 0, 5e-7);
    check_close(sp_cells_air_effectiveness(1e-9, 1.0), 1e-9, 1e-8, 0);
    assert_true(sp_cells_air_effectiveness(0.0, 1.0) == 0.0);
    assert_true(sp_cells_air_effectiveness(5.0, 0.0) == 1.0); /* air that stands is as warm as the wall */
    assert_true(sp_cells_air_effectiveness(1e6, 1.0) == 1.0);
}

static void weight_falls(void **state)
{
    (void)state;
    double before = 0.5 + 1e-12;
    for (double k = 1e-9; k < 1e5; k *= 1.3) {
        double w = sp_cells_weight(k);
        assert_true(w > 0.0 && w < before);
        if (k > 1e-6) before = w;
    }
}

/* One cell by hand: coolant 2, film 3, air side 1 to the wall: q = 1/(1/3 + 1) (w T_in + (1 - w) T_out). */
static void one_cell_by_hand(void **state)
{
    (void)state;
    double film = 3.0, rate = 2.0, air_rate = 4.0, air = -4.0 * log1p(-0.25), w = sp_cells_weight(1.5);
    double joint = 1.0 / (1.0 / film + 1.0); /* 4 (1 - e^(-air/4)) = 1 */
    double out = (rate - joint * w) / (rate + joint * (1.0 - w));
    check_close(sp_cells_rejection(1, film, rate, air, air_rate), rate * (1.0 - out), 1e-13, 0);
    check_close(sp_cells_rejection(2, 2.0 * film, rate, 2.0 * air, 2.0 * air_rate), rate * (1.0 - out * out),
                1e-13, 0);
}

static void thin_and_thick(void **state)
{
    (void)state;
    /* little conductance: heat is conductance; little coolant: heat is what it carries */
    check_close(sp_cells_rejection(10, 1e-6, 1.0, 1e-6, 1.0), 0.5e-6, 1e-5, 0);
    check_close(sp_cells_rejection(10, 100.0, 1e-6, 100.0, 1e6), 1e-6, 1e-9, 0);
    assert_true(isfinite(sp_cells_rejection(10, 1e9, 1e-9, 1e9, 1e9)));
    assert_true(sp_cells_rejection(10, NAN, 1.0, 1.0, 1.0) == 0.0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(air_effectiveness), cmocka_unit_test(weight_falls),
                                       cmocka_unit_test(one_cell_by_hand), cmocka_unit_test(thin_and_thick)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
