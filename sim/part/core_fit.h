/* Conductances recovered from a maker's table of heat, through the cells' own relation. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_CORE_FIT_H
#define SP_PART_CORE_FIT_H

#include "swirlpot/part.h"

/* hA = scale (x / reference)^power on either side. */
struct sp_conductance_law { double scale, reference, power; };

struct sp_core_fit {
    struct sp_conductance_law air, coolant; /* over m/s of face velocity; over kg/s */
    double worst;                           /* largest relative error of heat at a table point */
};

/* Least squares on relative heat (gsl_multifit_nlinear). Each side's exponent is fitted where the table
 * has three or more values of its flow, and is 0.5 and 0.8 otherwise. A table with one coolant flow cannot
 * tell the sides apart: there the coolant side is taken as four times the air side at the middle point
 * (common practice: the air side holds about four fifths of the resistance). `cp` is the coolant's.
 * Returns false when the heat exceeds what the flows can carry or no fit is found. */
bool sp_core_fit(const struct sp_core *core, double face, int cells, double cp, struct sp_core_fit *out);

#endif
