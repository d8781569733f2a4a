/* SPDX-License-Identifier: GPL-3.0-or-later
 * card: list, show, check and describe alloy cards. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "cli/common.h"
#include "meltwright/text.h"

enum { CARD_MOST_BYTES = 4 << 20 };

static int wrong_words(const arguments *args, const char *text)
{
    mw_error err;
    (void)mw_fail(&err, MW_BAD_USAGE, NULL, 0, "%s", text);
    return complain(args->command, &err);
}

static void list_line(FILE *to, const mw_alloy *a)
{
    size_t memory = 0, estimated = 0, present = 0;
    for (int p = 0; p < MW_PROPERTY_COUNT; p++) {
        present += a->property[p].n > 0;
        memory += a->property[p].n > 0 && a->property[p].from_memory;
        estimated += a->property[p].n > 0 && a->property[p].estimated_by != NULL;
    }
    (void)fprintf(to, "%-14s %-16s %6.0f K %6.0f K   %2zu of %d %7zu %10zu\n", a->name, a->n_designation > 0 ? a->designation[0] : "",
                  a->property[MW_PROP_SOLIDUS].value[0], a->property[MW_PROP_BOILING].value[0], present, MW_PROPERTY_COUNT, memory, estimated);
}

static int list_cards(const arguments *args, FILE *to)
{
    folders where;
    mw_error err;
    char **names = NULL;
    size_t n = 0;
    find_folders(&where);
    mw_status status = mw_alloy_names(where.path, where.n, &names, &n, &err);
    if (status != MW_OK)
        return complain(args->command, &err);
    (void)fputs("name           designation      solidus  boiling  properties  memory  estimated\n", to);
    for (size_t i = 0; i < n && status == MW_OK; i++) {
        mw_alloy *alloy;
        status = load_alloy(names[i], &alloy, &err);
        if (status == MW_OK)
            list_line(to, alloy);
        mw_alloy_free(alloy);
    }
    if (n == 0)
        (void)fputs("(no cards found; MELTWRIGHT_ALLOYS may name a folder of them)\n", to);
    mw_names_free(names, n);
    return status == MW_OK ? EXIT_DONE : complain(args->command, &err);
}

static void put_values(FILE *to, const mw_property *p)
{
    if (p->n == 1) {
        (void)fprintf(to, "%.6g", p->value[0]);
        if (!isnan(p->temperature_K[0]))
            (void)fprintf(to, " at %.0f K", p->temperature_K[0]);
        return;
    }
    (void)fprintf(to, "%.5g to %.5g over %.0f to %.0f K (%zu rows)", p->value[0], p->value[p->n - 1], p->temperature_K[0],
                  p->temperature_K[p->n - 1], p->n);
}

static void show_property(FILE *to, const mw_alloy *a, mw_property_id id)
{
    const mw_property *p = &a->property[id];
    (void)fprintf(to, "  %-34s ", mw_property_key(id));
    if (p->n == 0) {
        (void)fputs("not given\n", to);
        return;
    }
    put_values(to, p);
    (void)fprintf(to, "  +-%.3g %%  [", p->uncertainty_pct);
    for (size_t i = 0; i < p->n_source; i++)
        (void)fprintf(to, "%s%s", i > 0 ? ", " : "", p->source[i]);
    (void)fprintf(to, "]%s\n", p->from_memory ? " from memory" : "");
    if (p->estimated_by != NULL)
        (void)fprintf(to, "  %-34s estimated: %s\n", "", p->estimated_by);
    if (p->note != NULL)
        (void)fprintf(to, "  %-34s %s\n", "", p->note);
}

static void show_averages(FILE *to, const mw_alloy *a, double preheat_K, const mw_effective *e)
{
    (void)a;
    (void)fprintf(to, "\naverages from the tables for a plate at %.4g C\n", preheat_K - 273.15);
    (void)fprintf(to, "  conductivity to the solidus        %.5g W/(m K)      to boiling %.5g\n", e->melt.conductivity_W_per_mK,
                  e->boil.conductivity_W_per_mK);
    (void)fprintf(to, "  heat to the solidus                %.4g J/kg, with melting %.4g J/kg\n", e->sensible_J_per_kg, e->enthalpy_to_melt_J_per_kg);
    (void)fprintf(to, "  volumetric heat, melting included  %.5g J/(m3 K)   to boiling %.5g\n", e->melt.volumetric_heat_J_per_m3K,
                  e->boil.volumetric_heat_J_per_m3K);
    (void)fprintf(to, "  diffusivity                        %.4g m2/s\n", e->melt.conductivity_W_per_mK / e->melt.volumetric_heat_J_per_m3K);
}

static int show_text(const arguments *args, FILE *to, const mw_alloy *a)
{
    mw_error err;
    double preheat_K = 293.15;
    mw_effective e;
    mw_status status = read_quantity(args, OPT_PREHEAT, MW_TEMPERATURE, &preheat_K, &err);
    if (status == MW_OK && mw_alloy_effective(a, preheat_K, &e) < 0)
        status = mw_fail(&err, MW_BAD_VALUE, NULL, 0, "--preheat %.4g C is not below the solidus", preheat_K - 273.15);
    if (status != MW_OK)
        return complain(args->command, &err);
    (void)fprintf(to, "%s", a->name);
    for (size_t i = 0; i < a->n_designation; i++)
        (void)fprintf(to, "%s%s", i > 0 ? ", " : "  ", a->designation[i]);
    (void)fprintf(to, "\n%s\nfile %s, hash %s\n\ncomposition, mass percent: %s balance", a->summary, a->path, a->hash, a->balance);
    for (size_t i = 0; i < a->n_limit; i++)
        (void)fprintf(to, ", %s %g-%g", a->limit[i].element, a->limit[i].low_pct, a->limit[i].high_pct);
    (void)fputs("\n\nproperties: value, standard uncertainty, sources\n", to);
    for (int p = 0; p < MW_PROPERTY_COUNT; p++)
        show_property(to, a, (mw_property_id)p);
    show_averages(to, a, preheat_K, &e);
    (void)fputs("\nsources\n", to);
    for (size_t i = 0; i < a->n_source; i++)
        (void)fprintf(to, "  %s (%s): %s%s%s\n", a->source[i].key, a->source[i].seen, a->source[i].citation, a->source[i].doi != NULL ? " doi:" : "",
                      a->source[i].doi != NULL ? a->source[i].doi : "");
    return EXIT_DONE;
}

static int show_json(const arguments *args, FILE *to, const mw_alloy *a)
{
    char *bytes;
    size_t n;
    mw_error err;
    if (mw_file_read(a->path, CARD_MOST_BYTES, &bytes, &n, &err) != MW_OK)
        return complain(args->command, &err);
    (void)fwrite(bytes, 1, n, to);
    free(bytes);
    return EXIT_DONE;
}

static int show_card(const arguments *args, FILE *to)
{
    mw_error err = {MW_OK, ""};
    mw_alloy *alloy = NULL;
    output_format format;
    mw_status status = read_format(args, FORMAT_TEXT, &format, &err);
    if (status == MW_OK && format == FORMAT_CSV)
        status = mw_fail(&err, MW_BAD_VALUE, NULL, 0, "--format: a card is shown as text or json");
    if (status == MW_OK)
        status = load_alloy(args->word[1], &alloy, &err);
    if (status != MW_OK)
        return complain(args->command, &err);
    const int code = format == FORMAT_JSON ? show_json(args, to, alloy) : show_text(args, to, alloy);
    mw_alloy_free(alloy);
    return code;
}

static int check_cards(const arguments *args, FILE *to)
{
    size_t bad = 0;
    for (size_t i = 1; i < args->n_word; i++) {
        mw_alloy *alloy = NULL;
        mw_error err;
        if (mw_alloy_load(args->word[i], &alloy, &err) == MW_OK) {
            (void)fprintf(to, "%s: good, alloy %s, hash %s\n", args->word[i], alloy->name, alloy->hash);
        } else {
            bad++;
            (void)complain(args->command, &err);
        }
        mw_alloy_free(alloy);
    }
    return bad > 0 ? EXIT_NO : EXIT_DONE;
}

static int print_schema(const arguments *args, FILE *to)
{
    char *schema = mw_alloy_schema();
    if (schema == NULL) {
        mw_error err;
        (void)mw_fail(&err, MW_NO_MEMORY, NULL, 0, "out of memory");
        return complain(args->command, &err);
    }
    (void)fputs(schema, to);
    free(schema);
    return EXIT_DONE;
}

typedef struct action {
    const char *name, *words; /* words: what must follow, for messages */
    size_t least, most;
    int (*run)(const arguments *args, FILE *to);
} action;

static const action actions[] = {
    {"list", "nothing", 0, 0, list_cards},
    {"show", "one NAME or FILE", 1, 1, show_card},
    {"check", "one FILE or more", 1, MOST_WORDS, check_cards},
    {"schema", "nothing, or the word alloy", 0, 1, print_schema},
};

static int run_action(const arguments *args, const action *a)
{
    char text[160];
    const size_t n = args->n_word - 1;
    if (n < a->least || n > a->most || (a->run == print_schema && n == 1 && strcmp(args->word[1], "alloy") != 0)) {
        (void)snprintf(text, sizeof text, "'card %s' is followed by %s", a->name, a->words);
        return wrong_words(args, text);
    }
    mw_error err;
    output out;
    if (given(args, OPT_FORMAT) && a->run != show_card)
        return wrong_words(args, "--format goes with 'card show' alone");
    if (open_output(args, &out, &err) != MW_OK)
        return complain(args->command, &err);
    int code = a->run(args, out.to);
    if (code == EXIT_DONE && close_output(&out, NULL, &err) != MW_OK)
        code = complain(args->command, &err);
    drop_output(&out);
    return code;
}

int run_card(const arguments *args)
{
    const char *names[sizeof actions / sizeof *actions];
    char text[160];
    for (size_t i = 0; i < sizeof actions / sizeof *actions; i++) {
        names[i] = actions[i].name;
        if (args->n_word > 0 && strcmp(args->word[0], names[i]) == 0)
            return run_action(args, &actions[i]);
    }
    if (args->n_word == 0)
        return wrong_words(args, "what with the cards? list, show, check or schema");
    const char *near = mw_nearest_name(args->word[0], names, sizeof actions / sizeof *actions);
    (void)snprintf(text, sizeof text, "'%.40s' is not list, show, check or schema%s%s%s", args->word[0], near != NULL ? "; did you mean " : "",
                   near != NULL ? near : "", near != NULL ? "?" : "");
    return wrong_words(args, text);
}
