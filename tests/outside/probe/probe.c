/* Answers lines "name arg arg ..." on standard input with the value of that function, for comparison
 * with libraries in other languages. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/diffuser.h"
#include "part/effectiveness.h"
#include "part/inlet.h"
#include "part/tube.h"
#include "swirlpot/fluid.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

enum { ARGUMENTS = 4 };

/* a[0] glycol kind as in enum sp_coolant_kind, a[1] share, a[2] K or Pa */
static double of_coolant(double (*property)(const struct sp_coolant *, double), const double *a)
{
    struct sp_coolant c;
    if (!(a[0] >= 0 && a[0] <= 2) || !sp_coolant_mix((enum sp_coolant_kind)(int)a[0], a[1], &c)) return NAN;
    return property(&c, a[2]);
}

static double coolant_density(const double *a)
{
    return of_coolant(sp_coolant_density, a);
}
static double coolant_cp(const double *a)
{
    return of_coolant(sp_coolant_cp, a);
}
static double coolant_conductivity(const double *a)
{
    return of_coolant(sp_coolant_conductivity, a);
}
static double coolant_viscosity(const double *a)
{
    return of_coolant(sp_coolant_viscosity, a);
}
static double coolant_enthalpy(const double *a)
{
    return of_coolant(sp_coolant_enthalpy, a);
}
static double coolant_vapour(const double *a)
{
    return of_coolant(sp_coolant_vapour_pressure, a);
}
static double coolant_boiling(const double *a)
{
    return of_coolant(sp_coolant_boiling, a);
}
static double isa_pressure(const double *a)
{
    return sp_isa_pressure(a[0]);
}
static double isa_temperature(const double *a)
{
    return sp_isa_temperature(a[0]);
}
static double vapour_saturation(const double *a)
{
    return sp_vapour_saturation(a[0]);
}
static double air_density(const double *a)
{
    return sp_air_density(a[0], a[1], a[2]);
}
static double moist_cp(const double *a)
{
    return sp_moist_air(a[0], a[1], a[2]).cp;
}
static double air_viscosity(const double *a)
{
    return sp_air_viscosity(a[0]);
}
static double air_conductivity(const double *a)
{
    return sp_air_conductivity(a[0]);
}
static double air_cp_film(const double *a)
{
    return sp_air_cp_film(a[0]);
}
static double cone_loss(const double *a)
{
    return sp_cone_loss(a[0], a[1], a[2]);
}
static double lip_coefficient(const double *a)
{
    return sp_lip_coefficient(a[0]);
}
static double xi_konakov(const double *a)
{
    return sp_xi_konakov(a[0]);
}
static double xi_filonenko(const double *a)
{
    return sp_xi_filonenko(a[0]);
}

static double effectiveness(const double *a)
{
    return a[0] >= 0 && a[0] < 100 ? sp_effectiveness((enum sp_arrangement)(int)a[0], a[1], a[2]) : NAN;
}

static const struct {
    const char *name;
    int count;
    double (*value)(const double *);
} entries[] = {
    {"coolant_density", 3, coolant_density},
    {"coolant_cp", 3, coolant_cp},
    {"coolant_conductivity", 3, coolant_conductivity},
    {"coolant_viscosity", 3, coolant_viscosity},
    {"coolant_enthalpy", 3, coolant_enthalpy},
    {"coolant_vapour_pressure", 3, coolant_vapour},
    {"coolant_boiling", 3, coolant_boiling},
    {"isa_pressure", 1, isa_pressure},
    {"isa_temperature", 1, isa_temperature},
    {"vapour_saturation", 1, vapour_saturation},
    {"air_density", 3, air_density},
    {"moist_cp", 3, moist_cp},
    {"air_viscosity", 1, air_viscosity},
    {"air_conductivity", 1, air_conductivity},
    {"air_cp_film", 1, air_cp_film},
    {"cone_loss", 3, cone_loss},
    {"lip_coefficient", 1, lip_coefficient},
    {"xi_konakov", 1, xi_konakov},
    {"xi_filonenko", 1, xi_filonenko},
    {"effectiveness", 3, effectiveness},
};

/* False if the line names no function or has not just its arguments. */
static bool answer(const char *line, double *value)
{
    char name[32], rest;
    double a[ARGUMENTS];
    int got = sscanf(line, "%31s %lf %lf %lf %lf %c", name, &a[0], &a[1], &a[2], &a[3], &rest);
    for (size_t i = 0; i < sizeof entries / sizeof *entries; i++)
        if (got == entries[i].count + 1 && strcmp(name, entries[i].name) == 0) {
            *value = entries[i].value(a);
            return true;
        }
    return false;
}

int main(void)
{
    char line[256];
    while (fgets(line, sizeof line, stdin)) {
        double value;
        if (!answer(line, &value)) {
            fprintf(stderr, "probe: not understood: %s", line);
            return 2;
        }
        printf("%.17g\n", value);
    }
    return 0;
}
