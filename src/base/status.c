/* SPDX-License-Identifier: GPL-3.0-or-later
 * Words and sentences of the status list, and the writer of error lines. */
#include "meltwright/status.h"

#include <stdarg.h>
#include <stdio.h>

#include "meltwright/version.h"

const char *mw_version(void)
{
    return MW_VERSION;
}

const char *mw_status_word(mw_status status)
{
    switch (status) {
#define X(name, number, word, sentence)                                                                                \
    case MW_##name:                                                                                                    \
        return word;
        MW_STATUS_LIST(X)
#undef X
    }
    return "unknown";
}

const char *mw_status_sentence(mw_status status)
{
    switch (status) {
#define X(name, number, word, sentence)                                                                                \
    case MW_##name:                                                                                                    \
        return sentence;
        MW_STATUS_LIST(X)
#undef X
    }
    return "unknown";
}

/* Length of the valid UTF-8 character that starts at s, or 0. */
static size_t utf8_length(const unsigned char *s)
{
    size_t n;
    if (s[0] < 0x80)
        return 1;
    if (s[0] >= 0xC2 && s[0] <= 0xDF)
        n = 2;
    else if (s[0] >= 0xE0 && s[0] <= 0xEF)
        n = 3;
    else if (s[0] >= 0xF0 && s[0] <= 0xF4)
        n = 4;
    else
        return 0;
    for (size_t i = 1; i < n; i++)
        if ((s[i] & 0xC0) != 0x80)
            return 0;
    return n;
}

/* One line that a terminal can show: control characters (C0, DEL, C1), and broken UTF-8, become '?'. */
static void make_printable(char *text)
{
    for (unsigned char *s = (unsigned char *)text; *s != '\0';) {
        const size_t n = utf8_length(s);
        const int control = s[0] < 0x20 || s[0] == 0x7F || (s[0] == 0xC2 && n == 2 && s[1] < 0xA0);
        if (n == 0 || (control && n == 1)) {
            *s++ = '?';
        } else if (control) {
            *s++ = '?';
            *s++ = '?';
        } else {
            s += n;
        }
    }
}

mw_status mw_fail(mw_error *err, mw_status status, const char *file, long line, const char *format, ...)
{
    if (err == NULL)
        return status;
    err->status = status;
    size_t used = 0;
    const size_t size = sizeof err->text;
    if (file != NULL) {
        /* A very long path must not push the message out of the buffer: keep its tail. */
        size_t length = 0;
        while (file[length] != '\0')
            length++;
        const size_t most = size / 3;
        const char *shown = length > most ? file + (length - most) : file;
        const char *dots = length > most ? "..." : "";
        const int n = line > 0 ? snprintf(err->text, size, "%s%s:%ld: ", dots, shown, line)
                               : snprintf(err->text, size, "%s%s: ", dots, shown);
        if (n > 0)
            used = (size_t)n;
    }
    va_list args;
    va_start(args, format);
    (void)vsnprintf(err->text + used, size - used, format, args);
    va_end(args);
    make_printable(err->text);
    return status;
}
