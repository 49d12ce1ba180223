/* Complaints: the line as promised, the cap, texts that try to break the line.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "swirlpot/base.h"

#include <stdlib.h>
#include <string.h>

/* What printing gives; to be freed. */
static char *printed(const struct sp_complaints *c, bool caution)
{
    char *text = NULL;
    size_t size = 0;
    FILE *to = open_memstream(&text, &size);
    assert_non_null(to);
    sp_complaints_print(c, caution, to);
    fclose(to);
    return text;
}

static void line_is(const struct sp_place *at, const char *found, const char *expected, const char *hint,
                    bool caution, const char *want)
{
    struct sp_complaints c = {0};
    char *got;
    sp_complain(&c, at, found, expected, hint);
    got = printed(&c, caution);
    assert_string_equal(got, want);
    free(got);
    sp_complaints_free(&c);
    assert_int_equal(c.count, 0);
    assert_null(c.list);
}

static void test_line(void **state)
{
    (void)state;
    line_is(&(struct sp_place){"a.json", 3, "car.duct", NULL}, "\"5 s\"", "a length", NULL, false,
            "swirlpot: a.json, line 3, car.duct: found \"5 s\"; expected a length\n");
    line_is(&(struct sp_place){"a.json", 0, "car.duct", NULL}, "X", "Y", NULL, false,
            "swirlpot: a.json, car.duct: found X; expected Y\n");
    line_is(&(struct sp_place){"a.json", 7, NULL, NULL}, "X", "Y", NULL, false,
            "swirlpot: a.json, line 7: found X; expected Y\n");
    line_is(&(struct sp_place){"a.json", 7, "", NULL}, "X", "Y", "", false,
            "swirlpot: a.json, line 7: found X; expected Y\n");
    line_is(
        &(struct sp_place){"a.json", 3, "p", "b.json"}, "X", "Y", "did you mean Z?", false,
        "swirlpot: a.json, line 3, p: found X; expected Y; did you mean Z? (a.json is named by b.json)\n");
    line_is(&(struct sp_place){"a.json", 3, "p", NULL}, "X", "Y", NULL, true,
            "swirlpot: caution: a.json, line 3, p: found X; expected Y\n");
    line_is(&(struct sp_place){NULL, 0, "p", NULL}, "X", "Y", NULL, false,
            "swirlpot: p: found X; expected Y\n");
    line_is(&(struct sp_place){NULL, 4, NULL, NULL}, "X", "Y", NULL, false,
            "swirlpot: line 4: found X; expected Y\n");
    line_is(NULL, NULL, NULL, NULL, false, "swirlpot: found nothing; expected something else\n");
}

static void test_control_characters(void **state)
{
    (void)state;
    line_is(&(struct sp_place){"a\nb", 1, "p\x1b[2J", "c\rd"}, "x\ty\x7f",
            "\xc2\x9b"
            "31m",
            "\xe2\x80\xae"
            "h",
            false, "swirlpot: a?b, line 1, p?[2J: found x?y?; expected ?31m; ?h (a?b is named by c?d)\n");
    /* Good UTF-8 stays, broken UTF-8 does not. */
    line_is(&(struct sp_place){"\xc3\xa9\xe2\x82\xac\xf0\x9f\x9a\x97", 1, NULL, NULL}, "\xff\xc3",
            "\xed\xa0\x80", NULL, false,
            "swirlpot: \xc3\xa9\xe2\x82\xac\xf0\x9f\x9a\x97, line 1: found ??; expected ???\n");
}

static void test_copies(void **state)
{
    struct sp_complaints c = {0};
    char text[] = "first";
    (void)state;
    sp_complain(&c, &(struct sp_place){text, 1, text, text}, text, text, text);
    memcpy(text, "later", 5);
    assert_string_equal(c.list[0].file, "first");
    assert_string_equal(c.list[0].path, "first");
    assert_string_equal(c.list[0].named_by, "first");
    assert_string_equal(c.list[0].found, "first");
    assert_string_equal(c.list[0].expected, "first");
    assert_string_equal(c.list[0].hint, "first");
    sp_complaints_free(&c);
    sp_complaints_free(&c);
    sp_complaints_free(NULL);
}

static void test_cap(void **state)
{
    struct sp_complaints c = {0};
    char *text, *at;
    int lines = 0;
    (void)state;
    for (int i = 0; i < SP_COMPLAINTS_MAX + 37; i++)
        sp_complain(&c, &(struct sp_place){"f", i + 1, NULL, NULL}, "X", "Y", NULL);
    assert_int_equal(c.count, SP_COMPLAINTS_MAX);
    assert_int_equal(c.dropped, 37);
    assert_int_equal(c.list[SP_COMPLAINTS_MAX - 1].line, SP_COMPLAINTS_MAX);
    text = printed(&c, false);
    for (at = text; *at; at++) lines += *at == '\n';
    assert_int_equal(lines, SP_COMPLAINTS_MAX + 1);
    assert_non_null(strstr(text, "\nswirlpot: found 37 more; "));
    free(text);
    sp_complaints_free(&c);
    sp_complain(NULL, NULL, "X", "Y", NULL);
    sp_complaints_print(NULL, false, stderr);
}

static void test_version(void **state)
{
    (void)state;
    assert_string_equal(sp_version(), "0.1.0");
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(test_line), cmocka_unit_test(test_control_characters),
                                       cmocka_unit_test(test_copies), cmocka_unit_test(test_cap),
                                       cmocka_unit_test(test_version)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
