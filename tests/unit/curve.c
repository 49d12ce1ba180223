/* Pressure over flow: shapes, laws of speed, ends, and what cannot be used.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/curve.h"

static double pairs[] = {0.0, 160.0, 0.30, 121.0, 0.50, 57.0, 0.63, 0.0};
static double lifted[] = {0.1, 150.0, 0.3, 120.0, 0.6, 30.0}; /* begins and ends off the axes */

static struct sp_curve build(struct sp_curve_design d)
{
    struct sp_complaints c = {0};
    struct sp_curve out;
    assert_true(sp_curve_build(&d, &out, NULL, &c));
    assert_int_equal(c.count, 0);
    return out;
}

static struct sp_curve_design table(double *cells, size_t rows)
{
    return (struct sp_curve_design){NAN, NAN, {rows, 2, cells}};
}

static void parabola(void **state)
{
    (void)state;
    struct sp_curve c = build((struct sp_curve_design){300.0, 1.0, {0, 0, NULL}});
    check_close(sp_curve_at(&c, 1.0, 0.0), 300.0, 0, 0);
    check_close(sp_curve_at(&c, 1.0, 1.0), 0.0, 0, 1e-12);
    check_close(sp_curve_at(&c, 0.8, 0.5), 117.0, 1e-12, 0); /* 0.64 x 300 (1 - 0.390625), by the fan laws */
    check_close(sp_curve_at(&c, 1.0, 2.0), -900.0, 1e-12, 0);
    check_close(sp_curve_at(&c, 0.0, 0.5), -75.0, 1e-12, 0); /* standing it is a resistance */
    check_close(sp_curve_at(&c, 1.0, -0.5), 300.0, 1e-12, 0);
    check_close(sp_curve_at(&c, 0.0, 0.0), 0.0, 0, 0);
    sp_curve_free(&c);
}

static void through_the_pairs(void **state)
{
    (void)state;
    struct sp_curve c = build(table(pairs, 4));
    for (int i = 0; i < 4; ++i)
        check_close(sp_curve_at(&c, 1.0, pairs[2 * i]), pairs[2 * i + 1], 1e-12, 1e-9);
    check_close(c.free_flow, 0.63, 0, 0);
    double before = INFINITY;
    for (double q = 0.0; q < 2.0; q += 1e-3) { /* monotone between, and past the end */
        double p = sp_curve_at(&c, 1.0, q);
        assert_true(p < before);
        before = p;
    }
    sp_curve_free(&c);
    c = build(table(pairs, 2)); /* two pairs: a straight line */
    check_close(sp_curve_at(&c, 1.0, 0.15), 140.5, 1e-12, 0);
    sp_curve_free(&c);
}

/* Value and slope go on without a step at both ends, at any speed; affinity holds everywhere. */
static void smooth_ends(void **state)
{
    (void)state;
    double *const tables[] = {pairs, lifted};
    const size_t rows[] = {4, 3};
    for (int t = 0; t < 2; ++t) {
        struct sp_curve c = build(table(tables[t], rows[t]));
        const double ends[] = {tables[t][0], tables[t][2 * rows[t] - 2]}, h = 1e-7;
        for (double n = 0.05; n < 1.4; n += 0.15)
            for (int e = 0; e < 2; ++e) {
                double q = n * ends[e];
                if (q == 0.0) continue;
                double left = sp_curve_at(&c, n, q - h), at = sp_curve_at(&c, n, q),
                       right = sp_curve_at(&c, n, q + h);
                check_close(left, right, 0, 1e-3);
                check_close((right - at) / h, (at - left) / h, 1e-3, 0.5);
            }
        for (double n = 0.01; n < 1.5; n += 0.07)
            for (double q = -1.0; q < 2.0; q += 0.13)
                check_close(sp_curve_at(&c, n, n * q), n * n * sp_curve_at(&c, 1.0, q), 1e-10, 1e-10);
        sp_curve_free(&c);
    }
}

/* Down to nil speed the curve closes in on its resistance. */
static void regular_at_nil_speed(void **state)
{
    (void)state;
    struct sp_curve c = build(table(pairs, 4));
    for (double q = 0.01; q < 1.0; q += 0.1) {
        double nil = sp_curve_at(&c, 0.0, q);
        assert_true(nil < 0.0);
        check_close(sp_curve_at(&c, 1e-6, q), nil, 1e-6, 1e-9);
    }
    assert_true(isnan(sp_curve_at(&c, 1.0, NAN)));
    sp_curve_free(&c);
    struct sp_curve p = build((struct sp_curve_design){300.0, 1.0, {0, 0, NULL}});
    assert_true(isnan(sp_curve_at(&p, 1.0, NAN))); /* and no table is looked for */
    sp_curve_free(&p);
}

static void refused(struct sp_curve_design d)
{
    struct sp_complaints c = {0};
    struct sp_curve out;
    assert_false(sp_curve_build(&d, &out, NULL, &c));
    assert_int_equal(c.count, 1);
    sp_complaints_free(&c);
    sp_curve_free(&out);
}

static void what_cannot_be_used(void **state)
{
    (void)state;
    double one[] = {0.0, 100.0}, back[] = {0.0, 100.0, 0.5, 50.0, 0.4, 20.0},
           same[] = {0.0, 100.0, 0.0, 50.0};
    double rising[] = {0.0, 100.0, 0.5, 150.0}, below[] = {-0.1, 100.0, 0.5, 0.0},
           none[] = {0.0, NAN, NAN, 0.0};
    refused(table(one, 1));
    refused(table(back, 3));
    refused(table(same, 2));
    refused(table(rising, 2));
    refused(table(below, 2));
    refused(table(none, 2));
    refused((struct sp_curve_design){NAN, NAN, {0, 0, NULL}});
    refused((struct sp_curve_design){0.0, 1.0, {0, 0, NULL}});
    refused((struct sp_curve_design){100.0, -1.0, {0, 0, NULL}});
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(parabola), cmocka_unit_test(through_the_pairs),
                                       cmocka_unit_test(smooth_ends), cmocka_unit_test(regular_at_nil_speed),
                                       cmocka_unit_test(what_cannot_be_used)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
