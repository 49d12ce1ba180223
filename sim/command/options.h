/* The command line: options, operands and complaints about them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_COMMAND_OPTIONS_H
#define SP_COMMAND_OPTIONS_H

#include "swirlpot/base.h"

/* All options of all verbs; a verb takes those whose letter stands in its list. */
struct sp_option {
    int letter; /* what it is called inside; also the short option where `shorthand` is set */
    bool shorthand;
    const char *name;     /* without dashes */
    const char *argument; /* what its value is called in the help; NULL: takes none */
    bool repeatable;
    const char *meaning;
};

const struct sp_option *sp_option_at(size_t i); /* NULL past the last */

/* A list of texts that point into argv. */
struct sp_texts {
    char **list;
    size_t count;
};

/* A command line as understood. Values are NULL where not given. */
struct sp_arguments {
    const char *operand;
    struct sp_texts sets, speeds, powers, grades; /* powers, grades: what is held */
    const char *heat, *fan, *directory, *every, *mass, *displacement, *power, *engine_speed;
    bool json, exact, ceiling, help;
};

struct sp_verb {
    const char *name, *operand; /* "CASE" */
    const char *options;        /* letters */
    const char *summary, *text; /* one line; a paragraph or two */
    enum sp_status (*run)(const struct sp_arguments *a);
};

/* Reads argv[1..] for a verb; argv[0] is the verb's name. False after complaints on standard error. Free
 * with sp_arguments_free whatever came. */
bool sp_arguments_read(const struct sp_verb *verb, int argc, char **argv, struct sp_arguments *out);
void sp_arguments_free(struct sp_arguments *a);

/* One line on standard error about a word of the command line, and where help is. Returns SP_INPUT. */
enum sp_status sp_usage_fault(const char *word, const char *what, const char *expected);

/* The one of `known` (`count` names) nearest to `word`; NULL when none is near. */
const char *sp_nearest(const char *word, const char *const *known, size_t count);

/* Reads the value of an option as a quantity within [least, most] of SI; complains otherwise. */
struct sp_wanted {
    const char *option;
    enum sp_kind kind;
    double least, most;
    const char *range;
};
bool sp_argument_quantity(struct sp_units *u, const struct sp_wanted *w, const char *text, double *si,
                          struct sp_complaints *complaints);

/* Prints complaints and cautions, frees both, and returns `status`. */
enum sp_status sp_speak(enum sp_status status, struct sp_complaints *complaints,
                        struct sp_complaints *cautions);

#endif
