/* A duct at one condition: stations and losses as text and JSON. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "result_write.h"
#include "swirlpot/result.h"

static const char *const station_name[SP_STATIONS] = {"free stream", "inlet",          "core face",
                                                      "core back",   "behind the fan", "exit"};

enum sp_status sp_duct_point_solve(const struct sp_duct *duct, const struct sp_air_design *air, double speed,
                                   double heat, double fan_speed, struct sp_duct_point *out)
{
    struct sp_moist moist = sp_moist_air(air->ambient, air->pressure, air->humidity);
    memset(out, 0, sizeof *out);
    out->speed = speed;
    out->in = (struct sp_duct_inputs){.speed = speed + air->wind,
                                      .wake = 1.0,
                                      .cross_wind = air->cross_wind,
                                      .temperature = air->ambient,
                                      .pressure = air->pressure,
                                      .R = moist.R,
                                      .cp = moist.cp,
                                      .fan_speed = {fan_speed, fan_speed, fan_speed},
                                      .heat_given = true,
                                      .heat = heat,
                                      .wall = {air->ambient}};
    enum sp_status status = sp_duct_solve(duct, &out->in, &out->state);
    if (status == SP_OK) sp_duct_stations(duct, &out->in, &out->state, out->station, &out->losses);
    return status;
}

/* Equal ducts together. */
static double copies(const struct sp_duct_point *p)
{
    return p->copies > 1.0 ? p->copies : 1.0;
}

/* Face velocity over speed through the air; undefined in still air. */
static double velocity_ratio(const struct sp_duct_point *p)
{
    return p->in.speed != 0.0 ? p->state.face_velocity / p->in.speed : NAN;
}

/* ---- losses ---------------------------------------------------------------------------------------- */

enum { LOSSES = 9 };

struct loss {
    const char *key, *text;
    double pascal;
};

static void list_losses(const struct sp_duct_point *p, struct loss out[LOSSES])
{
    const struct sp_duct_losses *l = &p->losses;
    bool back = p->state.mass_flow < 0.0;
    double fan = back ? -l->fan : l->fan; /* what helps forwards hinders backwards */
    const struct loss all[LOSSES] = {{"unrecovered", "not recovered at the inlet", l->unrecovered},
                                     {"lip", back ? "jet out of the inlet" : "inlet lip", l->lip},
                                     {"screen", "screen", l->screen},
                                     {"diffuser", "diffuser", l->diffuser},
                                     {"core", "core", l->core},
                                     {"heating", "heating of the air", l->heating},
                                     {"fan", "fan (a gain counts as minus)", fan},
                                     {"exit", "exit", l->exit},
                                     {"exit_head", "head thrown away with the jet", l->exit_head}};
    memcpy(out, all, sizeof all);
}

/* ---- text ------------------------------------------------------------------------------------------ */

/* Rounded to nil without a sign. */
static double tidy(double x, double least)
{
    return fabs(x) < least ? 0.0 : x;
}

static void print_stations(const struct sp_duct_point *p, FILE *to)
{
    fprintf(to, "  %-17s%11s%11s%10s%13s%11s\n", "station", "total", "static", "density", "temperature",
            "velocity");
    fprintf(to, "  %-17s%11s%11s%10s%13s%11s\n", "", "Pa", "Pa", "kg/m3", "degC", "m/s");
    for (int i = 0; i < SP_STATIONS; ++i) {
        const struct sp_station *s = &p->station[i];
        fprintf(to, "  %d %-15s%11.2f%11.2f%10.4f%13.2f%11.3f\n", i, station_name[i],
                tidy(s->total_pressure - p->in.pressure, 0.005),
                tidy(s->static_pressure - p->in.pressure, 0.005), s->density, s->temperature - SP_ZERO_C,
                tidy(s->velocity, 0.0005));
    }
    fprintf(to, "  pressures relative to ambient, %.2f kPa\n", p->in.pressure / 1e3);
}

static void print_loss(const char *text, double pascal, double head, FILE *to)
{
    fprintf(to, "  %-38s%11.2f", text, tidy(pascal, 0.005));
    if (head > 0.0)
        fprintf(to, "%11.1f %%\n", tidy(100.0 * pascal / head, 0.05));
    else
        fprintf(to, "%11s\n", "-");
}

static void print_losses(const struct sp_duct_point *p, FILE *to)
{
    struct loss loss[LOSSES];
    double head = p->station[0].total_pressure - p->station[0].static_pressure, sum = 0.0;
    bool back = p->state.mass_flow < 0.0; /* then the air never comes from the free stream ahead */
    list_losses(p, loss);
    fprintf(to, "\n  %-38s%11s%13s\n", "where each pascal goes", "Pa", "share of q");
    for (int i = back ? 1 : 0; i < LOSSES; ++i) {
        sum += loss[i].pascal;
        if (loss[i].pascal != 0.0) print_loss(loss[i].text, loss[i].pascal, head, to);
    }
    print_loss(back ? "exit (total) to inlet (static)" : "free stream (total) to exit (static)", sum, head,
               to);
}

static void print_sums(const struct sp_duct_point *p, FILE *to)
{
    double ratio = velocity_ratio(p);
    fprintf(to, "\n  face velocity   %.4f m/s", tidy(p->state.face_velocity, 5e-5));
    if (isfinite(ratio)) fprintf(to, ", %.5f of the speed through the air", ratio);
    fprintf(to, "\n  mass flow       %.5f kg/s", tidy(copies(p) * p->state.mass_flow, 5e-6));
    if (copies(p) > 1.0) fprintf(to, " through %.0f ducts", copies(p));
    fputc('\n', to);
    fprintf(to, "  exit velocity   %.4f m/s\n", tidy(p->state.exit_velocity, 5e-5));
    fprintf(to, "  internal drag   %.3f N", tidy(copies(p) * p->state.drag, 5e-4));
    double wake = copies(p) * sp_duct_wake_drag(&p->state, p->station);
    if (isfinite(wake)) fprintf(to, " from momentum; %.3f N from losses (far wake)", tidy(wake, 5e-4));
    fputc('\n', to);
    if (p->in.fan_speed[0] > 0.0 || p->state.fan_pressure != 0.0)
        fprintf(to, "  fan pressure    %.2f Pa\n", tidy(p->state.fan_pressure, 0.005));
    if (p->state.diffuser_stalled) fputs("  The diffuser stalls: it opens too fast for its length.\n", to);
    if (p->state.mass_flow < 0.0) fputs("  The air flows backwards: in at the exit, out of the inlet.\n", to);
}

void sp_duct_point_text(const struct sp_duct_point *p, FILE *to)
{
    if (p->duct) fprintf(to, "Duct %d, ", p->duct);
    fprintf(to, "%.6g m/s (%.6g km/h)", p->speed, p->speed * 3.6);
    if (p->in.speed != p->speed) fprintf(to, ", %.6g m/s through the air", p->in.speed);
    fputs(p->in.fan_speed[0] > 0.0 ? ", fan on" : ", fan off", to);
    if (p->in.heat > 0.0 && copies(p) > 1.0)
        fprintf(to, ", %.6g kW to the air: %.6g kW in each of %.0f ducts\n\n", copies(p) * p->in.heat / 1e3,
                p->in.heat / 1e3, copies(p));
    else if (p->in.heat > 0.0)
        fprintf(to, ", %.6g kW to the air\n\n", p->in.heat / 1e3);
    else
        fputs(", core cold\n\n", to);
    print_stations(p, to);
    print_losses(p, to);
    print_sums(p, to);
    if (p->state.network) sp_duct_network_say(p, to);
}

/* ---- JSON ------------------------------------------------------------------------------------------ */

static void write_station(struct sp_writer *w, int i, const struct sp_station *s)
{
    sp_write_open(w, NULL, '{');
    sp_write_number(w, "station", i);
    sp_write_text(w, "name", station_name[i]);
    sp_write_number(w, "total_pressure_Pa", s->total_pressure);
    sp_write_number(w, "static_pressure_Pa", s->static_pressure);
    sp_write_number(w, "density_kg_m3", s->density);
    sp_write_number(w, "temperature_K", s->temperature);
    sp_write_number(w, "velocity_m_s", s->velocity);
    sp_write_close(w, '}');
}

void sp_duct_point_write(struct sp_writer *w, const struct sp_duct_point *p)
{
    struct loss loss[LOSSES];
    list_losses(p, loss);
    sp_write_open(w, NULL, '{');
    if (p->duct) sp_write_number(w, "duct", p->duct);
    sp_write_number(w, "speed_m_s", p->speed);
    sp_write_number(w, "air_speed_m_s", p->in.speed);
    sp_write_number(w, "heat_W", copies(p) * p->in.heat);
    sp_write_bool(w, "fan_on", p->in.fan_speed[0] > 0.0);
    sp_write_number(w, "mass_flow_kg_s", copies(p) * p->state.mass_flow);
    sp_write_number(w, "face_velocity_m_s", p->state.face_velocity);
    sp_write_number(w, "velocity_ratio", velocity_ratio(p));
    sp_write_number(w, "temperature_ratio", p->state.temperature_ratio);
    sp_write_number(w, "exit_velocity_m_s", p->state.exit_velocity);
    sp_write_number(w, "internal_drag_N", copies(p) * p->state.drag);
    sp_write_number(w, "wake_drag_N", copies(p) * sp_duct_wake_drag(&p->state, p->station));
    sp_write_number(w, "fan_pressure_Pa", p->state.fan_pressure);
    sp_write_bool(w, "diffuser_stalled", p->state.diffuser_stalled);
    sp_write_open(w, "stations", '[');
    for (int i = 0; i < SP_STATIONS; ++i)
        write_station(w, i, &p->station[i]);
    sp_write_close(w, ']');
    sp_write_open(w, "losses_Pa", '{');
    for (int i = 0; i < LOSSES; ++i)
        sp_write_number(w, loss[i].key, loss[i].pascal);
    sp_write_close(w, '}');
    if (copies(p) > 1.0) sp_write_number(w, "ducts", copies(p));
    if (p->state.network) sp_duct_network_write(w, p);
    sp_write_close(w, '}');
}

void sp_duct_points_json(const struct sp_duct_point *p, size_t count, FILE *to)
{
    struct sp_writer w = {.to = to};
    sp_write_open(&w, NULL, '{');
    sp_write_open(&w, "points", '[');
    for (size_t i = 0; i < count; ++i)
        sp_duct_point_write(&w, &p[i]);
    sp_write_close(&w, ']');
    sp_write_close(&w, '}');
}
