/* A strict reading of JSON: our scanner finds what cJSON lets pass, cJSON parses, and the result is
 * a tree that knows on which line of which file each value stands. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_BASE_JSON_H
#define SP_BASE_JSON_H

#include "swirlpot/base.h"

enum sp_json_type { SP_JSON_NULL, SP_JSON_FALSE, SP_JSON_TRUE, SP_JSON_NUMBER, SP_JSON_STRING,
                    SP_JSON_ARRAY, SP_JSON_OBJECT };

struct sp_json {
    enum sp_json_type type;
    char *key;            /* name within an object, else NULL */
    char *text;           /* a string's text; a number's text as written */
    double number;
    struct sp_json *child, *next;
    char *file, *named_by; /* own copies */
    long line;
};

enum { SP_JSON_DEPTH = 64 }; /* deepest nesting accepted */

/* Parses `size` bytes. On a fault of syntax returns NULL and adds exactly one complaint (trailing text, text cut
 * short, 1e400, NaN, 01, raw control characters, invalid UTF-8, nesting past SP_JSON_DEPTH, NUL bytes or \u0000).
 * Keys that stand twice add a complaint each, but the tree is returned with all of them, so that other faults
 * can be told in the same go: a caller that was given complaints has no usable tree. */
struct sp_json *sp_json_parse(const char *name, const char *named_by, const char *text, size_t size,
                              struct sp_complaints *complaints);

/* Reads a whole file (at most 64 MB) and parses it. */
struct sp_json *sp_json_read(const char *file, const char *named_by, struct sp_complaints *complaints);

/* A value for --set: JSON if the text parses as JSON, else a string. `name` stands for the file. */
struct sp_json *sp_json_value(const char *name, const char *text);

struct sp_json *sp_json_member(const struct sp_json *object, const char *key); /* or NULL */
void sp_json_free(struct sp_json *node); /* with its following siblings */

/* Takes `value` (ownership passes) into `object` under `key`, replacing what stood there. */
bool sp_json_put(struct sp_json *object, const char *key, struct sp_json *value);

/* Removes and frees a member; false when it is not there. */
bool sp_json_drop(struct sp_json *object, const char *key);

/* Lays `over` upon `under`: members of objects are merged key by key, anything else replaces.
 * Both are consumed; returns the merged tree. */
struct sp_json *sp_json_merge(struct sp_json *under, struct sp_json *over);

/* What a value looks like in a complaint: `"450 cm"`, `12`, `an object`, cut at 60 characters. */
void sp_json_describe(const struct sp_json *node, char *out, size_t size);

#endif
