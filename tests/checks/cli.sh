#!/bin/sh
# The command line, case by case.
set -u
out=$(sh tests/cli/run.sh "$2")
rc=$?
printf '%s\n' "$out" | grep -v '^ok '
# The runner closes with "N passed, N failed"; one line a passed case is what the caller counts.
n=$(printf '%s\n' "$out" | sed -n 's/^\([0-9]*\) passed, [0-9]* failed$/\1/p')
f=$(printf '%s\n' "$out" | sed -n 's/^[0-9]* passed, \([0-9]*\) failed$/\1/p')
i=0
while [ "$i" -lt "${n:-0}" ]; do i=$((i + 1)); echo "ok case $i"; done
i=0
while [ "$i" -lt "${f:-0}" ]; do i=$((i + 1)); echo "not ok case"; done
exit $rc
