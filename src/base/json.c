/* SPDX-License-Identifier: GPL-3.0-or-later
 * A strict pass over the text (form, lines), then cJSON for the tree, then lines and duplicate keys into the tree.
 * Grammar: RFC 8259. */
#include "base/json.h"

#include <ctype.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

#include "base/file.h"
#include "meltwright/text.h"

/* Walks the text once. Lines of values are collected in document order, which is the order cJSON keeps. */
typedef struct scanner {
    const char *name, *at, *end;
    long line;
    int depth;
    long *value_line; /* grows */
    size_t n_value, room;
    mw_error *err;
} scanner;

static bool scan_value(scanner *s);

static bool complain(scanner *s, const char *what)
{
    if (s->at >= s->end)
        (void)mw_fail(s->err, MW_BAD_FILE, s->name, s->line, "%s, but the file ends", what);
    else
        (void)mw_fail(s->err, MW_BAD_FILE, s->name, s->line, "%s, found '%.*s'", what,
                      s->end - s->at < 12 ? (int)(s->end - s->at) : 12, s->at);
    return false;
}

static void skip_blanks(scanner *s)
{
    for (; s->at < s->end && (*s->at == ' ' || *s->at == '\t' || *s->at == '\r' || *s->at == '\n'); s->at++)
        s->line += *s->at == '\n';
}

static bool note_line(scanner *s)
{
    if (s->n_value == s->room) {
        s->room = s->room == 0 ? 256 : s->room * 2;
        long *larger = realloc(s->value_line, s->room * sizeof *larger);
        if (larger == NULL) {
            (void)mw_fail(s->err, MW_NO_MEMORY, s->name, 0, "out of memory");
            return false;
        }
        s->value_line = larger;
    }
    s->value_line[s->n_value++] = s->line;
    return true;
}

/* Bytes of the well-formed UTF-8 character at p (RFC 3629: no overlong form, no surrogate), or 0. */
static size_t utf8_character(const unsigned char *p, const unsigned char *end)
{
    static const struct { unsigned char lo, hi, second_lo, second_hi; size_t n; } form[] = {
        {0x20, 0x7F, 0, 0, 1},       {0xC2, 0xDF, 0x80, 0xBF, 2}, {0xE0, 0xE0, 0xA0, 0xBF, 3},
        {0xE1, 0xEC, 0x80, 0xBF, 3}, {0xED, 0xED, 0x80, 0x9F, 3}, {0xEE, 0xEF, 0x80, 0xBF, 3},
        {0xF0, 0xF0, 0x90, 0xBF, 4}, {0xF1, 0xF3, 0x80, 0xBF, 4}, {0xF4, 0xF4, 0x80, 0x8F, 4}};
    for (size_t i = 0; i < sizeof form / sizeof *form; i++) {
        if (p[0] < form[i].lo || p[0] > form[i].hi)
            continue;
        if ((size_t)(end - p) < form[i].n || (form[i].n > 1 && (p[1] < form[i].second_lo || p[1] > form[i].second_hi)))
            return 0;
        for (size_t j = 2; j < form[i].n; j++)
            if ((p[j] & 0xC0) != 0x80)
                return 0;
        return form[i].n;
    }
    return 0;
}

static bool scan_escape(scanner *s)
{
    s->at++;
    if (s->at < s->end && *s->at == 'u') {
        for (int i = 0; i < 4; i++)
            if (++s->at >= s->end || !isxdigit((unsigned char)*s->at))
                return complain(s, "four hex digits expected after \\u");
        /* \u0000 would cut the C string short and hide what follows. */
        if (memcmp(s->at - 3, "0000", 4) == 0)
            return complain(s, "\\u0000 is not allowed in a text");
        s->at++;
        return true;
    }
    if (s->at >= s->end || strchr("\"\\/bfnrt", *s->at) == NULL)
        return complain(s, "unknown escape in a text");
    s->at++;
    return true;
}

static bool scan_string(scanner *s)
{
    if (s->at >= s->end || *s->at != '"')
        return complain(s, "a text in double quotes is expected");
    s->at++;
    while (s->at < s->end && *s->at != '"') {
        if (*s->at == '\\') {
            if (!scan_escape(s))
                return false;
            continue;
        }
        const size_t n = utf8_character((const unsigned char *)s->at, (const unsigned char *)s->end);
        if (n == 0)
            return (unsigned char)*s->at < 0x20 ? complain(s, "a control character or a line end inside a text")
                                                : complain(s, "bytes that are not UTF-8");
        s->at += n;
    }
    if (s->at >= s->end)
        return complain(s, "a closing double quote is expected");
    s->at++;
    return true;
}

static bool scan_digits(scanner *s)
{
    if (s->at >= s->end || !isdigit((unsigned char)*s->at))
        return complain(s, "a digit is expected");
    while (s->at < s->end && isdigit((unsigned char)*s->at))
        s->at++;
    return true;
}

static bool scan_number(scanner *s)
{
    const char *start = s->at;
    if (*s->at == '-')
        s->at++;
    if (s->at < s->end && *s->at == '0') {
        s->at++;
        if (s->at < s->end && isdigit((unsigned char)*s->at))
            return complain(s, "a number must not start with 0 before other digits");
    } else if (!scan_digits(s)) {
        return false;
    }
    if (s->at < s->end && *s->at == '.') {
        s->at++;
        if (!scan_digits(s))
            return false;
    }
    if (s->at < s->end && (*s->at == 'e' || *s->at == 'E')) {
        s->at++;
        if (s->at < s->end && (*s->at == '+' || *s->at == '-'))
            s->at++;
        if (!scan_digits(s))
            return false;
    }
    double value;
    if (!mw_read_number(start, (size_t)(s->at - start), &value)) {
        s->at = start;
        return complain(s, "a number that fits a double is expected");
    }
    return true;
}

static bool scan_members(scanner *s, char close, bool keys)
{
    if (++s->depth > MW_JSON_DEEPEST)
        return complain(s, "nested too deep (32 levels are allowed)");
    s->at++;
    skip_blanks(s);
    if (s->at < s->end && *s->at == close) {
        s->at++;
        s->depth--;
        return true;
    }
    for (long n = 1;; n++) {
        skip_blanks(s);
        if (keys && n > MW_JSON_MOST_KEYS)
            return complain(s, "more than 1000 keys in one object");
        if (keys && !scan_string(s))
            return false;
        skip_blanks(s);
        if (keys && (s->at >= s->end || *s->at != ':'))
            return complain(s, "a colon is expected after the key");
        s->at += keys;
        if (!scan_value(s))
            return false;
        skip_blanks(s);
        if (s->at < s->end && *s->at == ',') {
            s->at++;
            continue;
        }
        if (s->at >= s->end || *s->at != close)
            return complain(s, keys ? "a comma or } is expected" : "a comma or ] is expected");
        s->at++;
        s->depth--;
        return true;
    }
}

static bool scan_value(scanner *s)
{
    skip_blanks(s);
    if (!note_line(s))
        return false;
    if (s->at >= s->end)
        return complain(s, "a value is expected");
    if (*s->at == '{')
        return scan_members(s, '}', true);
    if (*s->at == '[')
        return scan_members(s, ']', false);
    if (*s->at == '"')
        return scan_string(s);
    if (*s->at == '-' || isdigit((unsigned char)*s->at))
        return scan_number(s);
    static const char *const word[] = {"true", "false", "null"};
    for (size_t i = 0; i < 3; i++) {
        const size_t n = strlen(word[i]);
        if ((size_t)(s->end - s->at) >= n && memcmp(s->at, word[i], n) == 0) {
            s->at += n;
            return true;
        }
    }
    return complain(s, "a value is expected");
}

/* Gives each node its line and refuses a key that stands twice. */
static mw_status annotate(scanner *s, cJSON *node, size_t *next)
{
    node->valueint = (int)s->value_line[(*next)++];
    for (cJSON *child = node->child; child != NULL; child = child->next) {
        for (cJSON *other = node->child; child->string != NULL && other != child; other = other->next)
            if (strcmp(other->string, child->string) == 0)
                return mw_fail(s->err, MW_BAD_FILE, s->name, s->value_line[*next],
                               "key \"%s\" stands twice; the first is on line %d", child->string, other->valueint);
        const mw_status status = annotate(s, child, next);
        if (status != MW_OK)
            return status;
    }
    return MW_OK;
}

mw_status mw_json_parse(const char *name, const char *bytes, size_t n, mw_json *out, mw_error *err)
{
    scanner s = {name, bytes, bytes + n, 1, 0, NULL, 0, 0, err};
    mw_status status = MW_BAD_FILE;
    out->root = NULL;
    mw_hash_text(bytes, n, out->hash);
    if (n >= 3 && memcmp(bytes, "\xEF\xBB\xBF", 3) == 0) {
        status = mw_fail(err, MW_BAD_FILE, name, 1, "starts with a byte order mark; save it as UTF-8 without one");
        goto done;
    }
    if (!scan_value(&s)) {
        status = err != NULL ? err->status : MW_BAD_FILE;
        goto done;
    }
    skip_blanks(&s);
    if (s.at < s.end) {
        (void)complain(&s, "nothing more is expected after the closing bracket");
        goto done;
    }
    out->root = cJSON_ParseWithLength(bytes, n);
    if (out->root == NULL) {
        status = mw_fail(err, MW_BAD_FILE, name, 0, "cannot be taken in as JSON (a lone surrogate in a \\u escape, or out of memory)");
        goto done;
    }
    size_t next = 0;
    status = annotate(&s, out->root, &next);
    if (status != MW_OK)
        mw_json_free(out);
done:
    free(s.value_line);
    return status;
}

mw_status mw_json_read(const char *path, mw_json *out, mw_error *err)
{
    char *bytes = NULL;
    size_t n = 0;
    out->root = NULL;
    mw_status status = mw_file_read(path, MW_JSON_MOST_BYTES, &bytes, &n, err);
    if (status == MW_OK)
        status = mw_json_parse(path, bytes, n, out, err);
    free(bytes);
    return status;
}

void mw_json_free(mw_json *json)
{
    cJSON_Delete(json->root);
    json->root = NULL;
}

long mw_json_line(const cJSON *node)
{
    return node->valueint;
}
