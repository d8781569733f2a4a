/* SPDX-License-Identifier: GPL-3.0-or-later
 * One list of outcomes for the whole library, and the error text that travels with them. */
#ifndef MELTWRIGHT_STATUS_H
#define MELTWRIGHT_STATUS_H

/* X(NAME, number, word, sentence)
 * 0: fine.  Positive: a warning, the value is valid and set.  Negative: an error, the output is not to be used.
 * The word is what stands in the `status` column of a table. */
#define MW_STATUS_LIST(X)                                                                                      \
    X(OK, 0, "ok", "done")                                                                                     \
    X(NO_MELT, 1, "no-melt", "the surface does not reach melting: there is no track")                          \
    X(OUTSIDE_CHECKED, 2, "outside-checked-range", "outside the range the models were checked in")             \
    X(BAD_VALUE, -1, "bad-value", "a value is missing, not finite or outside what is allowed")                 \
    X(NO_CONVERGENCE, -2, "no-convergence", "an iteration did not converge")                                   \
    X(BAD_FILE, -3, "bad-file", "an input file does not say what it must")                                     \
    X(BAD_USAGE, -4, "bad-usage", "the request makes no sense as it was put")                                  \
    X(CANNOT_READ, -5, "cannot-read", "a file cannot be read")                                                 \
    X(CANNOT_WRITE, -6, "cannot-write", "a file cannot be written")                                            \
    X(NO_MEMORY, -7, "no-memory", "out of memory")                                                             \
    X(TOO_LARGE, -8, "too-large", "the request is larger than allowed")                                        \
    X(NOT_FOUND, -9, "not-found", "no such name")

typedef enum mw_status {
#define X(name, number, word, sentence) MW_##name = number,
    MW_STATUS_LIST(X)
#undef X
} mw_status;

/* The word of a status ("ok", "no-melt" ...) and its sentence. Static storage; "unknown" for a number not in the list. */
const char *mw_status_word(mw_status status);
const char *mw_status_sentence(mw_status status);

/* What went wrong, in one line without a newline. Supplied by the caller; a NULL pointer is accepted everywhere
 * and means that the text is not wanted. The lowest level that knows writes it; levels above pass it on unchanged. */
typedef struct mw_error {
    mw_status status;
    char text[768];
} mw_error;

/* Writes "FILE:LINE: text" (FILE and LINE only when file is not NULL / line is positive) and returns `status`.
 * Control characters in the text are shown as '?', so that a hostile file cannot reach the terminal. */
mw_status mw_fail(mw_error *err, mw_status status, const char *file, long line, const char *format, ...)
#if defined(__GNUC__)
    __attribute__((format(printf, 5, 6)))
#endif
    ;

#endif
