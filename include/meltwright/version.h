/* SPDX-License-Identifier: GPL-3.0-or-later
 * The one place where the version stands; the Makefile, the .pc file and --version read it here. */
#ifndef MELTWRIGHT_VERSION_H
#define MELTWRIGHT_VERSION_H

#define MW_VERSION "0.1.0"

/* Version of the library that was linked, e.g. "0.1.0". Static storage. */
const char *mw_version(void);

#endif
