/* file.h - files read with their errors as complaints, and written whole or not at all. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_BASE_FILE_H
#define SP_BASE_FILE_H

#include "swirlpot/base.h"

/* A file read piece by piece. `at` names it in complaints and must outlive it. */
struct sp_file_in {
    int fd;
    bool failed;
    const struct sp_place *at;
    struct sp_complaints *complaints;
};

/* Opens at->file, which must be a plain file (a device or a pipe could go on for ever). */
bool sp_file_open(struct sp_file_in *in, const struct sp_place *at, struct sp_complaints *complaints);
size_t sp_file_next(struct sp_file_in *in, char *to, size_t size); /* bytes read; 0: end or error */
bool sp_file_close(struct sp_file_in *in); /* false: reading failed somewhere, and was complained of */

/* Reads at->file, of at most `most` bytes, into *text (malloc'd, a NUL behind the last byte). */
bool sp_file_read(const struct sp_place *at, size_t most, char **text, size_t *size,
                  struct sp_complaints *complaints);

/* A file on its way: written beside its place under another name, put there by sp_file_commit. */
struct sp_file_out {
    FILE *stream;
    char *path, *beside;
};

bool sp_file_begin(struct sp_file_out *out, const char *path, struct sp_complaints *complaints);
/* Flushes, syncs, renames. False: complained of, the old file is as it was. */
bool sp_file_commit(struct sp_file_out *out, struct sp_complaints *complaints);
void sp_file_abandon(struct sp_file_out *out);

/* The three in one. */
bool sp_file_write(const char *path, const void *bytes, size_t size, struct sp_complaints *complaints);

#endif
