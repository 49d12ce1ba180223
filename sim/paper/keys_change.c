/* Keys of what changes during the drive. Kept in struct sp_planned while the case is read.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

#define PLANNED(path_, kind_, field)                                                                         \
    .path = path_, .shape = SP_SHAPE_QUANTITY, .kind = SP_K_##kind_, .at = offsetof(struct sp_planned, field)

const struct sp_key sp_keys_change[] = {
    {.path = "changes",
     .shape = SP_SHAPE_CHANGES,
     .keep = SP_KEEP_NOTHING,
     OPTIONAL,
     .type = "list of changes",
     SAYS("what changes during the drive: entries in any order, at most 200 changes in all")},
    {GROUP("changes[]"), OPTIONAL,
     SAYS("one change, or the same several times; each counts from the values as changed until then")},
    {PLANNED("changes[].at", TIME, at), REQUIRED, RANGE("0 s to 700 d"), SAYS("from the start of the drive"),
     OWN},
    {PLANNED("changes[].every", TIME, every), WHEN("with times"), RANGE("above 0 s, at most 7 d"),
     SAYS("from one time to the next"), OWN},
    {PLANNED("changes[].times", NUMBER, times), WHEN("with every"), RANGE("1 to 200"), .whole = true,
     SAYS("how often in all, the first included"), OWN},
    {.path = "changes[].set",
     .shape = SP_SHAPE_SETTINGS,
     .keep = SP_KEEP_NOTHING,
     WHEN("one of set and add, or both"),
     .type = "object of paths and values",
     SAYS("paths as for `--set`, with their values from then on: `{\"duct.inlet.blocked\": \"40 %\", "
          "\"duct.cores[1].blocked\": \"10 %\"}`"),
     OWN},
    {.path = "changes[].add",
     .shape = SP_SHAPE_SETTINGS,
     .keep = SP_KEEP_NOTHING,
     WHEN("one of set and add, or both"),
     .type = "object of paths and values",
     SAYS("paths of numbers, with what is added to each, every time: `{\"duct.core.blocked\": \"1 %\"}`"),
     OWN},
    END_OF_KEYS};
