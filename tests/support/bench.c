/* bench.c: one part and one profile of round numbers. */
#include "support/bench.h"

#include "support/settings.h"

const char bench_part_text[] =
    "part=T1 maker=Invented package=LFP8 channel=N vds_max=100 vgs_max=20 id_cont=100 id_pulse=400 "
    "rdson=10:0.004,4.5:0.006 rdson_hot_ratio=1.8 tj_max=175 rth_jc=0.5 rth_ja=40 "
    "avalanche_energy=0.5 avalanche_current=50 "
    "soa=1e-4/1:400,10:400,100:20;1e-3/1:400,10:150,100:6;1e-2/1:300,10:50,100:1.5;"
    "dc/1:100,10:10,100:0.2 foster=0.05:1e-4,0.15:2e-3,0.3:5e-2";

const char bench_profile_text[] =
    "polarity=N supply_voltage=12 output_capacitance=1e-3 start_control=current_limit "
    "current_limit=5 running_current=10 fault_time=5e-3 ambient_temperature=40 gate_drive=10";

static void print_finding(void *context, pf_parameter parameter, const char *wrong,
                          const char *right)
{
    (void)context;
    const char *name =
        parameter < PF_PARAMETER_COUNT ? pf_parameter_facts()[parameter].name : "profile";
    DIE("%s: %s: %s", name, wrong, right);
}

void bench_run_capture(bench *b, const char *part_changes, const char *profile_changes,
                       const pf_capture *capture)
{
    pf_error error = {0};
    pf_part_init(&b->part);
    part_state(&b->part, bench_part_text);
    part_state(&b->part, part_changes);
    pf_profile_init(&b->profile);
    profile_state(&b->profile, bench_profile_text);
    profile_state(&b->profile, profile_changes);
    if (pf_profile_finish(&b->profile, print_finding, NULL) != PF_OK) DIE("profile");
    if (pf_plan_new(&b->profile, capture, capture ? 1 : 0, &b->plan, &error) != PF_OK)
        DIE("%s", error.text);
    b->scratch = pf_scratch_new();
    b->stress = &b->assessment.stress;
    bench_again(b);
}

void bench_run(bench *b, const char *part_changes, const char *profile_changes)
{
    bench_run_capture(b, part_changes, profile_changes, NULL);
}

void bench_again(bench *b)
{
    if (pf_assess(b->plan, &b->part, b->scratch, &b->assessment) != PF_OK) DIE("assess");
}

void bench_clear(bench *b)
{
    pf_plan_free(b->plan);
    pf_scratch_free(b->scratch);
    pf_part_clear(&b->part);
}

int bench_slot(const bench *b, pf_event event)
{
    for (size_t i = 0; i < pf_plan_slots(b->plan); i++)
        if (pf_plan_event(b->plan, i) == event) return (int)i;
    DIE("the profile has no event %s", pf_event_text(event));
}

const pf_outcome *bench_outcome(const bench *b, pf_event event)
{
    return &b->stress->outcome[bench_slot(b, event)];
}

const pf_check *bench_check(const bench *b, pf_check_kind kind, int slot)
{
    for (size_t i = 0; i < b->assessment.check_count; i++) {
        const pf_check *check = &b->assessment.check[i];
        if (check->kind == kind && check->slot == slot) return check;
    }
    return NULL;
}

double bench_margin(const char *part_changes, const char *profile_changes, pf_event event)
{
    bench b;
    bench_run(&b, part_changes, profile_changes);
    double margin = bench_outcome(&b, event)->soa_margin;
    bench_clear(&b);
    return margin;
}
