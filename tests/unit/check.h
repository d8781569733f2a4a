/* SPDX-License-Identifier: GPL-3.0-or-later
 * Shared by the unit tests: comparisons that print got, want and how much of the bound was used. */
#ifndef MELTWRIGHT_TESTS_CHECK_H
#define MELTWRIGHT_TESTS_CHECK_H

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <math.h>
#include <stdio.h>

/* |got - want| <= bound, NaN never passes. */
#define CHECK_NEAR(got, want, bound)                                                                                   \
    do {                                                                                                               \
        const double got_ = (got), want_ = (want), bound_ = (bound);                                                   \
        if (!(fabs(got_ - want_) <= bound_))                                                                           \
            fail_msg("%s: got %.17g, want %.17g, error/bound %.3g", #got, got_, want_, fabs(got_ - want_) / bound_);   \
    } while (0)

/* Relative form. */
#define CHECK_REL(got, want, bound)                                                                                    \
    do {                                                                                                               \
        const double reference_ = (want);                                                                              \
        CHECK_NEAR(got, reference_, (bound) * fabs(reference_));                                                       \
    } while (0)

#endif
