/* SPDX-License-Identifier: GPL-3.0-or-later
 * The one table of options. Parsing, refusals, suggestions and --help are all read from it. */
#ifndef MELTWRIGHT_CLI_OPTIONS_H
#define MELTWRIGHT_CLI_OPTIONS_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/status.h"
#include "meltwright/units.h"

enum { ON_CARD = 1, ON_TRACK = 2, ON_SWEEP = 4, ON_MAP = 8, ON_GRIDS = ON_SWEEP | ON_MAP, ON_MODELS = ON_TRACK | ON_GRIDS, ON_ALL = ON_CARD | ON_MODELS };

/* X(ID, "name", letter or 0, takes a value, commands, "VALUE", "default" or NULL, "help") */
#define OPTION_LIST(X)                                                                                                                    \
    X(ALLOY, "alloy", 0, true, ON_MODELS, "NAME|FILE", NULL, "alloy card: a name, a designation such as S31603, or a JSON file")          \
    X(POWER, "power", 0, true, ON_MODELS, "W", NULL, "laser power at the plate; W or kW")                                                  \
    X(SPEED, "speed", 0, true, ON_MODELS, "MM/S", NULL, "scan speed; mm/s or m/s")                                                         \
    X(HATCH, "hatch", 0, true, ON_MODELS, "UM", NULL, "distance between neighbouring tracks; um or mm")                                    \
    X(LAYER, "layer", 0, true, ON_MODELS, "UM", "0, bare plate", "nominal layer thickness; um or mm")                                      \
    X(D4SIGMA, "d4sigma", 0, true, ON_MODELS, "UM", NULL, "beam diameter as D4sigma (ISO 11146); of a Gaussian beam the 1/e2 diameter")    \
    X(FWHM, "fwhm", 0, true, ON_MODELS, "UM", NULL, "or: full width at half maximum of a Gaussian beam")                                   \
    X(RADIUS, "radius-1e2", 0, true, ON_MODELS, "UM", NULL, "or: 1/e2 radius")                                                             \
    X(DIAMETER, "diameter-1e2", 0, true, ON_MODELS, "UM", NULL, "or: 1/e2 diameter")                                                       \
    X(BEAM_DOUBT, "beam-uncertainty", 0, true, ON_MODELS, "PCT", "20", "standard uncertainty of the beam diameter, percent; beyond 20 the intervals widen") \
    X(PREHEAT, "preheat", 0, true, ON_ALL, "C", "20", "plate temperature; C or K")                                                         \
    X(MODEL, "model", 0, true, ON_MODELS, "WORD", "default", "default, gaussian or rosenthal")                                             \
    X(ABSORPTIVITY, "absorptivity", 0, true, ON_MODELS, "A", "the card's coupling", "absorptivity of the flat surface, 0 to 1")            \
    X(CONDUCTIVITY, "conductivity", 0, true, ON_MODELS, "W/MK", NULL, "replaces the card's conductivity; check cases")                     \
    X(DENSITY, "density", 0, true, ON_MODELS, "KG/M3", NULL, "replaces the card's density")                                                \
    X(HEAT_CAPACITY, "heat-capacity", 0, true, ON_MODELS, "J/KGK", NULL, "replaces the card's heat capacity")                              \
    X(MELTING, "melting-point", 0, true, ON_MODELS, "K", NULL, "replaces the card's solidus; with these four given no latent heat is added") \
    X(FROM, "from", 0, true, ON_TRACK | ON_MAP, "FILE.csv", NULL, "settings to evaluate (track) or to mark (map); - is standard input")    \
    X(CONTOURS, "contours", 0, true, ON_MAP, "LIST", NULL, "lines of width, depth, build-rate on the map, e.g. width,depth")               \
    X(ENERGY_LINES, "energy-lines", 0, true, ON_MAP, "LIST", NULL, "lines of one volumetric energy density, J/mm3, or auto")               \
    X(SAMPLES, "samples", 0, true, ON_SWEEP, "N", NULL, "draw the uncertain inputs N times and count the verdicts of each cell")            \
    X(SEED, "seed", 0, true, ON_SWEEP, "N", "1", "with --samples: another set of draws")                                                    \
    X(SHARD, "shard", 0, true, ON_TRACK | ON_SWEEP, "I/N", NULL, "only the I-th of N parts of the table; parts in order make the whole")   \
    X(FORMAT, "format", 0, true, ON_ALL, "WORD", NULL, "text, csv or json")                                                                \
    X(OUTPUT, "output", 'o', true, ON_ALL, "FILE", NULL, "write here instead of standard output; map: .svg, .png or .pdf")                 \
    X(FORCE, "force", 0, false, ON_ALL, NULL, NULL, "replace a file that exists")                                                          \
    X(THREADS, "threads", 0, true, ON_MODELS, "N", "all cores", "threads for grids and tables; the result does not depend on it")                                \
    X(QUIET, "quiet", 'q', false, ON_ALL, NULL, NULL, "no remarks on standard error")                                                      \
    X(HELP, "help", 'h', false, ON_ALL, NULL, NULL, "this text")

typedef enum option_id {
#define X(id, name, letter, value, on, metavar, standard, help) OPT_##id,
    OPTION_LIST(X)
#undef X
    OPTION_COUNT
} option_id;

enum { MOST_WORDS = 64 };

typedef struct arguments {
    const char *command;
    unsigned on;                       /* the command's bit */
    const char *value[OPTION_COUNT];   /* NULL = not given; "" for a flag that is */
    option_id order[OPTION_COUNT];     /* as given */
    size_t n_order;
    const char *word[MOST_WORDS];      /* what is no option */
    size_t n_word;
} arguments;

typedef struct command_entry {
    const char *name;
    unsigned on;
    int (*run)(const arguments *args);
    const char *usage, *summary;
    const char *const *about;    /* paragraphs of help, NULL-ended */
    const char *const *example;  /* commands, NULL-ended */
} command_entry;
extern const command_entry command_list[];
extern const size_t command_count;

/* argv after the command's name -> out. Errors: MW_BAD_USAGE with one line. */
mw_status parse_arguments(const command_entry *of, int argc, char **argv, arguments *out, mw_error *err);

const char *option_name(option_id id);
void print_usage(void);                     /* short, to standard error */
void print_help(void);                      /* of the program, to standard output */
void print_command_help(const command_entry *of); /* to standard output */

#endif
