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

static void write_limits(struct sp_writer *w, const struct sp_limits *l)
{
    sp_write_open(w, "limits", '{');
    sp_write_number(w, "coolant_degC", l->coolant.stop - SP_ZERO_C);
    sp_write_number(w, "gauge_degC", l->gauge.stop - SP_ZERO_C);
    sp_write_number(w, "metal_degC", l->metal.stop - SP_ZERO_C);
    sp_write_number(w, "boil_margin_K", l->boil_margin);
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
    write_peak(w, "boil_margin_least", "margin_K", out->boil_margin.value, &out->boil_margin);
    write_peak(w, "tank_pressure_peak", "absolute_Pa", out->tank_pressure.value, &out->tank_pressure);
    sp_write_number(w, "coolant_lost_l", out->liquid_lost * 1e3);
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
    sp_write_close(w, '}');
    sp_write_open(w, "fan", '{');
    sp_write_number(w, "on_s", out->fan.on);
    sp_write_number(w, "energy_J", out->fan.energy);
    sp_write_close(w, '}');
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
    write_events(&w, r->result);
    sp_write_close(&w, '}');
}
