/* Giving a design back.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys.h"

#include <stdlib.h>
#include <string.h>

static void free_table(void *at)
{
    struct sp_table *t = at;
    free(t->cell);
}

static void free_text(const void *at)
{
    char *text;
    memcpy(&text, at, sizeof text);
    free(text);
}

/* Whatever a row keeps on the heap, at its place. */
static void free_row(const struct sp_key *row, void *place)
{
    if (row->shape == SP_SHAPE_TABLE || row->shape == SP_SHAPE_LIST || row->shape == SP_SHAPE_MATRIX)
        free_table(place);
    else if (row->shape == SP_SHAPE_TEXT && row->keep != SP_KEEP_NOTHING)
        free_text(place);
}

static void free_step(struct sp_step *step)
{
    for (const struct sp_key *row = sp_keys_drive; row->path; ++row)
        if (sp_key_of_step(row)) free_row(row, (char *)step + row->at);
    for (int c = 0; c < SP_COLUMNS; ++c) {
        free_text(&step->format.column[c].heading);
        free_text(&step->format.column[c].unit);
    }
}

/* In all elements that there is room for: those not used are empty. */
static void free_elements(const struct sp_key *row, struct sp_design *d)
{
    const struct sp_key *lists[SP_KEY_LISTS];
    size_t n = sp_key_lists(row->path, lists);
    for (size_t i = 0; i < (n > 0 ? lists[0]->most : 1); ++i)
        for (size_t k = 0; k < (n > 1 ? lists[1]->most : 1); ++k)
            free_row(row, sp_key_place(row, d, &(struct sp_key_spot){i, k}));
}

void sp_design_free(struct sp_design *d)
{
    const struct sp_key *row;
    if (!d) return;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i)
        if (!sp_key_of_step(row) && !sp_key_of_change(row)) free_elements(row, d);
    for (size_t i = 0; i < d->changes; ++i) {
        free(d->change[i].text);
        free(d->change[i].file);
        sp_design_free(d->change[i].to);
    }
    free(d->change);
    for (size_t i = 0; i < d->steps; ++i)
        free_step(&d->step[i]);
    free(d->step);
    free(d->file);
    free(d);
}
