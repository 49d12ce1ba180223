/* Bordered band matrices. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/arrow.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { WIDTH = 5, OWN = 3, LOWER = 3 }; /* diagonals[row][OWN + (column - row)] */

/* ---- places ------------------------------------------------------------------------------------------ */

static void add_rows(struct sp_arrow *a, int first, int count)
{
    for (int i = 0; i < count; ++i) a->state[a->band++] = first + i;
}

static void add_core(struct sp_arrow *a, int e)
{
    const struct sp_cells_at *c = &a->layout.exchanger[e];
    a->row_of[e] = a->band;
    for (int i = 0; i < c->cells; ++i) {
        a->state[a->band++] = c->fluid + i;
        a->state[a->band++] = c->wall + i;
    }
}

/* Hose out, the cores between the hoses, hose back; then the other cores. */
static void place_band(struct sp_arrow *a)
{
    const struct sp_layout *l = &a->layout;
    if (l->chained) add_rows(a, l->out, SP_HOSE_CELLS);
    for (int e = 0; e < l->chained; ++e) add_core(a, e);
    if (l->chained) add_rows(a, l->back, SP_HOSE_CELLS);
    for (int e = l->chained; e < l->exchangers; ++e) add_core(a, e);
}

static void place_border(struct sp_arrow *a)
{
    const struct sp_layout *l = &a->layout;
    for (int i = 0; i <= SP_Y_FAN; ++i) a->border_state[a->states++] = i;
    for (int f = 1; f < l->fans; ++f) a->border_state[a->states++] = l->fan[f];
    if (l->oil >= 0) a->border_state[a->states++] = l->oil;
    if (l->gearbox >= 0) a->border_state[a->states++] = l->gearbox;
    for (int i = 0; !l->chained && i < SP_HOSE_CELLS; ++i) {
        a->border_state[a->states++] = l->out + i;
        a->border_state[a->states++] = l->back + i;
    }
    a->border = a->states + 2 * l->exchangers;
    for (int i = SP_Y_GAUGE; i < SP_Y_CHAIN; ++i) a->passive_state[a->passives++] = i;
    if (l->battery >= 0) a->passive_state[a->passives++] = l->battery;
}

static int passive_width(const struct sp_arrow *a)
{
    return a->border + a->band + a->passives;
}

bool sp_arrow_open(struct sp_layout layout, struct sp_arrow *out)
{
    memset(out, 0, sizeof *out);
    out->layout = layout;
    place_band(out);
    place_border(out);
    int lengths[] = {out->band * WIDTH, out->band * out->border, out->states * out->band, out->states * out->border,
                     out->passives * passive_width(out)};
    double **part[] = {&out->diagonals, &out->columns, &out->rows, &out->corner, &out->passive};
    for (int i = 0; i < 5; ++i) out->entries += lengths[i];
    out->entry = calloc((size_t)out->entries, sizeof *out->entry);
    if (!out->entry) return false;
    double *at = out->entry;
    for (int i = 0; i < 5; ++i) {
        *part[i] = at;
        at += lengths[i];
    }
    return true;
}

void sp_arrow_close(struct sp_arrow *a)
{
    free(a->entry);
    memset(a, 0, sizeof *a);
}

/* ---- filling ------------------------------------------------------------------------------------------- */

/* One row of what the border does: its states, then the means. */
static void fill_border(const struct sp_arrow *a, int row, double *const *jac, double *const *mean, double *c)
{
    for (int j = 0; j < a->states; ++j) c[j] = jac[a->border_state[j]][row];
    for (int j = a->states; j < a->border; ++j) c[j] = mean[j - a->states][row];
}

static void fill_band(struct sp_arrow *a, double *const *jac, double *const *mean)
{
    for (int p = 0; p < a->band; ++p) {
        int row = a->state[p];
        for (int q = p - LOWER; q <= p + 1; ++q)
            a->diagonals[p * WIDTH + OWN + q - p] =
                q >= 0 && q < a->band ? jac[a->state[q]][row] : 0.0;
        fill_border(a, row, jac, mean, a->columns + p * a->border);
    }
}

void sp_arrow_fill(struct sp_arrow *a, double *const *jac, double *const *mean)
{
    fill_band(a, jac, mean);
    for (int i = 0; i < a->states; ++i) {
        int row = a->border_state[i];
        for (int p = 0; p < a->band; ++p) a->rows[i * a->band + p] = jac[a->state[p]][row];
        fill_border(a, row, jac, mean, a->corner + i * a->border);
    }
    for (int i = 0; i < a->passives; ++i) {
        int row = a->passive_state[i];
        double *c = a->passive + i * passive_width(a);
        fill_border(a, row, jac, mean, c);
        for (int p = 0; p < a->band; ++p) c[a->border + p] = jac[a->state[p]][row];
        for (int j = 0; j < a->passives; ++j) c[a->border + a->band + j] = jac[a->passive_state[j]][row];
    }
}

void sp_arrow_scale_add(struct sp_arrow *a, double scale)
{
    for (int i = 0; i < a->entries; ++i) a->entry[i] *= scale;
    for (int p = 0; p < a->band; ++p) a->diagonals[p * WIDTH + OWN] += 1.0;
    for (int i = 0; i < a->states; ++i) a->corner[i * a->border + i] += 1.0;
    for (int i = 0; i < a->passives; ++i) a->passive[i * passive_width(a) + a->border + a->band + i] += 1.0;
}

/* ---- band ------------------------------------------------------------------------------------------------ */

/* LU in place without pivoting: I - gamma J is dominated by its diagonal for every cell. */
static bool factor_band(double *d, int n)
{
    for (int p = 0; p < n; ++p) {
        double own = d[p * WIDTH + OWN];
        if (!(fabs(own) > 0.0)) return false;
        for (int q = p + 1; q <= p + LOWER && q < n; ++q) {
            double *lower = &d[q * WIDTH + OWN - (q - p)];
            *lower /= own;
            if (p + 1 < n) d[q * WIDTH + OWN - (q - p) + 1] -= *lower * d[p * WIDTH + OWN + 1];
        }
    }
    return true;
}

static void forward(const double *d, int n, double *x, int step)
{
    for (int p = 1; p < n; ++p)
        for (int q = p > LOWER ? p - LOWER : 0; q < p; ++q) x[p * step] -= d[p * WIDTH + OWN - (p - q)] * x[q * step];
}

static void backward(const double *d, int n, double *x, int step)
{
    for (int p = n - 1; p >= 0; --p) {
        if (p + 1 < n) x[p * step] -= d[p * WIDTH + OWN + 1] * x[(p + 1) * step];
        x[p * step] /= d[p * WIDTH + OWN];
    }
}

/* ---- corner ---------------------------------------------------------------------------------------------- */

static bool factor_corner(double *m, int n, int *pivot)
{
    for (int k = 0; k < n; ++k) {
        int best = k;
        for (int i = k + 1; i < n; ++i)
            if (fabs(m[i * n + k]) > fabs(m[best * n + k])) best = i;
        pivot[k] = best;
        if (!(fabs(m[best * n + k]) > 0.0)) return false;
        for (int j = 0; best != k && j < n; ++j) {
            double swap = m[k * n + j];
            m[k * n + j] = m[best * n + j];
            m[best * n + j] = swap;
        }
        for (int i = k + 1; i < n; ++i) {
            double by = m[i * n + k] /= m[k * n + k];
            for (int j = k + 1; j < n; ++j) m[i * n + j] -= by * m[k * n + j];
        }
    }
    return true;
}

static void solve_corner(const double *m, int n, const int *pivot, double *x)
{
    for (int k = 0; k < n; ++k) { /* rows were swapped whole, so all swaps come first */
        double swap = x[k];
        x[k] = x[pivot[k]];
        x[pivot[k]] = swap;
    }
    for (int i = 1; i < n; ++i)
        for (int j = 0; j < i; ++j) x[i] -= m[i * n + j] * x[j];
    for (int i = n - 1; i >= 0; --i) {
        for (int j = i + 1; j < n; ++j) x[i] -= m[i * n + j] * x[j];
        x[i] /= m[i * n + i];
    }
}

/* ---- the whole ------------------------------------------------------------------------------------------- */

/* rows * x for border row i, with x spaced by `step`; the means are rows of equal weights. */
static double border_row(const struct sp_arrow *a, int i, const double *x, int step)
{
    double sum = 0.0;
    if (i < a->states) {
        const double *row = a->rows + i * a->band;
        for (int p = 0; p < a->band; ++p) sum += row[p] * x[p * step];
        return sum;
    }
    int e = (i - a->states) / 2, cells = a->layout.exchanger[e].cells;
    int first = a->row_of[e] + ((i - a->states) % 2 ? 0 : 1); /* coolant cells stand before their walls */
    for (int c = 0; c < cells; ++c) sum += x[(first + 2 * c) * step];
    return -sum / cells; /* mean - sum/n = 0 */
}

bool sp_arrow_factor(const struct sp_arrow *a, struct sp_arrow_factor *f)
{
    int n = a->band, m = a->border;
    memcpy(f->diagonals, a->diagonals, (size_t)(n * WIDTH) * sizeof *f->diagonals);
    memcpy(f->inverse, a->columns, (size_t)(n * m) * sizeof *f->inverse);
    if (!factor_band(f->diagonals, n)) return false;
    for (int j = 0; j < m; ++j) {
        forward(f->diagonals, n, f->inverse + j, m);
        backward(f->diagonals, n, f->inverse + j, m);
    }
    for (int i = 0; i < m; ++i)
        for (int j = 0; j < m; ++j) {
            double own = i < a->states ? a->corner[i * m + j] : (i == j ? 1.0 : 0.0);
            f->corner[i * m + j] = own - border_row(a, i, f->inverse + j, m);
        }
    return factor_corner(f->corner, m, f->pivot);
}

/* Passive states: the trapped air and the lost liquid act on each other, the rest stand alone. */
static void solve_passive(const struct sp_arrow *a, const double *border, const double *z, const double *b, double *x)
{
    enum { AIR = SP_Y_AIR - SP_Y_GAUGE, LOST = SP_Y_LOST - SP_Y_GAUGE };
    double rest[SP_PASSIVE_MOST];
    for (int i = 0; i < a->passives; ++i) {
        const double *row = a->passive + i * passive_width(a);
        rest[i] = b[a->passive_state[i]];
        for (int j = 0; j < a->border; ++j) rest[i] -= row[j] * border[j];
        for (int p = 0; p < a->band; ++p) rest[i] -= row[a->border + p] * z[p];
    }
    const double *air = a->passive + AIR * passive_width(a) + a->border + a->band;
    const double *lost = a->passive + LOST * passive_width(a) + a->border + a->band;
    double det = air[AIR] * lost[LOST] - air[LOST] * lost[AIR];
    for (int i = 0; i < a->passives; ++i)
        x[a->passive_state[i]] = rest[i] / a->passive[i * passive_width(a) + a->border + a->band + i];
    x[SP_Y_AIR] = (rest[AIR] * lost[LOST] - rest[LOST] * air[LOST]) / det;
    x[SP_Y_LOST] = (rest[LOST] * air[AIR] - rest[AIR] * lost[AIR]) / det;
}

void sp_arrow_solve(const struct sp_arrow *a, struct sp_arrow_factor *f, const double *b, double *x)
{
    double border[SP_BORDER_MOST] = {0.0};
    for (int p = 0; p < a->band; ++p) f->z[p] = b[a->state[p]];
    forward(f->diagonals, a->band, f->z, 1);
    backward(f->diagonals, a->band, f->z, 1);
    for (int i = 0; i < a->border; ++i)
        border[i] = (i < a->states ? b[a->border_state[i]] : 0.0) - border_row(a, i, f->z, 1);
    solve_corner(f->corner, a->border, f->pivot, border);
    for (int p = 0; p < a->band; ++p) {
        for (int j = 0; j < a->border; ++j) f->z[p] -= f->inverse[p * a->border + j] * border[j];
    }
    solve_passive(a, border, f->z, b, x); /* reads b before the rest of x is written */
    for (int j = 0; j < a->states; ++j) x[a->border_state[j]] = border[j];
    for (int p = 0; p < a->band; ++p) x[a->state[p]] = f->z[p];
}
