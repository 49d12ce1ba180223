/* swirlpot duct: the air path at given speeds. SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdlib.h>
#include <string.h>

#include "swirlpot/paper.h"
#include "swirlpot/result.h"
#include "verbs.h"

/* What is asked of the duct. */
struct question {
    double *speed; /* m/s */
    size_t speeds;
    double heat; /* W */
    bool fan;
    struct sp_complaints complaints, cautions;
};

static const struct sp_wanted wanted_speed = {"--speed", SP_K_SPEED, -40.0, 200.0,
                                              "-40 m/s to 200 m/s, as \"108 km/h\""};
static const struct sp_wanted wanted_heat = {"--heat", SP_K_POWER, 0.0, 1e7, "0 W to 10 MW, as \"60 kW\""};

static void complain(struct question *q, const char *option, const char *found, const char *expected)
{
    struct sp_place at = {.path = option};
    sp_complain(&q->complaints, &at, found, expected, NULL);
}

static bool read_question(struct sp_units *u, const struct sp_arguments *a, struct question *q)
{
    bool good = true;
    if (!a->speeds.count) {
        complain(q, "--speed", "none", "at least one speed, as --speed \"30 m/s\"");
        good = false;
    }
    q->speeds = a->speeds.count;
    q->speed = calloc(q->speeds + 1, sizeof *q->speed);
    if (!q->speed) {
        complain(q, "--speed", "too little memory", "memory for all speeds");
        return false;
    }
    for (size_t i = 0; i < q->speeds; ++i)
        good =
            sp_argument_quantity(u, &wanted_speed, a->speeds.list[i], &q->speed[i], &q->complaints) && good;
    if (a->heat) good = sp_argument_quantity(u, &wanted_heat, a->heat, &q->heat, &q->complaints) && good;
    q->fan = a->fan && !strcmp(a->fan, "on");
    if (!a->fan || q->fan || !strcmp(a->fan, "off")) return good;
    complain(q, "--fan", a->fan, "on or off");
    return false;
}

/* The density is taken as constant ahead of the core and again behind it, and the laws of cores are fitted to
 * air that is not much hotter. */
static void doubt(struct question *q, const struct sp_duct_point *p)
{
    const double most_ratio = 1.4, hottest = 473.15 /* K */;
    double ratio = p->state.temperature_ratio, out = p->in.temperature * ratio;
    char found[128];
    if (!(ratio > most_ratio || out > hottest)) return;
    struct sp_place at = {.path = "--heat"};
    snprintf(found, sizeof found,
             "air at %.4g degC behind the core at %.6g m/s, %.3g times as hot as before it", out - SP_ZERO_C,
             p->speed, ratio);
    sp_complain(&q->cautions, &at, found,
                "at most 200 degC and 1.4 times the absolute temperature: this is outside the model's range",
                NULL);
}

static enum sp_status solve_all(const struct sp_design *d, const struct sp_duct *duct, struct question *q,
                                struct sp_duct_point *point)
{
    for (size_t i = 0; i < q->speeds; ++i) {
        char found[80];
        enum sp_status status =
            sp_duct_point_solve(duct, &d->air, q->speed[i], q->heat, q->fan ? 1.0 : 0.0, &point[i]);
        if (status == SP_OK) {
            doubt(q, &point[i]);
            continue;
        }
        snprintf(found, sizeof found, "heat at nil flow, or more than the flow can carry, speed %.6g m/s", q->speed[i]);
        if (status == SP_INPUT)
            complain(q, "--heat", found, "air that moves: a speed, or a fan that runs; or less heat");
        else
            complain(q, "--speed", "no flow that balances the pressures", "a duct that can be solved");
        return status;
    }
    return SP_OK;
}

static enum sp_status answer(const struct sp_arguments *a, const struct sp_design *d,
                             const struct sp_duct *duct, struct question *q)
{
    struct sp_duct_point *point = calloc(q->speeds, sizeof *point);
    if (!point) {
        complain(q, "--speed", "too little memory", "memory for all speeds");
        return SP_INPUT;
    }
    enum sp_status status = solve_all(d, duct, q, point);
    if (status == SP_OK && a->json) sp_duct_points_json(point, q->speeds, stdout);
    for (size_t i = 0; status == SP_OK && !a->json && i < q->speeds; ++i) {
        if (i) putchar('\n');
        sp_duct_point_text(&point[i], stdout);
    }
    free(point);
    return status;
}

static enum sp_status ask(const struct sp_arguments *a, struct sp_units *u, struct question *q)
{
    enum sp_status status = SP_INPUT;
    struct sp_duct *duct = NULL;
    struct sp_place at = {.file = a->operand, .path = "car.duct"};
    bool good = read_question(u, a, q);
    struct sp_design *d =
        sp_case_read(u, a->operand, a->sets.list, a->sets.count, SP_FOR_DUCT, &q->complaints, &q->cautions);
    if (d && good && q->fan && !d->duct[0].fan[0].fitted)
        complain(q, "--fan", "on, but the car has no fan", "car.duct.fan, or off");
    else if (d && good)
        duct = sp_duct_build(&d->duct[0], &d->coolant.fluid, &at, &q->complaints);
    if (duct) status = answer(a, d, duct, q);
    sp_duct_free(duct);
    sp_design_free(d);
    return status;
}

static enum sp_status run(const struct sp_arguments *a)
{
    struct question q = {0};
    struct sp_units *u = sp_units_open();
    enum sp_status status = ask(a, u, &q);
    sp_units_close(u);
    free(q.speed);
    return sp_speak(status, &q.complaints, &q.cautions);
}

const struct sp_verb sp_verb_duct = {
    "duct",
    "CASE",
    "vqfsj",
    "tells what the air does in the duct at given speeds",
    "Solves the air path of the car for each speed: pressures at the stations from\n"
    "free stream to exit, where each pascal goes, mass flow, face velocity and drag.\n"
    "The case needs no more than `air` and `car.duct`.",
    run};
