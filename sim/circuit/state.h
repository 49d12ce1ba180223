/* The state vector of a drive: one place for what stands where. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_STATE_H
#define SP_CIRCUIT_STATE_H

#include <stdbool.h>
#include <stddef.h>

enum {
    SP_HOSE_CELLS = 3,
    SP_CELLS_MAX = 50,
    SP_EXCHANGERS = 8, /* cores with a fluid of their own, of all ducts together, at most */
    SP_FAN_KINDS = 6   /* kinds of fan in all ducts together, at most */
};

/* Scalars first, then the hose out, the first core's coolant cells, the hose back and that core's metal cells;
 * then fluid and metal cells of further cores, then what else is fitted. The integrals at the end of the scalars
 * feed nothing back. */
enum sp_state {
    SP_Y_METAL,      /* K, jacket metal */
    SP_Y_JACKET,     /* K, jacket coolant = engine outlet */
    SP_Y_TANK,       /* K, liquid and gas in the header tank */
    SP_Y_WAX,        /* K */
    SP_Y_FAN,        /* speed over rated of the first kind of fan */
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
    SP_Y_MOST = SP_Y_CHAIN + 2 * SP_HOSE_CELLS + 2 * SP_CELLS_MAX * SP_EXCHANGERS + SP_FAN_KINDS + 3
};

/* Cells of one core: where its fluid's and its metal's stand. */
struct sp_cells_at { int cells, fluid, wall; };

/* Places of a design. Cores that carry coolant come first, string by string. */
struct sp_layout {
    int cells, out, core, back, wall; /* hoses, and the first core */
    int exchangers;
    struct sp_cells_at exchanger[SP_EXCHANGERS];
    int chained; /* so many cores stand one after the other between the hoses; 0: several strings side by side */
    int fans, fan[SP_FAN_KINDS];
    int oil, gearbox; /* K; -1: not there */
    int battery;      /* J drawn while the engine is off; -1: not watched */
    int count;
};

/* What a layout is made for. */
struct sp_layout_wish {
    int exchangers, cells[SP_EXCHANGERS], chained, fans;
    bool oil, gearbox, battery;
};

static inline struct sp_layout sp_layout_make(const struct sp_layout_wish *w)
{
    struct sp_layout l = {.cells = w->cells[0], .out = SP_Y_CHAIN, .exchangers = w->exchangers, .chained = w->chained,
                          .fans = w->fans > 1 ? w->fans : 1, .oil = -1, .gearbox = -1, .battery = -1};
    l.core = l.out + SP_HOSE_CELLS;
    l.back = l.core + l.cells;
    l.wall = l.back + SP_HOSE_CELLS;
    l.count = l.wall + l.cells;
    l.exchanger[0] = (struct sp_cells_at){l.cells, l.core, l.wall};
    for (int e = 1; e < w->exchangers; ++e) {
        l.exchanger[e] = (struct sp_cells_at){w->cells[e], l.count, l.count + w->cells[e]};
        l.count += 2 * w->cells[e];
    }
    l.fan[0] = SP_Y_FAN;
    for (int f = 1; f < l.fans; ++f) l.fan[f] = l.count++;
    if (w->oil) l.oil = l.count++;
    if (w->gearbox) l.gearbox = l.count++;
    if (w->battery) l.battery = l.count++;
    return l;
}

/* Places of a plain design: one core with so many cells. */
static inline struct sp_layout sp_layout_of(int cells)
{
    struct sp_layout_wish w = {.exchangers = 1, .cells = {cells}, .chained = 1, .fans = 1};
    return sp_layout_make(&w);
}

/* Is a state a temperature? */
static inline bool sp_layout_kelvin(const struct sp_layout *l, int i)
{
    for (int f = 1; f < l->fans; ++f)
        if (i == l->fan[f]) return false;
    return i <= SP_Y_WAX || i == SP_Y_GAUGE || (i >= SP_Y_CHAIN && i != l->battery);
}

#endif
