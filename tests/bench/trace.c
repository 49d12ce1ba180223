/* A day's log: 24 h at 50 Hz, written, read, and driven by the command.
 *     bench_trace MODEL-TRACE CAR COMMAND FOLDER [HOURS]
 * MODEL-TRACE is repeated, its power halved, and interpolated at 50 Hz; FOLDER receives the log and a
 * case beside it and should have 250 MB to spare.
 * Prints reading in MB/s, seconds and peak memory of `COMMAND run`, and what merging of rows does to the result.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/drive.h"
#include "swirlpot/paper.h"
#include "swirlpot/trace.h"

#include <udunits2.h>

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

static const double scale = 0.5; /* the model trace's car is twice as strong as the case's */
static const double rate = 50.0; /* Hz */

static double clock_of(clockid_t which)
{
    struct timespec t;
    clock_gettime(which, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static double now(void) { return clock_of(CLOCK_MONOTONIC); }
static double busy(void) { return clock_of(CLOCK_PROCESS_CPUTIME_ID); } /* of the processor */
static double seconds_of(struct timeval t) { return (double)t.tv_sec + 1e-6 * (double)t.tv_usec; }

static _Noreturn void give_up(const char *what, const struct sp_complaints *c)
{
    fprintf(stderr, "bench_trace: %s\n", what);
    if (c) sp_complaints_print(c, false, stderr);
    exit(2);
}

static struct sp_trace read_trace(struct sp_units *u, const char *file)
{
    static const struct sp_trace_format plain;
    struct sp_complaints c = {0};
    struct sp_trace t;
    if (sp_trace_read(u, file, NULL, &plain, &t, &c) != SP_OK) give_up("a trace cannot be read", &c);
    sp_complaints_free(&c);
    return t;
}

/* Linear between rows, from the start again at the end. */
static double at(const struct sp_trace *t, enum sp_column c, double when)
{
    const double *time = t->column[SP_COL_TIME], *x = t->column[c];
    double within = fmod(when, time[t->rows - 1]);
    size_t i = (size_t)within;
    while (i > 0 && time[i] > within) --i;
    while (i + 2 < t->rows && time[i + 1] <= within) ++i;
    return x[i] + (x[i + 1] - x[i]) * (within - time[i]) / (time[i + 1] - time[i]);
}

static double write_log(const struct sp_trace *model, const char *file, double hours)
{
    FILE *to = fopen(file, "w");
    if (!to) give_up("the log cannot be written", NULL);
    fputs("time [s],speed [km/h],power [kW],engine_speed [rpm],altitude [m]\n", to);
    long rows = lround(hours * 3600.0 * rate);
    for (long i = 0; i <= rows; ++i) {
        double t = (double)i / rate;
        fprintf(to, "%.2f,%.2f,%.2f,%.0f,%.1f\n", t, 3.6 * at(model, SP_COL_SPEED, t),
                1e-3 * scale * at(model, SP_COL_POWER, t), 60.0 * at(model, SP_COL_ENGINE_SPEED, t),
                240.0 + 5.0 * sin(t / 60.0));
    }
    double megabytes = 1e-6 * (double)ftell(to);
    if (fclose(to)) give_up("the log cannot be written", NULL);
    return megabytes;
}

/* Runs a command with its output thrown away; its status, seconds (by the clock, and of the processor) and peak
 * memory. */
static int command(char *const *argv, double seconds[2], double *megabytes)
{
    struct rusage used;
    int status;
    double began = now();
    fflush(stdout);
    pid_t child = fork();
    if (child < 0) give_up("fork", NULL);
    if (child == 0) {
        if (!freopen("/dev/null", "w", stdout)) _exit(127);
        execv(argv[0], argv);
        _exit(127);
    }
    if (wait4(child, &status, 0, &used) < 0 || !WIFEXITED(status)) give_up("the command fell over", NULL);
    seconds[0] = now() - began;
    seconds[1] = seconds_of(used.ru_utime) + seconds_of(used.ru_stime);
    *megabytes = (double)used.ru_maxrss * 1024e-6;
    return WEXITSTATUS(status);
}

static struct sp_result drive(struct sp_units *u, const char *file, char *const *set, size_t sets)
{
    struct sp_complaints c = {0}, cautions = {0};
    struct sp_result r;
    struct sp_design *d = sp_case_read(u, file, set, sets, SP_FOR_DRIVE, &c, &cautions);
    struct sp_drive *made = d ? sp_drive_build(u, d, &c, &cautions) : NULL;
    struct sp_run_options o = {0};
    if (!made) give_up("the case cannot be built", &c);
    enum sp_status status = sp_drive_run(made, &o, &r, &c);
    if (status != SP_OK && status != SP_NOT) give_up("the drive failed", &c);
    free(r.event); /* its marks go with the drive */
    r.event = NULL;
    sp_drive_free(made);
    sp_design_free(d);
    sp_complaints_free(&c);
    sp_complaints_free(&cautions);
    return r;
}

/* The first part of the log, every row driven, against rows merged as by default. */
static void say_merging(struct sp_units *u, const struct sp_trace *model, const char *file, const char *log)
{
    char every[] = "solver.merge=0 s", tight[] = "solver.tolerance=1e-8";
    char *whole[] = {every, tight}, *merged[] = {tight};
    write_log(model, log, 1.0 / 3.0);
    struct sp_result a = drive(u, file, whole, 2), b = drive(u, file, merged, 1);
    printf("  merging, over 20 minutes      peak %+.2g K, distance %+.1e, heat %+.1e, drag work %+.1e\n",
           b.coolant.value - a.coolant.value, b.distance / a.distance - 1.0, b.ledger.in / a.ledger.in - 1.0,
           b.drag.energy / a.drag.energy - 1.0);
}

static void write_case(const char *file, const char *car)
{
    FILE *to = fopen(file, "w");
    if (!to) give_up("the case cannot be written", NULL);
    fprintf(to,
            "{ \"title\": \"a day's log\", \"car\": \"%s\", \"air\": { \"ambient\": \"25 degC\" },\n"
            "  \"drive\": [ { \"trace\": \"log.csv\" } ], \"limits\": { \"coolant\": \"200 degC\" } }\n",
            car);
    if (fclose(to)) give_up("the case cannot be written", NULL);
}

int main(int argc, char **argv)
{
    if (argc < 5) give_up("usage: bench_trace MODEL-TRACE CAR COMMAND FOLDER [HOURS]", NULL);
    char log[1024], file[1024], verb[] = "run";
    double hours = argc > 5 ? atof(argv[5]) : 24.0, seconds[2], memory;
    snprintf(log, sizeof log, "%s/log.csv", argv[4]);
    snprintf(file, sizeof file, "%s/case.json", argv[4]);
    ut_set_error_message_handler(ut_ignore);
    struct sp_units *u = sp_units_open();
    if (!u) give_up("no units", NULL);
    struct sp_trace model = read_trace(u, argv[1]);
    write_case(file, argv[2]);
    double megabytes = write_log(&model, log, hours);
    printf("a log of %g h at %g Hz\n  size                          %.0f MB\n", hours, rate, megabytes);

    double began = now(), began_busy = busy();
    struct sp_trace t = read_trace(u, log);
    double taken = now() - began, taken_busy = busy() - began_busy;
    printf("  read                          %.2f s, %.2f s of the processor: %.0f MB/s, %zu rows\n", taken,
           taken_busy, megabytes / taken_busy, t.rows);
    sp_trace_free(&t);

    char *call[] = {argv[3], verb, file, NULL};
    int status = command(call, seconds, &memory);
    printf("  run by the command            %.2f s, %.2f s of the processor, %.0f MB at most, status %d\n",
           seconds[0], seconds[1], memory, status);
    say_merging(u, &model, file, log);
    sp_trace_free(&model);
    sp_units_close(u);
    return status == 0 || status == 1 ? 0 : 1;
}
