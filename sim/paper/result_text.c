/* The verdict for a person. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "result_words.h"
#include "result_write.h"

struct telling {
    const struct sp_report *report;
    bool exact;
    FILE *to;
};

/* One limit: its key, what it is on, where the drive came to and the room left. */
struct judged {
    const char *key, *what;
    double limit, came_to, left;
};

enum { LIMITS = SP_ROOMS, BOIL_MARGIN = SP_ROOM_BOIL, ALWAYS = 4 }; /* ALWAYS: these are missing where they are not given */

static void list_limits(const struct sp_report *r, struct judged out[LIMITS])
{
    static const struct { const char *key, *what; } name[LIMITS] = {
        {"limits.coolant", "coolant"},          {"limits.gauge", "the gauge"}, {"limits.metal", "the metal"},
        {"limits.boil_margin", "boil margin"}, {"limits.oil", "oil"},         {"limits.gearbox", "gearbox oil"},
        {"limits.charge", "charge air"}};
    for (int i = 0; i < LIMITS; ++i) {
        const struct sp_room *room = &r->result->room[i];
        out[i] = (struct judged){name[i].key, name[i].what, room->limit, room->came_to, room->left};
    }
}

/* ---- first line ------------------------------------------------------------------------------------ */

static void say_boil_margin(const struct telling *t, const char *verdict, const struct judged *j)
{
    struct sp_words limit = sp_words_limit(j->limit, true), came = sp_words_kelvin(j->came_to, t->exact);
    if (j->left >= 0.0)
        sp_say(t->to, 0, "", "%s: coolant stays %s short of boiling, %s over the %s asked for.", verdict,
               came.text, sp_words_kelvin(j->left, t->exact).text, limit.text);
    else if (j->came_to >= 0.0)
        sp_say(t->to, 0, "", "%s: coolant comes within %s of boiling; %s asked for.", verdict, came.text,
               limit.text);
    else
        sp_say(t->to, 0, "", "%s: coolant goes %s past boiling; %s asked for.", verdict, came.text,
               limit.text);
}

static void say_headline(const struct telling *t)
{
    struct judged all[LIMITS];
    const struct sp_result *out = t->report->result;
    const char *verdict = out->survives ? "Survives" : "Overheats";
    list_limits(t->report, all);
    for (int i = 0; i < LIMITS; ++i) {
        const struct judged *j = &all[i];
        if (!out->limit || strcmp(out->limit, j->key)) continue;
        if (i == BOIL_MARGIN)
            say_boil_margin(t, verdict, j);
        else
            sp_say(t->to, 0, "", "%s: %s peaks at %s, %s %s its limit of %s.", verdict, j->what,
                   sp_words_degrees(j->came_to, t->exact).text, sp_words_kelvin(j->left, t->exact).text,
                   j->left < 0.0 ? "over" : "under", sp_words_limit(j->limit, false).text);
        return;
    }
    sp_say(t->to, 0, "", "%s.", verdict);
}

static void say_title(const struct telling *t)
{
    char title[400];
    if (!t->report->design->title) return;
    sp_plain(title, sizeof title, t->report->design->title, SP_LINE_WIDTH);
    fprintf(t->to, "%s\n", title);
}

/* ---- temperatures ---------------------------------------------------------------------------------- */

static void say_peak(const struct telling *t, const char *label, const struct sp_peak *p)
{
    sp_say(t->to, SP_LABEL_WIDTH, label, "%s %s", sp_words_degrees(p->value, t->exact).text,
           sp_words_place(t->report->design, p, t->exact).text);
}

static void say_limits(const struct telling *t)
{
    static const char *const name[LIMITS] = {"coolant", "gauge", "metal", "boil margin", "oil", "gearbox oil",
                                                "charge air"};
    struct judged all[LIMITS];
    const char *label = "Limits";
    char missing[80] = "";
    list_limits(t->report, all);
    for (int i = 0; i < LIMITS; ++i) {
        const struct judged *j = &all[i];
        if (!isfinite(j->limit) && i >= ALWAYS) continue;
        if (!isfinite(j->limit)) {
            size_t used = strlen(missing);
            snprintf(missing + used, sizeof missing - used, "%s%s", used ? ", " : "", name[i]);
            continue;
        }
        struct sp_words limit = sp_words_limit(j->limit, i == BOIL_MARGIN);
        struct sp_words left = sp_words_kelvin(j->left, t->exact);
        bool binds = t->report->result->limit && !strcmp(t->report->result->limit, j->key);
        const char *end = binds ? ", the one that binds" : "";
        if (i != BOIL_MARGIN)
            sp_say(t->to, SP_LABEL_WIDTH, label, "%s %s: %s %s%s", name[i], limit.text, left.text,
                   j->left < 0.0 ? "beyond it" : "left", end);
        else if (j->left < 0.0)
            sp_say(t->to, SP_LABEL_WIDTH, label, "%s asked for %s: short by %s%s", name[i], limit.text,
                   left.text, end);
        else
            sp_say(t->to, SP_LABEL_WIDTH, label, "%s asked for %s: %s to spare%s", name[i], limit.text,
                   left.text, end);
        label = "";
    }
    if (*missing) sp_say(t->to, SP_LABEL_WIDTH, label, "none given for %s", missing);
}

/* First and worst of what failed, in a line each; one where they are the same. A mere alarm fails nothing. */
static void say_failure(const struct telling *t, const char *label, const struct sp_failure *f)
{
    const struct sp_peak at = {0.0, f->time, f->distance, f->step, f->mark};
    char beyond[80] = "";
    if (f->worst > 0.0 && f->kind != SP_EV_BOILING)
        snprintf(beyond, sizeof beyond, "; %.40s %s beyond at the worst",
                 sp_words_amount(f->worst / f->scale, t->exact).text, f->unit);
    if (f->kind == SP_EV_CAVITATES)
        snprintf(beyond, sizeof beyond, "; it keeps %.*f %% of its head at the worst", t->exact ? 3 : 0,
                 100.0 * t->report->result->pump_head_left);
    if (f->kind == SP_EV_LOST)
        snprintf(beyond, sizeof beyond, "; %.40s %s in all", sp_words_amount(f->worst / f->scale, t->exact).text,
                 f->unit);
    sp_say(t->to, SP_LABEL_WIDTH, label, "%s (%s) %s%s", sp_event_text(f->kind), f->place ? f->place : "car",
           sp_words_place(t->report->design, &at, t->exact).text, beyond);
}

static void say_failures(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    const struct sp_failure *breaks = sp_first_break(out);
    if (!out->first) return;
    if (sp_mere_alarm(out->first)) say_failure(t, "First alarm", out->first);
    if (breaks) say_failure(t, "Fails first", breaks);
    if (out->worst && out->worst != out->first && out->worst != breaks)
        say_failure(t, sp_mere_alarm(out->worst) ? "Worst alarm" : "Fails worst", out->worst);
}

static void say_boiling(const struct telling *t)
{
    const struct sp_peak *p = &t->report->result->boil_margin;
    sp_say(t->to, SP_LABEL_WIDTH, "Boiling", "%s %s boiling at the worst, %s",
           sp_words_kelvin(p->value, t->exact).text, p->value < 0.0 ? "past" : "short of",
           sp_words_place(t->report->design, p, t->exact).text);
    if (p->value >= 0.0) return;
    sp_say(t->to, SP_LABEL_WIDTH, "",
           "Past boiling the heat balance of the liquid goes on: read such "
           "temperatures as \"it boils\", not as degrees.");
}

static void say_temperatures(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    say_peak(t, "Coolant peak", &out->coolant);
    sp_say(t->to, SP_LABEL_WIDTH, "", "at most %s over ambient",
           sp_words_kelvin(out->over_ambient, t->exact).text);
    if (out->time_over_limit > 0.0)
        sp_say(t->to, SP_LABEL_WIDTH, "", "over its limit for %s",
               sp_words_time(out->time_over_limit, t->exact).text);
    say_peak(t, "Gauge peak", &out->gauge);
    say_peak(t, "Metal peak", &out->metal);
    if (isfinite(out->oil.value)) say_peak(t, "Oil peak", &out->oil);
    if (isfinite(out->gearbox.value)) say_peak(t, "Gearbox oil", &out->gearbox);
    if (isfinite(out->charge.value)) say_peak(t, "Charge air", &out->charge);
    say_limits(t);
    say_boiling(t);
    if (out->liquid_lost >= 1e-6) /* less than a millilitre is the seat's own weeping */
        sp_say(t->to, SP_LABEL_WIDTH, "Coolant lost", "%.2g l through the cap, for good; cold, the tank holds %.2g l",
               out->liquid_lost * 1e3, out->tank_left * 1e3);
    say_failures(t);
}

/* ---- sums ------------------------------------------------------------------------------------------ */

/* Times that a fan began to run; `place` NULL: that any did, where none ran before. */
static size_t times_on(const struct sp_result *r, const char *place)
{
    size_t times = 0, running = 0;
    for (size_t i = 0; i < r->events; ++i) {
        const struct sp_event *e = &r->event[i];
        if (e->kind != SP_EV_FAN_ON && e->kind != SP_EV_FAN_OFF) continue;
        bool on = e->kind == SP_EV_FAN_ON, same = place && e->place && !strcmp(e->place, place);
        times += on && (place ? same : running == 0);
        if (on) ++running;
        else if (running) --running;
    }
    return times;
}

/* Kinds of fans one by one. */
static void say_each_fan(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    for (size_t i = 0; i < out->fan_kinds; ++i) {
        const char *place = out->each_fan[i].place, *label = i ? "" : "Fans";
        size_t times = place ? times_on(out, place) : 0;
        if (!place) continue;
        if (!times)
            sp_say(t->to, SP_LABEL_WIDTH, label, "%s never ran", place);
        else
            sp_say(t->to, SP_LABEL_WIDTH, label, "%s ran %zu time%s, %s in all", place, times, times == 1 ? "" : "s",
                   sp_words_time(out->each_fan[i].on, t->exact).text);
    }
}

static void say_fan(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    size_t times = times_on(out, NULL);
    bool several = out->fan_kinds > 1;
    if (several && times) say_each_fan(t);
    if (!out->fan_kinds)
        sp_say(t->to, SP_LABEL_WIDTH, "Fan", "none");
    else if (!times)
        sp_say(t->to, SP_LABEL_WIDTH, several ? "Fans" : "Fan", "never ran");
    else
        sp_say(t->to, SP_LABEL_WIDTH, several ? "" : "Fan", "%s %zu time%s, %s in all, %s of electricity",
               several ? "one or more of them" : "ran", times, times == 1 ? "" : "s",
               sp_words_time(out->fan.on, t->exact).text, sp_words_energy(out->fan.energy, t->exact).text);
}

static void say_battery(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    if (!isfinite(out->battery.used)) return;
    sp_say(t->to, SP_LABEL_WIDTH, "Battery", "%s drawn with the engine off; %.*f %% left",
           sp_words_energy(out->battery.used, t->exact).text, t->exact ? 3 : 0, 100.0 * out->battery.left);
}

static size_t cores_of(const struct sp_design *d)
{
    size_t n = 0;
    for (size_t i = 0; i == 0 || i < d->ducts; ++i) {
        const struct sp_duct_design *duct = &d->duct[i];
        n += (duct->cores ? duct->cores : 1) * (duct->count > 1.0 ? 2 : 1); /* one or several is all that counts */
    }
    return n;
}

static void say_heat(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    const struct sp_design *d = t->report->design;
    sp_say(t->to, SP_LABEL_WIDTH, "Heat", "%s in, %s out by the core%s, %s by skin%s, %s stored; ledger closes to %.1g",
           sp_words_energy(out->ledger.in, t->exact).text, sp_words_energy(out->ledger.out_air, t->exact).text,
           cores_of(d) > 1 ? "s" : "", sp_words_energy(out->ledger.out_skin, t->exact).text,
           d->hoses.heater.flow > 0.0 ? " and heater" : "", sp_words_energy(out->ledger.stored, t->exact).text,
           fabs(out->ledger.error));
}

static void say_drag(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    double c = out->drag.mean_coefficient;
    if (!isfinite(c)) {
        sp_say(t->to, SP_LABEL_WIDTH, "Cooling drag", "undefined: the car never moves through the air");
        return;
    }
    sp_say(t->to, SP_LABEL_WIDTH, "Cooling drag", "mean coefficient %.*f on %.3g m2, %s over the drive",
           t->exact ? 6 : 4, c, t->report->design->body.frontal_area,
           sp_words_energy(out->drag.energy, t->exact).text);
    if (out->drag.spill != 0.0)
        sp_say(t->to, SP_LABEL_WIDTH, "", "spilled air %s of it", sp_words_energy(out->drag.spill, t->exact).text);
    if (out->drag.thrust != 0.0)
        sp_say(t->to, SP_LABEL_WIDTH, "", "the heat's thrust gives back %s, taken off already",
               sp_words_energy(out->drag.thrust, t->exact).text);
}

static void say_work(const struct telling *t)
{
    struct sp_work w = sp_drive_work(t->report->drive);
    if (!w.from_road) return;
    sp_say(t->to, SP_LABEL_WIDTH, "Work",
           "power comes from the road load: %s at the wheels = %s speed + %s height "
           "+ %s drag + %s rolling + %s brakes",
           sp_words_energy(w.wheel, t->exact).text, sp_words_energy(w.kinetic, t->exact).text,
           sp_words_energy(w.potential, t->exact).text, sp_words_energy(w.drag, t->exact).text,
           sp_words_energy(w.rolling, t->exact).text, sp_words_energy(w.brakes, t->exact).text);
}

static void say_measured(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    if (!isfinite(out->measured.rms)) return;
    sp_say(t->to, SP_LABEL_WIDTH, "Measured",
           "gauge against the log: %.2f K rms; no model at all, a straight line "
           "to the set point: %.2f K",
           out->measured.rms, out->measured.none_rms);
    if (isfinite(out->measured.warmup_rms))
        sp_say(t->to, SP_LABEL_WIDTH, "", "over the warm-up %.2f K; no model at all: %.2f K",
               out->measured.warmup_rms, out->measured.none_warmup_rms);
    sp_say(t->to, SP_LABEL_WIDTH, "", "85 degC after %s; in the log after %s",
           sp_words_time(out->measured.time_to_85, t->exact).text,
           sp_words_time(out->measured.measured_time_to_85, t->exact).text);
}

/* Whether a state holds before the first event: its end comes first, or it never changes and held at all. */
static bool held_before(const struct sp_result *r, enum sp_event_kind begins, enum sp_event_kind ends,
                        bool held)
{
    for (size_t i = 0; i < r->events; ++i)
        if (r->event[i].kind == begins || r->event[i].kind == ends) return r->event[i].kind == ends;
    return held;
}

/* Time with the thermostat fully open and the engine off, from the events. */
static double full_and_off(const struct sp_result *r)
{
    bool full = held_before(r, SP_EV_THERMOSTAT_FULL, SP_EV_THERMOSTAT_REGULATES, r->time_above_band > 0.0);
    bool runs = held_before(r, SP_EV_ENGINE_STARTS, SP_EV_ENGINE_STOPS, false);
    double since = 0.0, sum = 0.0;
    for (size_t i = 0; i <= r->events; ++i) {
        double now = i < r->events ? r->event[i].time : r->duration;
        if (full && !runs) sum += now - since;
        since = now;
        if (i == r->events) break;
        enum sp_event_kind kind = r->event[i].kind;
        if (kind == SP_EV_THERMOSTAT_FULL || kind == SP_EV_THERMOSTAT_REGULATES)
            full = kind == SP_EV_THERMOSTAT_FULL;
        if (kind == SP_EV_ENGINE_STARTS || kind == SP_EV_ENGINE_STOPS) runs = kind == SP_EV_ENGINE_STARTS;
    }
    return sum;
}

static bool ever_ran(const struct sp_result *r)
{
    for (size_t i = 0; i < r->events; ++i)
        if (r->event[i].kind == SP_EV_ENGINE_STARTS) return true;
    return false;
}

static void say_thermostat(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    double off = full_and_off(out);
    char rest[80] = "";
    if (off >= 0.5)
        snprintf(rest, sizeof rest, ", %.40s of it with the engine off", sp_words_time(off, t->exact).text);
    if (t->report->design->thermostat.none)
        sp_say(t->to, SP_LABEL_WIDTH, "Thermostat", "none fitted");
    else if (out->time_above_band > 0.0)
        sp_say(t->to, SP_LABEL_WIDTH, "Thermostat", "fully open for %s%s",
               sp_words_time(out->time_above_band, t->exact).text, rest);
    else if (ever_ran(out))
        sp_say(t->to, SP_LABEL_WIDTH, "Thermostat", "regulates all the way, never fully open");
    else
        sp_say(t->to, SP_LABEL_WIDTH, "Thermostat", "never fully open; the engine never runs");
}

static void say_drive(const struct telling *t)
{
    const struct sp_result *out = t->report->result;
    sp_say(t->to, SP_LABEL_WIDTH, "Drive", "%s, %s", sp_words_time(out->duration, t->exact).text,
           sp_words_distance(out->distance, t->exact).text);
    say_thermostat(t);
}

static void say_defaults(const struct telling *t)
{
    struct sp_defaults n = t->report->defaults;
    if (!n.practice && !n.memory) return;
    sp_say(t->to, SP_LABEL_WIDTH, "Rests on",
           "%zu value%s of common practice and %zu from memory that the case leaves at their defaults: see "
           "swirlpot show", n.practice, n.practice == 1 ? "" : "s", n.memory);
}

void sp_report_text(const struct sp_report *r, bool exact, FILE *to)
{
    const struct telling t = {r, exact, to};
    say_headline(&t);
    say_title(&t);
    fputc('\n', to);
    say_temperatures(&t);
    say_drive(&t);
    say_fan(&t);
    say_battery(&t);
    say_drag(&t);
    say_heat(&t);
    say_work(&t);
    say_measured(&t);
    say_defaults(&t);
    sp_report_happenings(r, exact, to);
    fputc('\n', to);
    sp_say(to, 0, "",
           "See the cautions in README.md: a prediction is no substitute for a temperature sensor and "
           "an alarm.");
}
