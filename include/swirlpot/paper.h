/* swirlpot/paper.h - case files in: reading, checking, showing and starting them.
 *
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_PAPER_H
#define SWIRLPOT_PAPER_H

#include "swirlpot/design.h"

#ifdef __cplusplus
extern "C" {
#endif

/* ---- keys -------------------------------------------------------------------------------------- */

/* What a default or a number of the trade rests on. */
enum sp_basis { SP_BASIS_NONE, SP_BASIS_SOURCE, SP_BASIS_PRACTICE, SP_BASIS_MEMORY, SP_BASIS_DEFINITION };

/* One key of the case, as declared once in the key tables; what outsiders may know of it. */
struct sp_key_info {
    const char *path;     /* "car.duct.inlet.area", "drive[].repeat" */
    const char *type;     /* "area", "word", "table of volume flow and pressure", ... */
    const char *unit;     /* SI unit, "" if none */
    const char *fallback; /* default as text with unit; NULL: required or optional, see `need` */
    const char *need;     /* "required", "optional", "default", or when it is needed, in words */
    const char *range;    /* in words */
    const char *meaning;
    const char *basis;    /* "common practice", "definition", a source */
};

SP_API size_t sp_key_count(void);
SP_API bool sp_key_at(size_t i, struct sp_key_info *out);

/* ---- reading ------------------------------------------------------------------------------------ */

/* What the caller wants to do: a duct needs only `air` and `car.duct`. */
enum sp_purpose { SP_FOR_DUCT, SP_FOR_DRIVE };

/* Reads a case, the car it names and the overrides `set` ("PATH=VALUE" each). Returns the design, or
 * NULL with every fault of the files in `complaints`. `cautions` receives what is doubtful but legal. */
SP_API struct sp_design *sp_case_read(struct sp_units *u, const char *file, char *const *set, size_t sets,
                                      enum sp_purpose purpose, struct sp_complaints *complaints,
                                      struct sp_complaints *cautions);

/* The same from text in memory; `name` stands for the file. For tests, fuzzers and studies. */
SP_API struct sp_design *sp_case_parse(struct sp_units *u, const char *name, const char *text, size_t size,
                                       char *const *set, size_t sets, enum sp_purpose purpose,
                                       struct sp_complaints *complaints, struct sp_complaints *cautions);

/* How many values a case leaves at defaults that rest on common practice, or on memory alone. */
struct sp_defaults { size_t practice, memory; };
SP_API bool sp_case_defaults(struct sp_units *u, const char *file, char *const *set, size_t sets, struct sp_defaults *out);

/* Writes every input as understood: path, the user's own text, SI value, basis; defaults marked. Reads
 * the files again. Returns as sp_case_read. */
SP_API enum sp_status sp_case_show(struct sp_units *u, const char *file, char *const *set, size_t sets,
                                   FILE *to, struct sp_complaints *complaints);

/* The same as one JSON document (array of objects path, text, si, unit, basis, default). */
SP_API enum sp_status sp_case_show_json(struct sp_units *u, const char *file, char *const *set,
                                        size_t sets, FILE *to, struct sp_complaints *complaints);

/* Writes the reference page of all keys (docs/case-file.md is this text). */
SP_API void sp_keys_document(FILE *to);

/* ---- starting ------------------------------------------------------------------------------------ */

/* What `swirlpot new` asks for. */
struct sp_starter {
    double mass, displacement, rated_power; /* kg, m3, W */
};

/* Writes DIR/case.json and DIR/car.json (DIR is made when missing; nothing is overwritten) with a short
 * explanation of each key in DIR/keys.txt. */
SP_API enum sp_status sp_case_new(const struct sp_starter *s, const char *dir,
                                  struct sp_complaints *complaints);

#ifdef __cplusplus
}
#endif
#endif
