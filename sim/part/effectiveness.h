/* effectiveness.h - effectiveness of a heat exchanger against NTU, and back.
 *
 * eps = Q / (Cmin ITD), ntu = UA / Cmin, cr = Cmin / Cmax; constant properties, uniform U.
 * Kays & London, Compact Heat Exchangers, 3rd ed. 1984, ch. 2; both streams unmixed: the exact series
 * of Mason (1955) for Nusselt's problem (1930); two rows: ESDU 86018.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_EFFECTIVENESS_H
#define SP_PART_EFFECTIVENESS_H

enum sp_arrangement {
    SP_CROSS_UNMIXED,        /* cross flow, both unmixed, exact */
    SP_CROSS_UNMIXED_APPROX, /* the usual closed form: -3.3 to +1.1 % off, worst at small NTU */
    SP_CROSS_MAX_MIXED,      /* cross flow, the stream of Cmax mixed */
    SP_CROSS_MIN_MIXED,      /* cross flow, the stream of Cmin mixed */
    SP_CROSS_BOTH_MIXED,     /* falls again at large NTU */
    SP_CROSS_TWO_ROWS,       /* tube stream (Cmax) in two rows unmixed between rows, air is Cmin */
    SP_COUNTERFLOW,
    SP_PARALLEL_FLOW
};

/* Largest NTU of SP_CROSS_UNMIXED; the others take any. */
#define SP_NTU_MAX 500.0

/* Effectiveness 0..1. NaN unless ntu is finite and >= 0 (SP_NTU_MAX and below for the exact series),
 * 0 <= cr <= 1 and the arrangement is known. */
double sp_effectiveness(enum sp_arrangement a, double ntu, double cr);

/* The NTU at which the effectiveness is eps, to 1e-12 of NTU as far as eps itself tells it. NaN where
 * there is none below SP_NTU_MAX, and for SP_CROSS_BOTH_MIXED, which has no unique one. */
double sp_ntu(enum sp_arrangement a, double eps, double cr);

#endif
