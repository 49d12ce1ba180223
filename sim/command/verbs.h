/* The verbs. SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_COMMAND_VERBS_H
#define SP_COMMAND_VERBS_H

#include "options.h"

extern const struct sp_verb sp_verb_run, sp_verb_hold, sp_verb_duct, sp_verb_show, sp_verb_new;

/* Help of the whole command (verb NULL) or of one verb, on standard output. */
void sp_help(const struct sp_verb *const *verbs, size_t count);
void sp_help_verb(const struct sp_verb *verb);
void sp_version_print(void);

#endif
