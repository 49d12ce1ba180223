/* Decimal numbers, read exactly and fast.
 *
 * A decimal whose digits form an integer w <= 2^53 and whose power of ten k has |k| <= 22 needs one
 * multiplication or division of two exact doubles, and IEEE 754 rounds that one operation correctly
 * (W. D. Clinger, "How to read floating point numbers accurately", PLDI 1990). Anything else goes to
 * strtod, written anew without a decimal point so that the locale does not matter.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/number.h"

#include <math.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>

enum {
    DIGITS_KEPT = 800,      /* more than the 767 that can decide how a double is rounded */
    POWER_MOST = 100000000, /* powers of ten are held at this; far past any double */
    FAST_DIGITS = 15,
    FAST_POWER = 22
};

/* The parts of a number, as they stand in the text. */
struct parts {
    bool minus;
    const char *whole, *whole_end; /* digits before the point */
    const char *part, *part_end;   /* digits behind it */
    long power;                    /* the written power of ten */
};

static bool digit(const char *p, const char *end)
{
    return p < end && (unsigned)(*p - '0') < 10U;
}

/* The exponent at p, or p itself where none stands. */
static const char *read_power(const char *p, const char *end, long *power)
{
    const char *at = p + 1;
    bool minus = false;
    long value = 0;
    if (p == end || (*p != 'e' && *p != 'E')) return p;
    if (at < end && (*at == '+' || *at == '-')) minus = *at++ == '-';
    if (!digit(at, end)) return p;
    for (; digit(at, end); at++)
        if (value < POWER_MOST) value = value * 10 + (*at - '0');
    *power = minus ? -value : value;
    return at;
}

/* Appends the digits [p, end) to `text`, without leading zeros and at most DIGITS_KEPT; `dropped` counts
 * the rest and `sticky` tells whether any of the rest is not zero. */
static size_t keep_digits(char *text, size_t n, const char *p, const char *end, long *dropped, bool *sticky)
{
    for (; p < end; p++) {
        if (n == 0 && *p == '0') continue;
        if (n < DIGITS_KEPT) {
            text[n++] = *p;
        } else {
            (*dropped)++;
            *sticky = *sticky || *p != '0';
        }
    }
    return n;
}

/* The long way: any number of digits, any power. */
static double slow(const struct parts *n)
{
    char text[DIGITS_KEPT + 40];
    long dropped = 0, power;
    bool sticky = false;
    size_t length = keep_digits(text, 0, n->whole, n->whole_end, &dropped, &sticky);
    length = keep_digits(text, length, n->part, n->part_end, &dropped, &sticky);
    if (length == 0) return 0.0;
    power = n->power - (long)(n->part_end - n->part) + dropped;
    if (sticky) { /* a digit behind all others, so that a tie is seen not to be one */
        text[length++] = '1';
        power--;
    }
    snprintf(text + length, sizeof text - length, "e%ld", power);
    return strtod(text, NULL);
}

static double value_of(const struct parts *n, uint64_t w, long digits)
{
    static const double ten[FAST_POWER + 1] = {1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,
                                               1e8,  1e9,  1e10, 1e11, 1e12, 1e13, 1e14, 1e15,
                                               1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};
    long power = n->power - (long)(n->part_end - n->part);
    if (digits > FAST_DIGITS || power > FAST_POWER || power < -FAST_POWER) return slow(n);
    return power < 0 ? (double)w / ten[-power] : (double)w * ten[power];
}

const char *sp_number_parse(const char *p, const char *end, double *out)
{
    struct parts n = {0};
    uint64_t w = 0; /* wraps when there are many digits; it is not used then */
    double value;
    if (p < end && (*p == '+' || *p == '-')) n.minus = *p++ == '-';
    n.whole = p;
    for (; digit(p, end); p++) w = w * 10 + (uint64_t)(*p - '0');
    n.whole_end = n.part = n.part_end = p;
    if (n.whole == p) return NULL;
    if (p < end && *p == '.' && digit(p + 1, end)) {
        n.part = ++p;
        for (; digit(p, end); p++) w = w * 10 + (uint64_t)(*p - '0');
        n.part_end = p;
    }
    p = read_power(p, end, &n.power);
    value = value_of(&n, w, (long)(n.whole_end - n.whole) + (long)(n.part_end - n.part));
    if (!isfinite(value)) return NULL;
    *out = n.minus ? -value : value;
    return p;
}
