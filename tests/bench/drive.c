/* Speed of a drive, from one run of this program:
 *     bench_drive CASE...
 * Simulated seconds per second, steps and right-hand sides, their time and what is spent outside them,
 * allocations between first and last step, and how far the default tolerance is from one 1000 times tighter.
 *
 * The library is used through its public headers, with two looks behind: the linker puts
 * __wrap_sp_integrator_open in front of the integrator, so that each right-hand side of a real drive can be
 * timed where it happens; and malloc is counted by standing in front of the C library's.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/integrate.h"
#include "swirlpot/drive.h"
#include "swirlpot/paper.h"

#include <udunits2.h>

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

static double clock_of(clockid_t which)
{
    struct timespec t;
    clock_gettime(which, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static double now(void) { return clock_of(CLOCK_MONOTONIC); }

/* ---- allocations ---------------------------------------------------------------------------------- */

static long allocations;

void *__libc_malloc(size_t size);
void *__libc_calloc(size_t count, size_t size);
void *__libc_realloc(void *old, size_t size);

void *malloc(size_t size)
{
    ++allocations;
    return __libc_malloc(size);
}

void *calloc(size_t count, size_t size)
{
    ++allocations;
    return __libc_calloc(count, size);
}

void *realloc(void *old, size_t size)
{
    ++allocations;
    return __libc_realloc(old, size);
}

/* ---- the integrator's callbacks, timed ---------------------------------------------------------------- */

enum callback { RATES, JACOBIAN, WATCH, CALLBACKS };

static struct {
    bool on;
    struct sp_problem real;
    double seconds[CALLBACKS];
    long calls[CALLBACKS];
} watched;

static void count(enum callback which, double began)
{
    watched.seconds[which] += now() - began;
    ++watched.calls[which];
}

static int timed_rates(double t, const double *y, double *dydt, void *context)
{
    double began = now();
    int status = watched.real.rates(t, y, dydt, context);
    count(RATES, began);
    return status;
}

static int timed_jacobian(double t, const double *y, struct sp_arrow *out, void *context)
{
    double began = now();
    int status = watched.real.jacobian(t, y, out, context);
    count(JACOBIAN, began);
    return status;
}

static int timed_watch(double t, const double *y, double *g, void *context)
{
    double began = now();
    int status = watched.real.watch(t, y, g, context);
    count(WATCH, began);
    return status;
}

struct sp_integrator *__real_sp_integrator_open(const struct sp_problem *p, double t, const double *y,
                                                double relative, const double *absolute);
struct sp_integrator *__wrap_sp_integrator_open(const struct sp_problem *p, double t, const double *y,
                                                double relative, const double *absolute);

struct sp_integrator *__wrap_sp_integrator_open(const struct sp_problem *p, double t, const double *y,
                                                double relative, const double *absolute)
{
    if (!watched.on) return __real_sp_integrator_open(p, t, y, relative, absolute);
    struct sp_problem timed = *p;
    watched.real = *p;
    timed.rates = timed_rates;
    timed.jacobian = timed_jacobian;
    timed.watch = timed_watch;
    return __real_sp_integrator_open(&timed, t, y, relative, absolute);
}

/* ---- runs -------------------------------------------------------------------------------------------------- */

static _Noreturn void give_up(const char *what, const struct sp_complaints *c)
{
    fprintf(stderr, "bench_drive: %s\n", what);
    if (c) sp_complaints_print(c, false, stderr);
    exit(2);
}

static struct sp_result run(const struct sp_drive *drive, double tolerance, const struct sp_sink *sink)
{
    struct sp_result r;
    struct sp_complaints c = {0};
    struct sp_run_options o = {.tolerance = tolerance, .sink = sink};
    enum sp_status status = sp_drive_run(drive, &o, &r, &c);
    if (status != SP_OK && status != SP_NOT) give_up("the drive failed", &c);
    sp_complaints_free(&c);
    return r;
}

static int by_size(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Seconds of the processor for one run, so that others on the machine matter little: the median of as many runs
 * as fit into about a second and a half. */
static double pace(const struct sp_drive *drive)
{
    enum { MOST = 1000 };
    double taken[MOST], all = 0.0;
    int n = 0;
    while (n < MOST && (all < 1.5 || n < 5)) {
        double began = clock_of(CLOCK_PROCESS_CPUTIME_ID);
        struct sp_result r = run(drive, 0.0, NULL);
        taken[n] = clock_of(CLOCK_PROCESS_CPUTIME_ID) - began;
        sp_result_free(&r);
        all += taken[n++];
    }
    qsort(taken, (size_t)n, sizeof *taken, by_size);
    return taken[n / 2];
}

/* Samples of the jacket's outlet, and how many allocations there had been at the first and the last. */
struct tape {
    double *coolant;
    size_t rows, room;
    long first, last;
};

static bool keep(void *context, const struct sp_sample *sample)
{
    struct tape *t = context;
    if (t->rows == t->room) return false;
    if (t->rows == 0) t->first = allocations;
    t->last = allocations;
    t->coolant[t->rows++] = sample->value[SP_CH_ENGINE_OUT];
    return true;
}

static struct tape tape_for(double duration)
{
    struct tape t = {.room = (size_t)duration + 10};
    t.coolant = malloc(t.room * sizeof *t.coolant);
    if (!t.coolant) give_up("no memory", NULL);
    return t;
}

/* ---- what is printed ----------------------------------------------------------------------------------------- */

static void say_speed(const struct sp_result *r, double seconds)
{
    double minutes = r->duration / 60.0;
    printf("  simulated                     %.0f s in %.3f ms: %.0f times real time\n", r->duration,
           1e3 * seconds, r->duration / seconds);
    printf("  a simulated minute takes      %.1f steps, %.1f right-hand sides, %.1f Jacobians, %.2f restarts\n",
           (double)r->work.steps / minutes, (double)r->work.rates / minutes,
           (double)r->work.jacobians / minutes, (double)r->work.restarts / minutes);
}

static void say_shares(const struct sp_drive *drive, double seconds)
{
    const int times = seconds < 0.03 ? 50 : (int)fmax(1.5 / seconds, 2.0);
    watched.on = true;
    memset(watched.seconds, 0, sizeof watched.seconds);
    memset(watched.calls, 0, sizeof watched.calls);
    double began = now();
    for (int i = 0; i < times; ++i) {
        struct sp_result r = run(drive, 0.0, NULL);
        sp_result_free(&r);
    }
    double all = now() - began;
    watched.on = false;
    began = now(); /* what a look at the clock costs */
    enum { LOOKS = 100000 };
    double nothing = 0.0;
    for (int i = 0; i < LOOKS; ++i) nothing += now() - began;
    double look = (now() - began) / LOOKS + 0.0 * nothing;
    static const char *name[CALLBACKS] = {"right-hand side", "Jacobian", "look at the watches"};
    double inside = 0.0, calls = 0.0;
    for (int k = 0; k < CALLBACKS; ++k) calls += (double)watched.calls[k];
    all -= 2.0 * calls * look;
    for (int k = 0; k < CALLBACKS; ++k) {
        double n = (double)watched.calls[k], s = watched.seconds[k] - n * look;
        inside += s;
        printf("  one %-25s %.2f us, %.1f %% of all time\n", name[k], n > 0.0 ? 1e6 * s / n : 0.0, 100.0 * s / all);
    }
    double outside = all - (watched.seconds[RATES] - (double)watched.calls[RATES] * look);
    printf("  outside right-hand sides      %.1f %%; outside all three %.1f %%\n", 100.0 * outside / all,
           100.0 * (all - inside) / all);
}

static void say_allocations(const struct sp_drive *drive, double duration)
{
    struct tape t = tape_for(duration);
    struct sp_sink sink = {.context = &t, .row = keep};
    long before = allocations;
    struct sp_result r = run(drive, 0.0, &sink);
    printf("  allocations                   %ld from first to last step, %ld before and after\n", t.last - t.first,
           allocations - before - (t.last - t.first));
    sp_result_free(&r);
    free(t.coolant);
}

static void say_deviation(const struct sp_drive *drive, double tolerance, double duration)
{
    struct tape a = tape_for(duration), b = tape_for(duration);
    struct sp_sink to_a = {.context = &a, .row = keep}, to_b = {.context = &b, .row = keep};
    struct sp_result plain = run(drive, tolerance, &to_a), tight = run(drive, 1e-3 * tolerance, &to_b);
    double most = 0.0;
    if (a.rows != b.rows) give_up("runs of different length", NULL);
    for (size_t i = 0; i < a.rows; ++i) most = fmax(most, fabs(a.coolant[i] - b.coolant[i]));
    printf("  from a run at %.0e        coolant %.2g K at most, peak %+.2g K, heat %+.1e, fan energy %+.2g J\n",
           1e-3 * tolerance, most, plain.coolant.value - tight.coolant.value,
           plain.ledger.in / tight.ledger.in - 1.0, plain.fan.energy - tight.fan.energy);
    printf("  ledger                        %.1e, tight %.1e\n", plain.ledger.error, tight.ledger.error);
    sp_result_free(&plain);
    sp_result_free(&tight);
    free(a.coolant);
    free(b.coolant);
}

static void bench(struct sp_units *u, const char *file)
{
    struct sp_complaints c = {0}, cautions = {0};
    double began = now();
    struct sp_design *d = sp_case_read(u, file, NULL, 0, SP_FOR_DRIVE, &c, &cautions);
    struct sp_drive *drive = d ? sp_drive_build(u, d, &c, &cautions) : NULL;
    if (!drive) give_up("the case cannot be read", &c);
    printf("%s\n  read and built in             %.2f ms\n", file, 1e3 * (now() - began));
    struct sp_result r = run(drive, 0.0, NULL);
    double seconds = pace(drive);
    say_speed(&r, seconds);
    say_shares(drive, seconds);
    say_allocations(drive, r.duration);
    say_deviation(drive, d->solver.tolerance, r.duration);
    sp_result_free(&r);
    sp_drive_free(drive);
    sp_design_free(d);
    sp_complaints_free(&c);
    sp_complaints_free(&cautions);
}

int main(int argc, char **argv)
{
    double began = now();
    ut_set_error_message_handler(ut_ignore);
    struct sp_units *u = sp_units_open();
    if (!u || argc < 2) give_up("usage: bench_drive CASE...", NULL);
    printf("units loaded in                 %.2f ms\n", 1e3 * (now() - began));
    for (int i = 1; i < argc; ++i) bench(u, argv[i]);
    sp_units_close(u);
    return 0;
}
