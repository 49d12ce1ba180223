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
        bool group = row->shape == SP_SHAPE_GROUP || row->shape == SP_SHAPE_STEPS ||
                     row->shape == SP_SHAPE_CHANGES;
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

/* What a row's offset counts from. */
enum base { OF_DESIGN, OF_STEP, OF_CHANGE };

static enum base base_of(const struct sp_key *row)
{
    return sp_key_of_step(row) ? OF_STEP : sp_key_of_change(row) ? OF_CHANGE : OF_DESIGN;
}

/* No two rows write to the same bytes, save those that mean to. */
static void places_do_not_overlap(void **state)
{
    (void)state;
    static const size_t sizes[] = {sizeof(struct sp_design), sizeof(struct sp_step),
                                   sizeof(struct sp_planned)};
    for (size_t i = 0; sp_key_row(i); ++i) {
        const struct sp_key *a = sp_key_row(i);
        if (a->keep == SP_KEEP_NOTHING) continue;
        assert_true(a->at + width_of(a) <= sizes[base_of(a)]);
        for (size_t j = i + 1; sp_key_row(j); ++j) {
            const struct sp_key *b = sp_key_row(j);
            if (b->keep == SP_KEEP_NOTHING || base_of(a) != base_of(b) || may_share(a, b)) continue;
            if (a->at < b->at + width_of(b) && b->at < a->at + width_of(a))
                fail_msg("%s and %s", a->path, b->path);
        }
    }
}

/* ---- lists ----------------------------------------------------------------------------------------- */

static void lists_on_the_way(void **state)
{
    (void)state;
    const struct sp_key *lists[SP_KEY_LISTS];
    bool plural;
    EACH_ROW(row)
    {
        size_t n = sp_key_lists(row->path, lists);
        if (row->plural && (!n || lists[n - 1] != row)) fail_msg("%s is no list of its own", row->path);
    }
    assert_int_equal(sp_key_lists("car.duct.core.width", lists), 2);
    assert_string_equal(lists[0]->path, "car.duct");
    assert_string_equal(lists[1]->path, "car.duct.core");
    assert_int_equal(sp_key_lists("car.duct.exit", lists), 2); /* its own included */
    assert_string_equal(lists[1]->path, "car.duct.exit");
    assert_int_equal(sp_key_lists("car.duct.inlet.area", lists), 1);
    assert_int_equal(sp_key_lists("car.ducts", lists), 0);
    assert_int_equal(sp_key_lists("drive[].speed", lists), 0);
    assert_string_equal(sp_key_named("car", "ducts", &plural)->path, "car.duct");
    assert_true(plural);
    assert_string_equal(sp_key_named("car.duct", "fan", &plural)->path, "car.duct.fan");
    assert_false(plural);
    assert_null(sp_key_named("car.duct", "ducts", &plural));
    assert_null(sp_key_named("car.duct", "core.width", &plural));
    assert_string_equal(sp_key_nearest("car.duct", "exitts"), "exits");
}

static void same(const char *path, size_t outer, size_t inner, const void *place, struct sp_design *d)
{
    const struct sp_key *row = sp_key_find(path);
    assert_non_null(row);
    if (sp_key_place(row, d, &(struct sp_key_spot){outer, inner}) != place)
        fail_msg("%s of %zu, %zu", path, outer, inner);
}

static void elements_have_their_places(void **state)
{
    (void)state;
    static struct sp_design d;
    struct sp_step steps[3];
    same("car.duct.core.width", 0, 0, &d.duct[0].core[0].width, &d);
    same("car.duct.core.width", 1, 0, &d.duct[1].core[0].width, &d);
    same("car.duct.core.pressure_drop.table", 3, 4, &d.duct[3].core[4].drop_table, &d);
    same("car.duct.fan", 2, 1, &d.duct[2].fan[1].fitted, &d);
    same("car.duct.fan.curve.shutoff", 0, 2, &d.duct[0].fan[2].curve.shutoff, &d);
    same("car.duct.exit.angle", 1, 7, &d.duct[1].exit[7].angle, &d);
    same("car.duct.inlet.area", 3, 0, &d.duct[3].inlet.area, &d);
    same("car.tank.cap", 0, 0, &d.tank.cap, &d);
    d.step = steps;
    same("drive[].speed", 2, 0, &steps[2].speed, &d);
    assert_ptr_equal(sp_key_count_place(sp_key_find("car.duct"), &d, &(struct sp_key_spot){0}), &d.ducts);
    assert_ptr_equal(sp_key_count_place(sp_key_find("car.duct.core"), &d, &(struct sp_key_spot){2, 0}),
                     &d.duct[2].cores);
    assert_ptr_equal(sp_key_count_place(sp_key_find("car.duct.exit"), &d, &(struct sp_key_spot){1, 3}),
                     &d.duct[1].exits);
    assert_null(sp_key_count_place(sp_key_find("car.duct.fan"), &d, &(struct sp_key_spot){0}));
}

/* Four ducts of 5 cores, 3 fans and 8 exits: the numbers of the public header. */
static void rules_see_their_own_element(void **state)
{
    (void)state;
    static struct sp_design d;
    for (size_t i = 0; i < SP_DUCTS; ++i) {
        for (size_t k = 0; k < SP_CORES; ++k) {
            struct sp_core *c = &d.duct[i].core[k];
            c->width = 0.1 * (double)(i + 1);
            c->height = 0.4;
            c->depth = 0.01 * (double)(k + 1);
            /* 0.13 l per litre of core, and 1.3 l in tanks at 0.4 m */
            check_close(sp_rule_core_coolant(&d, &(struct sp_key_spot){i, k}),
                        0.13 * 4e-4 * (double)((i + 1) * (k + 1)) + 1.3e-3, 1e-12, 0.0);
        }
        d.duct[i].fan[2].diameter = (double)i;
        check_close(sp_rule_fan_hub(&d, &(struct sp_key_spot){i, 2}), 0.35 * (double)i, 1e-12, 0.0);
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
        cmocka_unit_test(lists_on_the_way),
        cmocka_unit_test(elements_have_their_places),
        cmocka_unit_test(rules_see_their_own_element),
        cmocka_unit_test(distances),
        cmocka_unit_test(nearest_keys),
        cmocka_unit_test(ranges),
        cmocka_unit_test(outside_view),
        cmocka_unit_test(page_is_up_to_date),
    };
    return cmocka_run_group_tests(tests, open_units, close_units);
}
