/* What happened on the way: events folded into a dozen lines. SPDX-License-Identifier: GPL-3.0-or-later */
#include "result_words.h"
#include "result_write.h"

#include <math.h>
#include <string.h>

enum {
    LINES_MOST = 12,
    RANKS = 7,
    MUST = 0,       /* what led to the first failure */
    CHANGE_RANK = 2,
    STEP_RANK = 4,
    REPEATS = 3     /* so many changes of the same keys become one line */
};

/* A state that begins and ends; the lower the rank, the sooner it gets one of the lines. */
struct span {
    enum sp_event_kind begins, ends;
    const char *text;
    int rank;
    bool each; /* begins and ends go by their place: one line a place */
};

/* The tiers of one quantity, in the order of sp_limited. */
#define TIER(of, tier, text, rank)                                                                           \
    {(enum sp_event_kind)(SP_EV_TIER + 6 * (of) + 2 * (tier)),                                               \
     (enum sp_event_kind)(SP_EV_TIER + 6 * (of) + 2 * (tier) + 1), text, rank, false}
#define TIERS(of, name)                                                                                      \
    TIER(of, 2, name " is over its limit", 1), TIER(of, 1, name " is over its alarm", 2),                    \
        TIER(of, 0, name " is over its caution", 4)

static const struct span span[] = {
    {SP_EV_BOILING, SP_EV_BOILING_ENDS, "coolant is past boiling", 1, false},
    {SP_EV_COOLANT_OVER, SP_EV_COOLANT_BACK, "coolant is over its limit", 1, false},
    {SP_EV_GAUGE_OVER, SP_EV_GAUGE_BACK, "gauge is over its limit", 1, false},
    {SP_EV_METAL_OVER, SP_EV_METAL_BACK, "metal is over its limit", 1, false},
    {SP_EV_BOIL_MARGIN_UNDER, SP_EV_BOIL_MARGIN_BACK, "boil margin is under its limit", 1, false},
    {SP_EV_CAP_OPENS, SP_EV_CAP_SHUTS, "cap is open", 2, false},
    {SP_EV_FAN_ON, SP_EV_FAN_OFF, "fan runs", 3, true},
    {SP_EV_THERMOSTAT_FULL, SP_EV_THERMOSTAT_REGULATES, "thermostat is fully open", 4, false},
    {SP_EV_ENGINE_STARTS, SP_EV_ENGINE_STOPS, "engine runs", 5, false},
    {SP_EV_THERMOSTAT_OPENS, SP_EV_THERMOSTAT_SHUT, "thermostat is open", 6, false},
    {SP_EV_LOST, SP_EVENT_KINDS, "coolant is lost through the cap", 1, false},
    {SP_EV_EMPTY, SP_EV_EMPTY_BACK, "tank is empty", 1, false},
    {SP_EV_CAN, SP_EV_CAN_BACK, "catch can is overfilled", 1, false},
    {SP_EV_CAVITATES, SP_EV_CAVITATION_ENDS, "pump cavitates", 1, false},
    {SP_EV_CURRENT, SP_EV_CURRENT_BACK, "a fan is over its current", 1, true},
    {SP_EV_FLAT, SP_EV_FLAT_BACK, "battery is flat", 1, false},
    {SP_EV_LOCAL, SP_EV_LOCAL_ENDS, "coolant boils at the jacket's wall", 2, false},
    {SP_EV_COLD_COOLANT, SP_EV_COLD_COOLANT_ENDS, "loaded with cold coolant", 4, false},
    {SP_EV_COLD_OIL, SP_EV_COLD_OIL_ENDS, "loaded with cold oil", 4, false},
    TIERS(SP_LIMITED_COOLANT, "coolant"),
    TIERS(SP_LIMITED_GAUGE, "gauge"),
    TIERS(SP_LIMITED_METAL, "metal"),
    TIERS(SP_LIMITED_OIL, "oil"),
    TIERS(SP_LIMITED_GEARBOX, "gearbox oil"),
    TIERS(SP_LIMITED_CHARGE, "charge air"),
};

enum {
    SPANS = sizeof span / sizeof span[0],
    LINES = SPANS + 2 * SP_DUCTS * SP_FANS + 200 + 2 /* changes, each once; peak and a step's beginnings aside */
};

/* ---- lines ----------------------------------------------------------------------------------------- */

/* What one line tells: all spells of one span, or all changes of the same keys. */
struct thread {
    const struct span *span; /* NULL: changes */
    const char *place;       /* of a span that goes by place */
    size_t count, first, last;
    double total, since;
    bool open;
};

struct threads {
    const struct sp_result *result;
    struct thread of[LINES];
    size_t count, led[2]; /* events of the changes that led to the first failures; the number of events: none */
};

/* What stands behind a key's '=': up to the comma that ends it, outside of brackets. */
static const char *behind_value(const char *text)
{
    int depth = 0;
    for (; *text && (depth > 0 || strncmp(text, ", ", 2)); ++text) depth += (*text == '[') - (*text == ']');
    return text;
}

static bool same_keys(const char *a, const char *b)
{
    while (*a && *b) {
        size_t n = strcspn(a, "=");
        if (n != strcspn(b, "=") || strncmp(a, b, n)) return false;
        a = behind_value(a + n);
        b = behind_value(b + n);
        a += strspn(a, ", ");
        b += strspn(b, ", ");
    }
    return !*a && !*b;
}

static bool same_place(const char *a, const char *b)
{
    return a == b || (a && b && !strcmp(a, b));
}

static bool belongs(const struct threads *all, const struct thread *t, const struct sp_event *e)
{
    if (!t->span) return e->kind == SP_EV_CHANGE && e->mark && same_keys(all->result->event[t->first].mark, e->mark);
    if (e->kind != t->span->begins && e->kind != t->span->ends) return false;
    return !t->span->each || same_place(t->place, e->place);
}

static struct thread *thread_of(struct threads *all, const struct sp_event *e)
{
    for (size_t i = 0; i < all->count; ++i)
        if (belongs(all, &all->of[i], e)) return &all->of[i];
    return NULL;
}

static const struct span *span_of(const struct sp_event *e)
{
    for (int s = 0; s < SPANS; ++s)
        if (span[s].begins == e->kind) return &span[s];
    return NULL;
}

static struct thread *begin_thread(struct threads *all, size_t i)
{
    const struct sp_event *e = &all->result->event[i];
    const struct span *s = span_of(e);
    bool change = e->kind == SP_EV_CHANGE && e->mark;
    if ((!s && !change) || all->count == LINES) return NULL;
    struct thread *t = &all->of[all->count++];
    *t = (struct thread){.span = s, .place = e->place, .first = i};
    return t;
}

static void take_event(struct threads *all, size_t i)
{
    const struct sp_event *e = &all->result->event[i];
    struct thread *t = thread_of(all, e);
    if (!t) t = begin_thread(all, i);
    if (!t) return;
    if (!t->span || e->kind == t->span->begins) {
        ++t->count;
        t->last = i;
        t->since = e->time;
        t->open = true;
    } else if (t->open) {
        t->total += e->time - t->since;
        t->open = false;
    }
}

/* The last change before a failure. */
static size_t led_to(const struct sp_result *r, const struct sp_failure *f)
{
    size_t at = r->events;
    for (size_t i = 0; i < r->events && f; ++i)
        if (r->event[i].kind == SP_EV_CHANGE && r->event[i].time <= f->time) at = i;
    return at;
}

static void find_threads(struct threads *all, const struct sp_result *r)
{
    all->result = r;
    all->count = 0;
    for (size_t i = 0; i < r->events; ++i) take_event(all, i);
    for (size_t i = 0; i < all->count; ++i)
        if (all->of[i].open) all->of[i].total += r->duration - all->of[i].since;
    all->led[0] = led_to(r, r->first);
    all->led[1] = led_to(r, sp_first_break(r));
}

/* What the list says at one event; rank -1: nothing. */
struct line {
    int rank;
    const struct thread *thread; /* NULL: of the event alone */
};

static struct line line_at(const struct threads *all, size_t i)
{
    const struct sp_event *e = &all->result->event[i];
    if (e->kind == SP_EV_PEAK) return (struct line){1, NULL};
    if (e->kind == SP_EV_STEP) return (struct line){STEP_RANK, NULL};
    if (i == all->led[0] || i == all->led[1]) return (struct line){MUST, NULL};
    for (size_t k = 0; k < all->count; ++k) {
        const struct thread *t = &all->of[k];
        if (t->span && t->first == i) return (struct line){t->span->rank, t};
        if (t->span || !belongs(all, t, e)) continue;
        if (t->count < REPEATS) return (struct line){CHANGE_RANK, NULL};
        return t->first == i ? (struct line){CHANGE_RANK, t} : (struct line){-1, NULL};
    }
    return (struct line){e->kind == SP_EV_CHANGE ? CHANGE_RANK : -1, NULL};
}

/* ---- words ----------------------------------------------------------------------------------------- */

static struct sp_words spell_text(const struct thread *t, bool named, bool exact)
{
    struct sp_words w, total = sp_words_time(t->total, exact);
    char of[60] = "";
    if (named && t->span->each && t->place) snprintf(of, sizeof of, " (%.40s)", t->place);
    if (t->span->ends == SP_EVENT_KINDS)
        snprintf(w.text, sizeof w.text, "%s", t->span->text);
    else if (t->count > 1)
        snprintf(w.text, sizeof w.text, "%s%s, %zu times, %.40s in all", t->span->text, of, t->count, total.text);
    else if (t->open)
        snprintf(w.text, sizeof w.text, "%s%s, %.40s to the end", t->span->text, of, total.text);
    else
        snprintf(w.text, sizeof w.text, "%s%s for %.40s", t->span->text, of, total.text);
    return w;
}

/* Changes of the same keys: the first and the last of them. */
static struct sp_words repeats_text(const struct sp_result *r, const struct thread *t, bool exact)
{
    struct sp_words w;
    char first[52], last[52];
    sp_plain(first, sizeof first, r->event[t->first].mark, 40);
    sp_plain(last, sizeof last, r->event[t->last].mark, 40);
    snprintf(w.text, sizeof w.text, "changes, %zu times: %s%s%s, the last at %.30s", t->count, first,
             strcmp(first, last) ? " .. " : "", strcmp(first, last) ? last : "",
             sp_words_time(r->event[t->last].time, exact).text);
    return w;
}

/* What was set, and how long it was then until a limit was broken. */
static struct sp_words change_text(const struct sp_result *r, size_t i, bool exact)
{
    struct sp_words w;
    size_t n = 0;
    for (size_t k = 0; k < i; ++k) n += r->event[k].kind == SP_EV_CHANGE;
    sp_plain(w.text, sizeof w.text, r->event[i].mark, 60);
    if (n >= r->changes || !isfinite(r->change[n].to_limit)) return w;
    const struct sp_told_change *c = &r->change[n];
    size_t used = strlen(w.text);
    if (c->to_limit > 0.0)
        snprintf(w.text + used, sizeof w.text - used, "; %.40s later %.40s",
                 sp_words_time(c->to_limit, exact).text, sp_event_text(c->broken));
    else
        snprintf(w.text + used, sizeof w.text - used, "; already %.40s", sp_event_text(c->broken));
    return w;
}

static const char *front_of(const struct sp_event *e)
{
    if (e->kind == SP_EV_STEP) return "begins: ";
    return e->kind == SP_EV_CHANGE && e->mark ? "changes: " : "";
}

static void print_line(const struct sp_report *r, size_t i, const struct thread *t, bool exact, FILE *to)
{
    const struct sp_event *e = &r->result->event[i];
    struct sp_words what;
    char front[200];
    int indent = exact ? 46 : 36;
    if (t)
        what = t->span ? spell_text(t, r->result->fan_kinds > 1, exact) : repeats_text(r->result, t, exact);
    else if (e->kind == SP_EV_CHANGE && e->mark)
        what = change_text(r->result, i, exact);
    else if (e->kind == SP_EV_STEP)
        what = sp_words_step(r->design, e->step);
    else
        snprintf(what.text, sizeof what.text, "%s", sp_event_text(e->kind));
    snprintf(front, sizeof front, exact ? "  %14.40s %11.40s %14.40s" : "  %12.40s %9.40s %8.40s",
             sp_words_time(e->time, exact).text, sp_words_distance(e->distance, exact).text,
             sp_words_degrees(e->coolant, exact).text);
    sp_say(to, indent, front, "%s%s", t ? "" : front_of(e), what.text);
}

/* How many lines of each rank there is room for; how many there would be. */
static size_t share_room(const struct threads *all, size_t room[RANKS])
{
    size_t of_rank[RANKS] = {0}, lines = 0, left = LINES_MOST;
    for (size_t i = 0; i < all->result->events; ++i) {
        int rank = line_at(all, i).rank;
        if (rank >= 0) ++of_rank[rank];
    }
    for (int k = 0; k < RANKS; ++k) {
        room[k] = of_rank[k] < left ? of_rank[k] : left;
        left -= room[k];
        lines += of_rank[k];
    }
    return lines;
}

void sp_report_happenings(const struct sp_report *r, bool exact, FILE *to)
{
    struct threads all;
    size_t room[RANKS], shown = 0;
    find_threads(&all, r->result);
    size_t lines = share_room(&all, room);
    fprintf(to, "\nWhat happened\n");
    for (size_t i = 0; i < r->result->events; ++i) {
        struct line l = line_at(&all, i);
        if (l.rank < 0 || room[l.rank] == 0) continue;
        --room[l.rank];
        ++shown;
        print_line(r, i, l.thread, exact, to);
    }
    if (lines > shown)
        fprintf(to, "  and %zu more: all events are in events.csv (-o DIR) and in the JSON\n", lines - shown);
}
