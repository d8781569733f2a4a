/* SPDX-License-Identifier: GPL-3.0-or-later
 * Prints how far meltwright is from published measurements (tests/data/measured, sources there). Run from the repository root;
 * the argument is where the parity plot goes. */
#include <stdlib.h>

#include "meltwright/version.h"
#include "validate.h"

void stop_on(mw_status status, const mw_error *err)
{
    if (status >= 0)
        return;
    (void)fprintf(stderr, "validate: %s\n", err->text);
    exit(1);
}

mw_alloy *find_card_if_any(const char *name)
{
    static const char *const folder[] = {"alloys"};
    mw_alloy *alloy = NULL;
    (void)mw_alloy_find(name, folder, 1, &alloy, NULL);
    return alloy;
}

mw_alloy *find_card(const char *name)
{
    static const char *const folder[] = {"alloys"};
    mw_alloy *alloy;
    mw_error err;
    stop_on(mw_alloy_find(name, folder, 1, &alloy, &err), &err);
    return alloy;
}

int main(int argc, char **argv)
{
    (void)printf("meltwright %s against published measurements\n\n", mw_version());
    validate_tracks(argc > 1 ? argv[1] : NULL);
    validate_cavity();
    validate_contest();
    validate_repeats();
    validate_slopes();
    validate_cubes();
    validate_balling();
    return fflush(stdout) != 0;
}
