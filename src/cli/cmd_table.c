/* SPDX-License-Identifier: GPL-3.0-or-later
 * track --from: every row of a table, in order, in constant memory: a batch of rows is read, evaluated on all cores and written before the
 * next is read. The input's columns come first, as they were given; a result whose
 * name the input already uses for something of its own is called NAME_predicted. */
#include <stdint.h>
#include <errno.h>
#include <stdlib.h>
#include <string.h>

#include "cli/rows.h"

enum { BATCH = 512 };

/* A row between reading and writing. Its fields are a copy: the reader has moved on. */
typedef struct kept_row {
    char *text;
    mw_csv_field_view *field;
    size_t n_field;
    mw_setting setting;
    mw_plan plan;
    mw_status status; /* negative: `bad` says why */
    mw_error bad;
    mw_result result;
} kept_row;

typedef struct table_run {
    row_source *rows;
    output out;
    output_format format;
    bool skip[128];      /* results that the input's setting columns already give */
    bool renamed[128];   /* results called NAME_predicted */
    size_t n_row, n_failed, n_warned;
    int threads;
    shard part;
    size_t first, count, read; /* rows of the part; rows read so far */
    kept_row batch[BATCH];
    size_t n_batch;
} table_run;

static void choose_names(table_run *t)
{
    mw_csv_reader *reader = rows_reader(t->rows);
    for (size_t k = 0; k < mw_column_count(); k++)
        for (size_t i = 0; i < mw_csv_columns(reader); i++)
            if (strcmp(mw_csv_column_name(reader, i), mw_column_at(k)->key) == 0) {
                t->skip[k] = mw_column_at(k)->is_input;
                t->renamed[k] = !t->skip[k];
            }
}

static void put_name(const table_run *t, size_t k)
{
    (void)fprintf(t->out.to, "%s%s", mw_column_at(k)->key, t->renamed[k] ? "_predicted" : "");
}

static void put_header(const table_run *t)
{
    mw_csv_reader *reader = rows_reader(t->rows);
    for (size_t i = 0; i < mw_csv_columns(reader); i++) {
        (void)fputs(i > 0 ? "," : "", t->out.to);
        mw_csv_field(t->out.to, mw_csv_column_name(reader, i), strlen(mw_csv_column_name(reader, i)));
    }
    for (size_t k = 0; k < mw_column_count(); k++) {
        if (t->skip[k])
            continue;
        (void)fputc(',', t->out.to);
        put_name(t, k);
    }
    (void)fputc('\n', t->out.to);
}

static bool is_status(size_t k)
{
    return strcmp(mw_column_at(k)->key, "status") == 0;
}

/* The reason of a row that failed: the status word, then the line. */
static void reason(const mw_error *bad, char *out, size_t size)
{
    (void)snprintf(out, size, "%s: %s", mw_status_word(bad->status), bad->text);
}

static void put_csv(const table_run *t, const kept_row *row)
{
    char cell[1024];
    const bool failed = row->status < 0;
    for (size_t i = 0; i < mw_csv_columns(rows_reader(t->rows)); i++) {
        (void)fputs(i > 0 ? "," : "", t->out.to);
        if (i < row->n_field)
            mw_csv_field(t->out.to, row->field[i].text, row->field[i].n);
    }
    for (size_t k = 0; k < mw_column_count(); k++) {
        if (t->skip[k])
            continue;
        (void)fputc(',', t->out.to);
        if (!failed) {
            (void)fwrite(cell, 1, mw_column_cell(k, &row->result, cell, sizeof cell), t->out.to);
        } else if (is_status(k)) {
            reason(&row->bad, cell, sizeof cell);
            mw_csv_field(t->out.to, cell, strlen(cell));
        }
    }
    (void)fputc('\n', t->out.to);
}

static void put_json(const table_run *t, const kept_row *row)
{
    const mw_csv_reader *reader = rows_reader(t->rows);
    const bool failed = row->status < 0;
    FILE *to = t->out.to;
    char cell[1024];
    (void)fputs(t->n_row > 0 ? ",\n{" : "{", to);
    for (size_t i = 0; i < mw_csv_columns(reader); i++) {
        (void)fputs(i > 0 ? ", " : "", to);
        mw_json_string(to, mw_csv_column_name(reader, i));
        (void)fputs(": ", to);
        mw_json_string(to, i < row->n_field ? row->field[i].text : "");
    }
    for (size_t k = 0; k < mw_column_count(); k++) {
        if (t->skip[k])
            continue;
        (void)fputs(", \"", to);
        put_name(t, k);
        (void)fputs("\": ", to);
        if (!failed && !mw_column_at(k)->is_text) {
            mw_json_number(to, mw_column_number(k, &row->result));
        } else if (!failed && mw_column_text(k, &row->result)[0] != '\0') {
            mw_json_string(to, mw_column_text(k, &row->result));
        } else if (failed && is_status(k)) {
            reason(&row->bad, cell, sizeof cell);
            mw_json_string(to, cell);
        } else {
            (void)fputs("null", to);
        }
    }
    (void)fputc('}', to);
}

/* ---- batches ---- */

static mw_status keep_fields(const mw_csv_reader *reader, kept_row *row, mw_error *err)
{
    size_t size = 0, used = 0;
    const size_t n = mw_csv_count(reader);
    for (size_t i = 0; i < n; i++)
        size += mw_csv_get(reader, i).n + 1;
    row->n_field = 0;
    row->text = malloc(size + 1);
    row->field = malloc((n + 1) * sizeof *row->field);
    if (row->text == NULL || row->field == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    for (size_t i = 0; i < n; i++) {
        const mw_csv_field_view f = mw_csv_get(reader, i);
        memcpy(row->text + used, f.text, f.n + 1);
        row->field[row->n_field++] = (mw_csv_field_view){row->text + used, f.n};
        used += f.n + 1;
    }
    return MW_OK;
}

static void drop_batch(table_run *t)
{
    for (size_t i = 0; i < t->n_batch; i++) {
        free(t->batch[i].text);
        free(t->batch[i].field);
    }
    t->n_batch = 0;
}

/* Reads until the batch is full or the file ends. */
static mw_status read_batch(table_run *t, bool *end, mw_error *err)
{
    *end = false;
    while (t->n_batch < BATCH) {
        kept_row *row = &t->batch[t->n_batch];
        row_values values;
        const mw_plan *plan;
        row->bad.status = MW_OK;
        mw_status status = rows_next(t->rows, end, &values, &row->bad, err);
        if (status != MW_OK || *end)
            return status;
        if (t->read++ < t->first)
            continue;
        if (t->read > t->first + t->count) {
            *end = true;
            return MW_OK;
        }
        t->n_batch++;
        status = keep_fields(rows_reader(t->rows), row, err);
        if (status != MW_OK)
            return status;
        row->status = row->bad.status;
        if (row->status == MW_OK)
            row->status = rows_plan(t->rows, &values, &plan, &row->bad);
        if (row->status == MW_OK) {
            row->plan = *plan; /* the kept plan may give way to another before this row's turn */
            row->setting = values.setting;
        }
    }
    return MW_OK;
}

static void evaluate_batch(table_run *t)
{
    const long n = (long)t->n_batch;
#pragma omp parallel for schedule(dynamic, 4) num_threads(t->threads)
    for (long i = 0; i < n; i++) {
        kept_row *row = &t->batch[i];
        if (row->status == MW_OK)
            row->status = mw_evaluate(&row->plan, &row->setting, true, &row->result, &row->bad);
        if (row->status < 0)
            row->bad.status = row->status;
    }
}

static void write_batch(table_run *t)
{
    for (size_t i = 0; i < t->n_batch; i++) {
        const kept_row *row = &t->batch[i];
        (t->format == FORMAT_JSON ? put_json : put_csv)(t, row);
        t->n_row++;
        t->n_failed += row->status < 0;
        t->n_warned += row->status > 0;
    }
}

static mw_status run_rows(table_run *t, mw_error *err)
{
    for (bool end = false; !end;) {
        const mw_status status = read_batch(t, &end, err);
        if (status == MW_OK) {
            evaluate_batch(t);
            write_batch(t);
        }
        drop_batch(t);
        if (status != MW_OK)
            return status;
        if (ferror(t->out.to))
            return mw_fail(err, MW_CANNOT_WRITE, t->out.path, 0, "writing failed: %s", strerror(errno));
    }
    return MW_OK;
}

static mw_status write_table(const arguments *args, table_run *t, mw_provenance *provenance, mw_error *err)
{
    if (t->format == FORMAT_JSON)
        (void)fputs("{\"results\": [\n", t->out.to);
    else if (t->part.part == 1)
        put_header(t);
    mw_status status = run_rows(t, err);
    if (status != MW_OK)
        return status;
    /* Known only now: which cards the rows named. */
    provenance->n_card = rows_cards(t->rows, &provenance->card);
    if (t->format == FORMAT_JSON) {
        (void)fputs("\n],\n\"made_by\": ", t->out.to);
        mw_json_provenance(t->out.to, provenance);
        (void)fputs("}\n", t->out.to);
    }
    status = close_output(&t->out, provenance, err);
    if (status == MW_OK && t->n_warned > 0)
        remark(args, "%zu of %zu rows carry a warning in their status", t->n_warned, t->n_row);
    return status;
}

/* How many records the file holds: read once for that, so that parts are equally long. */
static mw_status count_rows(const arguments *args, size_t *n, mw_error *err)
{
    mw_csv_reader *reader;
    bool end = false;
    *n = 0;
    mw_status status = mw_csv_open(args->value[OPT_FROM], &reader, err);
    while (status == MW_OK && !end) {
        const mw_status record = mw_csv_next(reader, &end, err);
        status = record == MW_BAD_FILE ? MW_OK : record; /* a ragged record is a row too */
        *n += !end;
    }
    mw_csv_close(reader);
    return status;
}

/* All rows, or those of the part. */
static mw_status choose_rows(const arguments *args, table_run *t, mw_error *err)
{
    t->first = 0;
    t->count = SIZE_MAX;
    mw_status status = read_shard(args, &t->part, err);
    if (status != MW_OK || t->part.parts == 1)
        return status;
    if (t->format != FORMAT_CSV)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--shard goes with csv alone: parts of other formats do not join");
    if (strcmp(args->value[OPT_FROM], "-") == 0)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--shard needs a file: standard input cannot be counted first");
    size_t n;
    status = count_rows(args, &n, err);
    if (status == MW_OK)
        shard_range(&t->part, n, &t->first, &t->count);
    return status;
}

static int run_table(const arguments *args, table_run *t, mw_error *err)
{
    provenance_store store;
    mw_provenance provenance;
    fill_provenance(args, NULL, &store, &provenance);
    mw_status status = refuse_words(args, err);
    if (status == MW_OK)
        status = read_format(args, FORMAT_CSV, &t->format, err);
    if (status == MW_OK && t->format == FORMAT_TEXT)
        status = mw_fail(err, MW_BAD_USAGE, NULL, 0, "--from gives csv or json, not text");
    if (status == MW_OK)
        status = read_threads(args, &t->threads, err);
    if (status == MW_OK)
        status = choose_rows(args, t, err);
    if (status == MW_OK)
        status = rows_open(args, &t->rows, err);
    if (status == MW_OK)
        status = open_output(args, &t->out, err);
    if (status == MW_OK) {
        choose_names(t);
        status = write_table(args, t, &provenance, err);
    }
    drop_output(&t->out);
    rows_close(t->rows);
    if (status != MW_OK)
        return complain(args->command, err);
    if (t->n_failed > 0)
        (void)fprintf(stderr, "meltwright track: %zu of %zu rows could not be evaluated; the reason stands in their status\n", t->n_failed, t->n_row);
    return t->n_failed > 0 ? EXIT_NO : EXIT_DONE;
}

int run_track_table(const arguments *args)
{
    mw_error err = {MW_OK, ""};
    table_run *t = calloc(1, sizeof *t); /* a batch is too large for the stack */
    if (t == NULL) {
        (void)mw_fail(&err, MW_NO_MEMORY, NULL, 0, "out of memory");
        return complain(args->command, &err);
    }
    const int code = run_table(args, t, &err);
    free(t);
    return code;
}
