#!/bin/sh
# Every command of the README's blocks marked "sh" runs and ends with 0, in an empty folder, as a newcomer would type it.
# Blocks marked "make" are only looked up: their targets must exist.
set -u
program=$(realpath "$2") root=$PWD
scratch=$(mktemp -d)
trap 'rm -rf "$scratch"' EXIT
PATH=$(dirname "$program"):$PATH
export PATH
awk '/^```sh$/ {on = 1; next} /^```/ {on = 0} on' README.md >"$scratch/commands"
cd "$scratch" || exit 1
ln -s "$root/tests" tests # examples name files of the source tree
n=0
while IFS= read -r line; do
    case $line in '' | '#'*) continue ;; esac
    n=$((n + 1))
    if sh -c "$line" >out 2>err </dev/null; then
        echo "ok $line"
    else
        echo "not ok $line: $(head -n 2 err)"
    fi
done <commands
[ "$n" -ge 5 ] || echo "not ok only $n commands found in README.md"
for t in $(awk '/^```make$/ {on = 1; next} /^```/ {on = 0} on && $1 == "make" {print $2}' "$root/README.md"); do
    grep -q "^$t:" "$root/Makefile" && echo "ok make $t is there" || echo "not ok make $t is not in the Makefile"
done
