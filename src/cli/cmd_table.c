/* SPDX-License-Identifier: GPL-3.0-or-later
 * track --from: every row of a table, in order, in constant memory. The input's columns come first, as they were given; a result whose
 * name the input already uses for something of its own is called NAME_predicted. */
#include <string.h>

#include "cli/rows.h"

typedef struct table_run {
    row_source *rows;
    output out;
    output_format format;
    bool skip[128];      /* results that the input's setting columns already give */
    bool renamed[128];   /* results called NAME_predicted */
    size_t n_row, n_failed, n_warned;
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

static void put_csv(const table_run *t, const mw_result *r, const mw_error *bad)
{
    mw_csv_reader *reader = rows_reader(t->rows);
    char cell[1024];
    for (size_t i = 0; i < mw_csv_columns(reader); i++) {
        (void)fputs(i > 0 ? "," : "", t->out.to);
        if (i < mw_csv_count(reader))
            mw_csv_field(t->out.to, mw_csv_get(reader, i).text, mw_csv_get(reader, i).n);
    }
    for (size_t k = 0; k < mw_column_count(); k++) {
        if (t->skip[k])
            continue;
        (void)fputc(',', t->out.to);
        if (r != NULL) {
            (void)fwrite(cell, 1, mw_column_cell(k, r, cell, sizeof cell), t->out.to);
        } else if (is_status(k)) {
            reason(bad, cell, sizeof cell);
            mw_csv_field(t->out.to, cell, strlen(cell));
        }
    }
    (void)fputc('\n', t->out.to);
}

static void put_json(const table_run *t, const mw_result *r, const mw_error *bad)
{
    mw_csv_reader *reader = rows_reader(t->rows);
    FILE *to = t->out.to;
    char cell[1024];
    (void)fputs(t->n_row > 0 ? ",\n{" : "{", to);
    for (size_t i = 0; i < mw_csv_columns(reader); i++) {
        (void)fputs(i > 0 ? ", " : "", to);
        mw_json_string(to, mw_csv_column_name(reader, i));
        (void)fputs(": ", to);
        mw_json_string(to, i < mw_csv_count(reader) ? mw_csv_get(reader, i).text : "");
    }
    for (size_t k = 0; k < mw_column_count(); k++) {
        if (t->skip[k])
            continue;
        (void)fputs(", \"", to);
        put_name(t, k);
        (void)fputs("\": ", to);
        if (r != NULL && !mw_column_at(k)->is_text) {
            mw_json_number(to, mw_column_number(k, r));
        } else if (r != NULL && mw_column_text(k, r)[0] != '\0') {
            mw_json_string(to, mw_column_text(k, r));
        } else if (r == NULL && is_status(k)) {
            reason(bad, cell, sizeof cell);
            mw_json_string(to, cell);
        } else {
            (void)fputs("null", to);
        }
    }
    (void)fputc('}', to);
}

static mw_status run_rows(table_run *t, mw_error *err)
{
    for (;;) {
        bool end;
        row_values values;
        mw_error bad = {MW_OK, ""};
        mw_status status = rows_next(t->rows, &end, &values, &bad, err);
        if (status != MW_OK || end)
            return status;
        mw_result result;
        const mw_plan *plan;
        status = bad.status;
        if (status == MW_OK)
            status = rows_plan(t->rows, &values, &plan, &bad);
        if (status == MW_OK)
            status = mw_evaluate(plan, &values.setting, true, &result, &bad);
        const bool failed = status < 0;
        bad.status = failed ? status : MW_OK;
        (t->format == FORMAT_JSON ? put_json : put_csv)(t, failed ? NULL : &result, &bad);
        t->n_row++;
        t->n_failed += failed;
        t->n_warned += status > 0;
        if (ferror(t->out.to))
            return mw_fail(err, MW_CANNOT_WRITE, t->out.path, 0, "writing failed");
    }
}

static mw_status write_table(const arguments *args, table_run *t, mw_provenance *provenance, mw_error *err)
{
    if (t->format == FORMAT_JSON)
        (void)fputs("{\"results\": [\n", t->out.to);
    else
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

int run_track_table(const arguments *args)
{
    mw_error err = {MW_OK, ""};
    table_run t = {0};
    provenance_store store;
    mw_provenance provenance;
    fill_provenance(args, NULL, &store, &provenance);
    mw_status status = refuse_words(args, &err);
    if (status == MW_OK)
        status = read_format(args, FORMAT_CSV, &t.format, &err);
    if (status == MW_OK && t.format == FORMAT_TEXT)
        status = mw_fail(&err, MW_BAD_USAGE, NULL, 0, "--from gives csv or json, not text");
    if (status == MW_OK)
        status = rows_open(args, &t.rows, &err);
    if (status == MW_OK)
        status = open_output(args, &t.out, &err);
    if (status == MW_OK) {
        choose_names(&t);
        status = write_table(args, &t, &provenance, &err);
    }
    drop_output(&t.out);
    rows_close(t.rows);
    if (status != MW_OK)
        return complain(args->command, &err);
    if (t.n_failed > 0)
        (void)fprintf(stderr, "meltwright track: %zu of %zu rows could not be evaluated; the reason stands in their status\n", t.n_failed, t.n_row);
    return t.n_failed > 0 ? EXIT_NO : EXIT_DONE;
}
