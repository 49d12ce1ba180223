/* Against measured coolant. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/measured.h"

#include <gsl/gsl_sort.h>
#include <gsl/gsl_statistics.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

static const double near_set_point = 2.0;  /* K */
static const double warm = 273.15 + 85.0;  /* K */

static bool grow(double **list, size_t room)
{
    double *more = realloc(*list, room * sizeof **list);
    if (more) *list = more;
    return more != NULL;
}

bool sp_measured_add(struct sp_measured *m, double time, double logged, double modelled)
{
    if (m->count == m->room) {
        size_t room = m->room ? 2 * m->room : 1024;
        if (!grow(&m->time, room) || !grow(&m->logged, room) || !grow(&m->modelled, room)) return false;
        m->room = room;
    }
    m->time[m->count] = time;
    m->logged[m->count] = logged;
    m->modelled[m->count++] = modelled;
    return true;
}

void sp_measured_free(struct sp_measured *m)
{
    free(m->time);
    free(m->logged);
    free(m->modelled);
    memset(m, 0, sizeof *m);
}

static double first_at(const struct sp_measured *m, const double *value, double level)
{
    for (size_t i = 0; i < m->count; ++i)
        if (value[i] >= level) return m->time[i] - m->time[0];
    return NAN;
}

static double set_point(const struct sp_measured *m)
{
    double *sorted = malloc(m->count * sizeof *sorted);
    if (!sorted) return NAN;
    memcpy(sorted, m->logged, m->count * sizeof *sorted);
    gsl_sort(sorted, 1, m->count);
    double point = gsl_stats_quantile_from_sorted_data(sorted, 1, m->count, 0.75);
    free(sorted);
    return point;
}

struct sp_measured_score sp_measured_score(const struct sp_measured *m)
{
    struct sp_measured_score s = {NAN, NAN, NAN, NAN, NAN, NAN};
    if (m->count < 2) return s;
    double point = set_point(m), end = first_at(m, m->logged, point - near_set_point);
    double sum = 0.0, none = 0.0, warmup = 0.0, none_warmup = 0.0;
    size_t warming = 0;
    for (size_t i = 0; i < m->count; ++i) {
        double t = m->time[i] - m->time[0];
        double guess = t < end ? m->logged[0] + (point - m->logged[0]) * t / end : point;
        double off = m->modelled[i] - m->logged[i], no = guess - m->logged[i];
        sum += off * off;
        none += no * no;
        if (!(t < end)) continue;
        warmup += off * off;
        none_warmup += no * no;
        ++warming;
    }
    s.rms = sqrt(sum / (double)m->count);
    s.none_rms = sqrt(none / (double)m->count);
    if (warming) {
        s.warmup_rms = sqrt(warmup / (double)warming);
        s.none_warmup_rms = sqrt(none_warmup / (double)warming);
    }
    s.time_to_85 = first_at(m, m->modelled, warm);
    s.logged_time_to_85 = first_at(m, m->logged, warm);
    return s;
}
