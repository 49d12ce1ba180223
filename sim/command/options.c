/* Options of the command line. SPDX-License-Identifier: GPL-3.0-or-later */
#include "options.h"

#include <getopt.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

static const struct sp_option option[] = {
    {'s', false, "set", "PATH=VALUE", true, "override a key: --set duct.exit.area=\"600 cm2\""},
    {'o', true, "output", "DIR", false, "write result.json, series.csv, events.csv"},
    {'e', false, "every", "TIME", false, "time between rows of series.csv; else \"1 s\""},
    {'x', false, "exact", NULL, false, "more digits instead of whole degrees"},
    {'v', false, "speed", "SPEED", true, "speed over the road; may stand several times"},
    {'w', false, "power", "POWER", true, "brake power that is held"},
    {'g', false, "grade", "GRADE", true, "or the road's, as \"7 %\"; else level"},
    {'n', false, "engine-speed", "SPEED", false, "else from the gears"},
    {'c', false, "ceiling", NULL, false, "also solve for the hottest air"},
    {'q', false, "heat", "POWER", false, "heat given to the air; without it: cold core"},
    {'f', false, "fan", "on|off", false, "fan at its rated speed, or off as by default"},
    {'m', false, "mass", "MASS", false, "mass of the car with driver and fuel"},
    {'d', false, "displacement", "VOLUME", false, "swept volume of the engine"},
    {'p', false, "power", "POWER", false, "rated power of the engine"},
    {'j', false, "json", NULL, false, "one JSON document instead of text"},
    {'h', true, "help", NULL, false, "this help"},
};

enum { OPTIONS = sizeof option / sizeof option[0] };

const struct sp_option *sp_option_at(size_t i)
{
    return i < OPTIONS ? &option[i] : NULL;
}

/* ---- complaints ------------------------------------------------------------------------------------ */

enum sp_status sp_usage_fault(const char *word, const char *what, const char *expected)
{
    struct sp_complaints c = {0};
    struct sp_place at = {.path = word};
    sp_complain(&c, &at, what, expected, NULL);
    sp_complaints_print(&c, false, stderr);
    sp_complaints_free(&c);
    fputs("try 'swirlpot --help'\n", stderr);
    return SP_INPUT;
}

enum sp_status sp_speak(enum sp_status status, struct sp_complaints *complaints,
                        struct sp_complaints *cautions)
{
    sp_complaints_print(cautions, true, stderr);
    sp_complaints_print(complaints, false, stderr);
    sp_complaints_free(cautions);
    sp_complaints_free(complaints);
    return status;
}

enum { WORD_MOST = 40 };

/* Edit distance (Levenshtein, 1966) of two words of at most WORD_MOST letters. */
static size_t distance(const char *a, const char *b)
{
    size_t row[WORD_MOST + 1], n = strlen(b);
    for (size_t j = 0; j <= n; ++j)
        row[j] = j;
    for (size_t i = 1; *a; ++a, ++i) {
        size_t diagonal = row[0];
        row[0] = i;
        for (size_t j = 1; j <= n; ++j) {
            size_t change = diagonal + (*a != b[j - 1]);
            diagonal = row[j];
            size_t one = (row[j] < row[j - 1] ? row[j] : row[j - 1]) + 1;
            row[j] = change < one ? change : one;
        }
    }
    return row[n];
}

const char *sp_nearest(const char *word, const char *const *known, size_t count)
{
    const char *best = NULL;
    size_t least = WORD_MOST;
    if (strlen(word) > WORD_MOST) return NULL;
    for (size_t i = 0; i < count; ++i) {
        size_t d = strlen(known[i]) > WORD_MOST ? WORD_MOST : distance(word, known[i]);
        if (d < least) {
            least = d;
            best = known[i];
        }
    }
    size_t most = strlen(word) / 2; /* no more changes than half the letters, or one */
    return best && least <= (most > 1 ? most : 1) ? best : NULL;
}

/* ---- reading --------------------------------------------------------------------------------------- */

static bool takes(const struct sp_verb *verb, const struct sp_option *o)
{
    return strchr(verb->options, o->letter) || o->letter == 'h';
}

static bool unknown_option(const struct sp_verb *verb, const char *word)
{
    const char *known[OPTIONS];
    size_t count = 0;
    char name[WORD_MOST + 1], expected[160];
    for (size_t i = 0; i < OPTIONS; ++i)
        if (takes(verb, &option[i])) known[count++] = option[i].name;
    snprintf(name, sizeof name, "%s", word + strspn(word, "-"));
    name[strcspn(name, "=")] = '\0';
    const char *near = sp_nearest(name, known, count);
    snprintf(expected, sizeof expected, "an option of '%s'%s%s%s", verb->name, near ? "; nearest is '--" : "",
             near ? near : "", near ? "'" : "");
    sp_usage_fault(word, "an unknown option", expected);
    return false;
}

static bool append(struct sp_texts *to, char *text)
{
    to->list[to->count++] = text; /* room for all of argv was made at the start */
    return true;
}

static bool keep_once(const char **to, const char *value, const char *word)
{
    if (*to) {
        sp_usage_fault(word, "it twice", "it once");
        return false;
    }
    *to = value;
    return true;
}

static bool keep(struct sp_arguments *a, int letter, char *value, const char *word)
{
    switch (letter) {
    case 's':
        return append(&a->sets, value);
    case 'v':
        return append(&a->speeds, value);
    case 'w':
        return append(&a->powers, value);
    case 'g':
        return append(&a->grades, value);
    case 'n':
        return keep_once(&a->engine_speed, value, word);
    case 'o':
        return keep_once(&a->directory, value, word);
    case 'e':
        return keep_once(&a->every, value, word);
    case 'q':
        return keep_once(&a->heat, value, word);
    case 'f':
        return keep_once(&a->fan, value, word);
    case 'm':
        return keep_once(&a->mass, value, word);
    case 'd':
        return keep_once(&a->displacement, value, word);
    case 'p':
        return keep_once(&a->power, value, word);
    case 'j':
        a->json = true;
        return true;
    case 'x':
        a->exact = true;
        return true;
    case 'c':
        a->ceiling = true;
        return true;
    default:
        a->help = true;
        return true;
    }
}

/* getopt_long also takes beginnings of names; what a script says should not change its meaning with the
 * next option that is added. */
static bool written_out(const char *word, const char *name)
{
    size_t n = strlen(name);
    return strncmp(word, "--", 2) || (!strncmp(word + 2, name, n) && (!word[2 + n] || word[2 + n] == '='));
}

static const struct sp_option *by_letter(int letter)
{
    for (size_t i = 0; i < OPTIONS; ++i)
        if (option[i].letter == letter) return &option[i];
    return NULL;
}

static size_t offer(const struct sp_verb *verb, struct option out[OPTIONS + 1], char *letters)
{
    size_t count = 0;
    *letters++ = ':';
    for (size_t i = 0; i < OPTIONS; ++i) {
        if (!takes(verb, &option[i])) continue;
        out[count++] = (struct option){option[i].name, option[i].argument ? required_argument : no_argument,
                                       NULL, option[i].letter};
        if (!option[i].shorthand) continue;
        *letters++ = (char)option[i].letter;
        if (option[i].argument) *letters++ = ':';
    }
    *letters = '\0';
    out[count] = (struct option){NULL, 0, NULL, 0};
    return count;
}

/* What getopt_long would not take: `word` as it stands, optopt as it left it. */
static bool refuse(const struct sp_verb *verb, int got, const char *word, const char *last)
{
    const char letter[3] = {'-', (char)optopt, '\0'};
    bool by_name = !strncmp(last, "--", 2);
    if (got == ':')
        sp_usage_fault(last, "nothing after it", "a value");
    else if (optopt && by_name && by_letter(optopt))
        sp_usage_fault(last, "a value", "none");
    else
        return unknown_option(verb, optopt ? letter : word);
    return false;
}

static bool read_options(const struct sp_verb *verb, int argc, char **argv, struct sp_arguments *out)
{
    struct option offered[OPTIONS + 1];
    char letters[2 * OPTIONS + 2];
    int got;
    offer(verb, offered, letters);
    opterr = 0;
    optind = 1;
    while ((got = getopt_long(argc, argv, letters, offered, NULL)) != -1) {
        bool apart = optarg && optarg == argv[optind - 1];
        const char *word = argv[optind - (apart ? 2 : 1)];
        if (got == ':' || got == '?') return refuse(verb, got, word, argv[optind - 1]);
        if (!written_out(word, by_letter(got)->name)) return unknown_option(verb, word);
        if (!keep(out, got, optarg, word)) return false;
    }
    return true;
}

static bool read_operand(const struct sp_verb *verb, int argc, char **argv, struct sp_arguments *out)
{
    char expected[80];
    if (out->help) return true;
    snprintf(expected, sizeof expected, "swirlpot %s %s", verb->name, verb->operand);
    if (optind < argc) out->operand = argv[optind];
    if (optind + 1 == argc && *out->operand) return true;
    if (optind < argc && *out->operand)
        sp_usage_fault(argv[optind + 1], "one operand too many", expected);
    else
        sp_usage_fault(verb->name, "no operand", expected);
    return false;
}

bool sp_arguments_read(const struct sp_verb *verb, int argc, char **argv, struct sp_arguments *out)
{
    memset(out, 0, sizeof *out);
    struct sp_texts *const list[] = {&out->sets, &out->speeds, &out->powers, &out->grades};
    bool room = true;
    for (size_t i = 0; i < sizeof list / sizeof list[0]; ++i) {
        list[i]->list = calloc((size_t)argc, sizeof(char *));
        room = room && list[i]->list;
    }
    if (!room) {
        sp_usage_fault(verb->name, "too little memory", "memory for the command line");
        return false;
    }
    return read_options(verb, argc, argv, out) && read_operand(verb, argc, argv, out);
}

void sp_arguments_free(struct sp_arguments *a)
{
    free(a->sets.list);
    free(a->speeds.list);
    free(a->powers.list);
    free(a->grades.list);
    memset(a, 0, sizeof *a);
}

/* ---- values ---------------------------------------------------------------------------------------- */

bool sp_argument_quantity(struct sp_units *u, const struct sp_wanted *w, const char *text, double *si,
                          struct sp_complaints *complaints)
{
    char found[120], why[300] = "", expected[420];
    struct sp_place at = {.path = w->option};
    snprintf(found, sizeof found, "\"%.80s\"", text);
    if (!u) {
        sp_complain(complaints, &at, "no unit data", "the data files of UDUNITS-2 in their place", NULL);
        return false;
    }
    bool read = sp_quantity_read(u, w->kind, text, si, why, sizeof why);
    if (read && *si >= w->least && *si <= w->most) return true;
    if (read)
        snprintf(expected, sizeof expected, "%s", w->range);
    else
        snprintf(expected, sizeof expected, "%s; %s", why, w->range);
    sp_complain(complaints, &at, found, expected, NULL);
    return false;
}
