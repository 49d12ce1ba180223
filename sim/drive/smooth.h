/* smooth.h - a noisy channel over uneven time made smooth, with its slope. Internal.
 *
 * Local quadratic least squares in a window that slides with the row: the method of A. Savitzky and
 * M. J. E. Golay, Analytical Chemistry 36 (1964) 1627-1639, solved per window so that rows need not be
 * evenly spaced. Quadratics are reproduced exactly, their slope too; there is no shift in time.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_SMOOTH_H
#define SP_DRIVE_SMOOTH_H

#include <stdbool.h>
#include <stddef.h>

/* From y[n] over t[n] (rising; two equal times are a jump, over which nothing is smoothed) to smooth[n]
 * and slope[n] (per unit of t; may be NULL). The window holds the rows within half_width (> 0) of the
 * row; where those are fewer than three or span less than half_width, the nearest rows beyond are taken
 * until they do. At the ends the window is one-sided. Between two jumps closer than half_width a
 * straight line is laid, level if they are closer than a tenth of it. Cost: O(n) on the whole.
 * False, and nothing written: half_width is not above 0, or t falls, or a value is not finite. */
bool sp_smooth(size_t n, const double *t, const double *y, double half_width, double *smooth, double *slope);

#endif
