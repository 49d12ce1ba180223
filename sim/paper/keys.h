/* The key tables: every key of a case is declared once, in one row, and everything that reads, checks,
 * shows, starts or documents a case reads these rows. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PAPER_KEYS_H
#define SP_PAPER_KEYS_H

#include "swirlpot/paper.h"

/* What stands at a key. */
enum sp_shape {
    SP_SHAPE_GROUP,    /* an object with keys of its own */
    SP_SHAPE_STEPS,    /* the list of drive steps */
    SP_SHAPE_CHANGES,  /* the list of changes during the drive */
    SP_SHAPE_SETTINGS, /* an object of paths and values */
    SP_SHAPE_QUANTITY, /* one number of a kind */
    SP_SHAPE_WORD,     /* one word out of a list */
    SP_SHAPE_FLAG,     /* true or false */
    SP_SHAPE_TEXT,
    SP_SHAPE_LIST,   /* numbers of one kind */
    SP_SHAPE_THREE,  /* three coefficients of a polynomial in 1000 rev/min */
    SP_SHAPE_TABLE,  /* rows, each column of its own kind */
    SP_SHAPE_MATRIX, /* rows of numbers of one kind */
    SP_SHAPE_COLUMNS /* which heading of a trace is which of our columns */
};

/* How the value is kept at its place in the design. */
enum sp_keep { SP_KEEP_DOUBLE, SP_KEEP_INT, SP_KEEP_CHAR, SP_KEEP_ENUM, SP_KEEP_BOOL, SP_KEEP_NOTHING };

/* When a key must be there. A key of a group is asked for only when its group is. */
enum sp_need { SP_NEED_NOT, SP_NEED_ALWAYS, SP_NEED_DRIVE };

/* Which element of each list a value stands in: of car.ducts[1].cores[2] outer is 1 and inner is 2, of
 * drive[3] outer is 3. Where no list stands: 0. */
struct sp_key_spot {
    size_t outer, inner;
};

struct sp_word {
    const char *text;
    double value;
};

struct sp_key_column {
    enum sp_kind kind;
    const char *range;
};

struct sp_key {
    const char *path; /* "drive[].speed": [] stands for any index */
    enum sp_shape shape;
    enum sp_kind kind;
    enum sp_keep keep;
    size_t at; /* offset in struct sp_design, or in struct sp_step for drive[] */
    enum sp_need need;
    const char *when;                          /* when it is needed, in words; NULL: as `need` says */
    const char *fallback;                      /* default as text; with `rule`: the rule in words */
    /* default worked out from other values, for the element at `at` */
    double (*rule)(const struct sp_design *d, const struct sp_key_spot *at);
    const char *range;           /* "0 m to 3 m", "above 0 m2, at most 10 m2"; the words of a word list */
    const struct sp_word *words; /* ended by a NULL text */
    const struct sp_key_column *columns; /* of a table */
    size_t width;                        /* number of columns */
    bool or_none;                        /* the word "none" is allowed */
    bool or_object;                      /* a table that may also be an object with keys of its own */
    const char *unless, *unless_word; /* a word row; with that word there the need falls away */
    bool or_volume;   /* a mass flow that may also be given as a volume flow, of 50/50 glycol at 90 degC */
    bool whole;       /* whole numbers only */
    const char *type; /* what it is, in words, where kind does not say it */
    const char *plural;      /* of a group: the key under which a list of such groups may stand instead */
    const char *listed;      /* that list in words */
    size_t stride, most;     /* bytes from one element to the next; how many at most */
    size_t count_at;         /* offset of the list's length in struct sp_design; 0: kept nowhere */
    const char *meaning, *basis;
};

/* One entry of `changes`, as written. */
struct sp_planned {
    double at, every, times; /* s, s; NAN where absent */
};

/* Rows in order; NULL past the end. */
const struct sp_key *sp_key_row(size_t i);

/* The row of a path (with [] for indices), or NULL. */
const struct sp_key *sp_key_find(const char *path);

/* Is `row` a direct child of the group at `group` ("" is the top)? */
bool sp_key_child(const struct sp_key *row, const char *group);

/* The row that a key of a group has, with *plural when the key is the name of its list; NULL: none. */
const struct sp_key *sp_key_named(const char *group, const char *key, bool *plural);

/* The groups on the way to a path, itself included, that may be lists: outermost first; their number. */
enum { SP_KEY_LISTS = 2 };
size_t sp_key_lists(const char *path, const struct sp_key *lists[SP_KEY_LISTS]);

/* Where an element's value lies. */
void *sp_key_place(const struct sp_key *row, struct sp_design *d, const struct sp_key_spot *at);
/* Where the length of a list is kept, within its outer element; NULL: nowhere. */
size_t *sp_key_count_place(const struct sp_key *list, struct sp_design *d, const struct sp_key_spot *at);
/* An element's value where it is one double; NAN when not. */
double sp_key_double(const struct sp_key *row, struct sp_design *d, const struct sp_key_spot *at);

/* Last part of a row's path. */
const char *sp_key_name(const struct sp_key *row);

bool sp_key_of_step(const struct sp_key *row); /* stands in a drive step */
bool sp_key_of_car(const struct sp_key *row);  /* stands in the car */
bool sp_key_of_change(const struct sp_key *row); /* stands in an entry of `changes`, or is that */

/* Name of the known key nearest to `key` in the group at `group`, by edit distance; NULL if none is
 * near. */
const char *sp_key_nearest(const char *group, const char *key);
size_t sp_edit_distance(const char *a, const char *b);
/* Near enough to be meant: no more changes than half the letters that were written, or one. */
bool sp_key_near(const char *written, size_t distance);

/* Bounds of a range text in SI. `open` bounds are not allowed themselves. */
struct sp_range {
    double low, high;
    bool low_open, high_open;
};
bool sp_range_read(struct sp_units *u, enum sp_kind kind, const char *text, struct sp_range *out);
bool sp_range_holds(const struct sp_range *range, double x);

/* "area", "one of the words below", "table of volume flow and pressure". */
const char *sp_key_type(const struct sp_key *row);
/* "required", "default" and so on. */
const char *sp_key_need(const struct sp_key *row);
/* A phrase that fits after "expected": an area such as "450 cm2". */
const char *sp_kind_sample(enum sp_kind kind);

/* The value of a word; false if it is none of the row's. */
bool sp_word_value(const struct sp_key *row, const char *text, double *value);

/* ---- the tables, one a room; ended by a NULL path -------------------------------------------------- */

extern const struct sp_key sp_keys_case[], sp_keys_drive[], sp_keys_body[], sp_keys_engine[],
    sp_keys_circuit[], sp_keys_duct[], sp_keys_exit[], sp_keys_core[], sp_keys_fan[], sp_keys_tank[],
    sp_keys_change[], sp_keys_oil[];

/* ---- defaults worked out from other values: keys_rule.c, keys_rule_engine.c ------------------------ */

double sp_rule_start_coolant(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_shift_speed(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_metal(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_jacket(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_conductance(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_conductance_flow(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_bore(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_stroke(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_overrun_share(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_gas_temperature(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_oil_share(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_oil_metal(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_gearbox_metal(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_oil_most(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_gearbox_most(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_oil_full(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_gearbox_full(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_charge_flow(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_glycol(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_pump_power(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_thermostat_full(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_air_space(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_tank_volume(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_free_area(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_louvre_length(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_core_metal(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_core_coolant(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_core_drop_flow(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_core_drop(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_fan_power(const struct sp_design *d, const struct sp_key_spot *at);
double sp_rule_fan_hub(const struct sp_design *d, const struct sp_key_spot *at);

#endif
