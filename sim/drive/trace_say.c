/* trace_say.c - what a trace's reader complains of. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/trace_reader.h"

void sp_trace_fault(struct sp_trace_reader *r, const char *path, const char *found, const char *expected,
                    const char *hint)
{
    struct sp_place at = r->at;
    at.line = r->row_line;
    at.path = path;
    sp_complain(r->complaints, &at, found, expected, hint);
    r->failed = true;
}

void sp_trace_no_memory(struct sp_trace_reader *r)
{
    if (r->stage != SP_STAGE_STOPPED) sp_trace_fault(r, NULL, "no memory left", "enough for the trace", NULL);
    r->stage = SP_STAGE_STOPPED;
}
