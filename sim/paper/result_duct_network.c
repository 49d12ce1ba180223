/* A duct that is a network: what stands beside the ladder of stations. All of one duct.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "result_write.h"
#include "swirlpot/result.h"

/* Rounded to nil without a sign. */
static double tidy(double x, double least)
{
    return fabs(x) < least ? 0.0 : x;
}

/* What the case calls a core or an exit; NULL: nothing. */
static const char *core_name(const struct sp_duct_point *p, int i)
{
    return p->design ? p->design->core[i].name : NULL;
}

static const char *exit_place(const struct sp_duct_point *p, int i)
{
    return p->design ? p->design->exit[i].place : NULL;
}

static bool any_place(const struct sp_duct_point *p)
{
    for (int i = 0; i < p->state.exits; ++i)
        if (exit_place(p, i)) return true;
    return false;
}

static void write_core(struct sp_writer *w, const struct sp_core_air *c, const char *name)
{
    sp_write_open(w, NULL, '{');
    if (name) sp_write_text(w, "name", name);
    sp_write_number(w, "mass_flow_kg_s", c->mass_flow);
    sp_write_number(w, "face_velocity_m_s", c->face_velocity);
    sp_write_number(w, "air_in_K", c->air_in);
    sp_write_number(w, "heat_W", c->heat);
    sp_write_number(w, "drop_Pa", c->drop);
    sp_write_close(w, '}');
}

static void write_flows(struct sp_writer *w, const char *name, const double *flow, int count)
{
    sp_write_open(w, name, '[');
    for (int i = 0; i < count; ++i) sp_write_number(w, NULL, flow[i]);
    sp_write_close(w, ']');
}

void sp_duct_network_write(struct sp_writer *w, const struct sp_duct_point *p)
{
    const struct sp_duct_state *s = &p->state;
    sp_write_open(w, "one_duct", '{');
    sp_write_number(w, "fresh_kg_s", s->fresh);
    sp_write_number(w, "leak_past_core_kg_s", s->leak_past);
    sp_write_number(w, "leak_outside_kg_s", s->leak_outside);
    sp_write_number(w, "backwards_kg_s", s->backwards);
    sp_write_number(w, "flaps_kg_s", s->flap_flow);
    sp_write_number(w, "inlet_temperature_K", s->inlet_temperature);
    sp_write_number(w, "front_temperature_K", s->front_temperature);
    sp_write_number(w, "front_pressure_Pa", s->front_pressure);
    sp_write_number(w, "bay_temperature_K", s->bay_temperature);
    sp_write_number(w, "bay_pressure_Pa", s->bay_pressure);
    sp_write_number(w, "spill_drag_N", s->spill_drag);
    sp_write_number(w, "heat_thrust_N", s->thrust);
    sp_write_open(w, "cores", '[');
    for (int i = 0; i < s->cores; ++i) write_core(w, &s->core[i], core_name(p, i));
    sp_write_close(w, ']');
    write_flows(w, "fans_kg_s", s->fan_flow, s->fans);
    write_flows(w, "exits_kg_s", s->exit_flow, s->exits);
    if (any_place(p)) {
        sp_write_open(w, "exit_places", '[');
        for (int i = 0; i < s->exits; ++i) sp_write_text(w, NULL, exit_place(p, i));
        sp_write_close(w, ']');
    }
    sp_write_close(w, '}');
}

static void say_flow(const char *text, double flow, FILE *to)
{
    if (fabs(flow) > 5e-6) fprintf(to, "  %s%*s%10.5f kg/s\n", text, 20 - (int)sp_columns(text), "", flow);
}

static void say_exits(const struct sp_duct_point *p, FILE *to)
{
    for (int i = 0; i < p->state.exits; ++i) {
        const char *place = exit_place(p, i);
        char plain[80], name[90];
        sp_plain(plain, sizeof plain, place ? place : "", 14);
        if (place) snprintf(name, sizeof name, "exit %s", plain);
        else snprintf(name, sizeof name, "exit %d", i + 1);
        say_flow(name, p->state.exit_flow[i], to);
    }
}

static void say_core(const struct sp_duct_point *p, int i, FILE *to)
{
    const struct sp_core_air *c = &p->state.core[i];
    char name[80];
    if (core_name(p, i)) sp_plain(name, sizeof name, core_name(p, i), 20);
    else snprintf(name, sizeof name, "core %d", i + 1);
    fprintf(to, "  %s", name);
    fprintf(to, "%*s%10.5f kg/s %9.4f m/s %7.2f degC in %8.3f kW\n", 20 - (int)sp_columns(name), "",
            tidy(c->mass_flow, 5e-6), tidy(c->face_velocity, 5e-5), c->air_in - SP_ZERO_C, c->heat / 1e3);
}

static void say_flows(const char *text, const double *flow, int count, FILE *to)
{
    char name[40];
    for (int i = 0; i < count; ++i) {
        snprintf(name, sizeof name, "%s %d", text, i + 1);
        say_flow(name, flow[i], to);
    }
}

void sp_duct_network_say(const struct sp_duct_point *p, FILE *to)
{
    const struct sp_duct_state *s = &p->state;
    fputs(p->copies > 1.0 ? "\n  in one duct\n" : "\n  in the duct\n", to);
    say_flow("in at the inlet", s->fresh, to);
    for (int i = 0; i < s->cores; ++i) say_core(p, i, to);
    say_flow("back through cores", s->backwards, to);
    say_flow("leak past the cores", s->leak_past, to);
    say_flow("leak to outside", s->leak_outside, to);
    say_flows("fan", s->fan_flow, s->fans, to);
    say_flow("flaps", s->flap_flow, to);
    say_exits(p, to);
    fprintf(to, "  ahead of the cores%12.2f Pa  %13.2f degC\n", tidy(s->front_pressure, 5e-3),
            s->front_temperature - SP_ZERO_C);
    fprintf(to, "  bay               %12.2f Pa  %13.2f degC\n", tidy(s->bay_pressure, 5e-3),
            s->bay_temperature - SP_ZERO_C);
    if (s->spill_drag != 0.0) fprintf(to, "  drag of spilled air%11.3f N\n", s->spill_drag);
    if (s->thrust != 0.0) fprintf(to, "  thrust of the heat%12.3f N, within the drag\n", s->thrust);
}
