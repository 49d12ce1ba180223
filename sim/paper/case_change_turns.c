/* When each change comes to pass: from the entries of `changes`, by time.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static void fault(struct sp_reader *r, const struct sp_json *at, size_t i, const char *key, const char *found,
                  const char *expected)
{
    char path[SP_PATH_MAX];
    snprintf(path, sizeof path, "changes[%zu]%s%s", i, *key ? "." : "", key);
    sp_case_fault_at(r, at, path, found, expected, NULL);
}

/* Reads the numbers of one entry; NAN where there is none. */
static struct sp_planned read_numbers(struct sp_reader *r, const struct sp_json *node, size_t i)
{
    struct sp_planned planned = {NAN, NAN, NAN};
    for (const struct sp_key *row = sp_keys_change; row->path; ++row) {
        const struct sp_json *value = sp_json_member(node, sp_key_name(row));
        char path[SP_PATH_MAX];
        if (row->shape != SP_SHAPE_QUANTITY || !value) continue;
        snprintf(path, sizeof path, "changes[%zu].%s", i, sp_key_name(row));
        sp_case_value(r, row, value, path, (char *)&planned + row->at);
    }
    return planned;
}

static void check_values(struct sp_reader *r, const struct sp_json *node, size_t i)
{
    static const char *const keys[] = {"set", "add"};
    size_t n = 0;
    for (size_t k = 0; k < 2; ++k) {
        const struct sp_json *values = sp_json_member(node, keys[k]);
        if (!values) continue;
        ++n;
        if (values->type != SP_JSON_OBJECT)
            fault(r, values, i, keys[k], NULL, "an object such as { \"duct.inlet.blocked\": \"40 %\" }");
        else if (!values->child)
            fault(r, values, i, keys[k], "nothing in it", "one value or more");
    }
    if (!n) fault(r, node, i, "", "neither set nor add", "one of them, or both");
}

static struct sp_planned read_entry(struct sp_reader *r, const struct sp_json *node, size_t i)
{
    struct sp_planned planned = read_numbers(r, node, i);
    const struct sp_json *every = sp_json_member(node, "every"), *times = sp_json_member(node, "times");
    if (!sp_json_member(node, "at")) fault(r, node, i, "at", "nothing", "a time such as \"12 min\"");
    if (every && !times) fault(r, node, i, "times", "nothing", "a whole number, for every is given");
    if (times && !every)
        fault(r, node, i, "every", "nothing", "a time such as \"100 s\", for times is given");
    check_values(r, node, i);
    return planned;
}

/* Those without a time, of a faulty entry, come last: their values are still looked at. */
static int by_time(const void *a, const void *b)
{
    const struct sp_turn *x = a, *y = b;
    double at = isnan(x->at) ? INFINITY : x->at, other = isnan(y->at) ? INFINITY : y->at;
    if (at != other) return at < other ? -1 : 1;
    return (x->order > y->order) - (x->order < y->order);
}

/* Adds the turns of one entry while there is room; how many there would be. */
static size_t add_turns(struct sp_turn *turn, size_t have, const struct sp_planned *planned,
                        const struct sp_json *node, size_t i)
{
    bool again = planned->every > 0.0 && planned->times > 1.0;
    size_t n = again ? (size_t)planned->times : 1;
    for (size_t k = 0; k < n && have + k < SP_CHANGES_MAX; ++k)
        turn[have + k] =
            (struct sp_turn){planned->at + (k ? (double)k * planned->every : 0.0), i, have + k, node};
    return n;
}

struct sp_turn *sp_case_turns(struct sp_reader *r, size_t *count)
{
    const struct sp_json *list = sp_json_member(r->tree, "changes");
    size_t n = 0, i = 0;
    *count = 0;
    if (!list || list->type != SP_JSON_ARRAY || !list->child) return NULL;
    struct sp_turn *turn = calloc(SP_CHANGES_MAX, sizeof *turn);
    if (!turn) r->no_memory = true;
    for (const struct sp_json *c = list->child; c && turn && i < SP_CHANGES_MAX; c = c->next, ++i) {
        if (c->type != SP_JSON_OBJECT) continue;
        struct sp_planned planned = read_entry(r, c, i);
        n += add_turns(turn, n, &planned, c, i);
    }
    if (n > SP_CHANGES_MAX) {
        char found[60];
        snprintf(found, sizeof found, "%zu changes in all", n);
        sp_case_fault_at(r, list, "changes", found, "at most 200, those of every and times counted", NULL);
        n = SP_CHANGES_MAX;
    }
    if (turn) qsort(turn, n, sizeof *turn, by_time);
    *count = n;
    return turn;
}
