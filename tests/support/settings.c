/* settings.c: parts and profiles from texts. */
#include "support/settings.h"

#include "base/number.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define POINTS_MAX 256

void settings_die(const char *file, int line, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    fprintf(stderr, "%s:%d: ", file, line);
    vfprintf(stderr, format, arguments);
    fputc('\n', stderr);
    va_end(arguments);
    exit(99);
}

void settings_read(settings *list, const char *text)
{
    *list = (settings){0};
    if (strlen(text) >= sizeof list->text) DIE("settings too long: %s", text);
    strcpy(list->text, text);
    for (char *word = strtok(list->text, " "); word; word = strtok(NULL, " ")) {
        char *equal = strchr(word, '=');
        if (!equal || list->count == SETTINGS_MAX) DIE("not a setting: `%s` in %s", word, text);
        *equal = '\0';
        list->item[list->count++] = (setting){word, equal + 1, false};
    }
}

const char *settings_find(settings *list, const char *name)
{
    const char *found = NULL;
    for (size_t i = 0; i < list->count; i++) {
        if (strcmp(list->item[i].name, name) != 0) continue;
        list->item[i].used = true;
        found = list->item[i].value;
    }
    return found;
}

static double number_of(const char *text, const char **end)
{
    char *stop;
    double value = strtod(text, &stop);
    if (stop == text) DIE("not a number: `%s`", text);
    *end = stop;
    return value;
}

static double whole_number(const char *text)
{
    const char *end;
    double value = number_of(text, &end);
    if (*end) DIE("not a number: `%s`", text);
    return value;
}

double settings_number_or(settings *list, const char *name, double otherwise)
{
    const char *value = settings_find(list, name);
    return value ? whole_number(value) : otherwise;
}

double settings_number(settings *list, const char *name)
{
    double value = settings_number_or(list, name, PF_NONE);
    if (!pf_is_stated(value)) DIE("`%s` is missing", name);
    return value;
}

void settings_finish(const settings *list)
{
    for (size_t i = 0; i < list->count; i++)
        if (!list->item[i].used) DIE("unknown setting `%s`", list->item[i].name);
}

size_t points_read(const char *text, double *x, double *y, double *z, size_t room)
{
    size_t count = 0;
    while (*text && *text != ';') {
        double *place[] = {x, y, z};
        if (count == room) DIE("too many points");
        for (int i = 0; i < (z ? 3 : 2); i++) {
            if (i && *text++ != ':') DIE("no `:` before `%s`", text - 1);
            place[i][count] = number_of(text, &text);
        }
        count++;
        if (*text == ',') text++;
    }
    return count;
}

static void must(pf_status status)
{
    if (status != PF_OK) DIE("%s", pf_status_text(status));
}

static double pulse_of(const char *text, const char **end)
{
    if (strncmp(text, "dc", 2) != 0) return number_of(text, end);
    *end = text + 2;
    return PF_DC;
}

static void set_soa(pf_part *part, const char *text)
{
    pf_soa_point point[POINTS_MAX];
    double v[POINTS_MAX], a[POINTS_MAX];
    size_t count = 0;
    while (*text) {
        double degC = 25, pulse_s = pulse_of(text, &text);
        if (*text == '@') degC = number_of(text + 1, &text);
        if (*text++ != '/') DIE("no `/` after a pulse width: `%s`", text - 1);
        size_t more = points_read(text, v, a, NULL, POINTS_MAX - count);
        for (size_t i = 0; i < more; i++)
            point[count++] = (pf_soa_point){degC, pulse_s, v[i], a[i]};
        text += strcspn(text, ";");
        if (*text == ';') text++;
    }
    must(pf_part_set_soa(part, point, count));
}

static void set_zth(pf_part *part, pf_thermal_path path, const char *text)
{
    double t[POINTS_MAX], z[POINTS_MAX];
    pf_zth_point point[POINTS_MAX];
    size_t count = points_read(text, t, z, NULL, POINTS_MAX);
    for (size_t i = 0; i < count; i++)
        point[i] = (pf_zth_point){t[i], z[i]};
    must(pf_part_set_zth(part, path, point, count));
}

static void set_foster(pf_part *part, pf_thermal_path path, const char *text, bool capacitance)
{
    double r[POINTS_MAX], tau[POINTS_MAX];
    pf_foster_pair pair[POINTS_MAX];
    size_t count = points_read(text, r, tau, NULL, POINTS_MAX);
    for (size_t i = 0; i < count; i++)
        pair[i] = (pf_foster_pair){r[i], capacitance ? r[i] * tau[i] : tau[i]};
    must(pf_part_set_foster(part, path, pair, count));
}

static void set_rdson(pf_part *part, const char *text)
{
    double v[PF_RDSON_MAX], r[PF_RDSON_MAX];
    size_t count = points_read(text, v, r, NULL, PF_RDSON_MAX);
    part->rdson_count = 0;
    for (size_t i = 0; i < count; i++)
        must(pf_part_set_rdson(part, v[i], r[i]));
}

static pf_polarity polarity_of(const char *text)
{
    return *text == 'N' ? PF_N_CHANNEL : *text == 'P' ? PF_P_CHANNEL : PF_POLARITY_NONE;
}

static bool set_field(pf_part *part, const char *name, const char *value)
{
    size_t count;
    const pf_rating_field *rating = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++) {
        if (strcmp(rating[i].csv, name) != 0) continue;
        *pf_part_rating(part, &rating[i]) = *value ? whole_number(value) : PF_NONE;
        return true;
    }
    const pf_text_field *text = pf_text_fields(&count);
    for (size_t i = 0; i < count; i++) {
        if (strcmp(text[i].csv, name) != 0) continue;
        must(pf_part_set_text(part, &text[i], *value ? value : NULL));
        return true;
    }
    return false;
}

bool part_set(pf_part *part, const char *name, const char *value)
{
    if (strcmp(name, "channel") == 0)
        part->polarity = polarity_of(value);
    else if (strcmp(name, "soa") == 0)
        set_soa(part, value);
    else if (strcmp(name, "zth") == 0)
        set_zth(part, PF_JUNCTION_CASE, value);
    else if (strcmp(name, "zth_ambient") == 0)
        set_zth(part, PF_JUNCTION_AMBIENT, value);
    else if (strcmp(name, "foster") == 0)
        set_foster(part, PF_JUNCTION_CASE, value, false);
    else if (strcmp(name, "foster_rc") == 0)
        set_foster(part, PF_JUNCTION_CASE, value, true);
    else if (strcmp(name, "rdson") == 0)
        set_rdson(part, value);
    else
        return set_field(part, name, value);
    return true;
}

/* "5", "4..6" or "4..5..6". */
static pf_interval interval_of(const char *text)
{
    double number[3];
    size_t count = 0;
    const char *at = text;
    for (;;) {
        char word[64];
        const char *dots = strstr(at, "..");
        size_t length = dots ? (size_t)(dots - at) : strlen(at);
        if (count == 3 || length >= sizeof word) DIE("not an interval: `%s`", text);
        memcpy(word, at, length);
        word[length] = '\0';
        number[count++] = whole_number(word);
        if (!dots) break;
        at = dots + 2;
    }
    if (count == 1) return (pf_interval){number[0], number[0], number[0]};
    if (count == 2) return (pf_interval){number[0], (number[0] + number[1]) / 2, number[1]};
    return (pf_interval){number[0], number[1], number[2]};
}

static bool set_rule(pf_derating *rule, const char *name, const char *value)
{
    const struct {
        const char *name;
        double *at;
    } place[] = {
        {"rule_voltage_use", &rule->voltage_use},
        {"rule_gate_use", &rule->gate_use},
        {"rule_current_use", &rule->current_use},
        {"rule_power_use", &rule->power_use},
        {"rule_junction_limit", &rule->junction_limit_degC},
        {"rule_junction_below_max", &rule->junction_below_max_K},
        {"rule_junction_share", &rule->junction_share},
    };
    for (size_t i = 0; i < sizeof place / sizeof *place; i++)
        if (strcmp(place[i].name, name) == 0) *place[i].at = whole_number(value);
    return strncmp(name, "rule_", 5) == 0;
}

static pf_start_control control_of(const char *text)
{
    for (int i = PF_START_SLEW; i <= PF_START_FOLDBACK; i++)
        if (strcmp(text, pf_start_control_text((pf_start_control)i)) == 0)
            return (pf_start_control)i;
    if (*text) DIE("no such start_control: `%s`", text);
    return PF_START_NONE;
}

static bool set_text(pf_profile *profile, const char *name, const char *value)
{
    if (strcmp(name, "polarity") == 0)
        profile->polarity = polarity_of(value);
    else if (strcmp(name, "start_control") == 0)
        profile->control = control_of(value);
    else if (strcmp(name, "start_from") == 0)
        profile->start_from_ambient = strcmp(value, "ambient") == 0;
    else if (strcmp(name, "beyond_soa") == 0)
        profile->extend_soa = strcmp(value, "extend") == 0;
    else if (strcmp(name, "retry_count") == 0 && strcmp(value, "endless") == 0)
        profile->endless_retry = true;
    else
        return set_rule(&profile->derating, name, value);
    return true;
}

bool profile_set(pf_profile *profile, const char *name, const char *value)
{
    if (set_text(profile, name, value)) return true;
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        if (strcmp(pf_parameter_facts()[i].name, name) != 0) continue;
        profile->value[i] = *value ? interval_of(value) : (pf_interval){PF_NONE, PF_NONE, PF_NONE};
        profile->stated[i] = *value != '\0';
        return true;
    }
    return false;
}

void part_state(pf_part *part, const char *text)
{
    settings list;
    settings_read(&list, text);
    for (size_t i = 0; i < list.count; i++)
        list.item[i].used = part_set(part, list.item[i].name, list.item[i].value);
    settings_finish(&list);
}

void profile_state(pf_profile *profile, const char *text)
{
    settings list;
    settings_read(&list, text);
    for (size_t i = 0; i < list.count; i++)
        list.item[i].used = profile_set(profile, list.item[i].name, list.item[i].value);
    settings_finish(&list);
}

void settings_apply(settings *list, pf_part *part, pf_profile *profile)
{
    for (size_t i = 0; i < list->count; i++) {
        setting *item = &list->item[i];
        bool known = part_set(part, item->name, item->value);
        if (profile_set(profile, item->name, item->value) || known) item->used = true;
    }
}
