/* SPDX-License-Identifier: GPL-3.0-or-later
 * Whole processes, from start to exit, as a person or a script runs them. */
#define _POSIX_C_SOURCE 200809L
#include "bench.h"

#include <fcntl.h>
#include <math.h>
#include <spawn.h>
#include <stdio.h>
#include <stdlib.h>
#include <sys/wait.h>
#include <unistd.h>

enum { FEW_ROWS = 10000, MANY_ROWS = 100000, JUDGED_ROWS = 300, MOST_ARGUMENTS = 32 };

extern char **environ;

typedef struct process {
    const char *argument[MOST_ARGUMENTS]; /* closed by NULL */
    double units;                         /* of work in it */
} process;

/* Seconds of one run per unit of its work; NaN unless it ends with 0. What it prints is thrown away. */
static double time_process(void *v)
{
    const process *p = v;
    char *argument[MOST_ARGUMENTS] = {NULL};
    posix_spawn_file_actions_t files;
    pid_t id;
    int status = 1;
    /* posix_spawn takes the strings as not const but does not change them. */
    union {
        const char *in;
        char *out;
    } plain;
    for (size_t i = 0; i + 1 < MOST_ARGUMENTS && p->argument[i] != NULL; i++) {
        plain.in = p->argument[i];
        argument[i] = plain.out;
    }
    if (posix_spawn_file_actions_init(&files) != 0)
        return NAN;
    (void)posix_spawn_file_actions_addopen(&files, STDOUT_FILENO, "/dev/null", O_WRONLY, 0);
    const double start = bench_now();
    const bool started = posix_spawnp(&id, argument[0], &files, NULL, argument, environ) == 0;
    const bool ended = started && waitpid(id, &status, 0) == id;
    const double seconds = bench_now() - start;
    (void)posix_spawn_file_actions_destroy(&files);
    return ended && WIFEXITED(status) && WEXITSTATUS(status) == 0 ? seconds / p->units : NAN;
}

/* A table of settings that all melt, spread evenly and in no order over power and speed. */
static bool write_rows(const char *path, int n, bool judged)
{
    FILE *f = fopen(path, "w");
    if (f == NULL)
        return false;
    (void)fprintf(f, "label,power_W,speed_mm_per_s%s\n", judged ? ",hatch_um,layer_um" : "");
    for (int i = 0; i < n; i++) {
        /* Additive recurrence in two dimensions on powers of the plastic number. */
        const double u = fmod(0.7548776662466927 * i, 1), v = fmod(0.5698402909980532 * i, 1);
        (void)fprintf(f, "row %d,%.1f,%.0f%s\n", i, 150 + 250 * u, 300 + 1200 * v, judged ? ",110,40" : "");
    }
    return fclose(f) == 0;
}

enum { FEW, MANY, JUDGED, TABLE, SIDECAR, PICTURE, FILE_COUNT };

typedef struct folder {
    char path[64];
    char file[FILE_COUNT][96];
} folder;

static bool make_folder(folder *f)
{
    static const char *const name[FILE_COUNT] = {"few.csv", "many.csv",     "judged.csv",
                                                 "out.csv", "out.csv.json", "map.svg"};
    (void)snprintf(f->path, sizeof f->path, "/tmp/meltwright-bench-XXXXXX");
    if (mkdtemp(f->path) == NULL)
        return false;
    for (int i = 0; i < FILE_COUNT; i++)
        (void)snprintf(f->file[i], sizeof f->file[i], "%s/%s", f->path, name[i]);
    return write_rows(f->file[FEW], FEW_ROWS, false) && write_rows(f->file[MANY], MANY_ROWS, false) &&
           write_rows(f->file[JUDGED], JUDGED_ROWS, true);
}

static void remove_folder(const folder *f)
{
    for (int i = 0; i < FILE_COUNT; i++)
        (void)unlink(f->file[i]);
    (void)rmdir(f->path);
}

static bench_pair compare(bench *b, const char *what, process small, process large, int rounds, const char *each)
{
    char note[64] = "";
    const bench_pair p = bench_in_turns(time_process, &small, time_process, &large, rounds);
    if (each != NULL)
        (void)snprintf(note, sizeof note, "%.3g %s", 1 / p.other, each);
    b->wrong += !(p.ratio > 0);
    bench_line(what, p.ours, p.other, p.ratio, p.ratio > 0 ? note : "FAILED");
    return p;
}

static process table(const char *program, const char *from, const char *to, double rows)
{
    return (process){
        {program, "track", "--from", from, "--alloy", "316L", "--d4sigma", "80", "-q", "--force", "-o", to}, rows};
}

static void compare_all(bench *b, const folder *f)
{
    const process nothing = {{"true"}, 1};
    const process track = {{b->program, "track", "--alloy", "316L", "--d4sigma", "80", "--power", "200", "--speed",
                            "800", "--hatch", "110", "--layer", "40"},
                           1};
    const process summary = {{b->program, "map", "--alloy", "316L", "--d4sigma", "80", "--power", "60:400:129",
                              "--speed", "200:2000:129", "--hatch", "110", "--layer", "40", "-q"},
                             1};
    process picture = summary;
    size_t n = 0;
    while (picture.argument[n] != NULL)
        n++;
    picture.argument[n++] = "--force";
    picture.argument[n++] = "-o";
    picture.argument[n] = f->file[PICTURE];
    (void)compare(b, "a process that does nothing against track, one setting", nothing, track, 25, NULL);
    (void)compare(b, "map 129 x 129, summary against the same with SVG", summary, picture, 3, NULL);
    const process few = table(b->program, f->file[FEW], f->file[TABLE], FEW_ROWS);
    (void)compare(b, "track --from, a row of 10 000 against one of 100 000", few,
                  table(b->program, f->file[MANY], f->file[TABLE], MANY_ROWS), 2, "rows/s");
    (void)compare(b, "track --from, a single track against all margins", few,
                  table(b->program, f->file[JUDGED], f->file[TABLE], JUDGED_ROWS), 3, "rows/s");
}

void bench_program(bench *b)
{
    folder f;
    bench_heading("Whole processes, all cores", "less", "more", "times");
    if (make_folder(&f))
        compare_all(b, &f);
    else {
        (void)printf("  no room for files in /tmp\n");
        b->wrong++;
    }
    remove_folder(&f);
}
