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

/* Whatever a row keeps on the heap; `base` is the design or one of its steps. */
static void free_row(const struct sp_key *row, char *base)
{
    if (row->shape == SP_SHAPE_TABLE || row->shape == SP_SHAPE_LIST || row->shape == SP_SHAPE_MATRIX)
        free_table(base + row->at);
    else if (row->shape == SP_SHAPE_TEXT && row->keep != SP_KEEP_NOTHING)
        free_text(base + row->at);
}

static void free_step(struct sp_step *step)
{
    for (const struct sp_key *row = sp_keys_drive; row->path; ++row)
        if (sp_key_of_step(row)) free_row(row, (char *)step);
    for (int c = 0; c < SP_COLUMNS; ++c) {
        free_text(&step->format.column[c].heading);
        free_text(&step->format.column[c].unit);
    }
}

void sp_design_free(struct sp_design *d)
{
    const struct sp_key *row;
    if (!d) return;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i)
        if (!sp_key_of_step(row)) free_row(row, (char *)d);
    for (size_t i = 0; i < d->steps; ++i)
        free_step(&d->step[i]);
    free(d->step);
    free(d->file);
    free(d);
}
