/* What happened on the way: events folded into a dozen lines. SPDX-License-Identifier: GPL-3.0-or-later */
#include "result_words.h"
#include "result_write.h"

#include <math.h>
#include <string.h>

enum { LINES_MOST = 12, RANKS = 5 };

/* A state that begins and ends; the lower the rank, the sooner it gets one of the lines. */
struct span {
    enum sp_event_kind begins, ends;
    const char *text;
    int rank;
};

/* The tiers of one quantity, in the order of sp_limited. */
#define TIER(of, tier, text, rank)                                                                           \
    {(enum sp_event_kind)(SP_EV_TIER + 6 * (of) + 2 * (tier)),                                               \
     (enum sp_event_kind)(SP_EV_TIER + 6 * (of) + 2 * (tier) + 1), text, rank}
#define TIERS(of, name)                                                                                      \
    TIER(of, 2, name " is over its limit", 0), TIER(of, 1, name " is over its alarm", 1),                    \
        TIER(of, 0, name " is over its caution", 2)

static const struct span span[] = {
    {SP_EV_BOILING, SP_EV_BOILING_ENDS, "coolant is past boiling", 0},
    {SP_EV_COOLANT_OVER, SP_EV_COOLANT_BACK, "coolant is over its limit", 0},
    {SP_EV_GAUGE_OVER, SP_EV_GAUGE_BACK, "gauge is over its limit", 0},
    {SP_EV_METAL_OVER, SP_EV_METAL_BACK, "metal is over its limit", 0},
    {SP_EV_BOIL_MARGIN_UNDER, SP_EV_BOIL_MARGIN_BACK, "boil margin is under its limit", 0},
    {SP_EV_CAP_OPENS, SP_EV_CAP_SHUTS, "cap is open", 1},
    {SP_EV_FAN_ON, SP_EV_FAN_OFF, "fan runs", 1},
    {SP_EV_THERMOSTAT_FULL, SP_EV_THERMOSTAT_REGULATES, "thermostat is fully open", 2},
    {SP_EV_ENGINE_STARTS, SP_EV_ENGINE_STOPS, "engine runs", 3},
    {SP_EV_THERMOSTAT_OPENS, SP_EV_THERMOSTAT_SHUT, "thermostat is open", 4},
    {SP_EV_LOST, SP_EVENT_KINDS, "coolant is lost through the cap", 0},
    {SP_EV_CAN, SP_EV_CAN_BACK, "catch can is overfilled", 0},
    {SP_EV_CAVITATES, SP_EV_CAVITATION_ENDS, "pump cavitates", 0},
    {SP_EV_CURRENT, SP_EV_CURRENT_BACK, "a fan is over its current", 0},
    {SP_EV_FLAT, SP_EV_FLAT_BACK, "battery is flat", 0},
    {SP_EV_LOCAL, SP_EV_LOCAL_ENDS, "coolant boils at the jacket's wall", 1},
    {SP_EV_COLD_COOLANT, SP_EV_COLD_COOLANT_ENDS, "loaded with cold coolant", 2},
    {SP_EV_COLD_OIL, SP_EV_COLD_OIL_ENDS, "loaded with cold oil", 2},
    TIERS(SP_LIMITED_COOLANT, "coolant"),
    TIERS(SP_LIMITED_GAUGE, "gauge"),
    TIERS(SP_LIMITED_METAL, "metal"),
    TIERS(SP_LIMITED_OIL, "oil"),
    TIERS(SP_LIMITED_GEARBOX, "gearbox oil"),
    TIERS(SP_LIMITED_CHARGE, "charge air"),
};

enum { SPANS = sizeof span / sizeof span[0], STEP_RANK = 2 };

/* All spells of one span. */
struct spells {
    size_t count, first;
    double total;
    bool to_the_end;
};

static struct spells count_spells(const struct sp_result *r, const struct span *s)
{
    struct spells out = {0};
    double since = 0.0;
    for (size_t i = 0; i < r->events; ++i) {
        const struct sp_event *e = &r->event[i];
        if (e->kind == s->begins) {
            if (!out.count++) out.first = i;
            since = e->time;
            out.to_the_end = true;
        } else if (e->kind == s->ends && out.to_the_end) {
            out.total += e->time - since;
            out.to_the_end = false;
        }
    }
    if (out.to_the_end) out.total += r->duration - since;
    return out;
}

/* What the list says at one event; rank -1: nothing. */
struct line {
    int rank;
    const struct span *span;
};

static struct line line_at(const struct sp_result *r, size_t i, const struct spells *spells)
{
    if (r->event[i].kind == SP_EV_PEAK) return (struct line){0, NULL};
    if (r->event[i].kind == SP_EV_STEP) return (struct line){STEP_RANK, NULL};
    if (r->event[i].kind == SP_EV_CHANGE) return (struct line){1, NULL};
    for (int s = 0; s < SPANS; ++s)
        if (spells[s].count && spells[s].first == i) return (struct line){span[s].rank, &span[s]};
    return (struct line){-1, NULL};
}

static struct sp_words spell_text(const struct span *s, const struct spells *all, bool exact)
{
    struct sp_words w, total = sp_words_time(all->total, exact);
    if (s->ends == SP_EVENT_KINDS)
        snprintf(w.text, sizeof w.text, "%s", s->text);
    else if (all->count > 1)
        snprintf(w.text, sizeof w.text, "%s, %zu times, %.40s in all", s->text, all->count, total.text);
    else if (all->to_the_end)
        snprintf(w.text, sizeof w.text, "%s, %.40s to the end", s->text, total.text);
    else
        snprintf(w.text, sizeof w.text, "%s for %.40s", s->text, total.text);
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

static const char *front_of(const struct span *s, const struct sp_event *e)
{
    if (s) return "";
    if (e->kind == SP_EV_STEP) return "begins: ";
    return e->kind == SP_EV_CHANGE && e->mark ? "changes: " : "";
}

static void print_line(const struct sp_report *r, size_t i, const struct span *s, const struct spells *spells,
                       bool exact, FILE *to)
{
    const struct sp_event *e = &r->result->event[i];
    struct sp_words what;
    char front[200];
    int indent = exact ? 46 : 36;
    if (s)
        what = spell_text(s, &spells[s - span], exact);
    else if (e->kind == SP_EV_CHANGE && e->mark)
        what = change_text(r->result, i, exact);
    else if (e->kind == SP_EV_STEP)
        what = sp_words_step(r->design, e->step);
    else
        snprintf(what.text, sizeof what.text, "%s", sp_event_text(e->kind));
    snprintf(front, sizeof front, exact ? "  %14.40s %11.40s %14.40s" : "  %12.40s %9.40s %8.40s",
             sp_words_time(e->time, exact).text, sp_words_distance(e->distance, exact).text,
             sp_words_degrees(e->coolant, exact).text);
    sp_say(to, indent, front, "%s%s", front_of(s, e), what.text);
}

void sp_report_happenings(const struct sp_report *r, bool exact, FILE *to)
{
    const struct sp_result *out = r->result;
    struct spells spells[SPANS];
    size_t of_rank[RANKS] = {0}, shown = 0, room[RANKS];
    for (int s = 0; s < SPANS; ++s)
        spells[s] = count_spells(out, &span[s]);
    for (size_t i = 0; i < out->events; ++i) {
        struct line l = line_at(out, i, spells);
        if (l.rank >= 0) ++of_rank[l.rank];
    }
    for (int k = 0; k < RANKS; ++k) {
        room[k] = of_rank[k] < LINES_MOST - shown ? of_rank[k] : LINES_MOST - shown;
        shown += room[k];
    }
    fprintf(to, "\nWhat happened\n");
    for (size_t i = 0; i < out->events; ++i) {
        struct line l = line_at(out, i, spells);
        if (l.rank < 0 || room[l.rank] == 0) continue;
        --room[l.rank];
        print_line(r, i, l.span, spells, exact, to);
    }
    size_t lines = of_rank[0] + of_rank[1] + of_rank[2] + of_rank[3] + of_rank[4];
    if (lines > shown)
        fprintf(to, "  and %zu more: all events are in events.csv (-o DIR) and in the JSON\n", lines - shown);
}
