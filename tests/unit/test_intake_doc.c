/* Claim: the tables of docs/csv.md are those that the program reads by. They are made from fields.def,
** parameters.def and column_kinds.c; where the document lags, the test prints what belongs there. */
#include "base/buffer.h"
#include "intake/column.h"
#include "support/claims.h"

#include <passfet/profile.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static void print_range(pf_buffer *out, double lowest, double highest, pf_quantity quantity)
{
    char low[PF_UNIT_ROOM], high[PF_UNIT_ROOM];
    pf_value_print(low, lowest, quantity, 6);
    pf_value_print(high, highest, quantity, 6);
    pf_buffer_print(out, "%s to %s", low, high);
}

static void print_aliases(pf_buffer *out, const char *aliases)
{
    while (*aliases) {
        size_t length = strcspn(aliases, "|");
        pf_buffer_print(out, "%.*s", (int)length, aliases);
        aliases += length + (aliases[length] == '|');
        if (*aliases) pf_buffer_text(out, ", ");
    }
}

static const char *meaning_of(const pf_column_kind *kind)
{
    static const struct {
        pf_role role;
        const char *words;
    } own[] = {
        {PF_ROLE_POLARITY, "`N` or `P`"},
        {PF_ROLE_RDSON,
         "highest Rds(on) at 25 degC, one column per gate drive: `rdson_max @ 4.5 V`"},
        {PF_ROLE_SOA_CELL, "safe operating area in one cell"},
        {PF_ROLE_SOA_CASE, "case temperature that the SOA is for, 25 degC where blank"},
        {PF_ROLE_ZTH_CELL, "transient thermal impedance in one cell"},
        {PF_ROLE_ZTH_PATH, "where the curve ends: `case` (where blank) or `ambient`"},
        {PF_ROLE_PULSE, "pulse width, or `dc`"},
        {PF_ROLE_VDS, "drain-source voltage of the point"},
        {PF_ROLE_ID, "drain current of the point"},
        {PF_ROLE_TIME, "time since the power came on"},
        {PF_ROLE_ZTH, "thermal impedance for a single pulse of that length"},
        {PF_ROLE_FOSTER_R, "thermal resistance of the pair"},
        {PF_ROLE_FOSTER_TAU, "time constant of the pair"},
    };
    if (kind->rating) return kind->rating->meaning;
    if (kind->text) return kind->text->meaning;
    for (size_t i = 0; i < sizeof own / sizeof *own; i++)
        if (own[i].role == kind->role) return own[i].words;
    return "";
}

static void print_columns(pf_buffer *out, pf_file_kind file)
{
    pf_column_kind list[PF_COLUMN_KINDS_MAX];
    size_t count = pf_column_kinds(file, list);
    pf_buffer_text(out,
                   "| column | unit | range | also read as | meaning |\n|---|---|---|---|---|\n");
    for (size_t i = 0; i < count; i++) {
        const pf_column_kind *kind = &list[i];
        const char *mark = kind->required ? "**" : "";
        pf_buffer_print(out, "| %s%s%s | ", mark, kind->csv, mark);
        if (kind->numeric) pf_buffer_text(out, pf_quantity_unit(kind->rule.quantity));
        pf_buffer_text(out, " | ");
        if (kind->numeric)
            print_range(out, kind->rule.lowest, kind->rule.highest, kind->rule.quantity);
        pf_buffer_text(out, " | ");
        print_aliases(out, kind->aliases);
        pf_buffer_print(out, " | %s |\n", meaning_of(kind));
    }
}

static void print_parameters(pf_buffer *out)
{
    const pf_parameter_fact *fact = pf_parameter_facts();
    pf_buffer_text(out, "| parameter | unit | range | meaning |\n|---|---|---|---|\n");
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        pf_buffer_print(out, "| %s | %s | ", fact[i].name, pf_quantity_unit(fact[i].quantity));
        print_range(out, fact[i].lowest, fact[i].highest, fact[i].quantity);
        pf_buffer_print(out, " | %s |\n", fact[i].meaning);
    }
}

static char *read_document(void)
{
    FILE *file = fopen(PF_TEST_DATA "/../docs/csv.md", "rb");
    char *text = calloc(1, 1 << 18);
    if (!file || !text) fail_msg("cannot read docs/csv.md");
    size_t length = fread(text, 1, (1 << 18) - 1, file);
    fclose(file);
    assert_true(length > 0);
    return text;
}

static void test_the_tables_of_the_document_are_those_of_the_program(void **state)
{
    static const pf_file_kind kinds[] = {PF_KIND_PARTS, PF_KIND_SOA, PF_KIND_ZTH, PF_KIND_FOSTER};
    char *document = read_document();
    size_t missing = 0;
    (void)state;
    for (size_t i = 0; i <= 4; i++) {
        pf_buffer table;
        pf_buffer_init(&table, 1 << 16);
        if (i < 4)
            print_columns(&table, kinds[i]);
        else
            print_parameters(&table);
        assert_int_equal(pf_buffer_status(&table), PF_OK);
        bool there = strstr(document, pf_buffer_string(&table)) != NULL;
        if (!there) printf("docs/csv.md lacks this table:\n%s\n", pf_buffer_string(&table));
        missing += !there;
        pf_buffer_clear(&table);
    }
    free(document);
    assert_int_equal(missing, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_the_tables_of_the_document_are_those_of_the_program),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
