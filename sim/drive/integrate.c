/* CVODE behind a narrow door. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/integrate.h"

#include <cvode/cvode.h>
#include <math.h>
#include <nvector/nvector_serial.h>
#include <stdlib.h>
#include <string.h>
#include <sundials/sundials_linearsolver.h>
#include <sundials/sundials_matrix.h>

/* Long quiet soaks: longer steps would leave the ledger to the error control of each cell, which is blind to
 * their sum; so would Newton iterations that stop as early as they usually may (0.1 of the tolerance). */
static const double longest_step = 60.0; /* s */
static const double newton_share = 0.05;

struct sp_integrator {
    struct sp_problem problem;
    SUNContext context;
    void *cvode;
    N_Vector y, absolute, spare;
    SUNMatrix matrix;
    SUNLinearSolver linear;
    struct sp_integrator_work before; /* counts of restarts past */
    char trouble[200];
};

static int rates(realtype t, N_Vector y, N_Vector dydt, void *user)
{
    struct sp_integrator *i = user;
    return i->problem.rates(t, N_VGetArrayPointer(y), N_VGetArrayPointer(dydt), i->problem.context);
}

static int jacobian(realtype t, N_Vector y, N_Vector fy, SUNMatrix J, void *user, N_Vector a, N_Vector b, N_Vector c)
{
    (void)fy, (void)a, (void)b, (void)c;
    struct sp_integrator *i = user;
    return i->problem.jacobian(t, N_VGetArrayPointer(y), J->content, i->problem.context);
}

static int watch(realtype t, N_Vector y, realtype *g, void *user)
{
    struct sp_integrator *i = user;
    return i->problem.watch(t, N_VGetArrayPointer(y), g, i->problem.context);
}

static void listen(int code, const char *module, const char *function, char *message, void *user)
{
    (void)module, (void)function;
    struct sp_integrator *i = user;
    if (code < 0) snprintf(i->trouble, sizeof i->trouble, "%s", message);
}

/* ---- the arrow as SUNDIALS sees it ------------------------------------------------------------------- */

static SUNMatrix matrix_of(struct sp_layout layout, SUNContext context);

static SUNMatrix_ID matrix_id(SUNMatrix A)
{
    (void)A;
    return SUNMATRIX_CUSTOM;
}

static SUNMatrix matrix_clone(SUNMatrix A)
{
    return matrix_of(((struct sp_arrow *)A->content)->layout, A->sunctx);
}

static void matrix_destroy(SUNMatrix A)
{
    sp_arrow_close(A->content);
    free(A->content);
    A->content = NULL;
    SUNMatFreeEmpty(A);
}

static int matrix_zero(SUNMatrix A)
{
    struct sp_arrow *a = A->content;
    memset(a->entry, 0, (size_t)a->entries * sizeof *a->entry);
    return SUNMAT_SUCCESS;
}

static int matrix_copy(SUNMatrix A, SUNMatrix B)
{
    struct sp_arrow *a = A->content, *b = B->content;
    memcpy(b->entry, a->entry, (size_t)a->entries * sizeof *a->entry);
    return SUNMAT_SUCCESS;
}

static int matrix_scale_add(realtype c, SUNMatrix A)
{
    sp_arrow_scale_add(A->content, c);
    return SUNMAT_SUCCESS;
}

static SUNMatrix matrix_of(struct sp_layout layout, SUNContext context)
{
    SUNMatrix A = SUNMatNewEmpty(context);
    struct sp_arrow *a = malloc(sizeof *a);
    if (!A || !a || !sp_arrow_open(layout, a)) {
        free(a);
        if (A) SUNMatFreeEmpty(A);
        return NULL;
    }
    A->content = a;
    A->ops->getid = matrix_id;
    A->ops->clone = matrix_clone;
    A->ops->destroy = matrix_destroy;
    A->ops->zero = matrix_zero;
    A->ops->copy = matrix_copy;
    A->ops->scaleaddi = matrix_scale_add;
    return A;
}

static SUNLinearSolver_Type solver_type(SUNLinearSolver S)
{
    (void)S;
    return SUNLINEARSOLVER_DIRECT;
}

static int solver_setup(SUNLinearSolver S, SUNMatrix A)
{
    return sp_arrow_factor(A->content, S->content) ? SUNLS_SUCCESS : SUNLS_LUFACT_FAIL;
}

static int solver_solve(SUNLinearSolver S, SUNMatrix A, N_Vector x, N_Vector b, realtype tolerance)
{
    (void)tolerance;
    sp_arrow_solve(A->content, S->content, N_VGetArrayPointer(b), N_VGetArrayPointer(x));
    return SUNLS_SUCCESS;
}

static int solver_free(SUNLinearSolver S)
{
    free(S->content);
    S->content = NULL;
    SUNLinSolFreeEmpty(S);
    return SUNLS_SUCCESS;
}

static SUNLinearSolver solver_new(SUNContext context)
{
    SUNLinearSolver S = SUNLinSolNewEmpty(context);
    struct sp_arrow_factor *f = malloc(sizeof *f);
    if (!S || !f) {
        free(f);
        if (S) SUNLinSolFreeEmpty(S);
        return NULL;
    }
    S->content = f;
    S->ops->gettype = solver_type;
    S->ops->setup = solver_setup;
    S->ops->solve = solver_solve;
    S->ops->free = solver_free;
    return S;
}

/* ---- opening and stepping ------------------------------------------------------------------------------ */

static bool open_cvode(struct sp_integrator *i, double t, double relative)
{
    i->cvode = CVodeCreate(CV_BDF, i->context);
    return i->cvode && CVodeSetErrHandlerFn(i->cvode, listen, i) == CV_SUCCESS &&
           CVodeInit(i->cvode, rates, t, i->y) == CV_SUCCESS && CVodeSetUserData(i->cvode, i) == CV_SUCCESS &&
           CVodeSVtolerances(i->cvode, relative, i->absolute) == CV_SUCCESS &&
           (i->matrix = matrix_of(i->problem.layout, i->context)) && (i->linear = solver_new(i->context)) &&
           CVodeSetLinearSolver(i->cvode, i->linear, i->matrix) == CV_SUCCESS &&
           CVodeSetJacFn(i->cvode, jacobian) == CV_SUCCESS &&
           CVodeRootInit(i->cvode, i->problem.watches, watch) == CV_SUCCESS &&
           CVodeSetNoInactiveRootWarn(i->cvode) == CV_SUCCESS && CVodeSetMaxHnilWarns(i->cvode, -1) == CV_SUCCESS &&
           CVodeSetMaxNumSteps(i->cvode, -1) == CV_SUCCESS &&
           CVodeSetMaxStep(i->cvode, longest_step) == CV_SUCCESS &&
           CVodeSetNonlinConvCoef(i->cvode, newton_share) == CV_SUCCESS;
}

struct sp_integrator *sp_integrator_open(const struct sp_problem *p, double t, const double *y, double relative,
                                         const double *absolute)
{
    struct sp_integrator *i = calloc(1, sizeof *i);
    if (!i) return NULL;
    i->problem = *p;
    size_t bytes = (size_t)p->layout.count * sizeof *y;
    bool good = SUNContext_Create(NULL, &i->context) == 0;
    good = good && (i->y = N_VNew_Serial(p->layout.count, i->context)) && (i->absolute = N_VClone(i->y)) &&
           (i->spare = N_VClone(i->y));
    if (good) {
        memcpy(N_VGetArrayPointer(i->y), y, bytes);
        memcpy(N_VGetArrayPointer(i->absolute), absolute, bytes);
        good = open_cvode(i, t, relative);
    }
    if (good) return i;
    sp_integrator_close(i);
    return NULL;
}

void sp_integrator_close(struct sp_integrator *i)
{
    if (!i) return;
    if (i->cvode) CVodeFree(&i->cvode);
    if (i->linear) SUNLinSolFree(i->linear);
    if (i->matrix) SUNMatDestroy(i->matrix);
    if (i->y) N_VDestroy(i->y);
    if (i->absolute) N_VDestroy(i->absolute);
    if (i->spare) N_VDestroy(i->spare);
    if (i->context) SUNContext_Free(&i->context);
    free(i);
}

static struct sp_integrator_work counts(const struct sp_integrator *i)
{
    struct sp_integrator_work w = {0, 0, 0};
    long extra = 0;
    CVodeGetNumSteps(i->cvode, &w.steps);
    CVodeGetNumRhsEvals(i->cvode, &w.rates);
    CVodeGetNumLinRhsEvals(i->cvode, &extra);
    CVodeGetNumJacEvals(i->cvode, &w.jacobians);
    w.rates += extra;
    return w;
}

struct sp_integrator_work sp_integrator_work(const struct sp_integrator *i)
{
    struct sp_integrator_work w = counts(i);
    return (struct sp_integrator_work){w.steps + i->before.steps, w.rates + i->before.rates,
                                       w.jacobians + i->before.jacobians};
}

bool sp_integrator_restart(struct sp_integrator *i, double t)
{
    i->before = sp_integrator_work(i);
    return CVodeReInit(i->cvode, t, i->y) == CV_SUCCESS;
}

enum sp_advance sp_integrator_step(struct sp_integrator *i, double end, double *t, int *crossed)
{
    if (CVodeSetStopTime(i->cvode, end) != CV_SUCCESS) return SP_ADV_FAILED;
    switch (CVode(i->cvode, end, i->y, t, CV_ONE_STEP)) {
    case CV_SUCCESS: return *t >= end ? SP_ADV_END : SP_ADV_STEP;
    case CV_TSTOP_RETURN: return SP_ADV_END;
    case CV_ROOT_RETURN: return CVodeGetRootInfo(i->cvode, crossed) == CV_SUCCESS ? SP_ADV_CROSSED : SP_ADV_FAILED;
    default: return SP_ADV_FAILED;
    }
}

double *sp_integrator_state(struct sp_integrator *i)
{
    return N_VGetArrayPointer(i->y);
}

bool sp_integrator_look_back(struct sp_integrator *i, double t, int order, double *out)
{
    if (CVodeGetDky(i->cvode, t, order, i->spare) != CV_SUCCESS) return false;
    memcpy(out, N_VGetArrayPointer(i->spare), (size_t)i->problem.layout.count * sizeof *out);
    return true;
}

const char *sp_integrator_trouble(const struct sp_integrator *i)
{
    return i->trouble[0] ? i->trouble : "no reason given";
}
