/* SPDX-License-Identifier: GPL-3.0-or-later
 * Numbers to and from text without the locale, and the nearest valid name to a mistyped one. */
#ifndef MELTWRIGHT_TEXT_H
#define MELTWRIGHT_TEXT_H

#include <stdbool.h>
#include <stddef.h>

/* Reads the whole of text[0..length-1] as a decimal number: [+-]digits[.digits][e[+-]digits].
 * Always a decimal point, whatever the locale. Returns false (and leaves *out) for anything else: blanks, hex,
 * "nan", "inf", a trailing letter, or a number too large for a double. Correctly rounded. */
bool mw_read_number(const char *text, size_t length, double *out);

/* Longest text that mw_print_number can write, with the closing zero. */
#define MW_NUMBER_SIZE 32

/* The shortest of %.15g, %.16g, %.17g that reads back exactly, with a decimal point in any locale. A value that is
 * not finite gives an empty text (the house form of "no value"). Returns the length. */
size_t mw_print_number(char out[MW_NUMBER_SIZE], double value);

/* The entry of names[0..n-1] nearest to `word` (Damerau-Levenshtein, letter case ignored), or NULL when none is near
 * enough to be worth offering. NULL entries are skipped. */
const char *mw_nearest_name(const char *word, const char *const names[], size_t n);

/* Equal but for ASCII letter case. */
bool mw_same_word(const char *a, const char *b);

#endif
