/* Fuzzing the case reader.
 *
 * The first byte chooses the purpose and whether the text up to the first line break is a --set. No files
 * are read. Held against every row of the key tables: a design comes with no complaint, no design with one
 * or more; each number of a design is finite and in its declared range, or NAN where the key was not given
 * and has no default. What `show` writes of it is one JSON document. Run:
 *     fuzz_case tests/fuzz/corpus/case
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "paper/case.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);
size_t LLVMFuzzerCustomMutator(uint8_t *data, size_t size, size_t room, unsigned seed);
size_t LLVMFuzzerMutate(uint8_t *data, size_t size, size_t room);

static struct sp_units *units;

static void is_in_range(const struct sp_key *row, const char *range_text, enum sp_kind kind, double x)
{
    struct sp_range range;
    if (!sp_range_read(units, kind, range_text, &range)) abort();
    if (isfinite(x) && sp_range_holds(&range, x)) return;
    fprintf(stderr, "%s is %.17g\n", row->path, x);
    abort();
}

static void check_number(const struct sp_reader *r, const struct sp_key *row, const char *path,
                         const struct sp_key_spot *at)
{
    double x = sp_key_double(row, r->design, at);
    const struct sp_json *node = sp_case_node(r->tree, path);
    bool must = node || (row->fallback && !row->rule);
    if (row->or_none && node && node->type == SP_JSON_STRING && !strcmp(node->text, "none")) {
        if (!isnan(x)) abort();
        return;
    }
    if (!strcmp(row->path, "air.altitude") && sp_case_given(r, "air.pressure")) must = false;
    if (must || !isnan(x)) is_in_range(row, row->range, row->kind, x);
    if (row->whole && floor(x) != x) abort();
}

static void check_table(const struct sp_key *row, const void *at)
{
    struct sp_table t;
    memcpy(&t, at, sizeof t);
    for (size_t i = 0; i < t.rows * t.columns; ++i)
        if (row->columns)
            is_in_range(row, row->columns[i % t.columns].range, row->columns[i % t.columns].kind, t.cell[i]);
        else
            is_in_range(row, row->range, row->kind, t.cell[i]);
}

static void check_word(const struct sp_key *row, const void *at)
{
    unsigned word;
    bool known = false;
    if (row->keep != SP_KEEP_ENUM) return;
    memcpy(&word, at, sizeof word);
    for (const struct sp_word *w = row->words; w->text; ++w)
        known = known || w->value == word;
    if (!known && word) abort();
}

static void check_kept(const struct sp_key *row, const void *at)
{
    if (row->shape == SP_SHAPE_WORD)
        check_word(row, at);
    else if (row->shape == SP_SHAPE_TABLE || row->shape == SP_SHAPE_LIST || row->shape == SP_SHAPE_MATRIX)
        check_table(row, at);
}

static void check_row(const struct sp_reader *r, const struct sp_key *row, const struct sp_key_spot *at)
{
    char path[SP_PATH_MAX];
    if (sp_key_of_step(row))
        snprintf(path, sizeof path, "drive[%zu].%s", at->outer, row->path + strlen("drive[]."));
    else
        sp_case_path(r->tree, row->path, at, path, sizeof path);
    if (row->shape == SP_SHAPE_QUANTITY)
        check_number(r, row, path, at);
    else
        check_kept(row, sp_key_place(row, r->design, at));
}

static bool next_element(const struct sp_reader *r, const struct sp_key *row, struct sp_key_spot *at)
{
    return sp_key_of_step(row) ? ++at->outer < r->design->steps : sp_case_next(r->tree, row->path, at);
}

/* A changed design: its tree is gone, so a number may be NAN. It has the elements of the first. */
static void check_changed(const struct sp_reader *r, const struct sp_change *change)
{
    const struct sp_key *row;
    if (isnan(change->at) || !change->text || !change->to || change->to->change) abort();
    if (change->to->ducts != r->design->ducts) abort();
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        struct sp_key_spot at = {0};
        if (sp_key_of_step(row) || sp_key_of_change(row)) continue;
        do {
            double x = sp_key_double(row, change->to, &at);
            if (!isnan(x)) is_in_range(row, row->range, row->kind, x);
            check_kept(row, sp_key_place(row, change->to, &at));
        } while (sp_case_next(r->tree, row->path, &at));
    }
}

static void check_design(const struct sp_reader *r)
{
    const struct sp_key *row;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        struct sp_key_spot at = {0};
        if (sp_key_of_change(row) || (sp_key_of_step(row) && !r->design->steps)) continue;
        do
            check_row(r, row, &at);
        while (next_element(r, row, &at));
    }
    for (size_t i = 0; i < r->design->changes; ++i) {
        check_changed(r, &r->design->change[i]);
        if (i && r->design->change[i].at < r->design->change[i - 1].at) abort();
    }
    if (!isfinite(r->design->coolant.fluid.density[0]) || r->design->coolant.fluid.density[0] < 900.0)
        abort();
    if (r->purpose == SP_FOR_DRIVE && !r->design->steps) abort();
}

static void check_shown(struct sp_reader *r)
{
    struct sp_complaints none = {0};
    char *text = NULL;
    size_t size = 0;
    FILE *to = open_memstream(&text, &size);
    if (!to) abort();
    sp_case_show_all(r, to, true);
    fclose(to);
    struct sp_json *tree = sp_json_parse("shown", NULL, text, size, &none);
    if (!tree) {
        sp_complaints_print(&none, false, stderr);
        fprintf(stderr, "%s\n", text);
        abort();
    }
    sp_json_free(tree);
    free(text);
    to = open_memstream(&text, &size);
    if (!to) abort();
    sp_case_show_all(r, to, false);
    fclose(to);
    free(text);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    struct sp_complaints complaints = {0}, cautions = {0};
    if (!units) units = sp_units_open();
    if (!units || !size) return 0;
    struct sp_reader r = {.units = units,
                          .name = "case.json",
                          .no_files = true,
                          .complaints = &complaints,
                          .cautions = &cautions,
                          .purpose = data[0] & 1 ? SP_FOR_DRIVE : SP_FOR_DUCT};
    const char *text = (const char *)data + 1;
    size_t length = size - 1;
    const char *end = data[0] & 2 ? memchr(text, '\n', length) : NULL;
    char *set = NULL;
    if (end) {
        set = strndup(text, (size_t)(end - text));
        if (!set) return 0;
        length -= (size_t)(end - text) + 1;
        text = end + 1;
    }
    bool fine = sp_case_open(&r, text, length, &set, set ? 1 : 0);
    if (fine != (complaints.count + complaints.dropped == 0)) abort();
    if (fine) {
        check_design(&r);
        check_shown(&r);
    }
    sp_case_close(&r);
    sp_complaints_free(&complaints);
    sp_complaints_free(&cautions);
    free(set);
    return 0;
}

/* ---- mutation that mostly keeps the text a JSON text ------------------------------------------------ */

/* The n-th text in quotes, quotes included; false if there are fewer. */
static bool literal(const uint8_t *data, size_t size, unsigned n, size_t *from, size_t *to)
{
    for (size_t i = 0; i < size; ++i) {
        size_t start = i;
        if (data[i] != '"') continue;
        for (++i; i < size && data[i] != '"'; ++i)
            if (data[i] == '\\') ++i;
        if (i >= size) return false;
        if (n-- == 0) {
            *from = start;
            *to = i + 1;
            return true;
        }
    }
    return false;
}

static size_t splice(uint8_t *data, size_t size, size_t room, size_t from, size_t to, const void *text,
                     size_t length)
{
    if (size - (to - from) + length > room) return 0;
    memmove(data + from + length, data + to, size - to);
    memcpy(data + from, text, length);
    return size - (to - from) + length;
}

/* Another number before the same unit. */
static size_t renumber(uint8_t *data, size_t size, size_t room, size_t from, size_t to, unsigned pick)
{
    static const char *const numbers[] = {"0",     "-1",  "1e-9",  "1e-3", "0.1",    "0.9",   "1.1",
                                          "2",     "7",   "33",    "60",   "99",     "150",   "1000",
                                          "99999", "1e9", "1e300", "-40",  "273.15", "1e-300"};
    const char *text = numbers[pick % (sizeof numbers / sizeof *numbers)];
    size_t end = from;
    while (end < to && strchr("+-.0123456789", data[end]))
        ++end;
    return end == from ? 0 : splice(data, size, room, from, end, text, strlen(text));
}

/* One text in quotes gives way to another of the same file, or to one of these. */
size_t LLVMFuzzerCustomMutator(uint8_t *data, size_t size, size_t room, unsigned seed)
{
    static const char *const pool[] = {"null",
                                       "[]",
                                       "{}",
                                       "0",
                                       "-1",
                                       "1e300",
                                       "\"none\"",
                                       "\"0 m\"",
                                       "\"1e-300 m\"",
                                       "\"1e308 Pa\"",
                                       "\"3 m\"",
                                       "\"1e-9 m2\"",
                                       "\"10 m2\"",
                                       "\"0 Pa\"",
                                       "\"1 mm\"",
                                       "\"60 mm\"",
                                       "\"0 K\"",
                                       "\"100 l\"",
                                       "\"1e-9 l\"",
                                       "\"0 degC\"",
                                       "\"99 degC\"",
                                       "\"100 %\"",
                                       "\"0.1 %\"",
                                       "\"1 rpm\"",
                                       "\"30000 rpm\"",
                                       "\"3000 kW\"",
                                       "\"0 kW\"",
                                       "\"1e-9 kW\"",
                                       "\"1000 kW/K\"",
                                       "\"1e-9 W/K\"",
                                       "\"1e-9 m3/s\"",
                                       "\"100 m3/s\"",
                                       "[[\"0 m3/s\", \"1 Pa\"], [\"1 m3/s\", \"0 Pa\"]]",
                                       "true",
                                       "1",
                                       "2",
                                       "\"static\"",
                                       "\"water\"",
                                       "\"cores\"",
                                       "\"ducts\"",
                                       "\"fans\"",
                                       "\"exits\"",
                                       "\"core\"",
                                       "\"changes\"",
                                       "\"set\"",
                                       "\"add\"",
                                       "\"every\"",
                                       "\"times\"",
                                       "\"duct.core.blocked\"",
                                       "\"ducts[1].cores[0].blocked\"",
                                       "\"thermostat.opens\"",
                                       "\"limits.coolant\"",
                                       "\"5 K\"",
                                       "\"100 s\"",
                                       "\"dead\"",
                                       "\"table\""};
    size_t from, to, other, end;
    unsigned a = seed >> 4 & 0xff, b = seed >> 12 & 0xff;
    if ((seed & 3) == 0 || !literal(data, size, a, &from, &to)) return LLVMFuzzerMutate(data, size, room);
    if ((seed & 3) == 1 && literal(data, size, b, &other, &end) && end - other < 300) {
        uint8_t copy[300];
        memcpy(copy, data + other, end - other);
        return splice(data, size, room, from, to, copy, end - other);
    }
    if ((seed & 3) == 2) {
        size_t changed = renumber(data, size, room, from + 1, to, b);
        if (changed) return changed;
    }
    const char *text = pool[b % (sizeof pool / sizeof *pool)];
    return splice(data, size, room, from, to, text, strlen(text));
}
