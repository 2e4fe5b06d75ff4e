/* state.c: what a part states, bound to the columns of part. */
#include "base/number.h"
#include "store/record.h"

static const char *const own[] = {"number",   "entry", "withdrawn", "content",
                                  "polarity", "rdson", "soa_top_V", "curves"};
enum { OWN = sizeof own / sizeof *own };

const char *pf_state_column(size_t index)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    if (index < OWN) return own[index];
    if (index < OWN + texts) return text[index - OWN].name;
    return index < OWN + texts + ratings ? rating[index - OWN - texts].name : NULL;
}

/* Highest voltage of the SOA; not stated where there is none. */
static double soa_top(const pf_part *part)
{
    double top = PF_NONE;
    for (size_t i = 0; i < part->soa_count; i++)
        if (!(top >= part->soa[i].vds_V)) top = part->soa[i].vds_V;
    return top;
}

/* NULL binds as NULL, and so does a blank text: it states nothing. */
static int bind_text(sqlite3_stmt *statement, int at, const char *text)
{
    return sqlite3_bind_text(statement, at, text && *text ? text : NULL, -1, SQLITE_STATIC);
}

/* The columns of `own`, in its order. Not a number binds as NULL. */
static int bind_own(sqlite3_stmt *statement, const pf_part *part, const pf_state_facts *facts)
{
    int at = PF_STATE_PARAMETER, failed = 0;
    failed |= sqlite3_bind_int64(statement, at++, facts->number);
    failed |= sqlite3_bind_int64(statement, at++, facts->entry);
    failed |= sqlite3_bind_int(statement, at++, facts->withdrawn);
    failed |= sqlite3_bind_blob(statement, at++, facts->content, PF_DIGEST_BYTES, SQLITE_STATIC);
    failed |= bind_text(statement, at++, pf_polarity_text(part->polarity));
    failed |= bind_text(statement, at++, facts->rdson);
    failed |= sqlite3_bind_double(statement, at++, soa_top(part));
    failed |= facts->curves ? sqlite3_bind_int64(statement, at, facts->curves)
                            : sqlite3_bind_null(statement, at);
    return failed;
}

pf_status pf_state_bind(pf_store *store, sqlite3_stmt *statement, const pf_part *part,
                        const pf_state_facts *facts, pf_error *error)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    int at = PF_STATE_PARAMETER + OWN, failed = bind_own(statement, part, facts);
    for (size_t i = 0; i < texts; i++)
        failed |= bind_text(statement, at++, pf_part_text_value(part, &text[i]));
    for (size_t i = 0; i < ratings; i++)
        failed |= sqlite3_bind_double(statement, at++, pf_part_rating_value(part, &rating[i]));
    return failed ? pf_store_fail(store, failed, error) : PF_OK;
}
