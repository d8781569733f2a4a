/* SPDX-License-Identifier: GPL-3.0-or-later
 * Quantities with units at the door. */
#include "meltwright/units.h"

#include <math.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "meltwright/text.h"

typedef struct unit {
    const char *suffix;
    int power;     /* SI = value * 10^power + offset */
    double offset;
} unit;

enum { MOST_UNITS = 5 };

/* The first unit of a quantity is what a plain number has. */
static const struct {
    const char *list; /* for messages */
    unit unit[MOST_UNITS];
} quantity_table[] = {
    [MW_POWER] = {"W, kW", {{"W", 0, 0}, {"kW", 3, 0}}},
    [MW_SPEED] = {"mm/s, m/s", {{"mm/s", -3, 0}, {"m/s", 0, 0}}},
    [MW_LENGTH] = {"um, mm, m", {{"um", -6, 0}, {"\xC2\xB5m", -6, 0}, {"\xCE\xBCm", -6, 0}, {"mm", -3, 0}, {"m", 0, 0}}},
    [MW_TEMPERATURE] = {"C, K", {{"C", 0, 273.15}, {"K", 0, 0}}},
    [MW_PLAIN] = {"no unit", {{"", 0, 0}}},
    [MW_CONDUCTIVITY] = {"W/(m K) without a suffix", {{"", 0, 0}}},
    [MW_DENSITY] = {"kg/m3 without a suffix", {{"", 0, 0}}},
    [MW_HEAT_CAPACITY] = {"J/(kg K) without a suffix", {{"", 0, 0}}},
    [MW_KELVIN] = {"K", {{"K", 0, 0}, {"C", 0, 273.15}}},
    [MW_ENERGY_DENSITY] = {"J/mm3", {{"J/mm3", 9, 0}}},
};

const char *mw_unit_suffixes(mw_quantity quantity)
{
    return quantity_table[quantity].list;
}

const char *mw_trade_unit(mw_quantity quantity)
{
    return quantity_table[quantity].unit[0].suffix;
}

/* 10^n for 0 <= n <= 9: exact doubles. */
static double power_of_ten(int n)
{
    double p = 1;
    for (; n > 0; n--)
        p *= 10;
    return p;
}

double mw_from_trade(mw_quantity quantity, double trade)
{
    const unit *u = &quantity_table[quantity].unit[0];
    /* Dividing by an exact power rounds once; multiplying by 1e-6 would round twice. */
    return (u->power < 0 ? trade / power_of_ten(-u->power) : trade * power_of_ten(u->power)) + u->offset;
}

enum { LONGEST_NUMBER = 64 };

/* The decimal text[0..n-1] times 10^power, rounded once: 0.12mm, 120um and 1.2e-4m are the same double. */
static bool read_scaled(const char *text, size_t n, int power, double *out)
{
    char shifted[LONGEST_NUMBER + 16];
    double ignored;
    if (!mw_read_number(text, n, &ignored))
        return false;
    size_t mantissa = 0;
    while (mantissa < n && text[mantissa] != 'e' && text[mantissa] != 'E')
        mantissa++;
    double exponent = 0;
    if (mantissa < n && !mw_read_number(text + mantissa + 1, n - mantissa - 1, &exponent))
        return false;
    if (!(fabs(exponent) < 10000))
        return false;
    memcpy(shifted, text, mantissa);
    const int more = snprintf(shifted + mantissa, sizeof shifted - mantissa, "e%d", (int)exponent + power);
    return mw_read_number(shifted, mantissa + (size_t)more, out);
}

bool mw_read_trade(mw_quantity quantity, const char *text, size_t n, double *si)
{
    const unit *u = &quantity_table[quantity].unit[0];
    double value;
    if (n > LONGEST_NUMBER || !read_scaled(text, n, u->power, &value))
        return false;
    *si = value + u->offset;
    return true;
}

double mw_to_trade(mw_quantity quantity, double si)
{
    const unit *u = &quantity_table[quantity].unit[0];
    const double trade = u->power < 0 ? (si - u->offset) * power_of_ten(-u->power) : (si - u->offset) / power_of_ten(u->power);
    /* 110 um must not come back as 110.00000000000001: prefer the round value when it reads back as the same SI double. */
    if (!(fabs(trade) < 1e6))
        return trade;
    const double rounded = nearbyint(trade * 1e9) / 1e9;
    if (mw_from_trade(quantity, rounded) == si)
        return rounded;
    char text[MW_NUMBER_SIZE];
    double back;
    const size_t n = mw_print_number(text, rounded);
    return n < sizeof text && fabs(rounded - trade) <= 4e-16 * fabs(trade) && mw_read_trade(quantity, text, n, &back) && back == si ? rounded : trade;
}

static const unit *find_unit(mw_quantity quantity, const char *suffix, size_t n)
{
    if (n == 0)
        return &quantity_table[quantity].unit[0];
    for (size_t i = 0; i < MOST_UNITS; i++) {
        const char *s = quantity_table[quantity].unit[i].suffix;
        if (s != NULL && strlen(s) == n && memcmp(s, suffix, n) == 0)
            return &quantity_table[quantity].unit[i];
    }
    return NULL;
}

/* Length of the leading part of text[0..n-1] that is a number. */
static size_t number_length(const char *text, size_t n)
{
    double ignored;
    for (size_t k = n; k > 0; k--)
        if (mw_read_number(text, k, &ignored)) /* "1e999" must not be read as 1e99 followed by a unit "9" */
            return k < n && text[k] >= '0' && text[k] <= '9' ? 0 : k;
    return 0;
}

/* One number with its unit; `fallback` serves a number without a suffix (NULL: the trade unit). *used is the unit found, or NULL. */
static mw_status parse_one(mw_quantity quantity, const char *what, const char *text, size_t n, const unit *fallback,
                           double *si, const unit **used, mw_error *err)
{
    while (n > 0 && text[0] == ' ') {
        text++;
        n--;
    }
    while (n > 0 && text[n - 1] == ' ')
        n--;
    const int shown = n > 40 ? 40 : (int)n;
    if (n > LONGEST_NUMBER)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: '%.*s...' is not a number", what, shown, text);
    const size_t digits = number_length(text, n);
    if (digits == 0)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: '%.*s' is not a number (a plain number is in %s; suffixes: %s)%s",
                       what, shown, text, quantity == MW_PLAIN ? "no unit" : mw_trade_unit(quantity),
                       mw_unit_suffixes(quantity), memchr(text, ',', n) != NULL ? "; write decimals with a point" : "");
    size_t from = digits;
    while (from < n && text[from] == ' ')
        from++;
    const unit *u = find_unit(quantity, text + from, n - from);
    if (u == NULL && text[from] == ',')
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: '%.*s' is not one number; write decimals with a point", what, shown, text);
    if (u == NULL)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: unit '%.*s' in '%.*s' is not one of: %s", what, (int)(n - from),
                       text + from, shown, text, mw_unit_suffixes(quantity));
    *used = from == n ? NULL : u;
    const unit *by = from == n && fallback != NULL ? fallback : u;
    double value = 0;
    if (!read_scaled(text, digits, by->power, &value))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: '%.*s' is too large a number", what, shown, text);
    *si = value + by->offset;
    return MW_OK;
}

mw_status mw_parse_quantity(mw_quantity quantity, const char *what, const char *text, double *si, mw_error *err)
{
    const unit *used;
    return parse_one(quantity, what, text, strlen(text), NULL, si, &used, err);
}

typedef struct axis {
    double *value;
    size_t n, room, most;
} axis;

static mw_status append(axis *a, const char *what, double value, mw_error *err)
{
    if (a->n == a->most)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "%s: more than the %zu values allowed", what, a->most);
    if (a->n == a->room) {
        a->room = a->room == 0 ? 64 : a->room * 2;
        double *larger = realloc(a->value, a->room * sizeof *larger);
        if (larger == NULL)
            return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
        a->value = larger;
    }
    a->value[a->n++] = value;
    return MW_OK;
}

/* A grid value without the dust of its arithmetic. */
static double tidy(double trade)
{
    return fabs(trade) < 1e6 ? nearbyint(trade * 1e9) / 1e9 : trade;
}

/* START:STOP:COUNT between `text` and `text + n`; first is the position of the first colon. */
static mw_status append_range(axis *a, mw_quantity quantity, const char *what, const char *text, size_t n, size_t first,
                              mw_error *err)
{
    const char *second = memchr(text + first + 1, ':', n - first - 1);
    if (second == NULL || memchr(second + 1, ':', n - (size_t)(second - text) - 1) != NULL)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: '%.*s' is not START:STOP:COUNT", what, (int)(n > 60 ? 60 : n), text);
    const size_t at = (size_t)(second - text);
    /* A unit at the very end ("80:140:3um") belongs to the whole range. */
    const size_t digits = number_length(second + 1, n - at - 1);
    const unit *shared = find_unit(quantity, second + 1 + digits, n - at - 1 - digits);
    double count = 0;
    if (digits == 0 || shared == NULL || !mw_read_number(second + 1, digits, &count) || !(count >= 1) || count != floor(count))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: COUNT '%.*s' in '%.*s' is not a whole number from 1", what,
                       (int)(n - at - 1 > 20 ? 20 : n - at - 1), second + 1, (int)(n > 60 ? 60 : n), text);
    if (count > (double)a->most)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "%s: COUNT %.0f is more than the %zu values allowed", what, count, a->most);
    const unit *end_unit, *start_unit;
    double stop, start;
    mw_status status = parse_one(quantity, what, text + first + 1, at - first - 1, digits < n - at - 1 ? shared : NULL, &stop, &end_unit, err);
    if (status == MW_OK) {
        const unit *fallback = end_unit != NULL ? end_unit : digits < n - at - 1 ? shared : NULL;
        status = parse_one(quantity, what, text, first, fallback, &start, &start_unit, err);
    }
    if (status != MW_OK)
        return status;
    if (count == 1 && start != stop)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s: '%.*s' has COUNT 1 but two different ends", what, (int)(n > 60 ? 60 : n), text);
    const size_t m = (size_t)count;
    for (size_t i = 0; status == MW_OK && i < m; i++) {
        /* In trade units, so that 80:140:3 gives exactly 80, 110 and 140 um; both ends come out exactly. */
        const double f = m == 1 ? 0 : (double)i / (double)(m - 1);
        const double low = mw_to_trade(quantity, start), high = mw_to_trade(quantity, stop);
        status = append(a, what, i + 1 == m ? stop : i == 0 ? start : mw_from_trade(quantity, tidy(low + (high - low) * f)), err);
    }
    return status;
}

static int by_value(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

mw_status mw_parse_axis(mw_quantity quantity, const char *what, const char *text, size_t most, double **out, size_t *n,
                        mw_error *err)
{
    axis a = {NULL, 0, 0, most};
    mw_status status = MW_OK;
    for (const char *item = text; status == MW_OK;) {
        const size_t length = strcspn(item, ",");
        const char *colon = memchr(item, ':', length);
        if (colon != NULL) {
            status = append_range(&a, quantity, what, item, length, (size_t)(colon - item), err);
        } else {
            double value = 0;
            const unit *used;
            status = parse_one(quantity, what, item, length, NULL, &value, &used, err);
            if (status == MW_OK)
                status = append(&a, what, value, err);
        }
        if (item[length] == '\0')
            break;
        item += length + 1;
    }
    if (status != MW_OK) {
        free(a.value);
        return status;
    }
    qsort(a.value, a.n, sizeof *a.value, by_value);
    size_t kept = 0;
    for (size_t i = 0; i < a.n; i++)
        if (kept == 0 || a.value[i] != a.value[kept - 1])
            a.value[kept++] = a.value[i];
    *out = a.value;
    *n = kept;
    return MW_OK;
}
