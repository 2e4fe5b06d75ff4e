/* headroom.c: how far a profile can move, as text and JSON. */
#include "base/number.h"
#include "report/review_json.h"
#include "report/words.h"

#include <math.h>

/* A value of a parameter, rounded to six digits towards the side on which the part passes. */
static void print_bound(char text[PF_UNIT_ROOM], const pf_plan *plan, const pf_room *room)
{
    double value = room->value;
    if (room->kind == PF_ROOM_FLIPS && value != 0) {
        double unit = pow(10, floor(log10(fabs(value))) - 5), whole = value / unit;
        value = (room->at_most ? floor(whole) : ceil(whole)) * unit;
    }
    pf_value_print(text, pf_parameter_signed(pf_plan_profile(plan), room->parameter, value),
                   pf_parameter_facts()[room->parameter].quantity, 6);
}

static void print_value(char text[PF_UNIT_ROOM], const pf_plan *plan, pf_parameter parameter,
                        double value)
{
    pf_value_print(text, pf_parameter_signed(pf_plan_profile(plan), parameter, value),
                   pf_parameter_facts()[parameter].quantity, 5);
}

/* What stops it: the check that decides beyond the flip, and its corner. */
static void print_stop(char *text, size_t room_bytes, const pf_plan *plan, const pf_room *room)
{
    char sentence[300], value[PF_UNIT_ROOM];
    const pf_parameter_fact *fact = pf_parameter_facts();
    pf_check_print(plan, &room->stop, sentence, sizeof sentence);
    size_t at = (size_t)snprintf(text, room_bytes, "%s", sentence);
    for (int i = 0; i < PF_PARAMETER_COUNT && at < room_bytes; i++) {
        if (!pf_is_stated(room->corner_value[i]) || i == (int)room->parameter) continue;
        print_value(value, plan, (pf_parameter)i, room->corner_value[i]);
        at += (size_t)snprintf(text + at, room_bytes - at, ", %s %s", fact[i].name, value);
    }
}

static void print_flip(FILE *out, const pf_plan *plan, const pf_room *room)
{
    char bound[PF_UNIT_ROOM], from[PF_UNIT_ROOM], line[1200], stop[900];
    print_bound(bound, plan, room);
    print_value(from, plan, room->parameter, room->from);
    print_stop(stop, sizeof stop, plan, room);
    bool kelvin = pf_parameter_facts()[room->parameter].quantity == PF_TEMPERATURE;
    if (kelvin)
        snprintf(line, sizeof line, "%.1f K", 100 * room->relative);
    else
        snprintf(line, sizeof line, "%.1f %%", 100 * room->relative);
    fprintf(out, "  %-22s %-9s %-16s %-16s %s\n", pf_parameter_facts()[room->parameter].name,
            room->at_most ? "at most" : "at least", bound, from, line);
    snprintf(line, sizeof line, "beyond it %s: %s%s", pf_verdict_text(room->there), stop,
             room->stalls ? "; before that the card's own timer cuts its starts off" : "");
    pf_wrapped_print(out, line, 6);
}

static void print_end(FILE *out, const pf_plan *plan, const pf_room *room)
{
    char bound[PF_UNIT_ROOM], line[400];
    print_bound(bound, plan, room);
    const char *name = pf_parameter_facts()[room->parameter].name;
    const char *way = room->upward ? "up" : "down",
               *sign = room->here == PF_PASS ? "passes" : "does not pass";
    if (room->kind == PF_ROOM_NEVER)
        snprintf(line, sizeof line, "%s: never flips the verdict; the part %s %s to %s%s", name,
                 sign, way, bound, room->stalls ? ", where the card itself no longer starts" : "");
    else
        snprintf(line, sizeof line,
                 "%s: the part %s %s to %s, beyond which the profile makes no "
                 "sense: %s",
                 name, sign, way, bound, room->wrong ? room->wrong : "");
    pf_wrapped_print(out, line, 2);
}

void pf_report_headroom_text(FILE *out, const pf_plan *plan, const pf_part *part,
                             const pf_room *room, size_t count, const pf_report_source *source)
{
    size_t at = 0;
    fprintf(out, "Headroom of %s on the card %s", part->name, pf_plan_profile(plan)->name);
    if (source->revision)
        fprintf(out, " (ratings: %s, revision %s)", source->database, source->revision);
    fputs("\n\n  One parameter at a time as a single value, all others at their corners; nearest "
          "first.\n\n",
          out);
    fprintf(out, "  %-22s %-9s %-16s %-16s %s\n", "parameter", "", "passes", "from", "headroom");
    for (; at < count && room[at].kind == PF_ROOM_FLIPS; at++)
        print_flip(out, plan, &room[at]);
    if (at == 0) fputs("  No parameter flips the verdict.\n", out);
    fputc('\n', out);
    for (; at < count; at++)
        print_end(out, plan, &room[at]);
    fputc('\n', out);
    for (const char *const *line = pf_report_cautions(); *line; line++)
        fprintf(out, "%s\n", *line);
}

static const char *kind_text(pf_room_kind kind)
{
    return kind == PF_ROOM_FLIPS ? "flips" : kind == PF_ROOM_NEVER ? "never" : "profile_invalid";
}

/* Members of one room; value is the last one at which the part passes. */
static void write_room(pf_json *json, const pf_plan *plan, const pf_room *room)
{
    const pf_parameter_fact *fact = pf_parameter_facts();
    const pf_profile *profile = pf_plan_profile(plan);
    bool flips = room->kind == PF_ROOM_FLIPS;
    pf_json_named_text(json, "parameter", fact[room->parameter].name);
    pf_json_named_text(json, "unit", pf_quantity_unit(fact[room->parameter].quantity));
    pf_json_named_text(json, "result", kind_text(room->kind));
    pf_json_named_text(json, "direction", room->upward ? "up" : "down");
    pf_json_named_text(json, "passes", !flips ? NULL : room->at_most ? "at most" : "at least");
    pf_json_named_number(json, "from", pf_parameter_signed(profile, room->parameter, room->from));
    pf_json_named_number(json, "value", pf_parameter_signed(profile, room->parameter, room->value));
    pf_json_named_number(json, "beyond",
                         pf_parameter_signed(profile, room->parameter, room->beyond));
    pf_json_named_number(json, "relative", room->relative);
    pf_json_named_text(json, "verdict_from", pf_verdict_text(room->here));
    pf_json_named_text(json, "verdict_beyond", flips ? pf_verdict_text(room->there) : NULL);
    pf_json_named_bool(json, "card_stalls_before", room->stalls);
    pf_json_named_text(json, "profile_says", room->wrong);
    pf_json_name(json, "stopped_by");
    if (flips)
        pf_json_check(json, plan, &room->stop);
    else
        pf_json_text(json, NULL);
    pf_json_name(json, "corner");
    pf_json_open(json, '{');
    for (int i = 0; i < PF_PARAMETER_COUNT; i++)
        if (flips && pf_is_stated(room->corner_value[i]))
            pf_json_named_number(
                json, fact[i].name,
                pf_parameter_signed(profile, (pf_parameter)i, room->corner_value[i]));
    pf_json_close(json, '}');
}

void pf_report_headroom_json(FILE *out, const pf_plan *plan, const pf_part *part,
                             const pf_room *room, size_t count, const pf_report_source *source)
{
    pf_json json;
    pf_json_begin(&json, out);
    pf_json_open(&json, '{');
    pf_json_head(&json, part, plan, source);
    pf_json_name(&json, "headroom");
    pf_json_open(&json, '[');
    for (size_t i = 0; i < count; i++) {
        pf_json_open(&json, '{');
        write_room(&json, plan, &room[i]);
        pf_json_close(&json, '}');
    }
    pf_json_close(&json, ']');
    pf_json_cautions(&json);
    pf_json_close(&json, '}');
    pf_json_end(&json);
}

static void print_solution(FILE *out, const pf_plan *plan, const pf_solution *of)
{
    char bound[PF_UNIT_ROOM], line[1200] = "", stop[900];
    const pf_room *room = &of->room;
    print_bound(bound, plan, room);
    if (room->kind == PF_ROOM_FLIPS) {
        print_stop(stop, sizeof stop, plan, room);
        snprintf(line, sizeof line, "%s; beyond it %s: %s%s",
                 room->at_most ? "at most" : "at least", pf_verdict_text(room->there), stop,
                 room->stalls ? "; before that the card's own timer cuts its starts off" : "");
    } else {
        snprintf(line, sizeof line, "%s",
                 room->here != PF_PASS           ? "passes with no value"
                 : room->kind == PF_ROOM_INVALID ? "passes as far as the profile makes sense"
                                                 : "passes with every value");
        if (room->here != PF_PASS) snprintf(bound, sizeof bound, "-");
    }
    fputs("  ", out);
    pf_text_field_print(out, of->part, 18, false);
    fputc(' ', out);
    pf_text_field_print(out, of->maker ? of->maker : "-", 12, false);
    fprintf(out, " %-10s %s\n", pf_verdict_text(of->verdict), bound);
    pf_wrapped_print(out, line, 6);
}

void pf_report_solve_text(FILE *out, const pf_plan *plan, pf_parameter parameter,
                          const pf_solution *solution, size_t count, const pf_report_source *source)
{
    char now[PF_INTERVAL_ROOM];
    const char *name = pf_parameter_facts()[parameter].name;
    pf_interval_print(now, pf_plan_profile(plan), parameter);
    fprintf(out,
            "%s on the card %s, now %s: the value up to which, or from which, each part passes",
            name, pf_plan_profile(plan)->name, now);
    if (source->revision)
        fprintf(out, "\nRatings: %s, revision %s", source->database, source->revision);
    fprintf(out, "\n\n  %-18s %-12s %-10s %s\n", "part", "maker", "now", name);
    for (size_t i = 0; i < count; i++)
        print_solution(out, plan, &solution[i]);
    fputc('\n', out);
    for (const char *const *line = pf_report_cautions(); *line; line++)
        fprintf(out, "%s\n", *line);
}

void pf_report_solve_json(FILE *out, const pf_plan *plan, pf_parameter parameter,
                          const pf_solution *solution, size_t count, const pf_report_source *source)
{
    pf_json json;
    pf_json_begin(&json, out);
    pf_json_open(&json, '{');
    pf_json_named_text(&json, "profile", pf_plan_profile(plan)->name);
    pf_json_named_text(&json, "database_revision", source->revision);
    pf_json_named_text(&json, "solved_for", pf_parameter_facts()[parameter].name);
    pf_json_name(&json, "parts");
    pf_json_open(&json, '[');
    for (size_t i = 0; i < count; i++) {
        pf_json_open(&json, '{');
        pf_json_named_text(&json, "part", solution[i].part);
        pf_json_named_text(&json, "maker", solution[i].maker);
        pf_json_named_text(&json, "package", solution[i].package);
        pf_json_named_text(&json, "verdict", pf_verdict_text(solution[i].verdict));
        write_room(&json, plan, &solution[i].room);
        pf_json_close(&json, '}');
    }
    pf_json_close(&json, ']');
    pf_json_cautions(&json);
    pf_json_close(&json, '}');
    pf_json_end(&json);
}
