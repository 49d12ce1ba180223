/* trace_columns.h - what each column of a trace may hold. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_TRACE_COLUMNS_H
#define SP_DRIVE_TRACE_COLUMNS_H

#include "swirlpot/trace.h"

/* Least and greatest possible value in SI; beyond them a reading is a fault, not a fast car. */
double sp_column_low(enum sp_column c);
double sp_column_high(enum sp_column c);

#endif
