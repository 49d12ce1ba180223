/* Where held speeds settle, as JSON. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "result_write.h"
#include "swirlpot/hold.h"
#include "swirlpot/result.h"

static const char *const kind[] = {[SP_HOLD_SETTLES] = "settles",
                                   [SP_HOLD_SWINGS] = "swings",
                                   [SP_HOLD_DRIFTS] = "drifts",
                                   [SP_HOLD_RUNS_AWAY] = "runs away"};

static void write_degrees(struct sp_writer *w, const char *name, double kelvin)
{
    sp_write_number(w, name, kelvin - SP_ZERO_C);
}

static void write_limits(struct sp_writer *w, const struct sp_hold_point *p)
{
    sp_write_open(w, "limits", '[');
    for (int j = 0; j < SP_HOLD_LIMITS; ++j) {
        const struct sp_hold_limit *l = &p->limit[j];
        double zero = j == SP_HOLD_BOIL_MARGIN ? 0.0 : SP_ZERO_C;
        if (!isfinite(l->limit) && !isfinite(l->value)) continue;
        sp_write_open(w, NULL, '{');
        sp_write_text(w, "key", l->key);
        sp_write_text(w, "unit", j == SP_HOLD_BOIL_MARGIN ? "K" : "degC");
        sp_write_number(w, "limit", l->limit - zero);
        sp_write_number(w, "value", l->value - zero);
        sp_write_number(w, "left_K", l->left);
        sp_write_number(w, "passed_s", l->passed);
        sp_write_close(w, '}');
    }
    sp_write_close(w, ']');
}

static void write_condition(struct sp_writer *w, const struct sp_hold_point *p)
{
    const double *v = p->at.value;
    sp_write_number(w, "speed_m_s", p->wish.speed);
    sp_write_number(w, "grade", p->wish.grade);
    sp_write_number(w, "power_W", v[SP_CH_POWER]);
    sp_write_number(w, "engine_speed_rpm", 60.0 * v[SP_CH_ENGINE_SPEED]);
    write_degrees(w, "ambient_degC", v[SP_CH_AMBIENT]);
}

static void write_verdict(struct sp_writer *w, const struct sp_hold_point *p)
{
    sp_write_text(w, "kind", kind[p->kind]);
    sp_write_bool(w, "holds", p->holds);
    sp_write_bool(w, "boils", p->limit[SP_HOLD_BOIL_MARGIN].value < 0.0);
    sp_write_text(w, "limit", p->binds >= 0 ? p->limit[p->binds].key : NULL);
    sp_write_number(w, "lasts_s", p->lasts);
    sp_write_number(w, "rest_after_s", p->rest_after);
    sp_write_number(w, "followed_s", p->followed);
    sp_write_open(w, "cycle", '{');
    write_degrees(w, "coolant_least_degC", p->coolant.least);
    write_degrees(w, "coolant_most_degC", p->coolant.most);
    write_degrees(w, "coolant_mean_degC", p->coolant.mean);
    sp_write_number(w, "period_s", p->coolant.period);
    sp_write_number(w, "fan_share", p->coolant.fan);
    sp_write_close(w, '}');
    write_limits(w, p);
}

static void write_temperatures(struct sp_writer *w, const struct sp_hold_point *p)
{
    const double *v = p->at.value;
    write_degrees(w, "coolant_degC", v[SP_CH_ENGINE_OUT]);
    write_degrees(w, "radiator_in_degC", v[SP_CH_RADIATOR_IN]);
    write_degrees(w, "radiator_out_degC", v[SP_CH_RADIATOR_OUT]);
    write_degrees(w, "pump_in_degC", v[SP_CH_PUMP_IN]);
    write_degrees(w, "metal_degC", v[SP_CH_METAL]);
    write_degrees(w, "gauge_degC", v[SP_CH_GAUGE]);
    write_degrees(w, "oil_degC", p->oil);
    write_degrees(w, "gearbox_degC", p->gearbox);
    write_degrees(w, "charge_degC", p->charge);
    write_degrees(w, "air_in_degC", p->air_in);
    write_degrees(w, "air_out_degC", v[SP_CH_AIR_OUT]);
    sp_write_number(w, "boil_margin_K", v[SP_CH_BOIL_MARGIN]);
    write_degrees(w, "boiling_degC", p->boiling);
    sp_write_number(w, "air_to_water_K", p->air_to_water);
    write_degrees(w, "air_to_boil_degC", p->air_to_boil);
    write_degrees(w, "air_to_boil_100_degC", p->air_to_boil_100);
    write_degrees(w, "ceiling_degC", p->ceiling);
}

static void write_flows(struct sp_writer *w, const struct sp_hold_point *p)
{
    const double *v = p->at.value;
    sp_write_number(w, "air_mass_flow_kg_s", v[SP_CH_AIR_FLOW]);
    sp_write_number(w, "face_velocity_m_s", v[SP_CH_FACE_VELOCITY]);
    sp_write_number(w, "fan_speed", v[SP_CH_FAN_SPEED]);
    sp_write_number(w, "fan_power_W", v[SP_CH_FAN_POWER]);
    sp_write_number(w, "thermostat_lift", v[SP_CH_LIFT]);
    sp_write_number(w, "coolant_flow_m3_s", v[SP_CH_PUMP_FLOW]);
    sp_write_number(w, "coolant_flow_radiator_m3_s", v[SP_CH_RADIATOR_FLOW]);
    sp_write_number(w, "coolant_flow_bypass_m3_s", v[SP_CH_BYPASS_FLOW]);
    sp_write_number(w, "tank_pressure_Pa", v[SP_CH_TANK_PRESSURE]);
    sp_write_number(w, "dissipation_W_K", p->dissipation);
    sp_write_number(w, "drag_N", v[SP_CH_DRAG]);
    sp_write_open(w, "heat", '{');
    sp_write_number(w, "in_W", p->heat.in);
    sp_write_number(w, "air_W", p->heat.air);
    sp_write_number(w, "skin_W", p->heat.skin);
    sp_write_number(w, "relative_error", p->heat.error);
    sp_write_close(w, '}');
}

/* Each duct as `swirlpot duct --json` writes one. */
static void write_ducts(struct sp_writer *w, const struct sp_hold_point *p)
{
    sp_write_open(w, "ducts", '[');
    for (size_t i = 0; i < p->ducts; ++i) {
        const struct sp_hold_duct *d = &p->duct[i];
        struct sp_duct_point point = {
            .speed = p->wish.speed, .in = d->in, .state = d->state, .losses = d->losses};
        memcpy(point.station, d->station, sizeof point.station);
        point.in.heat = d->state.heat;
        sp_duct_point_write(w, &point);
    }
    sp_write_close(w, ']');
}

static void write_point(struct sp_writer *w, const struct sp_hold_report *r, size_t i)
{
    const struct sp_hold_point *p = &r->point[i];
    sp_write_open(w, NULL, '{');
    write_condition(w, p);
    write_verdict(w, p);
    write_temperatures(w, p);
    if (r->ceiling) write_degrees(w, "ceiling_solved_degC", r->ceiling[i]);
    write_flows(w, p);
    write_ducts(w, p);
    sp_write_close(w, '}');
}

void sp_hold_json(const struct sp_hold_report *r, FILE *to)
{
    struct sp_writer w = {.to = to};
    sp_write_open(&w, NULL, '{');
    sp_write_text(&w, "swirlpot", sp_version());
    sp_write_text(&w, "title", r->design->title);
    sp_write_open(&w, "points", '[');
    for (size_t i = 0; i < r->points; ++i)
        write_point(&w, r, i);
    sp_write_close(&w, ']');
    sp_write_close(&w, '}');
}
