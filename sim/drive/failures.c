/* What failed in a run: one entry a watch that was ever beyond its limit.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>

#include "drive/run.h"

static struct sp_failure entry(const struct sp_run *r, int w)
{
    const struct sp_spell *s = &r->spell[w];
    const struct sp_schedule *plan = r->schedule;
    struct sp_watch_info i = sp_watch_info(r->circuit, &r->watches.of[w]);
    struct sp_failure f = {i.events.rise,
                           s->place,
                           i.severity,
                           s->first,
                           0.0,
                           0,
                           NULL,
                           s->worst,
                           s->worst_time,
                           i.unit,
                           i.scale,
                           s->over,
                           i.grave > 0.0 ? s->worst / i.grave : INFINITY};
    struct sp_inputs in;
    if (r->high[w]) f.over += r->result->duration - s->since;
    sp_schedule_at(plan, s->segment, s->first, &in);
    f.distance = in.distance;
    f.step = plan->step[s->segment];
    f.mark = sp_schedule_mark(plan, s->segment);
    return f;
}

/* Of one quantity the highest tier that was passed says how bad it was: the lower ones are always further
 * passed. */
static bool lower_tier(const struct sp_run *r, int w)
{
    static const int own_stop[] = {SP_W_COOLANT, SP_W_GAUGE, SP_W_METAL};
    const struct sp_watch_one *one = &r->watches.of[w];
    if (one->kind != SP_W_TIER || one->tier != 1) return false;
    if (one->index <= SP_LIMITED_METAL) return isfinite(r->spell[own_stop[one->index]].first);
    for (int v = SP_WATCHES; v < r->watches.count; ++v) {
        const struct sp_watch_one *other = &r->watches.of[v];
        if (other->kind == SP_W_TIER && other->index == one->index && other->tier == 2)
            return isfinite(r->spell[v].first);
    }
    return false;
}

static void put_in_order(struct sp_result *out, struct sp_failure f)
{
    size_t at = out->failures++;
    for (; at > 0 && out->failure[at - 1].time > f.time; --at)
        out->failure[at] = out->failure[at - 1];
    out->failure[at] = f;
}

bool sp_run_failures(struct sp_run *r)
{
    struct sp_result *out = r->result;
    double most = -INFINITY;
    enum sp_event_kind worst = SP_EVENT_KINDS;
    const char *where = NULL;
    out->failure = calloc((size_t)r->watches.count, sizeof *out->failure);
    if (!out->failure) return false;
    for (int w = 0; w < r->watches.count; ++w) {
        if (!isfinite(r->spell[w].first)) continue;
        struct sp_failure f = entry(r, w);
        put_in_order(out, f);
        if (f.severity < SP_SEVERITY_ALARM || lower_tier(r, w) || !(f.share > most)) continue;
        most = f.share;
        worst = f.kind;
        where = f.place;
    }
    for (size_t i = out->failures; i-- > 0;) {
        const struct sp_failure *f = &out->failure[i];
        if (f->severity >= SP_SEVERITY_ALARM) out->first = f;
        if (f->kind == worst && f->place == where) out->worst = f;
    }
    return true;
}
