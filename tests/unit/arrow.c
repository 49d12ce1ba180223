/* The structured solver against dense LU of the same matrix. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include <gsl/gsl_linalg.h>
#include <gsl/gsl_rng.h>
#include <stdlib.h>
#include <string.h>

#include "circuit/arrow.h"

static gsl_rng *dice;

static double any(void)
{
    return 2.0 * gsl_rng_uniform(dice) - 1.0;
}

/* Position of a state in the band, or -1: hose out, coolant and wall by turns, hose back. */
static int band_place(const struct sp_layout *l, int state)
{
    if (state >= l->wall) return SP_HOSE_CELLS + 2 * (state - l->wall) + 1;
    if (state >= l->back) return SP_HOSE_CELLS + 2 * l->cells + state - l->back;
    if (state >= l->core) return SP_HOSE_CELLS + 2 * (state - l->core);
    return state >= l->out ? state - l->out : -1;
}

/* Which entries a circuit may have: what the head of arrow.h says of it. */
static bool allowed(const struct sp_layout *l, int row, int column)
{
    int p = band_place(l, row), q = band_place(l, column);
    bool passive_column =
        column > SP_Y_FAN && column<SP_Y_CHAIN, passive_row = row> SP_Y_FAN && row < SP_Y_CHAIN;
    if (passive_column) {
        bool tank = (row == SP_Y_AIR || row == SP_Y_LOST) && (column == SP_Y_AIR || column == SP_Y_LOST);
        return passive_row && (row == column || tank);
    }
    if (p >= 0 && q >= 0) return q >= p - 3 && q <= p + 1;
    return true;
}

/* A matrix with the columns, the effects of the two means, and the dense one of both together. */
struct random {
    struct sp_layout l;
    int n;
    double *block, **jac, *wall, *core;
    gsl_matrix *dense;
};

static struct random draw(int cells, double size)
{
    struct random r = {.l = sp_layout_of(cells)};
    r.n = r.l.count;
    r.block = calloc((size_t)(r.n * (r.n + 2)), sizeof *r.block);
    r.jac = calloc((size_t)r.n, sizeof *r.jac);
    r.dense = gsl_matrix_calloc((size_t)r.n, (size_t)r.n);
    assert_true(r.block && r.jac && r.dense);
    r.wall = r.block + r.n * r.n;
    r.core = r.wall + r.n;
    for (int j = 0; j < r.n; ++j) {
        r.jac[j] = r.block + j * r.n;
        for (int i = 0; i < r.n; ++i)
            r.jac[j][i] = allowed(&r.l, i, j) ? size * any() : 0.0;
        r.jac[j][j] -= 4.0 * size; /* every cell of a circuit decays */
    }
    for (int i = 0; i < r.n; ++i) {
        r.wall[i] = size * any();
        r.core[i] = size * any();
    }
    for (int i = 0; i < r.n; ++i)
        for (int j = 0; j < r.n; ++j) {
            double v = r.jac[j][i];
            if (j >= r.l.wall) v += r.wall[i] / cells;
            if (j >= r.l.core && j < r.l.back) v += r.core[i] / cells;
            gsl_matrix_set(r.dense, (size_t)i, (size_t)j, v);
        }
    return r;
}

static void drop(struct random *r)
{
    gsl_matrix_free(r->dense);
    free(r->jac);
    free(r->block);
}

/* x of (I + scale dense) x = b by GSL. */
static void dense_solve(const struct random *r, double scale, const double *b, double *x)
{
    size_t n = (size_t)r->n;
    gsl_matrix *m = gsl_matrix_alloc(n, n);
    gsl_permutation *p = gsl_permutation_alloc(n);
    int sign;
    gsl_matrix_memcpy(m, r->dense);
    gsl_matrix_scale(m, scale);
    for (size_t i = 0; i < n; ++i)
        gsl_matrix_set(m, i, i, gsl_matrix_get(m, i, i) + 1.0);
    gsl_vector_const_view bv = gsl_vector_const_view_array(b, n);
    gsl_vector_view xv = gsl_vector_view_array(x, n);
    assert_int_equal(gsl_linalg_LU_decomp(m, p, &sign), 0);
    assert_int_equal(gsl_linalg_LU_solve(m, p, &bv.vector, &xv.vector), 0);
    gsl_matrix_free(m);
    gsl_permutation_free(p);
}

static void against_dense(void **state)
{
    (void)state;
    const int cells[] = {1, 2, 3, 10, 50};
    const double gamma[] = {1e-6, 0.01, 0.3, 10.0, 1e3};
    for (int c = 0; c < 5; ++c)
        for (int g = 0; g < 5; ++g) {
            struct random r = draw(cells[c], 1.0);
            struct sp_arrow a;
            struct sp_arrow_factor *f = malloc(sizeof *f);
            assert_non_null(f);
            assert_true(sp_arrow_open(r.l, &a));
            sp_arrow_fill(&a, r.jac, r.wall, r.core);
            sp_arrow_scale_add(&a, -gamma[g]);
            assert_true(sp_arrow_factor(&a, f));
            double b[SP_Y_MOST], x[SP_Y_MOST], want[SP_Y_MOST], norm = 0.0;
            for (int again = 0; again < 3; ++again) { /* one factor serves many right-hand sides */
                for (int i = 0; i < r.n; ++i)
                    b[i] = any();
                dense_solve(&r, -gamma[g], b, want);
                sp_arrow_solve(&a, f, b, x);
                for (int i = 0; i < r.n; ++i)
                    norm = fmax(norm, fabs(want[i]));
                for (int i = 0; i < r.n; ++i)
                    check_close(x[i], want[i], 0, 1e-9 * norm);
                sp_arrow_solve(&a, f, b, b); /* in place */
                for (int i = 0; i < r.n; ++i)
                    check_close(b[i], x[i], 0, 0);
            }
            sp_arrow_close(&a);
            free(f);
            drop(&r);
        }
}

/* Every allowed entry matters, and reaches the solution as the dense matrix has it: one entry at a time. */
static void entry_by_entry(void **state)
{
    (void)state;
    struct random r = draw(2, 0.2);
    struct sp_arrow a;
    struct sp_arrow_factor *f = malloc(sizeof *f);
    assert_non_null(f);
    assert_true(sp_arrow_open(r.l, &a));
    double b[SP_Y_MOST], x[SP_Y_MOST], want[SP_Y_MOST];
    for (int i = 0; i < r.n; ++i)
        b[i] = 1.0 + i;
    for (int i = 0; i < r.n; ++i)
        for (int j = 0; j < r.n; ++j) {
            if (!allowed(&r.l, i, j)) continue;
            r.jac[j][i] += 0.5;
            gsl_matrix_set(r.dense, (size_t)i, (size_t)j,
                           gsl_matrix_get(r.dense, (size_t)i, (size_t)j) + 0.5);
            sp_arrow_fill(&a, r.jac, r.wall, r.core);
            sp_arrow_scale_add(&a, -0.3);
            assert_true(sp_arrow_factor(&a, f));
            dense_solve(&r, -0.3, b, want);
            sp_arrow_solve(&a, f, b, x);
            for (int k = 0; k < r.n; ++k)
                check_close(x[k], want[k], 1e-10, 1e-8);
        }
    sp_arrow_close(&a);
    free(f);
    drop(&r);
}

static void scale_and_identity(void **state)
{
    (void)state;
    struct sp_arrow a;
    struct sp_arrow_factor *f = malloc(sizeof *f);
    assert_non_null(f);
    struct sp_layout l = sp_layout_of(5);
    double b[SP_Y_MOST], x[SP_Y_MOST];
    assert_true(sp_arrow_open(l, &a));
    for (int i = 0; i < l.count; ++i)
        b[i] = any();
    assert_false(sp_arrow_factor(&a, f)); /* all nil: no pivot */
    sp_arrow_scale_add(&a, 3.0);
    assert_true(sp_arrow_factor(&a, f));
    sp_arrow_solve(&a, f, b, x);
    for (int i = 0; i < l.count; ++i)
        check_close(x[i], b[i], 0, 0);
    sp_arrow_close(&a);
    assert_null(a.entry);
    free(f);
}

static int begin(void **state)
{
    (void)state;
    dice = gsl_rng_alloc(gsl_rng_mt19937);
    return dice ? 0 : 1;
}

static int end(void **state)
{
    (void)state;
    gsl_rng_free(dice);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(against_dense), cmocka_unit_test(entry_by_entry),
                                       cmocka_unit_test(scale_and_identity)};
    return cmocka_run_group_tests(tests, begin, end);
}
