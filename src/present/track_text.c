/* SPDX-License-Identifier: GPL-3.0-or-later
 * One setting explained to a person. */
#include "meltwright/track_text.h"

#include <math.h>
#include <stdbool.h>
#include <string.h>

#include "meltwright/units.h"

static double um(double m)
{
    return 1e6 * m;
}

static void heading(FILE *to, const mw_plan *plan, const mw_setting *s)
{
    if (plan->alloy != NULL)
        (void)fprintf(to, "%s (%s), ", plan->alloy->name, plan->alloy->n_designation > 0 ? plan->alloy->designation[0] : "no designation");
    (void)fprintf(to, "%.6g W, %.6g mm/s, beam %.6g um (D4sigma)", s->power_W, 1e3 * s->speed_m_per_s, um(s->d4sigma_m));
    if (!isnan(s->hatch_m))
        (void)fprintf(to, ", hatch %.6g um", um(s->hatch_m));
    if (s->layer_m > 0)
        (void)fprintf(to, ", layer %.6g um", um(s->layer_m));
    else
        (void)fprintf(to, ", bare plate");
    (void)fprintf(to, ", plate at %.4g C\n", s->preheat_K - 273.15);
    (void)fprintf(to, "model: %s, %s%s\n", mw_model_word(plan->model), mw_model_description(plan->model),
                  plan->check_case ? "; constants as given, no latent heat" : "");
}

static void size_line(FILE *to, const char *name, double value, double lo, double hi)
{
    (void)fprintf(to, um(value) < 9999.5 ? "  %-10s %8.4g um" : "  %-10s %8.0f um", name, um(value));
    if (!isnan(lo))
        (void)fprintf(to, "    %4.0f to %4.0f um in 9 of 10 tracks", um(lo), um(hi));
    (void)fputc('\n', to);
}

static void mode_line(FILE *to, const mw_plan *plan, const mw_result *r)
{
    (void)fprintf(to, "  %-10s %s", "mode", mw_mode_word(r->mode));
    if (plan->model != MW_MODEL_DEFAULT)
        (void)fprintf(to, ": this model knows no other");
    else if (r->mode == MW_CONDUCTION)
        (void)fprintf(to, ": no vapour cavity; it starts at %.2f times this power", 1 / r->onset_index);
    else
        (void)fprintf(to, ": a vapour cavity %.0f um deep (not yet a defect by itself)", um(r->cavity_depth_m));
    (void)fprintf(to, "\n  %-10s %.0f %% of the light%s\n", "coupling", 100 * r->absorptivity,
                  r->cavity_depth_m > 0 ? ", the cavity's share included" : "");
}

static void heat_lines(FILE *to, const mw_plan *plan, const mw_result *r)
{
    if (!isnan(r->pool.peak_temperature_K)) {
        (void)fprintf(to, "  %-10s %.0f K", "peak", r->pool.peak_temperature_K);
        if (r->pool.peak_temperature_K > plan->boil.isotherm_K)
            (void)fprintf(to, " computed without boiling: above %.0f K an index, not a temperature", plan->boil.isotherm_K);
        (void)fputc('\n', to);
    }
    if (!isnan(r->pool.cooling_rate_K_per_s))
        (void)fprintf(to, "  %-10s %.2g K/s at the tail of the pool\n", "cooling", r->pool.cooling_rate_K_per_s);
}

static void energy_lines(FILE *to, const mw_result *r)
{
    (void)fprintf(to, "\nenergy (incident power, as the trade counts it; it knows neither beam nor alloy)\n  %.3g J/mm", r->linear_energy_J_per_m / 1e3);
    if (!isnan(r->areal_energy_J_per_m2))
        (void)fprintf(to, "   %.3g J/mm2", r->areal_energy_J_per_m2 / 1e6);
    if (r->judged)
        (void)fprintf(to, "   %.3g J/mm3   at %.3g cm3/h while the laser is on", r->volumetric_energy_J_per_m3 / 1e9, r->build_rate_m3_per_s * 3.6e9);
    (void)fputc('\n', to);
}

static void limit_line(FILE *to, const char *name, double here, double limit, const char *text)
{
    (void)fprintf(to, "  %-20s %8.3g   even odds at %-6.3g %s\n", name, here, limit, text);
}

static void limit_lines(FILE *to, const mw_plan *plan, const mw_result *r)
{
    const mw_limits *l = mw_verdict_limits(plan->kind);
    (void)fprintf(to, "\nlimits\n");
    if (r->judged) {
        if (isinf(r->overlap_index)) {
            (void)fprintf(to, "  %-20s  no pool\n", "overlap index");
        } else {
            limit_line(to, "overlap index", r->overlap_index, l->overlap_half, "(h/W)^2 + (t/D)^2; up to 1 the pools melt the whole layer");
            (void)fprintf(to, "  %-20s %8.3g   with the powder's own thickness, %.0f um at %.0f %% packing\n", "", r->overlap_index_effective,
                          um(mw_effective_layer(r->setting.layer_m, MW_PACKING_DEFAULT)), 100 * MW_PACKING_DEFAULT);
        }
        (void)fprintf(to, "  %-20s %8.3g %% of the section with layers not rotated, %.3g %% with rotation\n", "unmelted", 100 * r->unmelted_aligned,
                      100 * r->unmelted_scattered);
        limit_line(to, "melt energy ratio", r->melt_energy_ratio, l->energy_half, "absorbed energy over what melts the layer's volume");
    }
    if (!isnan(r->balling_index))
        limit_line(to, "balling index", r->balling_index, 1, "a warning on single tracks; cube density does not follow it");
    (void)fprintf(to, "  %-20s %8.3g   %s\n", "normalised enthalpy", r->normalised_enthalpy, mw_enthalpy_definition(MW_ENTHALPY_SHOWN));
}

static void verdict_lines(FILE *to, const mw_result *r)
{
    const mw_judgement *j = &r->judgement;
    if (r->overlap_index > 1 && j->verdict == MW_NOMINAL)
        (void)fprintf(to, "  an index above 1 with a nominal verdict: the geometry of one layer leaves a rest, yet cubes on record stay within a point of\n"
                          "  their study's best up to the even-odds value\n");
    (void)fprintf(to, "\nverdict    %s\n  nominal %.2f   lack of fusion %.2f   keyhole pores (too much energy) %.2f      balling, beside it: %.2f\n",
                  mw_verdict_word(j->verdict), j->p_nominal, j->p_lack_of_fusion, j->p_keyhole, r->p_balling);
}

typedef struct axis_text {
    const char *name, *unit;
    double to_trade;
} axis_text;

static void turn_text(FILE *to, const axis_text *a, const mw_turn *t, bool up)
{
    if (isnan(t->at)) {
        (void)fprintf(to, "   %-4s nothing within a factor of five", up ? "up" : "down");
        return;
    }
    (void)fprintf(to, "   %-4s %5.1f %% to %.4g %s: %s", up ? "up" : "down", fabs(t->change_pct), t->at * a->to_trade, a->unit, mw_verdict_word(t->beyond));
}

static void outlook_lines(FILE *to, const mw_result *r, const mw_outlook *o)
{
    static const axis_text axis[4] = {{"power", "W", 1}, {"speed", "mm/s", 1e3}, {"hatch", "um", 1e6}, {"layer", "um", 1e6}};
    const mw_turn *const turn[4] = {o->power, o->speed, o->hatch, o->layer};
    (void)fprintf(to, "\n%s\n", r->judgement.verdict == MW_NOMINAL ? "how far each factor can move alone before the verdict changes"
                                                                   : "what would bring it into nominal, one factor alone");
    for (int i = 0; i < 4; i++) {
        (void)fprintf(to, "  %-6s", axis[i].name);
        if (r->judgement.verdict != MW_NOMINAL && isnan(turn[i][0].at) && isnan(turn[i][1].at)) {
            (void)fprintf(to, "   no value within a factor of five does it\n");
            continue;
        }
        turn_text(to, &axis[i], &turn[i][0], false);
        (void)fputc('\n', to);
        (void)fprintf(to, "  %-6s", "");
        turn_text(to, &axis[i], &turn[i][1], true);
        (void)fputc('\n', to);
    }
}

/* The nearest edge of all, in words: what the engineer should watch, or change first. */
static void advice_line(FILE *to, const mw_result *r, const mw_outlook *o)
{
    static const axis_text axis[4] = {{"power", "W", 1}, {"speed", "mm/s", 1e3}, {"hatch", "um", 1e6}, {"layer", "um", 1e6}};
    const mw_turn *const turn[4] = {o->power, o->speed, o->hatch, o->layer};
    double best = INFINITY;
    int at = -1, side = 0;
    for (int i = 0; i < 4; i++)
        for (int k = 0; k < 2; k++)
            if (!isnan(turn[i][k].at) && fabs(log(1 + turn[i][k].change_pct / 100)) < best) {
                best = fabs(log(1 + turn[i][k].change_pct / 100));
                at = i;
                side = k;
            }
    if (at < 0)
        return;
    const mw_turn *t = &turn[at][side];
    if (r->judgement.verdict == MW_NOMINAL)
        (void)fprintf(to, "  nearest cliff: %s %s %.1f %%, then %s\n", axis[at].name, side ? "up" : "down", fabs(t->change_pct), mw_verdict_word(t->beyond));
    else
        (void)fprintf(to, "  smallest change: %s %s %.1f %%, to %.4g %s\n", axis[at].name, side ? "up" : "down", fabs(t->change_pct),
                      t->at * axis[at].to_trade, axis[at].unit);
}

static bool has_caution(const mw_alloy *alloy, const char *word)
{
    for (size_t i = 0; alloy != NULL && i < alloy->n_caution; i++)
        if (strcmp(alloy->caution[i], word) == 0)
            return true;
    return false;
}

void mw_caution_text(FILE *to, const mw_alloy *alloy)
{
    (void)fprintf(to, "An estimate, not a qualification: confirm with coupons before parts that carry load. Powder, laser and inert gas can injure:\n"
                      "local codes, the machine's rules and licensed practice come first (ISO/ASTM 52931, IEC 60825-1, NFPA 484).\n");
    if (has_caution(alloy, "reactive-powder"))
        (void)fprintf(to, "This powder burns: only class D extinguishing, never water or CO2 on burning metal; soot and filters can ignite by themselves.\n");
    if (has_caution(alloy, "nickel") || has_caution(alloy, "cobalt") || has_caution(alloy, "chromium"))
        (void)fprintf(to, "Its dust holds nickel, cobalt or chromium: sensitising, some of it carcinogenic; respirator and exposure limits apply.\n");
}

void mw_track_text(FILE *to, const mw_plan *plan, const mw_result *r, const mw_outlook *outlook)
{
    char outside[512];
    heading(to, plan, &r->setting);
    if (r->status == MW_NO_MELT) {
        (void)fprintf(to, "\nno track: the surface does not reach melting");
        if (!isnan(r->pool.peak_temperature_K))
            (void)fprintf(to, " (peak %.0f K, solidus %.0f K)", r->pool.peak_temperature_K, plan->melt.isotherm_K);
        (void)fputc('\n', to);
    } else {
        (void)fprintf(to, "\nmelt pool\n");
        size_line(to, "width", r->pool.width_m, r->width_lo_m, r->width_hi_m);
        size_line(to, "depth", r->pool.depth_m, r->depth_lo_m, r->depth_hi_m);
        size_line(to, "length", r->pool.length_m, r->length_lo_m, r->length_hi_m);
        mode_line(to, plan, r);
        heat_lines(to, plan, r);
    }
    energy_lines(to, r);
    limit_lines(to, plan, r);
    if (r->judged)
        verdict_lines(to, r);
    if (outlook != NULL) {
        outlook_lines(to, r, outlook);
        advice_line(to, r, outlook);
    }
    if (!r->judged)
        (void)fprintf(to, "\nno verdict: it needs %s%s%s\n", isnan(r->setting.hatch_m) ? "--hatch" : "",
                      isnan(r->setting.hatch_m) && r->setting.layer_m == 0 ? " and " : "", r->setting.layer_m == 0 ? "--layer" : "");
    if (mw_setting_outside(plan, &r->setting, outside, sizeof outside) > 0)
        (void)fprintf(to, "\noutside what published tracks and cubes cover: %s. Intervals are widened by judgement; the verdict is a guess there.\n",
                      outside);
    (void)fputc('\n', to);
    mw_caution_text(to, plan->alloy);
}
