/* SPDX-License-Identifier: GPL-3.0-or-later
 * Strict reading of any card (JSON): memory that is freed at once, and readers that refuse with file, line, key and
 * value. */
#ifndef MELTWRIGHT_MATERIAL_CARD_H
#define MELTWRIGHT_MATERIAL_CARD_H

#include <stdbool.h>
#include <stddef.h>

#include "base/json.h"
#include "meltwright/status.h"
#include "meltwright/text.h"

/* Memory that is only ever freed as a whole. */
typedef struct mw_arena mw_arena;
mw_arena *mw_arena_new(void);
/* Zeroed and aligned for any type; NULL: out of memory. */
void *mw_arena_take(mw_arena *arena, size_t count, size_t size);
void mw_arena_free(mw_arena *arena);

/* A card being read. INVARIANT: status is MW_OK until the first refusal and keeps the first refusal after that. */
typedef struct mw_card {
    const char *path;
    mw_error *err;
    mw_status status;
    mw_arena *arena;
} mw_card;

/* A number as text, whatever the locale: mw_card_shown(x).text */
typedef struct mw_shown {
    char text[MW_NUMBER_SIZE];
} mw_shown;
mw_shown mw_card_shown(double value);

/* What stands at a node: its kind, and the value where it is short enough to tell. */
typedef struct mw_found {
    char text[120];
} mw_found;
mw_found mw_card_found(const cJSON *node);

/* Writes the error line, with the line of `at`, and returns false. */
bool mw_card_refuse(mw_card *card, const cJSON *at, const char *format, ...)
#if defined(__GNUC__)
    __attribute__((format(printf, 3, 4)))
#endif
    ;
/* The same for "out of memory". */
bool mw_card_no_memory(mw_card *card);

/* `what` names the thing in messages, ready for the sentence: "\"composition\"", "the card". */

/* True when the node is an object and each of its keys is allowed. */
bool mw_card_object(mw_card *card, const cJSON *node, const char *what, const char *const allowed[], size_t n);
/* The value of a key that must be there; NULL after a refusal. */
const cJSON *mw_card_need(mw_card *card, const cJSON *object, const char *what, const char *key);
/* A copy of a text that is not empty and has no control characters; NULL after a refusal. */
const char *mw_card_text(mw_card *card, const cJSON *node, const char *key);
/* True when the text has no control character (C0, DEL, C1). */
bool mw_card_plain(const char *text);
/* A list of at least `least` texts, none twice. */
bool mw_card_texts(mw_card *card, const cJSON *node, const char *key, size_t least, const char *const **out,
                   size_t *n);
/* Refuses a text that is not one of words[]. */
bool mw_card_word(mw_card *card, const cJSON *node, const char *key, const char *text, const char *const words[],
                  size_t n);
/* A number; no limits. */
bool mw_card_number(mw_card *card, const cJSON *node, const char *key, double *out);
/* A number within limits. */
bool mw_card_number_in(mw_card *card, const cJSON *node, const char *key, double lowest, double highest, double *out);
/* true or false; a node that is NULL (key absent) counts as false. */
bool mw_card_flag(mw_card *card, const cJSON *node, const char *key, bool *out);

#endif
