/* SPDX-License-Identifier: GPL-3.0-or-later
 * RFC 4180, one record at a time. */
#include "base/csv.h"

#include <errno.h>
#include <stdlib.h>
#include <string.h>

struct mw_csv_reader {
    FILE *stream;
    bool owned;
    char *path;
    char *record;  /* MW_CSV_LONGEST_RECORD + 1 bytes: fields one after the other, each with its closing zero */
    size_t used;
    mw_csv_field_view field[MW_CSV_MOST_FIELDS];
    size_t n_field;
    char **name;
    size_t n_name;
    long line, record_line;
};

/* One character, CRLF taken as LF. EOF at the end. */
static int next_char(mw_csv_reader *r)
{
    const int c = getc(r->stream);
    if (c != '\r')
        return c;
    const int after = getc(r->stream);
    if (after != '\n' && after != EOF)
        (void)ungetc(after, r->stream);
    return '\n'; /* a lone CR ends a line too: some spreadsheets still write it */
}

static mw_status bad(mw_csv_reader *r, long line, mw_error *err, const char *text)
{
    return mw_fail(err, MW_BAD_FILE, r->path, line, "%s", text);
}

static mw_status put(mw_csv_reader *r, int c, mw_error *err)
{
    if (c == '\0')
        return bad(r, r->line, err, "a zero byte: this is not a text file (UTF-16? save it as UTF-8)");
    if (r->used >= MW_CSV_LONGEST_RECORD)
        return bad(r, r->record_line, err, "a record of more than 1 MB (an unfinished quote?)");
    r->record[r->used++] = (char)c;
    return MW_OK;
}

/* Reads one field into the record buffer; *stop is the character that ended it: ',', '\n' or EOF. */
static mw_status read_field(mw_csv_reader *r, int *stop, mw_error *err)
{
    mw_status status = MW_OK;
    int c = next_char(r);
    if (c != '"') {
        for (; c != ',' && c != '\n' && c != EOF && status == MW_OK; c = next_char(r))
            status = c == '"' ? bad(r, r->line, err, "a quote inside an unquoted field; quote the whole field and double the quote")
                              : put(r, c, err);
        *stop = c;
        return status;
    }
    for (;;) {
        c = next_char(r);
        if (c == EOF)
            return bad(r, r->record_line, err, "a quoted field is not closed");
        if (c == '"') {
            c = next_char(r);
            if (c != '"') {
                *stop = c;
                return c == ',' || c == '\n' || c == EOF ? MW_OK : bad(r, r->line, err, "text after a closing quote");
            }
        }
        r->line += c == '\n';
        status = put(r, c, err);
        if (status != MW_OK)
            return status;
    }
}

/* Reads to the end of the line, so that the next record starts clean after a refusal. */
static void skip_line(mw_csv_reader *r, int stop)
{
    while (stop != '\n' && stop != EOF)
        stop = next_char(r);
    r->line++;
}

/* One record into r->field. *end when there is none left. */
static mw_status read_record(mw_csv_reader *r, bool *end, mw_error *err)
{
    size_t start[MW_CSV_MOST_FIELDS];
    *end = false;
    for (;;) {
        r->used = r->n_field = 0;
        r->record_line = r->line;
        int stop = 0;
        do {
            if (r->n_field == MW_CSV_MOST_FIELDS) {
                skip_line(r, stop);
                return bad(r, r->record_line, err, "more than 512 fields in one record");
            }
            start[r->n_field] = r->used;
            mw_status status = read_field(r, &stop, err);
            if (status == MW_OK)
                status = (r->used < MW_CSV_LONGEST_RECORD) ? MW_OK : bad(r, r->record_line, err, "a record of more than 1 MB");
            if (status != MW_OK) {
                skip_line(r, 0);
                return status;
            }
            r->record[r->used++] = '\0';
            r->n_field++;
        } while (stop == ',');
        if (ferror(r->stream))
            return mw_fail(err, MW_CANNOT_READ, r->path, r->record_line, "reading failed: %s", strerror(errno));
        const bool blank = r->n_field == 1 && r->used == 1;
        if (blank && stop == EOF) {
            *end = true;
            return MW_OK;
        }
        r->line += stop == '\n';
        if (!blank)
            break;
    }
    for (size_t i = 0; i < r->n_field; i++) {
        const size_t next = i + 1 < r->n_field ? start[i + 1] : r->used;
        r->field[i] = (mw_csv_field_view){r->record + start[i], next - start[i] - 1};
    }
    return MW_OK;
}

static mw_status take_header(mw_csv_reader *r, mw_error *err)
{
    bool end;
    mw_status status = read_record(r, &end, err);
    if (status != MW_OK)
        return status;
    if (end)
        return bad(r, 1, err, "the file is empty; a header row with column names is expected");
    const mw_csv_field_view first = r->field[0];
    if (first.n >= 3 && memcmp(first.text, "\xEF\xBB\xBF", 3) == 0)
        return bad(r, 1, err, "starts with a byte order mark; save it as plain UTF-8 (\"CSV UTF-8\" adds the mark, \"CSV\" does not)");
    if (first.n >= 2 && (memcmp(first.text, "\xFF\xFE", 2) == 0 || memcmp(first.text, "\xFE\xFF", 2) == 0))
        return bad(r, 1, err, "is UTF-16; save it as UTF-8");
    if (r->n_field == 1 && strpbrk(first.text, ";\t") != NULL)
        return bad(r, 1, err, strchr(first.text, ';') != NULL
                                  ? "fields are separated by semicolons; save it with commas between fields and points in decimals"
                                  : "fields are separated by tabs; save it with commas between fields");
    r->name = calloc(r->n_field, sizeof *r->name);
    if (r->name == NULL)
        return mw_fail(err, MW_NO_MEMORY, r->path, 0, "out of memory");
    for (size_t i = 0; i < r->n_field; i++) {
        if (r->field[i].n == 0)
            return mw_fail(err, MW_BAD_FILE, r->path, r->record_line, "column %zu has no name", i + 1);
        for (size_t j = 0; j < i; j++)
            if (strcmp(r->name[j], r->field[i].text) == 0)
                return mw_fail(err, MW_BAD_FILE, r->path, r->record_line, "column \"%s\" stands twice, as number %zu and %zu",
                               r->field[i].text, j + 1, i + 1);
        r->name[i] = malloc(r->field[i].n + 1);
        if (r->name[i] == NULL)
            return mw_fail(err, MW_NO_MEMORY, r->path, 0, "out of memory");
        memcpy(r->name[i], r->field[i].text, r->field[i].n + 1);
        r->n_name = i + 1;
    }
    return MW_OK;
}

mw_status mw_csv_open(const char *path, mw_csv_reader **out, mw_error *err)
{
    *out = NULL;
    mw_csv_reader *r = calloc(1, sizeof *r);
    char *record = malloc(MW_CSV_LONGEST_RECORD + 1), *copy = malloc(strlen(path) + 1);
    if (r == NULL || record == NULL || copy == NULL) {
        free(copy);
        free(record);
        free(r);
        return mw_fail(err, MW_NO_MEMORY, path, 0, "out of memory");
    }
    strcpy(copy, path);
    r->record = record;
    r->path = copy;
    r->line = 1;
    r->owned = strcmp(path, "-") != 0;
    r->stream = r->owned ? fopen(path, "rb") : stdin;
    mw_status status = MW_OK;
    if (r->stream == NULL)
        status = mw_fail(err, MW_CANNOT_READ, path, 0, "cannot be opened: %s", strerror(errno));
    if (status == MW_OK)
        status = take_header(r, err);
    if (status != MW_OK) {
        mw_csv_close(r);
        return status;
    }
    *out = r;
    return MW_OK;
}

void mw_csv_close(mw_csv_reader *r)
{
    if (r == NULL)
        return;
    if (r->stream != NULL && r->owned)
        (void)fclose(r->stream);
    for (size_t i = 0; i < r->n_name; i++)
        free(r->name[i]);
    free(r->name);
    free(r->record);
    free(r->path);
    free(r);
}

size_t mw_csv_columns(const mw_csv_reader *r)
{
    return r->n_name;
}

const char *mw_csv_column_name(const mw_csv_reader *r, size_t i)
{
    return r->name[i];
}

mw_status mw_csv_next(mw_csv_reader *r, bool *end, mw_error *err)
{
    const mw_status status = read_record(r, end, err);
    if (status != MW_OK || *end)
        return status;
    if (r->n_field != r->n_name)
        return mw_fail(err, MW_BAD_FILE, r->path, r->record_line, "%zu fields, but the header has %zu columns", r->n_field, r->n_name);
    return MW_OK;
}

size_t mw_csv_count(const mw_csv_reader *r)
{
    return r->n_field;
}

mw_csv_field_view mw_csv_get(const mw_csv_reader *r, size_t i)
{
    return r->field[i];
}

long mw_csv_line(const mw_csv_reader *r)
{
    return r->record_line;
}
