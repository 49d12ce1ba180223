/* swirlpot/base.h - the ground floor: status, complaints, quantities.
 *
 * Everything inside the library is SI and kelvin. Texts with units exist only while a file is read.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_BASE_H
#define SWIRLPOT_BASE_H

#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

#ifdef __cplusplus
extern "C" {
#endif

#define SP_API __attribute__((visibility("default")))

/* What a call came to; also the exit status of the command. */
enum sp_status {
    SP_OK = 0,       /* done; the drive survives */
    SP_NOT = 1,      /* done; the drive does not survive, or no such value exists */
    SP_INPUT = 2,    /* the input is at fault, or a file cannot be read or written */
    SP_NUMERICS = 3  /* the numerics failed */
};

/* ---- complaints ---------------------------------------------------------------------------- */

/* Where something stands. Any text may be NULL, line 0 means none. */
struct sp_place {
    const char *file;     /* the file at fault */
    long line;            /* line in it, from 1 */
    const char *path;     /* JSON path or column name */
    const char *named_by; /* the file that names `file`, if another does */
};

/* One fault (or caution) with its place; owns its texts. */
struct sp_complaint {
    char *file, *path, *named_by;
    long line;
    char *found;    /* what stands there */
    char *expected; /* what would be right */
    char *hint;     /* nearest known key and the like; may be NULL */
};

/* A growing list of complaints. Zero-initialise; free with sp_complaints_free. */
struct sp_complaints {
    struct sp_complaint *list;
    size_t count, room;
    size_t dropped; /* complaints beyond SP_COMPLAINTS_MAX, counted only */
};

enum { SP_COMPLAINTS_MAX = 200 };

/* Adds one complaint; `found` and `expected` are copied, `hint` may be NULL. */
SP_API void sp_complain(struct sp_complaints *to, const struct sp_place *at, const char *found,
                        const char *expected, const char *hint);

/* Writes them, one a line: "swirlpot: FILE, line N, PATH: found X; expected Y". With `caution`
 * non-zero the line reads "swirlpot: caution: ...". Control characters are written as '?'. */
SP_API void sp_complaints_print(const struct sp_complaints *c, bool caution, FILE *to);

SP_API void sp_complaints_free(struct sp_complaints *c);

/* Appends copies of all complaints of `from` to `to`. */
SP_API void sp_complaints_copy(const struct sp_complaints *from, struct sp_complaints *to);

/* ---- quantities ---------------------------------------------------------------------------- */

/* Kinds of quantity a text may hold; the SI unit of each stands in units.c, one row a kind. */
enum sp_kind {
    SP_K_NUMBER,         /* no dimension; a bare number, or % or a fraction */
    SP_K_LENGTH,         /* m */
    SP_K_AREA,           /* m2 */
    SP_K_VOLUME,         /* m3 */
    SP_K_TIME,           /* s */
    SP_K_SPEED,          /* m/s */
    SP_K_MASS,           /* kg */
    SP_K_FORCE,          /* N */
    SP_K_POWER,          /* W */
    SP_K_ENERGY,         /* J */
    SP_K_TORQUE,         /* N m */
    SP_K_PRESSURE,       /* Pa, absolute or a difference */
    SP_K_GAUGE,          /* Pa above ambient; barg and psig allowed */
    SP_K_TEMPERATURE,    /* K, absolute: K, degC, degF, degR */
    SP_K_TEMP_DIFF,      /* K, a difference: K or degR only */
    SP_K_DENSITY,        /* kg/m3 */
    SP_K_MASS_FLOW,      /* kg/s */
    SP_K_VOLUME_FLOW,    /* m3/s */
    SP_K_ROTATION,       /* rev/s: rpm, 1/min, rev/min, Hz alike */
    SP_K_ANGLE,          /* rad */
    SP_K_VOLTAGE,        /* V */
    SP_K_CURRENT,        /* A */
    SP_K_CAPACITY,       /* J/K */
    SP_K_CONDUCTANCE,    /* W/K; kW/100K allowed */
    SP_K_FILM,           /* W/m2K */
    SP_K_CONDUCTIVITY,   /* W/mK */
    SP_K_LINEAR_DROP,    /* Pa s/m */
    SP_K_QUADRATIC_DROP, /* Pa s2/m2 */
    SP_K_HEATING_VALUE,  /* J/kg */
    SP_K_COMPLIANCE,     /* m3/Pa */
    SP_K_FRICTION,       /* road load: N s2/m2 */
    SP_K_FOULING,        /* m2K/W */
    SP_K_CHARGE,         /* A s; Ah and mAh allowed */
    SP_KINDS
};

/* Name ("area") and SI unit ("m2") of a kind; the unit of SP_K_NUMBER is "1". */
SP_API const char *sp_kind_name(enum sp_kind kind);
SP_API const char *sp_kind_si(enum sp_kind kind);

/* The unit tables while a file is read. NULL when the unit library's data cannot be loaded. */
struct sp_units;
SP_API struct sp_units *sp_units_open(void);
SP_API void sp_units_close(struct sp_units *u);

/* Reads "450 cm2" as `kind` into *si. The number is read first, the unit alone is looked up, then
 * applied. Returns false and says in `why` (what would have been right, a clause that fits after
 * "expected") when the text is no such quantity. Range is not judged here, save that the result is
 * finite and an absolute temperature is above 0 K and below 5000 K.
 * With `bare` a number without unit is taken as SI only if the kind is SP_K_NUMBER. */
SP_API bool sp_quantity_read(struct sp_units *u, enum sp_kind kind, const char *text, double *si,
                             char *why, size_t why_size);

/* Scale and offset of a unit alone: si = scale * x + offset. For column headings and printing. */
SP_API bool sp_unit_scale(struct sp_units *u, enum sp_kind kind, const char *unit, double *scale,
                          double *offset, char *why, size_t why_size);

/* Version text of the library, "0.1.0". */
SP_API const char *sp_version(void);

#ifdef __cplusplus
}
#endif
#endif
