/* swirlpot run: a drive and its verdict. SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/paper.h"
#include "swirlpot/result.h"
#include "verbs.h"

/* What a run holds while it goes on. */
struct job {
    const struct sp_arguments *arguments;
    struct sp_units *units;
    struct sp_design *design;
    struct sp_drive *drive;
    double interval;
    struct sp_complaints complaints, cautions;
};

static const struct sp_wanted wanted_every = {"--every", SP_K_TIME, 1e-3, 86400.0, "1 ms to 1 d, as \"1 s\""};

static bool prepare(struct job *j)
{
    const struct sp_arguments *a = j->arguments;
    bool good =
        !a->every || sp_argument_quantity(j->units, &wanted_every, a->every, &j->interval, &j->complaints);
    j->design = sp_case_read(j->units, a->operand, a->sets.list, a->sets.count, SP_FOR_DRIVE, &j->complaints,
                             &j->cautions);
    if (!j->design || !good) return false;
    j->drive = sp_drive_build(j->units, j->design, &j->complaints, &j->cautions);
    if (!j->drive && !j->complaints.count) {
        struct sp_place at = {.file = a->operand};
        sp_complain(&j->complaints, &at, "too little memory", "memory for the drive", NULL);
    }
    return j->drive != NULL;
}

static enum sp_status drive(struct job *j, struct sp_result *result)
{
    const struct sp_arguments *a = j->arguments;
    struct sp_report report = {j->design, j->drive, result, {0, 0}};
    struct sp_report_files *files = NULL;
    if (a->directory && !(files = sp_report_files_open(a->directory, &j->complaints))) return SP_INPUT;
    struct sp_run_options options = {.interval = j->interval,
                                     .sink = files ? sp_report_files_sink(files) : NULL};
    enum sp_status status = sp_drive_run(j->drive, &options, result, &j->complaints);
    if (status != SP_OK && status != SP_NOT) {
        sp_report_files_abandon(files);
        return status;
    }
    sp_case_defaults(j->units, a->operand, a->sets.list, a->sets.count, &report.defaults);
    if (files && !sp_report_files_finish(files, &report)) return SP_INPUT;
    if (a->json)
        sp_report_json(&report, stdout);
    else
        sp_report_text(&report, a->exact, stdout);
    return status;
}

static enum sp_status run(const struct sp_arguments *a)
{
    struct job j = {.arguments = a, .units = sp_units_open()};
    struct sp_result result = {0};
    enum sp_status status = prepare(&j) ? drive(&j, &result) : SP_INPUT;
    sp_result_free(&result);
    sp_drive_free(j.drive);
    sp_design_free(j.design);
    sp_units_close(j.units);
    return sp_speak(status, &j.complaints, &j.cautions);
}

const struct sp_verb sp_verb_run = {
    "run",
    "CASE",
    "soejx",
    "drives a case and tells whether it survives",
    "Drives the case from end to end and says whether the coolant stays within its\n"
    "limits, where and when it was hottest, what happened on the way and what the\n"
    "cooling cost in drag, and what fails first and worst when anything does.\n"
    "Status 0: survives; 1: some limit was broken.\n\n"
    "With -o, DIR is made when missing, and what is missing above it; series.csv\n"
    "holds the drive over time.",
    run};
