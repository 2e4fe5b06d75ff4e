/* command_explain.c: passfet explain PART PROFILE */
#include "base/memory.h"
#include "cli/commands.h"
#include "cli/review.h"

const pf_option pf_explain_options[] = {PF_REVIEW_OPTIONS};

static int show(const pf_review *review, pf_explanation *explanation, pf_influence *influence,
                size_t count)
{
    explanation->assessment.stress.remarks |= pf_review_remarks(review);
    const pf_sheet_subject subject = {.plan = review->cards.plan[0],
                                      .part = &review->stored.part,
                                      .explanation = explanation,
                                      .influence = influence,
                                      .influence_count = count,
                                      .source = &review->source};
    if (review->json)
        pf_report_sheet_json(review->cli->out, &subject);
    else
        pf_report_sheet_text(review->cli->out, &subject);
    bool passes = explanation->assessment.verdict == PF_PASS && !pf_plan_stall(subject.plan);
    return passes ? PF_EXIT_DONE : PF_EXIT_NO;
}

static int explain(const pf_review *review)
{
    const pf_plan *plan = review->cards.plan[0];
    const pf_captures *recorded = &review->cards.recorded;
    pf_influence influence[PF_INFLUENCES_MAX];
    size_t count = 0;
    pf_explanation *explanation = pf_allocate(1, sizeof *explanation);
    pf_status status = explanation ? PF_OK : PF_NO_MEMORY;
    if (status == PF_OK)
        status = pf_sensitivity(plan, &review->stored.part, review->scratch, influence, &count);
    if (status == PF_OK)
        status = pf_explain(plan, recorded->view, recorded->count, &review->stored.part,
                            review->scratch, explanation);
    int exit_status = status == PF_OK ? show(review, explanation, influence, count)
                                      : pf_fail(review->cli, status, NULL);
    pf_free(explanation);
    return exit_status;
}

int pf_command_explain(const pf_cli *cli, const pf_arguments *arguments)
{
    pf_review review;
    int exit_status = pf_review_open(&review, cli, arguments, arguments->operand[1]);
    if (exit_status == PF_EXIT_DONE) exit_status = pf_review_find(&review, arguments->operand[0]);
    if (exit_status == PF_EXIT_DONE) exit_status = explain(&review);
    pf_review_close(&review);
    return exit_status;
}
