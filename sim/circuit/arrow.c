/* Bordered band matrices. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/arrow.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { WIDTH = 5, OWN = 3, LOWER = 3 }; /* diagonals[row][OWN + (column - row)] */

/* ---- places ------------------------------------------------------------------------------------------ */

/* State index of row p of the band: hose out, then coolant and wall of each core cell in turn, hose back. */
static int state_of(const struct sp_layout *l, int p)
{
    if (p < SP_HOSE_CELLS) return l->out + p;
    int in_core = p - SP_HOSE_CELLS;
    if (in_core >= 2 * l->cells) return l->back + in_core - 2 * l->cells;
    return in_core % 2 ? l->wall + in_core / 2 : l->core + in_core / 2;
}

static int wall_row(int cell) { return SP_HOSE_CELLS + 2 * cell + 1; }
static int core_row(int cell) { return SP_HOSE_CELLS + 2 * cell; }

static int passive_width(const struct sp_arrow *a)
{
    return SP_BORDER + a->band + SP_PASSIVE;
}

bool sp_arrow_open(struct sp_layout layout, struct sp_arrow *out)
{
    int band = layout.count - SP_Y_CHAIN;
    *out = (struct sp_arrow){.layout = layout, .band = band};
    for (int p = 0; p < band; ++p) out->state[p] = state_of(&layout, p);
    int lengths[] = {band * WIDTH, band * SP_BORDER, SP_BORDER_STATES * band, SP_BORDER_STATES * SP_BORDER,
                     SP_PASSIVE * passive_width(out)};
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

static void fill_band(struct sp_arrow *a, double *const *jac, const double *wall, const double *core)
{
    for (int p = 0; p < a->band; ++p) {
        int row = a->state[p];
        for (int q = p - LOWER; q <= p + 1; ++q)
            a->diagonals[p * WIDTH + OWN + q - p] =
                q >= 0 && q < a->band ? jac[a->state[q]][row] : 0.0;
        double *c = a->columns + p * SP_BORDER;
        for (int j = 0; j < SP_BORDER_STATES; ++j) c[j] = jac[j][row];
        c[SP_BORDER_WALL] = wall[row];
        c[SP_BORDER_CORE] = core[row];
    }
}

void sp_arrow_fill(struct sp_arrow *a, double *const *jac, const double *wall, const double *core)
{
    fill_band(a, jac, wall, core);
    for (int i = 0; i < SP_BORDER_STATES; ++i) {
        for (int p = 0; p < a->band; ++p) a->rows[i * a->band + p] = jac[a->state[p]][i];
        double *c = a->corner + i * SP_BORDER;
        for (int j = 0; j < SP_BORDER_STATES; ++j) c[j] = jac[j][i];
        c[SP_BORDER_WALL] = wall[i];
        c[SP_BORDER_CORE] = core[i];
    }
    for (int i = 0; i < SP_PASSIVE; ++i) {
        int row = SP_BORDER_STATES + i;
        double *c = a->passive + i * passive_width(a);
        for (int j = 0; j < SP_BORDER_STATES; ++j) c[j] = jac[j][row];
        c[SP_BORDER_WALL] = wall[row];
        c[SP_BORDER_CORE] = core[row];
        for (int p = 0; p < a->band; ++p) c[SP_BORDER + p] = jac[a->state[p]][row];
        for (int j = 0; j < SP_PASSIVE; ++j) c[SP_BORDER + a->band + j] = jac[SP_BORDER_STATES + j][row];
    }
}

void sp_arrow_scale_add(struct sp_arrow *a, double scale)
{
    for (int i = 0; i < a->entries; ++i) a->entry[i] *= scale;
    for (int p = 0; p < a->band; ++p) a->diagonals[p * WIDTH + OWN] += 1.0;
    for (int i = 0; i < SP_BORDER_STATES; ++i) a->corner[i * SP_BORDER + i] += 1.0;
    for (int i = 0; i < SP_PASSIVE; ++i) a->passive[i * passive_width(a) + SP_BORDER + a->band + i] += 1.0;
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

static bool factor_corner(double *m, int *pivot)
{
    for (int k = 0; k < SP_BORDER; ++k) {
        int best = k;
        for (int i = k + 1; i < SP_BORDER; ++i)
            if (fabs(m[i * SP_BORDER + k]) > fabs(m[best * SP_BORDER + k])) best = i;
        pivot[k] = best;
        if (!(fabs(m[best * SP_BORDER + k]) > 0.0)) return false;
        for (int j = 0; best != k && j < SP_BORDER; ++j) {
            double swap = m[k * SP_BORDER + j];
            m[k * SP_BORDER + j] = m[best * SP_BORDER + j];
            m[best * SP_BORDER + j] = swap;
        }
        for (int i = k + 1; i < SP_BORDER; ++i) {
            double by = m[i * SP_BORDER + k] /= m[k * SP_BORDER + k];
            for (int j = k + 1; j < SP_BORDER; ++j) m[i * SP_BORDER + j] -= by * m[k * SP_BORDER + j];
        }
    }
    return true;
}

static void solve_corner(const double *m, const int *pivot, double *x)
{
    for (int k = 0; k < SP_BORDER; ++k) { /* rows were swapped whole, so all swaps come first */
        double swap = x[k];
        x[k] = x[pivot[k]];
        x[pivot[k]] = swap;
    }
    for (int i = 1; i < SP_BORDER; ++i)
        for (int j = 0; j < i; ++j) x[i] -= m[i * SP_BORDER + j] * x[j];
    for (int i = SP_BORDER - 1; i >= 0; --i) {
        for (int j = i + 1; j < SP_BORDER; ++j) x[i] -= m[i * SP_BORDER + j] * x[j];
        x[i] /= m[i * SP_BORDER + i];
    }
}

/* ---- the whole ------------------------------------------------------------------------------------------- */

/* rows * x for border row i, with x spaced by `step`; the two means are rows of equal weights. */
static double border_row(const struct sp_arrow *a, int i, const double *x, int step)
{
    double sum = 0.0;
    if (i < SP_BORDER_STATES) {
        const double *row = a->rows + i * a->band;
        for (int p = 0; p < a->band; ++p) sum += row[p] * x[p * step];
        return sum;
    }
    for (int c = 0; c < a->layout.cells; ++c) sum += x[(i == SP_BORDER_WALL ? wall_row(c) : core_row(c)) * step];
    return -sum / a->layout.cells; /* mean - sum/n = 0 */
}

bool sp_arrow_factor(const struct sp_arrow *a, struct sp_arrow_factor *f)
{
    int n = a->band;
    memcpy(f->diagonals, a->diagonals, (size_t)(n * WIDTH) * sizeof *f->diagonals);
    memcpy(f->inverse, a->columns, (size_t)(n * SP_BORDER) * sizeof *f->inverse);
    if (!factor_band(f->diagonals, n)) return false;
    for (int j = 0; j < SP_BORDER; ++j) {
        forward(f->diagonals, n, f->inverse + j, SP_BORDER);
        backward(f->diagonals, n, f->inverse + j, SP_BORDER);
    }
    for (int i = 0; i < SP_BORDER; ++i)
        for (int j = 0; j < SP_BORDER; ++j) {
            double own = i < SP_BORDER_STATES ? a->corner[i * SP_BORDER + j] : (i == j ? 1.0 : 0.0);
            f->corner[i * SP_BORDER + j] = own - border_row(a, i, f->inverse + j, SP_BORDER);
        }
    return factor_corner(f->corner, f->pivot);
}

/* Passive states: the trapped air and the lost liquid act on each other, the rest stand alone. */
static void solve_passive(const struct sp_arrow *a, const double *border, const double *z, const double *b, double *x)
{
    enum { AIR = SP_Y_AIR - SP_BORDER_STATES, LOST = SP_Y_LOST - SP_BORDER_STATES };
    double rest[SP_PASSIVE];
    for (int i = 0; i < SP_PASSIVE; ++i) {
        const double *row = a->passive + i * passive_width(a);
        rest[i] = b[SP_BORDER_STATES + i];
        for (int j = 0; j < SP_BORDER; ++j) rest[i] -= row[j] * border[j];
        for (int p = 0; p < a->band; ++p) rest[i] -= row[SP_BORDER + p] * z[p];
    }
    const double *air = a->passive + AIR * passive_width(a) + SP_BORDER + a->band;
    const double *lost = a->passive + LOST * passive_width(a) + SP_BORDER + a->band;
    double det = air[AIR] * lost[LOST] - air[LOST] * lost[AIR];
    for (int i = 0; i < SP_PASSIVE; ++i)
        x[SP_BORDER_STATES + i] = rest[i] / a->passive[i * passive_width(a) + SP_BORDER + a->band + i];
    x[SP_Y_AIR] = (rest[AIR] * lost[LOST] - rest[LOST] * air[LOST]) / det;
    x[SP_Y_LOST] = (rest[LOST] * air[AIR] - rest[AIR] * lost[AIR]) / det;
}

void sp_arrow_solve(const struct sp_arrow *a, struct sp_arrow_factor *f, const double *b, double *x)
{
    double border[SP_BORDER] = {0.0};
    for (int p = 0; p < a->band; ++p) f->z[p] = b[a->state[p]];
    forward(f->diagonals, a->band, f->z, 1);
    backward(f->diagonals, a->band, f->z, 1);
    for (int i = 0; i < SP_BORDER; ++i)
        border[i] = (i < SP_BORDER_STATES ? b[i] : 0.0) - border_row(a, i, f->z, 1);
    solve_corner(f->corner, f->pivot, border);
    for (int p = 0; p < a->band; ++p) {
        for (int j = 0; j < SP_BORDER; ++j) f->z[p] -= f->inverse[p * SP_BORDER + j] * border[j];
    }
    solve_passive(a, border, f->z, b, x); /* reads b before the rest of x is written */
    for (int j = 0; j < SP_BORDER_STATES; ++j) x[j] = border[j];
    for (int p = 0; p < a->band; ++p) x[a->state[p]] = f->z[p];
}
