/* Quantities: values, kinds, and texts that must not get through.
 * Conversion values: NIST Special Publication 811 (2008), appendix B, unless said otherwise.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "swirlpot/base.h"

#include <string.h>

static struct sp_units *units;

static void reads_at(enum sp_kind kind, const char *text, double want, double rtol, int line)
{
    char why[300] = "";
    double si = -777.0;
    if (!sp_quantity_read(units, kind, text, &si, why, sizeof why)) {
        print_error("line %d: \"%s\" refused as %s: expected %s\n", line, text, sp_kind_name(kind), why);
        fail();
    }
    check_close_at(si, want, rtol, 0.0, text, __FILE__, line);
}
#define reads(kind, text, want) reads_at(kind, text, want, 1e-15, __LINE__)
#define reads_about(kind, text, want, rtol) reads_at(kind, text, want, rtol, __LINE__)

/* Refused, the output untouched, and `part` (may be NULL) said in why. */
static void refuses_at(enum sp_kind kind, const char *text, const char *part, int line)
{
    char why[300] = "";
    double si = -777.0;
    bool taken = sp_quantity_read(units, kind, text, &si, why, sizeof why);
    if (taken || si < -777.0 || si > -777.0 || !why[0] || (part && !strstr(why, part))) {
        print_error("line %d: \"%s\" as %s: %s, si %g, why \"%s\", wanted \"%s\"\n", line, text,
                    sp_kind_name(kind), taken ? "taken" : "refused", si, why, part ? part : "");
        fail();
    }
}
#define refuses(kind, text, part) refuses_at(kind, text, part, __LINE__)

static void test_contract(void **state)
{
    (void)state;
    reads(SP_K_LENGTH, "0 m", 0.0);
    reads(SP_K_NUMBER, "0 %", 0.0);
    reads(SP_K_TEMPERATURE, "0 degC", 273.15);
    reads(SP_K_AREA, "1.2000000000000002 m2", 1.2000000000000002);
    reads(SP_K_TEMPERATURE, "33 degC", 306.15);
    reads(SP_K_AREA, "450 cm2", 0.045);
    reads(SP_K_AREA, "450cm2", 0.045);
    reads(SP_K_AREA, " 450  cm2 ", 0.045);
    reads(SP_K_LENGTH, "240 m", 240.0);
    reads(SP_K_NUMBER, "45 %", 0.45);
    reads(SP_K_TEMP_DIFF, "12 K", 12.0);
    reads(SP_K_TEMP_DIFF, "18 degR", 10.0);
    reads(SP_K_TIME, "5 min", 300.0);
    reads(SP_K_SPEED, "60 km/h", 60.0 / 3.6);
    reads(SP_K_LINEAR_DROP, "60 Pa.s/m", 60.0);
    reads(SP_K_QUADRATIC_DROP, "12 Pa.s2/m2", 12.0);
    reads(SP_K_DENSITY, "1.2 kg/m3", 1.2);
    reads(SP_K_VOLUME_FLOW, "0.8 m3/s", 0.8);
    reads(SP_K_PRESSURE, "250 Pa", 250.0);
}

static void test_trade(void **state)
{
    (void)state;
    reads(SP_K_SPEED, "100 mph", 44.704);
    reads(SP_K_SPEED, "100 kph", 100.0 / 3.6);
    reads(SP_K_SPEED, "1 knot", 1852.0 / 3600.0);
    reads_about(SP_K_VOLUME_FLOW, "1000 cfm", 0.4719474432, 1e-15); /* 1 ft3 = 0.028316846592 m3 */
    reads(SP_K_VOLUME_FLOW, "10 gpm", 37.85411784e-3 / 60.0);       /* 231 in3 */
    reads(SP_K_VOLUME, "1 gal", 3.785411784e-3);
    reads(SP_K_VOLUME, "6.5 l", 6.5e-3);
    reads(SP_K_VOLUME_FLOW, "110 l/min", 0.110 / 60.0);
    reads(SP_K_VOLUME_FLOW, "110 L/min", 0.110 / 60.0);
    reads_about(SP_K_VOLUME_FLOW, "2 m3/h", 2.0 / 3600.0, 1e-15);
    reads(SP_K_PRESSURE, "1 inH2O", 249.08891); /* conventional: 1000 kg/m3, 9.80665 m/s2, 25.4 mm */
    reads(SP_K_PRESSURE, "1 mmH2O", 9.80665);
    reads(SP_K_PRESSURE, "10 cmH2O", 980.665);
    reads(SP_K_POWER, "100 PS", 73549.875);                     /* 75 kgf m/s */
    reads_about(SP_K_POWER, "1 hp", 745.69987158227022, 1e-15); /* 550 ft lbf/s */
    reads_about(SP_K_POWER, "220 bhp", 220 * 745.69987158227022, 1e-15);
    reads(SP_K_ANGLE, "180 deg", 3.14159265358979323846);
    reads(SP_K_ANGLE, "2 rad", 2.0);
    reads(SP_K_TORQUE, "240 Nm", 240.0);
    reads(SP_K_TORQUE, "240 N.m", 240.0);
    reads(SP_K_TORQUE, "240 N m", 240.0);
    reads(SP_K_TORQUE, "240 N-m", 240.0);
    reads_about(SP_K_TORQUE, "100 lb-ft", 135.5817948331400, 1e-15); /* 1 lbf ft = 1.35581794833140 N m */
    reads_about(SP_K_TORQUE, "100 lbf.ft", 135.5817948331400, 1e-14);
    reads(SP_K_ENERGY, "2 kWh", 7.2e6);
    reads(SP_K_ENERGY, "500 Wh", 1.8e6);
    reads(SP_K_ENERGY, "2.5 MJ", 2.5e6);
    reads(SP_K_ENERGY, "3 kW h", 1.08e7);
    reads_about(SP_K_PRESSURE, "1 psi", 6894.757293168361, 1e-15);
    reads_about(SP_K_PRESSURE, "14.7 psia", 14.7 * 6894.757293168361, 1e-15);
    reads_about(SP_K_GAUGE, "16 psig", 16 * 6894.757293168361, 1e-15);
    reads(SP_K_GAUGE, "1.1 barg", 1.1e5);
    reads(SP_K_GAUGE, "1.1 bar", 1.1e5);
    reads(SP_K_GAUGE, "110 kPa", 1.1e5);
    reads(SP_K_FILM, "60 W/m2K", 60.0);
    reads(SP_K_FILM, "60 W/m2/K", 60.0);
    reads(SP_K_FILM, "60 W/(m2 K)", 60.0);
    reads(SP_K_FILM, "60 W.m-2.K-1", 60.0);
    reads(SP_K_FILM, "60 W/m\xc2\xb2K", 60.0);
    reads(SP_K_CONDUCTIVITY, "170 W/mK", 170.0);
    reads(SP_K_CONDUCTIVITY, "170 W/m/K", 170.0);
    reads(SP_K_CONDUCTANCE, "60 kW/100K", 600.0);
    reads(SP_K_CONDUCTANCE, "0.9 kW/K", 900.0);
    reads(SP_K_CAPACITY, "45 kJ/K", 45e3);
    reads_about(SP_K_CAPACITY, "1 J/degR", 1.8, 1e-15);
    reads(SP_K_HEATING_VALUE, "42.9 MJ/kg", 42.9e6);
    reads(SP_K_COMPLIANCE, "0.02 l/bar", 2e-10);
    reads(SP_K_FRICTION, "0.45 N.s2/m2", 0.45);
    reads_about(SP_K_FRICTION, "1 N/(km/h)^2", 12.96, 1e-15);
    reads_about(SP_K_FRICTION, "1 lbf/mph2", 4.4482216152605 / (0.44704 * 0.44704), 1e-14);
    reads(SP_K_MASS_FLOW, "60 g/s", 0.06);
    reads_about(SP_K_MASS_FLOW, "60 lb/min", 0.45359237, 1e-15);
    reads(SP_K_LENGTH, "1 nmi", 1852.0);
    reads(SP_K_LENGTH, "2 in", 0.0508);
    reads(SP_K_VOLTAGE, "13.8 V", 13.8);
    reads(SP_K_CURRENT, "22 A", 22.0);
    reads(SP_K_FORCE, "1 kgf", 9.80665);
    reads(SP_K_MASS, "10 lb", 4.5359237);
    reads(SP_K_MASS, "1.2 t", 1200.0);
}

static void test_rotation(void **state)
{
    static const char *const a_minute[] = {"6000 rpm",   "6000 1/min", "6000 rev/min", "6000 r/min",
                                           "6000 min-1", "6000rpm",    "6000 RPM"};
    static const char *const a_second[] = {"100 rev/s", "100 1/s", "100 Hz", "100 s-1"};
    (void)state;
    for (size_t i = 0; i < sizeof a_minute / sizeof *a_minute; i++) reads(SP_K_ROTATION, a_minute[i], 100.0);
    for (size_t i = 0; i < sizeof a_second / sizeof *a_second; i++) reads(SP_K_ROTATION, a_second[i], 100.0);
    reads(SP_K_ROTATION, "628.318530717958647692 rad/s", 100.0);
    refuses(SP_K_ROTATION, "6000", "rpm");
    refuses(SP_K_ROTATION, "6000 Bq", "rpm");
    refuses(SP_K_ROTATION, "6000 deg", NULL);
    refuses(SP_K_ROTATION, "60001/min", NULL);
}

static void test_temperatures(void **state)
{
    (void)state;
    reads(SP_K_TEMPERATURE, "300 K", 300.0);
    reads(SP_K_TEMPERATURE, "-40 degC", 233.15);
    reads(SP_K_TEMPERATURE, "-40 degF", 233.15);
    reads(SP_K_TEMPERATURE, "212 degF", 373.15);
    reads(SP_K_TEMPERATURE, "491.67 degR", 273.15);
    reads(SP_K_TEMPERATURE,
          "92 \xc2\xb0"
          "C",
          365.15);
    refuses(SP_K_TEMPERATURE, "92 C", "degC");
    refuses(SP_K_TEMPERATURE, "92 F", "degF");
    refuses(SP_K_TEMPERATURE, "92", "missing");
    refuses(SP_K_TEMPERATURE, "0 K", "above 0 K");
    refuses(SP_K_TEMPERATURE, "-0 K", "above 0 K");
    refuses(SP_K_TEMPERATURE, "-1 K", "above 0 K");
    refuses(SP_K_TEMPERATURE, "-273.15 degC", "above 0 K");
    refuses(SP_K_TEMPERATURE, "-459.67 degF", "above 0 K");
    refuses(SP_K_TEMPERATURE, "5000 K", "5000 K");
    refuses(SP_K_TEMPERATURE, "1e300 degC", "5000 K");
    reads(SP_K_TEMPERATURE, "4999.9 K", 4999.9);
    refuses(SP_K_TEMPERATURE, "92 celsius", "degC");
    refuses(SP_K_TEMPERATURE, "92 deg C", "degC");
    refuses(SP_K_TEMPERATURE, "92 mK", NULL);
    refuses(SP_K_TEMPERATURE, "92 degC2", NULL);
    refuses(SP_K_TEMP_DIFF, "8 degC", "written in K");
    refuses(SP_K_TEMP_DIFF, "8 degF", "written in K");
    refuses(SP_K_TEMP_DIFF,
            "8 \xc2\xb0"
            "C",
            "written in K");
    refuses(SP_K_TEMP_DIFF, "8 C", "written in K");
    refuses(SP_K_TEMP_DIFF, "8", "missing");
    /* Within other units too. */
    refuses(SP_K_CONDUCTANCE, "900 W/degC", "write K");
    refuses(SP_K_CONDUCTANCE, "900 W/degF", "write K");
    refuses(SP_K_CONDUCTANCE, "900 W/celsius", "write K");
    refuses(SP_K_CONDUCTANCE,
            "900 W/\xc2\xb0"
            "C",
            "write K");
    refuses(SP_K_FILM, "60 W/m2/degC", "write K");
    refuses(SP_K_FILM, "60 W/(m2 degC)", "write K");
    refuses(SP_K_CONDUCTANCE, "900 W/C", "degC");
    refuses(SP_K_LENGTH, "1 degC", NULL);
}

static void test_wrong_kind(void **state)
{
    (void)state;
    refuses(SP_K_AREA, "450 cm", "an area such as \"450 cm2\"");
    refuses(SP_K_AREA, "450 cm3", "an area such as");
    refuses(SP_K_MASS_FLOW, "110 l/min", "a mass flow");
    refuses(SP_K_VOLUME_FLOW, "1 kg/s", "a volume flow");
    refuses(SP_K_SPEED, "30 s/m", "a speed"); /* UDUNITS converts reciprocals silently */
    refuses(SP_K_TIME, "30 Hz", "a time");
    refuses(SP_K_TIME, "30 m", "a time");
    refuses(SP_K_TORQUE, "240 J", "a torque");
    refuses(SP_K_TORQUE, "240 kWh", "a torque");
    refuses(SP_K_TORQUE, "240 W.s", "a torque");
    refuses(SP_K_ENERGY, "240 Nm", "an energy");
    refuses(SP_K_ENERGY, "240 N.m", "an energy");
    refuses(SP_K_PRESSURE, "16 psig", "gauge");
    refuses(SP_K_PRESSURE, "1.1 barg", "gauge");
    refuses(SP_K_GAUGE, "14.7 psia", "no gauge");
    refuses(SP_K_GAUGE, "1 bara", "no gauge");
    refuses(SP_K_LENGTH, "1 m.rad", NULL); /* radians are no mere number */
    refuses(SP_K_LENGTH, "5 % m", NULL);
    refuses(SP_K_LENGTH, "5 percent.m", NULL);
    refuses(SP_K_NUMBER, "5 m", "%");
    refuses(SP_K_NUMBER, "5 rad", NULL);
    refuses(SP_K_NUMBER, "5 m/m", NULL);
    refuses(SP_K_NUMBER, "5 ppm", NULL);
    refuses(SP_K_ANGLE, "5 %", "deg");
    refuses(SP_K_ANGLE, "5", "missing");
    refuses(SP_K_POWER, "100 kWh", "a power");
    refuses(SP_K_VOLUME, "5 l/min", "a volume");
    reads(SP_K_NUMBER, "0.85", 0.85);
    reads(SP_K_NUMBER, "85%", 0.85);
    reads(SP_K_NUMBER, "85 1", 85.0);
    refuses(SP_K_MASS, "500 gr", "g or grain");
    refuses(SP_K_MASS, "1.2 ton", "1000 kg");
}

static void test_accidents(void **state)
{
    static const char *const texts[] = {
        "",
        " ",
        "m",
        "m 5",
        "5",
        "5 ",
        "5 @ m",
        "5 m @ 3",
        "5 m@3",
        "5 m since 1970",
        "5 m from 3",
        "5 m after 3",
        "5 m ref 3",
        "5 since",
        "5 per",
        "5 m per",
        "5 lg(re 1 m)",
        "5 ln(re m)",
        "5 lb(re m)",
        "5 log(m)",
        "5 dB",
        "5 dBm",
        "5 dBZ",
        "5 2 m",
        "5 m 2",
        "5 2m",
        "5 m.2",
        "5 2.m",
        "5 m/2",
        "5 m*3",
        "5 m m-1 m 3",
        "5 m2m-1",
        "5 (2 m)",
        "5 m10",
        "5 m1.0",
        "5 m0",
        "5 m s0",
        "5 m.s^-0",
        "5 m^0",
        "5 m^",
        "5 m^-",
        "5 m+",
        "5 m^^2",
        "5 m**2 m",
        "5 m22 m-21",
        "5 m^1.5",
        "5 m)",
        "5 (m",
        "5 ()",
        "5 m()",
        "5 (m)(",
        "5 ((((((((((m))))))))))",
        "5 .m",
        "5 m.",
        "5 m-",
        "5 m/",
        "5 /m-1",
        "5 - m",
        "5 -m",
        "5 *m",
        "5 m..m",
        "5 1e3 m",
        "5 e3 m",
        "5 E3 m",
        "0x5 m",
        "5 0x5 m",
        "inf m",
        "nan m",
        "-inf m",
        "infinity",
        "1e400 m",
        ".5 m",
        "5. m",
        "5,0 m",
        "1 000 m",
        "1/2 m",
        "+ 5 m",
        "5\tm",
        "5 m\n",
        "\n5 m",
        "5 m\r",
        "5 \x1b[0m",
        "5 m\x7f",
        "5 \"",
        "5 '",
        "5 ft '",
        "5 m;",
        "5 m,",
        "5 m m/m",
        "5 #m",
        "5 $",
        "5 \xff",
        "5 m\xff",
        "5 \xc3\xa5",
        "5 m\xc2",
        "5 m\xe2\x81\xbb\xc2\xb9",
        "5 m\xc2\xb2\xc2\xb2",
        "1e308 km",
        "5 m9 m-8",
        "5 (((m9)9)9)9",
        "5 (((((((km9)9)9)9)9)9)9)",
        "5 c",
        "5 pi.m",
        "5 m s/min",
        "5 m/s s",
        "5 m UTC",
        "5 12:30",
        "5 m 1970-01-01",
        "5 m-1 m2",
        "5 H2O",
        "5 m2O",
        "5 2H2O",
        "5 mmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmmm",
        "5 m                                                                     .m.m-1"};
    static const char *const taken[] = {"5 m s/min", "5 m m/m", "5 m9 m-8",
                                        "5 m-1 m2"}; /* a length after all */
    (void)state;
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) {
        bool fine = false;
        for (size_t k = 0; k < sizeof taken / sizeof *taken; k++) fine = fine || !strcmp(texts[i], taken[k]);
        if (!fine) refuses(SP_K_LENGTH, texts[i], "a length such as \"320 mm\"");
    }
    refuses(SP_K_LENGTH, NULL, "decimal number");
    reads_about(SP_K_LENGTH, "60 m s/min", 1.0, 1e-15);
    refuses(SP_K_AREA, "5 m22", "number inside");
    refuses(SP_K_HEATING_VALUE, "5 J/kg K", "above or below");
    refuses(SP_K_LENGTH, "5 foo", "\"foo\" is no known unit");
}

static void test_exponents(void **state)
{
    (void)state;
    reads(SP_K_AREA, "5 m2", 5.0);
    reads(SP_K_AREA, "5 m^2", 5.0);
    reads(SP_K_AREA, "5 m+2", 5.0);
    reads(SP_K_AREA, "5 m m", 5.0);
    reads(SP_K_AREA, "5 m\xc2\xb7m", 5.0);
    reads(SP_K_AREA, "5 (m)2", 5.0);
    reads(SP_K_AREA, "5 (m-2)^-1", 5.0);
    reads(SP_K_SPEED, "5 m s-1", 5.0);
    reads(SP_K_SPEED, "5 m.s^-1", 5.0);
    reads(SP_K_SPEED, "5 m / s", 5.0);
    reads(SP_K_SPEED, "5 m/(s)", 5.0);
    reads_about(SP_K_LENGTH, "5 \xc2\xb5m", 5e-6, 1e-15);
}

static void test_scale(void **state)
{
    char why[20];
    double scale = 0, offset = -1;
    (void)state;
    assert_true(sp_unit_scale(units, SP_K_SPEED, "km/h", &scale, &offset, why, sizeof why));
    check_close(scale, 1.0 / 3.6, 1e-15, 0.0);
    check_close(offset, 0.0, 0.0, 0.0);
    assert_true(sp_unit_scale(units, SP_K_TEMPERATURE, "degF", &scale, &offset, why, sizeof why));
    check_close(scale * 32 + offset, 273.15, 1e-15, 0.0);
    assert_true(sp_unit_scale(units, SP_K_NUMBER, "", &scale, &offset, why, sizeof why));
    check_close(scale, 1.0, 0.0, 0.0);
    assert_true(sp_unit_scale(units, SP_K_NUMBER, NULL, &scale, &offset, why, sizeof why));
    assert_false(sp_unit_scale(units, SP_K_SPEED, "", &scale, &offset, why, sizeof why));
    assert_false(sp_unit_scale(units, SP_K_SPEED, NULL, &scale, &offset, why, sizeof why));
    assert_false(sp_unit_scale(units, SP_K_SPEED, "5 m/s", &scale, &offset, why, sizeof why));
    assert_true(strlen(why) < sizeof why);
    assert_false(sp_unit_scale(units, SP_K_SPEED, "kg", &scale, &offset, NULL, 0));
    assert_false(sp_unit_scale(units, SP_K_SPEED, "kg", &scale, &offset, why, 1));
    assert_string_equal(why, "");
    assert_false(sp_unit_scale(NULL, SP_K_SPEED, "m/s", &scale, &offset, why, sizeof why));
}

/* Every kind reads its own SI unit with scale 1, and the example of its own complaint. */
static void test_every_kind(void **state)
{
    char why[300], text[60];
    double scale, offset, si;
    (void)state;
    for (enum sp_kind k = 0; k < SP_KINDS; k++) {
        const char *start, *stop;
        assert_true(sp_unit_scale(units, k, sp_kind_si(k), &scale, &offset, why, sizeof why));
        check_close(scale, 1.0, 0.0, 0.0);
        check_close(offset, 0.0, 0.0, 0.0);
        assert_false(sp_quantity_read(units, k, "x", &si, why, sizeof why));
        start = strchr(why, '"');
        assert_non_null(start);
        stop = strchr(start + 1, '"');
        snprintf(text, sizeof text, "%.*s", (int)(stop - start - 1), start + 1);
        assert_true(sp_quantity_read(units, k, text, &si, why, sizeof why));
    }
    assert_string_equal(sp_kind_si(SP_K_NUMBER), "1");
    assert_string_equal(sp_kind_si(SP_K_AREA), "m2");
    assert_string_equal(sp_kind_name(SP_K_AREA), "area");
    assert_non_null(sp_kind_name((enum sp_kind) - 1));
    assert_non_null(sp_kind_name(SP_KINDS));
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
    sp_units_close(NULL);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(test_contract),   cmocka_unit_test(test_trade),
                                       cmocka_unit_test(test_rotation),   cmocka_unit_test(test_temperatures),
                                       cmocka_unit_test(test_wrong_kind), cmocka_unit_test(test_accidents),
                                       cmocka_unit_test(test_exponents),  cmocka_unit_test(test_scale),
                                       cmocka_unit_test(test_every_kind)};
    return cmocka_run_group_tests(tests, open_units, close_units);
}
