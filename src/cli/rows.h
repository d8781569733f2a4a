/* SPDX-License-Identifier: GPL-3.0-or-later
 * Settings from a CSV file: which columns are meant, what stands for an empty cell, and plans kept from row to row. */
#ifndef MELTWRIGHT_CLI_ROWS_H
#define MELTWRIGHT_CLI_ROWS_H

#include "base/csv.h"
#include "cli/common.h"

/* X(ID, "column", quantity, field of the row's defaults) */
#define ROW_COLUMN_LIST(X)                                                                                                                 \
    X(POWER, "power_W", MW_POWER, setting.power_W)                                                                                         \
    X(SPEED, "speed_mm_per_s", MW_SPEED, setting.speed_m_per_s)                                                                            \
    X(D4SIGMA, "d4sigma_um", MW_LENGTH, setting.d4sigma_m)                                                                                 \
    X(LAYER, "layer_um", MW_LENGTH, setting.layer_m)                                                                                       \
    X(HATCH, "hatch_um", MW_LENGTH, setting.hatch_m)                                                                                       \
    X(PREHEAT, "preheat_C", MW_TEMPERATURE, setting.preheat_K)                                                                             \
    X(ABSORPTIVITY, "absorptivity", MW_PLAIN, overrides.absorptivity)                                                                      \
    X(CONDUCTIVITY, "conductivity_W_per_mK", MW_CONDUCTIVITY, overrides.conductivity_W_per_mK)                                             \
    X(DENSITY, "density_kg_per_m3", MW_DENSITY, overrides.density_kg_per_m3)                                                               \
    X(HEAT_CAPACITY, "heat_capacity_J_per_kgK", MW_HEAT_CAPACITY, overrides.heat_capacity_J_per_kgK)                                       \
    X(MELTING, "melting_point_K", MW_KELVIN, overrides.melting_point_K)

enum row_column {
#define X(id, name, quantity, field) ROW_##id,
    ROW_COLUMN_LIST(X)
#undef X
        ROW_NUMBER_COUNT,
    ROW_ALLOY = ROW_NUMBER_COUNT,
    ROW_COLUMN_COUNT
};

/* What a row says, or what the command line says in its place. */
typedef struct row_values {
    mw_setting setting;
    mw_overrides overrides;
    const char *alloy; /* NULL: none */
} row_values;

typedef struct row_source row_source;

/* Opens the file and reads the defaults from the options. Remarks on columns that look like a slip. */
mw_status rows_open(const arguments *args, row_source **out, mw_error *err);
void rows_close(row_source *source);

mw_csv_reader *rows_reader(row_source *source);
/* Number of a recognised column in the file, or -1. */
int rows_column(const row_source *source, enum row_column column);
/* Is column i of the file one of ours? */
bool rows_recognises(const row_source *source, size_t i);

/* Next row; *bad gets the row's own trouble (MW_OK: values are set), so that the run can go on. Errors: only what ends the run. */
mw_status rows_next(row_source *source, bool *end, row_values *values, mw_error *bad, mw_error *err);

/* The plan for a row, kept for the next one like it. Borrowed until rows_close or 64 other plans later. */
mw_status rows_plan(row_source *source, const row_values *values, const mw_plan **plan, mw_error *err);
/* Cards in use, for the record. */
size_t rows_cards(row_source *source, const mw_alloy *const **cards);

#endif
