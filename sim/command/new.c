/* swirlpot new: a first case to work from. SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "swirlpot/paper.h"
#include "verbs.h"

/* One of the things a first case needs. */
struct wish {
    struct sp_wanted wanted;
    const char *question;
};

static const struct wish wish[] = {
    {{"--mass", SP_K_MASS, 50.0, 20000.0, "50 kg to 20000 kg, as \"900 kg\""},
     "mass with driver and fuel, as 900 kg"},
    {{"--displacement", SP_K_VOLUME, 0.05e-3, 30e-3, "0.05 l to 30 l, as \"2.0 l\""},
     "swept volume of the engine, as 2.0 l"},
    {{"--power", SP_K_POWER, 2e3, 1.5e6, "2 kW to 1500 kW, as \"150 kW\""},
     "rated power of the engine, as 150 kW"},
};

enum { WISHES = sizeof wish / sizeof wish[0], ANSWER_MOST = 200 };

/* Reads one line from the terminal; false at its end. */
static bool read_line(char *to, size_t size)
{
    if (!fgets(to, (int)size, stdin)) return false;
    to[strcspn(to, "\r\n")] = '\0';
    return true;
}

/* Asks until the answer will do. */
static bool ask(struct sp_units *u, const struct wish *w, double *si)
{
    char line[ANSWER_MOST];
    for (;;) {
        struct sp_complaints c = {0};
        fprintf(stderr, "%s: ", w->question);
        if (!read_line(line, sizeof line)) return false;
        bool good = sp_argument_quantity(u, &w->wanted, line, si, &c);
        sp_complaints_print(&c, false, stderr);
        sp_complaints_free(&c);
        if (good) return true;
    }
}

static bool fulfil(struct sp_units *u, const struct wish *w, const char *given, double *si,
                   struct sp_complaints *complaints)
{
    if (given) return sp_argument_quantity(u, &w->wanted, given, si, complaints);
    if (u && isatty(STDIN_FILENO) && ask(u, w, si)) return true;
    struct sp_place at = {.path = w->wanted.option};
    sp_complain(complaints, &at, "nothing", w->wanted.range, NULL);
    return false;
}

static enum sp_status run(const struct sp_arguments *a)
{
    const char *given[WISHES] = {a->mass, a->displacement, a->power};
    struct sp_complaints complaints = {0}, cautions = {0};
    struct sp_units *u = sp_units_open();
    double si[WISHES] = {0};
    bool good = true;
    for (size_t i = 0; i < WISHES; ++i)
        good = fulfil(u, &wish[i], given[i], &si[i], &complaints) && good;
    struct sp_starter starter = {si[0], si[1], si[2]};
    enum sp_status status = good ? sp_case_new(&starter, a->operand, &complaints) : SP_INPUT;
    sp_units_close(u);
    if (status == SP_OK)
        printf("Wrote case.json, car.json and keys.txt into %s.\n"
               "The values are likely ones, not your car's: measure and replace them, then\n"
               "  swirlpot run %s/case.json\n",
               a->operand, a->operand);
    return sp_speak(status, &complaints, &cautions);
}

const struct sp_verb sp_verb_new = {
    "new",
    "DIR",
    "mdp",
    "writes a first case to work from",
    "Writes case.json, car.json and keys.txt into DIR, which is made when missing;\n"
    "nothing is overwritten. What is not given is asked for, on a terminal.",
    run};
