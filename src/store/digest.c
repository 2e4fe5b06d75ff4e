/* digest.c: SHA-256 over what a part states. Hash function: FIPS 180-4, from libmd. */
#include "store/digest.h"
#include "base/number.h"
#include "store/words.h"

#include <stdio.h>
#include <string.h>

void pf_digest_text(SHA2_CTX *sha, const char *text)
{
    static const uint8_t none = 1;
    if (text)
        SHA256Update(sha, (const uint8_t *)text, strlen(text) + 1);
    else
        SHA256Update(sha, &none, 1);
}

void pf_digest_number(SHA2_CTX *sha, uint64_t number)
{
    number = pf_word_turn(number);
    SHA256Update(sha, (const uint8_t *)&number, sizeof number);
}

void pf_digest_hex(const unsigned char digest[PF_DIGEST_BYTES], char hex[PF_HASH_ROOM])
{
    for (int i = 0; i < PF_DIGEST_BYTES; i++)
        snprintf(hex + 2 * i, 3, "%02x", digest[i]);
}

void pf_field_order_make(pf_field_order *order)
{
    const pf_text_field *text = pf_text_fields(&order->texts);
    const pf_rating_field *rating = pf_rating_fields(&order->ratings);
    for (size_t i = 0; i < order->texts; i++) {
        size_t at = i;
        for (; at && strcmp(text[order->text[at - 1]].name, text[i].name) > 0; at--)
            order->text[at] = order->text[at - 1];
        order->text[at] = (unsigned char)i;
    }
    for (size_t i = 0; i < order->ratings; i++) {
        size_t at = i;
        for (; at && strcmp(rating[order->rating[at - 1]].name, rating[i].name) > 0; at--)
            order->rating[at] = order->rating[at - 1];
        order->rating[at] = (unsigned char)i;
    }
}

static void add_name(pf_buffer *to, const char *name)
{
    pf_buffer_add(to, name, strlen(name) + 1);
}

/* Adding 0 makes one zero of the two that compare equal. */
static void add_double(pf_buffer *to, double value)
{
    pf_words_add_double(to, value + 0.0);
}

static void add_fields(const pf_field_order *order, const pf_part *part, pf_buffer *to)
{
    size_t count;
    const pf_text_field *text = pf_text_fields(&count);
    const pf_rating_field *rating = pf_rating_fields(&count);
    for (size_t i = 0; i < order->texts; i++) {
        const pf_text_field *field = &text[order->text[i]];
        const char *value = pf_part_text_value(part, field);
        if (!value || !*value) continue;
        add_name(to, field->name);
        add_name(to, value);
    }
    for (size_t i = 0; i < order->ratings; i++) {
        const pf_rating_field *field = &rating[order->rating[i]];
        double value = pf_part_rating_value(part, field);
        if (!pf_is_stated(value)) continue;
        add_name(to, field->name);
        add_double(to, value);
    }
}

pf_status pf_state_digest(const pf_field_order *order, const pf_part *part, bool withdrawn,
                          const void *packed, size_t length, pf_buffer *scratch,
                          unsigned char digest[PF_DIGEST_BYTES])
{
    pf_buffer_reset(scratch);
    add_name(scratch, withdrawn ? "withdrawn" : "part");
    add_name(scratch, pf_polarity_text(part->polarity));
    add_fields(order, part, scratch);
    pf_words_add(scratch, part->rdson_count);
    for (size_t i = 0; i < part->rdson_count; i++) {
        add_double(scratch, part->rdson[i].vgs_V);
        add_double(scratch, part->rdson[i].rdson_ohm);
    }
    if (length) pf_buffer_add(scratch, packed, length);
    if (pf_buffer_status(scratch) != PF_OK) return PF_NO_MEMORY;
    SHA2_CTX sha;
    SHA256Init(&sha);
    SHA256Update(&sha, (const uint8_t *)scratch->text, scratch->length);
    SHA256Final(digest, &sha);
    return PF_OK;
}
