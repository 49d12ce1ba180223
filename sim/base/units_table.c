/* Tables of the unit reader: kinds, spellings, names of the trade.
 *
 * Values: international foot 0.3048 m, pound 0.45359237 kg (exact since 1959), standard gravity
 * 9.80665 m/s2, US gallon 231 in3, metric horsepower 75 kgf m/s, mechanical horsepower 550 ft lbf/s
 * (NIST Special Publication 811, appendix B). inH2O and mmH2O are conventional: water of 1000 kg/m3
 * (about 4 degC) under standard gravity.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/units_inner.h"

#include <string.h>

static const double pi = 3.14159265358979323846;

/* Powers of m, kg, s, A, K, mol, cd, rad. */
static const struct sp_kind_row kinds[SP_KINDS] = {
    [SP_K_NUMBER] = {"number", "1", "a number such as 0.8 or \"80 %\"", true, "%, 1 or none", {0}},
    [SP_K_LENGTH] = {"length", "m", "a length such as \"320 mm\"", false, NULL, {1}},
    [SP_K_AREA] = {"area", "m2", "an area such as \"450 cm2\"", false, NULL, {2}},
    [SP_K_VOLUME] = {"volume", "m3", "a volume such as \"1.5 l\"", false, NULL, {3}},
    [SP_K_TIME] = {"time", "s", "a time such as \"90 s\"", false, NULL, {0, 0, 1}},
    [SP_K_SPEED] = {"speed", "m/s", "a speed such as \"120 km/h\"", false, NULL, {1, 0, -1}},
    [SP_K_MASS] = {"mass", "kg", "a mass such as \"85 kg\"", false, NULL, {0, 1}},
    [SP_K_FORCE] = {"force", "N", "a force such as \"180 N\"", false, NULL, {1, 1, -2}},
    [SP_K_POWER] = {"power", "W", "a power such as \"150 kW\"", false, NULL, {2, 1, -3}},
    [SP_K_ENERGY] = {"energy", "J", "an energy such as \"2.5 MJ\"", false, NULL, {2, 1, -2}},
    [SP_K_TORQUE] = {"torque", "N m", "a torque such as \"240 N.m\"", false, NULL, {2, 1, -2}},
    [SP_K_PRESSURE] = {"pressure", "Pa", "a pressure such as \"101.3 kPa\"", false, NULL, {-1, 1, -2}},
    [SP_K_GAUGE] = {"gauge pressure", "Pa", "a gauge pressure such as \"1.1 bar\" or \"16 psig\"", false,
                    NULL, {-1, 1, -2}},
    [SP_K_TEMPERATURE] = {"temperature", "K", "an absolute temperature such as \"92 degC\"", true,
                          "K, degC, degF or degR", {0, 0, 0, 0, 1}},
    [SP_K_TEMP_DIFF] = {"temperature difference", "K", "a temperature difference such as \"8 K\"", true,
                        "K or degR", {0, 0, 0, 0, 1}},
    [SP_K_DENSITY] = {"density", "kg/m3", "a density such as \"1.2 kg/m3\"", false, NULL, {-3, 1}},
    [SP_K_MASS_FLOW] = {"mass flow", "kg/s", "a mass flow such as \"0.8 kg/s\"", false, NULL, {0, 1, -1}},
    [SP_K_VOLUME_FLOW] = {"volume flow", "m3/s", "a volume flow such as \"110 l/min\"", false, NULL,
                          {3, 0, -1}},
    [SP_K_ROTATION] = {"speed of rotation", "rev/s", "a speed of rotation such as \"6500 rpm\"", true,
                       "rpm, 1/min, rev/min, rev/s, 1/s, Hz or rad/s", {0, 0, -1}},
    [SP_K_ANGLE] = {"angle", "rad", "an angle such as \"12 deg\"", true, "deg or rad",
                    {0, 0, 0, 0, 0, 0, 0, 1}},
    [SP_K_VOLTAGE] = {"voltage", "V", "a voltage such as \"13.8 V\"", false, NULL, {2, 1, -3, -1}},
    [SP_K_CURRENT] = {"current", "A", "a current such as \"22 A\"", false, NULL, {0, 0, 0, 1}},
    [SP_K_CAPACITY] = {"heat capacity", "J/K", "a heat capacity such as \"45 kJ/K\"", false, NULL,
                       {2, 1, -2, 0, -1}},
    [SP_K_CONDUCTANCE] = {"thermal conductance", "W/K", "a thermal conductance such as \"900 W/K\"", false,
                          NULL, {2, 1, -3, 0, -1}},
    [SP_K_FILM] = {"heat transfer coefficient", "W/m2K", "a heat transfer coefficient such as \"60 W/m2K\"",
                   false, NULL, {0, 1, -3, 0, -1}},
    [SP_K_CONDUCTIVITY] = {"thermal conductivity", "W/mK", "a thermal conductivity such as \"170 W/mK\"",
                           false, NULL, {1, 1, -3, 0, -1}},
    [SP_K_LINEAR_DROP] = {"pressure drop per speed", "Pa s/m",
                          "a pressure drop per speed such as \"60 Pa.s/m\"", false, NULL, {-2, 1, -1}},
    [SP_K_QUADRATIC_DROP] = {"pressure drop per speed squared", "Pa s2/m2",
                             "a pressure drop per speed squared such as \"12 Pa.s2/m2\"", false, NULL,
                             {-3, 1}},
    [SP_K_HEATING_VALUE] = {"heating value", "J/kg", "a heating value such as \"42.9 MJ/kg\"", false, NULL,
                            {2, 0, -2}},
    [SP_K_COMPLIANCE] = {"compliance", "m3/Pa", "a compliance such as \"0.02 l/bar\"", false, NULL,
                         {4, -1, 2}},
    [SP_K_FRICTION] = {"drag per speed squared", "N s2/m2",
                        "a drag per speed squared such as \"0.45 N.s2/m2\"", false, NULL, {-1, 1}},
    [SP_K_FOULING] = {"fouling resistance", "m2K/W", "a fouling resistance such as \"1.76e-4 m2K/W\"", false, NULL,
                      {0, -1, 3, 0, 1}},
    [SP_K_CHARGE] = {"electric charge", "A s", "an electric charge such as \"16 A.h\"", false, NULL, {0, 0, 1, 1}},
};

const struct sp_kind_row *sp_kind_row(enum sp_kind kind)
{
    return &kinds[(unsigned)kind < SP_KINDS ? kind : SP_K_NUMBER];
}

#define LBF (0.45359237 * 9.80665)
#define PSI (LBF / (0.0254 * 0.0254))
#define HP (550.0 * 0.3048 * LBF)
#define PS (75.0 * 9.80665)

static const struct sp_spelling spellings[] = {
    {SP_K_NUMBER, "", 1.0, 0.0},
    {SP_K_NUMBER, "1", 1.0, 0.0},
    {SP_K_NUMBER, "%", 0.01, 0.0},
    {SP_K_TEMPERATURE, "K", 1.0, 0.0},
    {SP_K_TEMPERATURE, "degC", 1.0, 273.15},
    {SP_K_TEMPERATURE, "degF", 5.0 / 9.0, 459.67 * 5.0 / 9.0},
    {SP_K_TEMPERATURE, "degR", 5.0 / 9.0, 0.0},
    {SP_K_TEMP_DIFF, "K", 1.0, 0.0},
    {SP_K_TEMP_DIFF, "degR", 5.0 / 9.0, 0.0},
    {SP_K_ROTATION, "rpm", 1.0 / 60.0, 0.0},
    {SP_K_ROTATION, "RPM", 1.0 / 60.0, 0.0},
    {SP_K_ROTATION, "1/min", 1.0 / 60.0, 0.0},
    {SP_K_ROTATION, "rev/min", 1.0 / 60.0, 0.0},
    {SP_K_ROTATION, "r/min", 1.0 / 60.0, 0.0},
    {SP_K_ROTATION, "min-1", 1.0 / 60.0, 0.0},
    {SP_K_ROTATION, "min^-1", 1.0 / 60.0, 0.0},
    {SP_K_ROTATION, "rev/s", 1.0, 0.0},
    {SP_K_ROTATION, "r/s", 1.0, 0.0},
    {SP_K_ROTATION, "rps", 1.0, 0.0},
    {SP_K_ROTATION, "1/s", 1.0, 0.0},
    {SP_K_ROTATION, "s-1", 1.0, 0.0},
    {SP_K_ROTATION, "s^-1", 1.0, 0.0},
    {SP_K_ROTATION, "Hz", 1.0, 0.0},
    {SP_K_ROTATION, "rad/s", 0.5 / pi, 0.0},
    {SP_K_ANGLE, "deg", pi / 180.0, 0.0},
    {SP_K_ANGLE, "degree", pi / 180.0, 0.0},
    {SP_K_ANGLE, "degrees", pi / 180.0, 0.0},
    {SP_K_ANGLE, "rad", 1.0, 0.0},
    {SP_K_ANGLE, "radian", 1.0, 0.0},
    {SP_K_PRESSURE, "psia", PSI, 0.0},
    {SP_K_PRESSURE, "bara", 1e5, 0.0},
    {SP_K_GAUGE, "psig", PSI, 0.0},
    {SP_K_GAUGE, "barg", 1e5, 0.0},
    {SP_K_CONDUCTANCE, "kW/100K", 10.0, 0.0},
    {SP_K_CONDUCTANCE, "kW/100 K", 10.0, 0.0},
    {SP_K_FILM, "W/m2K", 1.0, 0.0},
    {SP_K_FILM, "W/m2 K", 1.0, 0.0},
    {SP_K_FILM, "W/m2.K", 1.0, 0.0},
    {SP_K_CONDUCTIVITY, "W/mK", 1.0, 0.0},
    {SP_K_CONDUCTIVITY, "W/m K", 1.0, 0.0},
    {SP_K_CONDUCTIVITY, "W/m.K", 1.0, 0.0},
    {SP_K_FOULING, "m2K/W", 1.0, 0.0},
    {SP_K_FOULING, "m2 K/W", 1.0, 0.0},
    {SP_K_FOULING, "m2.K/W", 1.0, 0.0},
    {SP_K_CHARGE, "A.h", 3600.0, 0.0},
    {SP_K_TORQUE, "lb-ft", LBF * 0.3048, 0.0},
    {SP_K_TORQUE, "lb.ft", LBF * 0.3048, 0.0},
    {SP_K_TORQUE, "lb ft", LBF * 0.3048, 0.0},
    {SP_K_TORQUE, "lbft", LBF * 0.3048, 0.0},
    {SP_K_TORQUE, "ft-lb", LBF * 0.3048, 0.0},
    {SP_K_TORQUE, "ft.lb", LBF * 0.3048, 0.0},
    {SP_K_TORQUE, "ft lb", LBF * 0.3048, 0.0},
    {SP_K_TORQUE, "ftlb", LBF * 0.3048, 0.0},
};

const struct sp_spelling *sp_spelling_find(enum sp_kind kind, const char *text)
{
    for (size_t i = 0; i < sizeof spellings / sizeof *spellings; i++)
        if (spellings[i].kind == kind && strcmp(spellings[i].text, text) == 0) return &spellings[i];
    return NULL;
}

#define M(...) {__VA_ARGS__}
static const struct {
    const char *name;
    struct sp_measure measure;
} aliases[] = {
    {"mph", {0.44704, M(1, 0, -1), 0}},
    {"MPH", {0.44704, M(1, 0, -1), 0}},
    {"kph", {1.0 / 3.6, M(1, 0, -1), 0}},
    {"kmh", {1.0 / 3.6, M(1, 0, -1), 0}},
    {"KPH", {1.0 / 3.6, M(1, 0, -1), 0}},
    {"in", {0.0254, M(1), 0}},
    {"nmi", {1852.0, M(1), 0}}, /* UDUNITS: a nano-mile */
    {"l", {0.001, M(3), 0}},
    {"L", {0.001, M(3), 0}},
    {"ml", {1e-6, M(3), 0}},
    {"mL", {1e-6, M(3), 0}},
    {"cc", {1e-6, M(3), 0}},
    {"gal", {3.785411784e-3, M(3), 0}}, /* UDUNITS: cm/s2 */
    {"gallon", {3.785411784e-3, M(3), 0}},
    {"gallons", {3.785411784e-3, M(3), 0}},
    {"gpm", {3.785411784e-3 / 60.0, M(3, 0, -1), 0}},
    {"GPM", {3.785411784e-3 / 60.0, M(3, 0, -1), 0}},
    {"lpm", {0.001 / 60.0, M(3, 0, -1), 0}},
    {"LPM", {0.001 / 60.0, M(3, 0, -1), 0}},
    {"cfm", {0.3048 * 0.3048 * 0.3048 / 60.0, M(3, 0, -1), 0}},
    {"CFM", {0.3048 * 0.3048 * 0.3048 / 60.0, M(3, 0, -1), 0}},
    {"mins", {60.0, M(0, 0, 1), 0}},
    {"hrs", {3600.0, M(0, 0, 1), 0}},
    {"lbs", {0.45359237, M(0, 1), 0}},
    {"lbm", {0.45359237, M(0, 1), 0}},
    {"inH2O", {1000.0 * 9.80665 * 0.0254, M(-1, 1, -2), 0}},
    {"mmH2O", {9.80665, M(-1, 1, -2), 0}},
    {"cmH2O", {98.0665, M(-1, 1, -2), 0}},
    {"psi", {PSI, M(-1, 1, -2), 0}},
    {"PSI", {PSI, M(-1, 1, -2), 0}},
    {"PS", {PS, M(2, 1, -3), SP_SEEN_POWER}}, /* UDUNITS: petasiemens */
    {"hp", {HP, M(2, 1, -3), SP_SEEN_POWER}},
    {"HP", {HP, M(2, 1, -3), SP_SEEN_POWER}},
    {"bhp", {HP, M(2, 1, -3), SP_SEEN_POWER}},
    {"Nm", {1.0, M(2, 1, -2), SP_SEEN_FORCE}},
    {"kNm", {1e3, M(2, 1, -2), SP_SEEN_FORCE}},
    {"Wh", {3600.0, M(2, 1, -2), SP_SEEN_ENERGY}},
    {"kWh", {3.6e6, M(2, 1, -2), SP_SEEN_ENERGY}},
    {"MWh", {3.6e9, M(2, 1, -2), SP_SEEN_ENERGY}},
    {"Ah", {3600.0, M(0, 0, 1, 1), 0}},
    {"mAh", {3.6, M(0, 0, 1, 1), 0}},
    {"degR", {5.0 / 9.0, M(0, 0, 0, 0, 1), 0}},
};

const struct sp_measure *sp_alias_find(const char *name)
{
    for (size_t i = 0; i < sizeof aliases / sizeof *aliases; i++)
        if (strcmp(aliases[i].name, name) == 0) return &aliases[i].measure;
    return NULL;
}

static const struct {
    const char *name, *hint;
} ambiguous[] = {
    {"C", "degrees Celsius are written degC"},
    {"F", "degrees Fahrenheit are written degF"},
    {"R", "degrees Rankine are written degR"},
    {"gr", "write g or grain"}, /* UDUNITS: grain; many a scale: gram */
    {"ton", "write t for 1000 kg, or lb"},
    {"tons", "write t for 1000 kg, or lb"},
    {"Ton", "write t for 1000 kg, or lb"},
    {"psig", "psig is taken where a gauge pressure is asked for"},
    {"barg", "barg is taken where a gauge pressure is asked for"},
    {"psia", "an absolute pressure is no gauge pressure"},
    {"bara", "an absolute pressure is no gauge pressure"},
};

const char *sp_ambiguous_find(const char *name)
{
    for (size_t i = 0; i < sizeof ambiguous / sizeof *ambiguous; i++)
        if (strcmp(ambiguous[i].name, name) == 0) return ambiguous[i].hint;
    return NULL;
}
