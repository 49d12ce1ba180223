/* What happened on the way: events folded into a dozen lines. SPDX-License-Identifier: GPL-3.0-or-later */
#include "result_words.h"
#include "result_write.h"

enum { LINES_MOST = 12, RANKS = 5 };

/* A state that begins and ends; the lower the rank, the sooner it gets one of the lines. */
struct span {
    enum sp_event_kind begins, ends;
    const char *text;
    int rank;
};

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
    for (int s = 0; s < SPANS; ++s)
        if (spells[s].count && spells[s].first == i) return (struct line){span[s].rank, &span[s]};
    return (struct line){-1, NULL};
}

static struct sp_words spell_text(const struct span *s, const struct spells *all, bool exact)
{
    struct sp_words w, total = sp_words_time(all->total, exact);
    if (all->count > 1)
        snprintf(w.text, sizeof w.text, "%s, %zu times, %.40s in all", s->text, all->count, total.text);
    else if (all->to_the_end)
        snprintf(w.text, sizeof w.text, "%s, %.40s to the end", s->text, total.text);
    else
        snprintf(w.text, sizeof w.text, "%s for %.40s", s->text, total.text);
    return w;
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
    else if (e->kind == SP_EV_STEP)
        what = sp_words_step(r->design, e->step);
    else
        snprintf(what.text, sizeof what.text, "%s", sp_event_text(e->kind));
    snprintf(front, sizeof front, exact ? "  %14.40s %11.40s %14.40s" : "  %12.40s %9.40s %8.40s",
             sp_words_time(e->time, exact).text, sp_words_distance(e->distance, exact).text,
             sp_words_degrees(e->coolant, exact).text);
    sp_say(to, indent, front, "%s%s", s || e->kind != SP_EV_STEP ? "" : "begins: ", what.text);
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
