/* What the files of the unit reader share. Internal to units*.c.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_BASE_UNITS_INNER_H
#define SP_BASE_UNITS_INNER_H

#include "swirlpot/base.h"

enum sp_base { SP_B_M, SP_B_KG, SP_B_S, SP_B_A, SP_B_K, SP_B_MOL, SP_B_CD, SP_B_RAD, SP_BASES };

/* Which sorts of name a unit is made of: "N m" is a torque and "kW h" an energy, though both are J. */
enum { SP_SEEN_FORCE = 1, SP_SEEN_ENERGY = 2, SP_SEEN_POWER = 4 };

/* A unit: `scale` SI units of these powers of the base units. */
struct sp_measure {
    double scale;
    int power[SP_BASES];
    unsigned seen;
};

enum sp_unit_fault {
    SP_UNIT_FINE,
    SP_UNIT_UNKNOWN,   /* `word` is no known unit */
    SP_UNIT_SIGN,      /* `word` cannot stand in a unit there */
    SP_UNIT_DIGIT,     /* a number inside the unit */
    SP_UNIT_LONG,      /* more than SP_UNIT_MOST bytes */
    SP_UNIT_OFFSET,    /* a scale with its own zero (degC) within a unit */
    SP_UNIT_SHIFT,     /* @, since, after, from, ref */
    SP_UNIT_LOGARITHM, /* lg, ln, log, dB... */
    SP_UNIT_AMBIGUOUS, /* `word` means different things to different people; see `hint` */
    SP_UNIT_ORDER,     /* a/b c: is c above or below the line? */
    SP_UNIT_RANGE      /* powers or scale out of all bounds */
};

enum { SP_UNIT_MOST = 64 };

struct sp_unit_error {
    enum sp_unit_fault fault;
    char word[SP_UNIT_MOST + 1];
    const char *hint;
};

/* One row a kind. A closed kind knows only the whole texts of the spelling table. */
struct sp_kind_row {
    const char *name, *si, *example; /* example: fits after "expected" */
    bool closed;
    const char *known; /* of a closed kind: its units, for complaints */
    signed char power[SP_BASES];
};
const struct sp_kind_row *sp_kind_row(enum sp_kind kind);

/* A whole unit text that one kind takes in its own way. */
struct sp_spelling {
    enum sp_kind kind;
    const char *text;
    double scale, offset;
};
const struct sp_spelling *sp_spelling_find(enum sp_kind kind, const char *text);

/* A name the trade uses that UDUNITS lacks, or gives another meaning or a value rounded too far. */
const struct sp_measure *sp_alias_find(const char *name);

/* Why a name is not taken although it may be known: the hint, or NULL. */
const char *sp_ambiguous_find(const char *name);

/* Writes `unit` with m2 for a superscript, "degC" for its sign and the like into out (false: too long). */
bool sp_unit_plain(const char *unit, size_t length, char *out, size_t size);

/* Reads a plain unit text such as "N.s2/m2". */
bool sp_unit_measure(struct sp_units *u, const char *text, struct sp_measure *out,
                     struct sp_unit_error *error);

/* Looks a single name up in UDUNITS-2. */
bool sp_unit_name(struct sp_units *u, const char *name, struct sp_measure *out, struct sp_unit_error *error);

#endif
