/* The conditions a drive watches: switches of the controller, limits, the cap, boiling, what else may fail. Internal.
 *
 * Each is a function of the state that crosses nil; the integrator finds the crossing. The first SP_WATCHES are
 * always there, in this order; the rest is listed only where the car has what they watch.
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
    SP_W_LOST,       /* liquid gone through the cap */
    SP_W_EMPTY,      /* hardly any left in the tank */
    SP_WATCHES,
    SP_W_TIER = SP_WATCHES, /* index: sp_limited; tier */
    SP_W_COLD_COOLANT, SP_W_COLD_OIL, /* loaded before it is warm */
    SP_W_LOCAL, SP_W_CAN, SP_W_CAVITATES,
    SP_W_CURRENT,    /* index: kind of fan */
    SP_W_FLAT,       /* the battery has given what it can */
    SP_W_PULSE,      /* the clock of a pulsing pump */
    SP_WATCH_KINDS,
    SP_WATCHES_MOST = SP_WATCHES + 3 * SP_LIMITED + 2 * SP_FAN_KINDS + 7
};

/* One watch of the list. */
struct sp_watch_one { enum sp_watch kind; int index, tier; };

struct sp_watch_list {
    int count;
    struct sp_watch_one of[SP_WATCHES_MOST];
    int fan[SP_FAN_KINDS]; /* which of them is the controller of a kind of fan */
    bool local;            /* local boiling is judged: looking needs the jacket's conductance */
};

/* Adds what this circuit gives reason to watch; `list` zeroed at first. A drive that changes adds each of its. */
void sp_watch_add(struct sp_watch_list *list, const struct sp_circuit *c);

/* What a watch says when it rises and when it falls; SP_EVENT_KINDS: nothing. */
struct sp_watch_events { enum sp_event_kind rise, fall; };
extern const struct sp_watch_events sp_watch_event[SP_WATCH_KINDS];

struct sp_watched {
    double g[SP_WATCHES_MOST]; /* in the list's order; one that does not apply never changes sign */
    double tank_pressure, boil_margin, local_margin; /* Pa, K, K; local NAN where not judged */
    double head_left; /* share of the pump's rise that cavitation leaves */
};

/* All values at once; k needs the coolant's split, and the jacket's conductance where list->local. */
void sp_watch(const struct sp_watch_list *list, const struct sp_circuit *c, const struct sp_inputs *in,
              const struct sp_modes *modes, double t, const double *y, const struct sp_coupling *k,
              struct sp_watched *out);

/* What is to be said of one watch. */
struct sp_watch_info {
    struct sp_watch_events events;
    enum sp_severity severity; /* SP_SEVERITY_NOTE: no failure */
    const char *place;         /* NULL: none */
    const char *unit;          /* of its excess as shown ... */
    double scale;              /* ... which is this many SI */
    double grave;              /* SI that count as one in the share of a failure */
};
struct sp_watch_info sp_watch_info(const struct sp_circuit *c, const struct sp_watch_one *w);

/* How far [SI] a watch that is high is beyond its limit. */
double sp_watch_excess(const struct sp_circuit *c, const struct sp_watch_one *w, const double *y, double g);

/* Whether the boil margin is that of the pump's inlet, not of the jacket. */
bool sp_watch_boils_at_pump(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                            const struct sp_coupling *k, const struct sp_watched *seen);

/* "duct 2, fan 1" of a kind of fan. */
const char *sp_watch_fan_place(const struct sp_circuit *c, int kind);

/* Moves the play of the thermostat after SP_W_PLAY (or, with `shut_side`, SP_W_PLAY_SHUT) crossed. */
void sp_watch_turn_play(const struct sp_thermostat *t, double wax, bool shut_side, struct sp_modes *modes);

#endif
