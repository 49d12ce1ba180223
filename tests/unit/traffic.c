/* The air behind another car: knots of common practice, and what must hold between them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/traffic.h"

static void knots(void **state)
{
    (void)state;
    const double known[][3] = {{40, 0.9, 1.5}, {20, 0.75, 2.5}, {10, 0.6, 4.0}, {5, 0.5, 6.0}, {80, 1.0, 0.0}};
    for (int i = 0; i < 5; ++i) {
        struct sp_traffic t = sp_traffic_behind(known[i][0]);
        check_close(t.wake, known[i][1], 1e-12, 0);
        check_close(t.warming, known[i][2], 1e-12, 1e-12);
        check_close(sp_traffic_warming(known[i][1]), known[i][2], 1e-12, 1e-12);
    }
}

static void beyond(void **state)
{
    (void)state;
    const double clear[] = {0.0, -3.0, 80.0, 1e6, NAN};
    for (int i = 0; i < 5; ++i) {
        assert_true(sp_traffic_behind(clear[i]).wake == 1.0);
        assert_true(sp_traffic_behind(clear[i]).warming == 0.0);
    }
    assert_true(sp_traffic_behind(1.0).wake == 0.5);
    assert_true(sp_traffic_warming(0.2) == 6.0);
    assert_true(sp_traffic_warming(1.3) == 0.0);
    assert_true(sp_traffic_felt(0.0) == 0.0);
    assert_true(sp_traffic_felt(-2.0) == 0.0);
    check_close(sp_traffic_felt(1.5), 0.5, 1e-15, 0);
    assert_true(sp_traffic_felt(50.0) == 1.0);
}

/* The farther, the cleaner; no jump anywhere. */
static void rises(void **state)
{
    (void)state;
    struct sp_traffic before = sp_traffic_behind(3.0);
    for (double x = 3.0; x < 90.0; x *= 1.001) {
        struct sp_traffic t = sp_traffic_behind(x);
        assert_true(t.wake >= before.wake && t.wake - before.wake < 1e-3);
        assert_true(t.warming <= before.warming && before.warming - t.warming < 1e-2);
        check_close(sp_traffic_warming(t.wake), t.warming, 1e-9, 1e-9);
        before = t;
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(knots), cmocka_unit_test(beyond), cmocka_unit_test(rises)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
