/* SPDX-License-Identifier: GPL-3.0-or-later
 * Help, printed from the option table and the command list. */
#include <stdio.h>
#include <string.h>

#include "cli/options.h"
#include "meltwright/version.h"

static const struct {
    const char *name, *metavar, *standard, *help;
    char letter;
    unsigned on;
} table[OPTION_COUNT] = {
#define X(id, name, letter, value, on, metavar, standard, help) {name, metavar, standard, help, letter, on},
    OPTION_LIST(X)
#undef X
};

void print_usage(void)
{
    (void)fputs("meltwright COMMAND [options]: melt pools, verdicts and process maps for laser powder bed fusion\n"
                "for example:  meltwright track --alloy 316L --d4sigma 80 --power 200 --speed 800 --hatch 100 --layer 30\n"
                "commands:     meltwright --help\n",
                stderr);
}

void print_help(void)
{
    (void)printf("meltwright %s: melt pools, verdicts and process maps for laser powder bed fusion (PBF-LB/M)\n\n"
                 "usage: meltwright COMMAND [options]\n\n",
                 mw_version());
    for (size_t i = 0; i < command_count; i++)
        (void)printf("  %-7s %s\n", command_list[i].name, command_list[i].summary);
    (void)fputs("\nmeltwright COMMAND --help shows the options of a command, their units and worked examples.\n\n"
                "Values: plain numbers are W, mm/s, um and C; a suffix overrides: 0.2kW 0.8m/s 0.08mm 353K.\n"
                "Grids: lists 80,100,120 and ranges START:STOP:COUNT, joined as 80,100:140:3.\n"
                "Beam: exactly one of --d4sigma, --fwhm, --radius-1e2, --diameter-1e2.\n"
                "Exit: 0 done, 1 done but the answer is no, 2 misuse, 3 bad input file or value, 4 could not write.\n\n"
                "Results are estimates with stated intervals, not a qualification: confirm with coupons. Metal powder, laser and\n"
                "inert gas can injure: local codes and the machine's own rules come first.\n",
                stdout);
}

static void print_option(size_t i)
{
    char left[64];
    const char letter[5] = {table[i].letter ? '-' : ' ', table[i].letter ? table[i].letter : ' ', table[i].letter ? ',' : ' ', ' ', '\0'};
    (void)snprintf(left, sizeof left, "%s--%s%s%s", letter, table[i].name, table[i].metavar != NULL ? " " : "",
                   table[i].metavar != NULL ? table[i].metavar : "");
    (void)printf("  %-30s %s", left, table[i].help);
    if (table[i].standard != NULL)
        (void)printf(" [default: %s]", table[i].standard);
    (void)putchar('\n');
}

void print_command_help(const command_entry *of)
{
    (void)printf("usage: meltwright %s\n\n%s\n", of->usage, of->summary);
    for (const char *const *p = of->about; *p != NULL; p++)
        (void)printf("\n%s\n", *p);
    (void)fputs("\noptions:\n", stdout);
    for (size_t i = 0; i < OPTION_COUNT; i++)
        if ((table[i].on & of->on) != 0)
            print_option(i);
    (void)fputs("\nexamples:\n", stdout);
    for (const char *const *e = of->example; *e != NULL; e++)
        (void)printf("  %s\n", *e);
}
