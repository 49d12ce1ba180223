/* Assertions for the tests: doubles are compared as doubles, NaN never passes.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_TESTS_CHECK_H
#define SP_TESTS_CHECK_H

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdio.h>
#include <cmocka.h>

/* How often a test repeats a random draw: a share of `full` under the sanitizers, which take ten times as long. */
#if defined(__has_feature)
#if __has_feature(address_sanitizer)
#define SP_TESTS_SANITIZED 1
#endif
#endif
#if defined(__SANITIZE_ADDRESS__) && !defined(SP_TESTS_SANITIZED)
#define SP_TESTS_SANITIZED 1
#endif
#ifdef SP_TESTS_SANITIZED
enum { SP_TESTS_SHARE = 5 };
#else
enum { SP_TESTS_SHARE = 1 };
#endif

static inline void check_close_at(double got, double want, double rtol, double atol, const char *what,
                                  const char *file, int line)
{
    double off = fabs(got - want);
    if (off <= rtol * fabs(want) + atol) return; /* false on NaN */
    print_error("%s:%d: %s is %.17g, expected %.17g (off by %.3g, allowed %.3g)\n", file, line, what, got,
                want, off, rtol * fabs(want) + atol);
    _fail(file, line);
}

/* |got - want| <= rtol |want| + atol */
#define check_close(got, want, rtol, atol) check_close_at(got, want, rtol, atol, #got, __FILE__, __LINE__)

/* low <= got <= high */
static inline void check_within_at(double got, double low, double high, const char *what, const char *file,
                                   int line)
{
    if (got >= low && got <= high) return;
    print_error("%s:%d: %s is %.17g, expected %.9g to %.9g\n", file, line, what, got, low, high);
    _fail(file, line);
}
#define check_within(got, low, high) check_within_at(got, low, high, #got, __FILE__, __LINE__)

#endif
