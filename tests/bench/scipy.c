/* SPDX-License-Identifier: GPL-3.0-or-later
 * Runs pool_scipy.py: settings through a file, pools and time through a pipe. */
#define _POSIX_C_SOURCE 200809L
#include "scipy.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <unistd.h>

bool scipy_find(scipy *out)
{
    static const char *const candidate[] = {"/usr/bin/python3", "python3"};
    for (size_t i = 0; i < sizeof candidate / sizeof *candidate; i++) {
        char command[128];
        (void)snprintf(command, sizeof command, "%s -c 'import scipy' >/dev/null 2>&1", candidate[i]);
        out->python = candidate[i];
        if (system(command) == 0)
            return true;
    }
    return false;
}

/* Writes the settings to a new file and puts its name into `path`. */
static bool write_settings(char *path, const pool_set *set)
{
    const int fd = mkstemp(path);
    FILE *f = fd >= 0 ? fdopen(fd, "w") : NULL;
    if (f == NULL)
        return false;
    for (size_t i = 0; i < set->n; i++)
        (void)fprintf(f, "%.17g %.17g %.17g %.17g %.17g %.17g %.17g\n", set->source[i].absorbed_W,
                      set->source[i].speed_m_per_s, set->source[i].sigma_m, set->medium[i].conductivity_W_per_mK,
                      set->medium[i].volumetric_heat_J_per_m3K, set->medium[i].ambient_K, set->medium[i].isotherm_K);
    return fclose(f) == 0;
}

static double read_pools(FILE *f, const pool_set *set, double *worst)
{
    double seconds = NAN;
    *worst = 0;
    for (size_t i = 0; i < set->n; i++) {
        double width, depth, length;
        if (fscanf(f, "%lf %lf %lf", &width, &depth, &length) != 3) {
            *worst = INFINITY;
            return NAN;
        }
        *worst = fmax(*worst, pool_set_error(set, i, width, depth, length));
    }
    return fscanf(f, "%lf", &seconds) == 1 ? seconds : NAN;
}

double scipy_pools(const scipy *s, const char *clock, const pool_set *set, double *worst)
{
    char path[] = "/tmp/meltwright-bench-XXXXXX", command[256];
    double seconds = NAN;
    *worst = INFINITY;
    if (write_settings(path, set)) {
        /* quad warns of round-off where its value is good */
        (void)snprintf(command, sizeof command, "%s -W ignore tests/bench/pool_scipy.py %s <%s", s->python, clock,
                       path);
        FILE *f = popen(command, "r");
        if (f != NULL) {
            seconds = read_pools(f, set, worst);
            if (pclose(f) != 0)
                seconds = NAN;
        }
    }
    (void)unlink(path);
    return seconds;
}
