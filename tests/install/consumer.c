/* consumer.c: a project of somebody else's: one card, one part in memory, one verdict. */
#include <passfet/passfet.h>
#include <stdio.h>
#include <string.h>

static const char card[] = "parameter,min,typ,max,unit\n"
                           "supply_voltage,10.8,12,13.2,V\n"
                           "polarity,,N,,\n"
                           "switch_side,,high,,\n"
                           "output_capacitance,,1000,,uF\n"
                           "start_control,,current_limit,,\n"
                           "current_limit,,5,,A\n"
                           "running_current,,3,,A\n"
                           "fault_time,,5,,ms\n"
                           "ambient_temperature,,50,,degC\n"
                           "gate_drive,,10,,V\n";

static const char parts[] =
    "part,polarity,vds_max [V],vgs_max [V],id_cont [A],id_pulse [A],rdson_max @ 10 V [mOhm],"
    "tj_max [degC],rth_jc [K/W],rth_ja [K/W],soa,zth\n"
    "T1,N,100,20,100,400,2,175,0.5,40,1ms 1:400 10:100 80:8 | 10ms 1:400 10:60 80:4 | dc 1:100 "
    "10:10 80:0.6,1us:0.003 1ms:0.1 10ms:0.3 1s:0.5\n";

static int rank(const pf_profile *profile, const pf_part *part)
{
    pf_plan *plan;
    pf_error error = {0};
    pf_assessment assessment;
    if (pf_plan_new(profile, NULL, 0, &plan, &error) != PF_OK) return 1;
    pf_scratch *scratch = pf_scratch_new();
    int failed = !scratch || pf_assess(plan, part, scratch, &assessment) != PF_OK;
    if (!failed)
        printf("%s: %s, SOA margin %.3g\n", part->name, pf_verdict_text(assessment.verdict),
               assessment.stress.soa_margin);
    pf_scratch_free(scratch);
    pf_plan_free(plan);
    return failed || assessment.verdict != PF_PASS;
}

/* All of the library is there to be linked. */
static int refuses_a_missing_database(void)
{
    pf_store *store;
    pf_error error = {0};
    return pf_store_open("no/such/folder/x.db", PF_STORE_READ, &store, &error) == PF_NOT_FOUND;
}

int main(void)
{
    pf_profile profile;
    pf_problems problems;
    pf_changes changes = {0};
    pf_intake_summary summary = {0};
    const pf_intake_options options = {0};
    pf_problems_init(&problems);
    pf_status status = pf_profile_read("card", card, strlen(card), NULL, &profile, &problems);
    if (status == PF_OK)
        status =
            pf_ratings_read("parts", parts, strlen(parts), &options, &changes, &summary, &problems);
    int failed = status != PF_OK || changes.count != 1;
    if (!failed) failed = rank(&profile, &changes.item[0].part) || !refuses_a_missing_database();
    pf_changes_clear(&changes);
    pf_problems_clear(&problems);
    return failed;
}
