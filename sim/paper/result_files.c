/* The files of a drive: series.csv while it runs, result.json and events.csv at its end.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <errno.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "base/file.h"
#include "result_write.h"
#include "swirlpot/result.h"

enum { SERIES_DIGITS = 9 };

enum { SERIES, EVENTS, RESULT, FILES }; /* the result last: where it stands, the others do */

struct sp_report_files {
    struct sp_sink sink;
    struct sp_complaints *complaints;
    struct sp_file_out file[FILES];
    bool headed; /* the series has its headings: they come with the first row, which knows what is fitted */
    char *directory;
    bool *made; /* by length: whether so much of the directory's path was not there before */
};

/* ---- cells ----------------------------------------------------------------------------------------- */

static void put_number(FILE *to, double x)
{
    char text[SP_NUMBER_ROOM];
    if (!isfinite(x)) return;
    sp_number_digits(text, x, SERIES_DIGITS);
    fputs(text, to);
}

/* Quoted where it has to be; what would end a line becomes '?'. */
static void put_text(FILE *to, const char *text)
{
    char plain[400];
    sp_plain(plain, sizeof plain, text, sizeof plain);
    bool quote = strpbrk(plain, ",\"") || plain[0] == ' ';
    if (quote) fputc('"', to);
    for (const char *p = plain; *p; ++p) {
        if (*p == '"') fputc('"', to);
        fputc(*p, to);
    }
    if (quote) fputc('"', to);
}

void sp_report_events(const struct sp_report *r, FILE *to)
{
    fputs("time [s],what,distance [m],coolant [degC],step [1],mark,place,severity\n", to);
    for (size_t i = 0; i < r->result->events; ++i) {
        const struct sp_event *e = &r->result->event[i];
        put_number(to, e->time);
        fprintf(to, ",%s,", sp_event_text(e->kind));
        put_number(to, e->distance);
        fputc(',', to);
        put_number(to, e->coolant - SP_ZERO_C);
        fprintf(to, ",%zu,", e->step);
        if (e->mark) put_text(to, e->mark);
        fputc(',', to);
        if (e->place) put_text(to, e->place);
        fprintf(to, ",%s\n", sp_severity_text(e->severity));
    }
}

static void put_heading(FILE *to, const bool *fitted)
{
    for (int c = 0; c < SP_CHANNELS; ++c) {
        if (!fitted[c]) continue;
        const struct sp_channel_info *info = sp_channel_at((enum sp_channel)c);
        fprintf(to, "%s%s [%s]", c ? "," : "", info->name, info->unit);
    }
    fputc('\n', to);
}

/* Channels whose smallest values are what the solver leaves of nil. */
static bool has_noise(enum sp_channel c)
{
    switch (c) {
    case SP_CH_AIR_FLOW:
    case SP_CH_FACE_VELOCITY:
    case SP_CH_EXIT_VELOCITY:
    case SP_CH_FAN_SPEED:
    case SP_CH_FAN_POWER:
    case SP_CH_LOST:
    case SP_CH_HEAT_IN:
    case SP_CH_HEAT_OUT:
    case SP_CH_HEAT_SKIN:
    case SP_CH_DRAG:
    case SP_CH_LEAK_PAST:
    case SP_CH_LEAK_OUTSIDE:
    case SP_CH_BACKWARDS:
    case SP_CH_SPILL:
    case SP_CH_THRUST:
    case SP_CH_FAN_CURRENT:
        return true;
    default:
        return c >= SP_CH_CORE;
    }
}

static bool put_row(void *context, const struct sp_sample *sample)
{
    struct sp_report_files *f = context;
    FILE *to = f->file[SERIES].stream;
    if (!f->headed) put_heading(to, sample->fitted);
    f->headed = true;
    for (int c = 0; c < SP_CHANNELS; ++c) {
        if (!sample->fitted[c]) continue;
        const struct sp_channel_info *info = sp_channel_at((enum sp_channel)c);
        if (c) fputc(',', to);
        double shown = (sample->value[c] - info->offset) / info->scale;
        put_number(to, fabs(shown) < 1e-9 && has_noise((enum sp_channel)c) ? 0.0 : shown);
    }
    fputc('\n', to);
    if (!ferror(to)) return true;
    struct sp_place at = {.file = f->file[SERIES].path};
    sp_complain(f->complaints, &at, "no more room, or a failing disk", "room for the series", NULL);
    return false;
}

/* The drive begins anew: so does the series. */
static bool put_again(void *context)
{
    struct sp_report_files *f = context;
    FILE *to = f->file[SERIES].stream;
    if (fflush(to) != 0 || ftruncate(fileno(to), 0) != 0 || fseek(to, 0, SEEK_SET) != 0) return false;
    f->headed = false;
    return true;
}

/* ---- directory ------------------------------------------------------------------------------------- */

/* One directory, when it is missing. */
static bool make_one(struct sp_report_files *f, const char *path)
{
    struct stat is;
    struct sp_place at = {.file = path};
    bool there = stat(path, &is) == 0;
    if (!there && mkdir(path, 0777) == 0) return f->made[strlen(path)] = true;
    int error = errno;
    if (!there && error == EEXIST) there = stat(path, &is) == 0; /* someone else was quicker */
    if (there && S_ISDIR(is.st_mode)) return true;
    char words[128] = "something that is no directory";
    if (!there && strerror_r(error, words, sizeof words) != 0)
        snprintf(words, sizeof words, "error %d", error);
    sp_complain(f->complaints, &at, words,
                there ? "a directory, or nothing yet" : "a place where a directory can be made", NULL);
    return false;
}

/* The directory and those above it, from the top down. */
static bool make_directory(struct sp_report_files *f)
{
    char *path = f->directory;
    for (size_t n = 1; path[0] && path[n]; ++n) {
        if (path[n] != '/' || path[n - 1] == '/') continue;
        path[n] = '\0';
        bool fine = make_one(f, path);
        path[n] = '/';
        if (!fine) return false;
    }
    return make_one(f, path);
}

/* Takes away what was made, from the bottom up; what someone has put something into stays. */
static void remove_directory(struct sp_report_files *f)
{
    for (size_t n = strlen(f->directory); n > 0; --n) {
        if (!f->made[n]) continue;
        f->directory[n] = '\0';
        rmdir(f->directory);
    }
}

static bool begin_file(struct sp_report_files *f, int which, const char *name)
{
    size_t size = strlen(f->directory) + strlen(name) + 2;
    char *path = malloc(size);
    if (!path) {
        struct sp_place at = {.file = f->directory};
        sp_complain(f->complaints, &at, "too little memory", "memory to write there", NULL);
        return false;
    }
    size_t length = strlen(f->directory);
    bool slash = length > 0 && f->directory[length - 1] == '/';
    snprintf(path, size, "%s%s%s", f->directory, slash ? "" : "/", name);
    bool good = sp_file_begin(&f->file[which], path, f->complaints);
    free(path);
    return good;
}

/* ---- life ------------------------------------------------------------------------------------------ */

static void let_go(struct sp_report_files *f)
{
    for (int i = 0; i < FILES; ++i)
        sp_file_abandon(&f->file[i]);
    free(f->directory);
    free(f->made);
    free(f);
}

void sp_report_files_abandon(struct sp_report_files *f)
{
    if (!f) return;
    for (int i = 0; i < FILES; ++i)
        sp_file_abandon(&f->file[i]);
    remove_directory(f);
    let_go(f);
}

struct sp_report_files *sp_report_files_open(const char *directory, struct sp_complaints *complaints)
{
    struct sp_report_files *f = calloc(1, sizeof *f);
    size_t size = strlen(directory) + 1;
    char *copy = f ? malloc(size) : NULL;
    if (f) f->made = calloc(size, sizeof *f->made);
    if (!copy || !f->made) {
        struct sp_place at = {.file = directory};
        sp_complain(complaints, &at, "too little memory", "memory to write there", NULL);
        free(copy);
        if (f) free(f->made);
        free(f);
        return NULL;
    }
    memcpy(copy, directory, size);
    f->directory = copy;
    f->complaints = complaints;
    f->sink = (struct sp_sink){f, put_row, put_again};
    if (make_directory(f) && begin_file(f, SERIES, "series.csv") && begin_file(f, EVENTS, "events.csv") &&
        begin_file(f, RESULT, "result.json"))
        return f;
    sp_report_files_abandon(f);
    return NULL;
}

const struct sp_sink *sp_report_files_sink(struct sp_report_files *f)
{
    return &f->sink;
}

/* Whether all that was written has left the program: tried on all files before the first is put in place. */
static bool all_written(struct sp_report_files *f)
{
    bool good = true;
    for (int i = 0; i < FILES; ++i) {
        if (fflush(f->file[i].stream) == 0 && !ferror(f->file[i].stream)) continue;
        struct sp_place at = {.file = f->file[i].path};
        sp_complain(f->complaints, &at, "no more room, or a failing disk", "room for the file", NULL);
        good = false;
    }
    return good;
}

bool sp_report_files_finish(struct sp_report_files *f, const struct sp_report *r)
{
    sp_report_events(r, f->file[EVENTS].stream);
    sp_report_json(r, f->file[RESULT].stream);
    bool good = all_written(f);
    for (int i = 0; i < FILES && good; ++i)
        good = sp_file_commit(&f->file[i], f->complaints);
    if (good)
        let_go(f);
    else
        sp_report_files_abandon(f);
    return good;
}
