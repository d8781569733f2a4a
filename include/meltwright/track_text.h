/* SPDX-License-Identifier: GPL-3.0-or-later
 * One setting explained to a person: the pool, how far each limit is, what would move it. */
#ifndef MELTWRIGHT_TRACK_TEXT_H
#define MELTWRIGHT_TRACK_TEXT_H

#include <stdio.h>

#include "meltwright/study.h"

/* outlook: NULL where there is no verdict (no hatch or layer). */
void mw_track_text(FILE *to, const mw_plan *plan, const mw_result *result, const mw_outlook *outlook);

/* The cautions that belong under every result, in two lines; the card's own words (reactive powder, nickel) are worked in. */
void mw_caution_text(FILE *to, const mw_alloy *alloy);

#endif
