/* A drive's result as JSON. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "result_write.h"
#include "swirlpot/result.h"

/* Where and when something was, without its value. */
static void write_place(struct sp_writer *w, const struct sp_peak *p)
{
    sp_write_number(w, "time_s", p->time);
    sp_write_number(w, "distance_m", p->distance);
    sp_write_number(w, "step", (double)p->step);
    sp_write_text(w, "mark", p->mark);
}

static void write_peak(struct sp_writer *w, const char *name, const char *key, double value,
                       const struct sp_peak *p)
{
    sp_write_open(w, name, '{');
    sp_write_number(w, key, value);
    write_place(w, p);
    sp_write_close(w, '}');
}

/* One quantity's tiers that a plain case may not have: null where there is none. */
static void write_more_tiers(struct sp_writer *w, const char *name, const struct sp_tiers *t)
{
    char key[64];
    snprintf(key, sizeof key, "%s_caution_degC", name);
    if (isfinite(t->caution)) sp_write_number(w, key, t->caution - SP_ZERO_C);
    snprintf(key, sizeof key, "%s_alarm_degC", name);
    if (isfinite(t->alarm)) sp_write_number(w, key, t->alarm - SP_ZERO_C);
}

/* As write_more_tiers, with the limit itself. */
static void write_tiers(struct sp_writer *w, const char *name, const struct sp_tiers *t)
{
    char key[64];
    write_more_tiers(w, name, t);
    snprintf(key, sizeof key, "%s_degC", name);
    if (isfinite(t->stop)) sp_write_number(w, key, t->stop - SP_ZERO_C);
}

static void write_limits(struct sp_writer *w, const struct sp_limits *l)
{
    sp_write_open(w, "limits", '{');
    sp_write_number(w, "coolant_degC", l->coolant.stop - SP_ZERO_C);
    sp_write_number(w, "gauge_degC", l->gauge.stop - SP_ZERO_C);
    sp_write_number(w, "metal_degC", l->metal.stop - SP_ZERO_C);
    sp_write_number(w, "boil_margin_K", l->boil_margin);
    write_more_tiers(w, "coolant", &l->coolant);
    write_more_tiers(w, "gauge", &l->gauge);
    write_more_tiers(w, "metal", &l->metal);
    write_tiers(w, "oil", &l->oil);
    write_tiers(w, "gearbox", &l->gearbox);
    write_tiers(w, "charge", &l->charge);
    sp_write_close(w, '}');
}

static void write_verdict(struct sp_writer *w, const struct sp_report *r)
{
    const struct sp_result *out = r->result;
    sp_write_text(w, "verdict", out->survives ? "survives" : "overheats");
    sp_write_text(w, "limit", out->limit);
    write_peak(w, "peak", "coolant_degC", out->coolant.value - SP_ZERO_C, &out->coolant);
    sp_write_number(w, "margin_K", out->margin);
    sp_write_number(w, "boil_margin_K", out->boil_margin.value);
    sp_write_bool(w, "boils", out->boil_margin.value < 0.0);
    sp_write_number(w, "over_ambient_K", out->over_ambient);
    sp_write_number(w, "time_over_limit_s", isfinite(r->design->limits.coolant.stop) ? out->time_over_limit : NAN);
    sp_write_number(w, "time_above_band_s", r->design->thermostat.none ? NAN : out->time_above_band);
    write_limits(w, &r->design->limits);
    write_peak(w, "gauge_peak", "reading_degC", out->gauge.value - SP_ZERO_C, &out->gauge);
    write_peak(w, "metal_peak", "metal_degC", out->metal.value - SP_ZERO_C, &out->metal);
    if (isfinite(out->oil.value)) write_peak(w, "oil_peak", "oil_degC", out->oil.value - SP_ZERO_C, &out->oil);
    if (isfinite(out->gearbox.value))
        write_peak(w, "gearbox_peak", "oil_degC", out->gearbox.value - SP_ZERO_C, &out->gearbox);
    if (isfinite(out->charge.value))
        write_peak(w, "charge_peak", "charge_degC", out->charge.value - SP_ZERO_C, &out->charge);
    write_peak(w, "boil_margin_least", "margin_K", out->boil_margin.value, &out->boil_margin);
    write_peak(w, "tank_pressure_peak", "absolute_Pa", out->tank_pressure.value, &out->tank_pressure);
    sp_write_number(w, "coolant_lost_l", out->liquid_lost * 1e3);
    sp_write_number(w, "tank_left_cold_l", out->tank_left * 1e3);
}

static void write_sums(struct sp_writer *w, const struct sp_result *out)
{
    sp_write_open(w, "ledger", '{');
    sp_write_number(w, "heat_in_J", out->ledger.in);
    sp_write_number(w, "heat_out_J", out->ledger.out_air + out->ledger.out_skin);
    sp_write_number(w, "heat_out_air_J", out->ledger.out_air);
    sp_write_number(w, "heat_out_skin_J", out->ledger.out_skin);
    sp_write_number(w, "heat_stored_J", out->ledger.stored);
    sp_write_number(w, "relative_error", out->ledger.error);
    sp_write_close(w, '}');
    sp_write_open(w, "drag", '{');
    sp_write_number(w, "mean_coefficient", out->drag.mean_coefficient);
    sp_write_number(w, "energy_J", out->drag.energy);
    if (out->drag.spill != 0.0 || out->drag.thrust != 0.0) {
        sp_write_number(w, "spill_J", out->drag.spill);
        sp_write_number(w, "heat_thrust_J", out->drag.thrust);
    }
    sp_write_close(w, '}');
    sp_write_open(w, "fan", '{');
    sp_write_number(w, "on_s", out->fan.on);
    sp_write_number(w, "energy_J", out->fan.energy);
    sp_write_close(w, '}');
    if (isfinite(out->pump_head_left)) sp_write_number(w, "pump_head_left", out->pump_head_left);
    if (isfinite(out->battery.used)) {
        sp_write_open(w, "battery", '{');
        sp_write_number(w, "used_J", out->battery.used);
        sp_write_number(w, "left", out->battery.left);
        sp_write_close(w, '}');
    }
    if (out->fan_kinds < 2) return;
    sp_write_open(w, "fans", '[');
    for (size_t i = 0; i < out->fan_kinds; ++i) {
        sp_write_open(w, NULL, '{');
        sp_write_text(w, "place", out->each_fan[i].place);
        sp_write_number(w, "on_s", out->each_fan[i].on);
        sp_write_close(w, '}');
    }
    sp_write_close(w, ']');
}

/* Work at the wheels, where power came from the road load. */
static void write_work(struct sp_writer *w, const struct sp_drive *drive)
{
    struct sp_work work = sp_drive_work(drive);
    if (!work.from_road) {
        sp_write_text(w, "work", NULL);
        return;
    }
    sp_write_open(w, "work", '{');
    sp_write_number(w, "wheel_J", work.wheel);
    sp_write_number(w, "kinetic_J", work.kinetic);
    sp_write_number(w, "potential_J", work.potential);
    sp_write_number(w, "drag_J", work.drag);
    sp_write_number(w, "rolling_J", work.rolling);
    sp_write_number(w, "brakes_J", work.brakes);
    sp_write_close(w, '}');
}

static void write_measured(struct sp_writer *w, const struct sp_result *out)
{
    if (!isfinite(out->measured.rms)) {
        sp_write_text(w, "measured", NULL);
        return;
    }
    sp_write_open(w, "measured", '{');
    sp_write_number(w, "rms_K", out->measured.rms);
    sp_write_number(w, "warmup_rms_K", out->measured.warmup_rms);
    sp_write_number(w, "time_to_85_s", out->measured.time_to_85);
    sp_write_number(w, "measured_time_to_85_s", out->measured.measured_time_to_85);
    sp_write_number(w, "no_model_rms_K", out->measured.none_rms);
    sp_write_number(w, "no_model_warmup_rms_K", out->measured.none_warmup_rms);
    sp_write_close(w, '}');
}

static void write_events(struct sp_writer *w, const struct sp_result *out)
{
    sp_write_open(w, "events", '[');
    for (size_t i = 0; i < out->events; ++i) {
        const struct sp_event *e = &out->event[i];
        const struct sp_peak place = {0.0, e->time, e->distance, e->step, e->mark};
        sp_write_open(w, NULL, '{');
        sp_write_text(w, "what", sp_event_text(e->kind));
        sp_write_number(w, "coolant_degC", e->coolant - SP_ZERO_C);
        write_place(w, &place);
        sp_write_text(w, "place", e->place);
        sp_write_text(w, "severity", sp_severity_text(e->severity));
        sp_write_close(w, '}');
    }
    sp_write_close(w, ']');
}

static void write_failure(struct sp_writer *w, const char *name, const struct sp_failure *f)
{
    if (!f) {
        sp_write_text(w, name, NULL);
        return;
    }
    const struct sp_peak place = {0.0, f->time, f->distance, f->step, f->mark};
    sp_write_open(w, name, '{');
    sp_write_text(w, "what", sp_event_text(f->kind));
    sp_write_text(w, "place", f->place);
    sp_write_text(w, "severity", sp_severity_text(f->severity));
    write_place(w, &place);
    sp_write_number(w, "worst", f->worst / f->scale);
    sp_write_text(w, "unit", f->unit);
    sp_write_number(w, "worst_time_s", f->worst_time);
    sp_write_number(w, "lasts_s", f->over);
    sp_write_number(w, "share", f->share);
    sp_write_close(w, '}');
}

static void write_failures(struct sp_writer *w, const struct sp_result *out)
{
    sp_write_open(w, "failures", '[');
    for (size_t i = 0; i < out->failures; ++i) write_failure(w, NULL, &out->failure[i]);
    sp_write_close(w, ']');
    write_failure(w, "first_failure", out->first);
    write_failure(w, "worst_failure", out->worst);
}

static void write_changes(struct sp_writer *w, const struct sp_result *out)
{
    sp_write_open(w, "changes", '[');
    for (size_t i = 0; i < out->changes; ++i) {
        const struct sp_told_change *c = &out->change[i];
        sp_write_open(w, NULL, '{');
        sp_write_number(w, "time_s", c->time);
        sp_write_text(w, "set", c->text);
        sp_write_number(w, "to_limit_s", c->to_limit);
        sp_write_text(w, "limit", c->broken < SP_EVENT_KINDS ? sp_event_text(c->broken) : NULL);
        sp_write_close(w, '}');
    }
    sp_write_close(w, ']');
}

void sp_report_json(const struct sp_report *r, FILE *to)
{
    struct sp_writer w = {.to = to};
    sp_write_open(&w, NULL, '{');
    sp_write_text(&w, "swirlpot", sp_version());
    sp_write_text(&w, "title", r->design->title);
    write_verdict(&w, r);
    sp_write_number(&w, "duration_s", r->result->duration);
    sp_write_number(&w, "distance_m", r->result->distance);
    write_sums(&w, r->result);
    write_work(&w, r->drive);
    write_measured(&w, r->result);
    sp_write_open(&w, "defaults", '{');
    sp_write_number(&w, "common_practice", (double)r->defaults.practice);
    sp_write_number(&w, "from_memory", (double)r->defaults.memory);
    sp_write_close(&w, '}');
    write_changes(&w, r->result);
    write_failures(&w, r->result);
    write_events(&w, r->result);
    sp_write_close(&w, '}');
}
