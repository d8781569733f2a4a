#!/bin/sh
# Line and branch coverage by storey after a run of the tests in the coverage flavour.  usage: tests/coverage.sh BUILD_DIR
# gcov counts each branch that the compiler knows; "taken" are those that were gone both ways.
set -u
build=$1
printf '%-10s %8s %8s %9s %8s\n' storey lines covered branches taken
for storey in base material model criteria study present cli; do
    for o in "$build"/src/$storey/*.gcda; do
        [ -e "$o" ] && gcov -b -n -o "$(dirname "$o")" "$o" 2>/dev/null
    done | awk -v storey="$storey" '
        /^File / { mine = index($0, "src/" storey "/") && $0 ~ /\.c.$/ }
        mine && /^Lines executed:/ { split($0, a, /[:%]| of /); lines += $NF; hit += a[2] / 100 * $NF }
        mine && /^Taken at least once:/ { split($0, a, /[:%]| of /); branches += $NF; taken += a[2] / 100 * $NF; mine = 0 }
        END { if (lines) printf "%-10s %8d %7.1f%% %9d %7.1f%%\n", storey, lines, 100 * hit / lines, branches, 100 * taken / branches }'
done
