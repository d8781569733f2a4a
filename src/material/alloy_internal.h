/* SPDX-License-Identifier: GPL-3.0-or-later
 * What the loader and the JSON Schema of alloy cards share: rules, words, keys. One place, so that they cannot
 * differ. */
#ifndef MELTWRIGHT_MATERIAL_ALLOY_INTERNAL_H
#define MELTWRIGHT_MATERIAL_ALLOY_INTERNAL_H

#include "material/card.h"
#include "meltwright/alloy.h"

/* ---- properties ---- */

typedef struct mw_property_rule {
    const char *key, *meaning;
    bool table, required;
    double lowest, highest;
} mw_property_rule;
const mw_property_rule *mw_property_rule_of(mw_property_id id);

/* A unit at the tail of a key, and the unit that a value outside the range is most often in. */
typedef struct mw_key_unit {
    const char *tail;     /* "K" */
    const char *phrase;   /* "in K": ends the sentence "this property is given ..." */
    const char *mistaken; /* "degrees Celsius" */
    double factor;        /* own unit = factor * mistaken unit + offset */
    double offset;
} mw_key_unit;
/* Its unit, and (when stem_length is not NULL) how many characters of the key stand before "_UNIT". */
const mw_key_unit *mw_property_unit(mw_property_id id, size_t *stem_length);

/* Which tables belong to which side of melting. */
bool mw_property_is_solid(mw_property_id id);
bool mw_property_is_liquid(mw_property_id id);

/* ---- words and limits ---- */

enum {
    MW_CARD_FORMAT = 1,
    MW_CAUTION_COUNT = 4,
    MW_SEEN_COUNT = 4,
    MW_ELEMENT_COUNT = 118,
    MW_LONGEST_NAME = 64 /* bytes */
};
extern const char *const mw_caution_words[MW_CAUTION_COUNT];
extern const char *const mw_seen_words[MW_SEEN_COUNT];
extern const char *const mw_element_symbols[MW_ELEMENT_COUNT];

/* Row temperatures: below 50 K nothing is printed, and such a number is degrees Celsius. */
#define MW_ROW_LOWEST_K 50.0
#define MW_ROW_HIGHEST_K 10000.0

/* ---- loading ---- */

/* An alloy card being read. */
typedef struct mw_alloy_reader {
    mw_card card;
    mw_alloy *alloy;
    const cJSON *node[MW_PROPERTY_COUNT]; /* where each property stands; NULL when absent */
    bool *source_used;                    /* one for each of alloy->source */
} mw_alloy_reader;

/* Checks a "source" list against the card's sources and marks them as used. */
bool mw_alloy_read_source(mw_alloy_reader *r, const cJSON *node, const char *what, const char *const **out,
                          size_t *n);
/* Reads "properties" and checks each alone and against the others. Needs alloy->source. */
bool mw_alloy_read_properties(mw_alloy_reader *r, const cJSON *node);

/* mw_alloy_load for bytes in memory; `path` stands for the file. */
mw_status mw_alloy_parse(const char *path, const char *bytes, size_t n, mw_alloy **out, mw_error *err);

#endif
