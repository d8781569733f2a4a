/* SPDX-License-Identifier: GPL-3.0-or-later
 * Quantities as people write them ("200", "0.2kW", "80um", "353K") to SI, and back to trade units for the eye. */
#ifndef MELTWRIGHT_UNITS_H
#define MELTWRIGHT_UNITS_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/status.h"

typedef enum mw_quantity {
    MW_POWER,        /* W     plain number: W     */
    MW_SPEED,        /* m/s   plain number: mm/s  */
    MW_LENGTH,       /* m     plain number: um    */
    MW_TEMPERATURE,  /* K     plain number: C     */
    MW_PLAIN,        /* no unit: a ratio or a count */
    MW_CONDUCTIVITY, /* W/(m K)  plain number: SI  */
    MW_DENSITY,      /* kg/m3    plain number: SI  */
    MW_HEAT_CAPACITY,/* J/(kg K) plain number: SI  */
    MW_KELVIN,       /* K     plain number: K (melting points of check cases) */
    MW_ENERGY_DENSITY/* J/m3  plain number: J/mm3 */
} mw_quantity;

/* The suffixes a quantity accepts, as one text for messages, e.g. "W, kW". Static storage. */
const char *mw_unit_suffixes(mw_quantity quantity);
/* The unit a plain number has, e.g. "mm/s". Static storage. */
const char *mw_trade_unit(mw_quantity quantity);

/* SI -> trade unit (a temperature: K -> C) and back. */
double mw_to_trade(mw_quantity quantity, double si);
double mw_from_trade(mw_quantity quantity, double trade);

/* A plain decimal in the trade unit -> SI, rounded once, so that 913.7 mm/s is the double nearest to 0.9137. False: not a number. */
bool mw_read_trade(mw_quantity quantity, const char *text, size_t n, double *si);

/* One value with an optional suffix -> *si. `what` names it in the message ("--power"). On failure the message says
 * what was read and which suffixes are allowed. Errors: MW_BAD_VALUE. */
mw_status mw_parse_quantity(mw_quantity quantity, const char *what, const char *text, double *si, mw_error *err);

/* A list of values, ranges START:STOP:COUNT, or both: "80,100:140:3". Suffixes are allowed on every number; a
 * suffix on the last number of an item serves the others of that item that have none ("80:140:3um"). The values come
 * back sorted and without repeats. The caller frees *out with free(). At most `most` values.
 * Errors: MW_BAD_VALUE, MW_TOO_LARGE, MW_NO_MEMORY. */
mw_status mw_parse_axis(mw_quantity quantity, const char *what, const char *text, size_t most, double **out,
                        size_t *n, mw_error *err);

#endif
