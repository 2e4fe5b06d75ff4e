/* judge.c: findings about a part as problems of an import. */
#include <passfet/intake.h>
#include <passfet/plausibility.h>

#include <stdio.h>

typedef struct judging {
    const pf_part *part;
    const char *file;
    size_t line;
    bool accept;
    pf_problems *problems;
    pf_status status;
    bool refused;
} judging;

static void on_finding(void *context, const pf_finding *finding)
{
    judging *work = context;
    char words[256], right[160];
    bool refuse = finding->refuses && !work->accept;
    pf_place place = {work->file, work->line, NULL, work->part->name};
    pf_severity severity = refuse ? PF_SEVERITY_REFUSAL : PF_SEVERITY_WARNING;
    pf_finding_print(finding, words, sizeof words);
    snprintf(right, sizeof right, "check %s%s", pf_oddity_look(finding->oddity),
             refuse ? "; --accept takes them as they are" : "");
    pf_status status = pf_problems_add(work->problems, severity, place, right, "%s", words);
    if (status == PF_BAD_INPUT)
        work->refused = true;
    else if (work->status == PF_OK)
        work->status = status;
}

pf_status pf_part_judge(const pf_part *part, const char *file, size_t line, bool accept,
                        pf_problems *problems)
{
    judging work = {part, file, line, accept, problems, PF_OK, false};
    pf_status status = pf_part_check(part, on_finding, &work);
    if (status == PF_OK) status = work.status;
    return status == PF_OK && work.refused ? PF_BAD_INPUT : status;
}
