/* words.c: pieces of text that several reports share. */
#include "report/words.h"
#include "base/number.h"

#include <math.h>
#include <passfet/report.h>
#include <string.h>

const char *const *pf_report_cautions(void)
{
    static const char *const caution[] = {
        "A shortlist, not an approval: confirm every choice on the bench, on the real board.",
        "SOA curves of data sheets are mostly typical or calculated values, not guaranteed ones.",
        "Supply and output capacitors store energy that can burn and blind. Qualified people "
        "decide,",
        "under the local electrical and product-safety rules.",
        NULL,
    };
    return caution;
}

bool pf_rule_is_from_memory(const pf_derating *rule)
{
    if (strstr(rule->mark, "memory")) return true;
    for (const char *mark = strchr(rule->mark, 'M'); mark; mark = strchr(mark + 1, 'M')) {
        bool starts = mark == rule->mark || strchr(" ;,", mark[-1]);
        if (starts && (!mark[1] || strchr(" ;,", mark[1]))) return true;
    }
    return false;
}

double pf_parameter_signed(const pf_profile *profile, pf_parameter parameter, double magnitude)
{
    bool carries = parameter == PF_SUPPLY_VOLTAGE || parameter == PF_SUPPLY_STEP_FROM ||
                   parameter == PF_START_LOAD_ABOVE;
    return profile->negative_supply && carries ? 0 - magnitude : magnitude;
}

void pf_interval_print(char text[PF_INTERVAL_ROOM], const pf_profile *profile,
                       pf_parameter parameter)
{
    const pf_interval *interval = &profile->value[parameter];
    pf_quantity quantity = pf_parameter_facts()[parameter].quantity;
    char low[PF_UNIT_ROOM], high[PF_UNIT_ROOM];
    pf_value_print(low, pf_parameter_signed(profile, parameter, interval->min), quantity, 4);
    pf_value_print(high, pf_parameter_signed(profile, parameter, interval->max), quantity, 4);
    if (interval->min == interval->max || !pf_is_stated(interval->min))
        snprintf(text, PF_INTERVAL_ROOM, "%s", high);
    else
        snprintf(text, PF_INTERVAL_ROOM, "%s .. %s", low, high);
}

const char *pf_limiting_event(const pf_plan *plan, const pf_assessment *assessment)
{
    int slot = assessment->stress.limiting_slot;
    return slot < 0 ? "" : pf_plan_event_name(plan, (size_t)slot);
}

bool pf_event_is_rectangle(pf_event event)
{
    return event == PF_SHORT_AT_START || event == PF_SHORT_RUNNING || event == PF_TRIP ||
           event == PF_RETRY;
}

int pf_setting_print(const pf_profile *profile, char *text, size_t room)
{
    static const char *const side[] = {"", " high side", " low side"};
    return snprintf(text, room, "%s channel%s, start by %s, from %s temperature%s",
                    pf_polarity_text(profile->polarity), side[profile->side],
                    pf_start_control_text(profile->control),
                    profile->start_from_ambient ? "ambient" : "running",
                    profile->extend_soa ? ", SOA extended beyond its lines" : "");
}

static bool is_first_byte(char c)
{
    return ((unsigned char)c & 0xC0) != 0x80;
}

size_t pf_text_width(const char *text)
{
    size_t width = 0;
    for (; *text; text++)
        width += is_first_byte(*text);
    return width;
}

void pf_text_field_print(FILE *out, const char *text, size_t width, bool right)
{
    size_t long_by = pf_text_width(text);
    bool cut = long_by > width;
    size_t pad = cut ? 0 : width - long_by, left = cut ? width - 1 : width;
    if (right) fprintf(out, "%*s", (int)pad, "");
    for (; *text && (left || !is_first_byte(*text)); text++) {
        left -= is_first_byte(*text);
        fputc(*text, out);
    }
    if (cut) fputs("\xE2\x80\xA6", out);
    if (!right) fprintf(out, "%*s", (int)pad, "");
}

void pf_wrapped_print(FILE *out, const char *text, size_t indent)
{
    size_t room = PF_TABLE_COLUMNS - indent;
    while (*text) {
        size_t length = 0, blank = 0, width = 0;
        for (; text[length] && width <= room; length++) {
            if (text[length] == ' ') blank = length;
            width += ((unsigned char)text[length] & 0xC0) != 0x80;
        }
        if (text[length] || width > room) length = blank ? blank : length - 1;
        fprintf(out, "%*s%.*s\n", (int)indent, "", (int)length, text);
        text += length;
        while (*text == ' ')
            text++;
    }
}
