/* SPDX-License-Identifier: GPL-3.0-or-later
 * PLplot's cairo drivers behind a small page interface. */
#define _POSIX_C_SOURCE 200809L
#include "present/map_canvas.h"

#include <math.h>
#include <plplot.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

static const char *const endings[] = {".png", ".svg", ".pdf"};
static const char *const drivers[] = {"pngcairo", "svgcairo", "pdfcairo"};

mw_picture_format mw_picture_format_of(const char *path)
{
    const char *dot = strrchr(path, '.');
    for (int f = 0; dot != NULL && f < MW_PICTURE_UNKNOWN; f++)
        if (strcasecmp(dot, endings[f]) == 0 && dot != path && dot[-1] != '/')
            return (mw_picture_format)f;
    return MW_PICTURE_UNKNOWN;
}

/* ---- opening and closing --------------------------------------------------------------------------------------- */

/* PLplot ends the program when it cannot go on; a library must not. Its exit hook jumps back here instead. */
static jmp_buf way_out;
static char reason[256];
/* Where PLplot writes what it would otherwise print: it wants at least 160 bytes. */
static PLINT error_code;
static char error_text[512];

static int leave(const char *text)
{
    (void)snprintf(reason, sizeof reason, "%s", text);
    longjmp(way_out, 1);
}

static void note(const char *text)
{
    if (reason[0] == '\0')
        (void)snprintf(reason, sizeof reason, "%s", text);
}

static bool driver_there(const char *name)
{
    enum { ROOM = 256 };
    const char *menu_room[ROOM] = {NULL}, *device_room[ROOM] = {NULL}, **menu = menu_room, **device = device_room;
    int n = ROOM;
    plgFileDevs(&menu, &device, &n);
    bool there = false;
    for (int i = 0; i < n && device[i] != NULL; i++)
        there = there || strcmp(device[i], name) == 0;
    return there;
}

static void open_page(mw_picture_format format, const char *path, mw_canvas *c)
{
    /* Vector pages are half as many points, so that a page unit is a convenient 1/144 inch on paper. */
    const double scale = format == MW_PICTURE_PNG ? 1 : 0.5;
    plsdev(drivers[format]);
    plsfnam(path);
    plspage(format == MW_PICTURE_PNG ? 96 : 72, format == MW_PICTURE_PNG ? 96 : 72, (PLINT)lrint(c->width * scale),
            (PLINT)lrint(c->height * scale), 0, 0);
    plscolbg(255, 255, 255);
    plinit();
    pladv(0);
    plvpor(0, 1, 0, 1);
    plwind(0, c->width, 0, c->height);
    PLFLT left, right, bottom, top;
    plgspa(&left, &right, &bottom, &top);
    /* PLplot's character height makes letters whose em is 4/3 of it (measured, the same in all three drivers). */
    c->mm_per_unit = 0.75 * (right - left) / c->width;
    c->stroke_per_unit = scale;
}

mw_status mw_canvas_run(mw_picture_format format, const char *path, double width, double height,
                        void (*draw)(const mw_canvas *canvas, void *what), void *what, mw_error *err)
{
    static mw_canvas canvas; /* static: keeps its value over longjmp */
    canvas = (mw_canvas){.width = width, .height = height};
    reason[0] = '\0';
    plsexit(leave);
    plsabort(note);
    plsError(&error_code, error_text);
    if (setjmp(way_out) == 0) {
        if (!driver_there(drivers[format])) {
            (void)snprintf(reason, sizeof reason, "the %s driver is not installed", drivers[format]);
        } else {
            PLINT stream;
            plmkstrm(&stream); /* leaves a stream of the calling program alone */
            plsError(&error_code, error_text);
            open_page(format, path, &canvas);
            draw(&canvas, what);
            plend1();
        }
    }
    plsexit(NULL);
    plsabort(NULL);
    plsError(NULL, NULL);
    if (reason[0] != '\0')
        return mw_fail(err, MW_CANNOT_WRITE, NULL, 0, "PLplot cannot draw the picture: %s", reason);
    return MW_OK;
}

/* ---- lines and areas ------------------------------------------------------------------------------------------- */

static void pen(const mw_canvas *c, double stroke, mw_colour colour)
{
    plscol0(1, colour.r, colour.g, colour.b);
    plcol0(1);
    plwidth(stroke * c->stroke_per_unit);
}

void mw_canvas_line(const mw_canvas *c, size_t n, const double x[], const double y[], double stroke, mw_colour colour)
{
    if (n < 2)
        return;
    pen(c, stroke, colour);
    plline((PLINT)n, x, y);
}

void mw_canvas_dashes(const mw_canvas *c, size_t n, const double x[], const double y[], double stroke, double on, double off,
                      mw_colour colour)
{
    enum { MOST_POINTS = 64 };
    double dx[MOST_POINTS], dy[MOST_POINTS];
    size_t m = 0;
    double left = on; /* of the present dash or gap */
    bool down = true;
    for (size_t i = 0; i + 1 < n; i++) {
        const double length = hypot(x[i + 1] - x[i], y[i + 1] - y[i]);
        double at = 0;
        if (down && m == 0) {
            dx[m] = x[i];
            dy[m++] = y[i];
        }
        while (length - at > left) {
            at += left;
            dx[m] = x[i] + at / length * (x[i + 1] - x[i]);
            dy[m++] = y[i] + at / length * (y[i + 1] - y[i]);
            if (down) {
                mw_canvas_line(c, m, dx, dy, stroke, colour);
                m = 0;
            }
            down = !down;
            left = down ? on : off;
        }
        left -= length - at;
        if (down && m < MOST_POINTS - 1) {
            dx[m] = x[i + 1];
            dy[m++] = y[i + 1];
        }
    }
    if (down)
        mw_canvas_line(c, m, dx, dy, stroke, colour);
}

void mw_canvas_fill(const mw_canvas *c, size_t n, const double x[], const double y[], mw_colour colour)
{
    if (n < 3)
        return;
    pen(c, 0, colour);
    plpsty(0);
    plfill((PLINT)n, x, y);
}

void mw_canvas_box(const mw_canvas *c, double x0, double y0, double x1, double y1, mw_colour colour)
{
    mw_canvas_fill(c, 4, (const double[]){x0, x1, x1, x0}, (const double[]){y0, y0, y1, y1}, colour);
}

void mw_canvas_frame(const mw_canvas *c, double x0, double y0, double x1, double y1, double stroke, mw_colour colour)
{
    mw_canvas_line(c, 6, (const double[]){x0, x1, x1, x0, x0, x1}, (const double[]){y0, y0, y1, y1, y0, y0}, stroke, colour);
}

enum { CIRCLE_POINTS = 20 };

static void circle_points(double x, double y, double radius, double px[], double py[])
{
    for (int i = 0; i <= CIRCLE_POINTS; i++) {
        const double a = 2 * 3.14159265358979323846 * (i % CIRCLE_POINTS) / CIRCLE_POINTS;
        px[i] = x + radius * cos(a);
        py[i] = y + radius * sin(a);
    }
}

void mw_canvas_disc(const mw_canvas *c, double x, double y, double radius, mw_colour colour)
{
    double px[CIRCLE_POINTS + 1], py[CIRCLE_POINTS + 1];
    circle_points(x, y, radius, px, py);
    mw_canvas_fill(c, CIRCLE_POINTS, px, py, colour);
}

void mw_canvas_circle(const mw_canvas *c, double x, double y, double radius, double stroke, mw_colour colour)
{
    double px[CIRCLE_POINTS + 1], py[CIRCLE_POINTS + 1];
    circle_points(x, y, radius, px, py);
    mw_canvas_line(c, CIRCLE_POINTS + 1, px, py, stroke, colour);
}

/* ---- text ------------------------------------------------------------------------------------------------------ */

enum { TEXT_ROOM = 1024 };

static bool continues(unsigned char byte)
{
    return (byte & 0xC0) == 0x80;
}

/* Length of the well-formed UTF-8 character at s, 0 when it is none. */
static size_t utf8_length(const char *s)
{
    const unsigned char b = (unsigned char)s[0];
    const size_t n = b < 0x80 ? 1 : b >= 0xC2 && b < 0xE0 ? 2 : b >= 0xE0 && b < 0xF0 ? 3 : b >= 0xF0 && b < 0xF5 ? 4 : 0;
    for (size_t i = 1; i < n; i++)
        if (!continues((unsigned char)s[i]))
            return 0;
    return n;
}

/* '#' starts an escape in PLplot and "##" is the character; control characters and broken UTF-8 become '?'. */
static void escape(const char *text, char out[TEXT_ROOM])
{
    size_t n = 0;
    while (*text != '\0' && n + 6 < TEXT_ROOM) {
        const size_t length = utf8_length(text);
        if (length == 0 || (unsigned char)*text < 0x20 || *text == 0x7F) {
            out[n++] = '?';
            text++;
            continue;
        }
        if (*text == '#')
            out[n++] = '#';
        memcpy(out + n, text, length);
        n += length;
        text += length;
    }
    out[n] = '\0';
}

void mw_canvas_text(const mw_canvas *c, double x, double y, const mw_text_style *style, const char *text)
{
    char shown[TEXT_ROOM];
    escape(text, shown);
    if (shown[0] == '\0')
        return;
    pen(c, 1, style->colour);
    plsfont(PL_FCI_SANS, PL_FCI_UPRIGHT, style->bold ? PL_FCI_BOLD : PL_FCI_MEDIUM);
    plschr(style->size * c->mm_per_unit, 1);
    plptex(x, y, style->upward ? 0 : 1, style->upward ? 1 : 0, style->anchor, shown);
}

/* Advance widths of a wide sans-serif face (DejaVu Sans), in classes; measured, in em. */
double mw_text_width(const char *text, bool bold)
{
    static const struct {
        const char *letters;
        double em;
    } classes[] = {
        {"ijlI|'", 0.29}, {" .,:;!/", 0.33}, {"frt()[]-\"*", 0.41},       {"szJcxkvy?L", 0.57},
        {"mMW@%", 0.97},  {"w=+<>~", 0.83},  {"ABCDEGHKNOQRUVX&#", 0.72},
    };
    double sum = 0;
    for (const char *p = text; *p != '\0'; p++) {
        if (continues((unsigned char)*p))
            continue;
        double em = 0.635;
        for (size_t k = 0; k < sizeof classes / sizeof classes[0]; k++)
            if (strchr(classes[k].letters, *p) != NULL)
                em = classes[k].em;
        sum += em;
    }
    return bold ? 1.11 * sum : sum;
}
