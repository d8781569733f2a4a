#!/bin/sh
# Runs every test of a build and closes with "N passed, N failed".  usage: tests/run.sh BUILD_DIR PROGRAM
# A unit test counts its cases through cmocka; a check in tests/checks prints "ok NAME" or "not ok NAME" a case.
set -u
build=$1 program=$2
passed=0 failed=0
log=$build/test.log
LSAN_OPTIONS=suppressions=$PWD/tests/lsan.supp:print_suppressions=0
export LSAN_OPTIONS LC_ALL=C CC="${CC:-cc}"

count() { # passed, failed
    passed=$((passed + $1))
    failed=$((failed + $2))
}

for t in "$build"/tests/unit/test_*; do
    case $t in *.o | *.d | *.gcno | *.gcda) continue ;; esac
    name=$(basename "$t")
    "$t" >"$log" 2>&1
    rc=$?
    good=$(grep -c '^\[       OK \]' "$log")
    bad=$(grep -c '^\[  FAILED  \] [a-z]' "$log")
    # The closing list repeats the failed names; a crash leaves none at all.
    bad=$(( (bad + 1) / 2 ))
    [ $rc -ne 0 ] && [ "$bad" -eq 0 ] && bad=1
    if [ $rc -ne 0 ]; then
        echo "FAILED $name (exit $rc):"
        grep -v '^\[       OK \]\|^\[ RUN' "$log" | tail -n 40
    elif [ "$good" -eq 0 ]; then
        echo "FAILED $name: no case ran"
        bad=1
    else
        printf '%-32s %4d cases\n' "$name" "$good"
    fi
    count "$good" "$bad"
done

for c in tests/checks/*.sh; do
    name=$(basename "$c")
    sh "$c" "$build" "$program" >"$log" 2>&1
    rc=$?
    good=$(grep -c '^ok ' "$log")
    bad=$(grep -c '^not ok ' "$log")
    [ $rc -ne 0 ] && [ "$bad" -eq 0 ] && bad=1
    if [ "$bad" -ne 0 ] || [ "$good" -eq 0 ]; then
        echo "FAILED $name (exit $rc):"
        grep -v '^ok ' "$log" | tail -n 60
        [ "$bad" -ne 0 ] || bad=1
    else
        printf '%-32s %4d cases\n' "$name" "$good"
    fi
    count "$good" "$bad"
done

echo "$passed passed, $failed failed"
[ "$failed" -eq 0 ]
