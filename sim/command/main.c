/* The command: what belongs to the process is set here, the rest is a verb's.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <errno.h>
#include <fcntl.h>
#include <gsl/gsl_errno.h>
#include <locale.h>
#include <stdlib.h>
#include <string.h>
#include <udunits2.h>
#include <unistd.h>

#include "verbs.h"

static const struct sp_verb *const verb[] = {&sp_verb_run, &sp_verb_hold, &sp_verb_duct, &sp_verb_show, &sp_verb_new};

enum { VERBS = sizeof verb / sizeof verb[0] };

static enum sp_status unknown_verb(const char *word)
{
    const char *known[VERBS];
    char expected[120];
    for (size_t i = 0; i < VERBS; ++i)
        known[i] = verb[i]->name;
    const char *near = sp_nearest(word, known, VERBS);
    if (*word == '-')
        return sp_usage_fault(word, "an unknown option", "--help, --version, or a verb and its options");
    snprintf(expected, sizeof expected, "run, hold, duct, show or new%s%s%s", near ? "; nearest is '" : "",
             near ? near : "", near ? "'" : "");
    return sp_usage_fault(word, "an unknown verb", expected);
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
    if (argc < 2) return sp_usage_fault(NULL, "no verb", "run, hold, duct, show or new");
    const char *word = argv[1];
    bool version = !strcmp(word, "--version");
    if (version || !strcmp(word, "--help") || !strcmp(word, "-h")) {
        if (argc > 2) return sp_usage_fault(argv[2], "one operand too many", "nothing behind it");
        if (version)
            sp_version_print();
        else
            sp_help(verb, VERBS);
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

/* A file opened while a standard stream is closed would take its place, and what is printed would end up in
 * it. Writing to a closed output must fail, so that it is opened for reading. */
static void hold_standard_streams(void)
{
    for (int fd = STDIN_FILENO; fd <= STDERR_FILENO; ++fd)
        if (fcntl(fd, F_GETFD) == -1) (void)!open("/dev/null", fd == STDERR_FILENO ? O_WRONLY : O_RDONLY);
}

int main(int argc, char **argv)
{
    hold_standard_streams();
    setlocale(LC_NUMERIC, "C");
    gsl_set_error_handler_off();
    ut_set_error_message_handler(ut_ignore);
    return (int)close_output(dispatch(argc, argv));
}
