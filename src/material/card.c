/* SPDX-License-Identifier: GPL-3.0-or-later
 * Strict reading of cards. */
#include "material/card.h"

#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* ---- memory ---- */

typedef struct block {
    struct block *next;
    size_t used, room;
    max_align_t bytes[];
} block;

struct mw_arena {
    block *last; /* the newest, from which is taken */
};

enum { BLOCK_BYTES = 8192, ALIGNMENT = sizeof(max_align_t), LONGEST_LIST = 1000 };

mw_arena *mw_arena_new(void)
{
    return calloc(1, sizeof(mw_arena));
}

void *mw_arena_take(mw_arena *arena, size_t count, size_t size)
{
    if (size != 0 && count > (SIZE_MAX / 2) / size)
        return NULL;
    const size_t bytes = (count * size + ALIGNMENT - 1) / ALIGNMENT * ALIGNMENT;
    block *from = arena->last;
    if (from == NULL || bytes > from->room - from->used) {
        const size_t room = bytes > BLOCK_BYTES ? bytes : BLOCK_BYTES;
        from = calloc(1, sizeof *from + room);
        if (from == NULL)
            return NULL;
        from->room = room;
        from->next = arena->last;
        arena->last = from;
    }
    void *taken = (char *)from->bytes + from->used;
    from->used += bytes;
    return taken;
}

void mw_arena_free(mw_arena *arena)
{
    if (arena == NULL)
        return;
    for (block *b = arena->last; b != NULL;) {
        block *next = b->next;
        free(b);
        b = next;
    }
    free(arena);
}

/* ---- refusals ---- */

mw_shown mw_card_shown(double value)
{
    mw_shown shown;
    (void)mw_print_number(shown.text, value);
    return shown;
}

bool mw_card_refuse(mw_card *card, const cJSON *at, const char *format, ...)
{
    if (card->status != MW_OK)
        return false;
    char text[sizeof card->err->text];
    va_list args;
    va_start(args, format);
    (void)vsnprintf(text, sizeof text, format, args);
    va_end(args);
    card->status = mw_fail(card->err, MW_BAD_FILE, card->path, mw_json_line(at), "%s", text);
    return false;
}

bool mw_card_no_memory(mw_card *card)
{
    if (card->status == MW_OK)
        card->status = mw_fail(card->err, MW_NO_MEMORY, card->path, 0, "out of memory");
    return false;
}

static const char *kind_of(const cJSON *node)
{
    return cJSON_IsObject(node)   ? "an object"
           : cJSON_IsArray(node)  ? "a list"
           : cJSON_IsBool(node)   ? "true or false"
                                  : "null";
}

mw_found mw_card_found(const cJSON *node)
{
    mw_found f;
    if (cJSON_IsString(node))
        (void)snprintf(f.text, sizeof f.text, "a text, \"%.60s\"", node->valuestring);
    else if (cJSON_IsNumber(node))
        (void)snprintf(f.text, sizeof f.text, "a number, %s", mw_card_shown(node->valuedouble).text);
    else
        (void)snprintf(f.text, sizeof f.text, "%s", kind_of(node));
    return f;
}

/* "a", "b", "c" for messages; what does not fit is dropped. */
static void join(char *out, size_t size, const char *const names[], size_t n)
{
    size_t used = 0;
    out[0] = '\0';
    for (size_t i = 0; i < n && used < size; i++) {
        const int wrote = snprintf(out + used, size - used, "%s\"%s\"", i == 0 ? "" : ", ", names[i]);
        used += wrote > 0 ? (size_t)wrote : 0;
    }
}

/* ---- readers ---- */

bool mw_card_object(mw_card *card, const cJSON *node, const char *what, const char *const allowed[], size_t n)
{
    if (!cJSON_IsObject(node))
        return mw_card_refuse(card, node, "%s must be an object { }, found %s", what, mw_card_found(node).text);
    for (const cJSON *child = node->child; child != NULL; child = child->next) {
        bool known = false;
        for (size_t i = 0; i < n && !known; i++)
            known = strcmp(child->string, allowed[i]) == 0;
        if (known)
            continue;
        const char *near = mw_nearest_name(child->string, allowed, n);
        if (near != NULL)
            return mw_card_refuse(card, child, "unknown key \"%.80s\" in %s; did you mean \"%s\"?", child->string,
                                  what, near);
        char list[400];
        join(list, sizeof list, allowed, n);
        return mw_card_refuse(card, child, "unknown key \"%.80s\" in %s; allowed: %s", child->string, what, list);
    }
    return true;
}

const cJSON *mw_card_need(mw_card *card, const cJSON *object, const char *what, const char *key)
{
    const cJSON *node = cJSON_GetObjectItemCaseSensitive(object, key);
    if (node == NULL)
        (void)mw_card_refuse(card, object, "key \"%s\" is missing in %s", key, what);
    return node;
}

bool mw_card_plain(const char *text)
{
    const unsigned char *s = (const unsigned char *)text;
    for (; *s != '\0'; s++)
        if (*s < 0x20 || *s == 0x7F || (*s == 0xC2 && s[1] < 0xA0)) /* C2 80 .. C2 9F are the C1 controls */
            return false;
    return true;
}

const char *mw_card_text(mw_card *card, const cJSON *node, const char *key)
{
    if (!cJSON_IsString(node)) {
        (void)mw_card_refuse(card, node, "\"%.80s\" must be a text, found %s", key, mw_card_found(node).text);
        return NULL;
    }
    const char *text = node->valuestring;
    if (text[strspn(text, " ")] == '\0') {
        (void)mw_card_refuse(card, node, "\"%.80s\" is empty", key);
        return NULL;
    }
    if (!mw_card_plain(text)) {
        (void)mw_card_refuse(card, node, "\"%.80s\" has a control character in \"%.80s\"", key, text);
        return NULL;
    }
    const size_t n = strlen(text) + 1;
    char *copy = mw_arena_take(card->arena, n, 1);
    if (copy == NULL)
        (void)mw_card_no_memory(card);
    else
        memcpy(copy, text, n);
    return copy;
}

bool mw_card_texts(mw_card *card, const cJSON *node, const char *key, size_t least, const char *const **out,
                   size_t *n)
{
    if (!cJSON_IsArray(node))
        return mw_card_refuse(card, node, "\"%s\" must be a list of texts, found %s", key, mw_card_found(node).text);
    const size_t count = (size_t)cJSON_GetArraySize(node);
    if (count < least)
        return mw_card_refuse(card, node, "\"%s\" is an empty list; at least one is needed", key);
    if (count > LONGEST_LIST)
        return mw_card_refuse(card, node, "\"%s\" has %zu entries; at most %d are allowed", key, count, LONGEST_LIST);
    const char **list = mw_arena_take(card->arena, count, sizeof *list);
    if (list == NULL)
        return mw_card_no_memory(card);
    size_t i = 0;
    for (const cJSON *child = node->child; child != NULL; child = child->next, i++) {
        list[i] = mw_card_text(card, child, key);
        if (list[i] == NULL)
            return false;
        for (size_t j = 0; j < i; j++)
            if (strcmp(list[j], list[i]) == 0)
                return mw_card_refuse(card, child, "\"%s\" has \"%.80s\" twice", key, list[i]);
    }
    *out = list;
    *n = count;
    return true;
}

bool mw_card_word(mw_card *card, const cJSON *node, const char *key, const char *text, const char *const words[],
                  size_t n)
{
    for (size_t i = 0; i < n; i++)
        if (strcmp(text, words[i]) == 0)
            return true;
    char list[400];
    join(list, sizeof list, words, n);
    const char *near = mw_nearest_name(text, words, n);
    if (near != NULL)
        return mw_card_refuse(card, node, "\"%s\": \"%.80s\" is not a known word; did you mean \"%s\"? allowed: %s",
                              key, text, near, list);
    return mw_card_refuse(card, node, "\"%s\": \"%.80s\" is not a known word; allowed: %s", key, text, list);
}

bool mw_card_number(mw_card *card, const cJSON *node, const char *key, double *out)
{
    if (!cJSON_IsNumber(node))
        return mw_card_refuse(card, node, "\"%.80s\" must be a number, found %s", key, mw_card_found(node).text);
    *out = node->valuedouble;
    return true;
}

bool mw_card_number_in(mw_card *card, const cJSON *node, const char *key, double lowest, double highest, double *out)
{
    if (!mw_card_number(card, node, key, out))
        return false;
    if (!(*out >= lowest && *out <= highest))
        return mw_card_refuse(card, node, "\"%.80s\" is %s; allowed: %s to %s", key, mw_card_shown(*out).text,
                              mw_card_shown(lowest).text, mw_card_shown(highest).text);
    return true;
}

bool mw_card_flag(mw_card *card, const cJSON *node, const char *key, bool *out)
{
    *out = node != NULL && cJSON_IsTrue(node);
    if (node != NULL && !cJSON_IsBool(node))
        return mw_card_refuse(card, node, "\"%s\" must be true or false, found %s", key, mw_card_found(node).text);
    return true;
}
