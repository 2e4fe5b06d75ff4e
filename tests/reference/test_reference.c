/* test_reference.c: holds passfet to the records in tests/reference/records.
**
**     test_reference [--write FILE.md] RECORDS.tsv …
**
** A record is one line, tabs between:
**
**     quantity  inputs  expected  unit  tolerance  holds  mark  source  note
**
** tolerance is relative ("0.1%"); holds is `yes`, or `no` for a value that must be missed, so that
** it shows that the record could fail; mark is published, computed, memory or practice. Lines that
** start with `#` are comments. The first record out of tolerance ends the run with status 1. Prints
** the worst relative error per quantity; --write makes a page of docs of it.
*/
#include "reference/quantities.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define FIELDS 9
#define QUANTITIES_MAX 64
#define SOURCES_MAX 64

enum { QUANTITY, INPUTS, EXPECTED, UNIT, TOLERANCE, HOLDS, MARK, SOURCE, NOTE };

typedef struct record {
    char line[4096];
    const char *field[FIELDS];
    const char *file;
    int number;
} record;

typedef struct source_tally {
    char name[160];
    int records, marks[4];
} source_tally;

typedef struct tally {
    int records, negatives;
    int count[QUANTITIES_MAX];
    double worst[QUANTITIES_MAX][2]; /* of computed values; of rounded ones */
    source_tally source[SOURCES_MAX];
    size_t sources;
} tally;

enum { COMPUTED = 1 }; /* in mark_names */

static const char *const mark_names[] = {"published", "computed", "memory", "practice"};

static _Noreturn void refuse(const record *r, const char *what)
{
    DIE("%s:%d: %s: %s", r->file, r->number, r->field[QUANTITY], what);
}

static void split(record *r)
{
    char *at = r->line;
    r->line[strcspn(r->line, "\n")] = '\0';
    for (int i = 0; i < FIELDS; i++) {
        r->field[i] = at ? at : "";
        if (at) at = strchr(at, '\t');
        if (at) *at++ = '\0';
        if (i < NOTE && !at) refuse(r, "has fewer than 9 fields");
    }
    if (at) refuse(r, "has more than 9 fields");
}

static double number_field(const record *r, int field, const char *ending)
{
    char *end;
    double value = strtod(r->field[field], &end);
    if (end == r->field[field] || strcmp(end, ending) != 0) refuse(r, "has a bad number");
    return value;
}

static int mark_of(const record *r)
{
    for (int i = 0; i < 4; i++)
        if (strcmp(r->field[MARK], mark_names[i]) == 0) return i;
    refuse(r, "has an unknown mark");
}

static void count_source(tally *all, const record *r)
{
    size_t i = 0;
    while (i < all->sources && strcmp(all->source[i].name, r->field[SOURCE]) != 0)
        i++;
    if (i == SOURCES_MAX || strlen(r->field[SOURCE]) >= sizeof all->source[i].name ||
        !r->field[SOURCE][0])
        refuse(r, "has a bad source");
    if (i == all->sources) strcpy(all->source[all->sources++].name, r->field[SOURCE]);
    all->source[i].records++;
    all->source[i].marks[mark_of(r)]++;
}

/* Ends the run at a record that does not do as it says. */
static void check(tally *all, const record *r)
{
    size_t total;
    settings inputs;
    const quantity *q = quantity_find(r->field[QUANTITY]);
    if (!q) refuse(r, "is no quantity");
    settings_read(&inputs, r->field[INPUTS]);
    double expected = number_field(r, EXPECTED, "");
    double tolerance = number_field(r, TOLERANCE, "%") / 100;
    bool must_hold = strcmp(r->field[HOLDS], "yes") == 0;
    if (!must_hold && strcmp(r->field[HOLDS], "no") != 0) refuse(r, "holds neither yes nor no");
    double actual = q->evaluate(&inputs), error = fabs(actual / expected - 1);
    bool holds = error <= tolerance;
    if (holds != must_hold) {
        fprintf(stderr, "%s:%d: %s is %.10g, expected %s%.10g %s within %s (%s)\n", r->file,
                r->number, q->name, actual, must_hold ? "" : "anything but ", expected,
                r->field[UNIT], r->field[TOLERANCE], r->field[SOURCE]);
        exit(1);
    }
    size_t at = (size_t)(q - quantities(&total));
    count_source(all, r);
    all->records++;
    all->negatives += !must_hold;
    all->count[at]++;
    double *worst = &all->worst[at][mark_of(r) != COMPUTED];
    if (must_hold) *worst = fmax(*worst, error);
}

static void check_file(tally *all, const char *path)
{
    record r = {.file = strrchr(path, '/') ? strrchr(path, '/') + 1 : path};
    FILE *file = fopen(path, "r");
    if (!file) DIE("%s: cannot be read", path);
    while (fgets(r.line, sizeof r.line, file)) {
        r.number++;
        if (r.line[0] == '#' || r.line[0] == '\n') continue;
        split(&r);
        check(all, &r);
    }
    fclose(file);
}

static void print_worst(const tally *all, FILE *out)
{
    size_t total;
    const quantity *q = quantities(&total);
    fprintf(out, "| quantity | records | worst, computed | worst, rounded in print | meaning |\n"
                 "|---|---:|---:|---:|---|\n");
    for (size_t i = 0; i < total; i++)
        if (all->count[i])
            fprintf(out, "| `%s` | %d | %.4f %% | %.2f %% | %s |\n", q[i].name, all->count[i],
                    100 * all->worst[i][0], 100 * all->worst[i][1], q[i].meaning);
}

static void print_sources(const tally *all, FILE *out)
{
    fprintf(out, "| source | records | published | computed | memory | practice |\n"
                 "|---|---:|---:|---:|---:|---:|\n");
    for (size_t i = 0; i < all->sources; i++) {
        const source_tally *s = &all->source[i];
        fprintf(out, "| %s | %d | %d | %d | %d | %d |\n", s->name, s->records, s->marks[0],
                s->marks[1], s->marks[2], s->marks[3]);
    }
}

static void write_page(const tally *all, const char *path)
{
    FILE *out = fopen(path, "w");
    if (!out) DIE("%s: cannot be written", path);
    fprintf(out,
            "# Reference records: sources and worst errors\n\n"
            "Written by `test_reference --write`; do not edit. %d records, %d of them values that\n"
            "must be missed, from %zu sources.\n\n## Worst relative error per quantity\n\n",
            all->records, all->negatives, all->sources);
    print_worst(all, out);
    fprintf(out, "\n## Sources\n\n");
    print_sources(all, out);
    fclose(out);
}

int main(int argc, char **argv)
{
    static tally all;
    const char *page = NULL;
    int first = 1;
    if (argc > 2 && strcmp(argv[1], "--write") == 0) {
        page = argv[2];
        first = 3;
    }
    for (int i = first; i < argc; i++)
        check_file(&all, argv[i]);
    if (all.records == 0) DIE("no records: name the files");
    print_worst(&all, stdout);
    printf("%d records (%d must be missed) from %zu sources hold\n", all.records, all.negatives,
           all.sources);
    if (page) write_page(&all, page);
    return 0;
}
