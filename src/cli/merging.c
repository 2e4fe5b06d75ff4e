/* merging.c: import of another passfet database, part by part. */
#include "cli/merging.h"

#include <string.h>
#include <sys/types.h>

#include <sha2.h>

bool pf_is_database(const char *path)
{
    static const char magic[16] = "SQLite format 3";
    char start[sizeof magic] = "";
    FILE *file = strcmp(path, "-") == 0 ? NULL : fopen(path, "rb");
    if (!file) return false;
    bool same = fread(start, 1, sizeof start, file) == sizeof start &&
                memcmp(start, magic, sizeof magic) == 0;
    fclose(file);
    return same;
}

static void show_difference(void *context, const char *what, const char *ours, const char *theirs)
{
    FILE *out = context;
    fprintf(out, "    %s: ours %s, theirs %s\n", what, *ours ? ours : "not stated",
            *theirs ? theirs : "not stated");
}

static pf_status show_conflict(void *context, const pf_stored_part *ours,
                               const pf_stored_part *theirs, bool take, pf_error *error)
{
    FILE *out = context;
    const pf_part *part = &ours->part;
    (void)error;
    fprintf(out, "%s%s%s: changed on both sides, here at %s by %s, there at %s by %s; %s\n",
            part->maker ? part->maker : "", part->maker ? "/" : "", part->name, ours->facts.time,
            ours->facts.author, theirs->facts.time, theirs->facts.author, take ? "theirs" : "ours");
    pf_part_differences(part, &theirs->part, show_difference, out);
    return PF_OK;
}

static int read_prefer(const pf_cli *cli, const pf_arguments *arguments, pf_prefer *prefer)
{
    static const char *const word[] = {"ours", "theirs", "newer", NULL};
    static const pf_prefer meaning[] = {PF_PREFER_OURS, PF_PREFER_THEIRS, PF_PREFER_NEWER};
    const char *text = pf_argument(arguments, "prefer");
    size_t index;
    *prefer = PF_PREFER_NONE;
    if (!text) return PF_EXIT_DONE;
    int exit_status = pf_choice_read(cli, "prefer", text, word, &index);
    *prefer = meaning[index];
    return exit_status;
}

/* Names what is imported and how, so that a repeat is recognised. */
static void make_key(const char content[PF_HASH_ROOM], pf_prefer prefer, char key[PF_HASH_ROOM])
{
    SHA2_CTX sha;
    char words[80];
    int length = snprintf(words, sizeof words, "database %s", content);
    words[length] = (char)('0' + (int)prefer);
    SHA256Init(&sha);
    SHA256Update(&sha, (const uint8_t *)words, (size_t)length + 1);
    SHA256End(&sha, key);
}

static void print_summary(const pf_cli *cli, const pf_merge_summary *sum, int64_t already,
                          int64_t number)
{
    if (already) {
        fprintf(cli->out, "Nothing to do: already imported as number %lld.\n", (long long)already);
        return;
    }
    fprintf(
        cli->out,
        "Parts: %zu new, %zu gone on there and taken, %zu gone on here and kept, %zu the same;\n"
        "%zu changed on both sides, %zu of them taken.\n",
        sum->added, sum->forward, sum->ahead, sum->unchanged, sum->conflicts, sum->taken);
    if (number)
        fprintf(cli->out, "Stored in %s as import %lld.\n", cli->database, (long long)number);
}

static int merge(const pf_cli *cli, const pf_arguments *arguments, pf_store *store, pf_store *other)
{
    pf_prefer prefer;
    pf_error error = {0};
    pf_merge_summary summary = {0};
    int64_t already = 0, number = 0;
    char now[PF_TIME_ROOM], content[PF_HASH_ROOM], key[PF_HASH_ROOM];
    pf_import_facts facts = pf_facts_of(arguments, now);
    if (read_prefer(cli, arguments, &prefer) != PF_EXIT_DONE) return PF_EXIT_USAGE;
    pf_status status = pf_store_content_hash(other, content, &error);
    if (status == PF_OK) {
        const pf_source_file source = {arguments->operand[0], content};
        make_key(content, prefer, key);
        facts.key = key;
        facts.file = &source;
        facts.file_count = 1;
        status = pf_store_merge(store, other, &facts, prefer, show_conflict, cli->out, &summary,
                                &already, &number, &error);
    }
    if (status == PF_OK) print_summary(cli, &summary, already, number);
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(cli, status, &error);
}

int pf_merge_database(const pf_cli *cli, const pf_arguments *arguments)
{
    static const char *const foreign[] = {"map",    "decimal",   "encoding", "part",
                                          "accept", "keep-good", "dry-run",  NULL};
    pf_store *store = NULL, *other = NULL;
    pf_error error = {0};
    if (arguments->operand_count != 1)
        return pf_usage(cli, "import takes one database at a time, and no other file with it");
    for (size_t i = 0; foreign[i]; i++)
        if (pf_argument(arguments, foreign[i]))
            return pf_usage(cli, "--%s is for CSV files, %s is a database", foreign[i],
                            arguments->operand[0]);
    pf_status status = pf_store_open(arguments->operand[0], PF_STORE_READ, &other, &error);
    if (status == PF_OK) status = pf_cli_open(cli, PF_STORE_CREATE, &store, &error);
    int exit_status =
        status == PF_OK ? merge(cli, arguments, store, other) : pf_fail(cli, status, &error);
    pf_store_close(store);
    pf_store_close(other);
    return exit_status;
}
