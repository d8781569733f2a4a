/* SPDX-License-Identifier: GPL-3.0-or-later
 * Loads one alloy card. Nothing is guessed and nothing is passed over: what is not understood is refused. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "material/alloy_internal.h"

const char *const mw_caution_words[MW_CAUTION_COUNT] = {"reactive-powder", "nickel", "cobalt", "chromium"};
/* How far a source was seen: the text itself, its abstract, a copy of its numbers elsewhere, not at all. */
const char *const mw_seen_words[MW_SEEN_COUNT] = {"opened", "abstract", "secondary", "memory"};
const char *const mw_element_symbols[MW_ELEMENT_COUNT] = {
    "H",  "He", "Li", "Be", "B",  "C",  "N",  "O",  "F",  "Ne", "Na", "Mg", "Al", "Si", "P",  "S",  "Cl",
    "Ar", "K",  "Ca", "Sc", "Ti", "V",  "Cr", "Mn", "Fe", "Co", "Ni", "Cu", "Zn", "Ga", "Ge", "As", "Se",
    "Br", "Kr", "Rb", "Sr", "Y",  "Zr", "Nb", "Mo", "Tc", "Ru", "Rh", "Pd", "Ag", "Cd", "In", "Sn", "Sb",
    "Te", "I",  "Xe", "Cs", "Ba", "La", "Ce", "Pr", "Nd", "Pm", "Sm", "Eu", "Gd", "Tb", "Dy", "Ho", "Er",
    "Tm", "Yb", "Lu", "Hf", "Ta", "W",  "Re", "Os", "Ir", "Pt", "Au", "Hg", "Tl", "Pb", "Bi", "Po", "At",
    "Rn", "Fr", "Ra", "Ac", "Th", "Pa", "U",  "Np", "Pu", "Am", "Cm", "Bk", "Cf", "Es", "Fm", "Md", "No",
    "Lr", "Rf", "Db", "Sg", "Bh", "Hs", "Mt", "Ds", "Rg", "Cn", "Nh", "Fl", "Mc", "Lv", "Ts", "Og"};

/* ---- kind and names ---- */

static bool check_kind(mw_alloy_reader *r, const cJSON *root)
{
    if (!cJSON_IsObject(root))
        return mw_card_object(&r->card, root, "the card", NULL, 0);
    const cJSON *kind = mw_card_need(&r->card, root, "the card", "card");
    if (kind == NULL)
        return false;
    if (!cJSON_IsString(kind) || strcmp(kind->valuestring, "alloy") != 0)
        return mw_card_refuse(&r->card, kind, "\"card\" is \"%.40s\"; an alloy card says \"alloy\"",
                              cJSON_IsString(kind) ? kind->valuestring : "not a text");
    const cJSON *format = mw_card_need(&r->card, root, "the card", "format");
    double number = 0;
    if (format == NULL || !mw_card_number(&r->card, format, "format", &number))
        return false;
    if (number != MW_CARD_FORMAT)
        return mw_card_refuse(&r->card, format, "\"format\" is %s; this program reads format %d",
                              mw_card_shown(number).text, MW_CARD_FORMAT);
    return true;
}

static bool ends_in(const char *text, const char *tail)
{
    const size_t n = strlen(text), t = strlen(tail);
    return n >= t && mw_same_word(text + n - t, tail);
}

/* A name is typed after --alloy and stands in file names and CSV: it must be no path, no option and no surprise
 * there. */
static bool read_name(mw_alloy_reader *r, const cJSON *node)
{
    const char *name = mw_card_text(&r->card, node, "name");
    if (name == NULL)
        return false;
    const size_t n = strlen(name);
    if (n > MW_LONGEST_NAME)
        return mw_card_refuse(&r->card, node, "\"name\" is %zu bytes long; at most %d are allowed", n,
                              MW_LONGEST_NAME);
    const size_t bad = strcspn(name, "/\\,;\"");
    if (name[bad] != '\0')
        return mw_card_refuse(&r->card, node, "\"name\": \"%s\" has a '%c'; none of / \\ , ; \" is allowed", name,
                              name[bad]);
    if (name[0] == '-' || name[0] == '.' || name[0] == ' ' || name[n - 1] == ' ' || ends_in(name, ".json"))
        return mw_card_refuse(&r->card, node,
                              "\"name\": \"%s\" must not start with '-', '.' or a blank, nor end in a blank or .json",
                              name);
    r->alloy->name = name;
    return true;
}

static bool read_designations(mw_alloy_reader *r, const cJSON *node)
{
    return mw_card_texts(&r->card, node, "designations", 0, &r->alloy->designation, &r->alloy->n_designation);
}

static bool read_summary(mw_alloy_reader *r, const cJSON *node)
{
    r->alloy->summary = mw_card_text(&r->card, node, "summary");
    return r->alloy->summary != NULL;
}

static bool read_cautions(mw_alloy_reader *r, const cJSON *node)
{
    if (!mw_card_texts(&r->card, node, "cautions", 0, &r->alloy->caution, &r->alloy->n_caution))
        return false;
    for (size_t i = 0; i < r->alloy->n_caution; i++)
        if (!mw_card_word(&r->card, cJSON_GetArrayItem(node, (int)i), "cautions", r->alloy->caution[i],
                          mw_caution_words, MW_CAUTION_COUNT))
            return false;
    return true;
}

/* ---- sources ---- */

static bool read_source_entry(mw_alloy_reader *r, const cJSON *node, mw_source_entry *out)
{
    static const char *const keys[] = {"citation", "doi", "seen"};
    char what[120];
    if (node->string[0] == '\0' || strlen(node->string) > MW_LONGEST_NAME || !mw_card_plain(node->string))
        return mw_card_refuse(&r->card, node, "source key \"%.80s\" must have 1 to %d bytes and no control character",
                              node->string, MW_LONGEST_NAME);
    (void)snprintf(what, sizeof what, "source \"%s\"", node->string);
    if (!mw_card_object(&r->card, node, what, keys, 3))
        return false;
    char *key = mw_arena_take(r->card.arena, strlen(node->string) + 1, 1);
    if (key == NULL)
        return mw_card_no_memory(&r->card);
    strcpy(key, node->string);
    out->key = key;
    const cJSON *citation = mw_card_need(&r->card, node, what, "citation"), *seen = NULL;
    if (citation == NULL || (out->citation = mw_card_text(&r->card, citation, "citation")) == NULL)
        return false;
    const cJSON *doi = cJSON_GetObjectItemCaseSensitive(node, "doi");
    if (doi != NULL && (out->doi = mw_card_text(&r->card, doi, "doi")) == NULL)
        return false;
    if (doi != NULL &&
        (strncmp(out->doi, "10.", 3) != 0 || strchr(out->doi, '/') == NULL || strchr(out->doi, ' ') != NULL))
        return mw_card_refuse(&r->card, doi,
                              "\"doi\": \"%.80s\" must have the form 10.1007/abc, without an address before it",
                              out->doi);
    seen = mw_card_need(&r->card, node, what, "seen");
    return seen != NULL && (out->seen = mw_card_text(&r->card, seen, "seen")) != NULL &&
           mw_card_word(&r->card, seen, "seen", out->seen, mw_seen_words, MW_SEEN_COUNT);
}

static bool read_sources(mw_alloy_reader *r, const cJSON *node)
{
    if (!cJSON_IsObject(node))
        return mw_card_object(&r->card, node, "\"sources\"", NULL, 0);
    const size_t n = (size_t)cJSON_GetArraySize(node);
    if (n == 0)
        return mw_card_refuse(&r->card, node, "\"sources\" is empty; at least one is needed");
    mw_source_entry *list = mw_arena_take(r->card.arena, n, sizeof *list);
    r->source_used = mw_arena_take(r->card.arena, n, sizeof *r->source_used);
    if (list == NULL || r->source_used == NULL)
        return mw_card_no_memory(&r->card);
    size_t i = 0;
    for (const cJSON *child = node->child; child != NULL; child = child->next, i++)
        if (!read_source_entry(r, child, &list[i]))
            return false;
    r->alloy->source = list;
    r->alloy->n_source = n;
    return true;
}

static bool unknown_source(mw_alloy_reader *r, const cJSON *node, const char *key)
{
    const size_t n = r->alloy->n_source;
    const char **keys = mw_arena_take(r->card.arena, n, sizeof *keys);
    if (keys == NULL)
        return mw_card_no_memory(&r->card);
    for (size_t i = 0; i < n; i++)
        keys[i] = r->alloy->source[i].key;
    const char *near = mw_nearest_name(key, keys, n);
    if (near != NULL)
        return mw_card_refuse(&r->card, node, "source \"%.80s\" does not stand in \"sources\"; did you mean \"%s\"?",
                              key, near);
    return mw_card_refuse(&r->card, node, "source \"%.80s\" does not stand in \"sources\"", key);
}

bool mw_alloy_read_source(mw_alloy_reader *r, const cJSON *node, const char *what, const char *const **out, size_t *n)
{
    char name[120];
    (void)snprintf(name, sizeof name, "source\" of \"%s", what); /* the reader puts the outer quotes */
    if (!mw_card_texts(&r->card, node, name, 1, out, n))
        return false;
    for (size_t i = 0; i < *n; i++) {
        size_t j = 0;
        while (j < r->alloy->n_source && strcmp(r->alloy->source[j].key, (*out)[i]) != 0)
            j++;
        if (j == r->alloy->n_source)
            return unknown_source(r, cJSON_GetArrayItem(node, (int)i), (*out)[i]);
        r->source_used[j] = true;
    }
    return true;
}

static bool check_all_used(mw_alloy_reader *r, const cJSON *sources)
{
    size_t i = 0;
    for (const cJSON *child = sources->child; child != NULL; child = child->next, i++)
        if (!r->source_used[i])
            return mw_card_refuse(&r->card, child,
                                  "source \"%s\" is never used; remove it or name it where its numbers stand",
                                  child->string);
    return true;
}

/* ---- composition ---- */

/* The table's own copy of a symbol, or NULL after a refusal. */
static const char *element_of(mw_alloy_reader *r, const cJSON *node, const char *key, const char *symbol)
{
    for (size_t i = 0; i < MW_ELEMENT_COUNT; i++)
        if (strcmp(mw_element_symbols[i], symbol) == 0)
            return mw_element_symbols[i];
    const char *near = mw_nearest_name(symbol, mw_element_symbols, MW_ELEMENT_COUNT);
    (void)mw_card_refuse(&r->card, node, "\"%s\": \"%.40s\" is not the symbol of an element%s%s%s", key, symbol,
                         near != NULL ? "; did you mean \"" : "", near != NULL ? near : "",
                         near != NULL ? "\"?" : "");
    return NULL;
}

static bool read_limit(mw_alloy_reader *r, const cJSON *node, mw_composition_limit *out)
{
    out->element = element_of(r, node, "limits_wt_pct", node->string);
    if (out->element == NULL)
        return false;
    if (!cJSON_IsArray(node) || cJSON_GetArraySize(node) != 2)
        return mw_card_refuse(&r->card, node,
                              "\"limits_wt_pct\": \"%s\" must be a list of two numbers, [lowest, highest]",
                              out->element);
    if (!mw_card_number_in(&r->card, node->child, out->element, 0, 100, &out->low_pct) ||
        !mw_card_number_in(&r->card, node->child->next, out->element, 0, 100, &out->high_pct))
        return false;
    if (!(out->low_pct <= out->high_pct))
        return mw_card_refuse(&r->card, node, "\"limits_wt_pct\": \"%s\" has its lowest %s above its highest %s",
                              out->element, mw_card_shown(out->low_pct).text, mw_card_shown(out->high_pct).text);
    return true;
}

static bool read_limits(mw_alloy_reader *r, const cJSON *node)
{
    if (!cJSON_IsObject(node))
        return mw_card_object(&r->card, node, "\"limits_wt_pct\"", NULL, 0);
    const size_t n = (size_t)cJSON_GetArraySize(node);
    mw_composition_limit *list = mw_arena_take(r->card.arena, n, sizeof *list);
    if (list == NULL)
        return mw_card_no_memory(&r->card);
    double least = 0;
    size_t i = 0;
    for (const cJSON *child = node->child; child != NULL; child = child->next, i++) {
        if (!read_limit(r, child, &list[i]))
            return false;
        least += list[i].low_pct;
    }
    if (!(least <= 100))
        return mw_card_refuse(&r->card, node, "\"limits_wt_pct\": the lowest amounts add up to %s %%, more than 100",
                              mw_card_shown(least).text);
    r->alloy->limit = list;
    r->alloy->n_limit = n;
    return true;
}

static bool read_balance(mw_alloy_reader *r, const cJSON *node)
{
    const char *text = mw_card_text(&r->card, node, "balance");
    r->alloy->balance = text == NULL ? NULL : element_of(r, node, "balance", text);
    return r->alloy->balance != NULL;
}

static bool read_composition(mw_alloy_reader *r, const cJSON *node)
{
    static const char *const keys[] = {"balance", "limits_wt_pct", "source", "from_memory", "note"};
    const char *const what = "\"composition\"";
    if (!mw_card_object(&r->card, node, what, keys, sizeof keys / sizeof *keys))
        return false;
    const cJSON *balance = mw_card_need(&r->card, node, what, "balance");
    if (balance == NULL || !read_balance(r, balance))
        return false;
    const cJSON *limits = mw_card_need(&r->card, node, what, "limits_wt_pct");
    if (limits == NULL || !read_limits(r, limits))
        return false;
    const cJSON *source = mw_card_need(&r->card, node, what, "source");
    const char *const *list = NULL;
    size_t n = 0;
    if (source == NULL || !mw_alloy_read_source(r, source, "composition", &list, &n))
        return false;
    const cJSON *note = cJSON_GetObjectItemCaseSensitive(node, "note");
    bool from_memory = false;
    return (note == NULL || mw_card_text(&r->card, note, "note") != NULL) &&
           mw_card_flag(&r->card, cJSON_GetObjectItemCaseSensitive(node, "from_memory"), "from_memory", &from_memory);
}

/* ---- the card ---- */

/* Sources come before what names them. The kind is checked first: a card of another kind must not be called a bad
 * alloy. */
static bool read_card(mw_alloy_reader *r, const cJSON *root)
{
    static const struct {
        const char *key;
        bool (*read)(mw_alloy_reader *, const cJSON *);
    } part[] = {{"name", read_name},
                {"designations", read_designations},
                {"summary", read_summary},
                {"cautions", read_cautions},
                {"sources", read_sources},
                {"composition", read_composition},
                {"properties", mw_alloy_read_properties}};
    enum { PARTS = sizeof part / sizeof *part };
    const char *keys[PARTS + 2] = {"card", "format"};
    for (size_t i = 0; i < PARTS; i++)
        keys[i + 2] = part[i].key;
    if (!check_kind(r, root) || !mw_card_object(&r->card, root, "the card", keys, PARTS + 2))
        return false;
    for (size_t i = 0; i < PARTS; i++) {
        const cJSON *node = mw_card_need(&r->card, root, "the card", part[i].key);
        if (node == NULL || !part[i].read(r, node))
            return false;
    }
    return check_all_used(r, cJSON_GetObjectItemCaseSensitive(root, "sources"));
}

static mw_status build(const char *path, const mw_json *json, mw_alloy **out, mw_error *err)
{
    mw_alloy_reader r = {.card = {path, err, MW_OK, mw_arena_new()}};
    char *own_path = NULL;
    if (r.card.arena != NULL) {
        r.alloy = mw_arena_take(r.card.arena, 1, sizeof *r.alloy);
        own_path = mw_arena_take(r.card.arena, strlen(path) + 1, 1);
    }
    if (r.alloy == NULL || own_path == NULL) {
        (void)mw_card_no_memory(&r.card);
        goto failed;
    }
    strcpy(own_path, path);
    r.alloy->path = own_path;
    r.alloy->arena = r.card.arena;
    memcpy(r.alloy->hash, json->hash, sizeof r.alloy->hash);
    if (!read_card(&r, json->root))
        goto failed;
    *out = r.alloy;
    return MW_OK;
failed:
    mw_arena_free(r.card.arena);
    return r.card.status;
}

mw_status mw_alloy_parse(const char *path, const char *bytes, size_t n, mw_alloy **out, mw_error *err)
{
    mw_json json = {0};
    *out = NULL;
    mw_status status = mw_json_parse(path, bytes, n, &json, err);
    if (status == MW_OK)
        status = build(path, &json, out, err);
    mw_json_free(&json);
    return status;
}

mw_status mw_alloy_load(const char *path, mw_alloy **out, mw_error *err)
{
    mw_json json = {0};
    *out = NULL;
    mw_status status = mw_json_read(path, &json, err);
    if (status == MW_OK)
        status = build(path, &json, out, err);
    mw_json_free(&json);
    return status;
}

void mw_alloy_free(mw_alloy *alloy)
{
    if (alloy != NULL)
        mw_arena_free(alloy->arena);
}
