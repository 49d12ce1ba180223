/* Cases for the tests of the case reader, and what they are held against.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_TESTS_CASE_TEXT_H
#define SP_TESTS_CASE_TEXT_H

#include "check.h"
#include "swirlpot/paper.h"

#include <stdlib.h>
#include <string.h>

static struct sp_units *units;

/* ---- cases ----------------------------------------------------------------------------------------- */

#define AIR           "\"air\": {\"ambient\": \"33 degC\", \"altitude\": \"240 m\", \"humidity\": \"45 %\"}"
#define INLET         "\"inlet\": {\"area\": \"450 cm2\"}"
#define EXIT          "\"exit\": {\"area\": \"600 cm2\"}"
#define CORE_START    "\"core\": {\"width\": \"480 mm\", \"height\": \"340 mm\", \"depth\": \"42 mm\", "
#define DUCT_OF(core) "\"duct\": {" INLET ", " CORE_START core "}, " EXIT "}"
#define COEFFICIENT   "\"pressure_drop\": {\"coefficient\": 8}"
#define FINS                                                                                                 \
    "\"fins\": {\"pitch\": \"1.9 mm\", \"louvre_pitch\": \"1.4 mm\", \"louvre_angle\": \"23 deg\"}, "        \
    "\"tubes\": {\"pitch\": \"10 mm\", \"height\": \"2 mm\"}"
#define DUCT_CASE "{" AIR ", \"car\": {" DUCT_OF(COEFFICIENT) "}}"
#define CAR                                                                                                  \
    "{\"body\": {\"frontal_area\": \"1.6 m2\"},\n"                                                           \
    "\"engine\": {\"displacement\": \"2 l\", \"rated_power\": \"190 kW\", \"rated_speed\": \"7000 rpm\",\n"  \
    "\"heat\": {\"fraction\": 0.5}},\n"                                                                      \
    "\"pump\": {\"curve\": {\"shutoff\": \"120 kPa\", \"free_flow\": \"200 l/min\"}, \"speed\": \"6900 "     \
    "rpm\"},\n" DUCT_OF(FINS) "}"
#define REST                                                                                                 \
    ", \"drive\": [{\"idle\": \"5 min\"}, {\"trace\": \"a/b.csv\", \"repeat\": 3}, "                         \
    "{\"hold\": \"90 s\", \"speed\": \"60 km/h\", \"power\": \"12 kW\"}, {\"soak\": \"8 min\"}], "           \
    "\"limits\": {\"coolant\": \"110 degC\"}}"
#define DRIVE_CASE "{" AIR ", \"car\": " CAR REST

struct result {
    struct sp_design *design;
    struct sp_complaints complaints, cautions;
};

static inline struct result parse_set(const char *text, enum sp_purpose purpose, char *const *set,
                                      size_t sets)
{
    struct result r = {0};
    r.design = sp_case_parse(units, "dir/c.json", text, strlen(text), set, sets, purpose, &r.complaints,
                             &r.cautions);
    if ((r.design != NULL) != (r.complaints.count == 0)) fail_msg("design and complaints disagree");
    return r;
}

static inline void drop(struct result *r)
{
    sp_design_free(r->design);
    sp_complaints_free(&r->complaints);
    sp_complaints_free(&r->cautions);
}

static inline struct result must_set(const char *text, enum sp_purpose purpose, char *const *set, size_t sets)
{
    struct result r = parse_set(text, purpose, set, sets);
    if (!r.design) {
        sp_complaints_print(&r.complaints, false, stderr);
        fail();
    }
    return r;
}

static inline struct result must(const char *text, enum sp_purpose purpose)
{
    return must_set(text, purpose, NULL, 0);
}

static inline bool has(const struct sp_complaints *c, const char *file, long line, const char *path,
                       const char *found, const char *expected)
{
    for (size_t i = 0; i < c->count; ++i) {
        const struct sp_complaint *k = &c->list[i];
        if ((!file || !strcmp(k->file, file)) && (!line || k->line == line) &&
            (!path || (k->path && !strcmp(k->path, path))) && (!found || strstr(k->found, found)) &&
            (!expected || strstr(k->expected, expected)))
            return true;
    }
    return false;
}

#endif
