/* SPDX-License-Identifier: GPL-3.0-or-later
 * A grid under doubt. For each speed: pools of all samples along the powers, then counts over hatch and layer, power by power. */
#include "meltwright/survey.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "model/keyhole_line.h"
#include "study/internal.h"
#include "study/survey_lanes.h"

/* Samples in a chunk and powers in a block bound the scratch of a thread (about 5 MB); cells in a block bound the counts (4 bytes each). */
enum { CHUNK = 1024, MOST_POWERS = 128, MOST_BLOCK_CELLS = 6 << 20, GROUP = 16 };
/* Distance of two powers in a workspace row: not a power of two, which would crowd them into the same few cache sets. */
enum { STRIDE = CHUNK + 16 };

typedef struct survey {
    const mw_plan *plan;
    const mw_grid *grid;
    const mw_sample *sample;
    size_t n_sample, n_pairs;
    int threads;
    mw_survey_layer *layer; /* n_layer */
    mw_survey_pair *pair;   /* [layer][hatch] */
    double exponent;        /* energy slope over overlap slope */
    const mw_limits *limits;
    /* counts of the present block: [power][speed][hatch][layer], balling [power][speed][layer] */
    uint16_t *nominal, *keyhole, *balling;
    size_t first_power, n_power, first_speed, n_speed;
} survey;

typedef enum quantity { WIDTH, DEPTH, CONDUCTION, ROWS } quantity;

/* One thread's own memory. */
typedef struct workspace {
    float *row[ROWS];                         /* [power][sample], um */
    float energy[CHUNK], energy_power[CHUNK]; /* per sample, see survey_lanes.h */
    float across[CHUNK], scratch[3 * CHUNK];
    double group[ROWS][GROUP][MOST_POWERS], onset[MOST_POWERS];
    uint32_t *nominal, *keyhole; /* of the hatches of one layer */
} workspace;

/* ---- tables over hatch and layer ---- */

static void make_pairs(survey *v)
{
    const mw_grid *g = v->grid;
    const mw_balling_limits *ball = mw_balling_constants();
    for (size_t t = 0; t < g->n_layer; t++) {
        const double layer_um = 1e6 * g->layer_m[t];
        v->layer[t] = (mw_survey_layer){
            .layer_um = (float)layer_um,
            .half_layer_um = (float)(v->plan->constants.layer_factor * layer_um),
            .scale = (float)(1 / v->limits->overlap_half),
            .most = (float)(MW_OVERLAP_NO_POOL / v->limits->overlap_half),
            .balling_factor = (float)exp(ball->layer_slope * g->layer_m[t] / ball->layer_reference_m / ball->weber_slope),
        };
        for (size_t h = 0; h < g->n_hatch; h++) {
            const double hatch_um = 1e6 * g->hatch_m[h];
            v->pair[t * g->n_hatch + h] =
                (mw_survey_pair){(float)(hatch_um * hatch_um / v->limits->overlap_half), (float)pow(hatch_um * layer_um, -v->exponent)};
        }
    }
}

/* ---- pools ---- */

static mw_keyhole_input input_of(const survey *v, const mw_sample *s, double speed_m_per_s)
{
    const mw_plan *p = v->plan;
    mw_keyhole_input in = {1, p->absorptivity * s->coupling, speed_m_per_s, v->grid->d4sigma_m * s->beam, 0, p->melt, p->boil};
    mw_medium *const both[] = {&in.melt, &in.boil};
    for (int i = 0; i < 2; i++) {
        both[i]->conductivity_W_per_mK *= s->conductivity;
        both[i]->volumetric_heat_J_per_m3K *= s->heat;
    }
    in.melt.isotherm_K *= s->solidus;
    in.boil.isotherm_K *= s->boiling;
    return in;
}

/* Sample `i`: its pools along the powers of the block as member `j` of the group, and its energy. */
static mw_status pool_sample(const survey *v, const mw_sample *s, double speed_m_per_s, size_t i, size_t j, workspace *w)
{
    const double *power = v->grid->power_W + v->first_power;
    const mw_keyhole_input in = input_of(v, s, speed_m_per_s);
    const mw_pool_lanes out = {w->group[WIDTH][j], w->group[DEPTH][j], w->group[CONDUCTION][j], w->onset, NULL, NULL, NULL};
    mw_keyhole_constants constants = v->plan->constants;
    constants.onset_ratio *= s->onset;
    const double enthalpy = in.melt.volumetric_heat_J_per_m3K * (in.melt.isotherm_K - in.melt.ambient_K);
    const double energy = mw_melt_energy_ratio(in.absorptivity, speed_m_per_s, 1e-6, 1e-6, enthalpy) / v->limits->energy_half;
    w->energy[i] = (float)energy;
    w->energy_power[i] = (float)pow(energy, v->exponent);
    return mw_keyhole_line(&in, &constants, power, v->n_power, &out);
}

/* From [member][power] in m to [power][sample] in um. */
static void turn_group(const survey *v, size_t first, workspace *w)
{
    for (int r = 0; r < ROWS; r++)
        for (size_t k = 0; k < v->n_power; k++)
            for (size_t j = 0; j < GROUP; j++)
                w->row[r][k * STRIDE + first + j] = (float)(1e6 * w->group[r][j][k]);
}

/* Samples first.. of a chunk. The last group and the lanes are filled up with samples that count as lack of fusion without balling. */
static mw_status fill_chunk(const survey *v, const mw_sample *sample, size_t n, double speed_m_per_s, size_t *lanes, workspace *w)
{
    *lanes = (n + MW_SURVEY_LANES - 1) / MW_SURVEY_LANES * MW_SURVEY_LANES;
    for (size_t first = 0; first < *lanes; first += GROUP) {
        for (size_t j = 0; j < GROUP; j++) {
            const size_t i = first + j;
            if (i < n) {
                const mw_status status = pool_sample(v, &sample[i], speed_m_per_s, i, j, w);
                if (status != MW_OK)
                    return status;
                continue;
            }
            w->energy[i] = w->energy_power[i] = 0;
            for (int r = 0; r < ROWS; r++)
                memset(w->group[r][j], 0, v->n_power * sizeof w->group[r][j][0]);
        }
        turn_group(v, first, w);
    }
    return MW_OK;
}

/* ---- counts ---- */

static void count_power(survey *v, size_t speed, size_t k, size_t lanes, workspace *w)
{
    const mw_grid *g = v->grid;
    const size_t line = k * v->n_speed + speed, cell = line * v->n_pairs, at = k * STRIDE;
    const double power_W = g->power_W[v->first_power + k], speed_m_per_s = g->speed_m_per_s[v->first_speed + speed];
    const double weber = v->plan->density_cold_kg_per_m3 * speed_m_per_s * speed_m_per_s * 1e-6 / v->plan->surface_tension_N_per_m / mw_balling_constants()->weber;
    const mw_survey_lanes l = {lanes, w->row[WIDTH] + at, w->row[DEPTH] + at, w->row[CONDUCTION] + at, w->energy, w->energy_power,
                               (float)power_W, (float)pow(power_W, v->exponent), (float)weber};
    mw_survey_widths(&l, w->across);
    for (size_t t = 0; t < g->n_layer; t++) {
        uint32_t balling;
        mw_survey_count(&l, w->across, &v->layer[t], &v->pair[t * g->n_hatch], g->n_hatch, w->scratch, w->nominal, w->keyhole, &balling);
        v->balling[line * g->n_layer + t] = (uint16_t)(v->balling[line * g->n_layer + t] + balling);
        for (size_t h = 0; h < g->n_hatch; h++) {
            uint16_t *nominal = &v->nominal[cell + h * g->n_layer + t], *keyhole = &v->keyhole[cell + h * g->n_layer + t];
            *nominal = (uint16_t)(*nominal + w->nominal[h]);
            *keyhole = (uint16_t)(*keyhole + w->keyhole[h]);
        }
    }
}

static mw_status survey_speed(survey *v, size_t speed, workspace *w)
{
    const double speed_m_per_s = v->grid->speed_m_per_s[v->first_speed + speed];
    for (size_t first = 0; first < v->n_sample; first += CHUNK) {
        const size_t n = v->n_sample - first < CHUNK ? v->n_sample - first : CHUNK;
        size_t lanes;
        const mw_status status = fill_chunk(v, &v->sample[first], n, speed_m_per_s, &lanes, w);
        if (status != MW_OK)
            return status;
        for (size_t k = 0; k < v->n_power; k++)
            count_power(v, speed, k, lanes, w);
    }
    return MW_OK;
}

static void free_workspace(workspace *w)
{
    if (w == NULL)
        return;
    free(w->row[0]);
    free(w->nominal);
    free(w);
}

static workspace *new_workspace(const survey *v)
{
    workspace *w = calloc(1, sizeof *w);
    if (w == NULL)
        return NULL;
    const size_t each = (size_t)STRIDE * (v->grid->n_power < MOST_POWERS ? v->grid->n_power : MOST_POWERS);
    float *rows = malloc(ROWS * each * sizeof *rows);
    w->row[0] = rows;
    w->nominal = malloc(2 * v->grid->n_hatch * sizeof *w->nominal);
    if (rows == NULL || w->nominal == NULL) {
        free_workspace(w);
        return NULL;
    }
    w->keyhole = w->nominal + v->grid->n_hatch;
    for (size_t r = 1; r < ROWS; r++)
        w->row[r] = rows + r * each;
    return w;
}

static mw_status run_block(survey *v)
{
    const size_t cells = v->n_power * v->n_speed;
    int worst = MW_OK; /* errors are negative */
    memset(v->nominal, 0, cells * v->n_pairs * sizeof *v->nominal);
    memset(v->keyhole, 0, cells * v->n_pairs * sizeof *v->keyhole);
    memset(v->balling, 0, cells * v->grid->n_layer * sizeof *v->balling);
#pragma omp parallel num_threads(v->threads) reduction(min : worst)
    {
        workspace *w = new_workspace(v);
        if (w == NULL)
            worst = MW_NO_MEMORY;
#pragma omp for schedule(dynamic, 1)
        for (long s = 0; s < (long)v->n_speed; s++) {
            const int status = w == NULL ? MW_NO_MEMORY : survey_speed(v, (size_t)s, w);
            worst = status < worst ? status : worst;
        }
        free_workspace(w);
    }
    return (mw_status)worst;
}

static mw_status write_block(const survey *v, mw_survey_sink sink, void *to)
{
    const mw_grid *g = v->grid;
    for (size_t k = 0; k < v->n_power; k++)
        for (size_t s = 0; s < v->n_speed; s++)
            for (size_t pair = 0; pair < v->n_pairs; pair++) {
                const size_t line = k * v->n_speed + s, h = pair / g->n_layer, t = pair % g->n_layer;
                const size_t number = ((v->first_power + k) * g->n_speed + v->first_speed + s) * v->n_pairs + pair;
                if (number < g->first_cell || number >= g->first_cell + g->n_cell)
                    continue;
                const mw_survey_cell cell = {g->power_W[v->first_power + k], g->speed_m_per_s[v->first_speed + s], g->hatch_m[h], g->layer_m[t],
                                             (uint32_t)v->n_sample, v->nominal[line * v->n_pairs + pair], v->keyhole[line * v->n_pairs + pair],
                                             v->balling[line * g->n_layer + t]};
                const mw_status status = sink(to, &cell);
                if (status != MW_OK)
                    return status;
            }
    return MW_OK;
}

/* Powers and speeds of one block: whole rows of speeds while they fit. */
static mw_status run_blocks(survey *v, mw_survey_sink sink, void *to, mw_error *err)
{
    const mw_grid *g = v->grid;
    const size_t room = MOST_BLOCK_CELLS / v->n_pairs > 0 ? MOST_BLOCK_CELLS / v->n_pairs : 1; /* (power, speed) in a block */
    const size_t speeds = g->n_speed < room ? g->n_speed : room;
    size_t powers = speeds < g->n_speed ? 1 : room / speeds;
    powers = powers > MOST_POWERS ? MOST_POWERS : powers > g->n_power ? g->n_power : powers;
    v->nominal = malloc(2 * powers * speeds * v->n_pairs * sizeof *v->nominal);
    v->balling = malloc(powers * speeds * g->n_layer * sizeof *v->balling);
    if (v->nominal == NULL || v->balling == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    v->keyhole = v->nominal + powers * speeds * v->n_pairs;
    mw_status status = MW_OK;
    for (v->first_power = 0; v->first_power < g->n_power && status == MW_OK; v->first_power += powers)
        for (v->first_speed = 0; v->first_speed < g->n_speed && status == MW_OK; v->first_speed += speeds) {
            v->n_power = g->n_power - v->first_power < powers ? g->n_power - v->first_power : powers;
            v->n_speed = g->n_speed - v->first_speed < speeds ? g->n_speed - v->first_speed : speeds;
            status = run_block(v);
            if (status != MW_OK)
                (void)mw_fail(err, status, NULL, 0, "%s", mw_status_sentence(status));
            if (status == MW_OK)
                status = write_block(v, sink, to);
        }
    return status;
}

static mw_status check(const mw_plan *plan, const mw_grid *grid, size_t n_sample, mw_error *err)
{
    if (plan->model != MW_MODEL_DEFAULT || plan->alloy == NULL || plan->check_case)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "samples need the default model and an alloy card");
    if (grid->n_hatch == 0 || grid->n_layer == 0 || !(grid->layer_m[0] > 0) || !(grid->hatch_m[0] > 0))
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "samples need a hatch and a layer: they count verdicts");
    if (n_sample < 1 || n_sample > MW_MOST_SAMPLES)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%zu samples are outside 1 to %d", n_sample, MW_MOST_SAMPLES);
    return mw_grid_check(grid, err);
}

mw_status mw_survey(const mw_plan *plan, const mw_grid *grid, const mw_sample *sample, size_t n_sample, int threads, mw_survey_sink sink, void *to,
                    mw_error *err)
{
    mw_grid part = *grid;
    mw_status status = check(plan, grid, n_sample, err);
    if (status == MW_OK)
        status = mw_grid_cut(&part, err);
    if (status != MW_OK)
        return status;
    survey v = {.plan = plan, .grid = &part, .sample = sample, .n_sample = n_sample, .n_pairs = grid->n_hatch * grid->n_layer, .threads = mw_threads(threads),
                .limits = mw_verdict_limits(plan->kind)};
    v.exponent = v.limits->energy_slope / v.limits->overlap_slope;
    v.layer = malloc(grid->n_layer * sizeof *v.layer);
    v.pair = malloc(v.n_pairs * sizeof *v.pair);
    if (v.layer == NULL || v.pair == NULL) {
        status = mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    } else {
        make_pairs(&v);
        status = run_blocks(&v, sink, to, err);
    }
    free(v.balling);
    free(v.nominal);
    free(v.pair);
    free(v.layer);
    return status;
}
