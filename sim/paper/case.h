/* Reading a case, room by room: tree, walk, fill, settle, check. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PAPER_CASE_H
#define SP_PAPER_CASE_H

#include "base/json.h"
#include "keys.h"

enum { SP_STEPS_MAX = 10000, SP_ROWS_MAX = 4096, SP_PATH_MAX = 256, SP_CHANGES_MAX = 200 };

/* A value that a change put into the tree: its path there, and the path in the file it came from. */
struct sp_placed {
    char path[SP_PATH_MAX], source[SP_PATH_MAX];
    size_t turn; /* the last that did */
};

/* One change as it comes to pass. */
struct sp_turn {
    double at;                  /* s from the start of the drive */
    size_t entry, order;        /* which of `changes` it is of; its place before sorting */
    const struct sp_json *node; /* that entry */
};

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
    struct sp_turn *turn; /* a turn for each change of the design */
    bool changed;         /* this is the reading of a changed car: its drive is left alone */
    struct sp_placed *placed;
    size_t places;
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
void sp_case_check_core(struct sp_reader *r, const struct sp_key_spot *at); /* one core */
void sp_case_check_fitted(struct sp_reader *r); /* cores, fans, inlets, diffusers beyond the plain ones */
void sp_case_check_loop(struct sp_reader *r); /* the coolant loop */
void sp_case_check_engine(struct sp_reader *r); /* engine, oils, charge air; with its cautions */
void sp_case_check_drive(struct sp_reader *r);
void sp_case_doubt(struct sp_reader *r); /* cautions */
/* Builds the changed designs, one a change. */
void sp_case_changes(struct sp_reader *r);

/* ---- settings: --set, and what a change sets ------------------------------------------------------- */

enum { SP_LABEL_MAX = 600 };

struct sp_setting {
    char written[SP_PATH_MAX];  /* the path as written */
    char path[SP_PATH_MAX];     /* the same from the top: "duct.exit.area" is "car.duct.exit.area" */
    char place[SP_PATH_MAX];    /* where it is in the tree: known when it is applied */
    const struct sp_key *row;   /* the row of that path, or of the table that it leads into */
    bool list, inside;          /* it is the row's list as a whole; it leads into the row's table */
    struct sp_key_spot at;
    const char *text;           /* the value, as text ... */
    const struct sp_json *node; /* ... or as a node, which is copied */
    struct sp_place source;     /* for complaints */
    char label[SP_LABEL_MAX];   /* a long one is cut */
};

/* From PATH=VALUE; false with a complaint when there is no such key. */
bool sp_setting_read(struct sp_reader *r, const char *text, struct sp_setting *out);
/* From a path alone; `source` is where complaints shall point. */
bool sp_setting_look_up(struct sp_reader *r, const char *path, const struct sp_place *source,
                        struct sp_setting *out);
/* Puts the value into the tree; false with a complaint when there is no such place. */
bool sp_setting_apply(struct sp_reader *r, struct sp_setting *s);
/* Where in the tree it goes, into s->place; false with a complaint when no such place is there. */
bool sp_setting_resolve(struct sp_reader *r, struct sp_setting *s);

/* ---- changes --------------------------------------------------------------------------------------- */

/* The changes as they come to pass, by time; NULL with complaints, or when there are none. */
struct sp_turn *sp_case_turns(struct sp_reader *r, size_t *count);
/* May a change set that? False with a complaint that says why not. */
bool sp_change_allowed(struct sp_reader *r, const struct sp_setting *s);
/* Is the changed design built as the first one was? False with a complaint. */
bool sp_change_same_build(struct sp_reader *r, const struct sp_design *first);
/* The value that a number has when `node` is added to it, to be freed; NULL with a complaint. `now` is the
 * design so far; where it has no number because of a fault said before, nothing is said. */
struct sp_json *sp_change_grown(struct sp_reader *r, const struct sp_setting *s, const struct sp_json *node,
                                struct sp_design *now, bool faulty);

/* ---- paths ----------------------------------------------------------------------------------------- */

/* One part of a path: a name, or an index. A name with a point in it stands in quotes. */
struct sp_path_part {
    char name[80];
    bool is_index;
    size_t index;
};
/* Takes the next part; false at the end, or with *bad when the text is no path. */
bool sp_path_next(const char **path, bool first, struct sp_path_part *out, bool *bad);

/* ---- places ---------------------------------------------------------------------------------------- */

/* The node at a path such as "drive[1].speed" or "car.duct"; NULL if there is none. */
struct sp_json *sp_case_node(const struct sp_json *tree, const char *path);
bool sp_case_given(const struct sp_reader *r, const char *path);

/* A row's path ("car.duct.core.width") for one element, as the file writes it: "car.duct.cores[1].width", or
 * with the singular where no list stands. */
void sp_case_path(const struct sp_json *tree, const char *pattern, const struct sp_key_spot *at, char *out,
                  size_t size);
/* The node there; NULL if there is none. */
struct sp_json *sp_case_node_at(const struct sp_reader *r, const char *pattern, const struct sp_key_spot *at);
bool sp_case_given_at(const struct sp_reader *r, const char *pattern, const struct sp_key_spot *at);
/* Fault or caution there. */
void sp_case_fault_of(struct sp_reader *r, const char *pattern, const struct sp_key_spot *at,
                      const char *found, const char *expected, const char *hint);
void sp_case_caution_of(struct sp_reader *r, const char *pattern, const struct sp_key_spot *at,
                        const char *found, const char *expected);
/* How much a user has to do with the value there: nothing, in a file, on the command line, by a change. */
int sp_case_weight(const struct sp_reader *r, const char *pattern, const struct sp_key_spot *at);
/* How many elements a list has in the tree, 1 where the singular stands or nothing. */
size_t sp_case_elements(const struct sp_json *tree, const struct sp_key *list, const struct sp_key_spot *at);
/* Goes on to the next element that a row is read into; false past the last. Starts from zeroes. */
bool sp_case_next(const struct sp_json *tree, const char *pattern, struct sp_key_spot *at);
/* The array that stands for a group, whatever it holds; NULL where none stands. */
const struct sp_json *sp_case_list(const struct sp_json *tree, const struct sp_key *list,
                                   const struct sp_key_spot *at);

/* The path a change's value came from, for a path in the changed tree; NULL when no change put it there. */
const char *sp_case_source(const struct sp_reader *r, const char *path, char *out, size_t size);

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

/* Keeps one number as the row says. */
void sp_key_store(const struct sp_key *row, void *to, double value);
/* Reads a node into its place; complains and leaves the place as it is when it will not do. */
void sp_case_value(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                   const char *path, void *to);
void sp_case_columns(struct sp_reader *r, const struct sp_json *node, const char *path, struct sp_step *step);

/* A copy of a tree; NULL without memory. */
struct sp_json *sp_case_copy(const struct sp_json *node);

/* ---- writing --------------------------------------------------------------------------------------- */

/* A text inside JSON quotes, or bare with '?' for what a terminal should not get. */
void sp_written_text(FILE *to, const char *text, bool json);
/* What the user wrote; `json`: within a JSON text, `inner`: within a list or object. */
void sp_written_node(FILE *to, const struct sp_json *node, bool json, bool inner);

#endif
