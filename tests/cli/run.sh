#!/bin/sh
# Drives the program as a person would.  usage: tests/cli/run.sh PROGRAM
# A case: expect NAME EXIT_CODE OUT ERR -- ARGUMENTS...   OUT and ERR are what must be found (basic regular expressions, one a line), or "-" for
# an empty stream, or "" when it does not matter. Standard error must always be at most one line a complaint: no case may leave a backtrace.
set -u
program=$(realpath "$1")
here=$PWD/tests/cli
root=$PWD
scratch=$(mktemp -d)
trap 'chmod -R u+w "$scratch" 2>/dev/null; rm -rf "$scratch"' EXIT
cd "$scratch" || exit 1
LC_ALL=C
export LC_ALL program root scratch
PATH=$(dirname "$program"):$PATH
passed=0 failed=0

pass() { passed=$((passed + 1)); echo "ok $1"; }
fail() { failed=$((failed + 1)); echo "not ok $1: $2"; sed 's/^/    out: /' out | head -n 5; sed 's/^/    err: /' err | head -n 5; }

found() { # FILE PATTERNS
    [ "$2" = "-" ] && { [ ! -s "$1" ]; return; }
    printf '%s\n' "$2" | while IFS= read -r p; do
        [ -z "$p" ] || grep -q -e "$p" "$1" || exit 1
    done
}

judge() { # NAME WANTED_RC RC OUT ERR
    if [ "$3" -ne "$2" ]; then fail "$1" "exit $3, not $2"
    elif ! found out "$4"; then fail "$1" "standard output lacks '$4'"
    elif ! found err "$5"; then fail "$1" "standard error lacks '$5'"
    else pass "$1"; fi
}

expect() {
    name=$1 want=$2 o=$3 e=$4
    shift 5
    "$program" "$@" >out 2>err </dev/null
    judge "$name" "$want" $? "$o" "$e"
}

# Misuse and bad input: nothing on standard output, exactly one line on standard error.
refuse() { # NAME RC ERR -- ARGUMENTS
    name=$1 want=$2 e=$3
    shift 4
    "$program" "$@" >out 2>err </dev/null
    rc=$?
    if [ "$(wc -l <err)" -ne 1 ]; then fail "$name" "not one line on standard error"
    else judge "$name" "$want" $rc - "$e"; fi
}

shell() { # NAME RC OUT ERR COMMAND
    sh -c "$5" >out 2>err </dev/null
    judge "$1" "$2" $? "$3" "$4"
}

for f in "$here"/cases/*.sh; do
    . "$f"
done
echo "$passed passed, $failed failed"
[ "$failed" -eq 0 ]
