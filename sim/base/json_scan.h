/* The strict scanner that goes over a JSON text before cJSON does. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_BASE_JSON_SCAN_H
#define SP_BASE_JSON_SCAN_H

#include "swirlpot/base.h"

/* Bounds that no honest case comes near; they keep time and memory in proportion. */
enum { SP_JSON_VALUES = 1000000, SP_JSON_KEYS = 1000 /* in one object */ };

/* Where one value stands. */
struct sp_json_mark {
    long line, key_line; /* of the value, and of its key within an object */
    size_t at, length;   /* the text of a number */
};

/* The marks of all values, each before its children, in the order of the text. */
struct sp_json_marks {
    struct sp_json_mark *list;
    size_t count, room;
};

/* Goes over the text: RFC 8259 to the letter, valid UTF-8, no NUL, finite numbers, nesting, bounds; not
 * duplicate keys. False after one complaint. `out` starts zeroed; free its list in either case. */
bool sp_json_scan(const char *name, const char *named_by, const char *text, size_t size,
                  struct sp_json_marks *out, struct sp_complaints *complaints);

#endif
