/* The smoothing of a noisy channel: exactness, published weights, noise, jumps, uneven rows, cost.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "drive/smooth.h"

#include <stdlib.h>
#include <time.h>

static double *room(size_t n)
{
    double *p = calloc(n, sizeof *p);
    assert_non_null(p);
    return p;
}

/* A small generator of its own (Numerical Recipes' quick linear congruential), so that runs repeat. */
static double noise(uint32_t *seed)
{
    double sum = 0;
    for (int k = 0; k < 12; k++) {
        *seed = 1664525u * *seed + 1013904223u;
        sum += *seed / 4294967296.0;
    }
    return sum - 6; /* variance 1, mean 0 */
}

/* Any quadratic over any rows comes back, slope too. */
static void quadratics_are_exact(void **state)
{
    (void)state;
    enum { N = 3000 };
    double *t = room(N), *y = room(N), *s = room(N), *d = room(N);
    uint32_t seed = 7;
    for (int kind = 0; kind < 3; kind++) {
        for (size_t i = 1; i < N; i++) {
            seed = 1664525u * seed + 1013904223u;
            double u = (seed >> 8) / 16777216.0;
            t[i] = t[i - 1] + (kind == 0 ? 0.02 : kind == 1 ? 0.01 + 0.09 * u : 0.5 + u);
        }
        double half_width[] = {0.3, 1.7, 40};
        for (size_t k = 0; k < 3; k++) {
            for (size_t i = 0; i < N; i++)
                y[i] = 30 - 0.7 * (t[i] - 20) + 0.013 * (t[i] - 20) * (t[i] - 20);
            assert_true(sp_smooth(N, t, y, half_width[k], s, d));
            for (size_t i = 0; i < N; i++) {
                check_close(s[i], y[i], 1e-9, 1e-8);
                check_close(d[i], -0.7 + 0.026 * (t[i] - 20), 1e-8, 1e-8);
            }
        }
    }
    free(t), free(y), free(s), free(d);
}

/* Weights of the quadratic filter from the tables of Savitzky and Golay, Anal. Chem. 36 (1964), tables I
 * and III (with the known corrections of Steinier et al. 1972 these rows agree): the answer to one row of 1.
 */
static void weights_are_the_published(void **state)
{
    (void)state;
    static const double five[] = {-3, 12, 17, 12, -3}, nine[] = {-21, 14, 39, 54, 59, 54, 39, 14, -21};
    double t[41], y[41], s[41], d[41];
    for (int i = 0; i < 41; i++)
        t[i] = 0.1 * i, y[i] = i == 20;
    assert_true(sp_smooth(41, t, y, 0.25, s, d));
    for (int k = -2; k <= 2; k++) {
        check_close(s[20 + k], five[k + 2] / 35, 0, 1e-12);
        check_close(d[20 + k], -k / 10.0 / 0.1, 0, 1e-11);
    }
    check_close(s[17], 0, 0, 1e-12);
    assert_true(sp_smooth(41, t, y, 0.45, s, d));
    for (int k = -4; k <= 4; k++) {
        check_close(s[20 + k], nine[k + 4] / 231, 0, 1e-12);
        check_close(d[20 + k], -k / 60.0 / 0.1, 0, 1e-11);
    }
}

/* White noise through the filter of 2m+1 rows keeps 3(3m2+3m-1)/((2m-1)(2m+1)(2m+3)) of its variance, its
 * slope 3/(m(m+1)(2m+1)) per step squared: sums of squares of the weights, worked out by hand. */
static void noise_falls_as_it_must(void **state)
{
    (void)state;
    enum { N = 200000, M = 25 };
    double *t = room(N), *y = room(N), *s = room(N), *d = room(N), m = M, vs = 0, vd = 0;
    uint32_t seed = 1;
    for (size_t i = 0; i < N; i++)
        t[i] = 0.02 * (double)i, y[i] = noise(&seed);
    assert_true(sp_smooth(N, t, y, 0.02 * (M + 0.5), s, d));
    for (size_t i = 100; i < N - 100; i++)
        vs += s[i] * s[i], vd += d[i] * d[i];
    vs /= N - 200, vd /= N - 200;
    check_close(vs, 3 * (3 * m * m + 3 * m - 1) / ((2 * m - 1) * (2 * m + 1) * (2 * m + 3)), 0.05, 0);
    check_close(vd * 0.02 * 0.02, 3 / (m * (m + 1) * (2 * m + 1)), 0.05, 0);
    free(t), free(y), free(s), free(d);
}

/* A slow sine with noise: no shift in time (its product with the cosine is nil), nearly all amplitude. */
static void no_shift_in_time(void **state)
{
    (void)state;
    enum { N = 50000 };
    double *t = room(N), *y = room(N), *s = room(N), *d = room(N), in = 0, across = 0, slope = 0, w = 0.6;
    uint32_t seed = 3;
    for (size_t i = 1; i < N; i++) {
        seed = 1664525u * seed + 1013904223u;
        t[i] = t[i - 1] + 0.01 + 0.02 * (seed >> 8) / 16777216.0;
    }
    for (size_t i = 0; i < N; i++)
        y[i] = 10 * sin(w * t[i]) + 0.5 * noise(&seed);
    assert_true(sp_smooth(N, t, y, 0.5, s, d));
    for (size_t i = 0; i < N; i++) {
        in += (s[i] - 10 * sin(w * t[i])) * sin(w * t[i]) / N * 2;
        across += (s[i] - 10 * sin(w * t[i])) * cos(w * t[i]) / N * 2;
        slope += (d[i] - 10 * w * cos(w * t[i])) * cos(w * t[i]) / N * 2;
    }
    check_close(in, 0, 0, 0.02);
    check_close(across, 0, 0, 0.01); /* 0.01 of 10 at 0.6 rad/s is 1.7 ms of time; noise gives 0.003 */
    check_close(slope, 0, 0, 0.06);
    free(t), free(y), free(s), free(d);
}

/* Two rows at one time: each side is smoothed on its own. */
static void jumps_stay(void **state)
{
    (void)state;
    double t[] = {0, 1, 2, 3, 4, 4, 5, 6, 7, 8}, y[] = {5, 5, 5, 5, 5, 20, 21, 22, 23, 24}, s[10], d[10];
    assert_true(sp_smooth(10, t, y, 2.5, s, d));
    for (int i = 0; i < 10; i++) {
        check_close(s[i], y[i], 1e-12, 0);
        check_close(d[i], i < 5 ? 0 : 1, 0, 1e-12);
    }
    /* two jumps close together: level between them, no wild slope */
    double t2[] = {0, 1, 1, 1.0001, 1.0001, 2}, y2[] = {1, 1, 9, 9.5, 3, 3};
    assert_true(sp_smooth(6, t2, y2, 1, s, d));
    check_close(d[2], 0, 0, 1e-12);
    check_close(s[2], 9.25, 1e-12, 0);
}

/* Rows in tight heaps must not give slopes of heap height over heap width. */
static void heaps_give_no_wild_slope(void **state)
{
    (void)state;
    enum { N = 600 };
    double t[N], y[N], s[N], d[N];
    uint32_t seed = 11;
    for (int i = 0; i < N; i++)
        t[i] = i / 10 + 1e-5 * (i % 10), y[i] = 20 + 0.1 * noise(&seed);
    assert_true(sp_smooth(N, t, y, 0.5, s, d));
    for (int i = 0; i < N; i++) {
        check_within(s[i], 19.6, 20.4);
        check_within(d[i], -0.6, 0.6);
    }
}

static void ends_and_few_rows(void **state)
{
    (void)state;
    double t[] = {0, 1, 2}, y[] = {3, 5, 9}, s[3], d[3];
    assert_true(sp_smooth(0, t, y, 1, s, d));
    assert_true(sp_smooth(1, t, y, 1, s, d));
    check_close(s[0], 3, 0, 0);
    check_close(d[0], 0, 0, 0);
    assert_true(sp_smooth(2, t, y, 1, s, d));
    check_close(s[1], 5, 1e-12, 0);
    check_close(d[0], 2, 1e-12, 0);
    assert_true(sp_smooth(3, t, y, 0.2, s, d)); /* the parabola through three rows: 3 + x + x^2 */
    check_close(d[0], 1, 1e-12, 0);
    check_close(d[2], 5, 1e-12, 0);
    assert_true(sp_smooth(3, t, y, 0.2, s, NULL));
    assert_false(sp_smooth(3, t, y, 0, s, d));
    assert_false(sp_smooth(3, t, y, NAN, s, d));
    double back[] = {0, 2, 1}, bad[] = {0, NAN, 1};
    assert_false(sp_smooth(3, back, y, 1, s, d));
    assert_false(sp_smooth(3, t, bad, 1, s, d));
}

/* A million rows in one second and windows of that size: the cost must not be their product. */
static void cost_is_linear(void **state)
{
    (void)state;
    enum { N = 1000000 };
    double *t = room(N), *y = room(N), *s = room(N), *d = room(N);
    for (size_t i = 0; i < N; i++)
        t[i] = 1e-6 * (double)i, y[i] = 5 + t[i] * t[i];
    clock_t begin = clock();
    assert_true(sp_smooth(N, t, y, 0.3, s, d));
    check_within((double)(clock() - begin) / CLOCKS_PER_SEC, 0, 10);
    for (size_t i = 0; i < N; i += 997) {
        check_close(s[i], y[i], 1e-9, 0);
        check_close(d[i], 2 * t[i], 0, 1e-7);
    }
    free(t), free(y), free(s), free(d);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(quadratics_are_exact),
        cmocka_unit_test(weights_are_the_published),
        cmocka_unit_test(noise_falls_as_it_must),
        cmocka_unit_test(no_shift_in_time),
        cmocka_unit_test(jumps_stay),
        cmocka_unit_test(heaps_give_no_wild_slope),
        cmocka_unit_test(ends_and_few_rows),
        cmocka_unit_test(cost_is_linear),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
