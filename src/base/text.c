/* SPDX-License-Identifier: GPL-3.0-or-later
 * Numbers to and from text without the locale, and the nearest valid name. */
#define _GNU_SOURCE /* strtod_l */
#include "meltwright/text.h"

#include <locale.h>
#include <math.h>
#include <pthread.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static locale_t plain_locale;
static pthread_once_t plain_locale_once = PTHREAD_ONCE_INIT;

static void make_plain_locale(void)
{
    plain_locale = newlocale(LC_ALL_MASK, "C", (locale_t)0);
}

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

/* The parts of a decimal number; `digits` holds the value of up to 19 significant digits. */
typedef struct decimal {
    uint64_t digits;
    int n_digit;    /* significant digits taken into `digits` */
    int scale;      /* value = digits * 10^scale when exact */
    bool negative;
    bool exact;     /* no significant digit was dropped */
} decimal;

/* Checks the form and collects the digits. False where the text is not a number. */
static bool scan_decimal(const char *s, const char *end, decimal *out)
{
    decimal d = {0, 0, 0, false, true};
    if (s < end && (*s == '+' || *s == '-'))
        d.negative = *s++ == '-';
    bool any = false, after_point = false;
    for (; s < end; s++) {
        if (*s == '.' && !after_point) {
            after_point = true;
            continue;
        }
        if (!is_digit(*s))
            break;
        any = true;
        if (d.n_digit < 19) {
            d.digits = d.digits * 10 + (uint64_t)(*s - '0');
            if (d.digits != 0)
                d.n_digit++;
            d.scale -= after_point;
        } else {
            d.exact = d.exact && *s == '0';
            d.scale += !after_point;
        }
    }
    if (!any)
        return false;
    if (s < end && (*s == 'e' || *s == 'E')) {
        s++;
        bool down = false;
        if (s < end && (*s == '+' || *s == '-'))
            down = *s++ == '-';
        if (s == end)
            return false;
        int e = 0;
        for (; s < end && is_digit(*s); s++)
            e = e < 10000 ? e * 10 + (*s - '0') : e;
        d.scale += down ? -e : e;
    }
    if (s != end)
        return false;
    *out = d;
    return true;
}

bool mw_read_number(const char *text, size_t length, double *out)
{
    static const double power_of_ten[] = {1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,  1e8,  1e9,  1e10, 1e11,
                                          1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};
    decimal d;
    if (!scan_decimal(text, text + length, &d))
        return false;
    /* Both factors are exact doubles here, so one rounding gives the correctly rounded value. */
    if (d.exact && d.digits <= (UINT64_C(1) << 53) && d.scale >= -22 && d.scale <= 22) {
        const double m = (double)d.digits;
        const double v = d.scale < 0 ? m / power_of_ten[-d.scale] : m * power_of_ten[d.scale];
        *out = d.negative ? -v : v;
        return true;
    }
    char local[128];
    char *copy = length < sizeof local ? local : malloc(length + 1);
    if (copy == NULL)
        return false;
    memcpy(copy, text, length);
    copy[length] = '\0';
    pthread_once(&plain_locale_once, make_plain_locale);
    const double v = strtod_l(copy, NULL, plain_locale);
    if (copy != local)
        free(copy);
    if (!isfinite(v))
        return false;
    *out = v;
    return true;
}

/* printf writes the locale's decimal point, which may be several bytes; put a '.' there. */
static size_t plain_point(char *text)
{
    const char *point = localeconv()->decimal_point;
    const size_t n = strlen(point);
    char *at = n == 1 && point[0] == '.' ? NULL : strstr(text, point);
    if (at != NULL && n > 0) {
        *at = '.';
        memmove(at + 1, at + n, strlen(at + n) + 1);
    }
    return strlen(text);
}

size_t mw_print_number(char out[MW_NUMBER_SIZE], double value)
{
    if (!isfinite(value)) {
        out[0] = '\0';
        return 0;
    }
    for (int digits = 15; digits <= 17; digits++) {
        (void)snprintf(out, MW_NUMBER_SIZE, "%.*g", digits, value);
        const size_t n = plain_point(out);
        double back;
        if (digits == 17 || (mw_read_number(out, n, &back) && back == value))
            return n;
    }
    return strlen(out);
}

static char lower(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c - 'A' + 'a') : c;
}

bool mw_same_word(const char *a, const char *b)
{
    while (*a != '\0' && lower(*a) == lower(*b)) {
        a++;
        b++;
    }
    return *a == *b;
}

enum { LONGEST_WORD = 64 };

/* Edit distance with swaps of neighbours (optimal string alignment); words longer than LONGEST_WORD are cut. */
static size_t distance(const char *a, const char *b)
{
    size_t na = strlen(a), nb = strlen(b);
    na = na < LONGEST_WORD ? na : LONGEST_WORD;
    nb = nb < LONGEST_WORD ? nb : LONGEST_WORD;
    size_t row[3][LONGEST_WORD + 1];
    for (size_t j = 0; j <= nb; j++)
        row[0][j] = j;
    for (size_t i = 1; i <= na; i++) {
        size_t *now = row[i % 3], *before = row[(i - 1) % 3], *two_before = row[(i + 1) % 3];
        now[0] = i;
        for (size_t j = 1; j <= nb; j++) {
            const size_t change = before[j - 1] + (lower(a[i - 1]) != lower(b[j - 1]));
            const size_t insert = now[j - 1] + 1, drop = before[j] + 1;
            size_t best = change < insert ? change : insert;
            best = drop < best ? drop : best;
            if (i > 1 && j > 1 && lower(a[i - 1]) == lower(b[j - 2]) && lower(a[i - 2]) == lower(b[j - 1]) &&
                two_before[j - 2] + 1 < best)
                best = two_before[j - 2] + 1;
            now[j] = best;
        }
    }
    return row[na % 3][nb];
}

const char *mw_nearest_name(const char *word, const char *const names[], size_t n)
{
    const char *best = NULL;
    size_t best_distance = 0;
    if (strlen(word) > LONGEST_WORD)
        return NULL;
    for (size_t i = 0; i < n; i++) {
        if (names[i] == NULL)
            continue;
        const size_t d = distance(word, names[i]);
        if (best == NULL || d < best_distance) {
            best = names[i];
            best_distance = d;
        }
    }
    if (best == NULL)
        return NULL;
    const size_t longer = strlen(best) > strlen(word) ? strlen(best) : strlen(word);
    const bool starts = strlen(word) >= 3 && strncmp(word, best, strlen(word)) == 0;
    return best_distance * 5 <= longer * 2 + 1 || starts ? best : NULL;
}
