/* unevenness.h - air that meets a core unevenly: how uneven, and what that costs in heat.
 *
 * Unevenness is the standard deviation of the face velocity over its mean. It is put as two halves of the
 * face at (1 + s) and (1 - s) times the mean, both crossed by every tube; the strips of a split face after
 * Ng, Johnson & Watkins, Proc. IMechE D 219 (2005) 1451. Pure functions. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_UNEVENNESS_H
#define SP_PART_UNEVENNESS_H

/* More than this the two halves cannot be: the slow one would stand. */
#define SP_UNEVEN_MOST 0.99

/* Unevenness of a core inclined by `angle` [rad] from square-on: .10 .12 .17 .27 .38 at 0 30 45 60 70 deg,
 * straight lines between and on. Common practice; no test known here separates it from the loss. */
double sp_uneven_by_angle(double angle);

/* Two of independent cause together: root of the sum of squares, at most SP_UNEVEN_MOST. */
double sp_uneven_joint(double a, double b);

/* Air-side conductance [W/K] that an evenly blown core would need to give what one of unevenness s > 0 gives.
 * `fast` and `slow` are the whole core's conductances at (1 + s) and (1 - s) times the mass flux, `rate` the
 * mean stream's m cp > 0 [W/K], `inside` the conductance [W/K] of the fluid inside: each half of the face
 * has its own half of that, and its own wall. */
double sp_uneven_conductance(double s, double fast, double slow, double rate, double inside);

/* Unevenness behind a stalled diffuser of area ratio AR that blows on `share` of a face of loss coefficient
 * K: the static pressure ahead of the core is one, the jet has the head AR^2 besides, so that
 * v_jet^2 = v_rest^2 + AR^2/K and share v_jet + (1 - share) v_rest = 1. Where even a standing rest would
 * leave the jet too slow for that, the jet takes all the air. Two-stream bound, derived. */
double sp_jet_unevenness(double area_ratio, double core_loss, double share);

#endif
