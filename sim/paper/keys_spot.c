/* Which element of a list a row is read into, and where that lies in the design.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys.h"

#include <math.h>
#include <string.h>

static char *base_of(const struct sp_key *row, struct sp_design *d, const struct sp_key_spot *at)
{
    return sp_key_of_step(row) ? (char *)&d->step[at->outer] : (char *)d;
}

void *sp_key_place(const struct sp_key *row, struct sp_design *d, const struct sp_key_spot *at)
{
    const struct sp_key *lists[SP_KEY_LISTS];
    size_t n = sp_key_lists(row->path, lists), offset = row->at;
    if (n > 0) offset += lists[0]->stride * at->outer;
    if (n > 1) offset += lists[1]->stride * at->inner;
    return base_of(row, d, at) + offset;
}

size_t *sp_key_count_place(const struct sp_key *list, struct sp_design *d, const struct sp_key_spot *at)
{
    const struct sp_key *lists[SP_KEY_LISTS];
    size_t n = sp_key_lists(list->path, lists), offset = list->count_at;
    if (!offset) return NULL;
    if (n > 1) offset += lists[0]->stride * at->outer;
    return (size_t *)(void *)((char *)d + offset);
}

double sp_key_double(const struct sp_key *row, struct sp_design *d, const struct sp_key_spot *at)
{
    double value = NAN;
    int whole;
    if (row->shape != SP_SHAPE_QUANTITY) return value;
    if (row->keep == SP_KEEP_INT) {
        memcpy(&whole, sp_key_place(row, d, at), sizeof whole);
        return whole;
    }
    memcpy(&value, sp_key_place(row, d, at), sizeof value);
    return value;
}
