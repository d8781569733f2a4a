/* SPDX-License-Identifier: GPL-3.0-or-later
 * A picture as a file: drawn to a temporary, dates and counters taken out, moved into place. */
#define _POSIX_C_SOURCE 200809L
#include "present/picture.h"

#include <ctype.h>
#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

#include "base/file.h"

enum { MOST_FILE_BYTES = 1 << 28 };

/* ---- same picture, same bytes ---------------------------------------------------------------------------------- */

/* "/CreationDate (D:...)" becomes blanks: optional by the PDF standard, and of the same length, so all offsets stay. */
static void blank_pdf_date(char *bytes, size_t n)
{
    static const char key[] = "/CreationDate (";
    for (size_t i = 0; i + sizeof key < n; i++) {
        if (memcmp(bytes + i, key, sizeof key - 1) != 0)
            continue;
        const char *end = memchr(bytes + i, ')', n - i);
        if (end != NULL)
            memset(bytes + i, ' ', (size_t)(end - (bytes + i)) + 1);
    }
}

/* The drawing library numbers its surfaces over the life of the process ("surface7"): the number is dropped. It writes
 * six decimals of a point, of which two (3 um on paper) are kept. Text is drawn as outlines, so nothing the user wrote can
 * be hit. Returns the new length. */
static size_t plain_svg(char *bytes, size_t n)
{
    static const char key[] = "\"surface";
    size_t to = 0;
    for (size_t i = 0; i < n;) {
        if (i + sizeof key < n && memcmp(bytes + i, key, sizeof key - 1) == 0) {
            memmove(bytes + to, bytes + i, sizeof key - 1);
            to += sizeof key - 1;
            i += sizeof key - 1;
            while (i < n && isdigit((unsigned char)bytes[i]))
                i++;
        } else if (bytes[i] == '.' && i > 0 && isdigit((unsigned char)bytes[i - 1])) {
            for (size_t digits = 0; i < n && (digits == 0 || isdigit((unsigned char)bytes[i])); i++, digits++)
                if (digits < 3)
                    bytes[to++] = bytes[i];
        } else {
            bytes[to++] = bytes[i++];
        }
    }
    return to;
}

/* The drawing library does not report a full disk; each format ends in a mark of its own. */
static bool complete(mw_picture_format format, const char *bytes, size_t n)
{
    static const char *const last[] = {"IEND\xae\x42\x60\x82", "</svg>", "%%EOF"};
    while (format != MW_PICTURE_PNG && n > 0 && isspace((unsigned char)bytes[n - 1]))
        n--;
    const size_t length = strlen(last[format]);
    return n >= length && memcmp(bytes + n - length, last[format], length) == 0;
}

/* PLplot has written to the temporary by name; what is final goes in through the stream that has been open on it. */
static mw_status settle_bytes(mw_picture_format format, mw_file_out *out, mw_error *err)
{
    char *bytes = NULL;
    size_t n = 0;
    mw_status status = mw_file_read(out->temporary, MOST_FILE_BYTES, &bytes, &n, err);
    if (status == MW_OK && !complete(format, bytes, n))
        status = mw_fail(err, MW_CANNOT_WRITE, out->path, 0, "only a part of the picture could be written; is the disk full?");
    if (status == MW_OK && format == MW_PICTURE_PDF)
        blank_pdf_date(bytes, n);
    if (status == MW_OK && format == MW_PICTURE_SVG)
        n = plain_svg(bytes, n);
    if (status == MW_OK && (ftruncate(fileno(out->stream), 0) != 0 || fwrite(bytes, 1, n, out->stream) != n))
        status = mw_fail(err, MW_CANNOT_WRITE, out->path, 0, "writing failed: %s", strerror(errno));
    free(bytes);
    return status;
}

/* ---- drawing --------------------------------------------------------------------------------------------------- */

typedef struct sheet {
    double width, height;
    void (*draw)(const mw_canvas *canvas, void *what);
    void *what;
} sheet;

/* The PDF's date is blanked afterwards, but its length depends on the time zone: draw in UTC, and put the zone back. */
static mw_status run_in_utc(mw_picture_format format, const mw_file_out *out, const sheet *s, mw_error *err)
{
    const char *const zone = getenv("TZ");
    char *const kept = zone != NULL ? strdup(zone) : NULL;
    if (zone != NULL && kept == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory for a picture");
    (void)setenv("TZ", "UTC0", 1);
    tzset();
    const mw_status status = mw_canvas_run(format, out->temporary, s->width, s->height, s->draw, s->what, err);
    if (kept != NULL)
        (void)setenv("TZ", kept, 1);
    else
        (void)unsetenv("TZ");
    tzset();
    free(kept);
    return status;
}

mw_status mw_picture_allowed(const char *path, bool overwrite, mw_error *err)
{
    mw_file_out out = {0};
    if (mw_picture_format_of(path) == MW_PICTURE_UNKNOWN)
        return mw_fail(err, MW_BAD_USAGE, path, 0, "the ending must say the kind of picture: .png, .svg or .pdf");
    const mw_status status = mw_file_create(path, overwrite, &out, err);
    mw_file_discard(&out);
    return status;
}

mw_status mw_picture_write(const char *path, bool overwrite, double width, double height, void (*draw)(const mw_canvas *canvas, void *what), void *what,
                           mw_error *err)
{
    const mw_picture_format format = mw_picture_format_of(path);
    const sheet s = {width, height, draw, what};
    mw_file_out out = {0};
    mw_status status = mw_file_create(path, overwrite, &out, err);
    if (status == MW_OK)
        status = run_in_utc(format, &out, &s, err);
    if (status == MW_OK)
        status = settle_bytes(format, &out, err);
    if (status == MW_OK)
        status = mw_file_commit(&out, err);
    mw_file_discard(&out);
    return status;
}
