/* SPDX-License-Identifier: GPL-3.0-or-later
 * Finds alloy cards by name or designation in folders. Folders are read in sorted order: the same files give the same
 * answer. */
#define _POSIX_C_SOURCE 200809L
#include <dirent.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "material/alloy_internal.h"

/* ---- what lies in a folder ---- */

/* A readable alloy card; name and designations are borrowed from the tree. */
typedef struct entry {
    char *path;
    mw_json json;
    const char *name;
    const cJSON *designations; /* may be NULL or of a wrong type: the loader will say so */
    size_t dir;                /* which folder it lies in */
} entry;

typedef struct catalogue {
    entry *item;
    size_t n, room;
    size_t n_broken; /* *.json files that could not be read */
    mw_error first_broken;
} catalogue;

static mw_status no_memory(mw_error *err)
{
    return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
}

static void free_entry(entry *e)
{
    mw_json_free(&e->json);
    free(e->path);
}

static void free_catalogue(catalogue *c)
{
    for (size_t i = 0; i < c->n; i++)
        free_entry(&c->item[i]);
    free(c->item);
}

static bool ends_in(const char *text, const char *tail)
{
    const size_t n = strlen(text), t = strlen(tail);
    return n >= t && mw_same_word(text + n - t, tail);
}

static int by_bytes(const void *a, const void *b)
{
    return strcmp(*(char *const *)a, *(char *const *)b);
}

void mw_names_free(char **names, size_t n)
{
    for (size_t i = 0; names != NULL && i < n; i++)
        free(names[i]);
    free(names);
}

/* Adds a copy of text to a list that grows by doubling. */
static bool append(char ***list, size_t *n, const char *text)
{
    if ((*n & (*n - 1)) == 0) { /* 0, 1, 2, 4, 8 ...: full */
        char **larger = realloc(*list, (*n == 0 ? 1 : *n * 2) * sizeof *larger);
        if (larger == NULL)
            return false;
        *list = larger;
    }
    char *copy = malloc(strlen(text) + 1);
    if (copy == NULL)
        return false;
    strcpy(copy, text);
    (*list)[(*n)++] = copy;
    return true;
}

static bool is_card_file(const char *file)
{
    return file[0] != '.' && ends_in(file, ".json") && !ends_in(file, ".schema.json");
}

/* The card files of a folder, sorted. A folder that is not there has none. */
static mw_status list_files(const char *dir, char ***files, size_t *n, mw_error *err)
{
    *files = NULL;
    *n = 0;
    DIR *d = opendir(dir);
    if (d == NULL)
        return MW_OK;
    mw_status status = MW_OK;
    for (const struct dirent *f = readdir(d); f != NULL && status == MW_OK; f = readdir(d))
        if (is_card_file(f->d_name) && !append(files, n, f->d_name))
            status = no_memory(err);
    (void)closedir(d);
    if (*n > 0)
        qsort(*files, *n, sizeof **files, by_bytes);
    return status;
}

/* Opens one file; keeps it when it is an alloy card, counts it when it cannot be read. */
static mw_status add_file(catalogue *c, const char *dir, size_t dir_number, const char *file, mw_error *err)
{
    if (c->n == c->room) {
        const size_t room = c->room == 0 ? 16 : c->room * 2;
        entry *larger = realloc(c->item, room * sizeof *larger);
        if (larger == NULL)
            return no_memory(err);
        c->item = larger;
        c->room = room;
    }
    entry e = {.dir = dir_number};
    const size_t length = strlen(dir), size = length + strlen(file) + 2;
    e.path = malloc(size);
    if (e.path == NULL)
        return no_memory(err);
    (void)snprintf(e.path, size, "%s%s%s", dir, length > 0 && dir[length - 1] == '/' ? "" : "/", file);
    mw_error problem = {MW_OK, ""};
    mw_status status = mw_json_read(e.path, &e.json, &problem);
    const cJSON *kind = cJSON_GetObjectItemCaseSensitive(e.json.root, "card");
    if (status == MW_OK && (!cJSON_IsString(kind) || strcmp(kind->valuestring, "alloy") != 0)) {
        free_entry(&e);
        return MW_OK;
    }
    const cJSON *name = cJSON_GetObjectItemCaseSensitive(e.json.root, "name");
    if (status == MW_OK && !cJSON_IsString(name))
        status =
            mw_fail(&problem, MW_BAD_FILE, e.path, mw_json_line(e.json.root), "\"name\" is missing or not a text");
    if (status == MW_OK) {
        e.name = name->valuestring;
        e.designations = cJSON_GetObjectItemCaseSensitive(e.json.root, "designations");
        c->item[c->n++] = e;
        return MW_OK;
    }
    if (c->n_broken++ == 0)
        c->first_broken = problem;
    free_entry(&e);
    return status == MW_NO_MEMORY ? no_memory(err) : MW_OK;
}

static mw_status add_folder(catalogue *c, const char *dir, size_t dir_number, mw_error *err)
{
    char **files = NULL;
    size_t n = 0;
    mw_status status = list_files(dir, &files, &n, err);
    for (size_t i = 0; i < n && status == MW_OK; i++)
        status = add_file(c, dir, dir_number, files[i], err);
    mw_names_free(files, n);
    return status;
}

/* ---- matching ---- */

static const char *skip_blanks(const char *s)
{
    return s + strspn(s, " \t");
}

/* Equal but for letter case and blanks. */
static bool same_but_blanks(const char *a, const char *b)
{
    for (;; a++, b++) {
        a = skip_blanks(a);
        b = skip_blanks(b);
        const char x[2] = {*a, '\0'}, y[2] = {*b, '\0'};
        if (!mw_same_word(x, y))
            return false;
        if (*a == '\0')
            return true;
    }
}

/* A designation without the words that say whose it is: "EN ISO 1.4404" -> "1.4404". */
static const char *bare(const char *designation)
{
    static const char *const word[] = {"UNS", "EN", "ISO", "W.Nr."};
    const char *at = skip_blanks(designation);
    for (size_t i = 0; i < sizeof word / sizeof *word; i++) {
        const size_t n = strlen(word[i]);
        char start[8] = "";
        (void)snprintf(start, sizeof start, "%.*s", (int)n, at);
        if (mw_same_word(start, word[i]) && (at[n] == ' ' || at[n] == '\t'))
            at = skip_blanks(at + n);
    }
    return at;
}

/* Whether one of the card's designations, whole or bare, is `same` as the word. */
static bool has_designation(const entry *e, const char *word, bool (*same)(const char *, const char *))
{
    if (!cJSON_IsArray(e->designations))
        return false;
    for (const cJSON *d = e->designations->child; d != NULL; d = d->next)
        if (cJSON_IsString(d) && (same(d->valuestring, word) || same(bare(d->valuestring), word)))
            return true;
    return false;
}

static bool is_letter(char c)
{
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

/* Letters and digits alone, in one case. */
static void plain_word(const char *text, char *out, size_t size)
{
    size_t n = 0;
    for (; *text != '\0' && n + 1 < size; text++)
        if (is_letter(*text) || is_digit(*text))
            out[n++] = (char)(*text >= 'A' && *text <= 'Z' ? *text - 'A' + 'a' : *text);
    out[n] = '\0';
}

/* The same letters and digits ("Ti6Al4V"); or a number with letters of somebody's own before it ("alloy 718", "SS 316L"). */
static bool loosely_same(const char *a, const char *b)
{
    char x[80], y[80];
    plain_word(a, x, sizeof x);
    plain_word(b, y, sizeof y);
    const size_t n = strlen(x), m = strlen(y);
    if (n == 0 || m < n || strcmp(y + m - n, x) != 0)
        return false;
    bool letters = m == n || is_digit(x[0]);
    for (size_t i = 0; i < m - n; i++)
        letters = letters && is_letter(y[i]);
    return letters;
}

typedef enum how { BY_NAME, BY_DESIGNATION, NEAR_NAME, NEAR_DESIGNATION, HOWS } how;

static bool meant(const entry *e, const char *word, how by)
{
    switch (by) {
    case BY_NAME:
        return same_but_blanks(e->name, word);
    case BY_DESIGNATION:
        return has_designation(e, word, same_but_blanks);
    case NEAR_NAME:
        return loosely_same(e->name, word);
    default:
        return has_designation(e, word, loosely_same);
    }
}

/* The one card of a folder that `word` means in this way. MW_NOT_FOUND without text when there is none. Two that match alike
 * are refused: which one was meant cannot be known. */
static mw_status pick(const catalogue *c, size_t dir, const char *word, how by, const entry **out, mw_error *err)
{
    static const char *const role[HOWS] = {"the name", "the designation", "near the name", "near the designation"};
    *out = NULL;
    for (size_t i = 0; i < c->n; i++) {
        const entry *e = &c->item[i];
        if (e->dir != dir || !meant(e, word, by))
            continue;
        if (*out != NULL)
            return mw_fail(err, MW_BAD_FILE, NULL, 0, "\"%.80s\" is %s of two cards: %.200s and %.200s; name one by its file", word, role[by],
                           (*out)->path, e->path);
        *out = e;
    }
    return *out == NULL ? MW_NOT_FOUND : MW_OK;
}

/* First folder first, and in a folder the name before a designation; loose matches only when no folder has it in so many words. */
static mw_status pick_from_all(const catalogue *c, size_t n_dir, const char *word, const entry **out, mw_error *err)
{
    mw_status status = MW_NOT_FOUND;
    for (int near = 0; near < 2; near++)
        for (size_t dir = 0; dir < n_dir && status == MW_NOT_FOUND; dir++) {
            status = pick(c, dir, word, near ? NEAR_NAME : BY_NAME, out, err);
            if (status == MW_NOT_FOUND)
                status = pick(c, dir, word, near ? NEAR_DESIGNATION : BY_DESIGNATION, out, err);
        }
    return status;
}

/* ---- nothing found ---- */

/* Appends to a text of fixed size; what does not fit is dropped. */
static void add_text(char *out, size_t size, const char *before, const char *text)
{
    const char *const part[] = {before, text};
    size_t used = strlen(out);
    for (size_t i = 0; i < 2; i++) {
        const size_t n = strlen(part[i]), room = size - 1 - used, taken = n < room ? n : room;
        memcpy(out + used, part[i], taken);
        used += taken;
    }
    out[used] = '\0';
}

/* The nearest of all names and designations (also without their first words); NULL when none is near. */
static const char *nearest(const catalogue *c, const char *word)
{
    size_t n = 0;
    for (size_t i = 0; i < c->n; i++)
        n += 1 +
             2 * (size_t)(cJSON_IsArray(c->item[i].designations) ? cJSON_GetArraySize(c->item[i].designations) : 0);
    const char **all = calloc(n + 1, sizeof *all);
    if (all == NULL)
        return NULL;
    size_t used = 0;
    for (size_t i = 0; i < c->n; i++) {
        all[used++] = c->item[i].name;
        if (!cJSON_IsArray(c->item[i].designations))
            continue;
        for (const cJSON *d = c->item[i].designations->child; d != NULL; d = d->next) {
            if (!cJSON_IsString(d))
                continue;
            all[used++] = d->valuestring;
            all[used++] = bare(d->valuestring);
        }
    }
    const char *best = mw_nearest_name(word, all, used);
    free(all);
    return best;
}

static mw_status not_found(const catalogue *c, const char *word, const char *const dirs[], size_t n_dir,
                           mw_error *err)
{
    char tail[560] = "";
    const char *near = nearest(c, word);
    if (near != NULL) {
        add_text(tail, sizeof tail, "; did you mean \"", near);
        add_text(tail, sizeof tail, "\"?", "");
    } else {
        for (size_t i = 0; i < c->n && strlen(tail) < 200; i++)
            add_text(tail, sizeof tail, i == 0 ? "; there are: " : ", ", c->item[i].name);
    }
    for (size_t i = 0; i < n_dir && strlen(tail) < 400; i++)
        add_text(tail, sizeof tail, i == 0 ? (near != NULL ? " searched: " : "; searched: ") : ", ", dirs[i]);
    if (c->n_broken > 0) {
        char count[80];
        (void)snprintf(count, sizeof count, "; %zu file%s could not be read, first ", c->n_broken,
                       c->n_broken == 1 ? "" : "s");
        add_text(tail, sizeof tail, count, c->first_broken.text);
    }
    return mw_fail(err, MW_NOT_FOUND, NULL, 0, "no alloy card \"%.80s\"%s", word, tail);
}

/* ---- the usual case ---- */

static bool has_cards(const char *dir)
{
    char **files = NULL;
    size_t n = 0;
    const mw_status status = list_files(dir, &files, &n, NULL);
    mw_names_free(files, n);
    return status != MW_OK || n > 0;
}

/* A card that lies as NAME.json in the first folder that has any is read alone. False when it is not so, or anything is odd: the whole search then
 * finds it, or says what is wrong. */
static bool load_by_file_name(const char *name, const char *const dirs[], size_t n_dir, mw_alloy **out)
{
    size_t i = 0;
    while (i < n_dir && !has_cards(dirs[i]))
        i++;
    char path[1024];
    if (i == n_dir || snprintf(path, sizeof path, "%s%s%s.json", dirs[i], dirs[i][0] != '\0' && dirs[i][strlen(dirs[i]) - 1] == '/' ? "" : "/", name) >= (int)sizeof path)
        return false;
    if (mw_alloy_load(path, out, NULL) != MW_OK)
        return false;
    if (strcmp((*out)->name, name) == 0)
        return true;
    mw_alloy_free(*out);
    *out = NULL;
    return false;
}

/* ---- public ---- */

mw_status mw_alloy_find(const char *name, const char *const dirs[], size_t n_dir, mw_alloy **out, mw_error *err)
{
    *out = NULL;
    if (strchr(name, '/') != NULL || ends_in(name, ".json"))
        return mw_alloy_load(name, out, err);
    if (load_by_file_name(name, dirs, n_dir, out))
        return MW_OK;
    catalogue c = {0};
    const entry *found = NULL;
    mw_status status = MW_OK;
    for (size_t i = 0; i < n_dir && status == MW_OK; i++)
        status = add_folder(&c, dirs[i], i, err);
    if (status == MW_OK)
        status = pick_from_all(&c, n_dir, name, &found, err);
    if (status == MW_OK)
        status = mw_alloy_load(found->path, out, err);
    if (status == MW_NOT_FOUND)
        status = not_found(&c, name, dirs, n_dir, err);
    free_catalogue(&c);
    return status;
}

mw_status mw_alloy_names(const char *const dirs[], size_t n_dir, char ***names, size_t *n, mw_error *err)
{
    catalogue c = {0};
    mw_status status = MW_OK;
    *names = NULL;
    *n = 0;
    for (size_t i = 0; i < n_dir && status == MW_OK; i++)
        status = add_folder(&c, dirs[i], i, err);
    for (size_t i = 0; i < c.n && status == MW_OK; i++) {
        bool known = false;
        for (size_t j = 0; j < *n && !known; j++)
            known = strcmp((*names)[j], c.item[i].name) == 0;
        if (!known && !append(names, n, c.item[i].name))
            status = no_memory(err);
    }
    if (status == MW_OK && *n > 0)
        qsort(*names, *n, sizeof **names, by_bytes);
    if (status != MW_OK) {
        mw_names_free(*names, *n);
        *names = NULL;
        *n = 0;
    }
    free_catalogue(&c);
    return status;
}
