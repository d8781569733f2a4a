/* SPDX-License-Identifier: GPL-3.0-or-later
 * Published single tracks: which rows make a set, and how they are read. */
#include "track_sets.h"

#include <math.h>
#include <string.h>

#include "../csv_cells.h"
#include "validate.h"

const data_set track_sets[TRACK_SETS] = {
    {"Lane 2020, 625, bare", "Lane", "lane2020_IN625", "625", "bare", NULL, NULL, NAN, NAN, "measured D4sigma"},
    {"Weaver 2023, 718, bare", "Weaver", "weaver2023_IN718", "718", "bare", NULL, NULL, NAN, NAN, "measured (5 of 6)"},
    {"Hofmann 2026, 316L, bare", "Hofmann", "hofmann2026_316L", "316L", NULL, NULL, "FLAG", 0, NAN, "not defined"},
    {"Hofmann 30 um, series A", "", "hofmann2026_316L", "316L", NULL, "series=A", "FLAG", 30, NAN, "not defined"},
    {"Hofmann 30 um, series B", "", "hofmann2026_316L", "316L", NULL, "series=B", "FLAG", 30, NAN, "not defined"},
    {"Hofmann 60 um, series A", "", "hofmann2026_316L", "316L", NULL, "series=A", "FLAG", 60, NAN, "not defined"},
    {"Hofmann 60 um, series B", "", "hofmann2026_316L", "316L", NULL, "series=B", "FLAG", 60, NAN, "not defined"},
    {"Coen 2021, 316L", "Coen", "coen2021_316L_Ti64", "316L", NULL, NULL, NULL, NAN, 37.5, "37.5 um quoted"},
    {"Coen 2021, 718", "Coen", "coen2021_IN718", "718", NULL, NULL, NULL, NAN, 37.5, "37.5 um quoted"},
    {"Totis 2021, Ti-6Al-4V", "Totis", "totis2021_Ti64", "Ti-6Al-4V", NULL, NULL, "FLAG", NAN, NAN, "1/e2"},
    {"Dilip 2017, Ti-6Al-4V", "Dilip", "dilip2017_Ti64", "Ti-6Al-4V", NULL, NULL, NULL, NAN, NAN, "not defined"},
    {"Trapp 2017, 316L, bare", "Trapp", "trapp2017_absorptivity_digitised", "316L", "bare", NULL, NULL, NAN, NAN, "1/e2"},
    {"Ghosh 2018, 625, bare", "", "ghosh2018_IN625", "625", "bare", NULL, NULL, NAN, 100, "not stated: 100 um"},
};

static bool wanted(const data_set *s, const mw_csv_reader *r, double layer_um)
{
    const char *note = cell_text(r, "note");
    return (s->condition == NULL || strcmp(cell_text(r, "condition"), s->condition) == 0) && (s->need == NULL || strstr(note, s->need) != NULL) &&
           (s->avoid == NULL || strstr(note, s->avoid) == NULL) && (isnan(s->layer_um) || layer_um == s->layer_um);
}

void load_track_set(const data_set *s, track_rows *out)
{
    char path[256];
    mw_csv_reader *r;
    mw_error err;
    bool end = false;
    (void)snprintf(path, sizeof path, "tests/data/measured/%s.csv", s->file);
    stop_on(mw_csv_open(path, &r, &err), &err);
    out->n = 0;
    while (out->n < MOST_ROWS) {
        stop_on(mw_csv_next(r, &end, &err), &err);
        if (end)
            break;
        const double layer_um = isnan(cell_number(r, "layer_um")) ? 0 : cell_number(r, "layer_um");
        const double beam_um = isnan(cell_number(r, "spot_um")) ? s->beam_um : cell_number(r, "spot_um");
        const track_row row = {cell_number(r, "power_W"), cell_number(r, "speed_mm_s") * 1e-3, beam_um * 1e-6, layer_um * 1e-6,
                               cell_number(r, "width_um") * 1e-6, cell_number(r, "depth_um") * 1e-6, cell_number(r, "length_um") * 1e-6};
        if (wanted(s, r, layer_um) && !(isnan(row.width_m) && isnan(row.depth_m)) && row.speed_m_per_s > 0)
            out->row[out->n++] = row;
    }
    mw_csv_close(r);
}
