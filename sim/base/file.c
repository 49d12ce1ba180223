/* file.c - plain files in and out.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/file.h"

#include <errno.h>
#include <fcntl.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* The system's own words for the last error, in a buffer of the caller's. */
static void complain(const struct sp_place *at, int error, const char *expected,
                     struct sp_complaints *complaints)
{
    char words[128];
    if (strerror_r(error, words, sizeof words) != 0) snprintf(words, sizeof words, "error %d", error);
    sp_complain(complaints, at, words, expected, NULL);
}

/* ---- reading -------------------------------------------------------------------------------- */

bool sp_file_open(struct sp_file_in *in, const struct sp_place *at, struct sp_complaints *complaints)
{
    struct stat is;
    *in = (struct sp_file_in){-1, false, at, complaints};
    in->fd = open(at->file, O_RDONLY | O_CLOEXEC | O_NONBLOCK | O_NOCTTY);
    if (in->fd < 0 || fstat(in->fd, &is) != 0) {
        complain(at, errno, "a file that can be read", complaints);
    } else if (!S_ISREG(is.st_mode)) {
        sp_complain(complaints, at, S_ISDIR(is.st_mode) ? "a directory" : "a device or a pipe",
                    "a plain file", NULL);
    } else {
        return true;
    }
    if (in->fd >= 0) close(in->fd);
    in->fd = -1;
    in->failed = true;
    return false;
}

size_t sp_file_next(struct sp_file_in *in, char *to, size_t size)
{
    size_t got = 0;
    while (got < size && !in->failed) {
        ssize_t n = read(in->fd, to + got, size - got);
        if (n == 0) break;
        if (n > 0) {
            got += (size_t)n;
        } else if (errno != EINTR) {
            complain(in->at, errno, "a file that can be read", in->complaints);
            in->failed = true;
        }
    }
    return in->failed ? 0 : got;
}

bool sp_file_close(struct sp_file_in *in)
{
    if (in->fd >= 0) close(in->fd);
    in->fd = -1;
    return !in->failed;
}

/* Appends all that is left to *text, growing it; stops past `most` bytes or without memory. */
static bool read_rest(struct sp_file_in *in, size_t most, char **text, size_t *size)
{
    size_t room = 0;
    for (;;) {
        if (*size + 1 >= room) {
            room = room ? 2 * room : 65536;
            char *grown = realloc(*text, room);
            if (!grown) {
                sp_complain(in->complaints, in->at, "no memory left", "a smaller file", NULL);
                return false;
            }
            *text = grown;
        }
        size_t n = sp_file_next(in, *text + *size, room - *size - 1);
        *size += n;
        (*text)[*size] = '\0';
        if (n == 0) return !in->failed;
        if (*size > most) {
            char expected[64];
            snprintf(expected, sizeof expected, "at most %zu bytes", most);
            sp_complain(in->complaints, in->at, "a larger file", expected, NULL);
            return false;
        }
    }
}

bool sp_file_read(const struct sp_place *at, size_t most, char **text, size_t *size,
                  struct sp_complaints *complaints)
{
    struct sp_file_in in;
    *text = NULL;
    *size = 0;
    if (!sp_file_open(&in, at, complaints)) return false;
    bool fine = read_rest(&in, most < SIZE_MAX / 4 ? most : SIZE_MAX / 4, text, size);
    sp_file_close(&in);
    if (!fine) {
        free(*text);
        *text = NULL;
        *size = 0;
    }
    return fine;
}

/* ---- writing -------------------------------------------------------------------------------- */

static bool give_up(struct sp_file_out *out, const char *path, const char *expected,
                    struct sp_complaints *complaints)
{
    complain(&(struct sp_place){.file = path}, errno, expected, complaints);
    sp_file_abandon(out);
    return false;
}

/* Opens a new file beside the path; two writers at once never take the same one. */
static int open_beside(struct sp_file_out *out, size_t size)
{
    for (int i = 0; i < 1000; i++) {
        snprintf(out->beside, size, "%s.%ld-%d.new", out->path, (long)getpid(), i);
        int fd = open(out->beside, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
        if (fd >= 0 || errno != EEXIST) return fd;
    }
    return -1;
}

bool sp_file_begin(struct sp_file_out *out, const char *path, struct sp_complaints *complaints)
{
    struct stat is;
    size_t size = strlen(path) + 48;
    *out = (struct sp_file_out){NULL, NULL, NULL};
    if (stat(path, &is) == 0 && !S_ISREG(is.st_mode)) {
        sp_complain(complaints, &(struct sp_place){.file = path},
                    S_ISDIR(is.st_mode) ? "a directory" : "a device or a pipe", "a plain file to write",
                    NULL);
        return false;
    }
    out->path = malloc(strlen(path) + 1);
    char *beside = out->path ? malloc(size) : NULL;
    if (!beside) return give_up(out, path, "memory to write it", complaints);
    strcpy(out->path, path);
    out->beside = beside;
    int fd = open_beside(out, size);
    if (fd >= 0 && (out->stream = fdopen(fd, "wb"))) return true;
    int error = errno;
    if (fd >= 0) {
        close(fd);
        unlink(out->beside);
    }
    free(out->beside);
    out->beside = NULL;
    errno = error;
    return give_up(out, path, "a place that can be written", complaints);
}

/* The name itself is on disk only once its directory is. Some file systems know no such sync: the file
 * is whole all the same, so that is no fault. */
static void sync_directory(const char *path)
{
    const char *slash = strrchr(path, '/');
    size_t n = slash ? (size_t)(slash - path) : 0;
    char *directory = malloc(n + 2);
    if (!directory) return;
    memcpy(directory, path, n);
    strcpy(directory + n, slash == path ? "/" : "");
    int fd = open(*directory ? directory : ".", O_RDONLY | O_DIRECTORY | O_CLOEXEC);
    if (fd >= 0) {
        fsync(fd);
        close(fd);
    }
    free(directory);
}

bool sp_file_commit(struct sp_file_out *out, struct sp_complaints *complaints)
{
    bool fine = !ferror(out->stream) && fflush(out->stream) == 0 && fsync(fileno(out->stream)) == 0;
    int error = errno;
    fine = fclose(out->stream) == 0 && fine;
    out->stream = NULL;
    if (fine && rename(out->beside, out->path) == 0) {
        sync_directory(out->path);
        free(out->beside);
        out->beside = NULL;
        sp_file_abandon(out);
        return true;
    }
    if (!fine && error) errno = error;
    return give_up(out, out->path, "a place that can be written", complaints);
}

void sp_file_abandon(struct sp_file_out *out)
{
    if (out->stream) fclose(out->stream);
    if (out->beside) unlink(out->beside);
    free(out->beside);
    free(out->path);
    *out = (struct sp_file_out){NULL, NULL, NULL};
}

bool sp_file_write(const char *path, const void *bytes, size_t size, struct sp_complaints *complaints)
{
    struct sp_file_out out;
    if (!sp_file_begin(&out, path, complaints)) return false;
    if (size > 0) fwrite(bytes, 1, size, out.stream); /* an error stays in the stream until the commit */
    return sp_file_commit(&out, complaints);
}
