/* A maker's table turned into conductances. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/core_fit.h"

#include <gsl/gsl_blas.h>
#include <gsl/gsl_multifit_nlinear.h>
#include <gsl/gsl_vector.h>
#include <math.h>

#include "part/cells.h"

enum { AIR, AIR_POWER, COOLANT, COOLANT_POWER, UNKNOWNS };

struct task {
    const struct sp_core *core;
    double face, cp, middle_v, middle_m;
    int cells;
    bool free[UNKNOWNS];
    double value[UNKNOWNS]; /* ln scale, exponent */
};

static void take(struct task *t, const gsl_vector *x)
{
    size_t k = 0;
    for (int i = 0; i < UNKNOWNS; ++i)
        if (t->free[i]) t->value[i] = gsl_vector_get(x, k++);
    if (!t->free[COOLANT]) t->value[COOLANT] = t->value[AIR] + log(4.0);
}

static double heat_of(const struct task *t, double v, double m)
{
    double air = exp(t->value[AIR] + t->value[AIR_POWER] * log(v / t->middle_v));
    double coolant = exp(t->value[COOLANT] + t->value[COOLANT_POWER] * log(m / t->middle_m));
    double air_rate = t->core->heat_at_density * v * t->face * SP_CP_DRY;
    return sp_cells_rejection(t->cells, coolant, m * t->cp, air, air_rate);
}

static int residuals(const gsl_vector *x, void *context, gsl_vector *f)
{
    struct task t = *(const struct task *)context;
    take(&t, x);
    const struct sp_core *c = t.core;
    for (size_t i = 0, k = 0; i < c->heat_velocity.rows; ++i)
        for (size_t j = 0; j < c->heat_flow.rows; ++j, ++k) {
            double given = c->heat_per_kelvin.cell[i * c->heat_flow.rows + j];
            gsl_vector_set(f, k, heat_of(&t, c->heat_velocity.cell[i], c->heat_flow.cell[j]) / given - 1.0);
        }
    return GSL_SUCCESS;
}

static double middle(const struct sp_table *t)
{
    return sqrt(t->cell[0] * t->cell[t->rows - 1]);
}

/* More heat than the smaller stream can carry is no table of a radiator. */
static bool possible(const struct task *t)
{
    const struct sp_core *c = t->core;
    for (size_t i = 0; i < c->heat_velocity.rows; ++i)
        for (size_t j = 0; j < c->heat_flow.rows; ++j) {
            double air = c->heat_at_density * c->heat_velocity.cell[i] * t->face * SP_CP_DRY;
            double coolant = c->heat_flow.cell[j] * t->cp;
            double given = c->heat_per_kelvin.cell[i * c->heat_flow.rows + j];
            if (!(given > 0.0 && given < 0.995 * fmin(air, coolant))) return false;
        }
    return true;
}

static struct task pose(const struct sp_core *core, double face, int cells, double cp, size_t *unknowns)
{
    struct task t = {.core = core, .face = face, .cp = cp, .cells = cells};
    t.middle_v = middle(&core->heat_velocity);
    t.middle_m = middle(&core->heat_flow);
    double largest = core->heat_per_kelvin.cell[core->heat_velocity.rows * core->heat_flow.rows - 1];
    t.value[AIR] = log(2.0 * largest);
    t.value[AIR_POWER] = 0.5;
    t.value[COOLANT] = log(8.0 * largest);
    t.value[COOLANT_POWER] = 0.8;
    t.free[AIR] = true;
    t.free[AIR_POWER] = core->heat_velocity.rows >= 3;
    t.free[COOLANT] = core->heat_flow.rows >= 2;
    t.free[COOLANT_POWER] = core->heat_flow.rows >= 3;
    *unknowns = 0;
    for (int i = 0; i < UNKNOWNS; ++i) *unknowns += t.free[i];
    return t;
}

static bool minimise(struct task *t, size_t points, size_t unknowns, double *worst)
{
    gsl_multifit_nlinear_parameters how = gsl_multifit_nlinear_default_parameters();
    gsl_multifit_nlinear_workspace *w =
        gsl_multifit_nlinear_alloc(gsl_multifit_nlinear_trust, &how, points, unknowns);
    gsl_vector *x = gsl_vector_alloc(unknowns);
    bool good = false;
    if (w && x) {
        size_t k = 0;
        for (int i = 0; i < UNKNOWNS; ++i)
            if (t->free[i]) gsl_vector_set(x, k++, t->value[i]);
        gsl_multifit_nlinear_fdf fdf = {.f = residuals, .n = points, .p = unknowns, .params = t};
        int info;
        good = gsl_multifit_nlinear_init(x, &fdf, w) == GSL_SUCCESS;
        if (good) gsl_multifit_nlinear_driver(200, 1e-12, 1e-12, 1e-12, NULL, NULL, &info, w);
        take(t, gsl_multifit_nlinear_position(w));
        *worst = 0.0;
        const gsl_vector *f = gsl_multifit_nlinear_residual(w);
        for (size_t i = 0; i < points; ++i) *worst = fmax(*worst, fabs(gsl_vector_get(f, i)));
        good = good && isfinite(*worst) && isfinite(gsl_blas_dnrm2(f));
    }
    if (x) gsl_vector_free(x);
    if (w) gsl_multifit_nlinear_free(w);
    return good;
}

bool sp_core_fit(const struct sp_core *core, double face, int cells, double cp, struct sp_core_fit *out)
{
    size_t unknowns, points = core->heat_velocity.rows * core->heat_flow.rows;
    struct task t = pose(core, face, cells, cp, &unknowns);
    if (!possible(&t)) return false;
    if (points < unknowns) return false;
    if (!minimise(&t, points, unknowns, &out->worst)) return false;
    out->air = (struct sp_conductance_law){exp(t.value[AIR]), t.middle_v, t.value[AIR_POWER]};
    out->coolant = (struct sp_conductance_law){exp(t.value[COOLANT]), t.middle_m, t.value[COOLANT_POWER]};
    return isfinite(out->air.scale) && isfinite(out->coolant.scale);
}
