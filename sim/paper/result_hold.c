/* Where held speeds settle, for a person: a page for one, a table for several.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "result_words.h"
#include "result_write.h"
#include "swirlpot/hold.h"
#include "swirlpot/result.h"

static double value(const struct sp_hold_point *p, enum sp_channel c)
{
    return p->at.value[c];
}

static double celsius(double kelvin)
{
    return kelvin - SP_ZERO_C;
}

/* "12.3 degC" */
static struct sp_words degrees(double kelvin)
{
    struct sp_words w;
    snprintf(w.text, sizeof w.text, isfinite(kelvin) ? "%.1f degC" : "unknown", celsius(kelvin));
    return w;
}

/* Rounded to nil without a sign. */
static double tidy(double x, double least)
{
    return fabs(x) < least ? 0.0 : x;
}

/* ---- one point ------------------------------------------------------------------------------------- */

static void say_condition(const struct sp_hold_point *p, FILE *to)
{
    fprintf(to, "%.5g km/h", 3.6 * p->wish.speed);
    if (!isnan(p->wish.grade)) fprintf(to, ", grade %.4g %%", 100.0 * p->wish.grade);
    fprintf(to, ", %.4g kW at %.0f rpm; air %.4g degC\n", value(p, SP_CH_POWER) / 1e3,
            60.0 * value(p, SP_CH_ENGINE_SPEED), celsius(value(p, SP_CH_AMBIENT)));
}

static struct sp_words limit_words(const struct sp_hold_limit *l)
{
    return sp_words_limit(l->limit, !strcmp(l->key, "limits.boil_margin"));
}

/* Where it comes to, without a verdict. */
static struct sp_words rest_words(const struct sp_hold_point *p)
{
    struct sp_words w, most = degrees(p->coolant.most);
    switch (p->kind) {
    case SP_HOLD_SETTLES:
        snprintf(w.text, sizeof w.text, "settles at %.40s", most.text);
        break;
    case SP_HOLD_SWINGS:
        snprintf(w.text, sizeof w.text, "swings from %.1f to %.40s every %.4g s", celsius(p->coolant.least),
                 most.text, p->coolant.period);
        break;
    case SP_HOLD_DRIFTS:
        snprintf(w.text, sizeof w.text, "still moves after %.40s, at %.40s",
                 sp_words_time(p->followed, false).text, most.text);
        break;
    default:
        snprintf(w.text, sizeof w.text, "never settles");
    }
    return w;
}

static void say_verdict(const struct sp_hold_point *p, FILE *to)
{
    const struct sp_hold_limit *l = p->binds >= 0 ? &p->limit[p->binds] : NULL;
    struct sp_words rest = rest_words(p);
    if (p->holds && l)
        sp_say(to, 0, "", "Holds: %s, %.1f K inside %s.", rest.text, l->left, l->key);
    else
        sp_say(to, 0, "", "%s: %s%s.", p->holds ? "Holds" : "Does not hold", rest.text,
               l ? "" : "; no limit is given");
    if (isfinite(p->lasts))
        sp_say(to, 0, "", "It lasts %.0f s from the start, to %s of %s.", p->lasts, l->key,
               limit_words(l).text);
    if (p->limit[SP_HOLD_BOIL_MARGIN].value < 0.0)
        sp_say(
            to, 0, "",
            "It boils. Past boiling the heat balance of the liquid goes on: read such "
            "temperatures as \"it boils\", not as degrees.");
}

static void say_coolant(const struct sp_hold_point *p, FILE *to)
{
    sp_say(to, SP_LABEL_WIDTH, "Coolant", "engine out %s; radiator in %.1f, out %.1f; pump in %.1f",
           degrees(value(p, SP_CH_ENGINE_OUT)).text, celsius(value(p, SP_CH_RADIATOR_IN)),
           celsius(value(p, SP_CH_RADIATOR_OUT)), celsius(value(p, SP_CH_PUMP_IN)));
    sp_say(to, SP_LABEL_WIDTH, "", "%.1f K over the air ahead of the car", p->air_to_water);
    if (p->kind == SP_HOLD_SWINGS)
        sp_say(to, SP_LABEL_WIDTH, "", "this at its hottest; mean %s", degrees(p->coolant.mean).text);
    if (isfinite(p->rest_after))
        sp_say(to, SP_LABEL_WIDTH, "", "within 1 K of its rest after %s",
               sp_words_time(p->rest_after, false).text);
    sp_say(to, SP_LABEL_WIDTH, "Metal", "%s; the gauge reads %.1f", degrees(value(p, SP_CH_METAL)).text,
           celsius(value(p, SP_CH_GAUGE)));
}

static void say_others(const struct sp_hold_point *p, FILE *to)
{
    const struct {
        const char *label;
        double T;
    } all[] = {{"Oil", p->oil}, {"Gearbox oil", p->gearbox}, {"Charge air", p->charge}};
    for (size_t i = 0; i < sizeof all / sizeof all[0]; ++i)
        if (isfinite(all[i].T)) sp_say(to, SP_LABEL_WIDTH, all[i].label, "%s", degrees(all[i].T).text);
}

static void say_limits(const struct sp_hold_point *p, FILE *to)
{
    const char *label = "Limits";
    for (int j = 0; j < SP_HOLD_LIMITS; ++j) {
        const struct sp_hold_limit *l = &p->limit[j];
        if (isnan(l->left)) continue;
        char passed[80] = "";
        if (isfinite(l->passed)) snprintf(passed, sizeof passed, ", first passed after %.0f s", l->passed);
        sp_say(to, SP_LABEL_WIDTH, label, "%s %s: %.1f K %s%s", l->key + strlen("limits."),
               limit_words(l).text, fabs(l->left), l->left < 0.0 ? "beyond it" : "left", passed);
        label = "";
    }
}

static void say_ceiling(const struct sp_hold_report *r, FILE *to)
{
    const struct sp_hold_point *p = r->point;
    const char *more = value(p, SP_CH_LIFT) < 1.0 ? "; more, as the thermostat can still open" : "";
    if (isfinite(p->ceiling))
        sp_say(to, SP_LABEL_WIDTH, "", "%s to meet limits.coolant, a degree for a degree%s",
               degrees(p->ceiling).text, more);
    if (!r->ceiling || isnan(r->ceiling[0])) return;
    if (isinf(r->ceiling[0]))
        sp_say(to, SP_LABEL_WIDTH, "", "solved anew: %s",
               r->ceiling[0] > 0.0 ? "over 59 degC" : "under -45 degC");
    else
        sp_say(to, SP_LABEL_WIDTH, "", "%s solved anew: thinner air, thermostat followed",
               degrees(r->ceiling[0]).text);
}

static void say_air_limits(const struct sp_hold_report *r, FILE *to)
{
    const struct sp_hold_point *p = r->point;
    sp_say(to, SP_LABEL_WIDTH, "Boiling", "at %s where it leaves the engine; least margin %.1f K",
           degrees(p->boiling).text, p->limit[SP_HOLD_BOIL_MARGIN].value);
    sp_say(to, SP_LABEL_WIDTH, "Hottest air", "%s to boil there; %s with 100 degC in its place (SAE J1393)",
           degrees(p->air_to_boil).text, degrees(p->air_to_boil_100).text);
    say_ceiling(r, to);
}

static void say_flows(const struct sp_hold_point *p, FILE *to)
{
    const double litres = 60e3; /* l/min in a m3/s */
    sp_say(to, SP_LABEL_WIDTH, "Coolant flow",
           "%.1f l/min; radiator %.1f, bypass %.1f; thermostat %.0f %% open",
           litres * value(p, SP_CH_PUMP_FLOW), litres * value(p, SP_CH_RADIATOR_FLOW),
           litres * value(p, SP_CH_BYPASS_FLOW), 100.0 * value(p, SP_CH_LIFT));
    sp_say(to, SP_LABEL_WIDTH, "Air", "%.4f kg/s, %.3f m/s at the face; %s in, %.1f out",
           tidy(value(p, SP_CH_AIR_FLOW), 5e-5), tidy(value(p, SP_CH_FACE_VELOCITY), 5e-4),
           degrees(p->air_in).text, celsius(value(p, SP_CH_AIR_OUT)));
    sp_say(to, SP_LABEL_WIDTH, "Fan", "%.3g of rated speed, %.4g W; asked to run %.3g %% of the time",
           tidy(value(p, SP_CH_FAN_SPEED), 5e-4), tidy(value(p, SP_CH_FAN_POWER), 5e-4),
           100.0 * p->coolant.fan);
}

static void say_heat(const struct sp_hold_point *p, FILE *to)
{
    sp_say(to, SP_LABEL_WIDTH, "Heat", "%.3f kW in, %.3f to duct air, %.3f by skins; sum misses %.1g",
           p->heat.in / 1e3, p->heat.air / 1e3, p->heat.skin / 1e3, fabs(p->heat.error));
    sp_say(to, SP_LABEL_WIDTH, "Radiator", "%.4g kW a kelvin of coolant in over air in",
           p->dissipation / 1e3);
    sp_say(to, SP_LABEL_WIDTH, "Drag", "%.2f N", tidy(value(p, SP_CH_DRAG), 5e-3));
}

/* As `swirlpot duct` would have it: a given heat. */
static struct sp_duct_point duct_point(const struct sp_hold_point *p, const struct sp_hold_duct *d)
{
    struct sp_duct_point out = {.speed = p->wish.speed, .in = d->in, .state = d->state, .losses = d->losses};
    memcpy(out.station, d->station, sizeof out.station);
    out.in.heat_given = true;
    out.in.heat = d->state.heat;
    return out;
}

static void say_ducts(const struct sp_hold_point *p, FILE *to)
{
    for (size_t i = 0; i < p->ducts; ++i) {
        const struct sp_hold_duct *d = &p->duct[i];
        struct sp_duct_point point = duct_point(p, d);
        fputc('\n', to);
        if (p->ducts > 1 || d->copies > 1.0) fprintf(to, "Duct %zu", i + 1);
        if (d->copies > 1.0) fprintf(to, ", one of %.0f equal ones", d->copies);
        if (p->ducts > 1 || d->copies > 1.0) fputc('\n', to);
        sp_duct_point_text(&point, to);
    }
}

static void say_page(const struct sp_hold_report *r, FILE *to)
{
    const struct sp_hold_point *p = r->point;
    say_condition(p, to);
    say_verdict(p, to);
    fputc('\n', to);
    if (p->kind == SP_HOLD_RUNS_AWAY) { /* what is not of this world is not told to a tenth of a degree */
        say_limits(p, to);
        return;
    }
    say_coolant(p, to);
    say_others(p, to);
    say_limits(p, to);
    say_air_limits(r, to);
    say_flows(p, to);
    say_heat(p, to);
    say_ducts(p, to);
}

/* ---- a table --------------------------------------------------------------------------------------- */

static const char heading[] = "  speed  grade  power  engine  over   air to ceiling    air coolant   fan\n"
                              "   km/h      %     kW     out   air     boil    degC   kg/s   l/min     %\n";

static struct sp_words number(double x, const char *format)
{
    struct sp_words w = {"-"};
    if (!isfinite(x)) return w;
    char text[32];
    snprintf(text, sizeof text, "%s", format);
    if (!strcmp(text, "0"))
        snprintf(w.text, sizeof w.text, "%.0f", x + 0.0);
    else if (!strcmp(text, "1"))
        snprintf(w.text, sizeof w.text, "%.1f", x + 0.0);
    else
        snprintf(w.text, sizeof w.text, "%.3f", x + 0.0);
    return w;
}

static struct sp_words word_of(const struct sp_hold_point *p)
{
    struct sp_words w;
    if (isfinite(p->lasts))
        snprintf(w.text, sizeof w.text, "%.0f s", p->lasts);
    else
        snprintf(w.text, sizeof w.text, "%s",
                 p->kind == SP_HOLD_SETTLES  ? "holds"
                 : p->kind == SP_HOLD_SWINGS ? "swings"
                 : p->kind == SP_HOLD_DRIFTS ? "drifts"
                                             : "never");
    return w;
}

static struct sp_words ceiling_of(const struct sp_hold_report *r, size_t i)
{
    double T = r->ceiling ? r->ceiling[i] : r->point[i].ceiling;
    struct sp_words w = number(celsius(T), "1");
    if (isinf(T)) snprintf(w.text, sizeof w.text, T > 0.0 ? ">59" : "<-45");
    return w;
}

static void say_line(const struct sp_hold_report *r, size_t i, FILE *to)
{
    const struct sp_hold_point *p = &r->point[i];
    bool away = p->kind == SP_HOLD_RUNS_AWAY;
    fprintf(to, "%7s%7s%7s", number(3.6 * p->wish.speed, "1").text, number(100.0 * p->wish.grade, "1").text,
            number(away ? p->wish.power / 1e3 : value(p, SP_CH_POWER) / 1e3, "1").text);
    if (away)
        fprintf(to, "%8s%6s%9s%8s%7s%8s%6s", "-", "-", "-", "-", "-", "-", "-");
    else
        fprintf(to, "%8s%6s%9s%8s%7s%8s%6s", number(celsius(p->coolant.most), "1").text,
                number(p->air_to_water, "1").text, number(celsius(p->air_to_boil), "1").text,
                ceiling_of(r, i).text, number(value(p, SP_CH_AIR_FLOW), "3").text,
                number(6e4 * value(p, SP_CH_RADIATOR_FLOW), "1").text,
                number(100.0 * p->coolant.fan, "0").text);
    fprintf(to, "  %s\n", word_of(p).text);
}

static void say_table(const struct sp_hold_report *r, FILE *to)
{
    fputs(heading, to);
    for (size_t i = 0; i < r->points; ++i)
        say_line(r, i, to);
    fprintf(to, "\n");
    sp_say(
        to, 0, "",
        "engine out: coolant in degC, the hottest of a cycle; over air: K over the air ahead; air to boil: "
        "degC of air in which it boils where it leaves the engine; ceiling: degC of air that meets "
        "limits.coolant, %s; "
        "coolant: through the radiator; fan: share of time it is asked to run.",
        r->ceiling ? "solved anew" : "a degree of air for a degree of coolant");
    sp_say(to, 0, "",
           "Last: holds; swings, within limits; or the seconds from the start to the first limit passed.");
}

void sp_hold_text(const struct sp_hold_report *r, FILE *to)
{
    if (r->design->title) {
        char title[400];
        sp_plain(title, sizeof title, r->design->title, SP_LINE_WIDTH);
        fprintf(to, "%s\n", title);
    }
    if (r->points == 1)
        say_page(r, to);
    else
        say_table(r, to);
}
