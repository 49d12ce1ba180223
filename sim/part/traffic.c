/* A car ahead. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/traffic.h"

#include <math.h>

static const struct { double distance, wake, warming; } knot[] = {
    {5.0, 0.50, 6.0}, {10.0, 0.60, 4.0}, {20.0, 0.75, 2.5}, {40.0, 0.90, 1.5}, {80.0, 1.0, 0.0}};
enum { KNOTS = sizeof knot / sizeof knot[0] };
static const double walking = 3.0; /* m/s */

static double between(double a, double b, double share)
{
    return a + (b - a) * share;
}

struct sp_traffic sp_traffic_behind(double distance)
{
    if (!(distance > 0.0) || distance >= knot[KNOTS - 1].distance) return (struct sp_traffic){1.0, 0.0};
    int i = 0;
    while (i + 2 < KNOTS && distance >= knot[i + 1].distance) ++i;
    double share = log(distance / knot[i].distance) / log(knot[i + 1].distance / knot[i].distance);
    share = fmax(share, 0.0);
    return (struct sp_traffic){between(knot[i].wake, knot[i + 1].wake, share),
                               between(knot[i].warming, knot[i + 1].warming, share)};
}

double sp_traffic_warming(double wake)
{
    if (!(wake < 1.0)) return 0.0;
    int i = 0;
    while (i + 2 < KNOTS && wake >= knot[i + 1].wake) ++i;
    double share = (wake - knot[i].wake) / (knot[i + 1].wake - knot[i].wake);
    return between(knot[i].warming, knot[i + 1].warming, fmax(share, 0.0));
}

double sp_traffic_felt(double speed)
{
    return fmin(fmax(speed / walking, 0.0), 1.0);
}
