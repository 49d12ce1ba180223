/* The command: what belongs to the process is set here, the rest is a verb's.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <errno.h>
#include <gsl/gsl_errno.h>
#include <locale.h>
#include <stdlib.h>
#include <string.h>
#include <udunits2.h>

#include "verbs.h"

static const struct sp_verb *const verb[] = {&sp_verb_run, &sp_verb_duct, &sp_verb_show, &sp_verb_new};

enum { VERBS = sizeof verb / sizeof verb[0] };

static enum sp_status unknown_verb(const char *word)
{
    const char *known[VERBS];
    char expected[120];
    for (size_t i = 0; i < VERBS; ++i) known[i] = verb[i]->name;
    const char *near = sp_nearest(word, known, VERBS);
    snprintf(expected, sizeof expected, "run, duct, show or new%s%s%s", near ? "; nearest is '" : "",
             near ? near : "", near ? "'" : "");
    return sp_usage_fault(word, *word == '-' ? "an unknown option" : "an unknown verb", expected);
}

static enum sp_status run_verb(const struct sp_verb *v, int argc, char **argv)
{
    struct sp_arguments a;
    enum sp_status status = SP_INPUT;
    if (sp_arguments_read(v, argc, argv, &a)) {
        if (a.help) {
            sp_help_verb(v);
            status = SP_OK;
        } else {
            status = v->run(&a);
        }
    }
    sp_arguments_free(&a);
    return status;
}

static enum sp_status dispatch(int argc, char **argv)
{
    if (argc < 2) return sp_usage_fault("swirlpot", "no verb", "run, duct, show or new");
    const char *word = argv[1];
    bool version = !strcmp(word, "--version");
    if (version || !strcmp(word, "--help") || !strcmp(word, "-h")) {
        if (argc > 2) return sp_usage_fault(argv[2], "one operand too many", "nothing behind it");
        if (version) sp_version_print();
        else sp_help(verb, VERBS);
        return SP_OK;
    }
    for (size_t i = 0; i < VERBS; ++i)
        if (!strcmp(word, verb[i]->name)) return run_verb(verb[i], argc - 1, argv + 1);
    return unknown_verb(word);
}

/* A full disk shows itself only when the buffer goes out. */
static enum sp_status close_output(enum sp_status status)
{
    bool failed = ferror(stdout) != 0;
    errno = 0;
    if (fclose(stdout) == 0 && !failed) return status;
    fprintf(stderr, "swirlpot: standard output: found %s; expected a place that can be written\n",
            errno ? strerror(errno) : "a failing write");
    return SP_INPUT;
}

int main(int argc, char **argv)
{
    setlocale(LC_NUMERIC, "C");
    gsl_set_error_handler_off();
    ut_set_error_message_handler(ut_ignore);
    return close_output(dispatch(argc, argv));
}
