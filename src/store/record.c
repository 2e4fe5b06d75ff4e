/* record.c: reading a row into a part that is used again and again.
**
** Two passes over the row: the first counts what it needs, so that all of it fits one block of
** memory that grows only while the largest part so far is met; the second copies.
*/
#include "store/record.h"
#include "base/memory.h"
#include "base/number.h"
#include "store/curve_json.h"
#include "store/packed.h"

#include <math.h>
#include <string.h>

/* Columns of pf_record_select before the texts. */
enum column {
    COLUMN_ID,
    COLUMN_NUMBER,
    COLUMN_ENTRY,
    COLUMN_WITHDRAWN,
    COLUMN_CONTENT,
    COLUMN_POLARITY,
    COLUMN_RDSON,
    COLUMN_CURVES,
    COLUMN_PACKED,
    COLUMN_AUTHOR,
    COLUMN_TIME,
    COLUMN_VERDICT,
    COLUMN_TEXTS
};

void pf_record_select(const pf_store *store, const char *table, const char *id, const char *reviews,
                      pf_buffer *sql)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    pf_buffer_print(sql,
                    "SELECT p.%s AS part_id, p.number AS number, p.entry, p.withdrawn, p.content, "
                    "p.polarity, p.rdson, p.curves, c.packed, e.author, e.time, ",
                    id);
    if (reviews)
        pf_buffer_print(sql,
                        "(SELECT r.verdict FROM review r WHERE r.part = p.%s AND r.number = "
                        "p.number AND %s ORDER BY r.entry DESC LIMIT 1) AS verdict",
                        id, reviews);
    else
        pf_buffer_text(sql, "NULL AS verdict");
    for (size_t i = 0; i < texts; i++)
        pf_buffer_print(sql, ", %s AS %s", store->text_missing[i] ? "NULL" : text[i].name,
                        text[i].name);
    for (size_t i = 0; i < ratings; i++)
        pf_buffer_print(sql, ", %s AS %s", store->rating_missing[i] ? "NULL" : rating[i].name,
                        rating[i].name);
    pf_buffer_print(sql,
                    " FROM %s p CROSS JOIN entry e ON e.id = p.entry "
                    "LEFT JOIN curve c ON c.id = p.curves",
                    table);
}

/* One block of memory handed out piece by piece. */
typedef struct arena {
    char *at;
} arena;

static void *take(arena *from, size_t bytes)
{
    void *piece = from->at;
    from->at += bytes;
    return piece;
}

/* A text column, borrowed from SQLite until the row moves. A blank one is not stated. */
typedef struct text_at {
    const void *bytes; /* NULL: not stated */
    size_t length;
} text_at;

static text_at text_of(sqlite3_stmt *row, int column)
{
    const void *bytes = sqlite3_column_blob(row, column);
    return (text_at){bytes, bytes ? (size_t)sqlite3_column_bytes(row, column) : 0};
}

static bool is_sound(text_at text)
{
    return !text.bytes || !memchr(text.bytes, 0, text.length);
}

static char *take_text(arena *from, text_at text)
{
    if (!text.bytes) return NULL;
    char *copy = take(from, text.length + 1);
    memcpy(copy, text.bytes, text.length);
    copy[text.length] = '\0';
    return copy;
}

/* What the row holds, found in the first pass. */
typedef struct contents {
    text_at text[PF_FIELDS_MAX], author, time;
    pf_packed_counts counts;
    const void *packed;
    size_t packed_bytes, room;
} contents;

static size_t items_room(const pf_packed_counts *counts)
{
    size_t room = counts->soa * sizeof(pf_soa_point);
    for (int path = 0; path < PF_PATH_COUNT; path++)
        room += counts->point[path] * sizeof(pf_zth_point) +
                counts->pair[path] * sizeof(pf_foster_pair);
    return room;
}

static void take_curves(arena *from, const pf_packed_counts *counts, pf_part *part)
{
    part->soa = counts->soa ? take(from, counts->soa * sizeof *part->soa) : NULL;
    part->soa_count = 0;
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        size_t points = counts->point[path], pairs = counts->pair[path];
        part->thermal[path] =
            (pf_thermal_curve){.point = points ? take(from, points * sizeof(pf_zth_point)) : NULL,
                               .pair = pairs ? take(from, pairs * sizeof(pf_foster_pair)) : NULL};
    }
}

static bool read_polarity(sqlite3_stmt *row, pf_polarity *polarity)
{
    const char *text = (const char *)sqlite3_column_text(row, COLUMN_POLARITY);
    *polarity = !text ? PF_POLARITY_NONE : *text == 'N' ? PF_N_CHANNEL : PF_P_CHANNEL;
    return text && (strcmp(text, "N") == 0 || strcmp(text, "P") == 0);
}

static bool read_review(sqlite3_stmt *row, pf_review_state *state)
{
    *state = PF_UNREVIEWED;
    const char *text = (const char *)sqlite3_column_text(row, COLUMN_VERDICT);
    if (!text) return true;
    *state = *text == 'a' ? PF_ACCEPTED : PF_QUESTIONED;
    return strcmp(text, "accept") == 0 || strcmp(text, "question") == 0;
}

static bool read_rdson(sqlite3_stmt *row, pf_part *part)
{
    const char *json = (const char *)sqlite3_column_text(row, COLUMN_RDSON);
    part->rdson_count = 0;
    return !json || pf_rdson_read(json, part);
}

/* SQLite reads NULL as 0, so that only a 0 needs a second look. */
static bool read_ratings(sqlite3_stmt *row, int column, pf_part *part)
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++, column++) {
        double value = sqlite3_column_double(row, column);
        bool stated = value != 0 || sqlite3_column_type(row, column) != SQLITE_NULL;
        *pf_part_rating(part, &field[i]) = stated ? value : PF_NONE;
        if (stated && !(value >= field[i].lowest && value <= field[i].highest)) return false;
    }
    return true;
}

/* Room for everything that the row says; false where its texts or curves are none. */
static bool measure(sqlite3_stmt *row, size_t texts, contents *found)
{
    found->packed = sqlite3_column_blob(row, COLUMN_PACKED);
    found->packed_bytes = (size_t)sqlite3_column_bytes(row, COLUMN_PACKED);
    if (!pf_packed_count(found->packed, found->packed_bytes, &found->counts)) return false;
    found->author = text_of(row, COLUMN_AUTHOR);
    found->time = text_of(row, COLUMN_TIME);
    found->room = items_room(&found->counts) + found->author.length + found->time.length + 2;
    bool sound = found->author.bytes && is_sound(found->author) && found->time.bytes &&
                 is_sound(found->time);
    for (size_t i = 0; i < texts; i++) {
        found->text[i] = text_of(row, COLUMN_TEXTS + (int)i);
        found->room += found->text[i].length + 1;
        sound = sound && is_sound(found->text[i]);
    }
    return sound;
}

static void read_extra(sqlite3_stmt *row, const contents *found, pf_record_extra *extra)
{
    extra->withdrawn = sqlite3_column_int(row, COLUMN_WITHDRAWN) != 0;
    extra->content = sqlite3_column_blob(row, COLUMN_CONTENT);
    extra->curves = sqlite3_column_int64(row, COLUMN_CURVES);
    extra->packed = found->packed;
    extra->packed_bytes = found->packed_bytes;
}

static bool fill(sqlite3_stmt *row, size_t texts, const contents *found, pf_stored_part *stored)
{
    size_t count;
    const pf_text_field *field = pf_text_fields(&count);
    arena memory = {stored->memory};
    pf_part *part = &stored->part;
    pf_revision_facts *facts = &stored->facts;
    take_curves(&memory, &found->counts, part);
    pf_curves_unpack(found->packed, found->packed_bytes, part);
    for (size_t i = 0; i < texts; i++)
        *pf_part_text(part, &field[i]) = take_text(&memory, found->text[i]);
    facts->part_id = sqlite3_column_int64(row, COLUMN_ID);
    facts->number = sqlite3_column_int64(row, COLUMN_NUMBER);
    facts->entry = sqlite3_column_int64(row, COLUMN_ENTRY);
    facts->author = take_text(&memory, found->author);
    facts->time = take_text(&memory, found->time);
    return part->name && read_polarity(row, &part->polarity) && read_rdson(row, part) &&
           read_ratings(row, COLUMN_TEXTS + (int)texts, part) && read_review(row, &facts->review);
}

pf_status pf_record_read(pf_store *store, sqlite3_stmt *row, pf_stored_part *stored,
                         pf_record_extra *extra, pf_error *error)
{
    contents found;
    bool sound = measure(row, store->order.texts, &found);
    if (sound && pf_grow((void **)&stored->memory, &stored->room, found.room, 1) != PF_OK)
        return pf_store_no_memory(store, error);
    sound = sound && fill(row, store->order.texts, &found, stored);
    if (sqlite3_errcode(store->db) == SQLITE_NOMEM) return pf_store_no_memory(store, error);
    if (!sound) {
        char what[64];
        sqlite3_snprintf(sizeof what, what, "part %lld says what cannot be",
                         sqlite3_column_int64(row, COLUMN_ID));
        return pf_store_damaged(store, error, what);
    }
    if (extra) read_extra(row, &found, extra);
    return PF_OK;
}

void pf_stored_part_init(pf_stored_part *stored)
{
    memset(stored, 0, sizeof *stored);
    pf_part_init(&stored->part);
}

void pf_stored_part_clear(pf_stored_part *stored)
{
    pf_free(stored->memory);
    pf_stored_part_init(stored);
}

const char *pf_review_text(pf_review_state state)
{
    return state == PF_ACCEPTED ? "accepted" : state == PF_QUESTIONED ? "questioned" : "unreviewed";
}
