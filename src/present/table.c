/* SPDX-License-Identifier: GPL-3.0-or-later
 * The one list of output columns, and CSV and JSON made from it. */
#include "meltwright/table.h"

#include <math.h>
#include <string.h>

#include "meltwright/text.h"
#include "meltwright/units.h"
#include "meltwright/version.h"

static double um(double m)
{
    return mw_to_trade(MW_LENGTH, m);
}

/* X(key, input, value in the key's unit, meaning) */
#define NUMBERS_BEFORE(X)                                                                                                                  \
    X(power_W, true, r->setting.power_W, "laser power at the plate")                                                                      \
    X(speed_mm_per_s, true, mw_to_trade(MW_SPEED, r->setting.speed_m_per_s), "scan speed")                                                \
    X(hatch_um, true, um(r->setting.hatch_m), "distance between neighbouring tracks")                                                     \
    X(layer_um, true, um(r->setting.layer_m), "nominal layer; 0 is bare plate")                                                           \
    X(d4sigma_um, true, um(r->setting.d4sigma_m), "beam diameter, D4sigma (1/e2 of a Gaussian)")                                          \
    X(preheat_C, true, mw_to_trade(MW_TEMPERATURE, r->setting.preheat_K), "plate temperature")                                            \
    X(width_um, false, um(r->pool.width_m), "melt pool width, largest over the length")                                                   \
    X(depth_um, false, um(r->pool.depth_m), "melt pool depth below the solid surface")                                                    \
    X(length_um, false, um(r->pool.length_m), "melt pool length")                                                                         \
    X(width_lo_um, false, um(r->width_lo_m), "width, lower end of the central 90 % prediction interval")                                  \
    X(width_hi_um, false, um(r->width_hi_m), "width, upper end")                                                                          \
    X(depth_lo_um, false, um(r->depth_lo_m), "depth, lower end")                                                                          \
    X(depth_hi_um, false, um(r->depth_hi_m), "depth, upper end")                                                                          \
    X(absorptivity, false, r->absorptivity, "effective absorptivity, with the cavity's part")                                             \
    X(peak_temperature_K, false, r->pool.peak_temperature_K, "computed without boiling: above boiling an index, not a temperature")       \
    X(cooling_rate_K_per_s, false, r->pool.cooling_rate_K_per_s, "at the trailing tip of the pool")                                       \
    X(linear_energy_J_per_mm, false, r->linear_energy_J_per_m / 1e3, "incident power / speed")                                            \
    X(areal_energy_J_per_mm2, false, r->areal_energy_J_per_m2 / 1e6, "incident power / (speed hatch)")                                    \
    X(volumetric_energy_J_per_mm3, false, r->volumetric_energy_J_per_m3 / 1e9, "incident power / (speed hatch layer)")                    \
    X(build_rate_cm3_per_h, false, r->build_rate_m3_per_s * 3.6e9, "speed hatch layer; laser on, no recoating")                           \
    X(normalised_enthalpy, false, r->normalised_enthalpy, "A P/(rho c dT sqrt(pi alpha v s^3)), s = D4sigma/4; other definitions differ") \
    X(keyhole_number, false, r->keyhole_number, "Ke with the effective absorptivity, liquid properties and the 1/e2 radius")              \
    X(overlap_index, false, r->overlap_index, "(hatch/width)^2 + (layer/depth)^2; 1 = half ellipses just melt the layer")                 \
    X(keyhole_index, false, r->judgement.keyhole_index, "melt energy ratio over its limit; 1 = too much energy is as likely as nominal")  \
    X(balling_index, false, r->balling_index, "1 = a track is as likely to ball as not")

#define TEXTS(X)                                                                                                                           \
    X(mode, mw_mode_word(r->mode), "how the beam couples: conduction, transition, keyhole")                                               \
    X(verdict, r->judged ? mw_verdict_word(r->judgement.verdict) : "", "likeliest of nominal, lack-of-fusion, keyhole (too much energy)")

#define NUMBERS_AFTER(X)                                                                                                                   \
    X(p_nominal, false, r->judgement.p_nominal, "probability of a density within 1 point of the best")                                    \
    X(p_lack_of_fusion, false, r->judgement.p_lack_of_fusion, "probability of lack of fusion")                                            \
    X(p_keyhole, false, r->judgement.p_keyhole, "probability of pores from too much energy")                                              \
    X(p_balling, false, r->p_balling, "probability that a track balls; stands by itself")                                                 \
    X(unmelted_pct, false, 100 * r->unmelted_aligned, "section that no pool reaches, layers not rotated (worst case)")                    \
    X(margin_power_down_pct, false, r->margins.power_down_pct, "how far power alone can fall before the verdict changes")                 \
    X(margin_power_up_pct, false, r->margins.power_up_pct, "how far power alone can rise")                                                \
    X(margin_speed_down_pct, false, r->margins.speed_down_pct, "how far speed alone can fall")                                            \
    X(margin_speed_up_pct, false, r->margins.speed_up_pct, "how far speed alone can rise")

#define STATUS_TEXT(X) X(status, mw_status_word(r->status), "ok, or what to know about the row")

static const mw_column columns[] = {
#define N(key, input, value, meaning) {#key, meaning, false, input},
#define T(key, value, meaning) {#key, meaning, true, false},
    NUMBERS_BEFORE(N) TEXTS(T) NUMBERS_AFTER(N) STATUS_TEXT(T)
#undef T
#undef N
};

enum column_id {
#define N(key, input, value, meaning) ID_##key,
#define T(key, value, meaning) ID_##key,
    NUMBERS_BEFORE(N) TEXTS(T) NUMBERS_AFTER(N) STATUS_TEXT(T)
#undef T
#undef N
        COLUMN_COUNT
};

size_t mw_column_count(void)
{
    return COLUMN_COUNT;
}

const mw_column *mw_column_at(size_t i)
{
    return &columns[i];
}

double mw_column_number(size_t i, const mw_result *r)
{
    switch ((enum column_id)i) {
#define N(key, input, value, meaning)                                                                                                      \
    case ID_##key:                                                                                                                         \
        return value;
        NUMBERS_BEFORE(N)
        NUMBERS_AFTER(N)
#undef N
    default:
        return NAN;
    }
}

const char *mw_column_text(size_t i, const mw_result *r)
{
    switch ((enum column_id)i) {
#define T(key, value, meaning)                                                                                                             \
    case ID_##key:                                                                                                                         \
        return value;
        TEXTS(T)
        STATUS_TEXT(T)
#undef T
    default:
        return "";
    }
}

size_t mw_column_cell(size_t i, const mw_result *result, char *out, size_t size)
{
    char number[MW_NUMBER_SIZE];
    const char *text = number;
    if (columns[i].is_text)
        text = mw_column_text(i, result);
    else
        (void)mw_print_number(number, mw_column_number(i, result));
    const size_t n = strlen(text);
    if (n >= size)
        return 0;
    memcpy(out, text, n + 1);
    return n;
}

void mw_csv_header(FILE *to, const bool *skip)
{
    bool first = true;
    for (size_t i = 0; i < COLUMN_COUNT; i++) {
        if (skip != NULL && skip[i])
            continue;
        (void)fprintf(to, "%s%s", first ? "" : ",", columns[i].key);
        first = false;
    }
}

void mw_csv_row(FILE *to, const mw_result *result, const bool *skip)
{
    char cell[64];
    bool first = true;
    for (size_t i = 0; i < COLUMN_COUNT; i++) {
        if (skip != NULL && skip[i])
            continue;
        if (!first)
            (void)putc(',', to);
        first = false;
        (void)fwrite(cell, 1, mw_column_cell(i, result, cell, sizeof cell), to);
    }
}

void mw_csv_field(FILE *to, const char *text, size_t n)
{
    bool plain = true;
    for (size_t i = 0; i < n && plain; i++)
        plain = text[i] != ',' && text[i] != '"' && text[i] != '\n' && text[i] != '\r';
    if (plain) {
        (void)fwrite(text, 1, n, to);
        return;
    }
    (void)putc('"', to);
    for (size_t i = 0; i < n; i++) {
        if (text[i] == '"')
            (void)putc('"', to);
        (void)putc(text[i], to);
    }
    (void)putc('"', to);
}

void mw_json_number(FILE *to, double value)
{
    char text[MW_NUMBER_SIZE];
    (void)fputs(mw_print_number(text, value) > 0 ? text : "null", to);
}

void mw_json_string(FILE *to, const char *text)
{
    (void)putc('"', to);
    for (const unsigned char *c = (const unsigned char *)text; *c != '\0'; c++) {
        if (*c == '"' || *c == '\\')
            (void)fprintf(to, "\\%c", *c);
        else if (*c < 0x20)
            (void)fprintf(to, "\\u%04x", *c);
        else
            (void)putc(*c, to);
    }
    (void)putc('"', to);
}

void mw_json_result(FILE *to, const mw_result *result)
{
    (void)putc('{', to);
    for (size_t i = 0; i < COLUMN_COUNT; i++) {
        (void)fprintf(to, "%s\"%s\": ", i > 0 ? ", " : "", columns[i].key);
        if (!columns[i].is_text)
            mw_json_number(to, mw_column_number(i, result));
        else if (mw_column_text(i, result)[0] == '\0')
            (void)fputs("null", to);
        else
            mw_json_string(to, mw_column_text(i, result));
    }
    (void)putc('}', to);
}

static const char *file_name(const char *path)
{
    const char *slash = strrchr(path, '/');
    return slash != NULL ? slash + 1 : path;
}

static void put_card(FILE *to, const mw_alloy *alloy)
{
    (void)fputs("{\"kind\": \"alloy\", \"name\": ", to);
    mw_json_string(to, alloy->name);
    (void)fputs(", \"file\": ", to);
    mw_json_string(to, file_name(alloy->path));
    (void)fputs(", \"hash\": ", to);
    mw_json_string(to, alloy->hash);
    (void)putc('}', to);
}

static void put_limits(FILE *to, mw_pool_kind kind)
{
    const mw_limits *l = mw_verdict_limits(kind);
    (void)fputs("{\"overlap_index_even_odds\": ", to);
    mw_json_number(to, l->overlap_half);
    (void)fputs(", \"overlap_slope\": ", to);
    mw_json_number(to, l->overlap_slope);
    (void)fputs(", \"melt_energy_ratio_even_odds\": ", to);
    mw_json_number(to, l->energy_half);
    (void)fputs(", \"melt_energy_slope\": ", to);
    mw_json_number(to, l->energy_slope);
    (void)fputs(", \"definition\": ", to);
    mw_json_string(to, l->definition);
    (void)fputs(", \"rests_on\": ", to);
    mw_json_string(to, l->data);
    (void)putc('}', to);
}

void mw_json_provenance(FILE *to, const mw_provenance *p)
{
    (void)fprintf(to, "{\"program\": \"meltwright\", \"version\": \"%s\", \"command\": ", mw_version());
    mw_json_string(to, p->command);
    if (p->plan != NULL) {
        (void)fputs(", \"model\": ", to);
        mw_json_string(to, mw_model_word(p->plan->model));
    }
    (void)fputs(", \"cards\": [", to);
    if (p->plan != NULL && p->plan->alloy != NULL)
        put_card(to, p->plan->alloy);
    for (size_t i = 0; p->plan == NULL && i < p->n_card; i++) {
        (void)fputs(i > 0 ? ", " : "", to);
        put_card(to, p->card[i]);
    }
    (void)fputs("], \"options\": {", to);
    for (size_t i = 0; i < p->n_option; i++) {
        (void)fputs(i > 0 ? ", " : "", to);
        mw_json_string(to, p->option[i]);
        (void)fputs(": ", to);
        mw_json_string(to, p->option_value[i]);
    }
    (void)fputs("}", to);
    if (p->plan != NULL) {
        (void)fputs(", \"limits\": ", to);
        put_limits(to, p->plan->kind);
    }
    (void)putc('}', to);
}
