/* The plain duct: one core, one kind of fan, one exit, all over the whole section. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_DUCT_PLAIN_H
#define SP_CIRCUIT_DUCT_PLAIN_H

#include "circuit/duct_element.h"

/* As sp_duct_solve_from, of a duct that is plain. */
enum sp_status sp_plain_solve(const struct sp_duct *d, const struct sp_duct_inputs *in,
                              struct sp_guess *guess, struct sp_duct_state *out);

/* With given heat, from the flow without it. */
enum sp_status sp_plain_solve_heated(const struct sp_duct *d, const struct sp_duct_inputs *in, double cold,
                                     struct sp_duct_state *out);

void sp_plain_stations(const struct sp_duct *d, const struct sp_duct_inputs *in,
                       const struct sp_duct_state *state, struct sp_station s[SP_STATIONS],
                       struct sp_duct_losses *losses);

#endif
