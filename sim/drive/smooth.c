/* smooth.c - local quadratic least squares over uneven time.
 *
 * The sums of a window are kept about an anchor and slide with the row: rows that enter are added, rows
 * that leave are taken off. Once the row is a half-width from the anchor they are summed anew about the
 * row itself, so rounding cannot pile up and powers stay near 1.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/smooth.h"

#include <math.h>

/* Share of the scatter below which the quadratic term is not determined by the window: rows that sit in
 * two heaps, each narrower than some 1.5 % of the window, fix a straight line only. */
static const double no_curve = 1e-3;

enum { SMALL = 12 }; /* windows of so few rows are summed anew each time */

struct window {
    const double *t, *y;
    double half_width;
    size_t low, high;     /* rows low <= i < high are in the sums */
    double anchor, scale; /* x = (t - anchor) / scale */
    double x[5], xy[3];   /* sums of x^k and y x^k */
};

static void add(struct window *w, size_t i, double sign)
{
    double x = (w->t[i] - w->anchor) / w->scale, p = sign;
    for (int k = 0; k < 5; k++, p *= x) {
        w->x[k] += p;
        if (k < 3) w->xy[k] += p * w->y[i];
    }
}

static void sum_anew(struct window *w, size_t at, size_t low, size_t high)
{
    double left = w->t[at] - w->t[low], right = w->t[high - 1] - w->t[at];
    w->anchor = w->t[at];
    w->scale = fmax(w->half_width, fmax(left, right));
    w->low = low;
    w->high = high;
    for (int k = 0; k < 5; k++)
        w->x[k] = 0;
    for (int k = 0; k < 3; k++)
        w->xy[k] = 0;
    for (size_t i = low; i < high; i++)
        add(w, i, 1);
}

/* Brings the sums to rows low..high about row `at`. */
static void slide(struct window *w, size_t at, size_t low, size_t high)
{
    bool overlap = low >= w->low && high >= w->high && low < w->high;
    if (!overlap || high - low <= SMALL || w->t[at] - w->anchor > w->scale ||
        w->t[high - 1] - w->anchor > 3 * w->scale ||
        w->scale > 3 * fmax(w->half_width, w->t[high - 1] - w->t[low])) {
        sum_anew(w, at, low, high);
        return;
    }
    while (w->high < high)
        add(w, w->high++, 1);
    while (w->low < low)
        add(w, w->low++, -1);
}

/* The fit of the sums at time t, with `terms` (1 to 3) at most: value and slope. Solved with polynomials
 * orthogonal over the window (1, x - a, and the quadratic free of both), so that each term stands alone. */
static void fit(const struct window *w, double t, int terms, double *value, double *slope)
{
    double n = w->x[0], a = w->x[1] / n, x = (t - w->anchor) / w->scale - a;
    /* moments about the mean a */
    double m2 = w->x[2] - n * a * a;
    double m3 = w->x[3] - 3 * a * w->x[2] + 2 * n * a * a * a;
    double m4 = w->x[4] - 4 * a * w->x[3] + 6 * a * a * w->x[2] - 3 * n * a * a * a * a;
    double y0 = w->xy[0], y1 = w->xy[1] - a * y0, y2 = w->xy[2] - 2 * a * w->xy[1] + a * a * y0;
    *value = y0 / n;
    *slope = 0;
    if (terms < 2 || !(m2 > 0)) return;
    double b = y1 / m2;
    *value += b * x;
    *slope += b;
    /* q = x^2 - (m3/m2) x - m2/n */
    double skew = m3 / m2, q2 = m4 - m3 * skew - m2 * m2 / n;
    if (terms > 2 && q2 > no_curve * m2 * m2 / n) {
        double c = (y2 - skew * y1 - m2 / n * y0) / q2;
        *value += c * (x * x - skew * x - m2 / n);
        *slope += c * (2 * x - skew);
    }
    *slope /= w->scale;
}

/* Widens low..high within [from, to) to three rows and a span of half_width, nearest rows first. */
static void widen(const struct window *w, size_t at, size_t from, size_t to, size_t *low, size_t *high)
{
    const double *t = w->t;
    while ((*high - *low < 3 || t[*high - 1] - t[*low] < w->half_width) && (*low > from || *high < to)) {
        bool left = *low > from;
        if (left && *high < to) left = t[at] - t[*low - 1] <= t[*high] - t[at];
        if (left)
            --*low;
        else
            ++*high;
    }
}

/* One stretch without a jump: rows from <= i < to. */
static void smooth_stretch(struct window *w, size_t from, size_t to, double *smooth, double *slope)
{
    const double *t = w->t;
    double span = t[to - 1] - t[from], ignored;
    int terms = span >= w->half_width ? 3 : span >= 0.1 * w->half_width ? 2 : 1;
    size_t near_low = from, near_high = from;
    w->low = w->high = from; /* nothing summed yet */
    for (size_t i = from; i < to; i++) {
        while (t[i] - t[near_low] > w->half_width)
            near_low++;
        while (near_high < to && t[near_high] - t[i] <= w->half_width)
            near_high++;
        size_t low = near_low, high = near_high;
        widen(w, i, from, to, &low, &high);
        slide(w, i, low, high);
        fit(w, t[i], terms, &smooth[i], slope ? &slope[i] : &ignored);
    }
}

static bool fit_to_smooth(size_t n, const double *t, const double *y, double half_width)
{
    if (!(half_width > 0) || isinf(half_width)) return false;
    for (size_t i = 0; i < n; i++)
        if (!isfinite(t[i]) || !isfinite(y[i]) || (i > 0 && t[i] < t[i - 1])) return false;
    return true;
}

bool sp_smooth(size_t n, const double *t, const double *y, double half_width, double *smooth, double *slope)
{
    struct window w = {.t = t, .y = y, .half_width = half_width};
    if (!fit_to_smooth(n, t, y, half_width)) return false;
    for (size_t from = 0, to; from < n; from = to) {
        for (to = from + 1; to < n && t[to] > t[to - 1];)
            to++;
        smooth_stretch(&w, from, to, smooth, slope);
    }
    return true;
}
