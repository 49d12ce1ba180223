/* The version of the library.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/base.h"

#ifndef SP_VERSION
#define SP_VERSION "0.1.0"
#endif

const char *sp_version(void)
{
    return SP_VERSION;
}
