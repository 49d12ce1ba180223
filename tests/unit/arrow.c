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

/* What a state is in the structure, as the head of arrow.h says it: a place in the band, border or follower. */
enum { BORDER = -1, PASSIVE = -2 };

static void kinds(const struct sp_layout *l, int *place)
{
    int p = 0;
    for (int i = 0; i < l->count; ++i)
        place[i] = (i > SP_Y_FAN && i < SP_Y_CHAIN) || i == l->battery ? PASSIVE : BORDER;
    for (int i = 0; l->chained && i < SP_HOSE_CELLS; ++i) place[l->out + i] = p++;
    for (int e = 0; e <= l->exchangers; ++e) {
        if (l->chained && e == l->chained)
            for (int i = 0; i < SP_HOSE_CELLS; ++i) place[l->back + i] = p++;
        for (int i = 0; e < l->exchangers && i < l->exchanger[e].cells; ++i) {
            place[l->exchanger[e].fluid + i] = p++;
            place[l->exchanger[e].wall + i] = p++;
        }
    }
}

/* Which entries a circuit may have. */
static bool allowed(const int *place, int row, int column)
{
    int p = place[row], q = place[column];
    if (q == PASSIVE) {
        bool tank = (row == SP_Y_AIR || row == SP_Y_LOST) && (column == SP_Y_AIR || column == SP_Y_LOST);
        return p == PASSIVE && (row == column || tank);
    }
    if (p >= 0 && q >= 0) return q >= p - 3 && q <= p + 1;
    return true;
}

/* A matrix with the columns, the effects of the means, and the dense one of all together. */
struct random {
    struct sp_layout l;
    int n, place[SP_Y_MOST];
    double *block, **jac, **mean;
    gsl_matrix *dense;
};

/* Effect of the mean that state j has a part in, on state i. */
static double through_mean(const struct random *r, int i, int j)
{
    for (int e = 0; e < r->l.exchangers; ++e) {
        const struct sp_cells_at *at = &r->l.exchanger[e];
        if (j >= at->wall && j < at->wall + at->cells) return r->mean[2 * e][i] / at->cells;
        if (j >= at->fluid && j < at->fluid + at->cells) return r->mean[2 * e + 1][i] / at->cells;
    }
    return 0.0;
}

static struct random draw(struct sp_layout l, double size)
{
    struct random r = {.l = l, .n = l.count};
    int means = 2 * l.exchangers;
    r.block = calloc((size_t)(r.n * (r.n + means)), sizeof *r.block);
    r.jac = calloc((size_t)r.n, sizeof *r.jac);
    r.mean = calloc((size_t)means, sizeof *r.mean);
    r.dense = gsl_matrix_calloc((size_t)r.n, (size_t)r.n);
    assert_true(r.block && r.jac && r.mean && r.dense);
    kinds(&l, r.place);
    for (int j = 0; j < r.n; ++j) {
        r.jac[j] = r.block + j * r.n;
        for (int i = 0; i < r.n; ++i)
            r.jac[j][i] = allowed(r.place, i, j) ? size * any() : 0.0;
        r.jac[j][j] -= 4.0 * size; /* every cell of a circuit decays */
    }
    for (int m = 0; m < means; ++m) {
        r.mean[m] = r.block + (r.n + m) * r.n;
        for (int i = 0; i < r.n; ++i)
            r.mean[m][i] = size * any();
    }
    for (int i = 0; i < r.n; ++i)
        for (int j = 0; j < r.n; ++j)
            gsl_matrix_set(r.dense, (size_t)i, (size_t)j, r.jac[j][i] + through_mean(&r, i, j));
    return r;
}

static void drop(struct random *r)
{
    gsl_matrix_free(r->dense);
    free(r->mean);
    free(r->jac);
    free(r->block);
}

/* Cars plain and fitted out. */
enum { LAYOUTS = 9 };
static struct sp_layout layout(int i)
{
    const struct sp_layout_wish wish[LAYOUTS] = {
        {.exchangers = 1, .cells = {1}, .chained = 1},
        {.exchangers = 1, .cells = {2}, .chained = 1},
        {.exchangers = 1, .cells = {3}, .chained = 1},
        {.exchangers = 1, .cells = {10}, .chained = 1},
        {.exchangers = 1, .cells = {50}, .chained = 1},
        {.exchangers = 2, .cells = {3, 4}, .chained = 2, .fans = 3},                     /* one after the other */
        {.exchangers = 2, .cells = {2, 5}, .chained = 0, .fans = 2, .battery = true},    /* side by side */
        {.exchangers = 3, .cells = {4, 3, 1}, .chained = 1, .oil = true, .gearbox = true}, /* with coolers for oil */
        {.exchangers = 5, .cells = {2, 3, 1, 4, 2}, .chained = 0, .fans = 6, .oil = true, .battery = true},
    };
    return sp_layout_make(&wish[i]);
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
    const double gamma[] = {1e-6, 0.01, 0.3, 10.0, 1e3};
    for (int c = 0; c < LAYOUTS; ++c)
        for (int g = 0; g < 5; ++g) {
            struct random r = draw(layout(c), 1.0);
            struct sp_arrow a;
            struct sp_arrow_factor *f = malloc(sizeof *f);
            assert_non_null(f);
            assert_true(sp_arrow_open(r.l, &a));
            sp_arrow_fill(&a, r.jac, r.mean);
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
static void entries_of(struct sp_layout l)
{
    struct random r = draw(l, 0.2 / l.exchangers);
    struct sp_arrow a;
    struct sp_arrow_factor *f = malloc(sizeof *f);
    assert_non_null(f);
    assert_true(sp_arrow_open(r.l, &a));
    double b[SP_Y_MOST], x[SP_Y_MOST], want[SP_Y_MOST];
    for (int i = 0; i < r.n; ++i)
        b[i] = 1.0 + i;
    for (int i = 0; i < r.n; ++i)
        for (int j = 0; j < r.n; ++j) {
            if (!allowed(r.place, i, j)) continue;
            r.jac[j][i] += 0.5;
            gsl_matrix_set(r.dense, (size_t)i, (size_t)j,
                           gsl_matrix_get(r.dense, (size_t)i, (size_t)j) + 0.5);
            sp_arrow_fill(&a, r.jac, r.mean);
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

static void entry_by_entry(void **state)
{
    (void)state;
    entries_of(layout(1));
    entries_of(layout(5));
    entries_of(layout(6));
    entries_of(layout(7));
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
