/* The trace reader: what it takes, what it refuses and with which words, what it repairs and counts.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "swirlpot/trace.h"

#include <locale.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

/* One reading; everything in it is freed by done(). */
struct reading {
    struct sp_trace t;
    struct sp_complaints c;
    enum sp_status status;
};

static struct sp_units *units;

static struct reading read_text(const char *text, const struct sp_trace_format *format)
{
    static const struct sp_trace_format plain;
    struct reading r = {0};
    r.status = sp_trace_parse(units, "log.csv", text, strlen(text), "case.json", format ? format : &plain,
                              &r.t, &r.c);
    assert_true((r.status == SP_OK) == (r.c.count == 0));
    if (r.status != SP_OK) {
        assert_int_equal(r.status, SP_INPUT);
        assert_int_equal(r.t.rows, 0);
        assert_null(r.t.column[SP_COL_TIME]);
    }
    return r;
}

static void done(struct reading *r)
{
    sp_trace_free(&r->t);
    sp_complaints_free(&r->c);
}

static void check_column(const struct reading *r, enum sp_column c, size_t rows, const double *want)
{
    if (r->status != SP_OK) sp_complaints_print(&r->c, false, stderr);
    assert_int_equal(r->status, SP_OK);
    assert_int_equal(r->t.rows, rows);
    assert_non_null(r->t.column[c]);
    for (size_t i = 0; i < rows; i++)
        check_close(r->t.column[c][i], want[i], 1e-13, 1e-12);
}

/* Some complaint stands at this line and column (NULL: any) and has these words in found or expected. */
static void check_complaint(const struct reading *r, long line, const char *path, const char *words)
{
    for (size_t i = 0; i < r->c.count; i++) {
        const struct sp_complaint *c = &r->c.list[i];
        if (c->line != line || (path && (!c->path || strcmp(c->path, path) != 0))) continue;
        if (!strstr(c->found, words) && !strstr(c->expected, words) && !(c->hint && strstr(c->hint, words)))
            continue;
        assert_string_equal(c->file, "log.csv");
        assert_string_equal(c->named_by, "case.json");
        return;
    }
    sp_complaints_print(&r->c, false, stderr);
    print_error("no complaint at line %ld, %s, of \"%s\"\n", line, path ? path : "-", words);
    fail();
}

static void refused(const char *text, const struct sp_trace_format *format, size_t complaints, long line,
                    const char *path, const char *words)
{
    struct reading r = read_text(text, format);
    if (r.c.count != complaints) sp_complaints_print(&r.c, false, stderr);
    assert_int_equal(r.c.count, complaints);
    check_complaint(&r, line, path, words);
    done(&r);
}

#define WANT(...)                                                                                            \
    (const double[])                                                                                         \
    {                                                                                                        \
        __VA_ARGS__                                                                                          \
    }

static void plain_file(void **state)
{
    (void)state;
    struct reading r =
        read_text("time [s],speed [km/h],power [kW],engine_speed [rpm],grade [%],mark\n"
                  "10,36,50,6000,5,Start\n11.5,72.0,-5e0,3000,-2.5,Start\n13,0,0,0,0,\n14,0,0,0,0,Hairpin\n",
                  NULL);
    check_column(&r, SP_COL_TIME, 4, WANT(0, 1.5, 3, 4));
    check_column(&r, SP_COL_SPEED, 4, WANT(10, 20, 0, 0));
    check_column(&r, SP_COL_POWER, 4, WANT(50e3, -5e3, 0, 0));
    check_column(&r, SP_COL_ENGINE_SPEED, 4, WANT(100, 50, 0, 0));
    check_column(&r, SP_COL_GRADE, 4, WANT(0.05, -0.025, 0, 0));
    assert_null(r.t.column[SP_COL_GEAR]);
    assert_null(r.t.column[SP_COL_MARK]);
    assert_int_equal(r.t.marks, 2);
    assert_int_equal(r.t.mark[0].row, 0);
    assert_string_equal(r.t.mark[0].text, "Start");
    assert_int_equal(r.t.mark[1].row, 3);
    assert_string_equal(r.t.mark[1].text, "Hairpin");
    assert_int_equal(r.t.repairs.rows_read, 4);
    done(&r);
}

static void units_and_temperatures(void **state)
{
    (void)state;
    struct reading r =
        read_text("time [min],speed [mph],ambient [degC],coolant [degF],fuel_flow [g/s],gear,wake\n"
                  "0,60,33,212,2,1,1\n0.5,30,-40,32,0.5,-1,0.7\n",
                  NULL);
    check_column(&r, SP_COL_TIME, 2, WANT(0, 30));
    check_column(&r, SP_COL_SPEED, 2, WANT(26.8224, 13.4112)); /* 1 mile 1609.344 m */
    check_column(&r, SP_COL_AMBIENT, 2, WANT(306.15, 233.15));
    check_column(&r, SP_COL_COOLANT, 2, WANT(373.15, 273.15));
    check_column(&r, SP_COL_FUEL_FLOW, 2, WANT(2e-3, 5e-4));
    check_column(&r, SP_COL_GEAR, 2, WANT(1, -1));
    done(&r);
}

/* Line ends, BOM, quotes, blanks, blank lines, no newline at the end, trailing commas, bare points. */
static void odd_but_right(void **state)
{
    (void)state;
    struct reading r = read_text(
        "\xEF\xBB\xBF\"time [s]\" , speed [m/s],\r\n\r\n 0 ,\" 1.5 \",\r\n,,\r\n\"1\",.5,,,\r\n2,2.", NULL);
    check_column(&r, SP_COL_TIME, 3, WANT(0, 1, 2));
    check_column(&r, SP_COL_SPEED, 3, WANT(1.5, 0.5, 2));
    done(&r);
    r = read_text("time [s],speed [m/s]\r0,1\r1,+2\r", NULL);
    check_column(&r, SP_COL_SPEED, 2, WANT(1, 2));
    done(&r);
}

static void headings_refused(void **state)
{
    (void)state;
    refused("", NULL, 1, 0, NULL, "no heading");
    refused("\n\n", NULL, 1, 0, NULL, "no heading");
    refused("time [s],speed [m/s]\n", NULL, 1, 0, NULL, "no rows");
    refused("time [s],speed [m/s]\n0,1\n", NULL, 1, 0, NULL, "one row");
    refused("time [s],speeed [m/s]\n0,1\n1,1\n", NULL, 1, 1, "speeed [m/s]", "nearest known column is speed");
    refused("time [s],speed\n0,1\n1,1\n", NULL, 1, 1, "speed", "without unit");
    refused("time,speed [m/s]\n0,1\n1,1\n", NULL, 1, 1, "time", "unit of time");
    refused("time [s],speed [kg]\n0,1\n1,1\n", NULL, 1, 1, "speed [kg]", "kg");
    refused("time [s],speed [m/s],coolant [C]\n0,1,1\n1,1,1\n", NULL, 1, 1, "coolant [C]", "degC");
    refused("time [s],speed [m/s],speed [km/h]\n0,1,1\n1,1,1\n", NULL, 1, 1, "speed [km/h]", "second column");
    refused("speed [m/s],power [W]\n0,1\n1,1\n", NULL, 1, 1, NULL, "neither");
    refused("time [s],power [W]\n0,1\n1,1\n", NULL, 1, 1, NULL, "no column of speed");
    refused("time [s];speed [m/s]\n0;1\n1;1\n", NULL, 1, 1, NULL, "delimiter");
    refused("\xFF\xFEt\n", NULL, 1, 0, NULL, "UTF-16");
    /* all at once */
    refused("tme [s],sped [m/s],colant [K],gear [V]\n0,1,1,1\n", NULL, 4, 1, "colant [K]", "coolant");
}

static void cells_refused(void **state)
{
    (void)state;
    static const char *text[] = {"abc", "NaN", "inf", "-Infinity", "0x10", "1e400", "1,5",
                                 "--1", "1e",  "1 2", ".",         "-",    "1.2.3"};
    char file[200];
    for (size_t i = 0; i < sizeof text / sizeof *text; i++) {
        snprintf(file, sizeof file, "time [s],speed [m/s]\n0,1\n1,\"%s\"\n2,3\n", text[i]);
        refused(file, NULL, 1, 3, "speed [m/s]", text[i]);
    }
    refused("time [s],speed [m/s]\n0,1\n1,\n2,3\n", NULL, 1, 3, "speed [m/s]", "a blank cell");
    refused("time [s],speed [m/s]\n0,1\n1\n2,3\n", NULL, 1, 3, "speed [m/s]", "ends after 1 cell");
    refused("time [s],speed [m/s]\n0,1\n,1\n2,3\n", NULL, 1, 3, "time [s]", "a blank cell");
    refused("time [s],speed [m/s]\n0,1\n1,1,7\n2,3\n", NULL, 1, 3, NULL, "\"7\" in cell 3");
    refused("time [s],speed [m/s],\n0,1,\n1,1,7\n2,3,\n", NULL, 1, 3, NULL, "\"7\" in cell 3");
    refused("time [s],speed [m/s]\n0,1\n1,1\"2\n2,3\n", NULL, 1, 3, NULL, "quote");
    refused("time [s],speed [m/s]\n0,1\n1,\"1\n2,3\n", NULL, 1, 3, NULL, "never closed");
    /* a quoted cell over two lines keeps the count of lines right */
    refused("time [s],speed [m/s],mark\n0,1,\"a\nb\"\n1,x,c\n", NULL, 1, 4, "speed [m/s]", "x");
    refused("\r\ntime [s],speed [m/s]\r\n\r\n0,1\r\n1,x\r\n", NULL, 1, 5, "speed [m/s]", "x");
    /* all faults in one go */
    refused("time [s],speed [m/s],gear\n0,x,y\n1,1,1\n0.5,900,1\n60,1,z\n", NULL, 6, 4, "time [s]",
            "a step back");
}

static void impossible_values_refused(void **state)
{
    (void)state;
    static const struct {
        const char *heading, *value, *good;
    } at[] = {{"speed [m/s]", "-5.1", "-5"},
              {"speed [m/s]", "150.1", "150"},
              {"speed [km/h]", "541", "540"},
              {"power [MW]", "3.01", "3"},
              {"power [kW]", "-1001", "-1000"},
              {"engine_speed [rpm]", "24001", "24000"},
              {"engine_speed [rpm]", "-1", "0"},
              {"throttle", "1.06", "1"},
              {"throttle [%]", "106", "100"},
              {"throttle", "-0.06", "-0.05"},
              {"grade", "0.61", "0.6"},
              {"grade [%]", "-61", "-60"},
              {"altitude [m]", "-501", "-500"},
              {"altitude [m]", "9001", "9000"},
              {"ambient [K]", "199", "200"},
              {"coolant [degC]", "228", "226"},
              {"wake", "1.51", "1.5"},
              {"wake", "-0.01", "0"},
              {"fuel_flow [kg/s]", "-0.001", "0"},
              {"air_flow [g/s]", "10001", "9999"}};
    char text[200];
    for (size_t i = 0; i < sizeof at / sizeof *at; i++) {
        bool speed = strncmp(at[i].heading, "speed", 5) == 0;
        snprintf(text, sizeof text, "time [s],%s%s\n0,%s%s\n1,%s%s\n", at[i].heading,
                 speed ? "" : ",speed [m/s]", at[i].good, speed ? "" : ",1", at[i].value, speed ? "" : ",1");
        refused(text, NULL, 1, 3, at[i].heading, at[i].value);
        snprintf(text, sizeof text, "time [s],%s%s\n0,%s%s\n1,%s%s\n", at[i].heading,
                 speed ? "" : ",speed [m/s]", at[i].good, speed ? "" : ",1", at[i].good, speed ? "" : ",1");
        struct reading r = read_text(text, NULL);
        assert_int_equal(r.status, SP_OK);
        done(&r);
    }
    refused("time [s],speed [m/s],throttle\n0,1,0\n1,1,55\n", NULL, 1, 3, "throttle", "%");
}

static void order_of_time(void **state)
{
    (void)state;
    refused("time [s],speed [m/s]\n0,1\n2,1\n1,1\n3,1\n", NULL, 1, 4, "time [s]", "a step back");
    refused("time [s],speed [m/s]\n0,1\n1,1\n1,2\n1,3\n2,1\n", NULL, 1, 5, "time [s]", "a third row");
    refused("time [s],speed [m/s]\n0,1\n1,1\n31.5,1\n", NULL, 1, 4, "time [s]", "a gap of 30.5 s");
    refused("time [s],speed [m/s]\n5,1\n5,1\n", NULL, 1, 0, "time [s]", "no two rows apart");
    struct sp_trace_format f = {.longest_gap = 0.5};
    refused("time [s],speed [m/s]\n0,1\n0.5,1\n1.1,1\n", &f, 1, 4, "time [s]", "at most 0.5 s");
    f.longest_gap = 1e12; /* subtracting the first time may round three into one */
    refused("time [s],speed [m/s]\n-1e11,1\n0,1\n1e-7,1\n2e-7,1\n", &f, 1, 5, "time [s]", "too close");
    struct reading r = read_text("time [s],speed [m/s]\n0,1\n1,1\n1,2\n31,2\n31,2\n", NULL); /* jumps */
    check_column(&r, SP_COL_TIME, 5, WANT(0, 1, 1, 31, 31));
    check_column(&r, SP_COL_SPEED, 5, WANT(1, 1, 2, 2, 2));
    done(&r);
    /* stamps that count from 1970 keep their milliseconds */
    r = read_text("time [s],speed [m/s]\n1533662725.389,1\n1533662725.458,1\n", NULL);
    assert_int_equal(r.status, SP_OK);
    check_close(r.t.column[SP_COL_TIME][1], 0.069, 0, 1e-6);
    done(&r);
}

static void repaired_and_counted(void **state)
{
    (void)state;
    struct sp_trace_format f = {.repair = true};
    struct reading r = read_text(
        "time [s],speed [m/s],gear\n0,x,1\n1,2,NaN\n0.5,3,2\n2,900,3\nfour,4,4\n3,4,4\n3,5,5\n3,6,6\n"
        "40,7,7,8\n41,7,7\n",
        &f);
    check_column(&r, SP_COL_TIME, 6, WANT(0, 1, 2, 3, 3, 41));
    check_column(&r, SP_COL_SPEED, 6, WANT(2, 2, 2, 4, 5, 7));
    check_column(&r, SP_COL_GEAR, 6, WANT(1, 1, 3, 4, 5, 7));
    assert_int_equal(r.t.repairs.rows_read, 10);
    assert_int_equal(r.t.repairs.backward_dropped, 2);
    assert_int_equal(r.t.repairs.text_held, 4); /* x, NaN, the row "four", the row with a stray 8 */
    assert_int_equal(r.t.repairs.range_held, 1);
    assert_int_equal(r.t.repairs.gaps, 1);
    done(&r);
    /* blanks are their own matter */
    refused("time [s],speed [m/s]\n0,1\n1,\n", &f, 1, 3, "speed [m/s]", "blank");
    /* a wild stamp must not swallow the rest */
    r = read_text("time [s],speed [m/s],mark\n0,1,a\n1,2,a\n90000,3,b\n2,4,c\n3,5,c\n", &f);
    check_column(&r, SP_COL_TIME, 4, WANT(0, 1, 2, 3));
    check_column(&r, SP_COL_SPEED, 4, WANT(1, 2, 4, 5));
    assert_int_equal(r.t.repairs.gaps, 0);
    assert_int_equal(r.t.repairs.backward_dropped, 1);
    assert_int_equal(r.t.marks, 2);
    assert_int_equal(r.t.mark[1].row, 2);
    assert_string_equal(r.t.mark[1].text, "c");
    done(&r);
    refused("time [s],speed [m/s]\n9000,1\n1,2\n2,2\n3,2\n4,2\n9001,1\n", &f, 1, 0, "time [s]",
            "more than half");
    /* but a true gap stays, and the late row is the one that goes */
    r = read_text("time [s],speed [m/s]\n0,1\n1,2\n90000,3\n100,4\n90001,5\n", &f);
    check_column(&r, SP_COL_TIME, 4, WANT(0, 1, 90000, 90001));
    assert_int_equal(r.t.repairs.gaps, 1);
    assert_int_equal(r.t.repairs.backward_dropped, 1);
    done(&r);
}

static void blanks_held(void **state)
{
    (void)state;
    struct sp_trace_format f = {.blank = SP_BLANK_HOLD};
    struct reading r = read_text("time [s],speed [m/s],gear\n0,,\n1,2,\n2\n3,4,5\n4,,6\n", &f);
    check_column(&r, SP_COL_SPEED, 5, WANT(2, 2, 2, 4, 4));
    check_column(&r, SP_COL_GEAR, 5, WANT(5, 5, 5, 5, 6));
    assert_int_equal(r.t.repairs.cells_held, 6);
    done(&r);
    refused("time [s],speed [m/s],gear\n0,1,\n1,2,\n", &f, 1, 0, "gear", "no value");
    refused("time [s],speed [m/s],gear\n0,1,1\n,2,\n", &f, 1, 3, "time [s]", "blank");
}

static void mapped_logger(void **state)
{
    (void)state;
    struct sp_trace_format f = {
        .delimiter = ';', .decimal = ',', .skip_lines = 2, .units_row = true, .clock = true};
    f.column[SP_COL_TIME].heading = " Zeit ";
    f.column[SP_COL_SPEED].heading = "v GPS";
    f.column[SP_COL_COOLANT].heading = "T_W\xC3\xA4sser";
    f.column[SP_COL_COOLANT].unit = "degC";
    struct reading r = read_text(
        "Logger;7\r\n\"unclosed\r\nZeit;v GPS;T_W\xC3\x83\xC2\xA4sser;Bla;speed_x\r\nh:m:s;km/h;[K];V;\r\n"
        "23:59:58,500;36,0;90;hm;x\r\n00:00:00,000;\"72,0\";90,5;;\r\n0:00:01;0;91;;\r\n",
        &f);
    check_column(&r, SP_COL_TIME, 3, WANT(0, 1.5, 2.5));
    check_column(&r, SP_COL_SPEED, 3, WANT(10, 20, 0));
    check_column(&r, SP_COL_COOLANT, 3, WANT(363.15, 363.65, 364.15));
    done(&r);
    refused("a\nb\nZeit;v GPS;T_W\xE4sser\nh;km/h;\n23:59:58;1.000,5;90\n23:60:00;1;90\n24:00:00;1;90\n", &f,
            2, 6, "Zeit", "hh:mm:ss");
    refused("a\nb\nZeit;vGPS;T_W\xE4sser\nh;km/h;\n1:00:00;1;90\n1:00:01;1;90\n", &f, 1, 3, "speed", "vGPS");
    refused("a\nb\nZeit;v GPS;T_W\xE4sser\nh;km/h;\n1:00:00;1.000;90\n1:00:01;1;90\n", &f, 1, 5, "v GPS",
            "1.000");
    f.delimiter = ',';
    refused("a", &f, 1, 0, "decimal", "delimiter");
    struct sp_trace_format days = {.clock = true, .longest_gap = 9 * 3600.0};
    r = read_text("time,speed [m/s]\n20:00:00,1\n4:00:00,1\n12:00:00,1\n20:00:00,1\n4:00:00,1\n", &days);
    check_column(&r, SP_COL_TIME, 5, WANT(0, 28800, 57600, 86400, 115200));
    done(&r);
}

/* With any mapping, headings that are not ours are none of our business, and a heading may be named
 * without its unit; the unit then comes from the brackets. */
static void mapping_rules(void **state)
{
    (void)state;
    struct sp_trace_format f = {0};
    f.column[SP_COL_TIME].heading = "ENGINE_RUN_TIME";
    f.column[SP_COL_TIME].unit = "s";
    f.column[SP_COL_SPEED].heading = "Speed";
    struct reading r = read_text(
        "ENGINE_RUN_TIME (),Speed (kph),gear,other [x],note,\n0.0, 36,2,x,,1\n1.0, 72,3,,y,2,\n", &f);
    check_column(&r, SP_COL_SPEED, 2, WANT(10, 20));
    check_column(&r, SP_COL_GEAR, 2, WANT(2, 3));
    done(&r);
    refused("ENGINE_RUN_TIME (),Speed (kph),Speed (m/s)\n0,1,1\n1,1,1\n", &f, 1, 1, "Speed (m/s)",
            "second column");
    f.column[SP_COL_WAKE].heading = "Speed";
    refused("ENGINE_RUN_TIME (),Speed (kph)\n0,1\n1,1\n", &f, 1, 1, "Speed (kph)", "mapped to both");
}

static void whole_seconds_and_doubles(void **state)
{
    (void)state;
    struct sp_trace_format f = {.whole_seconds = true};
    const char *text = "time [s],speed [m/s]\n0,1\n0,2\n1,2\n1,2\n1,3\n1,4\n3,5\n";
    struct reading r = read_text(text, &f);
    check_column(&r, SP_COL_TIME, 7, WANT(0, 0.5, 1, 1.25, 1.5, 1.75, 3));
    done(&r);
    f.drop_doubles = true;
    r = read_text(text, &f);
    check_column(&r, SP_COL_TIME, 6, WANT(0, 0.5, 1, 1 + 1 / 3.0, 1 + 2 / 3.0, 3));
    check_column(&r, SP_COL_SPEED, 6, WANT(1, 2, 2, 3, 4, 5));
    assert_int_equal(r.t.repairs.doubles_dropped, 1);
    done(&r);
    /* no doubles: another mark; a first value that happens to be 0 */
    f.blank = SP_BLANK_HOLD;
    r = read_text("time [s],speed [m/s],gear,mark\n0,0,,a\n0,0,0,a\n0,0,0,b\n0,0,0,b\n1,0,0,b\n", &f);
    check_column(&r, SP_COL_TIME, 4, WANT(0, 1 / 3.0, 2 / 3.0, 1));
    assert_int_equal(r.t.repairs.doubles_dropped, 1);
    assert_int_equal(r.t.mark[1].row, 2);
    done(&r);
    f.blank = SP_BLANK_REFUSE;
    refused("time [s],speed [m/s]\n0,1\n0.5,2\n1,2\n", &f, 1, 3, "time [s]", "whole seconds");
    refused("time [s],speed [m/s]\n0,1\n1,2\n0,2\n", &f, 1, 4, "time [s]", "a step back");
}

static void derived_speed(void **state)
{
    (void)state;
    /* s = t^2 at uneven times: the three-point difference is exact inside, half a step off at the ends */
    struct reading r = read_text("time [s],distance [m]\n0,0\n1,1\n3,9\n4,16\n", NULL);
    check_column(&r, SP_COL_SPEED, 4, WANT(1, 2, 6, 7));
    done(&r);
    r = read_text("time [s],distance [m]\n0,0\n0,0\n1,1\n1,1\n2,5\n2,5\n", NULL);
    check_column(&r, SP_COL_SPEED, 6, WANT(1, 1, 1, 4, 4, 4));
    done(&r);
    refused("time [s],distance [m]\n0,0\n1,1\n\n2,200\n3,201\n", NULL, 1, 5, "distance [m]", "199 m in 1 s");
    refused("time [s],distance [m]\n0,0\n1,1\n1,2\n3,3\n", NULL, 1, 4, "distance [m]", "1 m in 0 s");
    struct sp_trace_format f = {.repair = true};
    r = read_text("time [s],distance [m]\n0,0\n1,1\n2,200\n3,201\n", &f);
    check_column(&r, SP_COL_SPEED, 4, WANT(1, 1, 1, 1));
    assert_int_equal(r.t.repairs.range_held, 1);
    done(&r);
    r = read_text("time [s],distance [m]\n0,0\n1,1\n1,2\n3,3\n", &f);
    check_column(&r, SP_COL_SPEED, 4, WANT(1, 1, 0.5, 0.5));
    done(&r);
}

static void derived_time(void **state)
{
    (void)state;
    /* trapezoid of 1/v: 100 m from 10 to 20 m/s takes 100 (1/10 + 1/20)/2 = 7.5 s */
    struct reading r = read_text("distance [km],speed [m/s]\n5,10\n5.1,20\n5.3,20\n5.3,10\n5.4,10\n", NULL);
    check_column(&r, SP_COL_TIME, 5, WANT(0, 7.5, 17.5, 17.5, 27.5));
    done(&r);
    refused("distance [m],speed [m/s]\n0,0\n10,10\n20,12\n", NULL, 1, 2, "speed [m/s]", "without time");
    refused("distance [m],speed [m/s]\n0,5\n10,10\n\n5,12\n", NULL, 1, 5, "distance [m]", "a step back");
}

static void format_refused(void **state)
{
    (void)state;
    const char *text = "time [s],speed [m/s]\n0,1\n1,1\n";
    struct sp_trace_format f = {.skip_lines = -1};
    refused(text, &f, 1, 0, "skip_lines", "0 to 1000");
    f = (struct sp_trace_format){.delimiter = '"'};
    refused(text, &f, 1, 0, "delimiter", "belongs to cells");
    f = (struct sp_trace_format){.decimal = ';'};
    refused(text, &f, 1, 0, "decimal", "a point or a comma");
    f = (struct sp_trace_format){.longest_gap = NAN};
    refused(text, &f, 1, 0, "longest_gap", "above 0");
    f = (struct sp_trace_format){.skip_lines = 9};
    refused(text, &f, 1, 0, NULL, "no heading line");
}

static void marks_sanitised(void **state)
{
    (void)state;
    struct reading r = read_text("time [s],speed [m/s],mark\n0,1,\"a\tb\nc\"\n1,1,\xE9t\xE9\n2,1,\"  "
                                 "\"\n3,1,\xE9t\xE9\n4,1,\xE9t\xE9\n",
                                 NULL);
    assert_int_equal(r.status, SP_OK);
    assert_int_equal(r.t.marks, 3);
    assert_string_equal(r.t.mark[0].text, "a b c");
    assert_string_equal(r.t.mark[1].text, "\xC3\xA9t\xC3\xA9");
    assert_int_equal(r.t.mark[2].row, 3);
    done(&r);
}

/* Complaints stop at their cap and are counted; a cell that never ends is refused early. */
static void floods(void **state)
{
    (void)state;
    size_t n = 20 + 1000 * 4;
    char *text = malloc(n + 200000), *p = text;
    assert_non_null(text);
    p += sprintf(p, "time [s],speed [m/s]\n");
    for (int i = 0; i < 1000; i++)
        p += sprintf(p, "%d,x\n", i % 10);
    struct reading r = read_text(text, NULL);
    assert_int_equal(r.c.count, SP_COMPLAINTS_MAX);
    assert_int_equal(r.c.dropped, 1000 + 99 - SP_COMPLAINTS_MAX);
    done(&r);
    p = text + sprintf(text, "time [s],speed [m/s]\n0,\"");
    memset(p, '1', 199000);
    p[199000] = '\0';
    refused(text, NULL, 1, 2, NULL, "64 KiB");
    free(text);
}

static void locale_does_not_matter(void **state)
{
    (void)state;
    if (!setlocale(LC_ALL, "de_DE.UTF-8")) skip();
    struct reading r = read_text("time [s],speed [m/s]\n0,1.5\n1,2.12345678901234567890\n", NULL);
    check_column(&r, SP_COL_SPEED, 2, WANT(1.5, 2.1234567890123457));
    done(&r);
    setlocale(LC_ALL, "C");
}

/* Through the disk, in chunks: the same as from memory; what cannot be read is said. */
static void files(void **state)
{
    (void)state;
    static const struct sp_trace_format plain;
    char name[] = "/tmp/sp_trace_XXXXXX";
    int fd = mkstemp(name);
    assert_true(fd >= 0);
    FILE *out = fdopen(fd, "w");
    assert_non_null(out);
    fputs("time [s],speed [m/s],mark\n", out);
    for (int i = 0; i < 40000; i++)
        fprintf(out, "%.2f,%.3f,m%d\n", i * 0.02, 20 + 0.001 * (i % 1000), i / 1000);
    fclose(out);
    struct reading r = {0};
    r.status = sp_trace_read(units, name, NULL, &plain, &r.t, &r.c);
    assert_int_equal(r.status, SP_OK);
    assert_int_equal(r.t.rows, 40000);
    assert_int_equal(r.t.marks, 40);
    for (int i = 0; i < 40000; i++) {
        check_close(r.t.column[SP_COL_TIME][i], i * 0.02, 0, 1e-9);
        check_close(r.t.column[SP_COL_SPEED][i], 20 + 0.001 * (i % 1000), 1e-12, 0);
    }
    for (size_t i = 0; i < 40; i++)
        assert_int_equal(r.t.mark[i].row, 1000 * i);
    done(&r);
    remove(name);
    static const char *bad[] = {"/nowhere/at/all.csv", "/", "/dev/zero"};
    for (size_t i = 0; i < 3; i++) {
        struct reading b = {0};
        assert_int_equal(sp_trace_read(units, bad[i], "case.json", &plain, &b.t, &b.c), SP_INPUT);
        assert_int_equal(b.c.count, 1);
        assert_string_equal(b.c.list[0].file, bad[i]);
        assert_string_equal(b.c.list[0].named_by, "case.json");
        done(&b);
    }
}

static void names_of_columns(void **state)
{
    (void)state;
    for (int c = 0; c < SP_COLUMNS; c++) {
        assert_non_null(sp_column_name((enum sp_column)c));
        assert_non_null(sp_column_meaning((enum sp_column)c));
    }
    assert_string_equal(sp_column_name(SP_COL_ENGINE_SPEED), "engine_speed");
    assert_int_equal(sp_column_kind(SP_COL_ENGINE_SPEED), SP_K_ROTATION);
    assert_null(sp_column_name(SP_COLUMNS));
}

static int open_units(void **state)
{
    (void)state;
    units = sp_units_open();
    return units ? 0 : -1;
}

static int close_units(void **state)
{
    (void)state;
    sp_units_close(units);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(plain_file),     cmocka_unit_test(units_and_temperatures),
        cmocka_unit_test(odd_but_right),  cmocka_unit_test(headings_refused),
        cmocka_unit_test(cells_refused),  cmocka_unit_test(impossible_values_refused),
        cmocka_unit_test(order_of_time),  cmocka_unit_test(repaired_and_counted),
        cmocka_unit_test(blanks_held),    cmocka_unit_test(mapped_logger),
        cmocka_unit_test(mapping_rules),  cmocka_unit_test(whole_seconds_and_doubles),
        cmocka_unit_test(derived_speed),  cmocka_unit_test(derived_time),
        cmocka_unit_test(format_refused), cmocka_unit_test(marks_sanitised),
        cmocka_unit_test(floods),         cmocka_unit_test(locale_does_not_matter),
        cmocka_unit_test(files),          cmocka_unit_test(names_of_columns),
    };
    return cmocka_run_group_tests(tests, open_units, close_units);
}
