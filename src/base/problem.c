/* problem.c: the list of everything that is wrong with an input. */
#include "base/memory.h"

#include <passfet/problem.h>
#include <stdarg.h>
#include <stdbool.h>
#include <stdio.h>
#include <string.h>

/* Longest piece of an input that is repeated in a message. */
#define TEXT_SHOWN 200

void pf_problems_init(pf_problems *problems)
{
    *problems = (pf_problems){0};
}

static void problem_clear(pf_problem *problem)
{
    pf_free(problem->file);
    pf_free(problem->column);
    pf_free(problem->text);
    pf_free(problem->wrong);
    pf_free(problem->right);
}

void pf_problems_clear(pf_problems *problems)
{
    for (size_t i = 0; i < problems->count; i++)
        problem_clear(&problems->item[i]);
    pf_free(problems->item);
    pf_problems_init(problems);
}

/* A copy for a message: control characters shown as `?`, long text cut before a whole character. */
static pf_status copy_shown(char **out, const char *text)
{
    *out = NULL;
    if (!text) return PF_OK;
    size_t length = strlen(text);
    bool cut = length > TEXT_SHOWN;
    if (cut)
        for (length = TEXT_SHOWN; length && ((unsigned char)text[length] & 0xC0) == 0x80;)
            length--;
    char *copy = pf_allocate(length + sizeof "...", 1);
    if (!copy) return PF_NO_MEMORY;
    for (size_t i = 0; i < length; i++)
        copy[i] = (unsigned char)text[i] < 0x20 || text[i] == 0x7F ? '?' : text[i];
    if (cut) strcpy(copy + length, "...");
    *out = copy;
    return PF_OK;
}

static pf_status fill(pf_problem *problem, pf_place place, const char *wrong, const char *right)
{
    problem->line = place.line;
    pf_status status = pf_text_copy(&problem->file, place.file);
    if (status == PF_OK) status = copy_shown(&problem->column, place.column);
    if (status == PF_OK) status = copy_shown(&problem->text, place.text);
    if (status == PF_OK) status = pf_text_copy(&problem->wrong, wrong);
    if (status == PF_OK) status = pf_text_copy(&problem->right, right);
    return status;
}

static void count(pf_problems *problems, pf_severity severity)
{
    problems->count++;
    if (severity == PF_SEVERITY_NOTE) problems->notes++;
    if (severity == PF_SEVERITY_WARNING) problems->warnings++;
    if (severity == PF_SEVERITY_REFUSAL) problems->refusals++;
}

pf_status pf_problems_add(pf_problems *problems, pf_severity severity, pf_place place,
                          const char *right, const char *wrong, ...)
{
    char words[512];
    va_list arguments;
    va_start(arguments, wrong);
    vsnprintf(words, sizeof words, wrong, arguments);
    va_end(arguments);
    pf_status status = pf_grow((void **)&problems->item, &problems->capacity, problems->count + 1,
                               sizeof *problems->item);
    if (status != PF_OK) return status;
    pf_problem *problem = &problems->item[problems->count];
    *problem = (pf_problem){.severity = severity};
    status = fill(problem, place, words, right);
    if (status != PF_OK) {
        problem_clear(problem);
        return status;
    }
    count(problems, severity);
    return severity == PF_SEVERITY_REFUSAL ? PF_BAD_INPUT : PF_OK;
}

/* Appends ": piece" (or the piece alone at the start); length goes on counting past room. */
static void append(char *text, size_t room, int *length, const char *piece)
{
    if (!piece || !*piece) return;
    size_t at = (size_t)*length < room ? (size_t)*length : room;
    *length += snprintf(text + at, room - at, "%s%s", *length ? ": " : "", piece);
}

int pf_problem_print(const pf_problem *problem, char *text, size_t room)
{
    char where[4200];
    int length = 0;
    if (problem->line)
        snprintf(where, sizeof where, "%s:%zu", problem->file ? problem->file : "", problem->line);
    else
        snprintf(where, sizeof where, "%s", problem->file ? problem->file : "");
    if (room) text[0] = '\0';
    append(text, room, &length, where);
    append(text, room, &length, problem->column);
    append(text, room, &length, problem->text);
    append(text, room, &length, problem->wrong);
    append(text, room, &length, problem->right);
    return length;
}
