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

/* All ducts of a design made ready, with each one's share of the heat. */
struct ducts {
    const struct sp_design *design;
    struct sp_duct *duct[SP_DUCTS];
    double share[SP_DUCTS]; /* of the heat, for one of equal ducts */
    size_t count;
};

static double copies_of(const struct sp_duct_design *d)
{
    return d->count > 1.0 ? d->count : 1.0;
}

/* Face [m2] of the cores that carry coolant. */
static double face_of(const struct sp_duct_design *d)
{
    double face = 0.0;
    for (size_t i = 0; i == 0 || i < d->cores; ++i)
        if (d->core[i].carries == SP_CARRIES_COOLANT) face += d->core[i].width * d->core[i].height;
    return face;
}

static bool build_ducts(const struct sp_design *d, struct question *q, const char *file, struct ducts *out)
{
    double all = 0.0;
    *out = (struct ducts){.design = d, .count = d->ducts ? d->ducts : 1};
    for (size_t i = 0; i < out->count; ++i) all += copies_of(&d->duct[i]) * face_of(&d->duct[i]);
    for (size_t i = 0; i < out->count; ++i) {
        char path[40] = "car.duct";
        struct sp_place at = {.file = file, .path = path};
        if (out->count > 1) snprintf(path, sizeof path, "car.ducts[%zu]", i);
        out->share[i] =
            all > 0.0 ? face_of(&d->duct[i]) / all : 1.0 / (double)out->count / copies_of(&d->duct[i]);
        out->duct[i] = sp_duct_build(&d->duct[i], &d->coolant.fluid, &at, &q->complaints);
        if (!out->duct[i]) return false;
    }
    return true;
}

static enum sp_status solve(const struct ducts *u, struct question *q, size_t speed, size_t duct,
                            struct sp_duct_point *point)
{
    char found[80];
    enum sp_status status = sp_duct_point_solve(u->duct[duct], &u->design->air, q->speed[speed],
                                                q->heat * u->share[duct], q->fan ? 1.0 : 0.0, point);
    point->duct = u->count > 1 ? (int)duct + 1 : 0;
    point->copies = copies_of(&u->design->duct[duct]);
    point->design = &u->design->duct[duct];
    if (status == SP_OK) {
        doubt(q, point);
        return SP_OK;
    }
    snprintf(found, sizeof found, "heat at nil flow, or more than the flow can carry, speed %.6g m/s",
             q->speed[speed]);
    if (status == SP_INPUT)
        complain(q, "--heat", found, "air that moves: a speed, or a fan that runs; or less heat");
    else
        complain(q, "--speed", "no flow that balances the pressures", "a duct that can be solved");
    return status;
}

static enum sp_status answer(const struct sp_arguments *a, const struct ducts *u, struct question *q)
{
    size_t points = q->speeds * u->count;
    enum sp_status status = SP_OK;
    struct sp_duct_point *point = calloc(points, sizeof *point);
    if (!point) {
        complain(q, "--speed", "too little memory", "memory for all speeds");
        return SP_INPUT;
    }
    for (size_t i = 0; status == SP_OK && i < points; ++i)
        status = solve(u, q, i / u->count, i % u->count, &point[i]);
    if (status == SP_OK && a->json) sp_duct_points_json(point, points, stdout);
    for (size_t i = 0; status == SP_OK && !a->json && i < points; ++i) {
        if (i) putchar('\n');
        sp_duct_point_text(&point[i], stdout);
    }
    free(point);
    return status;
}

static bool any_fan(const struct sp_design *d)
{
    bool any = false;
    for (size_t i = 0; i == 0 || i < d->ducts; ++i)
        for (size_t j = 0; j < SP_FANS; ++j) any = any || d->duct[i].fan[j].fitted;
    return any;
}

static enum sp_status ask(const struct sp_arguments *a, struct sp_units *u, struct question *q)
{
    enum sp_status status = SP_INPUT;
    struct ducts ducts = {.count = 0};
    bool good = read_question(u, a, q);
    struct sp_design *d =
        sp_case_read(u, a->operand, a->sets.list, a->sets.count, SP_FOR_DUCT, &q->complaints, &q->cautions);
    if (d && good && q->fan && !any_fan(d))
        complain(q, "--fan", "on, but the car has no fan", "car.duct.fan, or off");
    else if (d && good && build_ducts(d, q, a->operand, &ducts))
        status = answer(a, &ducts, q);
    for (size_t i = 0; i < ducts.count; ++i) sp_duct_free(ducts.duct[i]);
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
    "Several ducts are told one by one. `--heat` is shared among cores that carry\n"
    "coolant, by their faces. The case needs no more than `air` and `car.duct`.",
    run};
