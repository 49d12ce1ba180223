/* Roots of nasty falling functions. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "base/root.h"

struct shape {
    int kind;
    double root, size; /* where, and how steep or wide */
    long *calls;
};

enum {
    LINE,
    CUBE,
    KINK,
    FLAT,
    STEEP,
    SQUARE,
    BARE_SQUARE,
    ROOT_LAW,
    PLATEAU,
    FAR_EXPONENT,
    STAIR,
    JUMP,
    KINDS, /* has a root above */
    ALWAYS_UP,
    ALWAYS_DOWN,
    NOT_A_NUMBER,
    NAN_BELOW,
    POLE
};

static double f(double x, const void *context)
{
    const struct shape *s = context;
    double z = x - s->root;
    if (s->calls) ++*s->calls;
    switch (s->kind) {
    case LINE:
        return -s->size * z;
    case CUBE:
        return -s->size * z * z * z; /* no slope at the root */
    case KINK:
        return z > 0.0 ? -1e6 * s->size * z : -1e-3 * s->size * z; /* slopes nine orders apart */
    case FLAT:
        return -atan(z / s->size); /* all but flat far out */
    case STEEP:
        return -sinh(fmax(fmin(z / s->size, 300.0), -300.0)); /* 1e130 far out */
    case SQUARE:
        return -s->size * z * sqrt(z * z + 1e-6); /* as the air path near nil flow */
    case BARE_SQUARE:
        return -s->size * z * fabs(z); /* the same without a floor */
    case ROOT_LAW:
        return -s->size * copysign(sqrt(fabs(z)), z); /* endless slope at the root */
    case PLATEAU:
        return fabs(z) < s->size ? -1e-9 * z : -copysign(fabs(z) - s->size + 1e-9 * s->size, z);
    case FAR_EXPONENT:
        return exp(-x / s->size) - exp(-s->root / s->size);
    case STAIR:
        return -floor(z / s->size) - 0.5 - 1e-3 * z / s->size; /* jumps, with a root at the jump of nil */
    case JUMP:
        return z < 0.0 ? 1.0 - z : -1.0 - z; /* no nil at all, only a change of sign */
    case ALWAYS_UP:
        return 1.0 + exp(-x);
    case ALWAYS_DOWN:
        return -1.0 - exp(x);
    case NAN_BELOW:
        return z < -10.0 * s->size ? NAN : -z;
    case POLE:
        return z == 0.0 ? NAN : -z;
    default:
        return NAN;
    }
}

static void check_root(const struct shape *s, double step, struct sp_guess guess, double give)
{
    struct sp_guess g = guess;
    enum sp_status status = sp_root_falling(f, s, step, &g);
    if (status != SP_OK || !(fabs(g.x - s->root) <= give))
        print_error("kind %d, size %g, step %g, from %g slope %g\n", s->kind, s->size, step, guess.x,
                    guess.slope);
    assert_int_equal(status, SP_OK);
    check_close(g.x, s->root, 0, give);
}

static void nasty(void **state)
{
    (void)state;
    const double roots[] = {0.0, 1.0, -3.5, 1e-7, 250.0};
    for (int kind = 0; kind < KINDS; ++kind)
        for (int r = 0; r < 5; ++r)
            for (double size = 1e-3; size < 1e4; size *= 30.0)
                for (double from = -100.0; from <= 100.0; from += 40.0)
                    for (double step = 0.01; step < 20.0; step *= 30.0) {
                        struct shape s = {kind, roots[r], size, NULL};
                        if (kind == FAR_EXPONENT &&
                            (fabs(s.root - from) > 300.0 * size || s.root > 30.0 * size))
                            continue;
                        double give = 1e-8 * fabs(s.root) + 1e-9 * step;
                        if (kind == CUBE || kind == BARE_SQUARE)
                            give += 1e-4 * (1.0 + fabs(s.root)); /* flat: ill-conditioned by nature */
                        if (kind == FAR_EXPONENT) give += 1e-9 * size;
                        if (kind == PLATEAU) give += 1.001 * size; /* anywhere on it is as good */
                        check_root(&s, step, (struct sp_guess){from, 0.0}, give);
                    }
}

/* What the search learnt at another place may be quite wrong here: a slope too steep by orders must not be
 * taken for being there, nor must one of the wrong sign or none at all. */
static void stale_slopes(void **state)
{
    (void)state;
    const double slopes[] = {-1e30, -1e12, -1e6, -1.0, -1e-6, -1e-30, 0.0, 5.0, NAN, INFINITY, -INFINITY};
    const int kinds[] = {LINE, KINK, FLAT, STEEP, SQUARE, ROOT_LAW, JUMP};
    for (int k = 0; k < 7; ++k)
        for (int i = 0; i < 11; ++i)
            for (double from = -40.0; from <= 40.0; from += 20.0) {
                struct shape s = {kinds[k], 2.0, 1.0, NULL};
                check_root(&s, 1.0, (struct sp_guess){from, slopes[i]}, 1e-7);
            }
    struct shape s = {LINE, 2.0, 1.0, NULL};
    check_root(&s, 1.0, (struct sp_guess){NAN, -1.0}, 1e-9);
    check_root(&s, 1.0, (struct sp_guess){INFINITY, -1.0}, 1e-9);
}

/* A valve that was open and is shut: the drop at the old flow is 1e11 times what drives. The chord from there
 * is so steep that the first move looks like nothing. */
static double shut_valve(double x, const void *context)
{
    double tight = *(const double *)context;
    return 3e4 * (1.0 - x * fabs(x)) - 1e4 * x * fabs(x) / (tight * tight);
}

static void valve_that_shuts(void **state)
{
    (void)state;
    for (double from = 1e-4; from < 2.0; from *= 1.1)
        for (double tight = 1.0; tight > 1e-9; tight *= 0.1)
            for (double slope = 0.0; slope >= -1e30; slope = slope == 0.0 ? -1e-3 : 1e3 * slope) {
                struct sp_guess g = {from, slope};
                assert_int_equal(sp_root_falling(shut_valve, &tight, 0.5, &g), SP_OK);
                check_close(g.x, 1.0 / sqrt(1.0 + 1.0 / (3.0 * tight * tight)), 1e-6, 0);
            }
}

static void no_root(void **state)
{
    (void)state;
    const int kinds[] = {ALWAYS_UP, ALWAYS_DOWN, NOT_A_NUMBER};
    for (int k = 0; k < 3; ++k)
        for (double from = -10.0; from <= 10.0; from += 5.0) {
            struct shape s = {kinds[k], 0.0, 1.0, NULL};
            struct sp_guess g = {from, 0.0};
            assert_int_equal(sp_root_falling(f, &s, 1.0, &g), SP_NUMERICS);
        }
    struct shape s = {NAN_BELOW, 0.0, 1.0, NULL};
    struct sp_guess g = {-20.0, 0.0};
    assert_int_equal(sp_root_falling(f, &s, 1.0, &g), SP_NUMERICS);
    g = (struct sp_guess){5.0, 0.0};
    assert_int_equal(sp_root_falling(f, &s, 1.0, &g), SP_OK);
    check_close(g.x, 0.0, 0, 1e-9);
    s.kind = POLE;
    g = (struct sp_guess){0.0, -1.0};
    assert_int_equal(sp_root_falling(f, &s, 1.0, &g), SP_NUMERICS);
}

/* A neighbouring problem costs a few calls, and the worst is bounded. */
static void cost(void **state)
{
    (void)state;
    long calls = 0;
    struct shape s = {SQUARE, 3.0, 1.0, &calls};
    struct sp_guess g = {-1.0, 0.0}; /* z|z| at 3 + 4 = 4 away */
    assert_int_equal(sp_root_falling(f, &s, 1.0, &g), SP_OK);
    struct shape line = {LINE, 3.0, 1.0, &calls};
    g = (struct sp_guess){0.0, 0.0};
    assert_int_equal(sp_root_falling(f, &line, 1.0, &g), SP_OK);
    for (int i = 0; i < 100; ++i) {
        calls = 0;
        line.root += 1e-4;
        line.size *= 1.001;
        assert_int_equal(sp_root_falling(f, &line, 1.0, &g), SP_OK);
        check_close(g.x, line.root, 1e-9, 0);
        assert_true(calls <= 5);
    }
    calls = 0;
    assert_int_equal(sp_root_falling(f, &line, 1.0, &g), SP_OK); /* nothing changed */
    assert_true(calls <= 3);
    for (int kind = 0; kind < KINDS; ++kind) {
        calls = 0;
        struct shape worst = {kind, 1.0, 0.1, &calls};
        g = (struct sp_guess){-50.0, -1e20};
        enum sp_status status = sp_root_falling(f, &worst, 0.01, &g);
        if (status != SP_OK || calls >= 1500) print_error("kind %d, %ld calls\n", kind, calls);
        assert_int_equal(status, SP_OK);
        assert_true(calls < 1500);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(nasty), cmocka_unit_test(stale_slopes),
                                       cmocka_unit_test(valve_that_shuts), cmocka_unit_test(no_root),
                                       cmocka_unit_test(cost)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
