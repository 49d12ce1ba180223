/* Help and versions, on standard output. SPDX-License-Identifier: GPL-3.0-or-later */
#include <cjson/cJSON.h>
#include <gsl/gsl_version.h>
#include <string.h>
#include <sundials/sundials_version.h>

#include "verbs.h"

static void print_status(void)
{
    fputs("\nExit status: 0 the drive survives, or done; 1 it does not survive; 2 the input,\n"
          "the command line or a file is at fault; 3 the numerics failed.\n",
          stdout);
}

void sp_help(const struct sp_verb *const *verbs, size_t count)
{
    fputs("swirlpot: whether a ducted radiator keeps an engine cool over a whole drive\n\n"
          "usage: swirlpot VERB [OPTIONS] OPERAND\n\n",
          stdout);
    for (size_t i = 0; i < count; ++i)
        printf("  %-5s %-5s %s\n", verbs[i]->name, verbs[i]->operand, verbs[i]->summary);
    fputs("\n  swirlpot VERB --help   what a verb does and takes\n"
          "  swirlpot --version     versions of this program and its libraries\n",
          stdout);
    print_status();
}

void sp_help_verb(const struct sp_verb *verb)
{
    const struct sp_option *o;
    printf("usage: swirlpot %s %s [OPTIONS]\n\n%s\n\n", verb->name, verb->operand, verb->text);
    for (size_t i = 0; (o = sp_option_at(i)) != NULL; ++i) {
        char form[60];
        if (!strchr(verb->options, o->letter) && o->letter != 'h') continue;
        snprintf(form, sizeof form, "--%s%s%s", o->name, o->argument ? " " : "",
                 o->argument ? o->argument : "");
        printf("  %c%c%c %-23s %s\n", o->shorthand ? '-' : ' ', o->shorthand ? o->letter : ' ',
               o->shorthand ? ',' : ' ', form, o->meaning);
    }
    print_status();
}

void sp_version_print(void)
{
    char sundials[40];
    if (SUNDIALSGetVersion(sundials, sizeof sundials) != 0) strcpy(sundials, "unknown");
    printf("swirlpot %s\nSUNDIALS %s, GSL %s, cJSON %s, UDUNITS 2\n", sp_version(), sundials, gsl_version,
           cJSON_Version());
}
