/* SPDX-License-Identifier: GPL-3.0-or-later
 * The accuracy tables: meltwright against published measurements. */
#ifndef MELTWRIGHT_VALIDATE_H
#define MELTWRIGHT_VALIDATE_H

#include <stdio.h>

#include "meltwright/study.h"

/* Also draws the parity plot to `picture` unless it is NULL. */
void validate_tracks(const char *picture);
void validate_cubes(void);
void validate_balling(void);
void validate_contest(void);
void validate_slopes(void);
void validate_repeats(void);
void validate_cavity(void);

/* Prints the error and ends the program unless the status is a success. */
void stop_on(mw_status status, const mw_error *err);
/* The card of an alloy from alloys/; ends the program when there is none, unless `may_lack`. */
mw_alloy *find_card(const char *name);
mw_alloy *find_card_if_any(const char *name);

#endif
