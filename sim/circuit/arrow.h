/* The Jacobian's true structure, and the Newton systems solved in it. Internal.
 *
 * A core's fluid and metal cells are a band: a cell sees the one before it and its own wall; cores one after the
 * other, and the hoses when there is but one string of them, join it. Metal, jacket, tank, wax, fans, oils, and the
 * hoses where strings stand side by side, see and are seen by much of it, and two means a core (of its walls, of its
 * fluid) stand for what every cell does to the air path and the coolant split: together the border. Gauge, trapped
 * air, lost liquid and the integrals are driven by all and drive nothing but themselves: they follow by
 * substitution. A factorisation costs a few thousand operations where the dense one of the same matrix takes ten
 * times that.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_ARROW_H
#define SP_CIRCUIT_ARROW_H

#include <stdbool.h>

#include "circuit/state.h"

enum {
    SP_BORDER_STATES_MOST = SP_Y_FAN + 1 + 2 * SP_HOSE_CELLS + SP_FAN_KINDS - 1 + 2,
    SP_BORDER_MOST = SP_BORDER_STATES_MOST + 2 * SP_EXCHANGERS,
    SP_BAND_MOST = 2 * SP_HOSE_CELLS + 2 * SP_CELLS_MAX * SP_EXCHANGERS,
    SP_PASSIVE_MOST = SP_Y_CHAIN - SP_Y_GAUGE + 1
};

/* A matrix of this structure; all entries in one block so that it is copied and scaled as a vector. */
struct sp_arrow {
    struct sp_layout layout;
    int band;         /* rows in the band */
    int states;       /* states in the border */
    int border;       /* states and means */
    int passives;
    int state[SP_BAND_MOST];                  /* state index of each row of the band ... */
    int border_state[SP_BORDER_STATES_MOST];  /* ... of the border */
    int passive_state[SP_PASSIVE_MOST];       /* ... of what follows by substitution */
    int row_of[SP_EXCHANGERS];                /* band row of each core's first cell */
    int entries;
    double *entry; /* owned */
    double *diagonals;  /* band x 5: lower 3, 2, 1, own, upper 1 */
    double *columns;    /* band x border: what the border does to the band */
    double *rows;       /* states x band: what the band does to the border */
    double *corner;     /* states x border */
    double *passive;    /* passives x (border + band + passives) */
};

struct sp_arrow_factor {
    double diagonals[SP_BAND_MOST * 5];            /* of the band, L below, U above */
    double inverse[SP_BAND_MOST * SP_BORDER_MOST]; /* band^-1 columns */
    double corner[SP_BORDER_MOST * SP_BORDER_MOST]; /* Schur complement, factored */
    int pivot[SP_BORDER_MOST];
    double z[SP_BAND_MOST];                        /* room for a solve */
};

bool sp_arrow_open(struct sp_layout layout, struct sp_arrow *out);
void sp_arrow_close(struct sp_arrow *a);

/* Takes the Jacobian from columns, jac[j][i] = d f_i / d y_j with all means held, and the effect of the means,
 * mean[2 e][i] of the walls and mean[2 e + 1][i] of the fluid of core e. */
void sp_arrow_fill(struct sp_arrow *a, double *const *jac, double *const *mean);

/* a = scale a + I. */
void sp_arrow_scale_add(struct sp_arrow *a, double scale);

/* Factors; false when a pivot is nil. */
bool sp_arrow_factor(const struct sp_arrow *a, struct sp_arrow_factor *f);

/* Solves a x = b in the order of the state vector; x may be b. */
void sp_arrow_solve(const struct sp_arrow *a, struct sp_arrow_factor *f, const double *b, double *x);

#endif
