/* How temperatures, times and places read in a verdict. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PAPER_RESULT_WORDS_H
#define SP_PAPER_RESULT_WORDS_H

#include "swirlpot/result.h"

/* A short text by value, so that several fit into one call of printf. */
struct sp_words {
    char text[200];
};

/* `exact`: more digits instead of whole degrees, minutes and so on. */
struct sp_words sp_words_degrees(double kelvin, bool exact);    /* "105 degC" */
struct sp_words sp_words_kelvin(double difference, bool exact); /* "5 K", "less than 1 K"; its amount only */
/* A limit as exactly as it was given, to six digits: "105.2 degC", "12 K". */
struct sp_words sp_words_limit(double limit, bool difference);
struct sp_words sp_words_time(double seconds, bool exact);      /* "12 min 31 s" */
struct sp_words sp_words_distance(double metres, bool exact);   /* "3.42 km" */
struct sp_words sp_words_energy(double joules, bool exact);     /* "1.23 MJ" */
struct sp_words sp_words_step(const struct sp_design *d, size_t step); /* "drive[1] (trace hill.csv)" */
struct sp_words sp_words_place(const struct sp_design *d, const struct sp_peak *p, bool exact);

struct sp_words sp_words_amount(double amount, bool exact); /* "203", "4.1", "0.25": never with an exponent */

/* Only an alarm's temperature was passed: no limit is broken and nothing gives way. */
bool sp_mere_alarm(const struct sp_failure *f);
/* The first failure that is more than that; NULL: none. */
const struct sp_failure *sp_first_break(const struct sp_result *r);

/* What happened on the way: at most a dozen lines, the cycles of one kind folded into one. */
void sp_report_happenings(const struct sp_report *r, bool exact, FILE *to);

#endif
