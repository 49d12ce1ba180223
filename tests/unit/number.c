/* Decimal numbers: grammar, and equality with strtod bit by bit.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/number.h"
#include "check.h"

#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

static bool same_bits(double a, double b) { return memcmp(&a, &b, sizeof a) == 0; }

/* The whole text must be one number with the value strtod finds. */
static void as_strtod(const char *text)
{
    const char *end = text + strlen(text);
    double got = -777.0, want = strtod(text, NULL);
    const char *stop = sp_number_parse(text, end, &got);
    if (isinf(want)) {
        assert_null(stop);
        return;
    }
    if (stop != end || !same_bits(got, want)) {
        print_error("\"%s\": got %.17g (%a), strtod %.17g (%a)\n", text, got, got, want, want);
        fail();
    }
}

static uint64_t next(uint64_t *state) /* xorshift64*, Vigna 2016 */
{
    *state ^= *state >> 12;
    *state ^= *state << 25;
    *state ^= *state >> 27;
    return *state * 2685821657736338717U;
}

static size_t random_digits(uint64_t *s, char *out, unsigned most)
{
    size_t n = 1 + next(s) % most;
    for (size_t i = 0; i < n; i++) out[i] = (char)('0' + next(s) % 10);
    return n;
}

static void random_number(uint64_t *s, char *out)
{
    static const unsigned widths[] = {1, 3, 5, 9, 17, 25};
    if (next(s) % 4 == 0) *out++ = next(s) % 2 ? '-' : '+';
    out += random_digits(s, out, widths[next(s) % 6]);
    if (next(s) % 3) {
        *out++ = '.';
        out += random_digits(s, out, widths[next(s) % 6]);
    }
    if (next(s) % 3 == 0) {
        int power = (int)(next(s) % (next(s) % 2 ? 700 : 50));
        *out++ = next(s) % 2 ? 'e' : 'E';
        out += sprintf(out, "%s%d", next(s) % 2 ? "-" : next(s) % 2 ? "+" : "", power);
    }
    *out = '\0';
}

static void test_random(void **state)
{
    uint64_t s = 88172645463325252U;
    char text[100];
    (void)state;
    for (int i = 0; i < 1000000; i++) {
        random_number(&s, text);
        as_strtod(text);
    }
}

/* Any double, printed with 17 digits, comes back. */
static void test_round_trip(void **state)
{
    uint64_t s = 42;
    char text[40];
    (void)state;
    for (int i = 0; i < 200000; i++) {
        uint64_t bits = next(&s);
        double x;
        memcpy(&x, &bits, sizeof x);
        if (!isfinite(x)) continue;
        snprintf(text, sizeof text, "%.17g", x);
        as_strtod(text);
        snprintf(text, sizeof text, "%.15g", x);
        as_strtod(text);
    }
}

static void test_nasty(void **state)
{
    static const char *const texts[] = {
        "0",
        "-0",
        "+0",
        "0.0",
        "-0.0e5",
        "00012",
        "0e0",
        "0e999999999999999999",
        "-0e-99999999999999999999",
        "9007199254740991",
        "9007199254740992",
        "9007199254740993",
        "9007199254740992.5",
        "9007199254740993.0000000000000000000000000000000000000000000000000000000000000000000001",
        "2.2250738585072011e-308",
        "2.2250738585072012e-308",
        "2.2250738585072014e-308", /* once hung others */
        "4.9406564584124654e-324",
        "2.4703282292062327e-324",
        "2.4703282292062328e-324",
        "1e-400",
        "1.7976931348623157e308",
        "1.7976931348623158e308",
        "1.7976931348623159e308",
        "1e308",
        "1e309",
        "1e400",
        "0.1e310",
        "123456789012345e22",
        "123456789012345e23",
        "999999999999999e-22",
        "1e22",
        "1e23",
        "1e-22",
        "1e-23",
        "8.41e21",
        "9.5367431640625e-7",
        "0.000000000000000000000000000000000000000000000000001e51",
        "100000000000000000000000000000000000000000000000000e-50",
        "1.2000000000000002",
        "0.3",
        "6929495644600919.5",
        "7.2057594037927933e16",
        "5e-324",
        "1.00000000000000011102230246251565404236316680908203125",
        "1.00000000000000011102230246251565404236316680908203124",
        "1.00000000000000011102230246251565404236316680908203126"};
    (void)state;
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) as_strtod(texts[i]);
}

/* Digits by the thousand: a tie that only the very last digit breaks, and powers that cancel. */
static void test_long(void **state)
{
    static const char half[] = "1.00000000000000011102230246251565404236316680908203125";
    char text[6000];
    size_t n = sizeof half - 1;
    (void)state;
    memcpy(text, half, n);
    memset(text + n, '0', 3000);
    text[n + 3000] = '\0';
    as_strtod(text);
    text[n + 2999] = '1';
    as_strtod(text);
    memset(text, '0', 5000);
    memcpy(text, "0.", 2);
    memcpy(text + 4000, "12345e4000", 11);
    as_strtod(text);
    memset(text, '7', 5000);
    memcpy(text + 5000, "e-4990", 7);
    as_strtod(text);
    memcpy(text + 5000, "", 1);
    as_strtod(text);
}

static void stops_at(const char *text, const char *rest)
{
    double value = -777.0;
    const char *stop = sp_number_parse(text, text + strlen(text), &value);
    if (!rest) {
        assert_null(stop);
        assert_true(same_bits(value, -777.0));
        return;
    }
    assert_non_null(stop);
    assert_string_equal(stop, rest);
}

static void test_grammar(void **state)
{
    static const char *const none[] = {"",    "+",   "-",          ".",     ".5",    "-.5", "e5",
                                       "inf", "nan", "-inf",       "NAN",   " 1",    "\t1", "+-1",
                                       "--1", "x",   "\xc2\xa0 1", "1e400", "-1e309"};
    (void)state;
    for (size_t i = 0; i < sizeof none / sizeof *none; i++) stops_at(none[i], NULL);
    stops_at("0x10", "x10");
    stops_at("1.", ".");
    stops_at("1..2", "..2");
    stops_at("1.2.3", ".3");
    stops_at("1,5", ",5");
    stops_at("5eV", "eV");
    stops_at("5e", "e");
    stops_at("5e+", "e+");
    stops_at("5e-x", "e-x");
    stops_at("5E3E2", "E2");
    stops_at("12 mm", " mm");
    stops_at("1e5 Pa", " Pa");
    stops_at("1f", "f");
    stops_at("1_000", "_000");
}

/* `end` is where reading ends, whatever stands behind it. */
static void test_bounds(void **state)
{
    const char *text = "12.5e3";
    double value;
    (void)state;
    assert_ptr_equal(sp_number_parse(text, text + 1, &value), text + 1);
    assert_true(same_bits(value, 1.0));
    assert_ptr_equal(sp_number_parse(text, text + 3, &value), text + 2);
    assert_ptr_equal(sp_number_parse(text, text + 4, &value), text + 4);
    assert_true(same_bits(value, 12.5));
    assert_ptr_equal(sp_number_parse(text, text + 5, &value), text + 4);
    assert_null(sp_number_parse(text, text, &value));
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(test_random),  cmocka_unit_test(test_round_trip),
                                       cmocka_unit_test(test_nasty),   cmocka_unit_test(test_long),
                                       cmocka_unit_test(test_grammar), cmocka_unit_test(test_bounds)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
