/* SPDX-License-Identifier: GPL-3.0-or-later
 * A picture as a file that appears whole or not at all, with the same bytes for the same drawing. */
#ifndef MELTWRIGHT_PRESENT_PICTURE_H
#define MELTWRIGHT_PRESENT_PICTURE_H

#include "present/map_canvas.h"

/* Whether a picture may be written there, before any work is done. Errors: MW_BAD_USAGE (ending), those of the file. */
mw_status mw_picture_allowed(const char *path, bool overwrite, mw_error *err);

/* Draws a page of width x height units; the ending of `path` chooses the format. Not thread-safe. Errors: MW_CANNOT_WRITE and others of the
 * file, MW_NO_MEMORY. */
mw_status mw_picture_write(const char *path, bool overwrite, double width, double height, void (*draw)(const mw_canvas *canvas, void *what), void *what,
                           mw_error *err);

#endif
