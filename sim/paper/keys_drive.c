/* Keys of the drive's steps.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

static const struct sp_word delimiters[] = { { "comma", ',' }, { "semicolon", ';' }, { "tab", '\t' },
    { "space", ' ' }, { ",", ',' }, { ";", ';' }, { "\t", '\t' }, { " ", ' ' }, { NULL, 0 } };
static const struct sp_word decimals[] = { { "point", '.' }, { "comma", ',' }, { ".", '.' }, { ",", ',' },
    { NULL, 0 } };
static const struct sp_word blanks[] = { { "refuse", SP_BLANK_REFUSE }, { "hold", SP_BLANK_HOLD }, { NULL, 0 } };

#define STEP_FLAG(path_, field) \
    .path = path_, .shape = SP_SHAPE_FLAG, .keep = SP_KEEP_BOOL, STEP_AT(field), DEFAULT("false"), \
    RANGE("true, false")

const struct sp_key sp_keys_drive[] = {
    { .path = "drive", .shape = SP_SHAPE_STEPS, .keep = SP_KEEP_NOTHING, FOR_DRIVE, .type = "list of steps",
      SAYS("what is driven, in order; each step holds exactly one of `trace`, `idle`, `hold`, `soak`") },
    { GROUP("drive[]"), OPTIONAL, SAYS("one step of the drive") },
    { .path = "drive[].trace", .shape = SP_SHAPE_TEXT, STEP_AT(trace), WHEN("one of the four"), .type = "path",
      SAYS("file of a trace (comma separated values), relative to the case"), OWN },
    { STEP_QUANTITY("drive[].idle", TIME, time), WHEN("one of the four"), RANGE("above 0 s, at most 7 d"),
      SAYS("the car stands, the engine idles"), OWN },
    { STEP_QUANTITY("drive[].hold", TIME, time), WHEN("one of the four"), RANGE("above 0 s, at most 7 d"),
      SAYS("steady speed and power for so long"), OWN },
    { STEP_QUANTITY("drive[].soak", TIME, time), WHEN("one of the four"), RANGE("above 0 s, at most 7 d"),
      SAYS("the car stands, the engine is off"), OWN },
    { STEP_QUANTITY("drive[].repeat", NUMBER, repeat), DEFAULT("1"), RANGE("1 to 100000"), .whole = true,
      SAYS("how often the step is driven"), DEFINITION },
    { STEP_QUANTITY("drive[].speed", SPEED, speed), WHEN("with hold"), RANGE("0 km/h to 500 km/h"),
      SAYS("road speed of a hold"), OWN },
    { STEP_QUANTITY("drive[].power", POWER, power), WHEN("with hold; else from the road load"),
      RANGE("-3 MW to 3 MW"), SAYS("power at the crank of a hold; negative on the overrun"), OWN },
    { STEP_QUANTITY("drive[].engine_speed", ROTATION, engine_speed), WHEN("with hold; else from the gears"),
      RANGE("0 rpm to 30000 rpm"), SAYS("engine speed of a hold"), OWN },
    { STEP_QUANTITY("drive[].grade", NUMBER, grade), DEFAULT("0 %"), RANGE("-50 % to 50 %"),
      SAYS("slope of the road in a hold, rise over run"), DEFINITION },
    { STEP_QUANTITY("drive[].smooth", TIME, smooth), DEFAULT("0 s"), RANGE("0 s to 60 s"),
      SAYS("half width over which the speed of a trace is smoothed before it is differentiated"), PRACTICE },
    { .path = "drive[].columns", .shape = SP_SHAPE_COLUMNS, .keep = SP_KEEP_NOTHING, OPTIONAL,
      .type = "headings",
      SAYS("which heading of the file is which column: `{\"speed\": \"Vehicle Speed\"}`, or with its unit "
           "`{\"speed\": {\"name\": \"Vehicle Speed\", \"unit\": \"km/h\"}}`; the columns are listed below"),
      OWN },

    { GROUP("drive[].layout"), OPTIONAL, SAYS("how the file of a trace is laid out and what is repaired") },
    { .path = "drive[].layout.delimiter", .shape = SP_SHAPE_WORD, .keep = SP_KEEP_CHAR, .words = delimiters,
      STEP_AT(format.delimiter), DEFAULT("comma"), RANGE("comma, semicolon, tab, space, or the character itself"),
      SAYS("what stands between cells"), DEFINITION },
    { .path = "drive[].layout.decimal", .shape = SP_SHAPE_WORD, .keep = SP_KEEP_CHAR, .words = decimals,
      STEP_AT(format.decimal), DEFAULT("point"), RANGE("point, comma, or the character itself"),
      SAYS("what stands before decimals"), DEFINITION },
    { .path = "drive[].layout.skip_lines", .shape = SP_SHAPE_QUANTITY, .kind = SP_K_NUMBER,
      .keep = SP_KEEP_INT, .whole = true, STEP_AT(format.skip_lines), DEFAULT("0"), RANGE("0 to 1000"),
      SAYS("lines before the heading"), DEFINITION },
    { STEP_FLAG("drive[].layout.units_row", format.units_row),
      SAYS("a row of units stands below the heading"), DEFINITION },
    { STEP_FLAG("drive[].layout.clock", format.clock),
      SAYS("time is a clock, hh:mm:ss with or without decimals"), DEFINITION },
    { STEP_FLAG("drive[].layout.whole_seconds", format.whole_seconds),
      SAYS("the clock counts whole seconds: rows that share one are spread over it"), DEFINITION },
    { .path = "drive[].layout.blanks", .shape = SP_SHAPE_WORD, .keep = SP_KEEP_ENUM, .words = blanks,
      STEP_AT(format.blank), DEFAULT("refuse"), RANGE("refuse, hold"),
      SAYS("empty cells: a complaint, or the last value is held"), DEFINITION },
    { STEP_FLAG("drive[].layout.drop_doubles", format.drop_doubles),
      SAYS("rows equal to the one before are dropped and counted"), DEFINITION },
    { STEP_FLAG("drive[].layout.repair", format.repair),
      SAYS("backward time, text in numbers and impossible values are repaired and counted"), DEFINITION },
    { STEP_QUANTITY("drive[].layout.longest_gap", TIME, format.longest_gap), DEFAULT("30 s"),
      RANGE("above 0 s, at most 1 d"), SAYS("a longer step in time is a complaint"), PRACTICE },
    END_OF_KEYS
};
