/* review.c: the second person's check. */
#include "store/query.h"
#include "store/write.h"

#include <string.h>

static char lower(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c - 'A' + 'a') : c;
}

/* Whether two names are the same person's: blanks around and letter case do not count. */
static bool same_person(const char *left, const char *right)
{
    size_t a = strlen(left), b = strlen(right);
    while (a && *left == ' ')
        left++, a--;
    while (b && *right == ' ')
        right++, b--;
    while (a && left[a - 1] == ' ')
        a--;
    while (b && right[b - 1] == ' ')
        b--;
    if (a != b) return false;
    for (size_t i = 0; i < a; i++)
        if (lower(left[i]) != lower(right[i])) return false;
    return true;
}

/* Who made a revision since the last accepted one cannot accept: what they stated has been seen by
** nobody else. */
static pf_status check_second(pf_store *store, const pf_stored_part *stored, const char *reviewer,
                              pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    pf_status status = pf_store_statement(store, PF_SQL_UNSEEN_AUTHORS, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, stored->facts.part_id);
    while (status == PF_OK && (status = pf_store_step(store, statement, &row, error)) == PF_OK &&
           row) {
        const char *author = (const char *)sqlite3_column_text(statement, 1);
        if (author && same_person(author, reviewer))
            status = pf_error_set(error, PF_BAD_INPUT,
                                  "%s made revision %lld of %s: someone else must accept it",
                                  reviewer, sqlite3_column_int64(statement, 0), stored->part.name);
    }
    sqlite3_reset(statement);
    return status;
}

static pf_status add_row(pf_store *store, const pf_stored_part *stored, bool accept,
                         pf_error *error)
{
    sqlite3_stmt *statement;
    pf_status status = pf_store_statement(store, PF_SQL_ADD_REVIEW, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, store->import.entry);
    sqlite3_bind_int64(statement, 2, stored->facts.part_id);
    sqlite3_bind_int64(statement, 3, stored->facts.number);
    sqlite3_bind_text(statement, 4, accept ? "accept" : "question", -1, SQLITE_STATIC);
    return pf_store_do(store, statement, error);
}

pf_status pf_store_review(pf_store *store, const char *name, pf_review_facts *facts,
                          pf_error *error)
{
    pf_log_facts log = {
        .kind = "review", .author = facts->author, .time = facts->time, .why = facts->why};
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    pf_status status = pf_write_begin(store, error);
    if (status != PF_OK) return status;
    status = pf_write_entry(store, &log, error);
    if (status == PF_OK) status = pf_store_part_find(store, name, NULL, &stored, error);
    if (status == PF_OK && facts->accept)
        status = check_second(store, &stored, facts->author, error);
    if (status == PF_OK) status = add_row(store, &stored, facts->accept, error);
    pf_stored_part_clear(&stored);
    if (status == PF_OK) return pf_store_import_commit(store, &facts->entry, error);
    pf_store_import_rollback(store);
    return status;
}
