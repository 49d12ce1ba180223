/* schedule_step.c - what a step lays over its rows: traffic, key, bonnet, blower.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"
#include "part/traffic.h"

#include <math.h>

unsigned char sp_schedule_step_flags(const struct sp_step *step)
{
    unsigned flags = 0;
    if (step->key_on) flags |= SP_FLAG_KEY;
    if (step->bonnet_up) flags |= SP_FLAG_BONNET;
    return (unsigned char)flags;
}

/* A wake that the trace tells brings its warmth, unless the trace has the air's temperature itself. */
void sp_schedule_step_air(const struct sp_step *step, bool ambient_told, double in[SP_INPUTS])
{
    in[SP_IN_BLOWER] = isfinite(step->blower) ? step->blower : 0.0;
    if (in[SP_IN_WAKE] < 1.0 && !ambient_told) in[SP_IN_AMBIENT] += sp_traffic_warming(in[SP_IN_WAKE]);
    if (!(step->following > 0.0)) return;
    struct sp_traffic ahead = sp_traffic_behind(step->following);
    double felt = sp_traffic_felt(in[SP_IN_SPEED]);
    in[SP_IN_WAKE] *= 1.0 - (1.0 - ahead.wake) * felt;
    if (!ambient_told) in[SP_IN_AMBIENT] += ahead.warming * felt;
}
