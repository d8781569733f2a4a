/* SPDX-License-Identifier: GPL-3.0-or-later
 * Rows of a reference table for the tests of the sources. */
#ifndef MELTWRIGHT_TESTS_REFERENCE_ROWS_H
#define MELTWRIGHT_TESTS_REFERENCE_ROWS_H

#include "check.h"

#include <stdlib.h>
#include <string.h>

enum { REFERENCE_COLUMNS = 40, REFERENCE_ROWS = 100 };

typedef struct reference_row {
    double v[REFERENCE_COLUMNS]; /* by column of the file; NaN where a cell is empty, 0 where it is no number (the id) */
} reference_row;

/* Reads all rows behind the header; every row must have `columns` cells. */
static inline size_t read_reference_rows(const char *path, int columns, reference_row *out)
{
    FILE *f = fopen(path, "r");
    assert_non_null(f);
    char line[4096];
    size_t n = 0;
    assert_non_null(fgets(line, sizeof line, f));
    while (n < REFERENCE_ROWS && fgets(line, sizeof line, f) != NULL) {
        int c = 0;
        for (char *cell = line; cell != NULL && c < columns; c++) {
            char *end = strchr(cell, ',');
            if (end != NULL)
                *end++ = '\0';
            out[n].v[c] = cell[0] != '\0' && cell[0] != '\n' ? strtod(cell, NULL) : NAN;
            cell = end;
        }
        assert_int_equal(c, columns);
        n++;
    }
    fclose(f);
    return n;
}

#endif
