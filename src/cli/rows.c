/* SPDX-License-Identifier: GPL-3.0-or-later
 * Settings from a CSV file. */
#include "cli/rows.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "meltwright/text.h"

enum { MOST_CARDS = 64, MOST_PLANS = 64 };

static const struct {
    const char *name;
    mw_quantity quantity;
    size_t offset;
} column_table[ROW_NUMBER_COUNT] = {
#define X(id, name, quantity, field) {name, quantity, offsetof(row_values, field)},
    ROW_COLUMN_LIST(X)
#undef X
};

typedef struct kept_card {
    char *name;
    mw_alloy *alloy; /* NULL: not found; `trouble` says why */
    mw_error trouble;
} kept_card;

typedef struct kept_plan {
    const mw_alloy *alloy;
    mw_overrides overrides;
    mw_plan plan;
    mw_status status;
    mw_error trouble;
} kept_plan;

struct row_source {
    const arguments *args;
    mw_csv_reader *reader;
    int at[ROW_COLUMN_COUNT]; /* column in the file, or -1 */
    row_values defaults;
    mw_model model;
    double beam_uncertainty_pct;
    kept_card card[MOST_CARDS];
    size_t n_card;
    const mw_alloy *card_list[MOST_CARDS];
    kept_plan plan[MOST_PLANS];
    size_t n_plan, next_plan;
};

static const char *name_of(size_t column)
{
    return column == ROW_ALLOY ? "alloy" : column_table[column].name;
}

/* Says once, before the run, which columns look like a slip of the pen. */
static void remark_on_columns(const row_source *s)
{
    const char *names[ROW_COLUMN_COUNT];
    for (size_t c = 0; c < ROW_COLUMN_COUNT; c++)
        names[c] = s->at[c] < 0 ? name_of(c) : NULL;
    for (size_t i = 0; i < mw_csv_columns(s->reader); i++) {
        const char *column = mw_csv_column_name(s->reader, i);
        bool known = rows_recognises(s, i);
        for (size_t k = 0; !known && k < mw_column_count(); k++)
            known = strcmp(mw_column_at(k)->key, column) == 0;
        if (known)
            continue;
        const bool beam = strncmp(column, "spot", 4) == 0 || strncmp(column, "beam", 4) == 0;
        const char *near = beam ? (s->at[ROW_D4SIGMA] < 0 ? "d4sigma_um" : NULL) : mw_nearest_name(column, names, ROW_COLUMN_COUNT);
        if (near != NULL)
            remark(s->args, "column \"%.60s\" is not recognised and passed through; did you mean %s%s?", column, near,
                   beam ? " (the 1/e2 diameter)" : "");
    }
}

static mw_status read_defaults(row_source *s, mw_error *err)
{
    const arguments *args = s->args;
    s->defaults.alloy = args->value[OPT_ALLOY];
    mw_status status = read_setting(args, false, &s->defaults.setting, err);
    if (status == MW_OK)
        status = read_overrides(args, &s->defaults.overrides, err);
    if (status == MW_OK)
        status = read_model(args, &s->model, err);
    if (status == MW_OK)
        status = read_beam_doubt(args, &s->beam_uncertainty_pct, err);
    return status;
}

mw_status rows_open(const arguments *args, row_source **out, mw_error *err)
{
    *out = NULL;
    row_source *s = calloc(1, sizeof *s);
    if (s == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    s->args = args;
    mw_status status = read_defaults(s, err);
    if (status == MW_OK)
        status = mw_csv_open(args->value[OPT_FROM], &s->reader, err);
    if (status != MW_OK) {
        rows_close(s);
        return status;
    }
    for (size_t c = 0; c < ROW_COLUMN_COUNT; c++) {
        s->at[c] = -1;
        for (size_t i = 0; i < mw_csv_columns(s->reader); i++)
            if (strcmp(mw_csv_column_name(s->reader, i), name_of(c)) == 0)
                s->at[c] = (int)i;
    }
    remark_on_columns(s);
    const struct { size_t column; double value; } vital[] = {{ROW_POWER, s->defaults.setting.power_W}, {ROW_SPEED, s->defaults.setting.speed_m_per_s}};
    for (size_t i = 0; i < 2 && status == MW_OK; i++)
        if (s->at[vital[i].column] < 0 && isnan(vital[i].value))
            status = mw_fail(err, MW_BAD_FILE, args->value[OPT_FROM], 1, "neither a column %s nor an option gives the %s", name_of(vital[i].column),
                             i == 0 ? "power" : "speed");
    if (status != MW_OK) {
        rows_close(s);
        return status;
    }
    *out = s;
    return MW_OK;
}

void rows_close(row_source *s)
{
    if (s == NULL)
        return;
    for (size_t i = 0; i < s->n_card; i++) {
        free(s->card[i].name);
        mw_alloy_free(s->card[i].alloy);
    }
    mw_csv_close(s->reader);
    free(s);
}

mw_csv_reader *rows_reader(row_source *s)
{
    return s->reader;
}

int rows_column(const row_source *s, enum row_column column)
{
    return s->at[column];
}

bool rows_recognises(const row_source *s, size_t i)
{
    for (size_t c = 0; c < ROW_COLUMN_COUNT; c++)
        if (s->at[c] == (int)i)
            return true;
    return false;
}

static mw_csv_field_view trimmed(mw_csv_field_view f)
{
    while (f.n > 0 && f.text[0] == ' ') {
        f.text++;
        f.n--;
    }
    while (f.n > 0 && f.text[f.n - 1] == ' ')
        f.n--;
    return f;
}

/* A cell is a plain number in the unit of its column; the column's name leaves no room for another. */
static mw_status read_cell(const row_source *s, size_t c, row_values *values, mw_error *bad)
{
    const mw_csv_field_view f = trimmed(mw_csv_get(s->reader, (size_t)s->at[c]));
    if (f.n == 0)
        return MW_OK;
    double *si = (double *)((char *)values + column_table[c].offset);
    if (!mw_read_trade(column_table[c].quantity, f.text, f.n, si))
        return mw_fail(bad, MW_BAD_VALUE, NULL, 0, "%s '%.*s' is not a number%s", column_table[c].name, f.n > 30 ? 30 : (int)f.n, f.text,
                       memchr(f.text, ',', f.n) != NULL ? "; write decimals with a point" : "");
    return MW_OK;
}

mw_status rows_next(row_source *s, bool *end, row_values *values, mw_error *bad, mw_error *err)
{
    bad->status = MW_OK;
    mw_status status = mw_csv_next(s->reader, end, bad);
    if (status == MW_CANNOT_READ || status == MW_NO_MEMORY) {
        if (err != NULL)
            *err = *bad;
        return status;
    }
    if (status != MW_OK || *end)
        return MW_OK;
    *values = s->defaults;
    for (size_t c = 0; c < ROW_NUMBER_COUNT && status == MW_OK; c++)
        if (s->at[c] >= 0)
            status = read_cell(s, c, values, bad);
    if (s->at[ROW_ALLOY] >= 0) {
        const mw_csv_field_view f = mw_csv_get(s->reader, (size_t)s->at[ROW_ALLOY]);
        if (f.n > 0)
            values->alloy = f.text;
    }
    return MW_OK;
}

static mw_status find_card(row_source *s, const char *name, const mw_alloy **out, mw_error *err)
{
    for (size_t i = 0; i < s->n_card; i++)
        if (strcmp(s->card[i].name, name) == 0) {
            *out = s->card[i].alloy;
            if (*out == NULL && err != NULL)
                *err = s->card[i].trouble;
            return *out != NULL ? MW_OK : s->card[i].trouble.status;
        }
    if (s->n_card == MOST_CARDS)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "more than %d different alloys in one table", MOST_CARDS);
    kept_card *card = &s->card[s->n_card];
    card->name = malloc(strlen(name) + 1);
    if (card->name == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    strcpy(card->name, name);
    s->n_card++;
    const mw_status status = load_alloy(name, &card->alloy, &card->trouble);
    *out = card->alloy;
    if (status != MW_OK && err != NULL)
        *err = card->trouble;
    return status;
}

static bool same_number(double a, double b)
{
    return a == b || (isnan(a) && isnan(b));
}

static bool same_overrides(const mw_overrides *a, const mw_overrides *b)
{
    return same_number(a->absorptivity, b->absorptivity) && same_number(a->conductivity_W_per_mK, b->conductivity_W_per_mK) &&
           same_number(a->density_kg_per_m3, b->density_kg_per_m3) && same_number(a->heat_capacity_J_per_kgK, b->heat_capacity_J_per_kgK) &&
           same_number(a->melting_point_K, b->melting_point_K);
}

mw_status rows_plan(row_source *s, const row_values *values, const mw_plan **plan, mw_error *err)
{
    const mw_alloy *alloy = NULL;
    if (values->alloy != NULL) {
        const mw_status status = find_card(s, values->alloy, &alloy, err);
        if (status != MW_OK)
            return status;
    }
    kept_plan *k = NULL;
    for (size_t i = 0; i < s->n_plan && k == NULL; i++)
        if (s->plan[i].alloy == alloy && s->plan[i].plan.preheat_K == values->setting.preheat_K &&
            same_overrides(&s->plan[i].overrides, &values->overrides))
            k = &s->plan[i];
    if (k == NULL) {
        k = &s->plan[s->next_plan];
        s->next_plan = (s->next_plan + 1) % MOST_PLANS;
        if (s->n_plan < MOST_PLANS)
            s->n_plan++;
        k->alloy = alloy;
        k->overrides = values->overrides;
        k->plan.preheat_K = values->setting.preheat_K;
        k->status = mw_plan_make(alloy, s->model, &values->overrides, values->setting.preheat_K, &k->plan, &k->trouble);
        k->plan.beam_uncertainty_pct = s->beam_uncertainty_pct;
    }
    if (k->status != MW_OK) {
        if (err != NULL)
            *err = k->trouble;
        return k->status;
    }
    *plan = &k->plan;
    return MW_OK;
}

size_t rows_cards(row_source *s, const mw_alloy *const **cards)
{
    size_t n = 0;
    for (size_t i = 0; i < s->n_card; i++)
        if (s->card[i].alloy != NULL) /* a card that was not found has no place in a record */
            s->card_list[n++] = s->card[i].alloy;
    *cards = s->card_list;
    return n;
}
