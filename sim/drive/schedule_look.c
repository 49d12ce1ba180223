/* Looking things up in a schedule. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule.h"

size_t sp_schedule_row(const struct sp_schedule *s, double time)
{
    size_t low = 0, high = s->rows - 1;
    while (high - low > 1) {
        size_t mid = low + (high - low) / 2;
        if (s->time[mid] < time || (s->time[mid] == time && s->time[mid + 1] > time)) low = mid;
        else high = mid;
    }
    return low;
}

const char *sp_schedule_mark(const struct sp_schedule *s, size_t k)
{
    const char *text = NULL;
    for (size_t i = 0; i < s->marks && s->mark[i].row <= k; ++i)
        text = s->step[s->mark[i].row] == s->step[k] ? s->mark[i].text : NULL;
    return text;
}
