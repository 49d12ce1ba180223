/* Complaints: faults of the input, each with its place.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/text.h"
#include "swirlpot/base.h"

#include <stdlib.h>
#include <string.h>

static bool copy_into(char **to, const char *text)
{
    size_t size;
    *to = NULL;
    if (!text) return true;
    size = strlen(text) + 1;
    *to = malloc(size);
    if (!*to) return false;
    memcpy(*to, text, size);
    return true;
}

static void free_texts(struct sp_complaint *c)
{
    free(c->file);
    free(c->path);
    free(c->named_by);
    free(c->found);
    free(c->expected);
    free(c->hint);
}

static bool make_room(struct sp_complaints *to)
{
    size_t room = to->room ? 2 * to->room : 8;
    struct sp_complaint *list;
    if (to->count < to->room) return true;
    list = realloc(to->list, room * sizeof *list);
    if (!list) return false;
    to->list = list;
    to->room = room;
    return true;
}

static bool fill(struct sp_complaint *c, const struct sp_place *at, const char *found, const char *expected,
                 const char *hint)
{
    bool fine = copy_into(&c->file, at->file);
    fine = copy_into(&c->path, at->path) && fine;
    fine = copy_into(&c->named_by, at->named_by) && fine;
    fine = copy_into(&c->found, found ? found : "nothing") && fine;
    fine = copy_into(&c->expected, expected ? expected : "something else") && fine;
    fine = copy_into(&c->hint, hint) && fine;
    c->line = at->line;
    return fine;
}

void sp_complain(struct sp_complaints *to, const struct sp_place *at, const char *found,
                 const char *expected, const char *hint)
{
    static const struct sp_place nowhere = {0};
    struct sp_complaint *c;
    if (!to) return;
    if (to->count >= SP_COMPLAINTS_MAX || !make_room(to)) {
        to->dropped++;
        return;
    }
    c = &to->list[to->count];
    if (fill(c, at ? at : &nowhere, found, expected, hint)) {
        to->count++;
    } else {
        free_texts(c);
        to->dropped++;
    }
}

/* The text with '?' for whatever could move the cursor, reorder the line or is no UTF-8. */
static void put(const char *text, FILE *to)
{
    const char *end = text + strlen(text);
    while (text < end) {
        long code;
        size_t n = sp_text_code(text, end, &code);
        if (n == 0) {
            fputc('?', to);
            n = 1;
        } else if (sp_text_unprintable(code)) {
            fputc('?', to);
        } else {
            fwrite(text, 1, n, to);
        }
        text += n;
    }
}

static bool there(const char *text)
{
    return text && *text;
}

static void print_one(const struct sp_complaint *c, bool caution, FILE *to)
{
    const char *between = ""; /* set before whatever part of the place comes next */
    fputs(caution ? "swirlpot: caution: " : "swirlpot: ", to);
    if (there(c->file)) {
        put(c->file, to);
        between = ", ";
    }
    if (c->line > 0) {
        fprintf(to, "%sline %ld", between, c->line);
        between = ", ";
    }
    if (there(c->path)) {
        fputs(between, to);
        put(c->path, to);
        between = ", ";
    }
    fputs(*between ? ": found " : "found ", to);
    put(c->found, to);
    fputs("; expected ", to);
    put(c->expected, to);
    if (there(c->hint)) {
        fputs("; ", to);
        put(c->hint, to);
    }
    if (there(c->named_by)) {
        fputs(" (", to);
        put(there(c->file) ? c->file : "it", to);
        fputs(" is named by ", to);
        put(c->named_by, to);
        fputc(')', to);
    }
    fputc('\n', to);
}

void sp_complaints_print(const struct sp_complaints *c, bool caution, FILE *to)
{
    if (!c || !to) return;
    for (size_t i = 0; i < c->count; i++) print_one(&c->list[i], caution, to);
    if (c->dropped)
        fprintf(to, "swirlpot: %sfound %zu more; expected none\n", caution ? "caution: " : "", c->dropped);
}

void sp_complaints_free(struct sp_complaints *c)
{
    if (!c) return;
    for (size_t i = 0; i < c->count; i++) free_texts(&c->list[i]);
    free(c->list);
    *c = (struct sp_complaints){0};
}

void sp_complaints_copy(const struct sp_complaints *from, struct sp_complaints *to)
{
    for (size_t i = 0; i < from->count; ++i) {
        const struct sp_complaint *c = &from->list[i];
        struct sp_place at = {c->file, c->line, c->path, c->named_by};
        sp_complain(to, &at, c->found, c->expected, c->hint);
    }
    to->dropped += from->dropped;
}
