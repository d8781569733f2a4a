/* SPDX-License-Identifier: GPL-3.0-or-later
 * Prints how fast meltwright is beside the simple way, the machine's limits, and itself on other sizes, in one run.
 * usage: bench PROGRAM, from the repository root. Exit 1: something timed does not give the right answer. */
#include "bench.h"

#include <gsl/gsl_errno.h>
#include <stdio.h>
#include <stdlib.h>

#include "meltwright/version.h"

void bench_stop_on(mw_status status, const mw_error *err)
{
    if (status >= 0)
        return;
    (void)fflush(stdout);
    (void)fprintf(stderr, "bench: %s\n", err->text);
    exit(2);
}

void bench_time(char out[24], double seconds)
{
    static const struct {
        double size;
        const char *name;
    } unit[] = {{1, "s"}, {1e-3, "ms"}, {1e-6, "us"}, {1e-9, "ns"}};
    out[0] = '\0';
    for (size_t i = 0; i < sizeof unit / sizeof *unit && out[0] == '\0' && seconds > 0; i++)
        if (seconds >= unit[i].size || i == 3)
            (void)snprintf(out, 24, "%.3g %s", seconds / unit[i].size, unit[i].name);
}

void bench_heading(const char *title, const char *ours, const char *other, const char *ratio)
{
    (void)printf("\n%-54s %12s %12s %9s\n", title, ours, other, ratio);
}

void bench_line(const char *what, double ours_s, double other_s, double ratio, const char *note)
{
    char ours[24], other[24], times[24] = "";
    bench_time(ours, ours_s);
    bench_time(other, other_s);
    if (ratio > 0)
        (void)snprintf(times, sizeof times, ratio >= 1000 ? "%.0f" : "%.3g", ratio);
    const bool more = note != NULL && note[0] != '\0';
    (void)printf("  %-52s %12s %12s %9s%s%s\n", what, ours, other, times, more ? "  " : "", more ? note : "");
    (void)fflush(stdout);
}

/* A new comparison is one more function here. */
static void (*const sections[])(bench *) = {bench_tables, bench_pools, bench_machine, bench_growth, bench_program};

int main(int argc, char **argv)
{
    if (argc != 2) {
        (void)fputs("usage: bench PROGRAM\n", stderr);
        return 2;
    }
    bench b = {.program = argv[1]};
    (void)gsl_set_error_handler_off();
    (void)printf(
        "meltwright %s: speed. Medians; what is compared runs in turns, and the ratio is the median of the turns.\n"
        "Times belong to this machine and this minute; ratios travel better.\n",
        mw_version());
    const double start = bench_now();
    for (size_t i = 0; i < sizeof sections / sizeof *sections; i++)
        sections[i](&b);
    (void)printf("\n%.0f s in all; disagreements or failures: %d\n", bench_now() - start, b.wrong);
    return fflush(stdout) != 0 || b.wrong > 0;
}
