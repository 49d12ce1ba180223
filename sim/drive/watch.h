/* The conditions a drive watches: switches of the controller, limits, the cap, boiling. Internal.
 *
 * Each is a function of the state that crosses nil; the integrator finds the crossing.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_WATCH_H
#define SP_DRIVE_WATCH_H

#include "circuit/circuit.h"
#include "swirlpot/drive.h"

enum sp_watch {
    SP_W_FAN,        /* switch: over `on` while off, under `off` while on; proportional: over `from` */
    SP_W_PLAY,       /* the wax turns, or meets the opening side of the play */
    SP_W_PLAY_SHUT,  /* the wax meets the shutting side of the play */
    SP_W_OPENS, SP_W_FULL, SP_W_CAP, SP_W_COOLANT, SP_W_GAUGE, SP_W_METAL, SP_W_MARGIN, SP_W_BOIL,
    SP_WATCHES
};

/* What a watch says when it rises and when it falls; SP_EVENT_KINDS: nothing. */
struct sp_watch_events { enum sp_event_kind rise, fall; };
extern const struct sp_watch_events sp_watch_event[SP_WATCHES];

/* All values at once; a watch that does not apply never changes sign. Also gives tank pressure and boil margin. */
struct sp_watched { double g[SP_WATCHES], tank_pressure, boil_margin; };

void sp_watch(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
              const double *y, const struct sp_coupling *k, struct sp_watched *out);

/* Moves the play of the thermostat after SP_W_PLAY (or, with `shut_side`, SP_W_PLAY_SHUT) crossed. */
void sp_watch_turn_play(const struct sp_thermostat *t, double wax, bool shut_side, struct sp_modes *modes);

#endif
