/* SPDX-License-Identifier: GPL-3.0-or-later
 * Cells of the present CSV row by the name of their column, for the readers of published data. */
#ifndef MELTWRIGHT_TESTS_CSV_CELLS_H
#define MELTWRIGHT_TESTS_CSV_CELLS_H

#include <math.h>
#include <string.h>

#include "base/csv.h"
#include "meltwright/text.h"

/* "" when there is no such column. Valid until the next row. */
static inline const char *cell_text(const mw_csv_reader *r, const char *column)
{
    for (size_t i = 0; i < mw_csv_columns(r); i++)
        if (strcmp(mw_csv_column_name(r, i), column) == 0)
            return mw_csv_get(r, i).text;
    return "";
}

/* The first n letters of a text as a number; NaN when they are none. */
static inline double text_number(const char *text, size_t n)
{
    double value;
    return mw_read_number(text, n, &value) ? value : NAN;
}

static inline double cell_number(const mw_csv_reader *r, const char *column)
{
    const char *text = cell_text(r, column);
    return text_number(text, strlen(text));
}

#endif
