/* The key tables against themselves and against the page made from them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "paper/keys.h"
#include "check.h"

#include <stdlib.h>
#include <string.h>

static struct sp_units *units;

static int open_units(void **state)
{
    (void)state;
    units = sp_units_open();
    return units ? 0 : 1;
}

static int close_units(void **state)
{
    (void)state;
    sp_units_close(units);
    return 0;
}

#define EACH_ROW(row)                                                                                        \
    const struct sp_key *row;                                                                                \
    for (size_t i_ = 0; (row = sp_key_row(i_)) != NULL; ++i_)

static void paths_are_unique_and_have_a_group(void **state)
{
    (void)state;
    EACH_ROW(row)
    {
        char group[200] = "";
        const char *dot = strrchr(row->path, '.');
        assert_ptr_equal(sp_key_find(row->path), row); /* the first of that path is this one */
        if (!dot) continue;
        snprintf(group, sizeof group, "%.*s", (int)(dot - row->path), row->path);
        const struct sp_key *parent = sp_key_find(group);
        if (!parent || (parent->shape != SP_SHAPE_GROUP && !parent->or_object))
            fail_msg("%s has no group", row->path);
        assert_true(sp_key_child(row, group));
        assert_false(sp_key_child(row, ""));
    }
}

static void rows_say_what_they_are(void **state)
{
    (void)state;
    EACH_ROW(row)
    {
        bool group = row->shape == SP_SHAPE_GROUP || row->shape == SP_SHAPE_STEPS;
        if (!row->meaning || !*row->meaning) fail_msg("%s says nothing", row->path);
        if (!group && !row->basis) fail_msg("%s rests on nothing", row->path);
        if (group && row->fallback) fail_msg("%s is a group with a default", row->path);
        if (row->rule && !row->fallback) fail_msg("%s does not tell its rule", row->path);
        if (row->meaning[strlen(row->meaning) - 1] == '.') fail_msg("%s: full stop", row->path);
        if (row->shape == SP_SHAPE_TABLE && !row->columns) fail_msg("%s has no columns", row->path);
    }
}

/* Each number's default reads and lies in its range, and each range reads and is one. */
static void defaults_lie_in_their_ranges(void **state)
{
    (void)state;
    EACH_ROW(row)
    {
        struct sp_range range;
        char why[300];
        double x;
        if (row->shape != SP_SHAPE_QUANTITY && row->shape != SP_SHAPE_LIST && row->shape != SP_SHAPE_MATRIX)
            continue;
        if (!row->range || !sp_range_read(units, row->kind, row->range, &range) || !(range.low < range.high))
            fail_msg("%s: range \"%s\"", row->path, row->range ? row->range : "");
        if (!row->fallback || row->rule) continue;
        if (!sp_quantity_read(units, row->kind, row->fallback, &x, why, sizeof why))
            fail_msg("%s: default \"%s\" (%s)", row->path, row->fallback, why);
        if (!sp_range_holds(&range, x))
            fail_msg("%s: default %s not in %s", row->path, row->fallback, row->range);
    }
}

static void tables_have_ranges_for_each_column(void **state)
{
    (void)state;
    EACH_ROW(row)
    {
        struct sp_range range;
        if (row->shape != SP_SHAPE_TABLE) continue;
        for (size_t c = 0; c < row->width; ++c)
            if (!sp_range_read(units, row->columns[c].kind, row->columns[c].range, &range))
                fail_msg("%s, column %zu", row->path, c);
    }
}

/* The words a row knows are the words its range tells. */
static void words_are_told(void **state)
{
    (void)state;
    EACH_ROW(row)
    {
        double value;
        if (row->shape != SP_SHAPE_WORD) continue;
        for (const struct sp_word *w = row->words; w->text; ++w)
            if (strlen(w->text) > 1 && !strstr(row->range, w->text))
                fail_msg("%s: %s untold", row->path, w->text);
        if (row->fallback && !sp_word_value(row, row->fallback, &value))
            fail_msg("%s: default %s is no word", row->path, row->fallback);
        assert_false(sp_word_value(row, "", &value));
        assert_false(sp_word_value(row, "Belt", &value));
    }
}

static size_t width_of(const struct sp_key *row)
{
    if (row->shape == SP_SHAPE_THREE) return 3 * sizeof(double);
    if (row->shape == SP_SHAPE_TEXT) return sizeof(char *);
    if (row->shape == SP_SHAPE_TABLE || row->shape == SP_SHAPE_LIST || row->shape == SP_SHAPE_MATRIX)
        return sizeof(struct sp_table);
    switch (row->keep) {
    case SP_KEEP_INT:
    case SP_KEEP_ENUM:
        return sizeof(int);
    case SP_KEEP_CHAR:
        return 1;
    case SP_KEEP_BOOL:
        return sizeof(bool);
    default:
        return sizeof(double);
    }
}

static bool may_share(const struct sp_key *a, const struct sp_key *b)
{
    bool steps = sp_key_of_step(a) && a->kind == SP_K_TIME && b->kind == SP_K_TIME && a->at == b->at;
    return steps || (strstr(a->path, "inlet.lip") && strstr(b->path, "inlet.lip"));
}

/* No two rows write to the same bytes, save those that mean to. */
static void places_do_not_overlap(void **state)
{
    (void)state;
    for (size_t i = 0; sp_key_row(i); ++i) {
        const struct sp_key *a = sp_key_row(i);
        size_t size = sp_key_of_step(a) ? sizeof(struct sp_step) : sizeof(struct sp_design);
        if (a->keep == SP_KEEP_NOTHING) continue;
        assert_true(a->at + width_of(a) <= size);
        for (size_t j = i + 1; sp_key_row(j); ++j) {
            const struct sp_key *b = sp_key_row(j);
            if (b->keep == SP_KEEP_NOTHING || sp_key_of_step(a) != sp_key_of_step(b) || may_share(a, b))
                continue;
            if (a->at < b->at + width_of(b) && b->at < a->at + width_of(a))
                fail_msg("%s and %s", a->path, b->path);
        }
    }
}

static void distances(void **state)
{
    (void)state;
    assert_int_equal(sp_edit_distance("kitten", "sitting"), 3); /* the textbook's pair */
    assert_int_equal(sp_edit_distance("", "abc"), 3);
    assert_int_equal(sp_edit_distance("abc", ""), 3);
    assert_int_equal(sp_edit_distance("area", "area"), 0);
    assert_int_equal(sp_edit_distance("aera", "area"), 2);
    char longer[200];
    memset(longer, 'x', sizeof longer - 1);
    longer[sizeof longer - 1] = '\0';
    assert_int_equal(sp_edit_distance(longer, ""), 64); /* cut */
}

static void nearest_keys(void **state)
{
    (void)state;
    assert_string_equal(sp_key_nearest("car.duct.inlet", "are"), "area");
    assert_string_equal(sp_key_nearest("car.duct.inlet", "liploss"), "lip_loss");
    assert_string_equal(sp_key_nearest("", "limit"), "limits");
    assert_string_equal(sp_key_nearest("drive[]", "repeats"), "repeat");
    assert_null(sp_key_nearest("car.duct.inlet.area", "x"));
    /* Near is what needs no more changes than half its letters, or one. */
    assert_string_equal(sp_key_nearest("car.duct.exit", "aera"), "area"); /* 2 of 4 */
    assert_null(sp_key_nearest("car.duct.exit", "nozzle"));
    assert_null(sp_key_nearest("", "body"));
    assert_null(sp_key_nearest("", ""));
    assert_true(sp_key_near("x", 1));
    assert_false(sp_key_near("x", 2));
    assert_true(sp_key_near("abcdefg", 3));
    assert_false(sp_key_near("abcdefg", 4));
}

static void ranges(void **state)
{
    (void)state;
    struct sp_range r;
    assert_true(sp_range_read(units, SP_K_LENGTH, "above 0 mm, at most 5 m", &r));
    assert_false(sp_range_holds(&r, 0.0));
    assert_true(sp_range_holds(&r, 1e-300));
    assert_true(sp_range_holds(&r, 5.0));
    assert_false(sp_range_holds(&r, 5.1));
    assert_false(sp_range_holds(&r, NAN));
    assert_true(sp_range_read(units, SP_K_TEMPERATURE, "-60 degC to 70 degC", &r));
    check_close(r.low, 213.15, 1e-12, 0.0);
    check_close(r.high, 343.15, 1e-12, 0.0);
    assert_true(sp_range_holds(&r, r.low) && sp_range_holds(&r, r.high));
    assert_true(sp_range_read(units, SP_K_NUMBER, "0 to 1", &r));
    assert_true(sp_range_read(units, SP_K_NUMBER, "above 0, below 1", &r));
    assert_false(sp_range_holds(&r, 1.0));
    assert_false(sp_range_read(units, SP_K_NUMBER, "any", &r));
    assert_false(sp_range_read(units, SP_K_LENGTH, "0 to 5 m", &r));
}

static void outside_view(void **state)
{
    (void)state;
    struct sp_key_info k;
    size_t n = sp_key_count(), seen = 0;
    assert_true(n > 150);
    for (size_t i = 0; i < n; ++i) {
        assert_true(sp_key_at(i, &k));
        assert_true(k.path && k.type && k.unit && k.need && k.range && k.meaning && k.basis);
        if (!strcmp(k.path, "car.duct.inlet.area")) {
            assert_string_equal(k.type, "area");
            assert_string_equal(k.unit, "m2");
            assert_string_equal(k.need, "required");
            assert_null(k.fallback);
            ++seen;
        }
        if (!strcmp(k.path, "drive[].repeat")) {
            assert_string_equal(k.fallback, "1");
            ++seen;
        }
    }
    assert_int_equal(seen, 2);
    assert_false(sp_key_at(n, &k));
}

/* docs/case-file.md is what the program writes. */
static void page_is_up_to_date(void **state)
{
    (void)state;
    char *text = NULL, *file = NULL;
    size_t size = 0, length = 0;
    FILE *to = open_memstream(&text, &size), *from = fopen(SP_SOURCE_DIR "/docs/case-file.md", "rb");
    assert_non_null(to);
    sp_keys_document(to);
    fclose(to);
    EACH_ROW(row)
    {
        char name[100];
        snprintf(name, sizeof name, "`%s`", row->shape == SP_SHAPE_GROUP ? row->path : sp_key_name(row));
        if (!strstr(text, name)) fail_msg("%s is not on the page", row->path);
    }
    assert_non_null(from);
    file = calloc(1, size + 2);
    assert_non_null(file);
    length = fread(file, 1, size + 1, from);
    fclose(from);
    if (length != size || memcmp(file, text, size))
        fail_msg("docs/case-file.md differs from what the program writes");
    free(text);
    free(file);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(paths_are_unique_and_have_a_group),
        cmocka_unit_test(rows_say_what_they_are),
        cmocka_unit_test(defaults_lie_in_their_ranges),
        cmocka_unit_test(tables_have_ranges_for_each_column),
        cmocka_unit_test(words_are_told),
        cmocka_unit_test(places_do_not_overlap),
        cmocka_unit_test(distances),
        cmocka_unit_test(nearest_keys),
        cmocka_unit_test(ranges),
        cmocka_unit_test(outside_view),
        cmocka_unit_test(page_is_up_to_date),
    };
    return cmocka_run_group_tests(tests, open_units, close_units);
}
