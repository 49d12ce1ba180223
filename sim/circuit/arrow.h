/* The Jacobian's true structure, and the Newton systems solved in it. Internal.
 *
 * The coolant chain with the core's metal is a band: a cell sees the one before it and its own wall. Metal,
 * jacket, tank, wax and fan see and are seen by much of it, and two means (of the core's walls, of its
 * coolant) stand for what every cell does to the air path and the coolant split: together a border of
 * seven. Gauge, trapped air, lost liquid and the integrals are driven by all and drive nothing but
 * themselves: they follow by substitution. A factorisation costs a few thousand operations where the dense
 * one of the same matrix takes ten times that.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_ARROW_H
#define SP_CIRCUIT_ARROW_H

#include <stdbool.h>

#include "circuit/state.h"

enum {
    SP_BORDER_STATES = SP_Y_FAN + 1, /* metal, jacket, tank, wax, fan: the first states */
    SP_BORDER = SP_BORDER_STATES + 2,
    SP_BORDER_WALL = SP_BORDER_STATES, SP_BORDER_CORE, /* the two means */
    SP_BAND_MOST = 2 * SP_HOSE_CELLS + 2 * SP_CELLS_MAX,
    SP_PASSIVE = SP_Y_CHAIN - SP_BORDER_STATES /* gauge, air, lost, integrals */
};

/* A matrix of this structure; all entries in one block so that it is copied and scaled as a vector. */
struct sp_arrow {
    struct sp_layout layout;
    int band; /* rows in the band: chain and walls */
    int state[SP_BAND_MOST]; /* state index of each row of the band */
    int entries;
    double *entry; /* owned */
    double *diagonals;  /* band x 5: lower 3, 2, 1, own, upper 1 */
    double *columns;    /* band x SP_BORDER: what the border does to the band */
    double *rows;       /* SP_BORDER_STATES x band: what the band does to the border */
    double *corner;     /* SP_BORDER_STATES x SP_BORDER */
    double *passive;    /* SP_PASSIVE x (SP_BORDER + band + SP_PASSIVE) */
};

struct sp_arrow_factor {
    double diagonals[SP_BAND_MOST * 5];   /* of the band, L below, U above */
    double inverse[SP_BAND_MOST * SP_BORDER]; /* band^-1 columns */
    double corner[SP_BORDER * SP_BORDER]; /* Schur complement, factored */
    int pivot[SP_BORDER];
    double z[SP_BAND_MOST];               /* room for a solve */
};

bool sp_arrow_open(struct sp_layout layout, struct sp_arrow *out);
void sp_arrow_close(struct sp_arrow *a);

/* Takes the Jacobian from columns, jac[j][i] = d f_i / d y_j with the two means held, and the effect of
 * the means, wall[i] and core[i]. */
void sp_arrow_fill(struct sp_arrow *a, double *const *jac, const double *wall, const double *core);

/* a = scale a + I. */
void sp_arrow_scale_add(struct sp_arrow *a, double scale);

/* Factors; false when a pivot is nil. */
bool sp_arrow_factor(const struct sp_arrow *a, struct sp_arrow_factor *f);

/* Solves a x = b in the order of the state vector; x may be b. */
void sp_arrow_solve(const struct sp_arrow *a, struct sp_arrow_factor *f, const double *b, double *x);

#endif
