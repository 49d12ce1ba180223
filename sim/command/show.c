/* swirlpot show: every input as understood. SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/paper.h"
#include "verbs.h"

static enum sp_status run(const struct sp_arguments *a)
{
    struct sp_complaints complaints = {0}, cautions = {0};
    struct sp_units *u = sp_units_open();
    enum sp_status (*show)(struct sp_units *, const char *, char *const *, size_t, FILE *,
                           struct sp_complaints *) = a->json ? sp_case_show_json : sp_case_show;
    enum sp_status status = show(u, a->operand, a->sets.list, a->sets.count, stdout, &complaints);
    sp_units_close(u);
    return sp_speak(status, &complaints, &cautions);
}

const struct sp_verb sp_verb_show = {
    "show",
    "CASE",
    "sj",
    "shows every input as understood",
    "Shows every input with its path, your own text, the value in SI and where it\n"
    "comes from; defaults are marked, with what they rest on.",
    run};
