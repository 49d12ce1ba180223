/* Charge air: what the compressor makes of it. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_CHARGE_H
#define SP_PART_CHARGE_H

#include "swirlpot/part.h"

#define SP_CHARGE_CP 1007.0 /* J/kgK, air at 300 to 400 K */

#endif
