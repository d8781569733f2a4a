/* SPDX-License-Identifier: GPL-3.0-or-later
 * What the machine can do at most, in this run: exponentials, comparisons, memory; on one thread and on two. */
#define _POSIX_C_SOURCE 200809L

#include <math.h>
#include <pthread.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>

#include "bench.h"
#include "kernels.h"

enum { THREADS = 2, SMALL = 2048, LARGE = 1 << 24, ROUNDS = 9 };

/* Each on cache lines of its own: the threads write into theirs at every turn. */
typedef struct job {
    _Alignas(128) kernel *run;
    kernel_slice slice;
    int repeats;
} job;

static void *work(void *v)
{
    job *j = v;
    for (int i = 0; i < j->repeats; i++)
        j->run(&j->slice);
    return NULL;
}

/* Seconds per element with all threads counted: half of it on two threads is a doubling. */
static double once(job *j, int threads)
{
    pthread_t thread[THREADS];
    int started = 0;
    double elements = 0;
    const double start = bench_now();
    for (; started < threads - 1; started++)
        if (pthread_create(&thread[started], NULL, work, &j[started + 1]) != 0)
            return NAN;
    (void)work(&j[0]);
    for (int i = 0; i < started; i++)
        (void)pthread_join(thread[i], NULL);
    const double seconds = bench_now() - start;
    for (int i = 0; i < threads; i++)
        elements += (double)j[i].slice.n * j[i].repeats;
    return seconds / elements;
}

typedef struct arrays {
    double *x, *y;
    float *f;
} arrays;

static bool take(arrays *a)
{
    const size_t n = LARGE;
    a->x = aligned_alloc(64, n * sizeof *a->x);
    a->y = aligned_alloc(64, n * sizeof *a->y);
    a->f = aligned_alloc(64, THREADS * SMALL * sizeof *a->f);
    if (a->x == NULL || a->y == NULL || a->f == NULL)
        return false;
    /* Golden-ratio steps fill -8..0 evenly in no order. */
    for (size_t i = 0; i < n; i++) {
        a->x[i] = -8 * fmod((double)i * 0.6180339887498949, 1);
        a->y[i] = 0;
    }
    for (size_t i = 0; i < THREADS * SMALL; i++)
        a->f[i] = (float)a->x[i];
    return true;
}

static void drop(arrays *a)
{
    free(a->x);
    free(a->y);
    free(a->f);
}

typedef struct limit {
    double one, two, speedup; /* medians, seconds per element; speedup: of the turns */
} limit;

/* `n` elements a thread, gone through `repeats` times. */
static limit measure(const arrays *a, kernel *run, size_t n, int repeats)
{
    double one[ROUNDS], two[ROUNDS], gain[ROUNDS];
    job j[THREADS];
    for (size_t t = 0; t < THREADS; t++)
        j[t] = (job){run, {a->x + t * n, a->y + t * n, a->f + t * (n <= SMALL ? n : 0), n, -4}, repeats};
    (void)once(j, THREADS);
    for (int i = 0; i < ROUNDS; i++) {
        one[i] = once(j, 1);
        two[i] = once(j, THREADS);
        gain[i] = one[i] / two[i];
    }
    return (limit){bench_median(one, ROUNDS), bench_median(two, ROUNDS), bench_median(gain, ROUNDS)};
}

/* Largest relative difference of an exponential loop from libm. */
static double exp_error(const arrays *a, kernel *run)
{
    kernel_slice s = {a->x, a->y, a->f, SMALL, 0};
    double worst = 0;
    run(&s);
    for (size_t i = 0; i < SMALL; i++) {
        const double error = fabs(s.y[i] / exp(s.x[i]) - 1);
        worst = isnan(error) ? INFINITY : fmax(worst, error);
    }
    return worst;
}

static void exp_line(bench *b, const arrays *a, const char *what, kernel *run, int repeats)
{
    char note[64];
    /* libm's vector form stays below 4 units in the last place, and so must the others. */
    const double error = exp_error(a, run), allowed = 5 * 2.3e-16;
    const limit l = measure(a, run, SMALL, repeats);
    b->wrong += !(error < allowed);
    (void)snprintf(note, sizeof note, "differs from libm by %.0e%s", error, error < allowed ? "" : " WRONG");
    bench_line(what, l.one, l.two, l.speedup, note);
}

/* Memory in GB/s, which is 1e-9 of bytes an element over seconds an element. */
static void memory_line(const arrays *a, const char *what, kernel *run, double bytes)
{
    char note[64];
    const limit l = measure(a, run, LARGE / THREADS, 1);
    (void)snprintf(note, sizeof note, "%.3g and %.3g GB/s", 1e-9 * bytes / l.one, 1e-9 * bytes / l.two);
    bench_line(what, l.one, l.two, l.speedup, note);
}

void bench_machine(bench *b)
{
    arrays a;
    bench_heading("Limits of this machine, one element", "1 thread", "2 threads", "times");
    if (take(&a)) {
        exp_line(b, &a, "exp, libm, one at a time", kernel_exp_scalar, 1000);
        exp_line(b, &a, "exp, libm in a vector loop, as the model uses it", kernel_exp_vector, 4000);
        exp_line(b, &a, "exp, polynomial in a vector loop", kernel_exp_series, 4000);
        const limit compare = measure(&a, kernel_compare, SMALL, 60000);
        bench_line("compare and count, float in a vector loop", compare.one, compare.two, compare.speedup, NULL);
        memory_line(&a, "read doubles from memory", kernel_read, 8);
        memory_line(&a, "y += a x in memory", kernel_axpy, 24);
    } else
        (void)printf("  not enough memory: not measured\n");
    drop(&a);
}
