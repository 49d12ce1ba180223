/* Short ways to write a row of a key table. Included by the tables only.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PAPER_KEYS_ROW_H
#define SP_PAPER_KEYS_ROW_H

#include "keys.h"

#define AT(field)      .at = offsetof(struct sp_design, field)
#define STEP_AT(field) .at = offsetof(struct sp_step, field)

#define GROUP(path_)               .path = path_, .shape = SP_SHAPE_GROUP, .keep = SP_KEEP_NOTHING
#define FITTED_GROUP(path_, field) .path = path_, .shape = SP_SHAPE_GROUP, .keep = SP_KEEP_BOOL, AT(field)
#define QUANTITY(path_, kind_, field)                                                                        \
    .path = path_, .shape = SP_SHAPE_QUANTITY, .kind = SP_K_##kind_, AT(field)
#define STEP_QUANTITY(path_, kind_, field)                                                                   \
    .path = path_, .shape = SP_SHAPE_QUANTITY, .kind = SP_K_##kind_, STEP_AT(field)
#define WORD(path_, list, keep_, field)                                                                      \
    .path = path_, .shape = SP_SHAPE_WORD, .keep = SP_KEEP_##keep_, .words = list, AT(field)
#define FLAG(path_, field)        .path = path_, .shape = SP_SHAPE_FLAG, .keep = SP_KEEP_BOOL, AT(field)
#define LIST(path_, kind_, field) .path = path_, .shape = SP_SHAPE_LIST, .kind = SP_K_##kind_, AT(field)
#define TABLE(path_, list, field)                                                                            \
    .path = path_, .shape = SP_SHAPE_TABLE, .columns = list, .width = sizeof(list) / sizeof(*(list)),        \
    AT(field)

/* A group that may be a list; COUNTED where its length is kept. */
#define LISTED(name, element, limit, text)                                                                   \
    .plural = name, .stride = sizeof(struct element), .most = limit, .listed = text
#define COUNTED(field) .count_at = offsetof(struct sp_design, field)

#define REQUIRED             .need = SP_NEED_ALWAYS
#define FOR_DRIVE            .need = SP_NEED_DRIVE
#define OPTIONAL             .need = SP_NEED_NOT
#define WHEN(text)           .when = text
#define DEFAULT(text)        .fallback = text
#define RULE(function, text) .fallback = text, .rule = function
#define RANGE(text)          .range = text
#define SAYS(text)           .meaning = text
#define OWN                  .basis = "own input"
#define PRACTICE             .basis = "common practice"
#define DEFINITION           .basis = "definition"
#define MEMORY               .basis = "from memory"
#define SOURCE(text)         .basis = text
#define END_OF_KEYS                                                                                          \
    {                                                                                                        \
        .path = NULL                                                                                         \
    }

#endif
