/* Reading a case, room by room: tree, walk, fill, settle, check. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PAPER_CASE_H
#define SP_PAPER_CASE_H

#include "base/json.h"
#include "keys.h"

enum { SP_STEPS_MAX = 10000, SP_ROWS_MAX = 4096, SP_PATH_MAX = 256 };

/* What one reading works on. */
struct sp_reader {
    struct sp_units *units;
    const char *name; /* the case's file, for complaints and as the base of relative paths */
    enum sp_purpose purpose;
    bool no_files;        /* a car given as a path is refused: for fuzzers */
    struct sp_json *tree; /* case, car and overrides merged */
    bool no_car;          /* the car could not be had: nothing is said of its keys */
    bool no_memory;
    struct sp_design *design;
    struct sp_complaints *complaints, *cautions;
};

/* Reads, or parses `text` when it is not NULL, and leaves tree and design in the reader. False: complaints
 * say why. `r` comes zeroed but for units, name, purpose, no_files, complaints and cautions. */
bool sp_case_open(struct sp_reader *r, const char *text, size_t size, char *const *set, size_t sets);
/* Writes all inputs of an opened reader, as text or as one JSON document. */
void sp_case_show_all(struct sp_reader *r, FILE *to, bool json);
/* Frees what the reader holds; the design too, unless it was taken away. */
void sp_case_close(struct sp_reader *r);

/* ---- steps of it ----------------------------------------------------------------------------------- */

bool sp_case_load(struct sp_reader *r, const char *text, size_t size, char *const *set, size_t sets);
void sp_case_walk(struct sp_reader *r);   /* unknown keys, objects where objects belong */
void sp_case_fill(struct sp_reader *r);   /* values and plain defaults into the design */
void sp_case_settle(struct sp_reader *r); /* which laws hold; then defaults by rule; then what follows */
void sp_case_check(struct sp_reader *r);  /* how values stand to each other: car */
void sp_case_check_core(struct sp_reader *r);
void sp_case_check_drive(struct sp_reader *r);
void sp_case_doubt(struct sp_reader *r); /* cautions */

/* --set: the path as the tables have it ("duct.exit.area" is "car.duct.exit.area"). */
struct sp_setting {
    const char *text; /* PATH=VALUE */
    char path[SP_PATH_MAX];
};
/* Splits and looks the path up; false with a complaint when there is no such key. */
bool sp_setting_read(struct sp_reader *r, const char *text, struct sp_setting *out);
void sp_setting_apply(struct sp_reader *r, const struct sp_setting *s);

/* ---- places ---------------------------------------------------------------------------------------- */

/* The node at a path such as "drive[1].speed" or "car.duct"; NULL if there is none. */
struct sp_json *sp_case_node(const struct sp_json *tree, const char *path);
bool sp_case_given(const struct sp_reader *r, const char *path);

/* A fault (or caution) at a path; its place is the node there, or the nearest one above it. `found` NULL:
 * what stands there. */
void sp_case_fault(struct sp_reader *r, const char *path, const char *found, const char *expected,
                   const char *hint);
/* The same with the node known. */
void sp_case_fault_at(struct sp_reader *r, const struct sp_json *node, const char *path, const char *found,
                      const char *expected, const char *hint);
void sp_case_caution(struct sp_reader *r, const char *path, const char *found, const char *expected);

/* What belongs at a row's place, as a clause after "expected". */
void sp_key_expected(const struct sp_key *row, char *out, size_t size);

/* `path` as seen from the file that names it; NULL without memory. */
char *sp_path_join(const char *file, const char *path);

/* ---- values ---------------------------------------------------------------------------------------- */

/* Where a row's value lies. */
void *sp_key_place(const struct sp_key *row, struct sp_design *d, size_t step);
/* A row's value where it is one double; NAN when not. */
double sp_key_double(const struct sp_key *row, const struct sp_design *d, size_t step);
/* Keeps one number as the row says. */
void sp_key_store(const struct sp_key *row, void *to, double value);
/* Reads a node into its place; complains and leaves the place as it is when it will not do. */
void sp_case_value(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                   const char *path, void *to);
void sp_case_columns(struct sp_reader *r, const struct sp_json *node, const char *path, struct sp_step *step);

#endif
