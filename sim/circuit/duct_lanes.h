/* The section of a duct cut into lanes, and the network's branches. Internal; used while a duct is built.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_DUCT_LANES_H
#define SP_CIRCUIT_DUCT_LANES_H

#include "circuit/duct_solve.h"

/* Both 0 stand for the whole section. */
bool sp_span_is_whole(double from, double to);

/* Lanes, nodes, shrouds and section from the spans; complains of spans that leave a hole or overlap. */
bool sp_lanes_build(struct sp_duct *d, const struct sp_place *at, struct sp_complaints *complaints);

/* The branches between the nodes. */
bool sp_branches_build(struct sp_duct *d, const struct sp_place *at, struct sp_complaints *complaints);

/* Face [m2] of the i-th core of a lane that stands in it; of the cores next to the shroud of fan i. */
double sp_lane_face(const struct sp_duct *d, const struct sp_lane *l, int i);
double sp_shroud_face(const struct sp_duct *d, int fan);

#endif
