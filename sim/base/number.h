/* Decimal numbers as they stand in texts. Internal.
 *
 * Grammar: optional sign, digits, optionally "." and digits, optionally "e" or "E", sign, digits.
 * No hexadecimal, no inf, no nan, no leading or trailing point, no blanks, whatever the locale.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_BASE_NUMBER_H
#define SP_BASE_NUMBER_H

/* Reads the longest such number at the front of [p, end) into *out, correctly rounded (the same bits as
 * strtod gives). Returns where it ends, or NULL when there is none or its value is past the largest
 * double; *out is untouched then. An "e" without digits behind it is not part of the number. */
const char *sp_number_parse(const char *p, const char *end, double *out);

#endif
