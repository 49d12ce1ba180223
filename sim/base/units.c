/* Quantities with units.
 *
 * UDUNITS-2 knows the names; grammar, dimensions and the words of the trade are ours. While its tables
 * are opened UDUNITS writes remarks on its own definitions through its error handler, which is one for the
 * whole process: a program that does not want them on standard error sets that handler itself
 * (ut_set_error_message_handler(ut_ignore)) before it calls sp_units_open. UDUNITS also keeps its parser's
 * state to itself, so units are read by one thread at a time.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/number.h"
#include "base/units_inner.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <udunits2.h>

struct sp_units {
    ut_system *system;
};

const char *sp_kind_name(enum sp_kind kind)
{
    return sp_kind_row(kind)->name;
}

const char *sp_kind_si(enum sp_kind kind)
{
    return sp_kind_row(kind)->si;
}

/* UDUNITS says on standard error when its file cannot be opened; so it is not asked then. */
static bool data_readable(void)
{
    ut_status status;
    const char *path = ut_get_path_xml(NULL, &status);
    FILE *file = path ? fopen(path, "r") : NULL;
    if (!file) return false;
    fclose(file);
    return true;
}

struct sp_units *sp_units_open(void)
{
    struct sp_units *u = calloc(1, sizeof *u);
    if (!u) return NULL;
    if (data_readable()) u->system = ut_read_xml(NULL);
    if (u->system) return u;
    free(u);
    return NULL;
}

void sp_units_close(struct sp_units *u)
{
    if (!u) return;
    ut_free_system(u->system);
    free(u);
}

/* ---- one name ------------------------------------------------------------------------------ */

struct visit {
    struct sp_measure measure;
    enum sp_unit_fault fault;
};

static void add_base(struct visit *v, const ut_unit *base, int power)
{
    static const char *const symbols[SP_BASES] = {"m", "kg", "s", "A", "K", "mol", "cd", "rad"};
    const char *symbol = ut_get_symbol(base, UT_ASCII);
    for (int i = 0; symbol && i < SP_BASES; i++) {
        if (strcmp(symbol, symbols[i]) != 0) continue;
        v->measure.power[i] += power;
        return;
    }
    v->fault = SP_UNIT_UNKNOWN;
}

static ut_status visit_basic(const ut_unit *unit, void *arg)
{
    add_base(arg, unit, 1);
    return UT_SUCCESS;
}

static ut_status visit_product(const ut_unit *unit, int count, const ut_unit *const *bases, const int *powers,
                               void *arg)
{
    (void)unit;
    for (int i = 0; i < count; i++) add_base(arg, bases[i], powers[i]);
    return UT_SUCCESS;
}

static ut_status visit_scaled(const ut_unit *unit, double scale, const ut_unit *under, double offset,
                              void *arg);

static ut_status visit_time(const ut_unit *unit, const ut_unit *time, double origin, void *arg)
{
    struct visit *v = arg;
    (void)unit, (void)time, (void)origin;
    v->fault = SP_UNIT_SHIFT;
    return UT_SUCCESS;
}

static ut_status visit_logarithm(const ut_unit *unit, double base, const ut_unit *reference, void *arg)
{
    struct visit *v = arg;
    (void)unit, (void)base, (void)reference;
    v->fault = SP_UNIT_LOGARITHM;
    return UT_SUCCESS;
}

static const ut_visitor visitor = {visit_basic, visit_product, visit_scaled, visit_time, visit_logarithm};

static ut_status visit_scaled(const ut_unit *unit, double scale, const ut_unit *under, double offset,
                              void *arg)
{
    struct visit *v = arg;
    (void)unit;
    v->measure.scale *= scale;
    if (fabs(offset) > 0.0) v->fault = SP_UNIT_OFFSET;
    return ut_accept_visitor(under, &visitor, arg);
}

static unsigned sort_of(const int *power)
{
    static const struct { enum sp_kind kind; unsigned seen; } sorts[] = {
        {SP_K_FORCE, SP_SEEN_FORCE}, {SP_K_ENERGY, SP_SEEN_ENERGY}, {SP_K_POWER, SP_SEEN_POWER}};
    for (size_t i = 0; i < sizeof sorts / sizeof *sorts; i++) {
        const signed char *of = sp_kind_row(sorts[i].kind)->power;
        int same = 0;
        for (int b = 0; b < SP_BASES; b++) same += power[b] == of[b];
        if (same == SP_BASES) return sorts[i].seen;
    }
    return 0;
}

bool sp_unit_name(struct sp_units *u, const char *name, struct sp_measure *out, struct sp_unit_error *error)
{
    struct visit v = {{1.0, {0}, 0}, SP_UNIT_FINE};
    ut_unit *unit = ut_parse(u->system, name, UT_ASCII);
    bool some = false;
    if (!unit || ut_accept_visitor(unit, &visitor, &v) != UT_SUCCESS) v.fault = SP_UNIT_UNKNOWN;
    ut_free(unit);
    for (int i = 0; i < SP_BASES; i++) some = some || v.measure.power[i] != 0;
    /* Shares, constants and the library's own operators ("per") have no dimension and no place here. */
    if (!some && v.fault == SP_UNIT_FINE) v.fault = SP_UNIT_UNKNOWN;
    if (v.fault != SP_UNIT_FINE) {
        error->fault = v.fault;
        snprintf(error->word, sizeof error->word, "%s", name);
        return false;
    }
    v.measure.seen = sort_of(v.measure.power);
    *out = v.measure;
    return true;
}

/* ---- a unit for a kind --------------------------------------------------------------------- */

/* What is wrong with the unit, to stand in parentheses behind what was expected. */
static void explain(const struct sp_unit_error *e, char *out, size_t size)
{
    switch (e->fault) {
    case SP_UNIT_UNKNOWN: snprintf(out, size, "\"%s\" is no known unit", e->word); break;
    case SP_UNIT_SIGN:
        snprintf(out, size, e->word[0] ? "\"%s\" has no place there in a unit" : "the unit is cut short%s",
                 e->word);
        break;
    case SP_UNIT_DIGIT: snprintf(out, size, "a number inside a unit, \"%s\", is not taken", e->word); break;
    case SP_UNIT_LONG: snprintf(out, size, "the unit is longer than %d characters", SP_UNIT_MOST); break;
    case SP_UNIT_OFFSET:
        snprintf(out, size, "\"%s\" is a temperature, not a step of one: write K", e->word);
        break;
    case SP_UNIT_SHIFT: snprintf(out, size, "\"%s\" is not taken in a unit", e->word); break;
    case SP_UNIT_LOGARITHM: snprintf(out, size, "\"%s\" is logarithmic", e->word); break;
    case SP_UNIT_AMBIGUOUS: snprintf(out, size, "not \"%s\": %s", e->word, e->hint); break;
    case SP_UNIT_ORDER:
        snprintf(out, size, "is \"%s\" above or below the line? use / or parentheses", e->word);
        break;
    case SP_UNIT_RANGE: snprintf(out, size, "the unit is out of all bounds"); break;
    case SP_UNIT_FINE: snprintf(out, size, "the unit is of another kind"); break;
    }
}

static bool refuse(enum sp_kind kind, const char *detail, char *why, size_t size)
{
    const char *example = sp_kind_row(kind)->example;
    if (!why || size == 0) return false;
    snprintf(why, size, detail ? "%s (%s)" : "%s", example, detail);
    return false;
}

static bool of_kind(enum sp_kind kind, const struct sp_measure *m)
{
    const struct sp_kind_row *row = sp_kind_row(kind);
    for (int i = 0; i < SP_BASES; i++)
        if (m->power[i] != row->power[i]) return false;
    if (kind == SP_K_TORQUE) return !(m->seen & (SP_SEEN_ENERGY | SP_SEEN_POWER));
    if (kind == SP_K_ENERGY) return !(m->seen & SP_SEEN_FORCE);
    return true;
}

static bool refuse_closed(enum sp_kind kind, const char *unit, char *why, size_t size)
{
    char detail[200];
    const char *hint = sp_ambiguous_find(unit);
    bool scale = strcmp(unit, "degC") == 0 || strcmp(unit, "degF") == 0;
    if (hint && kind == SP_K_TEMP_DIFF && unit[0] != 'R')
        hint = "a difference is written in K";
    if (scale && kind == SP_K_TEMP_DIFF)
        snprintf(detail, sizeof detail, "a difference is written in K; %s is a temperature", unit);
    else if (hint)
        snprintf(detail, sizeof detail, "not \"%s\": %s", unit, hint);
    else
        snprintf(detail, sizeof detail, "the unit is %s", sp_kind_row(kind)->known);
    return refuse(kind, detail, why, size);
}

static bool scale_of(struct sp_units *u, enum sp_kind kind, const char *unit, size_t length, double *scale,
                     double *offset, char *why, size_t size)
{
    char plain[SP_UNIT_MOST + 1], detail[200];
    struct sp_measure m;
    struct sp_unit_error error = {SP_UNIT_FINE, "", NULL};
    const struct sp_spelling *spelling;
    if (!u) return refuse(kind, "the unit tables are not open", why, size);
    if (length > SP_UNIT_MOST || !sp_unit_plain(unit, length, plain, sizeof plain)) {
        error.fault = SP_UNIT_LONG;
        explain(&error, detail, sizeof detail);
        return refuse(kind, detail, why, size);
    }
    spelling = sp_spelling_find(kind, plain);
    if (spelling) {
        *scale = spelling->scale;
        *offset = spelling->offset;
        return true;
    }
    if (plain[0] == '\0') return refuse(kind, "the unit is missing", why, size);
    if (sp_kind_row(kind)->closed) return refuse_closed(kind, plain, why, size);
    if (sp_unit_measure(u, plain, &m, &error) && of_kind(kind, &m)) {
        *scale = m.scale;
        *offset = 0.0;
        return true;
    }
    explain(&error, detail, sizeof detail);
    return refuse(kind, detail, why, size);
}

static bool has_control(const char *text)
{
    for (; *text; text++)
        if ((unsigned char)*text < 0x20 || *text == 0x7f) return true;
    return false;
}

static const char *trim(const char *text, const char **end)
{
    const char *e = text + strlen(text);
    text += strspn(text, " ");
    while (e > text && e[-1] == ' ') e--;
    *end = e;
    return text;
}

bool sp_unit_scale(struct sp_units *u, enum sp_kind kind, const char *unit, double *scale, double *offset,
                   char *why, size_t why_size)
{
    const char *end, *start = trim(unit ? unit : "", &end);
    if (has_control(start)) return refuse(kind, "control characters are not taken", why, why_size);
    return scale_of(u, kind, start, (size_t)(end - start), scale, offset, why, why_size);
}

bool sp_quantity_read(struct sp_units *u, enum sp_kind kind, const char *text, double *si, char *why,
                      size_t why_size)
{
    const char *end, *unit, *start = trim(text ? text : "", &end);
    double x, scale, offset, value;
    if (has_control(start)) return refuse(kind, "control characters are not taken", why, why_size);
    unit = sp_number_parse(start, end, &x);
    if (!unit) return refuse(kind, "a decimal number comes first", why, why_size);
    unit += strspn(unit, " ");
    if (!scale_of(u, kind, unit, (size_t)(end - unit), &scale, &offset, why, why_size)) return false;
    value = scale * x + offset;
    if (!isfinite(value)) return refuse(kind, "the value is out of all bounds", why, why_size);
    if (kind == SP_K_TEMPERATURE && !(value > 0.0 && value < 5000.0))
        return refuse(kind, "above 0 K and below 5000 K", why, why_size);
    *si = value;
    return true;
}
