/* What changes during the drive: each change a whole design, read from the case's tree with all changes up to
 * then put into it. The drive itself is not read again: the changed designs have no steps.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* The reading of changed cars; `inner` has a tree of its own that is changed turn by turn. */
struct changing {
    struct sp_reader *outer, inner;
    struct sp_complaints faults, doubts; /* of one turn */
    size_t turn;
    FILE *text;
    bool written; /* something is in the text */
    struct sp_design *now;
};

/* ---- one value ------------------------------------------------------------------------------------- */

static bool remember(struct changing *c, const char *path, const char *source)
{
    struct sp_reader *r = &c->inner;
    size_t i = 0;
    while (i < r->places && strcmp(r->placed[i].path, path))
        ++i;
    if (i == r->places) {
        struct sp_placed *more = realloc(r->placed, (i + 1) * sizeof *more);
        if (!more) {
            r->no_memory = true;
            return false;
        }
        r->placed = more;
        ++r->places;
    }
    snprintf(r->placed[i].path, sizeof r->placed[i].path, "%s", path);
    snprintf(r->placed[i].source, sizeof r->placed[i].source, "%s", source);
    r->placed[i].turn = c->turn;
    return true;
}

/* The same key under two names, or in both set and add. */
static bool set_twice(struct changing *c, const struct sp_setting *s)
{
    for (size_t i = 0; i < c->inner.places; ++i) {
        const struct sp_placed *p = &c->inner.placed[i];
        if (p->turn != c->turn || strcmp(p->path, s->place)) continue;
        sp_complain(c->inner.complaints, &s->source, "the same key again", "each key once in a change", NULL);
        return true;
    }
    return false;
}

static void write_value(struct changing *c, const char *key, const struct sp_json *value)
{
    fprintf(c->text, "%s%s=", c->written ? ", " : "", key);
    sp_written_node(c->text, value, false, false);
    c->written = true;
}

/* Puts one member of `set` or `add` into the tree. */
static void take_value(struct changing *c, const struct sp_json *value, const char *source, bool add)
{
    struct sp_reader *r = &c->inner;
    struct sp_setting s = {.node = value};
    struct sp_place at = {value->file, value->line, source, value->named_by};
    struct sp_json *grown = NULL;
    if (!sp_setting_look_up(r, value->key, &at, &s) || !sp_setting_resolve(r, &s)) return;
    if (!sp_change_allowed(r, &s) || set_twice(c, &s)) return;
    if (add) {
        s.node = grown = sp_change_grown(r, &s, value, c->now, c->outer->complaints->count > 0);
        if (!grown) return;
    }
    if (sp_setting_apply(r, &s)) {
        remember(c, s.place, source);
        write_value(c, value->key, s.node);
    }
    sp_json_free(grown);
}

/* The same key written twice was said when the file was read. */
static bool doubled(const struct sp_json *values, const struct sp_json *value)
{
    const struct sp_json *v = values->child;
    while (v != value && strcmp(v->key, value->key)) v = v->next;
    return v != value;
}

static void take_values(struct changing *c, const struct sp_turn *turn, const char *group)
{
    const struct sp_json *values = sp_json_member(turn->node, group);
    if (!values || values->type != SP_JSON_OBJECT) return;
    for (const struct sp_json *v = values->child; v; v = v->next) {
        char source[SP_PATH_MAX];
        if (doubled(values, v)) continue;
        snprintf(source, sizeof source, "changes[%zu].%s.\"%.180s\"", turn->entry, group, v->key);
        take_value(c, v, source, !strcmp(group, "add"));
    }
}

/* ---- complaints ------------------------------------------------------------------------------------ */

static bool same_text(const char *a, const char *b)
{
    return a == b || (a && b && !strcmp(a, b));
}

static bool said(const struct sp_complaints *list, const struct sp_place *at, const char *found,
                 const char *expected)
{
    for (size_t i = 0; i < list->count; ++i) {
        const struct sp_complaint *c = &list->list[i];
        if (c->line == at->line && same_text(c->file, at->file) && same_text(c->path, at->path) &&
            same_text(c->found, found) && same_text(c->expected, expected))
            return true;
    }
    return false;
}

/* What follows from a change goes on while it holds: whichever change comes next, it is said once. */
static bool said_of_another(const struct sp_complaints *list, const char *found, const char *expected)
{
    for (size_t i = 0; i < list->count; ++i)
        if (same_text(list->list[i].found, found) && same_text(list->list[i].expected, expected)) return true;
    return false;
}

/* What was said of the case as it begins, or of an earlier turn, is not said again. What is no fault of a
 * value that was set follows from the change all the same, and is said of it. */
static void pass_on(const struct sp_complaints *from, const struct sp_turn *turn, struct sp_complaints *to)
{
    for (size_t i = 0; i < from->count; ++i) {
        const struct sp_complaint *c = &from->list[i];
        struct sp_place at = {c->file, c->line, c->path, c->named_by};
        char path[60], found[500];
        snprintf(found, sizeof found, "%s", c->found);
        if (said(to, &at, found, c->expected)) continue;
        if (c->path && strncmp(c->path, "changes[", 8)) {
            snprintf(path, sizeof path, "changes[%zu]", turn->entry);
            snprintf(found, sizeof found, "%.200s as %.250s", c->path, c->found);
            at = (struct sp_place){turn->node->file, turn->node->line, path, turn->node->named_by};
            if (said_of_another(to, found, c->expected)) continue;
        }
        if (!said(to, &at, found, c->expected)) sp_complain(to, &at, found, c->expected, c->hint);
    }
}

/* ---- one turn -------------------------------------------------------------------------------------- */

static void read_changed(struct changing *c)
{
    struct sp_reader *r = &c->inner;
    sp_case_walk(r);
    sp_case_fill(r);
    sp_case_settle(r);
    sp_case_check(r);
    sp_case_check_drive(r);
    bool fine = !c->faults.count && !c->outer->complaints->count && !r->no_memory;
    if (fine && sp_change_same_build(r, c->outer->design)) sp_case_doubt(r);
}

/* What is set, and the text of it; NULL without memory. */
static char *change_tree(struct changing *c, const struct sp_turn *turn)
{
    char *text = NULL;
    size_t size = 0;
    c->written = false;
    c->text = open_memstream(&text, &size);
    if (!c->text) return NULL;
    take_values(c, turn, "set");
    take_values(c, turn, "add");
    if (fclose(c->text) == 0) return text;
    free(text);
    return NULL;
}

static void take_turn(struct changing *c, const struct sp_turn *turn, struct sp_change *out)
{
    out->at = turn->at;
    out->entry = turn->entry;
    out->line = turn->node->line;
    out->file = strdup(turn->node->file ? turn->node->file : c->inner.name);
    if (!out->file) c->inner.no_memory = true;
    out->text = change_tree(c, turn);
    out->to = calloc(1, sizeof *out->to);
    c->inner.design = out->to;
    if (!out->text || !out->to)
        c->inner.no_memory = true;
    else
        read_changed(c);
    if (out->to) c->now = out->to;
    pass_on(&c->faults, turn, c->outer->complaints);
    pass_on(&c->doubts, turn, c->outer->cautions);
    sp_complaints_free(&c->faults);
    sp_complaints_free(&c->doubts);
    ++c->turn;
}

static bool begin(struct changing *c, struct sp_reader *r)
{
    c->inner.tree = sp_case_copy(r->tree);
    if (!c->inner.tree) return false;
    sp_json_drop(c->inner.tree, "drive");
    sp_json_drop(c->inner.tree, "changes");
    return true;
}

static void take_turns(struct sp_reader *r, size_t n)
{
    struct changing c = {.outer = r, .inner = *r, .now = r->design};
    c.inner.changed = true;
    c.inner.complaints = &c.faults;
    c.inner.cautions = &c.doubts;
    r->design->change = calloc(n, sizeof *r->design->change);
    if (!r->design->change || !begin(&c, r)) {
        r->no_memory = true;
        return;
    }
    for (size_t i = 0; i < n && !c.inner.no_memory && !r->complaints->dropped; ++i) {
        take_turn(&c, &r->turn[i], &r->design->change[i]);
        r->design->changes = i + 1;
    }
    if (c.inner.no_memory) r->no_memory = true;
    sp_json_free(c.inner.tree);
    free(c.inner.placed);
}

void sp_case_changes(struct sp_reader *r)
{
    size_t n;
    if (r->no_memory) return;
    r->turn = sp_case_turns(r, &n);
    if (r->turn && n && !r->no_car) take_turns(r, n);
}
