/* schedule_say.c - what a schedule complains and cautions of. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"

static void say(struct sp_complaints *to, const struct sp_design *d, size_t step, const char *key,
                const char *found, const char *expected)
{
    char path[64];
    snprintf(path, sizeof path, "drive[%zu]%s%s", step, key ? "." : "", key ? key : "");
    struct sp_place at = {.file = d->file, .path = path};
    sp_complain(to, &at, found, expected, NULL);
}

void sp_schedule_fault(struct sp_scheduling *b, size_t step, const char *key, const char *found,
                       const char *expected)
{
    b->failed = true;
    say(b->complaints, b->design, step, key, found, expected);
}

void sp_schedule_caution(struct sp_scheduling *b, size_t step, const char *found, const char *expected)
{
    say(b->cautions, b->design, step, NULL, found, expected);
}

/* Each but once a drive. */
void sp_schedule_caution_sources(struct sp_scheduling *b, size_t step, const struct sp_engine_sources *s)
{
    enum sp_heat_law law = b->design->engine.heat_law;
    bool by_flow = law == SP_HEAT_CORRELATION;
    bool flow = (s->power == SP_POWER_FUEL && law != SP_HEAT_FUEL && !by_flow) ||
                (s->power == SP_POWER_AIR && law != SP_HEAT_AIR && !by_flow);
    if (s->lacks_flow && !b->cautioned_flow) {
        b->cautioned_flow = true;
        sp_schedule_caution(b, step, "a heat law that goes by flow, and a trace without that flow",
                            "a column fuel_flow or air_flow; heat taken by power and heat.fraction instead");
    }
    if (s->speed == SP_ENGINE_ASSUMED && law != SP_HEAT_GIVEN && !b->cautioned_speed) {
        b->cautioned_speed = true;
        sp_schedule_caution(b, step, "no engine speed and no gears",
                            "a column engine_speed, or car.body.gears and wheel_radius; taken as "
                            "(25 % + 55 % of the load) of rated speed, idling at standstill");
    }
    if (s->power == SP_POWER_THROTTLE && !b->cautioned_throttle) {
        b->cautioned_throttle = true;
        sp_schedule_caution(b, step, "power from throttle only",
                            "a column power, torque or fuel_flow; taken as throttle times rated power, "
                            "in proportion to engine speed below rated speed");
    }
    if (flow && !b->cautioned_flow) {
        b->cautioned_flow = true;
        sp_schedule_caution(b, step, "power from fuel or air flow, and a heat law that goes by power",
                            "car.engine.heat.law fuel or air; power taken from the Willans line");
    }
}

void sp_schedule_caution_power(struct sp_scheduling *b, size_t step, double most)
{
    const double usual = 1.3; /* of rated power: more is a slip of units, or noise differentiated */
    double rated = b->design->engine.rated_power;
    if (!(most > usual * rated)) return;
    char found[64], expected[96];
    snprintf(found, sizeof found, "power up to %.4g kW", most / 1e3);
    snprintf(expected, sizeof expected, "no more than 1.3 times car.engine.rated_power, which is %.4g kW",
             rated / 1e3);
    sp_schedule_caution(b, step, found, expected);
}

void sp_schedule_caution_cap(struct sp_scheduling *b, size_t step, double cut)
{
    char found[128], expected[160];
    if (!(cut > 0.0)) return;
    snprintf(found, sizeof found, "up to %.4g kW more heat than the fuel has left beside work and oil",
             cut / 1e3);
    snprintf(expected, sizeof expected,
             "no more than car.engine.heat.energy_cap, %.4g of the fuel's energy, in all; the coolant's heat "
             "is cut",
             b->design->engine.energy_cap);
    sp_schedule_caution(b, step, found, expected);
}
