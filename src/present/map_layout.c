/* SPDX-License-Identifier: GPL-3.0-or-later
 * Page arithmetic: panel grid, text lines, legend rows. Nothing is drawn here. */
#include "present/map_layout.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "present/map_panel.h"

enum {
    EDGE = 36,
    KEY_SIGN = 56,
    KEY_GAP = 14,
    KEY_APART = 44,
    KEY_ROW = 46,
    TITLE_STEP = 56,
    TEXT_STEP = 36,
    TICKS = 50,
    AXIS = 50,
    KEYS_ABOVE = 26
};

/* ---- text lines ------------------------------------------------------------------------------------------------ */

static void add_line(mw_map_page *page, const char *text, size_t n, double size, bool bold)
{
    if (page->n_line == MW_PAGE_LINES)
        return;
    mw_page_line *l = &page->line[page->n_line++];
    *l = (mw_page_line){.size = size, .bold = bold};
    if (n > sizeof l->text - 1)
        n = sizeof l->text - 1;
    memcpy(l->text, text, n);
    l->text[n] = '\0';
}

static double width_of(const char *text, size_t n, double size, bool bold)
{
    char part[MW_PAGE_LINE_BYTES];
    if (n > sizeof part - 1)
        n = sizeof part - 1;
    memcpy(part, text, n);
    part[n] = '\0';
    return mw_text_width(part, bold) * size;
}

/* Breaks at blanks so that each line fits; a word that is too long alone stays whole on a line of smaller letters. */
static void add_wrapped(mw_map_page *page, const char *text, double size, bool bold, double room)
{
    while (text != NULL && *text != '\0') {
        size_t take = 0;
        for (size_t at = 0;; at++) {
            if (text[at] != ' ' && text[at] != '\0')
                continue;
            if (take > 0 && width_of(text, at, size, bold) > room)
                break;
            take = at;
            if (text[at] == '\0')
                break;
        }
        if (take == 0)
            take = strlen(text);
        const double w = width_of(text, take, size, bold);
        add_line(page, text, take, w > room ? size * room / w : size, bold);
        text += take;
        while (*text == ' ')
            text++;
    }
}

/* ---- panel grid ------------------------------------------------------------------------------------------------ */

static bool same(double a, double b)
{
    return fabs(a - b) <= 1e-9 * fabs(b);
}

/* Index of panel k's value among the different ones, in order of first appearance. */
static size_t rank(const mw_map_picture *p, size_t k, bool layer, size_t *count)
{
    double seen[MW_MAP_MOST_PANELS];
    size_t n = 0, at = 0;
    for (size_t i = 0; i < p->n_panel; i++) {
        const double v = layer ? p->panels[i].layer_um : p->panels[i].hatch_um;
        size_t j = 0;
        while (j < n && !same(seen[j], v))
            j++;
        if (j == n)
            seen[n++] = v;
        if (i == k)
            at = j;
    }
    *count = n;
    return at;
}

/* Hatches across and layers down when the panels fill such a table, else rows of about equal length. */
static void arrange(const mw_map_picture *p, mw_map_page *page, size_t column[], size_t row[])
{
    enum { MOST_COLUMNS = 4 };
    size_t hatches = 1, layers = 1;
    bool taken[MW_MAP_MOST_PANELS][MW_MAP_MOST_PANELS] = {{false}}, table = true;
    for (size_t k = 0; k < p->n_panel; k++) {
        column[k] = rank(p, k, false, &hatches);
        row[k] = rank(p, k, true, &layers);
        table = table && !taken[row[k]][column[k]];
        taken[row[k]][column[k]] = true;
    }
    table = table && hatches * layers == p->n_panel && hatches <= MOST_COLUMNS &&
            (hatches > 1 || layers <= 2); /* a tall single column wastes the page */
    page->columns = table ? hatches : (size_t)ceil(sqrt((double)p->n_panel));
    page->rows = table ? layers : (p->n_panel + page->columns - 1) / page->columns;
    for (size_t k = 0; k < p->n_panel && !table; k++) {
        column[k] = k % page->columns;
        row[k] = k / page->columns;
    }
}

/* ---- legend ---------------------------------------------------------------------------------------------------- */

static void add_key(mw_map_page *page, enum mw_key_kind kind, size_t which, const char *text)
{
    if (page->n_key == MW_PAGE_KEYS)
        return;
    mw_page_key *k = &page->key[page->n_key++];
    *k = (mw_page_key){.kind = kind, .which = which};
    (void)snprintf(k->text, sizeof k->text, "%s", text);
}

static void collect_keys(const mw_map_picture *p, const mw_map_scene scene[], mw_map_page *page)
{
    for (size_t r = 0; r < MW_REGION_COUNT; r++)
        for (size_t k = 0; k < p->n_panel; k++)
            if (scene[k].region[r].n_ring > 0 || r == MW_REGION_NOMINAL) {
                add_key(page, MW_KEY_REGION, r, mw_region_styles[r].long_name);
                break;
            }
    for (size_t k = 0; k < p->n_panel; k++)
        if (scene[k].balling.n_ring > 0) {
            add_key(page, MW_KEY_BALLING, 0, "balling limit, ticks toward balling");
            break;
        }
    if (p->n_energy > 0)
        add_key(page, MW_KEY_ENERGY, 0, "energy density line; circle: the verdict changes");
    size_t most = 0, of = 0;
    for (size_t k = 0; k < p->n_panel; k++)
        if (p->panels[k].n_contour > most) {
            most = p->panels[k].n_contour;
            of = k;
        }
    for (size_t s = 0; s < most; s++) {
        const mw_map_contours *c = &p->panels[of].contours[s];
        const char *unit = c->unit == NULL ? "" : strcmp(c->unit, "um") == 0 ? "\xc2\xb5m" : c->unit;
        char text[160];
        (void)snprintf(text, sizeof text, unit[0] != '\0' ? "%.100s (%.40s)" : "%.100s%.40s", c->name == NULL ? "" : c->name,
                       unit);
        add_key(page, MW_KEY_CONTOUR, s, text);
    }
}

/* Sets x, and y counted downward from the first row. Returns the number of rows. */
static size_t flow_keys(mw_map_page *page, double left, double right)
{
    size_t row = 0;
    double x = left;
    for (size_t k = 0; k < page->n_key; k++) {
        const double w = KEY_SIGN + KEY_GAP + mw_text_width(page->key[k].text, false) * MW_SIZE_TEXT;
        const bool lines_begin = k > 0 && page->key[k].kind != MW_KEY_REGION && page->key[k - 1].kind == MW_KEY_REGION;
        if (x > left && (x + w > right || lines_begin)) {
            x = left;
            row++;
        }
        page->key[k].x = x;
        page->key[k].y = (double)row * KEY_ROW;
        x += w + KEY_APART;
    }
    return row + 1;
}

/* ---- the page -------------------------------------------------------------------------------------------------- */

typedef struct measures {
    double plot_w, plot_h, gap_x, gap_y, left, right, head;
} measures;

static measures measure(const mw_map_picture *p, const mw_map_page *page)
{
    const double energy = p->n_energy > 0 ? 1 : 0;
    /* A fifth digit on the speed axis takes its own room. */
    const double fifth_digit = p->speed_mm_per_s[p->n_speed - 1] >= 1e4 ? 18 : 0;
    measures m = {.left = EDGE + 128 + fifth_digit, .right = EDGE + energy * 140 + (p->power_W[p->n_power - 1] >= 1e3 ? 14 : 0), .head = 50 + energy * 32};
    m.gap_x = 84 + energy * 90;
    m.gap_y = m.head + 36;
    if (page->columns == 1)
        m.plot_w = 1600 - m.left - m.right;
    else
        m.plot_w = page->columns == 2 ? 690 : 560;
    m.plot_h = 0.74 * m.plot_w;
    return m;
}

static void place_frames(const mw_map_picture *p, mw_map_page *page, const measures *m, const size_t column[], const size_t row[],
                         double top)
{
    for (size_t k = 0; k < p->n_panel; k++) {
        mw_map_frame *f = &page->frame[k];
        f->x0 = m->left + (double)column[k] * (m->plot_w + m->gap_x);
        f->x1 = f->x0 + m->plot_w;
        f->y1 = top - (double)row[k] * (m->plot_h + m->gap_y);
        f->y0 = f->y1 - m->plot_h;
        f->p0 = p->power_W[0];
        f->p1 = p->power_W[p->n_power - 1];
        f->v0 = p->speed_mm_per_s[0];
        f->v1 = p->speed_mm_per_s[p->n_speed - 1];
        page->left[k] = column[k] == 0;
        page->bottom[k] = true;
        for (size_t i = 0; i < p->n_panel; i++)
            if (column[i] == column[k] && row[i] == row[k] + 1)
                page->bottom[k] = false;
    }
}

void mw_map_page_make(const mw_map_picture *p, const mw_map_scene scene[], mw_map_page *page)
{
    memset(page, 0, sizeof *page);
    size_t column[MW_MAP_MOST_PANELS], row[MW_MAP_MOST_PANELS];
    arrange(p, page, column, row);
    measures m = measure(p, page);
    const double columns = (double)page->columns, rows = (double)page->rows;
    page->width = m.left + columns * m.plot_w + (columns - 1) * m.gap_x + m.right;
    const double text_left = m.left, room = page->width - m.left - EDGE;

    add_wrapped(page, p->title, MW_SIZE_TITLE, true, room);
    const size_t titles = page->n_line;
    for (size_t i = 0; i < p->n_subtitle; i++)
        add_wrapped(page, p->subtitle[i], MW_SIZE_TEXT, false, room);
    const size_t heads = page->n_line;
    add_wrapped(page, p->footer, MW_SIZE_TEXT, false, room);
    collect_keys(p, scene, page);
    const size_t key_rows = flow_keys(page, text_left, page->width - EDGE + 8);

    const double head = EDGE + (double)titles * TITLE_STEP + (double)(heads - titles) * TEXT_STEP + (heads > 0 ? 8 : 0) + m.head;
    const double feet = (double)(page->n_line - heads) * TEXT_STEP + (page->n_line > heads ? 14 : 0);
    const double foot = TICKS + AXIS + KEYS_ABOVE + (double)key_rows * KEY_ROW + feet + EDGE - 8;
    if (p->n_panel == 1) /* a fixed page; the panel takes what is left of it, but stays a panel */
        m.plot_h = fmax(480, 1100 - head - foot);
    page->height = ceil(head + rows * m.plot_h + (rows - 1) * m.gap_y + foot);
    page->width = ceil(page->width);

    const double top = page->height - head;
    place_frames(p, page, &m, column, row, top);
    page->head_y = m.head - 24;
    page->axes_x0 = m.left;
    page->speed_title_x = EDGE + 16;
    page->axes_x1 = page->width - m.right;
    page->axes_y1 = top;
    page->axes_y0 = foot;

    double y = page->height - EDGE + 8;
    for (size_t i = 0; i < page->n_line; i++) {
        if (i == heads)
            y = feet + EDGE - 22;
        const double step = i < titles ? TITLE_STEP : TEXT_STEP;
        page->line[i].x = text_left;
        page->line[i].y = y - 0.5 * step;
        y -= step;
    }
    for (size_t k = 0; k < page->n_key; k++)
        page->key[k].y = foot - TICKS - AXIS - KEYS_ABOVE - 0.5 * KEY_ROW - page->key[k].y;
}
