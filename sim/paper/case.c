/* Reading a case from end to end.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

static bool lacks_memory(struct sp_reader *r)
{
    struct sp_place at = {.file = r->name};
    sp_complain(r->complaints, &at, "too little memory", "memory enough for the case", NULL);
    return false;
}

static bool faulty(const struct sp_reader *r)
{
    return r->complaints->count || r->complaints->dropped;
}

bool sp_case_open(struct sp_reader *r, const char *text, size_t size, char *const *set, size_t sets)
{
    struct sp_place at = {.file = r->name};
    if (!r->units) {
        sp_complain(r->complaints, &at, "no unit data", "the data files of UDUNITS-2 in their place", NULL);
        return false;
    }
    if (!sp_case_load(r, text, size, set, sets)) return r->no_memory ? lacks_memory(r) : false;
    r->design = calloc(1, sizeof *r->design);
    if (!r->design || r->no_memory) return lacks_memory(r);
    sp_case_walk(r);
    sp_case_fill(r);
    sp_case_settle(r);
    sp_case_check(r);
    sp_case_check_drive(r);
    if (!faulty(r) && !r->no_car && !r->no_memory) sp_case_doubt(r);
    sp_case_changes(r);
    if (r->no_memory) return lacks_memory(r);
    return !faulty(r) && !r->no_car;
}

void sp_case_close(struct sp_reader *r)
{
    sp_json_free(r->tree);
    sp_design_free(r->design);
    free(r->turn);
    r->turn = NULL;
    r->tree = NULL;
    r->design = NULL;
}

/* Opens, and keeps the design only. Complaints already in the list are no fault of this case. */
static struct sp_design *read_all(struct sp_reader *r, const char *text, size_t size, char *const *set,
                                  size_t sets, struct sp_complaints *to)
{
    struct sp_complaints own = {0}, unused = {0};
    struct sp_design *design = NULL;
    r->complaints = &own;
    if (!r->cautions) r->cautions = &unused;
    if (sp_case_open(r, text, size, set, sets)) {
        design = r->design;
        r->design = NULL;
    }
    sp_case_close(r);
    for (size_t i = 0; i < own.count; ++i) {
        const struct sp_complaint *c = &own.list[i];
        struct sp_place at = {c->file, c->line, c->path, c->named_by};
        sp_complain(to, &at, c->found, c->expected, c->hint);
    }
    if (to) to->dropped += own.dropped;
    r->complaints = NULL;
    r->cautions = NULL;
    sp_complaints_free(&own);
    sp_complaints_free(&unused);
    return design;
}

struct sp_design *sp_case_read(struct sp_units *u, const char *file, char *const *set, size_t sets,
                               enum sp_purpose purpose, struct sp_complaints *complaints,
                               struct sp_complaints *cautions)
{
    struct sp_reader r = {.units = u, .name = file, .purpose = purpose, .cautions = cautions};
    return read_all(&r, NULL, 0, set, sets, complaints);
}

struct sp_design *sp_case_parse(struct sp_units *u, const char *name, const char *text, size_t size,
                                char *const *set, size_t sets, enum sp_purpose purpose,
                                struct sp_complaints *complaints, struct sp_complaints *cautions)
{
    struct sp_reader r = {.units = u, .name = name, .purpose = purpose, .cautions = cautions};
    return read_all(&r, text ? text : "", size, set, sets, complaints);
}
