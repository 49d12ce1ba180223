/* A first case from three numbers: mass, displacement, power. Every figure is a likely value of the trade.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/file.h"
#include "keys.h"

#include <errno.h>
#include <math.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

/* What is guessed from the three numbers, in the units it is written in. */
struct guess {
    double face, width, height; /* m2, mm, mm */
    double inlet, exit;         /* cm2 */
    const char *lip;
    double fraction, rated_speed; /* -, rpm */
    int fan, fan_power;           /* mm, W */
    double shutoff, free_flow;    /* Pa, m3/s */
    int fans;
    double pump_flow;     /* l/min */
    double cruise, speed; /* kW, km/h of fast driving */
    double frontal, drag; /* m2, - */
};

/* Electric fans as catalogues have them, brushed. */
static const struct {
    int diameter, watt;
    double shutoff, free_flow;
} fans[] = {
    {165, 45, 110.0, 0.10},  {205, 65, 125.0, 0.18},  {255, 95, 143.0, 0.31},
    {305, 135, 152.0, 0.46}, {350, 185, 160.0, 0.63}, {400, 270, 185.0, 0.92},
};

static double rounded(double x, double step)
{
    return step * fmax(1.0, round(x / step));
}

static void guess_fan(struct guess *g)
{
    size_t pick = 0;
    for (size_t i = 1; i < sizeof fans / sizeof *fans; ++i)
        if (fans[i].diameter <= 0.95 * fmin(g->width, g->height)) pick = i;
    g->fan = fans[pick].diameter;
    g->fan_power = fans[pick].watt;
    g->shutoff = fans[pick].shutoff;
    g->free_flow = fans[pick].free_flow;
    g->fans = g->width >= 2.05 * g->fan ? 2 : 1;
}

static void guess_engine(struct guess *g, double litres, double kilowatts, double mass)
{
    double specific = kilowatts / litres; /* kW/l tells road, tuned and turbo engines apart */
    g->fraction = specific < 60.0 ? 0.65 : specific < 90.0 ? 0.48 : 0.55;
    g->rated_speed = specific < 60.0 ? 6000.0 : 7000.0;
    g->pump_flow = rounded(190.0 * pow(litres / 1.8, 0.7), 5.0);
    /* Mean over rated power: 0.60 on climb and circuit, 0.42 with a student car. */
    g->cruise = rounded((mass < 350.0 ? 0.42 : 0.6) * kilowatts, 1.0);
    g->speed = rounded(120.0 * cbrt(kilowatts / 190.0), 5.0);
}

static struct guess guess_all(const struct sp_starter *s)
{
    struct guess g = {0};
    double kilowatts = s->rated_power / 1e3, litres = s->displacement * 1e3;
    guess_engine(&g, litres, kilowatts, s->mass);
    /* Face over the heat of fast driving, from cars that hold 60 to 70 K over ambient. */
    g.face = 4.8e-3 * g.fraction * g.cruise;
    g.height = fmax(150.0, rounded(1e3 * sqrt(g.face / 1.45), 10.0));
    g.width = fmax(150.0, rounded(1e6 * g.face / g.height, 10.0));
    g.face = 1e-6 * g.width * g.height;
    g.inlet = rounded(0.32 * g.face * 1e4, 5.0);
    g.exit = rounded(0.56 * g.face * 1e4, 5.0);
    g.lip = "rounded 10 mm";
    guess_fan(&g);
    g.frontal = s->mass < 500.0 ? 1.1 : s->mass < 900.0 ? 1.6 : 2.0;
    g.drag = s->mass < 900.0 ? 0.60 : 0.36;
    return g;
}

/* ---- texts ----------------------------------------------------------------------------------------- */

static const char case_text[] =
    "{ \"title\": \"A first case: queue, ten minutes of fast driving, a slow lap, a stop\",\n"
    "  \"car\": \"car.json\",\n"
    "  \"air\": { \"ambient\": \"30 degC\", \"altitude\": \"200 m\", \"humidity\": \"45 %%\" },\n"
    "  \"start\": { \"coolant\": \"80 degC\" },\n"
    "  \"drive\": [ { \"idle\": \"3 min\" },\n"
    "             { \"hold\": \"10 min\", \"speed\": \"%g km/h\", \"power\": \"%g kW\",\n"
    "               \"engine_speed\": \"%g rpm\" },\n"
    "             { \"hold\": \"2 min\", \"speed\": \"60 km/h\", \"power\": \"%g kW\",\n"
    "               \"engine_speed\": \"2500 rpm\" },\n"
    "             { \"soak\": \"10 min\" } ],\n"
    "  \"limits\": { \"coolant\": \"112 degC\", \"boil_margin\": \"8 K\" } }\n";

static const char body_text[] =
    "{ \"body\": { \"mass\": \"%g kg\", \"frontal_area\": \"%g m2\", \"drag_coefficient\": %g },\n"
    "  \"engine\": { \"displacement\": \"%g l\", \"rated_power\": \"%g kW\", \"rated_speed\": \"%g rpm\",\n"
    "              \"heat\": { \"fraction\": %g } },\n"
    "  \"coolant\": { \"kind\": \"ethylene glycol\", \"glycol\": \"50 %%\" },\n"
    "  \"pump\": { \"curve\": { \"shutoff\": \"120 kPa\", \"free_flow\": \"%g l/min\" },\n"
    "            \"speed\": \"%g rpm\", \"ratio\": 1.15 },\n"
    "  \"thermostat\": { \"opens\": \"82 degC\" },\n"
    "  \"tank\": { \"cap\": \"1.3 bar\" },\n";

static const char duct_text[] =
    "  \"duct\": {\n"
    "    \"inlet\": { \"area\": \"%g cm2\", \"recovery\": 0.88, \"lip\": \"%s\", \"screen\": 0.6 },\n"
    "    \"diffuser\": { \"loss\": 0.38 },\n"
    "    \"core\": { \"width\": \"%g mm\", \"height\": \"%g mm\", \"depth\": \"42 mm\", \"heat_factor\": "
    "0.93,\n"
    "              \"fins\": { \"pitch\": \"1.9 mm\", \"louvre_pitch\": \"1.4 mm\", \"louvre_angle\": \"23 "
    "deg\" },\n"
    "              \"tubes\": { \"pitch\": \"10 mm\", \"height\": \"2 mm\", \"rows\": 2 } },\n"
    "    \"fan\": { \"count\": %d, \"curve\": { \"shutoff\": \"%g Pa\", \"free_flow\": \"%g m3/s\" },\n"
    "             \"basis\": \"static\", \"diameter\": \"%d mm\", \"power\": \"%d W\",\n"
    "             \"switch\": { \"on\": \"92 degC\", \"off\": \"87 degC\" } },\n"
    "    \"exit\": { \"area\": \"%g cm2\", \"loss\": 1.7, \"pressure_coefficient\": -0.18 } } }\n";

/* A text that grows by printing; NULL text after a failure. */
struct text {
    char *text;
    size_t length, room;
    bool failed;
};

static void grow(struct text *t, const char *format, ...) __attribute__((format(printf, 2, 3)));

static void grow(struct text *t, const char *format, ...)
{
    va_list args;
    va_start(args, format);
    int n = vsnprintf(NULL, 0, format, args);
    va_end(args);
    if (n < 0 || t->failed) return;
    if (t->length + (size_t)n + 1 > t->room) {
        size_t room = 2 * (t->room + (size_t)n + 1);
        char *more = realloc(t->text, room);
        t->failed = !more;
        if (!more) return;
        t->text = more;
        t->room = room;
    }
    va_start(args, format);
    vsnprintf(t->text + t->length, t->room - t->length, format, args);
    va_end(args);
    t->length += (size_t)n;
}

static void write_case(struct text *t, const struct sp_starter *s)
{
    struct guess g = guess_all(s);
    grow(t, case_text, g.speed, g.cruise, rounded(0.75 * g.rated_speed, 100.0), rounded(0.1 * g.cruise, 1.0));
}

static void write_car(struct text *t, const struct sp_starter *s)
{
    struct guess g = guess_all(s);
    grow(t, body_text, s->mass, g.frontal, g.drag, s->displacement * 1e3, s->rated_power / 1e3, g.rated_speed,
         g.fraction, g.pump_flow, rounded(1.15 * 6000.0, 100.0));
    grow(t, duct_text, g.inlet, g.lip, g.width, g.height, g.fans, g.shutoff, g.free_flow, g.fan, g.fan_power,
         g.exit);
}

static void write_keys(struct text *t, const struct sp_starter *s)
{
    const struct sp_key *row;
    (void)s;
    grow(t,
         "All keys of a case, with what is taken when they are absent.\n"
         "The values in car.json are likely ones of the trade, not yours: measure, then replace them.\n\n");
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i)
        grow(t, "%s\n    %s.\n    %s%s\n", row->path, row->meaning, row->fallback ? "default: " : "",
             row->fallback ? row->fallback : sp_key_need(row));
}

/* ---- files ----------------------------------------------------------------------------------------- */

static bool refuse(struct sp_complaints *to, const char *file, const char *found, const char *expected)
{
    struct sp_place at = {.file = file};
    sp_complain(to, &at, found, expected, NULL);
    return false;
}

static bool make_directory(const char *dir, struct sp_complaints *to)
{
    struct stat what;
    if (mkdir(dir, 0777) == 0) return true;
    if (errno == EEXIST && stat(dir, &what) == 0 && S_ISDIR(what.st_mode)) return true;
    return refuse(to, dir, "no directory, nor a place for one",
                  "a directory, or a new name in a directory that is there");
}

struct page {
    const char *name;
    void (*write)(struct text *t, const struct sp_starter *s);
};

static bool write_page(const char *dir, const struct page *page, const struct sp_starter *s, bool look_only,
                       struct sp_complaints *to)
{
    struct text path = {0}, body = {0};
    struct stat what;
    bool fine;
    grow(&path, "%s/%s", dir, page->name);
    if (!path.failed && look_only) {
        fine = lstat(path.text, &what) != 0 ||
               refuse(to, path.text, "a file that is there already", "none: nothing is overwritten");
    } else {
        page->write(&body, s);
        fine = path.failed || body.failed ? refuse(to, dir, "too little memory", "memory enough")
                                          : sp_file_write(path.text, body.text, body.length, to);
    }
    free(path.text);
    free(body.text);
    return fine;
}

static bool sensible(const struct sp_starter *s, struct sp_complaints *to)
{
    bool fine = true;
    if (!(s->mass >= 50.0 && s->mass <= 20000.0))
        fine = refuse(to, "mass", "a mass out of range", "50 kg to 20000 kg");
    if (!(s->displacement >= 0.05e-3 && s->displacement <= 30e-3))
        fine = refuse(to, "displacement", "a displacement out of range", "0.05 l to 30 l");
    if (!(s->rated_power >= 2e3 && s->rated_power <= 1.5e6))
        fine = refuse(to, "power", "a power out of range", "2 kW to 1500 kW");
    return fine;
}

enum sp_status sp_case_new(const struct sp_starter *s, const char *dir, struct sp_complaints *complaints)
{
    static const struct page pages[] = {
        {"case.json", write_case}, {"car.json", write_car}, {"keys.txt", write_keys}};
    bool fine = true;
    if (!sensible(s, complaints) || !make_directory(dir, complaints)) return SP_INPUT;
    for (size_t i = 0; i < 3; ++i)
        fine = write_page(dir, &pages[i], s, true, complaints) && fine;
    for (size_t i = 0; fine && i < 3; ++i)
        fine = write_page(dir, &pages[i], s, false, complaints);
    return fine ? SP_OK : SP_INPUT;
}
