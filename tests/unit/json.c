/* Strict JSON: what is taken, what is refused and where, and the tree.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/json.h"
#include "check.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static struct sp_json *parse(const char *text, struct sp_complaints *c)
{
    return sp_json_parse("f.json", "case.json", text, strlen(text), c);
}

static struct sp_json *must(const char *text)
{
    struct sp_complaints c = {0};
    struct sp_json *tree = parse(text, &c);
    if (!tree || c.count) {
        print_error("%s\n", text);
        sp_complaints_print(&c, false, stderr);
        fail();
    }
    sp_complaints_free(&c);
    return tree;
}

/* Exactly one complaint, on that line, with these parts in found and expected (NULL: any). */
static void bytes_refused_at(const char *text, size_t size, long line, const char *found,
                             const char *expected, int source)
{
    struct sp_complaints c = {0};
    struct sp_json *tree = sp_json_parse("f.json", "case.json", text, size, &c);
    if (c.count > 0) { /* keys that stand twice leave a tree that is not to be used */
        sp_json_free(tree);
        tree = NULL;
    }
    if (tree || c.count != 1 || c.list[0].line != line || (found && !strstr(c.list[0].found, found)) ||
        (expected && !strstr(c.list[0].expected, expected)) || strcmp(c.list[0].file, "f.json") != 0 ||
        strcmp(c.list[0].named_by, "case.json") != 0) {
        print_error("at %d, %s: %.*s\n", source, tree ? "taken" : "refused", (int)size, text);
        sp_complaints_print(&c, false, stderr);
        fail();
    }
    sp_complaints_free(&c);
}
#define refused(text, line, found, expected)                                                                 \
    bytes_refused_at(text, sizeof(text) - 1, line, found, expected, __LINE__)

static void test_tree(void **state)
{
    struct sp_json *t =
        must("{\r\n \"a\": [1, -2.5e3,\n\n true, false, null],\n \"b\":\n  {\"c\": \"x\\u00e9\\n\"}\n}\n");
    struct sp_json *a = sp_json_member(t, "a"), *b = sp_json_member(t, "b"), *c = sp_json_member(b, "c");
    static const enum sp_json_type types[] = {SP_JSON_NUMBER, SP_JSON_NUMBER, SP_JSON_TRUE, SP_JSON_FALSE,
                                              SP_JSON_NULL};
    static const long lines[] = {2, 2, 4, 4, 4};
    int i = 0;
    (void)state;
    assert_int_equal(t->type, SP_JSON_OBJECT);
    assert_int_equal(t->line, 1);
    assert_null(t->key);
    assert_string_equal(t->file, "f.json");
    assert_string_equal(t->named_by, "case.json");
    assert_int_equal(a->type, SP_JSON_ARRAY);
    assert_int_equal(a->line, 2);
    assert_string_equal(a->key, "a");
    for (struct sp_json *n = a->child; n; n = n->next, i++) {
        assert_true(i < 5);
        assert_int_equal(n->type, types[i]);
        assert_int_equal(n->line, lines[i]);
        assert_null(n->key);
    }
    assert_int_equal(i, 5);
    assert_string_equal(a->child->next->text, "-2.5e3");
    check_close(a->child->next->number, -2500.0, 0, 0);
    assert_int_equal(b->line, 6);
    assert_int_equal(c->line, 6);
    assert_string_equal(c->text, "x\xc3\xa9\n");
    assert_null(sp_json_member(b, "d"));
    assert_null(sp_json_member(a, "a"));
    assert_null(sp_json_member(NULL, "a"));
    sp_json_free(t);
}

static void test_taken(void **state)
{
    static const char *const texts[] = {"0",
                                        "-0",
                                        "\"\"",
                                        " \t\r\n[ ] ",
                                        "{}",
                                        "[[],{}]",
                                        "1e308",
                                        "1E+2",
                                        "1e-400",
                                        "\"\x7f\"",
                                        "\"\\ud83d\\ude97\"",
                                        "\"\xf0\x9f\x9a\x97\"",
                                        "\"\\/\\b\\f\\r\\t\"",
                                        "{\"\":0}",
                                        "{\"a\":{\"a\":0},\"A\":[{\"a\":1},{\"a\":2}]}",
                                        "\"\\uFFFF\"",
                                        "\"\\u0001\"",
                                        "\"\xef\xbb\xbf\""};
    (void)state;
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) sp_json_free(must(texts[i]));
}

static void test_numbers(void **state)
{
    /* Longer than cJSON's buffer of 63; the value is a third, the text is kept. */
    const char *text =
        "[0.33333333333333333333333333333333333333333333333333333333333333333333333333333333e0, 7,\n"
        "100000000000000000000000000000000000000000000000000000000000000000000000000000000e-80]";
    struct sp_json *t = must(text), *n = t->child;
    (void)state;
    check_close(n->number, 1.0 / 3.0, 0, 0);
    assert_int_equal(strlen(n->text), 84);
    check_close(n->next->number, 7.0, 0, 0);
    check_close(n->next->next->number, 1.0, 0, 0);
    assert_int_equal(n->next->next->line, 2);
    sp_json_free(t);
    refused("1e400", 1, "1e400", "1.8e308");
    refused("[1,\n-1e400]", 2, "-1e400", NULL);
    refused("01", 1, "01", "a number such as");
    refused("-01", 1, "-01", NULL);
    refused("[1.]", 1, "1.", NULL);
    refused("[.5]", 1, ".5", NULL);
    refused("[+5]", 1, "+5", NULL);
    refused("[1e]", 1, "1e", NULL);
    refused("[1e+]", 1, "1e+", NULL);
    refused("[-]", 1, "-", NULL);
    refused("0x10", 1, "0x10", NULL);
    refused("[1.5.2]", 1, "1.5.2", NULL);
    refused("{\"a\": NaN}", 1, "NaN", "a value");
    refused("[-Infinity]", 1, "-Infinity", NULL);
    refused("[Infinity]", 1, "Infinity", NULL);
    refused("12 cm", 1, "cm", "nothing behind");
}

static void test_syntax(void **state)
{
    (void)state;
    refused("", 1, "empty", "a JSON value");
    refused("  \n ", 2, "the end", "a JSON value");
    refused("{\"a\": 1", 1, "the end", "a comma, or }");
    refused("{\"a\":", 1, "the end", "a value behind the colon");
    refused("{\"a\"", 1, "the end", "a colon");
    refused("{", 1, "the end", "a key");
    refused("[1,", 1, "the end", "a value");
    refused("\"abc", 1, "the end", "closing quote");
    refused("\"abc\\", 1, "the end", "closing quote");
    refused("[1,\n2,]", 2, "]", "behind the comma");
    refused("{\"a\":1,\n}", 2, "}", "behind the comma");
    refused("[,1]", 1, ",", "a value, or ]");
    refused("[1 2]", 1, "2", "a comma");
    refused("{\"a\" 1}", 1, "1", "a colon");
    refused("{a: 1}", 1, "a", "double quotes");
    refused("{'a': 1}", 1, "'", "double quotes");
    refused("{\"a\": 'b'}", 1, "'b'", NULL);
    refused("{1: 2}", 1, "1", NULL);
    refused("[1}", 1, "}", NULL);
    refused("{} {}", 1, "{", "nothing behind");
    refused("{}\n\n x", 3, "x", "nothing behind");
    refused("[] // no", 1, "//", "nothing behind");
    refused("/* no */ []", 1, "/*", NULL);
    refused("True", 1, "True", NULL);
    refused("nul", 1, "nul", NULL);
    refused("truex", 1, "truex", NULL);
    refused("[1,\v2]", 1, "control character 0x0b", NULL);
    refused("\xc2\xa0[]", 1, NULL, NULL);
    refused("\xef\xbb\xbf{}", 1, "byte order mark", "UTF-8");
    refused("\xff\xfe{\0}\0", 1, "UTF-16", "UTF-8");
    refused("[1]\0", 1, "NUL", NULL);
    refused("[\0]", 1, "NUL", NULL);
    refused("\"a\0b\"", 1, "NUL", "no raw control");
}

static void test_strings(void **state)
{
    (void)state;
    refused("\"a\nb\"", 1, "0x0a", "no raw control");
    refused("[\n\"a\tb\"]", 2, "0x09", "no raw control");
    refused("\"\x1f\"", 1, "0x1f", NULL);
    refused("\"\\u0000\"", 1, "\\u0000", "no NUL");
    refused("\"\\ud800\"", 1, "\\ud800", "low surrogate behind");
    refused("\"\\ud800\\u0041\"", 1, "\\ud800", "low surrogate behind");
    refused("\"\\ud800\\ud800\"", 1, "\\ud800", "low surrogate behind");
    refused("\"\\udc00\"", 1, "\\udc00", "high surrogate before");
    refused("\"\\u12\"", 1, "\\u12", "four hex");
    refused("\"\\u12g4\"", 1, "\\u12", "four hex");
    refused("\"\\x41\"", 1, "\\x", "one of");
    refused("\"\\'\"", 1, "\\'", "one of");
    refused("\"\\\0\"", 1, "\\", "one of");
    refused("\"\xff\"", 1, "0xff", "UTF-8");
    refused("\"\xc0\x80\"", 1, "0xc0", "UTF-8");         /* overlong NUL */
    refused("\"\xe0\x80\xaf\"", 1, "0xe0", "UTF-8");     /* overlong / */
    refused("\"\xed\xa0\x80\"", 1, "0xed", "UTF-8");     /* a surrogate */
    refused("\"\xf4\x90\x80\x80\"", 1, "0xf4", "UTF-8"); /* past U+10FFFF */
    refused("\"\xf8\x88\x80\x80\x80\"", 1, "0xf8", "UTF-8");
    refused("\"\xe2\x82", 1, "0xe2", "UTF-8");
    refused("\"\x80\"", 1, "0x80", "UTF-8");
    refused("{\"a\nb\": 1}", 1, "0x0a", NULL);
    refused("{\"\xff\": 1}", 1, "0xff", NULL);
}

static void test_depth(void **state)
{
    static const size_t far = 1000000;
    char text[200] = "", *long_text;
    (void)state;
    memset(text, '[', 64);
    memset(text + 64, ']', 64);
    sp_json_free(must(text));
    memset(text, '[', 65);
    memset(text + 65, ']', 65);
    bytes_refused_at(text, 130, 1, "more than 64 deep", "64", __LINE__);
    long_text = malloc(far);
    assert_non_null(long_text);
    memset(long_text, '[', far);
    bytes_refused_at(long_text, far, 1, "more than 64 deep", "64", __LINE__);
    for (size_t i = 0; i + 5 <= far; i += 5) memcpy(long_text + i, "{\"a\":", 5);
    bytes_refused_at(long_text, far, 1, "more than 64 deep", "64", __LINE__);
    free(long_text);
}

static void test_doubled(void **state)
{
    struct sp_complaints c = {0};
    (void)state;
    /* The tree comes back, so that its other faults can be told in the same go. */
    struct sp_json *tree =
        parse("{\"car\": [0, {\n\"x\": 1,\n\"y\": 2,\n\"\\u0078\":\n3, \"x\": 4}],\n\"car\": 5}", &c);
    assert_non_null(tree);
    sp_json_free(tree);
    assert_int_equal(c.count, 3);
    assert_string_equal(c.list[0].path, "car[1].x");
    assert_int_equal(c.list[0].line, 4);
    assert_non_null(strstr(c.list[0].found, "\"x\""));
    assert_non_null(strstr(c.list[0].found, "line 2"));
    assert_string_equal(c.list[1].path, "car[1].x");
    assert_int_equal(c.list[1].line, 5);
    assert_non_null(strstr(c.list[1].found, "line 2"));
    assert_string_equal(c.list[2].path, "car");
    assert_int_equal(c.list[2].line, 6);
    assert_non_null(strstr(c.list[2].found, "line 1"));
    sp_complaints_free(&c);
    /* A syntax fault stands alone, whatever is doubled before it. */
    refused("{\"a\":1,\n\"a\":2,\n]", 3, "]", NULL);
}

/* Large, broad texts: line counts, bounds, and nothing that grows with the square. */
static void test_large(void **state)
{
    size_t n = 0, rows = 200000;
    char *text = malloc(16 * 1024 * 1024);
    struct sp_json *t, *last;
    (void)state;
    assert_non_null(text);
    text[n++] = '[';
    for (size_t i = 0; i < rows; i++) n += (size_t)sprintf(text + n, "%s\r\n\"%zu\"", i ? "," : "", i);
    text[n++] = ']';
    text[n] = '\0';
    t = must(text);
    for (last = t->child; last->next; last = last->next) {
    }
    assert_string_equal(last->text, "199999");
    assert_int_equal(last->line, (long)rows + 1);
    sp_json_free(t);
    memcpy(text + n, "]", 2);
    bytes_refused_at(text, n + 1, (long)rows + 1, "]", "nothing behind", __LINE__);
    n = 0;
    text[n++] = '{';
    for (size_t i = 0; i < 1001; i++) n += (size_t)sprintf(text + n, "%s\"k%zu\":0", i ? "," : "", i);
    text[n++] = '}';
    bytes_refused_at(text, n, 1, "1000 keys", NULL, __LINE__);
    text[0] = '[';
    for (n = 1; n < 2 * 1000001; n += 2) memcpy(text + n, "0,", 2);
    bytes_refused_at(text, n, 1, "1000000 values", NULL, __LINE__);
    free(text);
}

static void test_value(void **state)
{
    static const struct {
        const char *text;
        enum sp_json_type type;
    } rows[] = {
        {"1.5", SP_JSON_NUMBER},    {"450 cm2", SP_JSON_STRING},   {"\"450 cm2\"", SP_JSON_STRING},
        {"", SP_JSON_STRING},       {"none", SP_JSON_STRING},      {"null", SP_JSON_NULL},
        {"[1,\n2]", SP_JSON_ARRAY}, {"{\"a\":1}", SP_JSON_OBJECT}, {"{\"a\":1,\"a\":2}", SP_JSON_STRING},
        {"1e400", SP_JSON_STRING},  {"true", SP_JSON_TRUE}};
    (void)state;
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        struct sp_json *v = sp_json_value("--set a=b", rows[i].text);
        assert_non_null(v);
        assert_int_equal(v->type, rows[i].type);
        assert_int_equal(v->line, 0);
        assert_string_equal(v->file, "--set a=b");
        if (v->child) assert_int_equal(v->child->line, 0);
        if (i == 1 || i == 2) assert_string_equal(v->text, "450 cm2");
        sp_json_free(v);
    }
}

/* The tree as a text, enough for comparison. */
static size_t write_tree(const struct sp_json *n, char *out, size_t size)
{
    char word[80];
    size_t at = 0;
    if (n->type != SP_JSON_OBJECT && n->type != SP_JSON_ARRAY) {
        sp_json_describe(n, word, sizeof word);
        return (size_t)snprintf(out, size, "%s", word);
    }
    at += (size_t)snprintf(out, size, "%c", n->type == SP_JSON_OBJECT ? '{' : '[');
    for (const struct sp_json *c = n->child; c; c = c->next) {
        if (c->key) at += (size_t)snprintf(out + at, size - at, "%s:", c->key);
        at += write_tree(c, out + at, size - at);
        if (c->next) at += (size_t)snprintf(out + at, size - at, ",");
    }
    return at + (size_t)snprintf(out + at, size - at, "%c", n->type == SP_JSON_OBJECT ? '}' : ']');
}

static void tree_is(struct sp_json *tree, const char *want)
{
    char got[500];
    assert_non_null(tree);
    write_tree(tree, got, sizeof got);
    assert_string_equal(got, want);
    sp_json_free(tree);
}

static void test_merge(void **state)
{
    (void)state;
    tree_is(sp_json_merge(must("{\"a\":1,\"b\":{\"c\":2,\"d\":[3]},\"e\":4}"),
                          must("{\"b\":{\"d\":[5,6],\"x\":7},\"a\":{\"y\":8},\"z\":9}")),
            "{a:{y:8},b:{c:2,d:[5,6],x:7},e:4,z:9}");
    tree_is(sp_json_merge(must("{\"a\":{\"b\":1}}"), must("{\"a\":null}")), "{a:null}");
    tree_is(sp_json_merge(must("[1]"), must("[2,3]")), "[2,3]");
    tree_is(sp_json_merge(must("{\"a\":1}"), must("{\"b\":2,\"c\":3,\"a\":4,\"d\":{}}")),
            "{a:4,b:2,c:3,d:{}}");
    tree_is(sp_json_merge(must("{}"), must("{\"a\":1}")), "{a:1}");
    tree_is(sp_json_merge(must("{\"a\":1}"), must("{}")), "{a:1}");
    tree_is(sp_json_merge(NULL, must("1")), "1");
    tree_is(sp_json_merge(must("1"), NULL), "1");
    tree_is(sp_json_merge(must("{\"a\":1}"), must("5")), "5");
    assert_null(sp_json_merge(NULL, NULL));
}

static void test_put_and_drop(void **state)
{
    struct sp_json *t = must("{\"a\":1,\"b\":2,\"c\":3}"), *list = must("[1]");
    (void)state;
    assert_true(sp_json_put(t, "b", must("{\"x\":[1,2]}")));
    assert_true(sp_json_put(t, "d", must("\"new\"")));
    assert_string_equal(sp_json_member(t, "b")->key, "b");
    assert_true(sp_json_drop(t, "a"));
    assert_false(sp_json_drop(t, "a"));
    assert_true(sp_json_drop(t, "c"));
    assert_false(sp_json_put(list, "b", must("1")));
    assert_false(sp_json_put(NULL, "b", must("1")));
    assert_false(sp_json_put(t, "b", NULL));
    assert_false(sp_json_drop(list, "b"));
    assert_false(sp_json_drop(NULL, "b"));
    sp_json_free(list);
    tree_is(t, "{b:{x:[1,2]},d:\"new\"}");
}

static void described(const char *text, size_t size, const char *want)
{
    char out[200];
    struct sp_json *t = must(text);
    sp_json_describe(t, out, size);
    assert_string_equal(out, want);
    sp_json_free(t);
}

static void test_describe(void **state)
{
    char out[20];
    (void)state;
    described("\"450 cm\"", 200, "\"450 cm\"");
    described("12.50", 200, "12.50");
    described("{\"a\":1}", 200, "an object");
    described("[]", 200, "an array");
    described("null", 200, "null");
    described("false", 200, "false");
    described("\"0123456789012345678901234567890123456789012345678901234567890\"", 200,
              "\"012345678901234567890123456789012345678901234567890123456789...\"");
    /* Cut between characters, not inside one. */
    described("\"01234567890123456789012345678901234567890123456789012345678\xc3\xa9xyz\"", 200,
              "\"01234567890123456789012345678901234567890123456789012345678...\"");
    described("\"450 cm\"", 5, "\"450");
    sp_json_describe(NULL, out, sizeof out);
    assert_string_equal(out, "nothing");
    sp_json_describe(NULL, out, 0);
}

static void test_read(void **state)
{
    char name[] = "/tmp/sp-json-XXXXXX";
    struct sp_complaints c = {0};
    int handle = mkstemp(name);
    FILE *f = fdopen(handle, "wb");
    struct sp_json *t;
    (void)state;
    assert_non_null(f);
    fputc('[', f);
    for (int i = 0; i < 40000; i++) fprintf(f, "%d,\n", i);
    fputs("1]\n", f);
    fclose(f);
    t = sp_json_read(name, NULL, &c);
    assert_non_null(t);
    assert_string_equal(t->file, name);
    assert_null(t->named_by);
    sp_json_free(t);
    assert_int_equal(truncate(name, 64L * 1024 * 1024 + 1), 0);
    assert_null(sp_json_read(name, NULL, &c));
    assert_int_equal(c.count, 1);
    assert_non_null(strstr(c.list[0].found, "larger"));
    unlink(name);
    assert_null(sp_json_read(name, "case.json", &c));
    assert_int_equal(c.count, 2);
    assert_non_null(strstr(c.list[1].found, "No such file"));
    assert_string_equal(c.list[1].named_by, "case.json");
    assert_null(sp_json_read("/", NULL, &c));
    assert_int_equal(c.count, 3);
    assert_non_null(strstr(c.list[2].found, "directory"));
    sp_complaints_free(&c);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_tree),    cmocka_unit_test(test_taken),        cmocka_unit_test(test_numbers),
        cmocka_unit_test(test_syntax),  cmocka_unit_test(test_strings),      cmocka_unit_test(test_depth),
        cmocka_unit_test(test_doubled), cmocka_unit_test(test_large),        cmocka_unit_test(test_value),
        cmocka_unit_test(test_merge),   cmocka_unit_test(test_put_and_drop), cmocka_unit_test(test_describe),
        cmocka_unit_test(test_read)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
