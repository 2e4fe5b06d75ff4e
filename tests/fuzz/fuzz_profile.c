/* fuzz_profile.c: any bytes as a profile, a capture and a file of derating rules. A profile that is
** accepted has what every profile needs, in order. */
#include <passfet/intake.h>

#include <stdint.h>
#include <stdlib.h>

static void check_profile(const pf_profile *profile)
{
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        const pf_interval *value = &profile->value[i];
        const pf_parameter_fact *fact = &pf_parameter_facts()[i];
        if (!profile->stated[i]) continue;
        if (!(value->min <= value->typ && value->typ <= value->max)) abort();
        if (!(value->min >= fact->lowest && value->max <= fact->highest)) abort();
    }
    if (!profile->stated[PF_SUPPLY_VOLTAGE] || profile->polarity == PF_POLARITY_NONE) abort();
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    pf_problems problems;
    pf_profile profile;
    pf_capture_data capture = {0};
    pf_derating_rules rules = {0};
    const char *text = (const char *)data;
    pf_problems_init(&problems);
    pf_status status = pf_profile_read("fuzz.csv", text, size, NULL, &profile, &problems);
    if ((status == PF_BAD_INPUT) != (problems.refusals > 0)) abort();
    if (status == PF_OK) check_profile(&profile);
    status = pf_capture_read("fuzz.csv", text, size, &capture, &problems);
    if (status == PF_OK && capture.count < 2) abort();
    for (size_t i = 1; i < capture.count; i++)
        if (!(capture.time_s[i] > capture.time_s[i - 1])) abort();
    status = pf_derating_rules_read("fuzz.csv", text, size, &rules, &problems);
    (void)status;
    pf_capture_data_clear(&capture);
    pf_derating_rules_clear(&rules);
    pf_problems_clear(&problems);
    return 0;
}
