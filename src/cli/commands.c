/* SPDX-License-Identifier: GPL-3.0-or-later
 * The list of commands with the words of their help. The tests run every example. */
#include "cli/common.h"

static const char *const card_about[] = {
    "  list               the alloys known here\n"
    "  show NAME|FILE     every value with unit, uncertainty, source and remarks; averages at --preheat; --format json: the file itself\n"
    "  check FILE...      says of each file that it is good, or the one thing that is wrong: file, line, key, value, what is allowed\n"
    "  schema             the JSON Schema of an alloy card\n\n"
    "Named cards come from the folders in MELTWRIGHT_ALLOYS (separated by colons), then from those installed with the program.",
    NULL};
static const char *const card_example[] = {"meltwright card list", "meltwright card show S31603", "meltwright card show Ti-6Al-4V --preheat 200",
                                           "meltwright card schema -o alloy.schema.json", NULL};

static const char *const track_about[] = {
    "With --hatch and --layer there is a verdict, with margins in every factor; without them only the pool. With --from a table is\n"
    "evaluated, one output row an input row; columns it knows: alloy power_W speed_mm_per_s d4sigma_um layer_um hatch_um preheat_C\n"
    "and the check-case columns absorptivity conductivity_W_per_mK density_kg_per_m3 heat_capacity_J_per_kgK melting_point_K.\n"
    "Options fill cells that are empty or absent. Other columns are passed through; where one has the name of a result, the result is\n"
    "called NAME_predicted. Exit 1: no track, or some rows could not be evaluated (the reason stands in their status).",
    NULL};
static const char *const track_example[] = {
    "meltwright track --alloy 316L --d4sigma 80 --power 200 --speed 800 --hatch 110 --layer 40",
    "meltwright track --alloy N07718 --fwhm 59um --power 0.285kW --speed 0.96m/s --format json",
    "meltwright track --alloy AlSi10Mg --radius-1e2 40 --power 350 --speed 1300 --hatch 130 --layer 30 --preheat 35",
    "meltwright track --model gaussian --d4sigma 80 --power 200 --speed 800 --absorptivity 0.35 --conductivity 26.9 --density 6881 "
    "--heat-capacity 790 --melting-point 1730 --preheat 300K --format csv",
    NULL};

static const char *const sweep_about[] = {
    "Each of power, speed, hatch and layer is one value, a list, or a range START:STOP:COUNT. Rows: power slowest, layer fastest.\n"
    "Pools are computed once a power and speed, so hatch and layer cost almost nothing. The table is written as it is computed.\n"
    "With --samples coupling, onset, conductivity, heat, solidus, boiling and beam are drawn from their standard uncertainties (the card's, and\n"
    "--beam-uncertainty, the leading one: measure the beam), and the table holds the share of samples with each verdict: doubt in the inputs, beside the verdict's own odds.",
    NULL};
static const char *const sweep_example[] = {
    "meltwright sweep --alloy 316L --d4sigma 80 --power 150:300:4 --speed 600:1200:4 --hatch 90,110 --layer 30,40 --format text",
    "meltwright sweep --alloy Ti-6Al-4V --d4sigma 100 --power 100:300:21 --speed 0.4:1.6:25m/s --hatch 100 --layer 30 -o window.csv",
    "meltwright sweep --alloy 625 --diameter-1e2 0.1mm --power 195 --speed 400,800,1200 --format csv",
    "meltwright sweep --alloy 316L --d4sigma 80 --power 100:400:31 --speed 200:2000:37 --hatch 80,110 --layer 30,40 --samples 500 --beam-uncertainty 10 "
    "-o doubt.csv",
    NULL};

static const char *const map_about[] = {
    "Draws the verdict over power and speed, one panel a hatch and layer, as SVG, PNG or PDF by the ending of -o, and prints what share of\n"
    "each panel is nominal and where its most robust place lies. Ranges may leave out COUNT (129 is taken then). Without -o: the summary.\n"
    "--format csv gives the grid itself, --format json the summary.",
    NULL};
static const char *const map_example[] = {
    "meltwright map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 110 --layer 40 -o map.svg",
    "meltwright map --alloy 718 --d4sigma 80 --power 100:400 --speed 300:2000 --hatch 80,110 --layer 40 --contours width,depth "
    "--energy-lines auto -o map.png",
    "meltwright map --alloy AlSi10Mg --d4sigma 90 --power 150:500:65 --speed 500:3000:65 --hatch 150 --layer 30 --format json", NULL};

const command_entry command_list[] = {
    {"card", ON_CARD, run_card, "card list | show NAME | check FILE... | schema [options]", "alloy cards: list, show, check, schema", card_about,
     card_example},
    {"track", ON_TRACK, run_track, "track --alloy NAME --d4sigma UM --power W --speed MM/S [--hatch UM --layer UM] [options]",
     "melt pool, mode, energy densities and verdict of one setting, or of every row of a table", track_about, track_example},
    {"sweep", ON_SWEEP, run_sweep, "sweep --alloy NAME --d4sigma UM --power W,.. --speed MM/S,.. [--hatch UM,.. --layer UM,..] [options]",
     "full table over power, speed, hatch and layer", sweep_about, sweep_example},
    {"map", ON_MAP, run_map, "map --alloy NAME --d4sigma UM --power START:STOP --speed START:STOP --hatch UM,.. --layer UM,.. [-o FILE.svg]",
     "process map over power and speed, one panel a hatch and layer", map_about, map_example},
};
const size_t command_count = sizeof command_list / sizeof *command_list;
