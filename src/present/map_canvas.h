/* SPDX-License-Identifier: GPL-3.0-or-later
 * A page to draw on: the only place that talks to PLplot. Units are those of the page (y upward), about a pixel of the PNG. */
#ifndef MELTWRIGHT_PRESENT_MAP_CANVAS_H
#define MELTWRIGHT_PRESENT_MAP_CANVAS_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/status.h"

typedef struct mw_colour {
    unsigned char r, g, b;
} mw_colour;

typedef struct mw_canvas {
    double width, height;
    double mm_per_unit;     /* for the height of letters */
    double stroke_per_unit; /* for the width of lines */
} mw_canvas;

typedef struct mw_text_style {
    double size;   /* em, page units */
    double anchor; /* 0 starts at the point, 0.5 is centred on it, 1 ends there */
    bool bold;
    bool upward; /* runs from bottom to top */
    mw_colour colour;
} mw_text_style;

typedef enum mw_picture_format { MW_PICTURE_PNG, MW_PICTURE_SVG, MW_PICTURE_PDF, MW_PICTURE_UNKNOWN } mw_picture_format;

/* By the ending, in small or capital letters. */
mw_picture_format mw_picture_format_of(const char *path);

/* Opens a page on `path`, calls `draw`, closes. Errors: MW_CANNOT_WRITE (PLplot cannot do it, with its reason). */
mw_status mw_canvas_run(mw_picture_format format, const char *path, double width, double height,
                        void (*draw)(const mw_canvas *canvas, void *what), void *what, mw_error *err);

void mw_canvas_line(const mw_canvas *c, size_t n, const double x[], const double y[], double stroke, mw_colour colour);
void mw_canvas_dashes(const mw_canvas *c, size_t n, const double x[], const double y[], double stroke, double on, double off,
                      mw_colour colour);
/* Even-odd fill of one closed path. */
void mw_canvas_fill(const mw_canvas *c, size_t n, const double x[], const double y[], mw_colour colour);
void mw_canvas_box(const mw_canvas *c, double x0, double y0, double x1, double y1, mw_colour colour);
void mw_canvas_frame(const mw_canvas *c, double x0, double y0, double x1, double y1, double stroke, mw_colour colour);
void mw_canvas_disc(const mw_canvas *c, double x, double y, double radius, mw_colour colour);
void mw_canvas_circle(const mw_canvas *c, double x, double y, double radius, double stroke, mw_colour colour);
/* Text centred in height on y. What PLplot would take for an escape is shown as it stands. */
void mw_canvas_text(const mw_canvas *c, double x, double y, const mw_text_style *style, const char *text);

/* Estimated width of a text of size 1. Errs on the wide side for the usual sans-serif fonts. */
double mw_text_width(const char *text, bool bold);

#endif
