/* The state vector of a drive: one place for what stands where. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_STATE_H
#define SP_CIRCUIT_STATE_H

#include <stddef.h>

enum { SP_HOSE_CELLS = 3, SP_CELLS_MAX = 50 };

/* Scalars first, then the chain of coolant cells in flow order (hose out, core, hose back), then the core's
 * metal cells. The integrals at the end of the scalars feed nothing back. */
enum sp_state {
    SP_Y_METAL,      /* K, jacket metal */
    SP_Y_JACKET,     /* K, jacket coolant = engine outlet */
    SP_Y_TANK,       /* K, liquid and gas in the header tank */
    SP_Y_WAX,        /* K */
    SP_Y_FAN,        /* fan speed over rated */
    SP_Y_GAUGE,      /* K, what the driver sees, without offset */
    SP_Y_AIR,        /* mol of air in the tank */
    SP_Y_LOST,       /* m3 of liquid lost through the cap */
    SP_Y_HEAT_IN,    /* J, from the engine */
    SP_Y_HEAT_AIR,   /* J, to the air through the core */
    SP_Y_HEAT_SKIN,  /* J, to the air from engine, hoses, tank */
    SP_Y_FAN_ENERGY, /* J, electrical */
    SP_Y_DRAG_WORK,  /* J, internal drag times speed */
    SP_Y_HEAD_WORK,  /* int q V dt, J/m2 */
    SP_Y_CHAIN,      /* first of the coolant chain */
    SP_Y_FEEDBACK = SP_Y_HEAT_IN, /* states below this, and the chain and walls, feed the rates */
    SP_Y_MOST = SP_Y_CHAIN + 2 * SP_HOSE_CELLS + 2 * SP_CELLS_MAX
};

/* Places of a design with `cells` core cells. */
struct sp_layout {
    int cells;
    int out, core, back, wall; /* first index of each run */
    int count;
};

static inline struct sp_layout sp_layout_of(int cells)
{
    struct sp_layout l = {.cells = cells, .out = SP_Y_CHAIN};
    l.core = l.out + SP_HOSE_CELLS;
    l.back = l.core + cells;
    l.wall = l.back + SP_HOSE_CELLS;
    l.count = l.wall + cells;
    return l;
}

#endif
