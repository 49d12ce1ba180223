/* How temperatures, times and places read. SPDX-License-Identifier: GPL-3.0-or-later */
#include "result_words.h"

#include <math.h>
#include <stdarg.h>
#include <string.h>

#include "result_write.h"

static struct sp_words words(const char *format, ...) __attribute__((format(printf, 1, 2)));

static struct sp_words words(const char *format, ...)
{
    struct sp_words w;
    va_list args;
    va_start(args, format);
    vsnprintf(w.text, sizeof w.text, format, args);
    va_end(args);
    return w;
}

/* Rounded to a whole number, without a minus sign before nil. */
static double whole(double x)
{
    return round(x) + 0.0;
}

struct sp_words sp_words_degrees(double kelvin, bool exact)
{
    if (!isfinite(kelvin)) return words("unknown");
    return exact ? words("%.4f degC", kelvin - SP_ZERO_C) : words("%.0f degC", whole(kelvin - SP_ZERO_C));
}

struct sp_words sp_words_kelvin(double difference, bool exact)
{
    double amount = fabs(difference);
    if (!isfinite(amount)) return words("unknown");
    if (exact) return words("%.4f K", amount);
    return amount > 0.0 && amount < 0.5 ? words("less than 1 K") : words("%.0f K", whole(amount));
}

struct sp_words sp_words_limit(double limit, bool difference)
{
    return difference ? words("%.6g K", limit) : words("%.6g degC", limit - SP_ZERO_C + 0.0);
}

struct sp_words sp_words_time(double seconds, bool exact)
{
    double s = whole(seconds);
    if (!isfinite(seconds)) return words("never");
    if (exact) return words("%.3f s", seconds);
    if (s < 120.0) return words("%.0f s", s);
    if (s < 7200.0) return words("%.0f min %02.0f s", floor(s / 60.0), fmod(s, 60.0));
    double minutes = whole(seconds / 60.0);
    return words("%.0f h %02.0f min", floor(minutes / 60.0), fmod(minutes, 60.0));
}

struct sp_words sp_words_distance(double metres, bool exact)
{
    if (exact) return words("%.1f m", metres + 0.0);
    return fabs(metres) < 1000.0 ? words("%.0f m", whole(metres)) : words("%.2f km", metres / 1e3);
}

struct sp_words sp_words_energy(double joules, bool exact)
{
    int digits = exact ? 9 : 3;
    double amount = fabs(joules);
    /* The limits lie where three digits round over, so that no "1e+03" is ever seen. */
    if (amount < 1e-3 && !exact) return words("0 J"); /* what is left of sums that cancel */
    if (amount < 999.5) return words("%.*g J", digits, joules + 0.0);
    if (amount < 999.5e3) return words("%.*g kJ", digits, joules / 1e3);
    return amount < 999.5e6 ? words("%.*g MJ", digits, joules / 1e6) : words("%.*g GJ", digits, joules / 1e9);
}

struct sp_words sp_words_amount(double amount, bool exact)
{
    if (exact) return words("%.6f", amount);
    return words("%.*f", fabs(amount) < 0.995 ? 2 : fabs(amount) < 9.95 ? 1 : 0, amount);
}

bool sp_mere_alarm(const struct sp_failure *f)
{
    return f->kind >= SP_EV_TIER && f->severity == SP_SEVERITY_ALARM;
}

const struct sp_failure *sp_first_break(const struct sp_result *r)
{
    for (size_t i = 0; i < r->failures; ++i)
        if (r->failure[i].severity >= SP_SEVERITY_ALARM && !sp_mere_alarm(&r->failure[i])) return &r->failure[i];
    return NULL;
}

static const char *base_name(const char *path)
{
    const char *slash = strrchr(path, '/');
    return slash && slash[1] ? slash + 1 : path;
}

struct sp_words sp_words_step(const struct sp_design *d, size_t step)
{
    static const char *const kind[] = {
        [SP_STEP_TRACE] = "trace", [SP_STEP_IDLE] = "idle", [SP_STEP_HOLD] = "hold", [SP_STEP_SOAK] = "soak"};
    if (step >= d->steps) return words("drive[%zu]", step);
    const struct sp_step *s = &d->step[step];
    if (s->kind != SP_STEP_TRACE || !s->trace) return words("drive[%zu] (%s)", step, kind[s->kind]);
    char name[140];
    sp_plain(name, sizeof name, base_name(s->trace), 28);
    return words("drive[%zu] (%s)", step, name);
}

struct sp_words sp_words_place(const struct sp_design *d, const struct sp_peak *p, bool exact)
{
    char mark[128] = "";
    if (p->mark) sp_plain(mark, sizeof mark, p->mark, 24);
    return words("at %s, %s, in %s%s%s", sp_words_time(p->time, exact).text,
                 sp_words_distance(p->distance, exact).text, sp_words_step(d, p->step).text,
                 p->mark ? ", " : "", mark);
}
