/* SPDX-License-Identifier: GPL-3.0-or-later
 * For tests of alloy cards: the good card as text, and copies of it with one text replaced. */
#ifndef MELTWRIGHT_TEST_CARD_TEXT_H
#define MELTWRIGHT_TEST_CARD_TEXT_H

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

#include "base/file.h"

static char *plain; /* the good card */
static size_t plain_size;

static int read_plain(void **state)
{
    (void)state;
    return mw_file_read("tests/data/cards/plain.json", 1 << 20, &plain, &plain_size, NULL) != MW_OK;
}

static int free_plain(void **state)
{
    (void)state;
    free(plain);
    return 0;
}

/* The text with the first `find` replaced. */
static char *edited(const char *text, const char *find, const char *replace)
{
    const char *at = strstr(text, find);
    if (at == NULL)
        fail_msg("the card has no text %s", find);
    char *out = malloc(strlen(text) + strlen(replace) + 1);
    assert_non_null(out);
    (void)sprintf(out, "%.*s%s%s", (int)(at - text), text, replace, at + strlen(find));
    return out;
}

#endif
