/* schedule_slope.c - acceleration and slope of the road from the rows of a trace.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"

void sp_schedule_acceleration(size_t rows, const double *time, const double *speed, double *acceleration)
{
    for (size_t i = 0; i < rows; i++) {
        size_t low = i > 0 && time[i - 1] < time[i] ? i - 1 : i;
        size_t high = i + 1 < rows && time[i] < time[i + 1] ? i + 1 : i;
        double h = time[high] - time[low];
        acceleration[i] = h > 0.0 ? (speed[high] - speed[low]) / h : 0.0;
    }
}

/* Altitude at distance x; `at` is a row at or before it and moves on with rising x. */
static double altitude_at(size_t rows, const double *distance, const double *altitude, double x, size_t *at)
{
    while (*at + 2 < rows && distance[*at + 1] < x)
        (*at)++;
    double h = distance[*at + 1] - distance[*at];
    double share = h > 0.0 ? (x - distance[*at]) / h : 0.0;
    if (share > 1.0) share = 1.0;
    return altitude[*at] + share * (altitude[*at + 1] - altitude[*at]);
}

void sp_schedule_slope(size_t rows, const double *distance, const double *altitude, double half,
                       double *slope)
{
    const double least = 1.0; /* m: below this there is no slope to speak of */
    size_t low = 0, high = 0;
    for (size_t i = 0; i < rows; i++) {
        double a = distance[i] - half, b = distance[i] + half;
        if (a < distance[0]) a = distance[0];
        if (b > distance[rows - 1]) b = distance[rows - 1];
        slope[i] = 0.0;
        if (rows < 2 || b - a < least) continue;
        double rise =
            altitude_at(rows, distance, altitude, b, &high) - altitude_at(rows, distance, altitude, a, &low);
        slope[i] = rise / (b - a);
    }
}
